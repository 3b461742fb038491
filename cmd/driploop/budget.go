package main

import (
	"errors"

	"github.com/spf13/cobra"

	"driploop/cmd/driploop/show"
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
		Example: "  driploop budget quay-lane --terms",
		Args:    cobra.ExactArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			form, page, err := c.layout("text", "json", "csv", "markdown")
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
			b, err := budgetAs(&show.Budget{Budget: cs.Budget(), Terms: terms}, form, page)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	cmd.Flags().BoolVar(&terms, "terms", false, "show every addend")
	return cmd
}

func budgetAs(b *show.Budget, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return b.JSON()
	case "csv":
		return b.CSV()
	case "markdown":
		return b.Markdown(), nil
	}
	return b.Text(page)
}
