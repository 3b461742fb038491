package main

import (
	"context"
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) pick() *cobra.Command {
	cmd := &cobra.Command{
		Use:   "pick PLAN",
		Short: "what a crew takes from the shelves for a job",
		Long: `Lists, in the order of walking, the tools, bins and reels for one job, what is cut
from each reel, what is not all there, and two labels for each line. What other
jobs hold first is not touched.`,
		Args: cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "html")
			if err != nil {
				return err
			}
			page, err := c.page()
			if err != nil {
				return err
			}
			firm, done, err := c.workspace(cmd.Context())
			if err != nil {
				return err
			}
			defer done()
			p, err := c.pickFor(cmd.Context(), firm, args[0])
			if err != nil {
				return err
			}
			b, err := pickAs(&show.Pick{Pick: p, Today: firm.Today.String(), At: firm.Tree.Name(), Feet: firm.Workspace.Lengths.V == "ft"}, form, page)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	return cmd
}

func pickAs(p *show.Pick, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return p.JSON()
	case "html":
		return p.HTML()
	}
	return p.Text(page)
}

// pickFor makes the pick list of the plan that an argument names.
func (c *Command) pickFor(ctx context.Context, firm *rules.Firm, arg string) (*bom.Pick, error) {
	e, err := c.plan(firm, arg)
	if err != nil {
		return nil, err
	}
	cs, broken := firm.Case(e)
	if broken {
		return nil, errors.New(e.Path + " cannot be read whole; inspect says why")
	}
	d, err := firm.Demands(ctx)
	if err != nil {
		return nil, failure{err}
	}
	for _, b := range d.Broken {
		c.say("%s cannot be read whole: what it claims is not kept for it", b.Path)
	}
	demand := d.Find(bom.JobOf(e.Path))
	if !demand.Claims() {
		return nil, fmt.Errorf("%s is at stage %s; goods are picked for jobs at review or construction", demand.Job, demand.Stage)
	}
	return bom.PickFor(firm.Allocate(d), demand, cs.Graph), nil
}
