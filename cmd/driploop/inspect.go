package main

import (
	"github.com/spf13/cobra"

	"driploop/cmd/driploop/show"
	"driploop/rules"
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
The status is 1 where a hold stands. In sarif and annotations the names of files are
relative to the top of the repository that holds the workspace.`,
		Example: "  driploop inspect quay-lane\n  driploop inspect --at HEAD --as json",
		RunE: func(cmd *cobra.Command, args []string) error {
			form, page, err := c.layout("text", "json", "sarif", "markdown", "annotations", "junit")
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
			defer c.keepSmall(len(firm.PlanFiles))()
			res, err := firm.Inspect(cmd.Context(), plans, changed...)
			if err != nil {
				return failure{err}
			}
			c.held = res.Holds > 0
			if form == "text" && staged && c.shared.quiet && !c.held {
				return nil // a commit that may be made is made without a word
			}
			b, err := c.inspectAs(res, form, page)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	cmd.Flags().BoolVar(&staged, "staged", false, "the next commit: what is staged, and of that what differs from HEAD")
	cmd.Flags().BoolVar(&shelf, "shelf", true, "also run the rules that need the shelf, and so all plans")
	return cmd
}

func (c *Command) inspectAs(res *rules.Result, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return show.InspectJSON(res, version)
	case "sarif":
		return show.InspectSARIF(res, version, c.belowTop())
	case "markdown":
		return show.InspectMarkdown(res, c.shared.quiet), nil
	case "annotations":
		return show.InspectAnnotations(res, c.belowTop(), c.shared.quiet), nil
	case "junit":
		return show.InspectJUnit(res)
	}
	return show.InspectText(res, page, c.shared.quiet), nil
}
