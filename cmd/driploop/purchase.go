package main

import (
	"context"
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) purchase() *cobra.Command {
	var until, read string
	var yes bool
	cmd := &cobra.Command{
		Use:   "purchase [PLAN…]",
		Short: "what to buy from whom",
		Long: `Says what to buy for what shelves and orders leave short over all open jobs, and
for the reorder levels: first so that as few jobs are late as the offers allow, then
at the least cost with freight. Jobs that are needed later than buy_ahead_days from
now are listed and not bought for. With plans, only what these lack is bought.
A substitute that a part lists in instead is taken where it makes a job less late or
the purchase cheaper, its crew has the tools, and its plan has no new finding with
it; the order then goes by a change of the plan that is to be made by hand.
--read FILE.xlsx takes the workbook back in which the clerk has filled in what was
ordered: each order sheet with an order number becomes stock/orders/NUMBER.toml.
Where the workspace is no longer what the workbook was made from, it says what is
other, and writes only with --yes.`,
		Example: "  driploop purchase --until 2026-12-31",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "csv", "xlsx")
			if err != nil {
				return err
			}
			switch {
			case read != "":
				return c.orderRead(cmd, args, until, read, yes)
			case yes:
				return errors.New("--yes belongs to --read")
			}
			return c.buying(cmd, args, until, func(b *show.OrderBook, firm *rules.Firm, page show.Page) ([]byte, error) {
				switch form {
				case "json":
					return b.JSON()
				case "csv":
					return b.CSV()
				case "xlsx":
					return c.bookOf(cmd.Context(), firm, firm.PlanFiles, "Purchase", b.Sheets())
				}
				return b.Text(page)
			})
		},
	}
	cmd.Flags().StringVar(&read, "read", "", "take the filled workbook `FILE` back as orders")
	cmd.Flags().BoolVar(&yes, "yes", false, "with --read: write though the workspace has changed since")
	cmd.Flags().StringVar(&until, "until", "", "buy for jobs that are needed until `DAY` (default: buy_ahead_days from now)")
	return cmd
}

func (c *Command) cuts() *cobra.Command {
	var until string
	cmd := &cobra.Command{
		Use:   "cuts [PLAN…]",
		Short: "which piece from which reel",
		Long: `Plans, part by part and over all open jobs, from which reel, remnant or new reel
each piece of cable, wire or conductor is cut, and what is left of it. Lengths have
their cut allowance. With plans, the same plan is made and only their pieces and
reels are shown.`,
		Example: "  driploop cuts quay-lane",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "csv")
			if err != nil {
				return err
			}
			return c.buying(cmd, args, until, func(b *show.OrderBook, _ *rules.Firm, page show.Page) ([]byte, error) {
				cuts := &show.Cuts{Buying: b.Buying}
				switch form {
				case "json":
					return cuts.JSON()
				case "csv":
					return cuts.CSV()
				}
				return cuts.Text(page)
			})
		},
	}
	cmd.Flags().StringVar(&until, "until", "", "plan for jobs that are needed until `DAY` (default: buy_ahead_days from now)")
	return cmd
}

// buying makes the purchase that a command shows. With plans, purchase buys for them
// alone; cuts are always planned for all.
func (c *Command) buying(cmd *cobra.Command, args []string, until string, form func(*show.OrderBook, *rules.Firm, show.Page) ([]byte, error)) error {
	page, err := c.page()
	if err != nil {
		return err
	}
	terms := bom.Terms{}
	if until != "" {
		if terms.Until, err = unit.ParseDate(until); err != nil {
			return fmt.Errorf("--until: %w", err)
		}
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
	jobs := jobsOf(plans)
	if cmd.Name() == "purchase" {
		terms.Jobs = jobs
	}
	b, err := c.buy(cmd.Context(), firm, terms)
	if err != nil {
		return err
	}
	b.Jobs = jobs
	out, err := form(b, firm, page)
	if err != nil {
		return failure{err}
	}
	return c.emit(out)
}

// jobsOf are the jobs of plans; without plans it is nil: all.
func jobsOf(plans []source.Entry) map[string]bool {
	if plans == nil {
		return nil
	}
	jobs := map[string]bool{}
	for _, e := range plans {
		jobs[bom.JobOf(e.Path)] = true
	}
	return jobs
}

// buy shares the stock out and says what to buy. Plans that cannot be read whole
// take nothing and are named; the status tells of them.
func (c *Command) buy(ctx context.Context, firm *rules.Firm, terms bom.Terms) (*show.OrderBook, error) {
	d, err := firm.Demands(ctx)
	if err != nil {
		return nil, failure{err}
	}
	w := &firm.Workspace
	b := &show.Buying{Origin: firm.Origin(), Currency: w.Currency.V, Feet: w.Lengths.V == "ft"}
	for _, e := range d.Broken {
		b.Broken = append(b.Broken, e.Path)
		c.held = true
	}
	for _, x := range d.All {
		if !x.Claims() {
			continue
		}
		for _, g := range x.Gaps {
			b.Gaps = append(b.Gaps, show.JobGap{Job: x.Job, Gap: g})
		}
	}
	p, a := firm.Purchase(d, terms)
	b.Purchase = p
	return &show.OrderBook{Buying: b, Allocation: a, Premises: &w.Premises, Offers: firm.Offers}, nil
}
