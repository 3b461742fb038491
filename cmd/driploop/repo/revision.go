package repo

import (
	"context"
	"errors"
	"fmt"
	"strings"
)

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

// Commit is the id of the commit that a revision names. Errors: a *Refusal where there
// is none.
func (r *Repo) Commit(ctx context.Context, rev string) (string, error) { return r.commit(ctx, rev) }

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
