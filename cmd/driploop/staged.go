package main

import (
	"context"
	"errors"
	"fmt"
	"os"
	"path/filepath"
	"slices"

	"driploop/catalog/source"
	"driploop/cmd/driploop/repo"
	"driploop/rules"
)

// look is what an inspection looks at. Without plans it is all of them.
type look struct {
	firm    *rules.Firm
	plans   []source.Entry
	changed []string // files of the workspace
	done    func()   // must be called
}

// lookAt reads the workspace and finds the plans that arguments and flags name. It
// is nil where nothing that is staged has to do with a workspace.
func (c *Command) lookAt(ctx context.Context, args []string, dash int, staged bool) (*look, error) {
	if staged {
		return c.lookAtStaged(ctx, args, dash)
	}
	firm, done, err := c.workspace(ctx)
	if err != nil {
		return nil, err
	}
	plans, changed, err := c.plans(firm, args, dash)
	if err != nil {
		done()
		return nil, err
	}
	return &look{firm, plans, changed, done}, nil
}

func (c *Command) lookAtStaged(ctx context.Context, args []string, dash int) (*look, error) {
	if c.shared.at != "" && c.shared.at != repo.Index {
		return nil, fmt.Errorf("--at %s: --staged reads what is staged, no other revision", c.shared.at)
	}
	today, err := c.today()
	if err != nil {
		return nil, err
	}
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return nil, err
	}
	o := rules.Options{Today: today, NoShelf: c.bare, Progress: c.progress()}
	var l *look
	if o.LimitsFrom, o.StockFrom, err = c.rulers(ctx, r); err == nil {
		l, err = c.stagedIn(ctx, r, o, args, dash)
	}
	if err != nil || l == nil {
		return nil, errors.Join(err, r.Close())
	}
	l.done = func() { r.Close() }
	return l, nil
}

func (c *Command) stagedIn(ctx context.Context, r *repo.Repo, o rules.Options, args []string, dash int) (*look, error) {
	change, err := r.Staged(ctx)
	if err != nil {
		return nil, err
	}
	firm, err := rules.Load(change.Head, o)
	if errors.Is(err, rules.ErrNoWorkspace) {
		return nil, c.noneStaged(change)
	}
	if err != nil {
		return nil, fmt.Errorf("reading what is staged of the workspace in %s: %w", c.shared.root, err)
	}
	l := &look{firm: firm}
	if l.plans, l.changed, err = c.stagedPlans(firm, change, args, dash); err != nil {
		return nil, err
	}
	return l, c.unread(firm, change)
}

// noneStaged says what it means that no workspace is staged. Hooks are shared by all
// branches, and one may hold none; but nothing may pass unseen because its workspace
// is taken away, or was never added.
func (c *Command) noneStaged(change *repo.Change) error {
	if slices.Contains(change.Files, rules.WorkspaceFile) {
		return fmt.Errorf("what is staged takes %s away from %s, and with it all that plans are held against; git commit --no-verify commits it unseen", rules.WorkspaceFile, c.shared.root)
	}
	if _, err := os.Lstat(filepath.Join(c.shared.root, rules.WorkspaceFile)); err == nil {
		return fmt.Errorf("%s stands in %s and is not added to git, so plans cannot be held against it; git add it", rules.WorkspaceFile, c.shared.root)
	}
	if !c.shared.quiet {
		c.say("no %s is staged in %s, so there is nothing to look at", rules.WorkspaceFile, c.shared.root)
	}
	return nil
}

// stagedPlans are the plans that staged files touch, and those that the arguments
// name. Of the files behind --, which come from the whole repository, those beside
// the workspace are left out.
func (c *Command) stagedPlans(firm *rules.Firm, change *repo.Change, args []string, dash int) ([]source.Entry, []string, error) {
	named, changed := args, slices.Clone(change.Files)
	if dash >= 0 {
		named = args[:dash]
		for _, name := range args[dash:] {
			if path, err := c.inside(name); err == nil && !slices.Contains(changed, path) {
				changed = append(changed, path)
			}
		}
	}
	chosen := map[string]bool{}
	for _, e := range firm.Touched(changed, change.Base) {
		chosen[e.Path] = true
	}
	for _, arg := range named {
		e, err := c.plan(firm, arg)
		if err != nil {
			return nil, nil, err
		}
		chosen[e.Path] = true
	}
	return chosenOf(firm, chosen), changed, nil
}

// unread says which staged files the workspace names and nobody looks at: a link may
// lead anywhere. One in conflict is no state of the workspace at all.
func (c *Command) unread(firm *rules.Firm, change *repo.Change) error {
	for _, e := range firm.Skipped {
		switch {
		case slices.Contains(change.Unmerged, e.Path):
			return fmt.Errorf("%s is in conflict: settle it and add it, then look at what is staged", e.Path)
		case slices.Contains(change.Files, e.Path):
			c.say("%s is staged and not looked at: it %s", e.Path, e.Skip)
		}
	}
	return nil
}
