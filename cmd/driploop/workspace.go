package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/repo"
	"driploop/rules"
)

// workspace reads the workspace that the flags name. close must be called.
func (c *Command) workspace(ctx context.Context) (firm *rules.Firm, close func(), err error) {
	today, err := c.today()
	if err != nil {
		return nil, nil, err
	}
	tree, close, err := c.source(ctx)
	if err != nil {
		return nil, nil, err
	}
	firm, err = rules.Load(tree, rules.Options{Today: today, NoShelf: c.bare})
	if err != nil {
		close()
		return nil, nil, fmt.Errorf("reading the workspace in %s: %w", c.shared.root, err)
	}
	return firm, close, nil
}

func (c *Command) today() (unit.Date, error) {
	if c.shared.today == "" {
		return unit.DateOf(c.Now().UTC()), nil
	}
	d, err := unit.ParseDate(c.shared.today)
	if err != nil {
		return unit.Date{}, fmt.Errorf("--today: %w", err)
	}
	return d, nil
}

// source is the tree that the flags name: the folder, or a revision of it.
func (c *Command) source(ctx context.Context) (source.Tree, func(), error) {
	if c.shared.at == "" {
		if err := c.begins(); err != nil {
			return nil, nil, err
		}
		tree, err := source.Disk(c.shared.root)
		if err != nil {
			return nil, nil, fmt.Errorf("opening the workspace: %w", err)
		}
		return tree, func() {}, nil
	}
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return nil, nil, err
	}
	tree, err := r.At(ctx, c.shared.at)
	if err != nil {
		return nil, nil, errors.Join(err, r.Close())
	}
	return tree, func() { r.Close() }, nil
}

// begins refuses a folder that is no workspace before all that lies below it is
// listed: it may be a whole disk.
func (c *Command) begins() error {
	if _, err := os.Stat(c.shared.root); err != nil {
		return fmt.Errorf("opening the workspace: %w", err)
	}
	_, err := os.Lstat(filepath.Join(c.shared.root, rules.WorkspaceFile))
	if errors.Is(err, fs.ErrNotExist) {
		return fmt.Errorf("reading the workspace in %s: %w", c.shared.root, rules.ErrNoWorkspace)
	}
	return nil
}

// plans are the plan files that the arguments name: a job's ID, or a file. What
// stands behind -- are file names as a hook passes them; a file that is no plan
// stands for the plans it touches. Without arguments it is nil: all plans.
func (c *Command) plans(firm *rules.Firm, args []string, dash int) (plans []source.Entry, changed []string, err error) {
	if len(args) == 0 && dash < 0 {
		return nil, nil, nil
	}
	named, passed := args, []string(nil)
	if dash >= 0 {
		named, passed = args[:dash], args[dash:]
	}
	chosen := map[string]bool{}
	for _, a := range named {
		e, err := c.plan(firm, a)
		if err != nil {
			return nil, nil, err
		}
		chosen[e.Path] = true
	}
	for _, a := range passed {
		path, err := c.inside(a)
		if err != nil {
			return nil, nil, err
		}
		changed = append(changed, path)
	}
	for _, e := range firm.Touched(changed, nil) {
		chosen[e.Path] = true
	}
	return chosenOf(firm, chosen), changed, nil
}

// chosenOf lists the chosen plans in the firm's order; it is never nil.
func chosenOf(firm *rules.Firm, chosen map[string]bool) []source.Entry {
	plans := []source.Entry{}
	for _, e := range firm.PlanFiles {
		if chosen[e.Path] {
			plans = append(plans, e)
		}
	}
	return plans
}

// plan finds the plan that an argument names.
func (c *Command) plan(firm *rules.Firm, arg string) (source.Entry, error) {
	path, err := c.inside(arg)
	var found []source.Entry
	var jobs []string
	for _, e := range firm.PlanFiles {
		job := bom.JobOf(e.Path)
		jobs = append(jobs, job)
		if job == arg || err == nil && e.Path == path || e.Path == filepath.ToSlash(arg) {
			found = append(found, e)
		}
	}
	switch {
	case len(found) == 1:
		return found[0], nil
	case len(found) > 1:
		return source.Entry{}, fmt.Errorf("%s names %d plans: %s and %s; give the file", arg, len(found), found[0].Path, found[1].Path)
	}
	if near := source.Nearest(arg, jobs); near != "" {
		return source.Entry{}, fmt.Errorf("the workspace has no plan %s; did you mean %s?", arg, near)
	}
	return source.Entry{}, fmt.Errorf("the workspace has no plan %s", arg)
}

// inside is the path of a file within the workspace. Names are taken from where
// the call was made; one that is not there but stands in the workspace is taken
// from its root.
func (c *Command) inside(name string) (string, error) {
	root, err := filepath.Abs(c.shared.root)
	if err != nil {
		return "", failure{err}
	}
	file, err := filepath.Abs(name)
	if err != nil {
		return "", failure{err}
	}
	rel, err := filepath.Rel(root, file)
	if err == nil && rel != ".." && !strings.HasPrefix(rel, ".."+string(filepath.Separator)) {
		return filepath.ToSlash(rel), nil
	}
	if _, err := os.Lstat(filepath.Join(root, name)); errors.Is(err, fs.ErrNotExist) {
		return "", fmt.Errorf("%s is not in the workspace", name)
	}
	return filepath.ToSlash(filepath.Clean(name)), nil
}
