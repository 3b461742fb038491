package repo

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

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
		{Index, "HEAD", []string{"same.toml"}},
	} {
		got, err := r.ChangedFiles(context.Background(), c.base, c.head)
		if err != nil {
			t.Fatal(err)
		}
		same(t, c.base+" to "+c.head, got, c.want)
	}
	_, err := r.ChangedFiles(context.Background(), "HEAD", "nosuch")
	refusal(t, err)
}

// Git's own comparison is the second opinion, on changes of every kind at random.
func TestChangeAgreesWithGit(t *testing.T) {
	w := folder(t)
	w.git("init", "-q")
	r := open(t, w.dir)
	random := rand.New(rand.NewPCG(1, 2))
	names := []string{"a.toml", "b b.toml", "d/c.toml", "d/e/ü.toml", "-x.toml", "z\n.toml", "f.toml", "d/f.toml"}
	for round := range 25 {
		for range 1 + random.IntN(4) {
			name := names[random.IntN(len(names))]
			os.RemoveAll(w.path(name))
			switch random.IntN(5) {
			case 0: // gone
			case 1:
				if err := os.MkdirAll(filepath.Dir(w.path(name)), 0o755); err != nil {
					t.Fatal(err)
				}
				if err := os.Symlink("target", w.path(name)); err != nil {
					t.Fatal(err)
				}
			case 2:
				w.write(name, "same")
				if err := os.Chmod(w.path(name), 0o755); err != nil {
					t.Fatal(err)
				}
			default:
				w.write(name, []string{"same", "other", ""}[random.IntN(3)])
			}
		}
		w.git("add", "-A")
		if round > 0 {
			same(t, "staged", staged(t, r).Files, namesOf(w.git("diff", "--cached", "--no-renames", "--name-only", "-z")))
		}
		w.git("commit", "-q", "--allow-empty", "-m", "round")
		if back := fmt.Sprintf("HEAD~%d", 1+random.IntN(3)); round > 3 {
			got, err := r.ChangedFiles(context.Background(), back, "HEAD")
			if err != nil {
				t.Fatal(err)
			}
			same(t, back, got, namesOf(w.git("diff", "--no-renames", "--name-only", "-z", back, "HEAD")))
		}
	}
}

func namesOf(list string) []string {
	if list == "" {
		return nil
	}
	names := strings.Split(strings.TrimSuffix(list, "\x00"), "\x00")
	slices.Sort(names)
	return names
}

func staged(t *testing.T, r *Repo) *Change {
	t.Helper()
	c, err := r.Staged(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func TestStaged(t *testing.T) {
	w := folder(t)
	w.git("init", "-q")
	r := open(t, w.dir)
	same(t, "nothing", staged(t, r).Files, []string(nil))
	w.write("a.toml", "a", "b.toml", "b", "later.toml", "l")
	w.git("add", "a.toml", "b.toml")
	first := staged(t, r)
	same(t, "before the first commit", first.Files, []string{"a.toml", "b.toml"})
	same(t, "before it", read(t, first.Base), []string(nil))

	w.git("commit", "-q", "-m", "one")
	same(t, "after it", staged(t, r).Files, []string(nil))
	w.git("mv", "a.toml", "A b.toml")
	w.write("b.toml", "not staged")
	c := staged(t, r)
	same(t, "renamed", c.Files, []string{"A b.toml", "a.toml"})
	same(t, "base", read(t, c.Base), []string{"a.toml: a", "b.toml: b"})
	same(t, "head", read(t, c.Head), []string{"A b.toml: a", "b.toml: b"})

	w.git("checkout", "-q", "--detach")
	same(t, "detached", staged(t, r).Files, []string{"A b.toml", "a.toml"})
}

// A damaged HEAD is not taken for that of a repository without a commit.
func TestStagedWithoutItsHead(t *testing.T) {
	w := repository(t, "a.toml", "a")
	r := open(t, w.dir)
	id := w.git("rev-parse", "HEAD")
	if err := os.Remove(w.path(".git/objects/" + id[:2] + "/" + id[2:])); err != nil {
		t.Fatal(err)
	}
	_, err := r.Staged(context.Background())
	contains(t, "no commit", refusal(t, err).Error(), `find revision "HEAD"`)
}

// What changes beside the content: a mode, a file that turns into a link.
func TestChangeOfMode(t *testing.T) {
	w := repository(t, "a.toml", "a", "b.toml", "b", "c.toml", "c")
	if err := os.Chmod(w.path("a.toml"), 0o755); err != nil {
		t.Fatal(err)
	}
	os.Remove(w.path("b.toml"))
	if err := os.Symlink("c.toml", w.path("b.toml")); err != nil {
		t.Fatal(err)
	}
	w.git("add", "-A")
	same(t, "modes", staged(t, open(t, w.dir)).Files, []string{"a.toml", "b.toml"})
}

func TestStagedInAMerge(t *testing.T) {
	w := repository(t, "a.toml", "base", "b.toml", "b", "same.toml", "s")
	w.git("checkout", "-q", "-b", "other")
	w.commit("a.toml", "theirs", "b.toml", "theirs")
	w.git("checkout", "-q", "main")
	w.commit("a.toml", "ours")
	if out, err := w.try("merge", "other"); err == nil {
		t.Fatalf("the merge has no conflict: %s", out)
	}
	c := staged(t, open(t, w.dir))
	same(t, "against the first parent", c.Files, []string{"a.toml", "b.toml"})
	same(t, "in conflict", c.Unmerged, []string{"a.toml"})
}

// A workspace in another repository than that of the commit at hand has nothing
// staged there: a folder may have been replaced by a link.
func TestStagedElsewhere(t *testing.T) {
	w, other := repository(t, "firm/a.toml", "a"), repository(t, "a.toml", "a")
	if err := os.RemoveAll(w.path("firm")); err != nil {
		t.Fatal(err)
	}
	if err := os.Symlink(other.dir, w.path("firm")); err != nil {
		t.Fatal(err)
	}
	t.Chdir(w.dir)
	t.Setenv("GIT_INDEX_FILE", ".git/index")
	_, err := open(t, "firm").Staged(context.Background())
	contains(t, "elsewhere", refusal(t, err).Error(), "not in the repository that git is at work in")
}

// A revision has a folder that the work tree has not.
func TestFolderOfAnotherRevision(t *testing.T) {
	w := repository(t, "firm/east/a.toml", "a")
	w.git("rm", "-q", "-r", "firm")
	w.commit("top.toml", "t")
	r := open(t, w.path("firm/east"))
	same(t, "then", read(t, at(t, r, "HEAD~1")), []string{"a.toml: a"})
	same(t, "now", read(t, at(t, r, "HEAD")), []string(nil))
	same(t, "below", r.Below(), "firm/east")

	top := folder(t)
	top.git("clone", "-q", "--bare", w.dir, "b.git")
	same(t, "in a bare repository", read(t, at(t, open(t, top.path("b.git/firm/east")), "HEAD~1")), []string{"a.toml: a"})
}
