package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/cmd/driploop/filled"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// orderRead takes a filled purchase workbook back, as a file for each order.
func (c *Command) orderRead(cmd *cobra.Command, args []string, until, file string, yes bool) error {
	if len(args) > 0 || until != "" {
		return errors.New("the workbook says what is ordered; plans and --until do not go with --read")
	}
	if err := c.writesItself("purchase --read"); err != nil {
		return err
	}
	form, err := sheetForm("--read", file, "xlsx")
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
	b, err := readFilled(file, form)
	if err != nil {
		return err
	}
	from, err := c.madeFrom(cmd.Context(), firm, nil)
	if err != nil {
		return failure{err}
	}
	moved, err := filled.Moved(b, from)
	if err != nil {
		return fmt.Errorf("reading %s: %w", file, err)
	}
	orders, wrong := filled.Orders(b, ground(firm, ""), firm.Offers, jobNames(firm))
	held := len(moved) > 0 && !yes
	if wrong == nil && !held {
		if err := c.writeOrders(firm, orders); err != nil {
			return err
		}
	}
	if wrong == nil || held {
		text, err := show.OrderedText(page, orders, moved)
		if err != nil {
			return failure{err}
		}
		if err := c.emit(text); err != nil {
			return err
		}
	}
	switch {
	case wrong != nil:
		return c.faulty(file, wrong)
	case held:
		return fmt.Errorf("the workspace is not what %s was made from, and nothing is written; look at what it says, then --yes writes it", file)
	}
	return nil
}

func jobNames(firm *rules.Firm) []string {
	var out []string
	for _, e := range firm.PlanFiles {
		out = append(out, bom.JobOf(e.Path))
	}
	return out
}

func (c *Command) writeOrders(firm *rules.Firm, orders []*show.Ordered) error {
	var sheets []newSheet
	for _, o := range orders {
		o.File = "stock/orders/" + o.PO + ".toml"
		sheets = append(sheets, newSheet{o.File, o.TOML()})
	}
	return c.writeSheets(firm, sheets)
}
