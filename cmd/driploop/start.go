package main

import (
	"errors"
	"fmt"
	"os"
	"path"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/cmd/driploop/starter"
	"driploop/rules"
)

func (c *Command) start() *cobra.Command {
	like := ""
	cmd := &cobra.Command{
		Use:   "start [DIR | JOB]",
		Short: "a new workspace, or a new plan in one",
		Long: `Where no workspace is, start makes one: in DIR, or here. It writes driploop.toml,
the folders for plans, catalog, offers, stock and profiles with a commented
example in each, and .gitattributes. Files that are there already stay as they
are; a folder that has a driploop.toml is refused.

In a workspace, or with --root, start JOB makes the plan plans/JOB.toml; a file
name that ends in .toml says where else. --like says what it is a plan of:
building (a booster in a building, the usual), van (one in a vehicle) or router
(a router on PoE). The plan is made of generic parts, and every key has its
meaning beside it. What only a visit to the site can tell is commented out, and
is not assessed until somebody fills it in.

Nothing is written over, and a file is there whole or not at all.`,
		Example: `  driploop start saltmarsh
  driploop start --root saltmarsh quay-lane --like building`,
		Args: cobra.MaximumNArgs(1),
		RunE: func(cmd *cobra.Command, args []string) error {
			if err := c.writesItself("start"); err != nil {
				return err
			}
			_, err := os.Lstat(filepath.Join(c.shared.root, rules.WorkspaceFile))
			inWorkspace := err == nil
			switch {
			case inWorkspace && len(args) == 0:
				return fmt.Errorf("%s is a workspace already; start JOB makes a plan in it", c.shared.root)
			case inWorkspace || cmd.Flags().Changed("root"):
				if len(args) == 0 {
					return errors.New("--root names a workspace that is there; to make one: start DIR")
				}
				return c.startPlan(cmd, args[0], like)
			case like != "":
				return fmt.Errorf("%s is no workspace, and --like belongs to a plan in one; start without it makes the workspace", c.shared.root)
			}
			dir := "."
			if len(args) == 1 {
				dir = args[0]
			}
			return c.startWorkspace(dir)
		},
	}
	cmd.Flags().StringVar(&like, "like", "", "`SHAPE` of the plan, one of "+joinWords(starter.Likes()))
	return cmd
}

// writesItself refuses the shared flags that mean nothing to a command which writes
// files of its own.
func (c *Command) writesItself(name string) error {
	for _, f := range []struct{ name, value, why string }{
		{"--at", c.shared.at, "it writes into the folder, and a revision is not to be written"},
		{"--as", c.shared.as, "it has one form"},
		{"--out", c.shared.out, "it writes files of its own"},
	} {
		if f.value != "" {
			return fmt.Errorf("%s takes no %s: %s", name, f.name, f.why)
		}
	}
	return nil
}

// startWorkspace makes a workspace in a folder, which may be new.
func (c *Command) startWorkspace(dir string) error {
	if path.Ext(dir) == ".toml" {
		return fmt.Errorf("there is no workspace here for the plan %s; start without a file makes one", dir)
	}
	files, err := starter.Workspace()
	if err != nil {
		return failure{err}
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return failure{fmt.Errorf("making the folder: %w", err)}
	}
	w, err := openNew(dir)
	if err != nil {
		return err
	}
	defer w.close()
	if w.there(rules.WorkspaceFile) {
		return fmt.Errorf("%s is a workspace already", dir)
	}
	err = w.folder("plans")
	for _, f := range files {
		if err != nil {
			break
		}
		if w.there(f.Path) {
			c.tell("%s is there already and stays as it is", f.Path)
			continue
		}
		err = w.write(f.Path, f.Text)
	}
	return c.written(dir, w, err, "make a plan in it: driploop start --root "+dir+" JOB")
}

// startPlan makes a plan in the workspace of the call.
func (c *Command) startPlan(cmd *cobra.Command, arg, like string) error {
	if like == "" {
		like = starter.Likes()[0]
	}
	firm, done, err := c.workspace(cmd.Context())
	if err != nil {
		return err
	}
	defer done()
	file, err := c.newPlan(firm, arg)
	if err != nil {
		return err
	}
	text, err := starter.Plan(like, bom.JobOf(file))
	if err != nil {
		near := source.Nearest(like, starter.Likes())
		if near != "" {
			return fmt.Errorf("--like %s: did you mean %s?", source.Quote(like), near)
		}
		return fmt.Errorf("--like %s: it is %s", source.Quote(like), strings.Join(starter.Likes(), ", "))
	}
	w, err := openNew(c.shared.root)
	if err != nil {
		return err
	}
	defer w.close()
	err = w.write(file, text)
	return c.written(c.shared.root, w, err, "see what is still to be filled in: driploop inspect "+bom.JobOf(file))
}

// newPlan is the file of a new plan, within the workspace. It is one that the
// workspace reads, and of a job that has no plan yet.
func (c *Command) newPlan(firm *rules.Firm, arg string) (string, error) {
	file := "plans/" + arg + ".toml"
	if path.Ext(arg) == ".toml" {
		var err error
		if file, err = c.inside(arg); err != nil {
			return "", err
		}
		if !strings.Contains(arg, "/") {
			return "", fmt.Errorf("%s names no folder; give the job's ID alone, or a file like plans/%s", arg, arg)
		}
	}
	job := bom.JobOf(file)
	if _, err := source.NameOf(job); err != nil {
		return "", fmt.Errorf("a job's ID is the plan's file name: %w", err)
	}
	for _, e := range firm.PlanFiles {
		if strings.EqualFold(bom.JobOf(e.Path), job) {
			return "", fmt.Errorf("the job %s has a plan already: %s", job, e.Path)
		}
	}
	if !firm.Workspace.ReadsPlan(file) {
		return "", fmt.Errorf("the workspace would not read %s: its plans are %s", file, strings.Join(firm.Workspace.PlanPatterns(), ", "))
	}
	return file, nil
}

// written lists what was written, and says what comes next.
func (c *Command) written(root string, w *newFiles, err error, next string) error {
	if err != nil {
		w.undo()
		if errors.As(err, new(taken)) {
			return err
		}
		return failure{err}
	}
	out := ""
	for _, name := range w.made {
		out += filepath.Join(root, filepath.FromSlash(name)) + "\n"
	}
	if err := c.emit([]byte(out)); err != nil {
		return err
	}
	c.tell("%s", next)
	return nil
}

// tell is say where --quiet does not forbid it.
func (c *Command) tell(format string, args ...any) {
	if !c.shared.quiet {
		c.say(format, args...)
	}
}
