package repo

import (
	"context"
	"errors"
	"fmt"
	"slices"
	"strings"
)

// Branch is the branch that is checked out, "" where there is none (a detached HEAD).
func (r *Repo) Branch(ctx context.Context) (string, error) {
	out, err := r.git.run(ctx, "find the current branch", "symbolic-ref", "--quiet", "--short", "HEAD")
	if refusedWith(err, 1) {
		return "", nil
	}
	return strings.TrimSuffix(out, "\n"), err
}

// MergeBase is the id of the commit where the histories of two revisions part,
// one of them where they part in several. Errors: a *Refusal where one is
// missing or they have no commit in common, which in a shallow clone may only
// mean that too little was fetched.
func (r *Repo) MergeBase(ctx context.Context, a, b string) (string, error) {
	ids, err := r.commits(ctx, a, b)
	if err != nil {
		return "", err
	}
	doing := fmt.Sprintf("find where %q and %q part", a, b)
	out, err := r.git.run(ctx, doing, "merge-base", ids[0], ids[1])
	if refusedWith(err, 1) {
		err = &Refusal{Doing: doing, Says: "they have no commit in common"}
	}
	base, _, _ := strings.Cut(out, "\n")
	return base, r.git.adviseHistory(ctx, err)
}

// ChangedFiles lists the files of the workspace that differ between two
// revisions, in order of path, relative to the workspace; head may be Index. A
// renamed file is listed under both names.
func (r *Repo) ChangedFiles(ctx context.Context, base, head string) ([]string, error) {
	compare, revs := "diff-tree", []string{base, head}
	only := []string{"-r"}
	if head == Index {
		if err := r.needIndex(); err != nil {
			return nil, err
		}
		compare, revs = "diff-index", revs[:1]
		only = []string{"--cached", "--ita-invisible-in-index"}
	}
	ids, err := r.commits(ctx, revs...)
	if err != nil {
		return nil, err
	}
	args := slices.Concat([]string{compare}, only, plainDiff, ids, []string{"--"})
	out, err := r.git.run(ctx, fmt.Sprintf("compare %q with %q", base, head), args...)
	if err != nil {
		return nil, r.git.adviseObjects(ctx, err)
	}
	return r.inWorkspace(out), nil
}

// plainDiff makes a diff a list of names and keeps it from running programs.
var plainDiff = []string{"--name-only", "-z", "--no-renames", "--no-ext-diff", "--no-textconv"}

// inWorkspace cuts names that each end in a zero byte down to those of the workspace.
func (r *Repo) inWorkspace(names string) []string {
	var in []string
	for name := range strings.SplitSeq(strings.TrimSuffix(names, "\x00"), "\x00") {
		if rel, ok := strings.CutPrefix(name, r.prefix); ok && rel != "" {
			in = append(in, rel)
		}
	}
	slices.Sort(in)
	return in
}

// commits finds the ids of several revisions.
func (r *Repo) commits(ctx context.Context, revs ...string) ([]string, error) {
	ids := make([]string, len(revs))
	for i, rev := range revs {
		id, err := r.commit(ctx, rev)
		if err != nil {
			return nil, err
		}
		ids[i] = id
	}
	return ids, nil
}

// commit finds the id of a revision. git also takes a range or the exclusion
// "^HEAD" for one revision and answers in its own notation: only an id counts.
func (r *Repo) commit(ctx context.Context, rev string) (string, error) {
	doing := fmt.Sprintf("find revision %q", rev)
	out, err := r.git.run(ctx, doing, "rev-parse", "--verify", "--end-of-options", rev+"^{commit}")
	id := strings.TrimSuffix(out, "\n")
	if err == nil && !isID(id) {
		return "", &Refusal{Doing: doing, Says: "it does not name one commit"}
	}
	return id, r.git.adviseHistory(ctx, err)
}

// isID reports the full id of an object: 40 hexadecimal digits, or 64 in a
// repository of SHA-256.
func isID(s string) bool {
	return (len(s) == 40 || len(s) == 64) && strings.Trim(s, "0123456789abcdef") == ""
}

// refusedWith reports that git ran and ended with the status.
func refusedWith(err error, status int) bool {
	var refusal *Refusal
	return errors.As(err, &refusal) && refusal.status == status
}

// adviseHistory adds to a refusal that the clone is shallow, where it is.
func (g git) adviseHistory(ctx context.Context, err error) error {
	return g.advise(ctx, err, "this clone holds only the newest commits: fetch more history (git fetch --unshallow)",
		"rev-parse", "--is-shallow-repository")
}

// adviseObjects adds to a refusal that the clone is partial, where it is.
func (g git) adviseObjects(ctx context.Context, err error) error {
	return g.advise(ctx, err, "this clone is partial and nothing is fetched here: check the revision out with git first",
		"config", "--type=bool", "--get-regexp", `^remote\..*\.promisor$`)
}

// advise adds a remedy to a refusal where git answers the question with true.
func (g git) advise(ctx context.Context, err error, remedy string, question ...string) error {
	var refusal *Refusal
	if !errors.As(err, &refusal) {
		return err
	}
	if out, e := g.run(ctx, "look at the clone", question...); e == nil && strings.HasSuffix(out, "true\n") {
		refusal.Do = remedy
	}
	return err
}
