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

func TestChangedFiles(t *testing.T) {
	w := repository(t, "demo/a.toml", "a", "demo/old.toml", "the same\n", "demo/gone.toml", "gone", "demo/same.toml", "s", "top.toml", "t")
	w.git("rm", "-q", "demo/gone.toml")
	w.git("mv", "demo/old.toml", "demo/new\nname.toml")
	w.commit("demo/a.toml", "A", "top.toml", "T")
	w.write("demo/same.toml", "staged", "demo/announced.toml", "x")
	w.git("add", "demo/same.toml")
	w.git("add", "-N", "demo/announced.toml")
	w.write("demo/a.toml", "in the work tree only")

	r := open(t, w.path("demo"))
	for _, c := range []struct {
		base, head string
		want       []string
	}{
		{"HEAD~1", "HEAD", []string{"a.toml", "gone.toml", "new\nname.toml", "old.toml"}},
		{"HEAD", Index, []string{"same.toml"}},
		{"HEAD~1", Index, []string{"a.toml", "gone.toml", "new\nname.toml", "old.toml", "same.toml"}},
		{"HEAD", "HEAD", nil},
	} {
		got, err := r.ChangedFiles(context.Background(), c.base, c.head)
		if err != nil {
			t.Fatal(err)
		}
		same(t, c.base+" to "+c.head, got, c.want)
	}
	_, err := r.ChangedFiles(context.Background(), Index, "HEAD")
	refusal(t, err)
}

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
