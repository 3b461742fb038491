package catalog

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"

	"github.com/google/go-cmp/cmp"
)

// stockCase is a store's files with what they add up to. The files are written in
// one text, each under a line "-- path --".
type stockCase struct {
	name  string
	today string // absent: 2026-12-01
	files string
	want  string
}

func (c stockCase) book(t testing.TB) *Stock {
	t.Helper()
	sheets, orders := stockFiles(t, c.files)
	return Book(yardOf(t), sheets, orders, stockParts(t), dayOf(t, c.today))
}

func dayOf(t testing.TB, s string) unit.Date {
	t.Helper()
	if s == "" {
		s = "2026-12-01"
	}
	d, err := unit.ParseDate(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func stockFiles(t testing.TB, text string) (sheets []*Sheet, orders []*Order) {
	t.Helper()
	for _, f := range strings.Split(text, "-- ")[1:] {
		path, src, _ := strings.Cut(f, " --\n")
		s, o, problems := ReadStock(docOf(t, path, src))
		for _, p := range told(problems) {
			t.Fatalf("%s:%s", path, p)
		}
		if o != nil {
			orders = append(orders, o)
			continue
		}
		sheets = append(sheets, s)
	}
	return sheets, orders
}

var noteWords = map[NoteKind]string{NoteBelow: "below", NoteClash: "clash", NoteCountedTwice: "counted-twice", NoteOver: "over", NoteUnknown: "unknown",
	NoteOverdue: "overdue", NoteJump: "jump", NoteLost: "lost", NoteGrew: "grew", NoteSameDay: "same-day", NoteFuture: "future"}

// told prints a stock line by line, the notes last.
func (s *Stock) told() string {
	var b strings.Builder
	line := func(format string, args ...any) {
		fmt.Fprintln(&b, strings.TrimRight(fmt.Sprintf(format, args...), " "))
	}
	for _, x := range s.Bins {
		line("bin %s %s %s", x.Part, x.Where, x.Qty)
	}
	for _, x := range s.Tags {
		line("tag %s %s %s %s", x.ID, x.Part, Spot{x.Where, x.Job}, x.Left)
	}
	for _, x := range s.Serials {
		line("serial %s %s %v", x.Part, x.Number, x.Spots)
	}
	for _, x := range s.Issues {
		line("issued %s %s %s", x.Job, x.Part, x.Net)
	}
	for _, x := range s.Pieces {
		line("piece %s/%s %s of %s", x.Job, x.Cable, x.Kept(), x.Tag)
	}
	for _, x := range s.Open {
		line("open %s %s %s", x.Order.ID, x.Part, x.Left)
	}
	for _, n := range s.Notes {
		line("%s", n.told())
	}
	return b.String()
}

func (n Note) told() string {
	s := "note " + noteWords[n.Kind] + " " + mark(n.At)
	for _, p := range n.Also {
		s += "+" + mark(p)
	}
	for _, f := range []string{n.Part, n.Tag, n.Serial, n.Where, n.Was, n.Order, n.What, n.Name} {
		if f != "" {
			s += " " + f
		}
	}
	if !n.Book.IsZero() || !n.Read.IsZero() {
		s += fmt.Sprintf(" %s/%s", n.Book, n.Read)
	}
	if n.Bag != 0 {
		s += fmt.Sprintf(" bag %d", n.Bag)
	}
	return s
}

// mark is a place as the cases write it: the file's name and the line.
func mark(p source.Place) string { return fmt.Sprintf("%s:%d", nameOf(p.File), p.Line()) }

func (c stockCase) check(t *testing.T) {
	t.Helper()
	got := c.book(t).told()
	if diff := cmp.Diff(strings.TrimLeft(c.want, "\n"), got); diff != "" {
		t.Errorf("the book differs (− wanted, + got):\n%s", diff)
	}
}

func runStock(t *testing.T, cases []stockCase) {
	t.Helper()
	for _, c := range cases {
		t.Run(c.name, c.check)
	}
}

func TestBookCounts(t *testing.T) {
	runStock(t, []stockCase{
		{name: "a count and what moved after it", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-21, job = "quay-lane" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 4 }]
-- move/b.toml --
sheet = { on = 2026-11-22 }
move = [{ part = "NC-10-NM", from = "shop", to = "van-1", qty = 6 }]
-- back/c.toml --
sheet = { on = 2026-11-23, job = "quay-lane" }
move = [{ part = "NC-10-NM", from = "job", to = "returns", qty = 1 }]
-- move/d.toml --
sheet = { on = 2026-11-24 }
move = [{ part = "NC-10-NM", from = "van-1", to = "scrap", qty = 1 }]
`, want: `
bin NC-10-NM returns 1
bin NC-10-NM shop 16
bin NC-10-NM van-1 5
issued quay-lane NC-10-NM 3
`},
		{name: "a count covers its own day", files: `
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-20, job = "quay-lane" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 4 }]
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
`, want: `
bin NC-10-NM shop 26
issued quay-lane NC-10-NM 4
note same-day a:2+quay-lane-1:2 NC-10-NM shop
`},
		{name: "the evening comes before the first move of the next day", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- move/night.toml --
sheet = { on = 2026-11-21T00:00:00 }
move = [{ part = "NC-10-NM", from = "shop", to = "van-1", qty = 6 }]
`, want: `
bin NC-10-NM shop 20
bin NC-10-NM van-1 6
`},
		{name: "times of day decide within a day", files: `
-- counts/b.toml --
sheet = { on = 2026-10-29T16:00:00, where = "shop" }
count = [{ part = "NC-10-NM", qty = 22 }]
-- issue/early.toml --
sheet = { on = 2026-10-29T08:10:00, job = "quay-lane" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 4 }]
-- issue/late.toml --
sheet = { on = 2026-10-29T16:01:00, job = "quay-lane" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 2 }]
-- counts/a.toml --
sheet = { on = 2026-10-28, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
`, want: `
bin NC-10-NM shop 20
issued quay-lane NC-10-NM 6
`},
		{name: "at one instant a move is in the count", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20T16:00:00, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- move/b.toml --
sheet = { on = 2026-11-20T16:00:00 }
move = [{ part = "NC-10-NM", from = "shop", to = "van-1", qty = 6 }]
`, want: `
bin NC-10-NM shop 26
bin NC-10-NM van-1 6
`},
		{name: "a count on a bare date and a move in its evening", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- move/b.toml --
sheet = { on = 2026-11-20T23:59:00 }
move = [{ part = "NC-10-NM", from = "shop", to = "van-1", qty = 6 }]
`, want: `
bin NC-10-NM shop 26
bin NC-10-NM van-1 6
note same-day a:2+b:2 NC-10-NM shop
`},
		{name: "a count with a time and a move of that day without", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20T16:00:00, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- move/b.toml --
sheet = { on = 2026-11-20 }
move = [{ part = "NC-10-NM", from = "shop", to = "van-1", qty = 6 }]
`, want: `
bin NC-10-NM shop 26
bin NC-10-NM van-1 6
note same-day a:2+b:2 NC-10-NM shop
`},
		{name: "two counts of one time that differ: the lower", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 24 }]
`, want: `
bin NC-10-NM shop 24
note counted-twice b:2+a:2 NC-10-NM shop 26/24
`},
		{name: "two counts of one time that agree", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
`, want: "bin NC-10-NM shop 26\n"},
		{name: "a newer count settles what was doubtful", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 24 }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 30 }]
-- counts/c.toml --
sheet = { on = 2026-11-22, where = "shop" }
count = [{ part = "NC-10-NM", qty = 0 }]
`, want: `
bin NC-10-NM shop 0
issued x NC-10-NM 30
`},
		{name: "a count that is the book divided by a bag", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 50 }]
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop" }
count = [{ part = "NC-10-NM", qty = 2 }]
`, want: `
bin NC-10-NM shop 2
note jump b:2+a:2 NC-10-NM shop 50/2 bag 25
`},
		{name: "the first count of a bin is no jump", files: `
-- issue/x-1.toml --
sheet = { on = 2026-11-19, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 3 }]
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 50 }]
`, want: `
bin NC-10-NM shop 50
issued x NC-10-NM 3
`},
		{name: "two jobs take 28 of 22", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 22 }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 14 }]
-- issue/y-1.toml --
sheet = { on = 2026-11-22, job = "y" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 14 }]
-- back/z.toml --
sheet = { on = 2026-11-23, job = "y" }
move = [{ part = "NC-10-NM", from = "job", to = "shop", qty = 1 }]
`, want: `
bin NC-10-NM shop 1
issued x NC-10-NM 14
issued y NC-10-NM 13
note below y-1:2+a:2+x-1:2 NC-10-NM shop 8/14
`},
		{name: "what comes in at an instant is there before anything leaves", files: `
-- move/a.toml --
sheet = { on = 2026-11-20 }
move = [
  { part = "NC-10-NM", from = "van-1", to = "job", qty = 4, job = "x" },
  { part = "NC-10-NM", from = "shop", to = "van-1", qty = 4 },
]
-- counts/b.toml --
sheet = { on = 2026-11-19, where = "shop" }
count = [{ part = "NC-10-NM", qty = 5 }]
`, want: `
bin NC-10-NM shop 1
bin NC-10-NM van-1 0
issued x NC-10-NM 4
`},
		{name: "a void sheet never was", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 30 }]
-- counts/b.toml --
sheet = { on = 2026-11-21, where = "shop", void = "bags were counted" }
count = [{ part = "NC-10-NM", qty = 2 }]
`, want: "bin NC-10-NM shop 30\n"},
		{name: "what lies in the future is not counted", files: `
-- counts/a.toml --
sheet = { on = 2026-12-01, where = "shop" }
count = [{ part = "NC-10-NM", qty = 30 }]
-- issue/x-1.toml --
sheet = { on = 2026-12-02, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 3 }]
`, want: `
bin NC-10-NM shop 30
note future x-1:2 NC-10-NM
`},
		{name: "today in the past replays the ledger", today: "2026-11-20", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 30 }]
-- counts/b.toml --
sheet = { on = 2026-11-21, where = "shop" }
count = [{ part = "NC-10-NM", qty = 3 }]
`, want: `
bin NC-10-NM shop 30
note future b:2 NC-10-NM
`},
	})
}

func TestBookCompleteCounts(t *testing.T) {
	runStock(t, []stockCase{
		{name: "what is not listed is none", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 26 }, { part = "NC-10-NF", qty = 7 }]
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }, { tag = "R-2", part = "CX-10", left = "9 m", where = "van-1" }, { tag = "R-3", part = "CX-10", left = "9 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop", complete = true }
count = [{ part = "NC-10-NM", qty = 26 }]
reel = [{ tag = "R-3", part = "CX-10", left = "9 m" }]
`, want: `
bin CX-10 shop 9 m
bin CX-10 van-1 9 m
bin NC-10-NF shop 0
bin NC-10-NM shop 26
tag R-1 CX-10 scrap 0 m
tag R-2 CX-10 van-1 9 m
tag R-3 CX-10 shop 9 m
note jump b:1+a:3 CX-10 R-1 shop shop 40 m/0
note jump b:1+a:2 NC-10-NF shop 7/0
`},
		{name: "what moves in afterwards is there", files: `
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop", complete = true }
-- move/c.toml --
sheet = { on = 2026-11-26 }
move = [{ part = "NC-10-NM", from = "van-1", to = "shop", qty = 2 }, { tag = "R-1", from = "van-1", to = "shop" }]
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "van-1" }
count = [{ part = "NC-10-NM", qty = 6 }]
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
`, want: `
bin CX-10 shop 40 m
bin NC-10-NM shop 2
bin NC-10-NM van-1 4
tag R-1 CX-10 shop 40 m
`},
		{name: "a complete count against another sheet of the same time", files: `
-- counts/a.toml --
sheet = { on = 2026-11-25, where = "shop", complete = true }
-- counts/b.toml --
sheet = { on = 2026-11-25, where = "shop" }
count = [{ part = "NC-10-NM", qty = 5 }]
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
`, want: `
bin NC-10-NM shop 0
tag R-1 CX-10 scrap 0 m
note counted-twice a:1+b:3 CX-10 R-1 shop shop 40 m/0
note counted-twice a:1+b:2 NC-10-NM shop 5/0
`},
		{name: "a tag given up for lost is found again", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
-- counts/b.toml --
sheet = { on = 2026-11-21, where = "shop", complete = true }
-- counts/c.toml --
sheet = { on = 2026-11-22, where = "van-1" }
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
`, want: `
bin CX-10 van-1 40 m
tag R-1 CX-10 van-1 40 m
note jump c:2+b:1 CX-10 R-1 van-1 0/40 m
`},
	})
}

func TestBookUnknownNames(t *testing.T) {
	runStock(t, []stockCase{
		{name: "shelf, part, tag and order", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20 }
count = [
  { part = "NC-10-NM", where = "van1", qty = 6 },
  { part = "NOPE", where = "shop", qty = 6 },
]
cut = [{ tag = "R-9", length = "2 m", job = "x", cable = "C1" }]
-- in/b.toml --
sheet = { on = 2026-11-20, order = "PO-9", where = "dock" }
move = [{ part = "NC-10-NM", qty = 20 }, { part = "NC-10-NM", qty = 5 }]
`, want: `
bin NC-10-NM dock 25
bin NC-10-NM van1 6
bin NOPE shop 6
piece x/C1 2 m of R-9
note unknown a:3 NC-10-NM van1 shelf van1
note unknown a:4 NOPE shop part NOPE
note unknown a:6 R-9 tag R-9
note unknown b:1 NC-10-NM dock order PO-9
`},
		{name: "older than the newest count", files: `
-- move/a.toml --
sheet = { on = 2026-11-20 }
move = [{ part = "NC-10-NM", from = "van-2", to = "shop", qty = 6 }]
-- counts/b.toml --
sheet = { on = 2026-11-21, where = "shop" }
count = [{ part = "NC-10-NM", qty = 6 }]
`, want: `
bin NC-10-NM shop 6
bin NC-10-NM van-2 0
`},
		{name: "older than the complete count that did not find the tag", files: `
-- counts/a.toml --
sheet = { on = 2026-11-19, where = "van-1" }
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
-- move/a.toml --
sheet = { on = 2026-11-20 }
move = [{ tag = "R-1", from = "van-2", to = "shop" }]
-- counts/b.toml --
sheet = { on = 2026-11-21, where = "shop", complete = true }
`, want: `
tag R-1 CX-10 scrap 0 m
note jump b:1+a:2 CX-10 R-1 shop shop 40 m/0
`},
		{name: "a bin on an unknown shelf is no stock on hand", files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "NC-10-NM", qty = 6 }]
-- counts/b.toml --
sheet = { on = 2026-11-20, where = "shpo" }
count = [{ part = "NC-10-NM", qty = 9 }]
`, want: `
bin NC-10-NM shop 6
bin NC-10-NM shpo 9
note unknown b:1 NC-10-NM shpo shelf shpo
`},
	})
}

func TestOnHandByShelf(t *testing.T) {
	s := stockCase{files: `
-- counts/a.toml --
sheet = { on = 2026-11-20 }
count = [
  { part = "NC-10-NM", where = "shop", qty = 26 },
  { part = "NC-10-NM", where = "van-1", qty = 5 },
  { part = "NC-10-NM", where = "dock", qty = 50 },
  { part = "NC-10-NM", where = "returns", qty = 3 },
  { part = "NC-10-NM", where = "shed", qty = 1 },
]
reel = [
  { tag = "R-1", part = "CX-10", where = "shop", left = "40 m" },
  { tag = "R-2", part = "CX-10", where = "shop", left = "2.5 m" },
  { tag = "R-3", part = "CX-10", where = "returns", left = "7 m" },
]
`}.book(t)
	each, bins := s.OnHand("NC-10-NM")
	if each != (Quantity{Each: 81}) || len(bins) != 5 {
		t.Errorf("%s on hand in %d bins; want 26 + 5 + 50 in 5", each, len(bins))
	}
	pickable := Quantity{}
	for _, b := range bins {
		if b.Pickable() {
			pickable = pickable.Plus(b.Qty)
		}
	}
	if pickable != (Quantity{Each: 31}) {
		t.Errorf("%s can be picked; want 26 + 5", pickable)
	}
	if long, _ := s.OnHand("CX-10"); long != (Quantity{Length: 42500}) {
		t.Errorf("%s of cable on hand; want 42.5 m", long)
	}
	if got := len(s.TagsOf("CX-10")); got != 3 {
		t.Errorf("%d tags; want 3, quarantine told by its kind", got)
	}
	if none, bins := s.OnHand("PS-12"); !none.IsZero() || len(bins) > 0 {
		t.Errorf("%s of a part nobody ever counted", none)
	}
	if s.Tag("R-2") == nil || s.Tag("R-4") != nil {
		t.Error("tags are found by ID")
	}
}

// A row that a newer count has overtaken is told apart, so that a job whose plan
// is long gone need not be looked for.
func TestIssueRowsSettled(t *testing.T) {
	s := stockCase{files: `
-- counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
reel = [{ tag = "R-1", part = "CX-10", left = "40 m" }]
count = [{ part = "NC-10-NM", qty = 26 }]
-- issue/x-1.toml --
sheet = { on = 2026-11-21, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 4 }]
cut = [{ tag = "R-1", length = "10 m", cable = "C1" }]
-- counts/b.toml --
sheet = { on = 2026-11-22, where = "shop" }
count = [{ part = "NC-10-NM", qty = 22 }]
-- issue/x-2.toml --
sheet = { on = 2026-11-23, job = "x" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 1 }]
`}.book(t)
	want := map[string][]bool{"CX-10": {false}, "NC-10-NM": {true, false}}
	for _, is := range s.IssuesOf("x") {
		var got []bool
		for _, r := range is.Rows {
			got = append(got, r.Settled)
		}
		if !slices.Equal(got, want[is.Part]) {
			t.Errorf("%s: settled %v, want %v", is.Part, got, want[is.Part])
		}
	}
	if got := s.Issued("x", "NC-10-NM"); got != (Quantity{Each: 5}) {
		t.Errorf("%s issued, want 5", got)
	}
	if got := s.Issued("x", "AMP-W"); !got.IsZero() {
		t.Errorf("%s issued of what was never issued", got)
	}
	if got := s.PiecesOf("x", "C1"); len(got) != 1 || got[0].Length != 10000 {
		t.Errorf("pieces %+v", got)
	}
}

// Whatever order files are read in, and rows of one event are written in, the book
// is the same.
func TestBookIgnoresOrderOfFiles(t *testing.T) {
	sheets, orders := stockFiles(t, twoMonths)
	premises, look, today := yardOf(t), stockParts(t), dayOf(t, "2026-12-01")
	want := Book(premises, sheets, orders, look, today).told()
	rnd := rand.New(rand.NewPCG(1, 2))
	for range 50 {
		rnd.Shuffle(len(sheets), func(i, j int) { sheets[i], sheets[j] = sheets[j], sheets[i] })
		if diff := cmp.Diff(want, Book(premises, sheets, orders, look, today).told()); diff != "" {
			t.Fatal(diff)
		}
	}
}

// Rows of one day have no order among themselves; every permutation must end with
// the same stock.
func TestBookIgnoresOrderOfRowsOfOneDay(t *testing.T) {
	rows := []string{
		`[[move]]` + "\n" + `part = "NC-10-NM"` + "\n" + `from = "shop"` + "\n" + `to = "van-1"` + "\n" + `qty = 10`,
		`[[move]]` + "\n" + `part = "NC-10-NM"` + "\n" + `from = "van-1"` + "\n" + `to = "job"` + "\n" + `job = "x"` + "\n" + `qty = 8`,
		`[[move]]` + "\n" + `tag = "R-1"` + "\n" + `from = "shop"` + "\n" + `to = "van-1"`,
		`[[move]]` + "\n" + `tag = "R-1"` + "\n" + `from = "van-1"` + "\n" + `to = "job"` + "\n" + `job = "x"`,
		`[[cut]]` + "\n" + `tag = "R-1"` + "\n" + `length = "12 m"` + "\n" + `job = "x"` + "\n" + `cable = "C1"`,
		`[[cut]]` + "\n" + `tag = "R-1"` + "\n" + `length = "5 m"` + "\n" + `job = "y"` + "\n" + `cable = "C2"`,
	}
	const want = "bin NC-10-NM shop 0\nbin NC-10-NM van-1 2\ntag R-1 CX-10 job x 23 m\nissued x CX-10 35 m\nissued x NC-10-NM 8\nissued y CX-10 5 m\n" +
		"piece x/C1 12 m of R-1\npiece y/C2 5 m of R-1\n"
	permutations(len(rows), func(order []int) {
		src := ""
		for _, i := range order {
			src += rows[i] + "\n"
		}
		got := stockCase{files: "-- counts/a.toml --\nsheet = { on = 2026-11-19, where = \"shop\" }\ncount = [{ part = \"NC-10-NM\", qty = 10 }]\n" +
			"reel = [{ tag = \"R-1\", part = \"CX-10\", left = \"40 m\" }]\n-- move/b.toml --\nsheet = { on = 2026-11-20 }\n" + src}.book(t).told()
		if got != want {
			t.Fatalf("in the order %v:\n%s", order, cmp.Diff(want, got))
		}
	})
}

// permutations calls do with every order of n things.
func permutations(n int, do func([]int)) {
	order := make([]int, 0, n)
	var next func()
	next = func() {
		if len(order) == n {
			do(order)
			return
		}
		for i := range n {
			if !slices.Contains(order, i) {
				order = append(order, i)
				next()
				order = order[:len(order)-1]
			}
		}
	}
	next()
}

// twoMonths is a store's history with everything in it.
const twoMonths = `
-- counts/2026-10-01-shop-jo.toml --
sheet = { on = 2026-10-01, where = "shop", complete = true, by = "jo" }
count = [{ part = "NC-10-NM", qty = 26 }, { part = "AMP-W", qty = 2, serials = ["A1", "A2"] }]
reel = [{ tag = "R-107", part = "CX-10", left = "61.4 m", how = "tape" }, { tag = "R-104", part = "CX-7", left = "12 m", how = "guess" }]
-- orders/PO-31.toml --
order = { vendor = "tern", sent = 2026-10-06, to = "shop" }
line = [
  { part = "CX-10", pack = "76.2 m", packs = 2, due = 2026-11-30, jobs = ["quay-lane"] },
  { part = "NC-10-NM", pack = 25, packs = 2, due = 2026-10-20 },
]
-- in/PO-31-1.toml --
sheet = { on = 2026-10-20, order = "PO-31", where = "dock" }
move = [{ part = "NC-10-NM", qty = 50 }]
reel = [{ tag = "R-110", part = "CX-10", left = "76.2 m", how = "label", sealed = true }]
-- move/2026-10-21-dock-shop.toml --
sheet = { on = 2026-10-21 }
move = [{ part = "NC-10-NM", from = "dock", to = "shop", qty = 50 }, { tag = "R-110", from = "dock", to = "shop" }]
-- issue/mill-cottage-1.toml --
sheet = { on = 2026-10-29, job = "mill-cottage" }
move = [{ part = "NC-10-NM", from = "shop", to = "job", qty = 6 }, { part = "AMP-W", from = "shop", to = "job", qty = 1, serials = ["A1"] }]
cut = [{ tag = "R-107", length = "22.4 m", cable = "C1" }]
-- back/2026-10-30-mill-cottage-jo.toml --
sheet = { on = 2026-10-30, job = "mill-cottage" }
move = [{ part = "NC-10-NM", from = "job", to = "shop", qty = 2 }]
reel = [{ tag = "mill-cottage-C1", part = "CX-10", where = "van-1", left = "3.1 m", of = "R-107", how = "tape" }]
-- issue/quay-lane-1.toml --
sheet = { on = 2026-11-10, job = "quay-lane" }
move = [{ tag = "R-110", from = "shop", to = "job" }]
-- counts/2026-11-14-shop-el.toml --
sheet = { on = 2026-11-14, where = "shop", complete = true }
count = [{ part = "NC-10-NM", qty = 70 }, { part = "AMP-W", qty = 1, serials = ["A2"] }]
reel = [{ tag = "R-107", part = "CX-10", left = "38.6 m", how = "tape" }]
-- back/2026-11-15-quay-lane-jo.toml --
sheet = { on = 2026-11-15, job = "quay-lane" }
move = [{ tag = "R-110", from = "job", to = "shop" }]
reel = [{ tag = "R-110", part = "CX-10", where = "shop", left = "30 m", how = "tape" }]
`

func TestBookTwoMonths(t *testing.T) {
	stockCase{files: twoMonths, want: `
bin AMP-W shop 1
bin CX-10 shop 68.6 m
bin CX-10 van-1 3.1 m
bin NC-10-NM dock 0
bin NC-10-NM shop 70
tag R-104 CX-7 scrap 0 m
tag R-107 CX-10 shop 38.6 m
tag R-110 CX-10 shop 30 m
tag mill-cottage-C1 CX-10 van-1 3.1 m
serial AMP-W A1 [job mill-cottage]
serial AMP-W A2 [shop]
issued mill-cottage AMP-W 1
issued mill-cottage CX-10 19.3 m
issued mill-cottage NC-10-NM 4
issued quay-lane CX-10 46.2 m
piece mill-cottage/C1 19.3 m of R-107
open PO-31 CX-10 76.2 m
open PO-31 NC-10-NM 0
note same-day 2026-11-15-quay-lane-jo:3+2026-11-15-quay-lane-jo:2 CX-10 R-110 shop
note jump 2026-11-14-shop-el:1+2026-10-01-shop-jo:3 CX-7 R-104 shop shop 12 m/0
note jump 2026-11-14-shop-el:2+2026-10-01-shop-jo:2 NC-10-NM shop 72/70
note lost 2026-11-14-shop-el:3+2026-10-01-shop-jo:3 CX-10 R-107 shop shop 39 m/38.6 m
note overdue PO-31:3+PO-31:3 CX-10 shop PO-31 76.2 m/0
`}.check(t)
}

func TestCheckStock(t *testing.T) {
	sheets, orders := stockFiles(t, `
-- stock/counts/a.toml --
sheet = { on = 2026-11-20, where = "shop" }
count = [{ part = "CX-10", qty = 14 }]
reel = [{ tag = "R-1", part = "AMP-W", left = "1 m" }]
move = [{ part = "CX-10", from = "shop", to = "van-1", qty = 1 }]
-- stock/counts/b.toml --
sheet = { on = 2026-11-20, where = "shop", void = "wrong" }
count = [{ part = "CX-10", qty = 14 }]
-- stock/orders/PO-1.toml --
order = { vendor = "tern" }
line = [{ part = "CX-10", packs = 1 }, { part = "AMP-W", packs = 1, pack = "3 m" }]
-- stock/orders/old/po-1.toml --
order = { vendor = "tern" }
`)
	wantTold(t, CheckStock(sheets, orders, stockParts(t)),
		"2: \"CX-10\" is kept by length and is never counted",
		"3: \"AMP-W\" is counted in pieces and has no tag",
		"4: \"CX-10\" is kept by length and is never counted",
		"2: \"CX-10\" is kept by length, but its pack is 1 pieces",
		"2: \"AMP-W\" is counted, but its pack is a length, 3 m",
		"1: there are two files for the order \"po-1\"")
	s := Book(yardOf(t), sheets, orders, stockParts(t), dayOf(t, ""))
	if got := s.told(); got != "" {
		t.Errorf("rows in the wrong unit mean nothing, but the book has\n%s", got)
	}
}
