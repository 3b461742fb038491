package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/spf13/cobra"

	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
	"driploop/rules"
	"driploop/rules/limits"
)

func (c *Command) basis() *cobra.Command {
	schema := false
	cmd := &cobra.Command{
		Use:   "basis [RULE]",
		Short: "what a rule, profile, code or file format means, and its source",
		Long: `Explains a rule, a limit profile, a grounding code, a kind of part (antenna, cable, …)
or a file (plan, workspace, offer, stock, order, profile); the name of an area lists
its rules. Without an argument it lists everything. It works in any folder; inside
a workspace it also knows the workspace's own profiles and what it overrides.

--schema prints a JSON Schema (draft-07) of the files, for an editor: of plan,
workspace, catalog, offer, stock, order or profile; without a word of all of
them, each under its name in "definitions". Write it beside the plans, and point
the editor's TOML extension at it, or begin a file with a line like
#:schema ../schema/plan.json. What only other files or sums can tell is not in
it: inspect stays the judge.
`,
		Example: "  driploop basis ground/arrestor\n  driploop basis --schema plan --out plan.json",
		Args:    cobra.MaximumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if schema {
				return c.schema(args)
			}
			form, page, err := c.layout("text", "json", "markdown")
			if err != nil {
				return err
			}
			firm, done, err := c.workspaceIfAny(cmd.Context(), cmd.Flags().Changed("root"))
			if err != nil {
				return err
			}
			defer done()
			topic, err := topicOf(basisOf(firm), args)
			if err != nil {
				return err
			}
			b, err := topicAs(topic, form, page)
			if err != nil {
				return failure{err}
			}
			return c.emit(b)
		},
	}
	cmd.Flags().BoolVar(&schema, "schema", false, "a JSON Schema of the files, for an editor")
	return cmd
}

// schema prints the schema of one sort of file, or of all.
func (c *Command) schema(args []string) error {
	if _, err := c.form("json"); err != nil {
		return err
	}
	name := ""
	if len(args) == 1 {
		name = args[0]
	}
	s := show.SchemaOf(name)
	if s == nil || len(args) == 1 && name == "" {
		return fmt.Errorf("there is no schema of %s; there is one of %s", source.Quote(name), joinWords(show.SchemaNames()))
	}
	b, err := s.JSON()
	if err != nil {
		return failure{err}
	}
	return c.emit(b)
}

// workspaceIfAny reads the workspace. Where the call names none and the folder is
// none there is no firm, which is no error.
func (c *Command) workspaceIfAny(ctx context.Context, named bool) (*rules.Firm, func(), error) {
	if !named && c.shared.at+c.shared.limitsFrom+c.shared.stockFrom == "" {
		_, err := os.Lstat(filepath.Join(c.shared.root, rules.WorkspaceFile))
		if errors.Is(err, fs.ErrNotExist) {
			return nil, func() {}, nil
		}
	}
	return c.workspace(ctx)
}

// basisOf is what can be explained: the tool's own, and what the firm adds.
func basisOf(firm *rules.Firm) *show.Basis {
	if firm == nil {
		return &show.Basis{Limits: limits.Builtin()}
	}
	return &show.Basis{Limits: firm.Limits, Override: firm.Override}
}

func topicOf(b *show.Basis, args []string) (*show.Topic, error) {
	if len(args) == 0 {
		return b.Index(), nil
	}
	if t := b.Find(args[0]); t != nil {
		return t, nil
	}
	if near := source.Nearest(args[0], b.Words()); near != "" {
		return nil, fmt.Errorf("there is no rule, profile, code, kind or file %s; did you mean %s?", source.Quote(args[0]), near)
	}
	return nil, fmt.Errorf("there is no rule, profile, code, kind or file %s; basis without a word lists them", source.Quote(args[0]))
}

func topicAs(t *show.Topic, form string, page show.Page) ([]byte, error) {
	switch form {
	case "json":
		return t.JSON()
	case "markdown":
		return t.Page.Markdown(), nil
	}
	return t.Page.Text(page)
}
