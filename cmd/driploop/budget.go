package main

import (
	"errors"
	"fmt"

	"github.com/spf13/cobra"

	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) budget() *cobra.Command {
	terms := false
	cmd := &cobra.Command{
		Use:   "budget PLAN",
		Short: "the radio chain of a plan, stage by stage",
		Long: `Lays the radio chain of one plan open: for each planned band and direction the
lines with their loss, the stages with gain, noise figure and level, the gain that
runs and what binds it, EIRP, and each limit with its margin; for each area what
arrives there. --terms shows every addend.`,
		Args: cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json", "csv", "markdown")
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
			e, err := c.plan(firm, args[0])
			if err != nil {
				return err
			}
			cs, broken := firm.Case(e)
			if broken {
				return errors.New(e.Path + " cannot be read whole; inspect says why")
			}
			b, err := budgetAs(cs.Budget(), form, page, terms)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	cmd.Flags().BoolVar(&terms, "terms", false, "show every addend")
	return cmd
}

func budgetAs(b *rules.Budget, form string, page show.Page, terms bool) ([]byte, error) {
	switch form {
	case "json":
		return show.BudgetJSON(b)
	case "text":
		return show.BudgetText(b, page, terms)
	}
	return nil, fmt.Errorf("the form %s is not made yet", form)
}
