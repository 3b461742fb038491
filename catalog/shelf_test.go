package catalog

import (
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// yard is the firm whose stock the tests book.
const yard = `
[shelf.shop]
kind = "shop"
address = ["Saltmarsh Signal", "4 Ropewalk Yard"]
[shelf.van-1]
kind = "van"
[shelf.dock]
kind = "inbound"
[shelf.returns]
kind = "quarantine"
[crew.north]
shelves = ["van-1", "shop"]
tools = ["crimp die 10.9"]
[calendar]
week = ["mon", "tue", "wed", "thu", "fri"]
closed = [2026-12-25]
[[keep]]
part = "NC-10-NM"
at = "van-1"
least = 6
fill = 12
[[keep]]
part = "CX-10"
at = "shop"
least = "40 m"
fill = "150 m"
`

func premisesOf(t testing.TB, src string) (*Premises, []source.Problem) {
	t.Helper()
	p := &Premises{}
	return p, source.Read(docOf(t, "driploop.toml", src), p.Keys)
}

func yardOf(t testing.TB) *Premises {
	t.Helper()
	p, problems := premisesOf(t, yard)
	wantNone(t, problems)
	return p
}

func TestPremisesRead(t *testing.T) {
	p := yardOf(t)
	wantNone(t, p.Check(stockParts(t)))
	if s := p.Shelf("dock"); s == nil || s.Kind.V != "inbound" {
		t.Errorf("dock read as %+v", s)
	}
	if c := p.Crew("north"); c == nil || c.Shelves.V[0].V != "van-1" || c.Tools.V[0].V != "crimp die 10.9" {
		t.Errorf("north read as %+v", c)
	}
	if k := p.Keeps[0]; k.Least.V != (Quantity{Each: 6}) || k.Fill.V != (Quantity{Each: 12}) {
		t.Errorf("level read as %+v", k)
	}
	if k := p.Keeps[1]; k.Least.V != (Quantity{Length: 40000}) {
		t.Errorf("level read as %+v", k)
	}
	if p.Shelf("shed") != nil || p.Crew("west") != nil {
		t.Error("found what does not exist")
	}
}

func TestPremisesProblems(t *testing.T) {
	for name, c := range map[string]struct {
		src  string
		want []string
	}{
		"called job":     {"[shelf.Job]\nkind = \"shop\"\n", []string{"1: a shelf cannot be called \"Job\""}},
		"called scrap":   {"[shelf.scrap]\nkind = \"shop\"\n", []string{"1: a shelf cannot be called \"scrap\""}},
		"no kind":        {"[shelf.a]\n", []string{"1: \"a\" has no kind"}},
		"crew's shelf":   {"[shelf.van-1]\nkind = \"van\"\n[crew.n]\nshelves = [\"van1\"]\n", []string{"4: no shelf is called \"van1\""}},
		"level's shelf":  {"[[keep]]\npart = \"A\"\nat = \"b\"\nleast = 1\nfill = 2\n", []string{"3: no shelf is called \"b\""}},
		"fill below":     {"[shelf.b]\nkind = \"van\"\n[[keep]]\npart = \"A\"\nat = \"b\"\nleast = 3\nfill = 2\n", []string{"7: fill 2 is less than least 3"}},
		"no working day": {"[calendar]\nweek = []\n", []string{"2: the week has no working day"}},
		"two levels": {"[shelf.b]\nkind = \"van\"\n[[keep]]\npart = \"A\"\nat = \"b\"\nleast = 1\nfill = 2\n[[keep]]\npart = \"A\"\nat = \"b\"\nleast = 1\nfill = 3\n",
			[]string{"8: \"A\" has two reorder levels at \"b\""}},
	} {
		t.Run(name, func(t *testing.T) {
			_, problems := premisesOf(t, c.src)
			for i := len(problems) - 1; i >= 0; i-- {
				if problems[i].At.Path() != "driploop.toml" {
					t.Errorf("no place: %+v", problems[i])
				}
			}
			wantTold(t, problems, c.want...)
		})
	}
}

func TestKeepSuitsItsPart(t *testing.T) {
	p, problems := premisesOf(t, "[shelf.b]\nkind = \"van\"\n[[keep]]\npart = \"CX-10\"\nat = \"b\"\nleast = 0\nfill = 2\n[[keep]]\npart = \"NOPE\"\nat = \"b\"\nleast = 1\nfill = 2\n")
	wantNone(t, problems)
	wantTold(t, p.Check(stockParts(t)), "7: 2 does not suit \"CX-10\"", "9: no catalog has the part \"NOPE\"")
}

func TestAddWorkdays(t *testing.T) {
	p := yardOf(t)
	day := func(m, d int) unit.Date { return unit.Date{Year: 2026, Month: m, Day: d} }
	for _, c := range []struct {
		from unit.Date
		n    int
		want unit.Date
	}{
		{day(12, 1), 0, day(12, 1)},   // a Tuesday
		{day(12, 5), 0, day(12, 5)},   // a Saturday is day 0 all the same
		{day(12, 4), 1, day(12, 7)},   // over the weekend
		{day(12, 5), 1, day(12, 7)},   // from the weekend
		{day(12, 24), 1, day(12, 28)}, // over the closed day and the weekend
		{day(12, 28), -1, day(12, 24)},
		{day(12, 7), -6, day(11, 27)},
	} {
		if got := p.Calendar.AddWorkdays(c.from, c.n); got != c.want {
			t.Errorf("%s and %d working days is %s, want %s", c.from, c.n, got, c.want)
		}
	}
	var none Calendar
	if got := none.AddWorkdays(day(12, 24), 1); got != day(12, 25) {
		t.Errorf("without a calendar the day after 24 December is %s", got)
	}
	var six Calendar
	source.Read(docOf(t, "driploop.toml", "week = [\"sat\"]\n"), six.keys)
	if got := six.AddWorkdays(day(12, 1), 2); got != day(12, 12) {
		t.Errorf("the second Saturday after 1 December is %s", got)
	}
}
