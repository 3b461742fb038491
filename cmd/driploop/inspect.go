package main

import (
	"github.com/spf13/cobra"

	"driploop/cmd/driploop/show"
)

func (c *Command) inspect() *cobra.Command {
	shelf, staged := true, false
	cmd := &cobra.Command{
		Use:   "inspect [PLAN…] [-- FILE…]",
		Short: "run the rules over plans",
		Long: `Runs the rules over the named plans, or over all plans of the workspace.
A PLAN is a job's ID or a file. Behind -- stand file names as a hook passes them:
a catalog, offer, stock or profile file means the plans it touches. With --staged
the next commit is looked at: what is staged is read, and the files that differ
from HEAD, also those that are gone, count as if they stood behind --.
The status is 1 where a hold stands.`,
		RunE: func(cmd *cobra.Command, args []string) error {
			form, err := c.form("text", "json")
			if err != nil {
				return err
			}
			page, err := c.page()
			if err != nil {
				return err
			}
			c.bare = !shelf
			look, err := c.lookAt(cmd.Context(), args, cmd.ArgsLenAtDash(), staged)
			if err != nil || look == nil {
				return err
			}
			defer look.done()
			firm, plans, changed := look.firm, look.plans, look.changed
			res, err := firm.Inspect(cmd.Context(), plans, changed...)
			if err != nil {
				return failure{err}
			}
			c.held = res.Holds > 0
			if form == "json" {
				b, err := show.InspectJSON(res, version)
				if err != nil {
					return failure{err}
				}
				return c.emit(b)
			}
			if staged && c.shared.quiet && !c.held {
				return nil // a commit that may be made is made without a word
			}
			return c.emit(show.InspectText(res, page, c.shared.quiet))
		},
	}
	cmd.Flags().BoolVar(&staged, "staged", false, "the next commit: what is staged, and of that what differs from HEAD")
	cmd.Flags().BoolVar(&shelf, "shelf", true, "also run the rules that need the shelf, and so all plans")
	return cmd
}
