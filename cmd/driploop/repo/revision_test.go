package repo

import (
	"context"
	"fmt"
	"os"
	"testing"
)

func TestRevisionsThatAreNoCommit(t *testing.T) {
	w := repository(t, "a.toml", "a")
	w.git("tag", "-a", "v1", "-m", "tagged")
	r := open(t, w.dir)
	same(t, "a tag", read(t, at(t, r, "v1")), []string{"a.toml: a"})
	for _, rev := range []string{"", "nosuch", "-x", "--all", "--output=x", "^HEAD", "HEAD..HEAD", "HEAD HEAD", "HEAD:a.toml", ":a.toml", ":index2", "HEAD\nHEAD", "HEAD^{tree}"} {
		tree, err := r.At(context.Background(), rev)
		if err == nil {
			t.Errorf("%q is taken for a revision: %q", rev, read(t, tree))
			continue
		}
		contains(t, rev, refusal(t, err).Doing, fmt.Sprintf("find revision %q", rev))
		if got := refusal(t, err); got.Do != "" {
			t.Errorf("%q: a whole clone is advised to %s", rev, got.Do)
		}
	}
	if _, err := os.Stat(w.path("x")); err == nil {
		t.Error("--output was obeyed")
	}
}

func TestMergeBase(t *testing.T) {
	w := repository(t, "a.toml", "a")
	fork := w.git("rev-parse", "HEAD")
	w.git("checkout", "-q", "-b", "side")
	w.commit("b.toml", "b")
	w.git("checkout", "-q", "main")
	w.commit("c.toml", "c")
	r := open(t, w.dir)
	got, err := r.MergeBase(context.Background(), "main", "side")
	if err != nil || got != fork {
		t.Errorf("got %q, %v; want %s", got, err, fork)
	}
	_, err = r.MergeBase(context.Background(), "main", "nosuch")
	contains(t, "missing", refusal(t, err).Error(), `"nosuch"`)

	w.git("checkout", "-q", "--orphan", "alone")
	w.commit()
	_, err = r.MergeBase(context.Background(), "main", "alone")
	contains(t, "orphan", refusal(t, err).Error(), "no commit in common")
}

func TestShallowCloneAsksForHistory(t *testing.T) {
	w := repository(t, "a.toml", "a")
	w.commit("a.toml", "b")
	top := folder(t)
	top.git("clone", "-q", "--depth", "1", "file://"+w.dir, "shallow")
	r := open(t, top.path("shallow"))
	same(t, "HEAD", read(t, at(t, r, "HEAD")), []string{"a.toml: b"})
	_, err := r.At(context.Background(), "HEAD~1")
	contains(t, "HEAD~1", refusal(t, err).Error(), `"HEAD~1"`, "fetch more history")
	_, err = r.MergeBase(context.Background(), "HEAD", "origin/nosuch")
	contains(t, "merge base", refusal(t, err).Error(), "fetch more history")
}
