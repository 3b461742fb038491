package main

import (
	"context"
	"errors"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) stock() *cobra.Command {
	var count counting
	cmd := &cobra.Command{
		Use:   "stock [PLAN…]",
		Short: "what is on hand, on its way, claimed and free",
		Long: `Adds up the stock sheets and orders as of today and shares them out over all open
jobs: for each part and shelf what lies there, what is on its way, what is kept for
jobs and what is free, and what each job is short of and who holds it. With plans,
only the parts that they claim are shown. The workbook has a sheet to count on for
each shelf that something lies on.
--sheet FILE writes only these, as .xlsx or as one table in .csv: blank is for what
was not counted, 0 for what is not there. --read FILE takes the filled sheet back as
a new file stock/counts/DAY-SHELF-WHO.toml for each shelf, and says how it differs
from the book. A count that is as many bags as there should be pieces needs --yes.`,
		Example: "  driploop stock --as json",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "csv", "xlsx")
			if err != nil {
				return err
			}
			sheet, err := count.refuse(c, args)
			if err != nil {
				return err
			}
			if count.blind && form != "xlsx" && sheet == "" {
				return errors.New("--blind is about the sheets to count on; add --sheet FILE, or --as xlsx")
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
			plans, _, err := c.plans(firm, args, cmd.ArgsLenAtDash())
			if err != nil {
				return err
			}
			if count.read != "" {
				return c.countRead(firm, &count, sheet, page)
			}
			a, broken, err := c.allocate(cmd.Context(), firm)
			if err != nil {
				return err
			}
			s := &show.Stock{Allocation: a, Look: firm.Catalog.Look, Origin: firm.Origin(), Today: firm.Today.String(), Feet: firm.Workspace.Lengths.V == "ft", Broken: broken}
			if count.sheet != "" {
				return c.countSheet(cmd.Context(), firm, s, &count, sheet)
			}
			if plans != nil {
				s.Jobs = []string{}
			}
			for _, e := range plans {
				s.Jobs = append(s.Jobs, bom.JobOf(e.Path))
			}
			var b []byte
			if form == "xlsx" {
				b, err = c.bookOf(cmd.Context(), firm, firm.PlanFiles, "Stock", stockSheets(s, firm, count.blind))
			} else {
				b, err = stockAs(s, form, page)
			}
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	f := cmd.Flags()
	f.BoolVar(&count.blind, "blind", false, "leave what the book says out of the sheets to count on")
	f.StringVar(&count.sheet, "sheet", "", "write a sheet to count on into the new `FILE`, .csv or .xlsx")
	f.StringVar(&count.read, "read", "", "take the filled count sheet `FILE` back")
	f.StringVar(&count.where, "where", "", "with --sheet or --read: this `SHELF` only")
	f.StringVar(&count.by, "by", "", "with --read: `INITIALS` of who counted, where the sheet does not say it")
	f.BoolVar(&count.yes, "yes", false, "with --read: counts that look like bags for pieces are right")
	return cmd
}

// stockSheets are the stock and, where no plans are named, the sheets to count on.
func stockSheets(s *show.Stock, firm *rules.Firm, blind bool) []bom.Sheet {
	out := s.Sheets()
	if s.Jobs != nil {
		return out
	}
	for _, shelf := range firm.Workspace.Premises.ShelfNames() {
		out = append(out, s.CountSheets(shelf, blind)...)
	}
	return out
}

func stockAs(s *show.Stock, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return s.JSON()
	case "csv":
		return s.CSV()
	}
	return s.Text(page)
}

// allocate shares the stock out over all plans of the workspace. Plans that cannot
// be read whole claim nothing and are named; the status tells of them.
func (c *Command) allocate(ctx context.Context, firm *rules.Firm) (*bom.Allocation, []string, error) {
	d, err := firm.Demands(ctx)
	if err != nil {
		return nil, nil, failure{err}
	}
	var broken []string
	for _, e := range d.Broken {
		broken = append(broken, e.Path)
		c.held = true
	}
	return firm.Allocate(d), broken, nil
}
