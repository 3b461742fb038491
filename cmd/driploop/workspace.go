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
	t, err := c.trees(ctx)
	if err != nil {
		return nil, nil, err
	}
	firm, err = rules.Load(t.own, rules.Options{Today: today, NoShelf: c.bare, LimitsFrom: t.limits, StockFrom: t.stock, Progress: c.progress()})
	if err != nil {
		t.close()
		return nil, nil, fmt.Errorf("reading the workspace in %s: %w", c.shared.root, err)
	}
	return firm, t.close, nil
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

// trees are the workspace as the flags name it, and what its limits and its stock
// are taken from where that is another revision of it, or nil.
type trees struct {
	own, limits, stock source.Tree
	close              func()
}

func (c *Command) trees(ctx context.Context) (t trees, err error) {
	t.close = func() {}
	if c.shared.at == "" {
		if err := c.begins(); err != nil {
			return t, err
		}
		if t.own, err = source.Disk(c.shared.root); err != nil {
			return t, fmt.Errorf("opening the workspace: %w", err)
		}
	}
	if c.shared.at == "" && c.shared.limitsFrom == "" && c.shared.stockFrom == "" {
		return t, nil
	}
	r, err := repo.Open(ctx, c.shared.root)
	if err != nil {
		return t, err
	}
	if c.shared.at != "" {
		t.own, err = r.At(ctx, c.shared.at)
	}
	if err == nil {
		t.limits, t.stock, err = c.rulers(ctx, r)
	}
	if err != nil {
		return t, errors.Join(err, r.Close())
	}
	t.close = func() { r.Close() }
	return t, nil
}

// rulers are the revisions that limits and stock are taken from, nil where they are
// the workspace's own.
func (c *Command) rulers(ctx context.Context, r *repo.Repo) (limits, stock source.Tree, err error) {
	if rev := c.shared.limitsFrom; rev != "" {
		if limits, err = r.At(ctx, rev); err != nil {
			return nil, nil, fmt.Errorf("--limits-from: %w", err)
		}
	}
	if rev := c.shared.stockFrom; rev != "" {
		if stock, err = r.At(ctx, rev); err != nil {
			return nil, nil, fmt.Errorf("--stock-from: %w", err)
		}
	}
	return limits, stock, nil
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

// belowTop leads from the top of the repository that holds the workspace to the
// workspace: "" or "demo/". Code hosts call files by their names from there. The top is
// the nearest folder with a .git in it; git itself is not asked.
func (c *Command) belowTop() string {
	root, err := filepath.Abs(c.shared.root)
	if err != nil {
		return ""
	}
	if real, err := filepath.EvalSymlinks(root); err == nil {
		root = real
	}
	for top := root; ; top = filepath.Dir(top) {
		if _, err := os.Lstat(filepath.Join(top, ".git")); err == nil {
			if rel, err := filepath.Rel(top, root); err == nil && rel != "." {
				return filepath.ToSlash(rel) + "/"
			}
			return ""
		}
		if top == filepath.Dir(top) {
			return ""
		}
	}
}
