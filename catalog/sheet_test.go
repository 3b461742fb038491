package catalog

import (
	"fmt"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// docOf parses a file that must hold no syntax problem.
func docOf(t testing.TB, path, src string) *source.Doc {
	t.Helper()
	d, problems := source.Parse(&source.File{Path: path, Src: []byte(src)})
	for _, p := range problems {
		t.Fatalf("%s:%d: %s", path, p.At.Line(), p.Says)
	}
	return d
}

// told prints problems as "line: what was said", to compare with.
func told(problems []source.Problem) []string {
	var out []string
	for _, p := range problems {
		out = append(out, fmt.Sprintf("%d: %s", p.At.Line(), p.Says))
	}
	return out
}

// wantTold compares problems with the beginnings that a test expects, in order.
func wantTold(t *testing.T, problems []source.Problem, want ...string) {
	t.Helper()
	got := told(problems)
	for i := range max(len(got), len(want)) {
		switch {
		case i >= len(want):
			t.Errorf("not expected: %s", got[i])
		case i >= len(got):
			t.Errorf("missing: %s", want[i])
		case !strings.HasPrefix(got[i], want[i]):
			t.Errorf("got  %s\nwant %s", got[i], want[i])
		}
	}
}

func sheetOf(t testing.TB, path, src string) *Sheet {
	t.Helper()
	s, problems := ReadSheet(docOf(t, path, src))
	for _, p := range told(problems) {
		t.Fatalf("%s:%s", path, p)
	}
	return s
}

func orderOf(t testing.TB, path, src string) *Order {
	t.Helper()
	o, problems := ReadOrder(docOf(t, path, src))
	for _, p := range told(problems) {
		t.Fatalf("%s:%s", path, p)
	}
	return o
}

// oneOfEach is a sheet with every key that a sheet may have.
const oneOfEach = `
[sheet]
on = 2026-11-20
by = "jo"
order = "PO-31"
job = "quay-lane"
where = "shop"
complete = true
because = "the yearly count"

[[count]]
part = "AMP-W"
qty = 2
serials = ["A1", "A2"]
because = "one box dented"
[[count]]
part = "NC-10-NM"
where = "van-1"
qty = 26
on = 2026-11-21
by = "el"

[[reel]]
tag = "R-107"
part = "CX-10"
left = "61.4 m"
how = "tape"
sealed = true
for_part = "CX-7"
[[reel]]
tag = "quay-lane-C1"
part = "CX-10"
where = "van-1"
left = "4.2 m"
of = "R-101"
order = "PO-30"
job = "mill-cottage"

[[move]]
part = "NC-10-NM"
qty = 50
for_part = "NC-10-NF"
[[move]]
part = "AMP-W"
from = "shop"
to = "job"
qty = 1
serials = ["A1"]
[[move]]
tag = "R-107"
from = "shop"
to = "scrap"
job = "mill-cottage"
order = "PO-29"

[[cut]]
tag = "R-107"
length = "18.9 m"
cable = "C1"
`

func TestSheetHeadGoesToRows(t *testing.T) {
	s := sheetOf(t, "stock/counts/2026-11-20-shop-jo.toml", oneOfEach)
	if s.ID != "2026-11-20-shop-jo" {
		t.Errorf("ID %q", s.ID)
	}
	day := func(d int) Moment { return Moment{Day: unit.Date{Year: 2026, Month: 11, Day: d}} }
	checks := []struct {
		what      string
		got, want any
	}{
		{"count without where", s.Counts[0].Where.V, "shop"},
		{"count without on", s.Counts[0].On.V, day(20)},
		{"count without by", s.Counts[0].By.V, "jo"},
		{"count with where", s.Counts[1].Where.V, "van-1"},
		{"count with on", s.Counts[1].On.V, day(21)},
		{"count with by", s.Counts[1].By.V, "el"},
		{"reel without order", s.Reels[0].Order.V, "PO-31"},
		{"reel with order", s.Reels[1].Order.V, "PO-30"},
		{"reel without job", s.Reels[0].Job.V, "quay-lane"},
		{"reel with job", s.Reels[1].Job.V, "mill-cottage"},
		{"reel left", s.Reels[0].Left.V, unit.MM(61400)},
		{"arrival to", s.Moves[0].To.V, "shop"},
		{"arrival", s.Moves[0].Arrival(), true},
		{"issue is no arrival", s.Moves[1].Arrival(), false},
		{"issue job", s.Moves[1].Job.V, "quay-lane"},
		{"tag job", s.Moves[2].Job.V, "mill-cottage"},
		{"cut job", s.Cuts[0].Job.V, "quay-lane"},
		{"row without because keeps none", s.Counts[1].Because.Set, false},
	}
	for _, c := range checks {
		if c.got != c.want {
			t.Errorf("%s: got %v, want %v", c.what, c.got, c.want)
		}
	}
	if line := s.Cuts[0].At.Line(); line != 56 {
		t.Errorf("the cut stands on line 56, not %d", line)
	}
	if line := s.Counts[0].Where.At.Line(); line != 7 {
		t.Errorf("an inherited shelf points at the head on line 7, not %d", line)
	}
}

func TestSheetProblems(t *testing.T) {
	const head = "[sheet]\non = 2026-11-20\n"
	for name, c := range map[string]struct {
		src  string
		want []string
	}{
		"no day":              {"[[count]]\npart = \"A\"\nwhere = \"shop\"\nqty = 1\n", []string{"1: this table has no on"}},
		"no shelf":            {head + "[[count]]\npart = \"A\"\nqty = 1\n", []string{"3: this table has no where"}},
		"negative count":      {head + "[[count]]\npart = \"A\"\nwhere = \"s\"\nqty = -1\n", []string{"6: qty: -1 is outside"}},
		"unknown key":         {head + "[[count]]\npart = \"A\"\nwhere = \"s\"\nqty = 1\nbags = 2\n", []string{"7: nothing reads the key \"bags\""}},
		"complete where":      {"[sheet]\ncomplete = true\n", []string{"1: \"sheet\" has no where", "1: \"sheet\" has no on"}},
		"move by nothing":     {head + "[[move]]\nfrom = \"a\"\nto = \"b\"\n", []string{"3: this table has no part"}},
		"move without qty":    {head + "[[move]]\npart = \"A\"\nfrom = \"a\"\nto = \"b\"\n", []string{"3: this table has no qty"}},
		"move of nothing":     {head + "[[move]]\npart = \"A\"\nfrom = \"a\"\nto = \"b\"\nqty = 0\n", []string{"7: qty: 0 is outside"}},
		"move both":           {head + "[[move]]\npart = \"A\"\ntag = \"R\"\nqty = 1\nfrom = \"a\"\nto = \"b\"\n", []string{"5: the move names a part and a tag"}},
		"tag with qty":        {head + "[[move]]\ntag = \"R\"\nqty = 1\nfrom = \"a\"\nto = \"b\"\n", []string{"5: a tag moves with all"}},
		"one end":             {head + "[[move]]\npart = \"A\"\nqty = 1\nto = \"b\"\n", []string{"3: this table has no from"}},
		"other end":           {head + "[[move]]\npart = \"A\"\nqty = 1\nfrom = \"b\"\n", []string{"3: this table has no to"}},
		"round":               {head + "[[move]]\npart = \"A\"\nqty = 1\nfrom = \"b\"\nto = \"b\"\n", []string{"7: the move ends where it begins"}},
		"job unnamed":         {head + "[[move]]\npart = \"A\"\nqty = 1\nfrom = \"b\"\nto = \"job\"\n", []string{"3: this table has no job"}},
		"from scrap":          {head + "[[move]]\npart = \"A\"\nqty = 1\nfrom = \"scrap\"\nto = \"b\"\n", []string{"6: nothing comes back from scrap"}},
		"tag arrives by move": {head + "order = \"P\"\n[[move]]\ntag = \"R\"\nto = \"b\"\n", []string{"5: a tagged piece arrives by its first reading"}},
		"for_part, no order":  {head + "[[move]]\npart = \"A\"\nqty = 1\nfrom = \"b\"\nto = \"c\"\nfor_part = \"B\"\n", []string{"3: this table has no order"}},
		"cut for a job":       {head + "[[cut]]\ntag = \"R\"\nlength = \"1 m\"\njob = \"j\"\n", []string{"3: this table has no cable"}},
		"cut for nobody":      {head + "[[cut]]\ntag = \"R\"\nlength = \"1 m\"\n", []string{"3: this table has no because"}},
		"waste with reason":   {head + "[[cut]]\ntag = \"R\"\nlength = \"1 m\"\nbecause = \"crushed\"\n", nil},
		"cut of itself":       {head + "[[reel]]\ntag = \"R\"\npart = \"A\"\nwhere = \"s\"\nleft = \"1 m\"\nof = \"R\"\n", []string{"8: the piece \"R\" is said to be cut from itself"}},
		"more serials":        {head + "[[count]]\npart = \"A\"\nwhere = \"s\"\nqty = 1\nserials = [\"1\", \"2\"]\n", []string{"7: 2 serial numbers stand for 1 pieces"}},
		"serial twice":        {head + "[[count]]\npart = \"A\"\nwhere = \"s\"\nqty = 2\nserials = [\"1\", \"1\"]\n", []string{"7: the serial number \"1\" stands twice"}},
		"how":                 {head + "[[reel]]\ntag = \"R\"\npart = \"A\"\nwhere = \"s\"\nleft = \"1 m\"\nhow = \"tap\"\n", []string{"8: how: \"tap\" is not one of"}},
	} {
		t.Run(name, func(t *testing.T) {
			_, problems := ReadSheet(docOf(t, "stock/counts/x.toml", c.src))
			wantTold(t, problems, c.want...)
		})
	}
}

const order31 = `
[order]
vendor = "tern"
sent = 2026-11-06
to = "shop"
[[line]]
part = "CX-10"
code = "T-40077"
pack = "152.4 m"
packs = 2
price = "318.00"
due = 2026-11-16
jobs = ["quay-lane"]
dropped = 1
because = "the maker is out of it"
[[line]]
brings = { AMP-W = 1, PS-12 = 2 }
packs = 1
`

func TestOrderReads(t *testing.T) {
	_, o, problems := ReadStock(docOf(t, "stock/orders/PO-31.toml", order31))
	wantTold(t, problems)
	if o.ID != "PO-31" || o.Vendor.V != "tern" || o.To.V != "shop" {
		t.Errorf("read %q, %q, %q", o.ID, o.Vendor.V, o.To.V)
	}
	l := o.Lines[0]
	if l.Holds() != (Pack{Length: 152400}) || l.Packs.V != 2 || l.Dropped.V != 1 || l.Price.V != 3180000 || l.Jobs.V[0].V != "quay-lane" {
		t.Errorf("line 1 read as %+v", l)
	}
	if b := o.Lines[1].Brings; len(b) != 2 || b[1].Name != "PS-12" || b[1].Val.V != 2 {
		t.Errorf("line 2 brings %+v", b)
	}
}

func TestOrderProblems(t *testing.T) {
	for name, c := range map[string]struct {
		src  string
		want []string
	}{
		"no vendor":      {"[order]\n", []string{"1: \"order\" has no vendor"}},
		"nothing sold":   {"[order]\nvendor = \"v\"\n[[line]]\npacks = 1\n", []string{"3: this table has no part"}},
		"both":           {"[order]\nvendor = \"v\"\n[[line]]\npart = \"A\"\nbrings = {B = 1}\npacks = 1\n", []string{"3: the line names a part and brings others"}},
		"dropped, why":   {"[order]\nvendor = \"v\"\n[[line]]\npart = \"A\"\npacks = 1\ndropped = 1\n", []string{"3: this table has no because"}},
		"dropped beyond": {"[order]\nvendor = \"v\"\n[[line]]\npart = \"A\"\npacks = 1\ndropped = 2\nbecause = \"x\"\n", []string{"6: 2 packs are dropped of 1 ordered"}},
		"empty pack":     {"[order]\nvendor = \"v\"\n[[line]]\npart = \"A\"\npacks = 1\npack = \"0 m\"\n", []string{"6: pack: a pack holds some length"}},
	} {
		t.Run(name, func(t *testing.T) {
			_, _, problems := ReadStock(docOf(t, "stock/orders/x.toml", c.src))
			wantTold(t, problems, c.want...)
		})
	}
}

// The record of a format and what its bind function asks for must be the same
// list, or the documentation drifts from the reader.
func TestStockFormatsDescribeThemselves(t *testing.T) {
	for _, c := range []struct {
		name string
		rec  *source.Record
		keys string
	}{
		{"sheet", DescribeSheet(), "sheet count reel move cut"},
		{"order", DescribeOrder(), "order line"},
		{"offers", DescribeOffers(), "vendor offer"},
	} {
		var got []string
		for _, k := range c.rec.Keys {
			got = append(got, k.Name)
			if k.Sub == nil || len(k.Sub.Keys) == 0 || k.Doc == "" {
				t.Errorf("%s: %s describes nothing below it", c.name, k.Name)
			}
		}
		if s := strings.Join(got, " "); s != c.keys {
			t.Errorf("%s describes %q, want %q", c.name, s, c.keys)
		}
	}
}
