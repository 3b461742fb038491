package repo

import (
	"context"
	"testing"
)

func TestBranch(t *testing.T) {
	w := folder(t)
	w.git("init", "-q", "-b", "job/quay-lane")
	r := open(t, w.dir)
	check := func(when, want string) {
		t.Helper()
		if got, err := r.Branch(context.Background()); err != nil || got != want {
			t.Errorf("%s: got %q, %v; want %q", when, got, err, want)
		}
	}
	check("before the first commit", "job/quay-lane")
	w.commit()
	check("with a commit", "job/quay-lane")
	w.git("checkout", "-q", "--detach")
	check("detached", "")
}

func TestUpstream(t *testing.T) {
	far := repository(t, "a.toml", "a")
	far.git("branch", "release/2")
	top := folder(t)
	top.git("clone", "-q", far.dir, "near")
	w := work{t, top.path("near")}
	r := open(t, w.dir)
	check := func(when, want string) {
		t.Helper()
		if got, err := r.Upstream(context.Background()); err != nil || got != want {
			t.Errorf("%s: got %q, %v; want %q", when, got, err, want)
		}
	}
	check("cloned", "origin/main")
	w.git("checkout", "-q", "-b", "job")
	check("a branch of one's own", "")
	w.git("branch", "-q", "--set-upstream-to", "origin/release/2")
	check("set", "origin/release/2")
	if base, err := r.MergeBase(context.Background(), "origin/release/2", "HEAD"); err != nil || base != w.git("rev-parse", "HEAD") {
		t.Errorf("as a revision: %q, %v", base, err)
	}
	w.git("branch", "-q", "--set-upstream-to", "main")
	check("a branch here", "main")
	w.git("branch", "-q", "--set-upstream-to", "origin/release/2")
	w.git("update-ref", "-d", "refs/remotes/origin/release/2")
	check("gone", "")
	w.git("checkout", "-q", "--detach")
	check("detached", "")
	w.git("checkout", "-q", "--orphan", "new")
	check("before the first commit", "")
}

func TestDefaultBranch(t *testing.T) {
	far := repository(t, "a.toml", "a")
	far.git("branch", "-m", "trunk")
	top := folder(t)
	top.git("clone", "-q", far.dir, "near")
	top.git("clone", "-q", "--bare", far.dir, "bare.git")
	w := work{t, top.path("near")}
	check := func(when, dir, want string) {
		t.Helper()
		if got, err := open(t, dir).DefaultBranch(context.Background()); err != nil || got != want {
			t.Errorf("%s: got %q, %v; want %q", when, got, err, want)
		}
	}
	check("as the remote says", w.dir, "origin/trunk")
	check("bare", top.path("bare.git"), "trunk")
	w.git("checkout", "-q", "-b", "main")
	w.git("remote", "rename", "origin", "firm")
	check("another remote's word", w.dir, "firm/trunk")
	w.git("remote", "set-head", "firm", "--delete")
	check("by its name", w.dir, "main")
	w.git("update-ref", "refs/remotes/origin/master", "HEAD")
	check("by its name, as a build machine fetches it", w.dir, "origin/master")
	w.git("update-ref", "-d", "refs/remotes/origin/master")
	w.git("branch", "-m", "mine")
	check("none", w.dir, "")
	check("detached", far.dir, "")
}
