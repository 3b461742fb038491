package repo

import (
	"context"
	"errors"
	"fmt"
	"os"
	"slices"
	"strings"
	"sync"
	"testing"

	"driploop/catalog/source"
)

func TestRevisionAndIndexAndWorkTreeDiffer(t *testing.T) {
	w := repository(t, "plans/a.toml", "one", "plans/b.toml", "b")
	w.commit("plans/a.toml", "two")
	w.write("plans/a.toml", "staged")
	w.git("add", "plans/a.toml")
	w.git("rm", "-q", "--cached", "plans/b.toml")
	w.write("plans/a.toml", "not staged", "plans/untracked.toml", "u")

	r := open(t, w.dir)
	for rev, want := range map[string][]string{
		"HEAD~1":                   {"plans/a.toml: one", "plans/b.toml: b"},
		"HEAD":                     {"plans/a.toml: two", "plans/b.toml: b"},
		"main":                     {"plans/a.toml: two", "plans/b.toml: b"},
		w.git("rev-parse", "HEAD"): {"plans/a.toml: two", "plans/b.toml: b"},
		Index:                      {"plans/a.toml: staged"},
	} {
		tree := at(t, r, rev)
		same(t, rev, read(t, tree), want)
		same(t, "name", tree.Name(), rev)
	}
}

func TestSameContentHasOneID(t *testing.T) {
	w := repository(t, "a.toml", "x", "b.toml", "x", "c.toml", "y")
	a, err := at(t, open(t, w.dir), "HEAD").Files()
	if err != nil {
		t.Fatal(err)
	}
	b, err := at(t, open(t, w.dir), Index).Files()
	if err != nil {
		t.Fatal(err)
	}
	same(t, "commit and index", a, b)
	if a[0].ID != a[1].ID || a[0].ID == a[2].ID {
		t.Errorf("ids %v", a)
	}
}

func TestFolderBelowTheTop(t *testing.T) {
	// The second is a pattern, the third begins like git's own notation and the
	// first has a namesake that begins alike.
	for _, root := range []string{"demo", "de[m]o", ":demo", "a/b/c d"} {
		w := repository(t, root+"/driploop.toml", "here", root+"/plans/a.toml", "a",
			"top.toml", "no", "demo-2/x.toml", "no", "dem/x.toml", "no", "demo.toml", "no")
		r := open(t, w.path(root))
		want := []string{"driploop.toml: here", "plans/a.toml: a"}
		same(t, root, read(t, at(t, r, "HEAD")), want)
		same(t, root+" index", read(t, at(t, r, Index)), want)
	}
}

func TestFolderThroughALink(t *testing.T) {
	w := repository(t, "demo/a.toml", "a")
	link := folder(t).path("link")
	if err := os.Symlink(w.path("demo"), link); err != nil {
		t.Fatal(err)
	}
	same(t, "through a link", read(t, at(t, open(t, link), "HEAD")), []string{"a.toml: a"})
}

func TestOddNames(t *testing.T) {
	names := []string{"\"q\".toml", "$(touch x).toml", "-x.toml", "--output=y", "a\nb.toml", "a\tb.toml", `back\slash.toml`,
		"plans/HEAD", "zwölf ü.toml", "\xff.toml"}
	slices.Sort(names)
	var files, want []string
	for _, name := range names {
		files = append(files, name, "in "+name)
		want = append(want, name+": in "+name)
	}
	r := open(t, repository(t, files...).dir)
	same(t, "commit", read(t, at(t, r, "HEAD")), want)
	same(t, "index", read(t, at(t, r, Index)), want)
}

func TestDotFoldersAreLeftOutAsOnDisk(t *testing.T) {
	w := repository(t, ".github/a.toml", "a", "plans/.old/b.toml", "b", "plans/..c/d.toml", "d", ".e.toml", "e")
	disk, err := source.Disk(w.dir)
	if err != nil {
		t.Fatal(err)
	}
	want := []string{".e.toml: e"}
	same(t, "disk", read(t, disk), want)
	same(t, "commit", read(t, at(t, open(t, w.dir), "HEAD")), want)
}

func TestLinksAndSubmodulesAreSkipped(t *testing.T) {
	w := repository(t, "a.toml", "a")
	if err := os.Symlink("/etc/passwd", w.path("link.toml")); err != nil {
		t.Fatal(err)
	}
	sub := repository(t, "x.toml", "x")
	w.git("submodule", "--quiet", "add", sub.dir, "sub")
	w.commit()
	want := []string{"a.toml: a", "link.toml is a symbolic link", "sub is a submodule"}
	r := open(t, w.dir)
	for _, rev := range []string{"HEAD", Index} {
		tree := at(t, r, rev)
		got := read(t, tree)
		same(t, rev, got[1:], append([]string{}, want...)) // .gitmodules stands first
		for _, e := range must(tree.Files()) {
			if e.Skip == "" {
				continue
			}
			if _, err := tree.Read(e); err == nil {
				t.Errorf("%s was read though it %s", e.Path, e.Skip)
			}
		}
	}
}

func must(entries []source.Entry, err error) []source.Entry {
	if err != nil {
		panic(err)
	}
	return entries
}

func TestUnmergedIsListedOnceAndSkipped(t *testing.T) {
	w := repository(t, "a.toml", "base", "b.toml", "b", "gone.toml", "base")
	w.git("checkout", "-q", "-b", "other")
	w.commit("a.toml", "theirs", "gone.toml", "theirs")
	w.git("checkout", "-q", "main")
	w.git("rm", "-q", "gone.toml")
	w.commit("a.toml", "ours")
	if out, err := w.try("merge", "other"); err == nil {
		t.Fatalf("the merge has no conflict: %s", out)
	}
	same(t, "index", read(t, at(t, open(t, w.dir), Index)), []string{
		"a.toml is unmerged (stage 1-3)", "b.toml: b", "gone.toml is unmerged (stage 1-3)"})
}

func TestAnnouncedFilesAreNotEmptyFiles(t *testing.T) {
	for _, format := range []string{"sha1", "sha256"} {
		w := folder(t)
		w.git("init", "-q", "--object-format="+format)
		w.commit("empty.toml", "", "plans/a.toml", "a")
		w.write("plans/new.toml", "n", "plans/gone.toml", "g", "plans/void.toml", "")
		w.git("add", "-N", "plans")
		if err := os.Remove(w.path("plans/gone.toml")); err != nil {
			t.Fatal(err)
		}
		want := []string{"a.toml: a", "gone.toml is not staged yet (intent to add)",
			"new.toml is not staged yet (intent to add)", "void.toml is not staged yet (intent to add)"}
		same(t, format, read(t, at(t, open(t, w.path("plans")), Index)), want)
		all := read(t, at(t, open(t, w.dir), Index))
		same(t, format+": an empty file", all[0], "empty.toml: ")
		w.git("add", "plans/void.toml")
		same(t, format+": staged since", read(t, at(t, open(t, w.path("plans")), Index))[3], "void.toml: ")
	}
}

func TestIndexBeforeTheFirstCommit(t *testing.T) {
	w := folder(t)
	w.git("init", "-q")
	w.write("a.toml", "a")
	w.git("add", "a.toml")
	r := open(t, w.dir)
	same(t, "index", read(t, at(t, r, Index)), []string{"a.toml: a"})
	_, err := r.At(context.Background(), "HEAD")
	contains(t, "HEAD", refusal(t, err).Error(), `find revision "HEAD"`)
}

func TestStoredBytesWithoutFilters(t *testing.T) {
	w := repository(t, ".gitattributes", "*.toml eol=crlf ident export-subst\n")
	w.commit("a.toml", "a = 1\n# $Id$\n")
	got := read(t, at(t, open(t, w.dir), "HEAD"))
	same(t, "bytes", got[1], "a.toml: a = 1\n# $Id$\n")
}

// A tree that no git command would write: read by id it does no harm, but its
// paths must not lead anyone out of the workspace.
func TestTreesMadeByHand(t *testing.T) {
	w := repository(t, "demo/a.toml", "a")
	blob, sub := w.git("rev-parse", "HEAD:demo/a.toml"), w.git("rev-parse", "HEAD:demo")
	inner := w.feed(fmt.Sprintf("100644 blob %s\ttwice\n100644 blob %s\ttwice\n100644 blob %s\tz\n040000 tree %s\t..\n", blob, w.put("b"), blob, sub), "mktree")
	top := w.feed(fmt.Sprintf("040000 tree %s\tdemo\n", inner), "mktree")
	rev := w.git("commit-tree", "-m", "by hand", top)
	same(t, "entries", read(t, at(t, open(t, w.path("demo")), rev)), []string{
		"../a.toml has a path that no checkout can have", "twice is listed more than once", "z: a"})
}

func TestFileAtTheCap(t *testing.T) {
	at256 := strings.Repeat("x", source.MaxFile)
	huge := strings.Repeat("x", discardable+1)
	w := repository(t, "a.toml", at256, "b.toml", at256+"x", "c.toml", "c", "d.toml", huge, "e.toml", "e")
	tree := at(t, open(t, w.dir), "HEAD")
	sizes := map[string]int64{"b.toml": source.MaxFile + 1, "d.toml": discardable + 1}
	for _, e := range must(tree.Files()) {
		b, err := tree.Read(e)
		var big *source.TooBig
		switch size, over := sizes[e.Path]; {
		case over && !errors.As(err, &big):
			t.Errorf("%s: got %v, want *source.TooBig", e.Path, err)
		case over:
			same(t, e.Path, *big, source.TooBig{Path: e.Path, Size: size})
		case err != nil || (len(b) != 1 && len(b) != source.MaxFile):
			t.Errorf("%s: %d bytes, %v", e.Path, len(b), err)
		}
	}
}

// Many goroutines read two trees in an order of their own; the race detector and
// the texts tell.
func TestReadFromManyGoroutines(t *testing.T) {
	var files []string
	for i := range 300 {
		files = append(files, fmt.Sprintf("plans/%03d.toml", i), fmt.Sprint(i))
	}
	w := repository(t, files...)
	w.commit("plans/007.toml", "changed")
	r := open(t, w.dir)
	trees := []source.Tree{at(t, r, "HEAD~1"), at(t, r, "HEAD")}
	var all sync.WaitGroup
	for worker := range 8 {
		all.Go(func() {
			tree := trees[worker%2]
			entries := must(tree.Files())
			for i := range entries {
				n := (i*(worker*2+1) + worker) % len(entries)
				want := fmt.Sprint(n)
				if n == 7 && worker%2 == 1 {
					want = "changed"
				}
				if b, err := tree.Read(entries[n]); err != nil || string(b) != want {
					t.Errorf("%s: %q, %v", entries[n].Path, b, err)
				}
			}
		})
	}
	all.Wait()
}

func TestReadsAheadWithinBounds(t *testing.T) {
	var files []string
	for i := range 10 * window {
		files = append(files, fmt.Sprintf("%03d.toml", i), fmt.Sprint(i), fmt.Sprintf("%03d.txt", i), fmt.Sprint("text ", i))
	}
	r := open(t, repository(t, files...).dir)
	tree := at(t, r, "HEAD")
	entries := must(tree.Files())
	if _, err := tree.Read(entries[0]); err != nil {
		t.Fatal(err)
	}
	ahead := map[string]bool{}
	for _, id := range r.blobs.asked {
		ahead[id] = true
	}
	if !ahead[entries[2].ID] || ahead[entries[1].ID] || len(ahead) >= window+1 {
		t.Errorf("asked for %d ids, the next of its kind among them: %t, one of another kind: %t",
			len(ahead), ahead[entries[2].ID], ahead[entries[1].ID])
	}
	most := 0
	for i := range entries { // jumps make what was read ahead useless
		if _, err := tree.Read(entries[i*97%len(entries)]); err != nil {
			t.Fatal(err)
		}
		most = max(most, len(r.blobs.held)+len(r.blobs.asked))
	}
	if most > 3*window {
		t.Errorf("%d answers were kept or awaited", most)
	}
}

func TestReadAfterTheEnd(t *testing.T) {
	var files []string
	for i := range 3 * window {
		files = append(files, fmt.Sprintf("%03d.toml", i), "x")
	}
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	r, err := Open(ctx, repository(t, files...).dir)
	if err != nil {
		t.Fatal(err)
	}
	tree := at(t, r, "HEAD")
	entries := must(tree.Files())
	for i, e := range entries { // some that were read ahead are still served
		if _, err = tree.Read(e); err != nil {
			break
		}
		if i == 0 {
			cancel()
		}
	}
	if !errors.Is(err, context.Canceled) {
		t.Errorf("after cancel: %v", err)
	}
	if err := r.Close(); err != nil {
		t.Error(err)
	}
	if _, err := tree.Read(entries[1]); err == nil || !strings.Contains(err.Error(), "closed") {
		t.Errorf("a closed repository: %v", err)
	}
}

// The id goes to git on a line of its own.
func TestForeignEntryIsNotRead(t *testing.T) {
	w := repository(t, "a.toml", "a")
	tree := at(t, open(t, w.dir), "HEAD")
	for _, id := range []string{"", "HEAD", "HEAD:a.toml", w.git("rev-parse", "HEAD:a.toml") + "\nHEAD"} {
		if b, err := tree.Read(source.Entry{Path: "a.toml", ID: id}); err == nil {
			t.Errorf("id %q: %q", id, b)
		}
	}
}
