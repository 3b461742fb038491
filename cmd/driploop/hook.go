package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"

	"github.com/spf13/cobra"

	"driploop/cmd/driploop/repo"
	"driploop/cmd/driploop/show"
)

func (c *Command) hook() *cobra.Command {
	remove := false
	cmd := &cobra.Command{
		Use:   "hook",
		Short: "install the git hook that looks at what is staged",
		Long: `Puts a hook before every commit and every merge: it holds the plans that are staged,
and those that a staged catalog, offer, stock or profile file touches, against the
rules, and a hold keeps the commit back. It goes where git looks for hooks
(core.hooksPath too). A hook that is there already is kept under another name
beside it and runs first. Doing it again changes nothing.`,
		Example: "  driploop hook",
		RunE: func(cmd *cobra.Command, args []string) error {
			if _, err := c.form("text"); err != nil {
				return err
			}
			switch {
			case len(args) > 0:
				return fmt.Errorf("hook takes no %s; --root names the workspace", args[0])
			case c.shared.at != "":
				return fmt.Errorf("--at %s: a hook is put into the repository as it is, not into a revision", c.shared.at)
			}
			if remove {
				return c.removeHooks(cmd.Context())
			}
			return c.installHooks(cmd.Context())
		},
	}
	cmd.Flags().BoolVar(&remove, "remove", false, "take it out again and put back the hook that was there before")
	return cmd
}

// hookNames are the hooks that run before a commit: git runs the second and not the
// first before that of a merge without conflict.
var hookNames = []string{"pre-commit", "pre-merge-commit"}

func (c *Command) installHooks(ctx context.Context) error {
	if err := c.begins(); err != nil {
		return err
	}
	hooks, below, err := c.hooks(ctx)
	if err != nil {
		return err
	}
	files, err := hookFiles(hooks.Dir)
	if err != nil {
		return err
	}
	for _, h := range files { // all of them before the first is touched
		if err := h.refusal(); err != nil {
			return err
		}
	}
	if err := os.MkdirAll(hooks.Dir, 0o777); err != nil {
		return failure{fmt.Errorf("making the folder of the hooks: %w", err)}
	}
	says := []string{fmt.Sprintf("What is staged in %s is looked at before every commit:", below)}
	for _, h := range files {
		said, err := h.install(hookScript(h.name, below))
		if err != nil {
			return failure{fmt.Errorf("putting in the hook %s: %w", h.path(), err)}
		}
		says = append(says, "  "+said)
	}
	says = append(says, "git commit --no-verify passes it by, so let the build look again.")
	if _, err := exec.LookPath("driploop"); err != nil && !c.shared.quiet {
		c.say("driploop is not on the PATH: until it is, the hook keeps every commit back")
	}
	if hooks.Shared && !c.shared.quiet {
		c.say("core.hooksPath is set for more than this repository: the hook runs in all that go by it, and looks at those with a workspace in %s", below)
	}
	return c.emitLines(says)
}

func (c *Command) removeHooks(ctx context.Context) error {
	hooks, _, err := c.hooks(ctx)
	if err != nil {
		return err
	}
	files, err := hookFiles(hooks.Dir)
	if err != nil {
		return err
	}
	for _, h := range files {
		if h.state == hookEdited {
			return h.refusal()
		}
	}
	var says []string
	for _, h := range files {
		said, err := h.remove()
		if err != nil {
			return failure{fmt.Errorf("taking out the hook %s: %w", h.path(), err)}
		}
		says = append(says, said)
	}
	return c.emitLines(says)
}

// hooks finds the folder of the hooks, and the workspace below the top of the work
// tree, where git runs them.
func (c *Command) hooks(ctx context.Context) (hooks repo.Hooks, below string, err error) {
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return repo.Hooks{}, "", err
	}
	hooks, err = r.Hooks(ctx)
	if info, e := os.Stat(hooks.Dir); e == nil && !info.IsDir() {
		err = fmt.Errorf("%s, where git looks for hooks, is no folder: none would run", hooks.Dir)
	}
	return hooks, r.Below(), errors.Join(err, r.Close())
}

func (c *Command) emitLines(lines []string) error {
	if c.shared.quiet {
		return nil
	}
	var b strings.Builder
	for _, l := range lines {
		b.WriteString(string(show.Clean(l)) + "\n")
	}
	return c.emit([]byte(b.String()))
}

func hookFiles(dir string) ([]*hookFile, error) {
	var files []*hookFile
	for _, name := range hookNames {
		h := &hookFile{dir: dir, name: name}
		if err := h.look(); err != nil {
			return nil, fmt.Errorf("looking at the hook %s: %w", filepath.Join(dir, name), err)
		}
		files = append(files, h)
	}
	return files, nil
}
