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
	var how issuing
	cmd := &cobra.Command{
		Use:   "pick PLAN",
		Short: "what a crew takes from the shelves for a job",
		Long: `Lists, in the order of walking, the tools, bins and reels for one job, what is cut
from each reel, what is not all there, and two labels for each line. What other
jobs hold first is not touched.
--issue books what lies ready as taken by writing stock/issue/JOB-1.toml, and
touches nothing else; a second issue needs --more. --read FILE books instead what a
filled sheet says was taken, and says how it differs from the list: the workbook
that --as xlsx writes, or a .csv with the columns what, tag or part, qty, where,
note. There what is taken (pieces, from a shelf), cut (a length, for the line under
where, waste included) or left (what is on the reel after it).`,
		Example: "  driploop pick quay-lane",
		Args:    cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			form, page, err := c.layout("text", "json", "xlsx", "html")
			if err != nil {
				return err
			}
			if err := how.refuse(&c.shared); err != nil {
				return err
			}
			sheet := ""
			if how.read != "" {
				if sheet, err = sheetForm("--read", how.read, "csv", "xlsx"); err != nil {
					return err
				}
			}
			firm, done, err := c.workspace(cmd.Context())
			if err != nil {
				return err
			}
			defer done()
			p, demand, err := c.pickFor(cmd.Context(), firm, args[0])
			if err != nil {
				return err
			}
			list := &show.Pick{Pick: p, Today: firm.Today.String(), Origin: firm.Origin(), Feet: firm.Workspace.Lengths.V == "ft"}
			if how.read != "" {
				return c.pickRead(cmd.Context(), firm, list, demand, how, sheet, page)
			}
			if how.do {
				return c.issue(cmd.Context(), firm, list, how, page)
			}
			var b []byte
			if form == "xlsx" {
				b, err = c.bookOf(cmd.Context(), firm, firm.PlanFiles, "Pick list for "+list.Job, list.Sheets())
			} else {
				b, err = pickAs(list, form, page)
			}
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	f := cmd.Flags()
	f.BoolVar(&how.do, "issue", false, "book what lies ready as taken")
	f.BoolVar(&how.more, "more", false, "with --issue or --read: issue to a job that was issued to before")
	f.StringVar(&how.by, "by", "", "with --issue or --read: `INITIALS` of who takes the goods")
	f.StringVar(&how.read, "read", "", "book what the filled sheet `FILE` says was taken")
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

// pickFor makes the pick list of the plan that an argument names, and finds what the
// job takes in all.
func (c *Command) pickFor(ctx context.Context, firm *rules.Firm, arg string) (*bom.Pick, *bom.Demand, error) {
	e, err := c.plan(firm, arg)
	if err != nil {
		return nil, nil, err
	}
	cs, broken := firm.Case(e)
	if broken {
		return nil, nil, errors.New(e.Path + " cannot be read whole; inspect says why")
	}
	d, err := firm.Demands(ctx)
	if err != nil {
		return nil, nil, failure{err}
	}
	for _, b := range d.Broken {
		c.say("%s cannot be read whole: what it claims is not kept for it", b.Path)
	}
	demand := d.Find(bom.JobOf(e.Path))
	if !demand.Claims() {
		return nil, nil, fmt.Errorf("%s is at stage %s; goods are picked for jobs at review or construction", demand.Job, demand.Stage)
	}
	return bom.PickFor(firm.Allocate(d), demand, cs.Graph), demand, nil
}
