package main

import (
	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) takeoff() *cobra.Command {
	return &cobra.Command{
		Use:   "takeoff [PLAN…]",
		Short: "quantities that plans take",
		Long: `Counts what the named plans take, or all plans of the workspace: devices, cables
with their allowance for cutting, a connector for each field-cut end, adapters,
fuses, conductors, consumables and extras. What exists, or somebody else brings,
is left out; so are cancelled jobs.`,
		Example: "  driploop takeoff quay-lane eel-van --as csv",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, page, err := c.layout("text", "json", "csv", "markdown", "xlsx")
			if err != nil {
				return err
			}
			firm, done, err := c.workspace(cmd.Context())
			if err != nil {
				return err
			}
			defer done()
			plans, _, err := c.plans(firm, args, cmd.ArgsLenAtDash())
			if err != nil {
				return err
			}
			if plans == nil {
				plans = firm.PlanFiles
			}
			t := c.takeOff(firm, plans)
			var b []byte
			if form == "xlsx" {
				b, err = c.bookOf(cmd.Context(), firm, plans, "Takeoff", t.Sheets())
			} else {
				b, err = takeoffAs(t, form, page)
			}
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
}

func takeoffAs(t *show.Takeoff, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return t.JSON()
	case "csv":
		return t.CSV()
	case "markdown":
		return t.Markdown(), nil
	}
	return t.Text(page)
}

// takeOff counts the plans. A plan that cannot be read leaves a gap and the others
// are counted.
func (c *Command) takeOff(firm *rules.Firm, plans []source.Entry) *show.Takeoff {
	out := &show.Takeoff{Feet: firm.Workspace.Lengths.V == "ft", From: firm.Origin(), Today: firm.Today.String(), Overrides: firm.Overrides()}
	var all []bom.PlanTakeoff
	for i, e := range plans {
		c.told("reading plans", i, len(plans))
		cs, broken := firm.Case(e)
		job := bom.JobOf(e.Path)
		switch {
		case broken:
			out.Gaps = append(out.Gaps, show.JobGap{Job: job, Gap: bom.Gap{On: "job", Says: "the plan file cannot be read whole; nothing of it is counted", At: cs.JobAt()}})
			c.held = true
			continue
		case cs.Stage() == "cancelled":
			continue
		}
		t := cs.Graph.Takeoff(&firm.Workspace.House.House)
		all = append(all, bom.PlanTakeoff{Job: job, Takeoff: t})
		for _, g := range t.Gaps {
			out.Gaps = append(out.Gaps, show.JobGap{Job: job, Gap: g})
		}
	}
	out.Rows = bom.Totals(all)
	return out
}
