package repo

import (
	"context"
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

// Upstream is the branch that the current one follows, as git names it for short
// ("origin/main"): a revision. It is "" where HEAD is detached, where the branch
// follows none, and where the one it follows is gone.
func (r *Repo) Upstream(ctx context.Context) (string, error) {
	const doing = "find the branch that the current one follows"
	head, err := r.headRef(ctx)
	if err != nil || head == "" {
		return "", err
	}
	out, err := r.git.run(ctx, doing, "for-each-ref", "--format=%(upstream)%00%(upstream:short)", head)
	if err != nil {
		return "", err
	}
	full, short, _ := strings.Cut(strings.TrimSuffix(out, "\n"), "\x00")
	if full == "" {
		return "", nil
	}
	there, err := r.hasRef(ctx, doing, full)
	if err != nil || !there {
		return "", err
	}
	return short, nil
}

// Places where the branch that all others lead to may stand: those that a remote
// names itself first, those that go by their name alone last.
var defaultBranches = []string{
	"refs/remotes/origin/HEAD",
	"refs/remotes/*/HEAD",
	"refs/remotes/origin/main",
	"refs/remotes/origin/master",
	"refs/heads/main",
	"refs/heads/master",
}

// DefaultBranch guesses the branch that changes are proposed for, as a revision
// ("origin/main"): the one that the remote calls its own, else one called main or
// master, there or here; in a bare repository its HEAD. It is "" where there is no
// such branch.
func (r *Repo) DefaultBranch(ctx context.Context) (string, error) {
	if r.bare {
		return r.Branch(ctx)
	}
	for _, place := range defaultBranches {
		out, err := r.git.run(ctx, "find the branch that changes are for", "for-each-ref", "--count=1", "--format=%(refname)%00%(symref)", place)
		if err != nil {
			return "", err
		}
		name, leadsTo, _ := strings.Cut(strings.TrimSuffix(out, "\n"), "\x00")
		if leadsTo != "" {
			name = leadsTo
		}
		if name != "" {
			return strings.TrimPrefix(strings.TrimPrefix(name, "refs/heads/"), "refs/remotes/"), nil
		}
	}
	return "", nil
}

// unborn reports that HEAD names a branch that has no commit yet.
func (r *Repo) unborn(ctx context.Context) (bool, error) {
	head, err := r.headRef(ctx)
	if err != nil || head == "" {
		return false, err
	}
	there, err := r.hasRef(ctx, "find the first commit", head)
	return !there, err
}

// headRef is the full name of the branch that is checked out, "" where HEAD is detached.
func (r *Repo) headRef(ctx context.Context) (string, error) {
	out, err := r.git.run(ctx, "find the current branch", "symbolic-ref", "--quiet", "HEAD")
	if refusedWith(err, 1) {
		return "", nil
	}
	return strings.TrimSuffix(out, "\n"), err
}

func (r *Repo) hasRef(ctx context.Context, doing, full string) (bool, error) {
	_, err := r.git.run(ctx, doing, "show-ref", "--verify", "--quiet", full)
	if refusedWith(err, 1) {
		return false, nil
	}
	return err == nil, err
}
