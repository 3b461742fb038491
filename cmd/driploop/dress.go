package main

import (
	"bytes"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"strings"

	"github.com/google/renameio/v2"
	"github.com/spf13/cobra"

	"driploop/catalog/source"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

func (c *Command) dress() *cobra.Command {
	list := false
	cmd := &cobra.Command{
		Use:   "dress [PLAN…|FILE…] [-- FILE…]",
		Short: "lay files out as all are, without losing a comment",
		Long: `Lays out the named plans and other TOML files of the workspace, or all of them:
tables and keys in the order of basis, one blank line between tables of different
names, lengths and connectors in their usual spelling. Lines are moved whole;
comments stay with what they describe, and units are never converted. The names of
the files that were changed are printed.

A file that is no TOML, or a link, is left as it is and named; the others are done,
and the status is 1. Each file is written whole or not at all, after it was proved
that it means the same and holds every comment; where that fails the status is 3.
Behind -- stand file names as a hook passes them; what is no file of the workspace
is passed over there. The status says nothing of how many were changed.`,
		Example: "  driploop dress --list",
		RunE: func(cmd *cobra.Command, args []string) error {
			if _, err := c.form("text"); err != nil {
				return err
			}
			if c.shared.at != "" {
				return errors.New("--at: dress writes files, and a revision cannot be written; leave it out")
			}
			firm, done, err := c.workspace(cmd.Context())
			if err != nil {
				return err
			}
			defer done()
			files, err := c.files(firm, args, cmd.ArgsLenAtDash())
			if err != nil {
				return err
			}
			return c.dressAll(firm.Tree, files, list)
		},
	}
	cmd.Flags().BoolVar(&list, "list", false, "only print the names of the files that would be changed")
	return cmd
}

// files are the files of the workspace that the arguments name, or all of them.
func (c *Command) files(firm *rules.Firm, args []string, dash int) ([]rules.File, error) {
	all, err := firm.Files()
	if err != nil || len(args) == 0 && dash < 0 {
		return all, err
	}
	if dash < 0 {
		dash = len(args)
	}
	chosen := map[string]bool{}
	for i, a := range args {
		path, err := c.inside(a)
		switch {
		case i >= dash && err != nil:
			return nil, err
		case i >= dash || err == nil && has(all, path):
			chosen[path] = true
		default:
			e, err := c.plan(firm, a)
			if err != nil {
				return nil, fmt.Errorf("%w, and no other file of that name", err)
			}
			chosen[e.Path] = true
		}
	}
	var out []rules.File
	for _, f := range all {
		if chosen[f.Path] {
			out = append(out, f)
		}
	}
	return out, nil
}

func has(files []rules.File, path string) bool {
	for _, f := range files {
		if f.Path == path {
			return true
		}
	}
	return false
}

// dressAll lays the files out one after the other and prints the names of those that
// changed, or would. What goes wrong with one keeps none of the others.
func (c *Command) dressAll(tree source.Tree, files []rules.File, list bool) error {
	var names strings.Builder
	failed := 0
	for _, f := range files {
		before, after, err := dressed(tree, f)
		if err == nil && !bytes.Equal(before, after) {
			if !list {
				err = c.replace(tree, f.Entry, before, after)
			}
			if err == nil {
				fmt.Fprintf(&names, "%s\n", show.Clean(f.Path))
			}
		}
		if err == nil {
			continue
		}
		c.say("%s is left as it is: %s", f.Path, err)
		if errors.As(err, new(failure)) {
			failed++
		} else {
			c.held = true
		}
	}
	if err := c.emit([]byte(names.String())); err != nil {
		return err
	}
	if failed > 0 {
		return failure{fmt.Errorf("%d of %d files could not be dressed", failed, len(files))}
	}
	return nil
}

// dressed is a file as it is and as it would be laid out. An error that is no
// failure is the file's own: it cannot be read.
func dressed(tree source.Tree, f rules.File) (before, after []byte, err error) {
	if f.Skip != "" {
		return nil, nil, errors.New("it " + f.Skip)
	}
	if before, err = tree.Read(f.Entry); err != nil {
		return nil, nil, err
	}
	after, problems, err := source.Dress(f.Path, before, f.Read)
	switch {
	case err != nil:
		return nil, nil, failure{fmt.Errorf("it cannot be proved to stay the same: %w", err)}
	case len(problems) > 0:
		return nil, nil, fmt.Errorf("line %d: %s", problems[0].At.Line(), problems[0].Says)
	}
	return before, after, nil
}

// replace writes a file anew, whole or not at all, if it still is what was read and
// where it was read. Its mode stays.
func (c *Command) replace(tree source.Tree, e source.Entry, before, after []byte) error {
	root, err := os.OpenRoot(c.shared.root)
	if err != nil {
		return failure{cause(err)}
	}
	defer root.Close()
	info, err := root.Lstat(e.Path)
	switch {
	case err != nil:
		return failure{cause(err)}
	case !info.Mode().IsRegular():
		return failure{errors.New("it is no plain file any more")}
	case info.Mode()&0o200 == 0:
		return failure{errors.New("it is read-only")}
	}
	if now, err := tree.Read(e); err != nil || !bytes.Equal(now, before) {
		return failure{errors.New("somebody else changed it meanwhile")}
	}
	mode := info.Mode() & fs.ModePerm
	if err := renameio.WriteFile(e.Path, after, mode, renameio.WithRoot(root)); err != nil {
		return failure{fmt.Errorf("writing it: %w", cause(err))}
	}
	return nil
}
