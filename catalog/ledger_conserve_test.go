package catalog

import (
	"fmt"
	"maps"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/unit"

	"github.com/google/go-cmp/cmp"
	"pgregory.net/rapid"
)

// Nothing comes from nowhere and nothing goes nowhere: over any history that its
// people wrote down, the book has each piece and each millimetre where it is, or where
// it was before it got lost; and of each part what is on hand, with jobs, scrapped and
// found lost by counts is what there was to begin with and what arrived.
func TestNothingComesFromNowhere(t *testing.T) {
	premises, look := yardOf(t), stockParts(t)
	rapid.Check(t, func(rt *rapid.T) {
		h := newHistory(rt)
		h.days(h.upTo("days", 12))
		s := Book(premises, sheetsOf(t, h.files), ordersOf(t, h.files), look, unit.Date{Year: 2026, Month: 12, Day: 1})
		h.holds(rt, s)
		h.conserved(rt, s)
	})
}

// holds compares the book with what happened.
func (h *history) holds(t *rapid.T, s *Stock) {
	for _, b := range s.Bins {
		if want := h.bins[binKey{b.Part, b.Where}]; b.Qty.Length == 0 && b.Qty.Each != int64(want) {
			t.Errorf("%s at %s is %s, want %d", b.Part, b.Where, b.Qty, want)
		}
	}
	for _, id := range slices.Sorted(maps.Keys(h.tags)) {
		want, got := h.tags[id], s.Tag(id)
		if got == nil || (Spot{got.Where, got.Job}) != want.at || got.Left != want.left {
			t.Errorf("the tag %s is %+v, want %s at %s", id, got, want.left, want.at)
		}
	}
	for _, key := range slices.SortedFunc(maps.Keys(h.issued), func(a, b [2]string) int { return strings.Compare(a[0]+" "+a[1], b[0]+" "+b[1]) }) {
		if got := s.Issued(key[0], key[1]); got != h.issued[key] {
			t.Errorf("%s has %s of %s, want %s", key[0], got, key[1], h.issued[key])
		}
	}
	for _, p := range s.Pieces {
		if want := h.kept[p.Tag+" "+p.Job+"-"+p.Cable]; p.Kept() != want {
			t.Errorf("%s keeps %s of %s for %s, want %s", p.Job, p.Kept(), p.Tag, p.Cable, want)
		}
	}
	for _, x := range s.Serials {
		if len(x.Spots) != 1 || x.Spots[0] != h.serials[x.Number] {
			t.Errorf("%s is at %v, want %s", x.Number, x.Spots, h.serials[x.Number])
		}
	}
	for _, n := range s.Notes {
		switch n.Kind {
		case NoteJump, NoteLost, NoteSameDay, NoteFuture:
		default:
			t.Errorf("of a history without a fault the book says: %s", n.told())
		}
	}
}

// conserved adds up each part.
func (h *history) conserved(t *rapid.T, s *Stock) {
	for _, part := range slices.Concat(pastPieces, pastCut, []string{"AMP-W"}) {
		var there, out Quantity
		for _, b := range s.binsOf(part) {
			there = there.Plus(b.Qty)
		}
		for _, is := range s.Issues {
			if is.Part == part {
				out = out.Plus(is.Net)
			}
		}
		have, had := there.Plus(out).Plus(h.scrapped[part]).Plus(h.lost[part]), h.begun[part].Plus(h.arrived[part])
		if have != had {
			t.Errorf("%s: %s on shelves + %s with jobs + %s scrapped + %s lost in counts is not %s to begin with + %s arrived",
				part, there, out, h.scrapped[part], h.lost[part], h.begun[part], h.arrived[part])
		}
		if rest, _ := s.Inbound(part); rest != h.open[part] {
			t.Errorf("%s of %s are still to come, want %s", rest, part, h.open[part])
		}
	}
}

func textOf(files map[string]string, orders bool) string {
	var b strings.Builder
	for _, path := range slices.Sorted(maps.Keys(files)) {
		if strings.HasPrefix(path, "stock/orders/") == orders {
			b.WriteString("-- " + path + " --\n" + files[path])
		}
	}
	return b.String()
}

func sheetsOf(t testing.TB, files map[string]string) []*Sheet {
	sheets, _ := stockFiles(t, textOf(files, false))
	return sheets
}

func ordersOf(t testing.TB, files map[string]string) []*Order {
	_, orders := stockFiles(t, textOf(files, true))
	return orders
}

// Two branches, each with sheets of its own, give one book, whichever is merged first.
func TestBranchesMergeInEitherOrder(t *testing.T) {
	if _, err := exec.LookPath("git"); err != nil {
		if os.Getenv("CI") != "" {
			t.Fatal(err)
		}
		t.Skip("git is not here")
	}
	premises, look := yardOf(t), stockParts(t)
	n := 0
	rapid.Check(t, func(rt *rapid.T) {
		if n++; n > 4 {
			return // each takes a score of calls of git
		}
		base := newHistory(rt)
		left := base.branch("b")
		left.days(4)
		right := base.branch("c")
		right.days(4)
		var books []string
		for _, order := range [][2]*history{{left, right}, {right, left}} {
			files := merged(t, base.files, order[0].files, order[1].files)
			if len(files) != len(left.files)+len(right.files)-len(base.files) {
				t.Fatalf("%d files after merging %d and %d", len(files), len(left.files), len(right.files))
			}
			books = append(books, Book(premises, sheetsOf(t, files), ordersOf(t, files), look, unit.Date{Year: 2026, Month: 12, Day: 1}).told())
		}
		if diff := cmp.Diff(books[0], books[1]); diff != "" {
			rt.Errorf("the order of merging makes a difference:\n%s", diff)
		}
	})
}

// branch is a history that goes on from here and writes files of its own.
func (h *history) branch(by string) *history {
	c := *h
	c.by, c.sheet, c.files = by, "", maps.Clone(h.files)
	c.bins, c.hidden, c.serials, c.issued, c.open, c.kept = maps.Clone(h.bins), maps.Clone(h.hidden), maps.Clone(h.serials), maps.Clone(h.issued), maps.Clone(h.open), maps.Clone(h.kept)
	c.begun, c.arrived, c.scrapped, c.lost = maps.Clone(h.begun), maps.Clone(h.arrived), maps.Clone(h.scrapped), maps.Clone(h.lost)
	c.tags = map[string]*pastTag{}
	for id, tag := range h.tags {
		own := *tag
		own.pieces = maps.Clone(tag.pieces)
		c.tags[id] = &own
	}
	return &c
}

// merged commits the base and two branches to a repository, merges the branches in
// their order into the base, and reads what is there then.
func merged(t testing.TB, base, first, second map[string]string) map[string]string {
	t.Helper()
	dir := t.TempDir()
	git := func(args ...string) {
		cmd := exec.Command("git", append([]string{"-C", dir, "-c", "user.name=kit", "-c", "user.email=kit@saltmarsh.example", "-c", "commit.gpgsign=false"}, args...)...)
		cmd.Env = append(os.Environ(), "GIT_CONFIG_GLOBAL=/dev/null", "GIT_CONFIG_SYSTEM=/dev/null")
		if out, err := cmd.CombinedOutput(); err != nil {
			t.Fatalf("git %s: %v\n%s", strings.Join(args, " "), err, out)
		}
	}
	write := func(files map[string]string) {
		for path, text := range files {
			name := filepath.Join(dir, filepath.FromSlash(path))
			if err := os.MkdirAll(filepath.Dir(name), 0o755); err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(name, []byte(text), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		git("add", "-A")
		git("commit", "-q", "--allow-empty", "-m", "stock")
	}
	git("init", "-q", "-b", "main")
	write(base)
	for i, files := range []map[string]string{first, second} {
		git("checkout", "-q", "-b", fmt.Sprint("branch", i), "main")
		write(files)
	}
	git("checkout", "-q", "main")
	git("merge", "-q", "--no-edit", "branch0")
	git("merge", "-q", "--no-edit", "branch1")
	out := map[string]string{}
	for path := range maps.Keys(first) {
		out[path] = readBack(t, dir, path)
	}
	for path := range maps.Keys(second) {
		out[path] = readBack(t, dir, path)
	}
	return out
}

func readBack(t testing.TB, dir, path string) string {
	t.Helper()
	text, err := os.ReadFile(filepath.Join(dir, filepath.FromSlash(path)))
	if err != nil {
		t.Fatal(err)
	}
	return string(text)
}
