package repo

import (
	"context"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// Change is what lies between two states of the workspace.
type Change struct {
	Base, Head source.Tree
	// Files differ between the two in content, mode or presence, in order of path,
	// relative to the workspace. A renamed file is listed under both names.
	Files []string
	// Unmerged are those of Files that a merge has left in conflict.
	Unmerged []string
}

// Change compares two revisions; head may be Index. Files are told apart by the ids
// of the two listings, so nothing is read and no diff of git's takes part, with its
// attributes and programs.
// Errors: a *Refusal where there is no such revision.
func (r *Repo) Change(ctx context.Context, base, head string) (*Change, error) {
	before, err := r.rows(ctx, base)
	if err != nil {
		return nil, err
	}
	after, err := r.rows(ctx, head)
	if err != nil {
		return nil, err
	}
	return r.change(base, head, before, after), nil
}

// Staged compares HEAD, which in a merge is its first parent, with what is staged;
// before the first commit all that is staged is new. Where the environment points
// git at a repository, as in a hook, and the workspace lies in another, nothing of
// the commit at hand is staged there, and that is refused.
func (r *Repo) Staged(ctx context.Context) (*Change, error) {
	if r.foreign {
		return nil, &Refusal{Doing: "compare what is staged", Says: "the workspace is not in the repository that git is at work in"}
	}
	if err := r.needIndex(); err != nil {
		return nil, err
	}
	before, err := r.listCommit(ctx, "HEAD")
	if err != nil {
		if unborn, e := r.unborn(ctx); e != nil || !unborn {
			return nil, err
		}
	}
	after, err := r.listIndex(ctx)
	if err != nil {
		return nil, err
	}
	return r.change("HEAD", Index, before, after), nil
}

// ChangedFiles lists the files of the workspace that differ between two revisions,
// as Change does.
func (r *Repo) ChangedFiles(ctx context.Context, base, head string) ([]string, error) {
	c, err := r.Change(ctx, base, head)
	if err != nil {
		return nil, err
	}
	return c.Files, nil
}

func (r *Repo) change(base, head string, before, after []row) *Change {
	c := &Change{Base: r.tree(base, before), Head: r.tree(head, after)}
	for _, name := range differing(before, after) {
		if rel, ok := strings.CutPrefix(name, r.prefix); ok {
			c.Files = append(c.Files, rel)
		}
	}
	for _, row := range after {
		if rel, ok := strings.CutPrefix(row.path, r.prefix); ok && row.skip == unmerged {
			c.Unmerged = append(c.Unmerged, rel)
		}
	}
	c.Unmerged = slices.Compact(c.Unmerged)
	return c
}

// differing lists the paths that do not stand in both listings with the same mode
// and id, in order, each once. What is only announced is in neither.
func differing(before, after []row) []string {
	type version struct{ mode, id, skip string }
	was := make(map[string]version, len(before))
	for _, row := range before {
		if row.skip != announced {
			was[row.path] = version{row.mode, row.id, row.skip}
		}
	}
	var out []string
	for _, row := range after {
		old, there := was[row.path]
		switch {
		case row.skip == announced:
			continue
		case !there || old != version{row.mode, row.id, row.skip}:
			out = append(out, row.path)
		}
		delete(was, row.path)
	}
	for name := range was {
		out = append(out, name)
	}
	slices.Sort(out)
	return slices.Compact(out)
}
