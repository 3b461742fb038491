package bom_test

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

func val[T any](v T) source.Val[T] { return source.Val[T]{V: v, Set: true} }

func words(list ...string) source.Val[catalog.Words] {
	var out catalog.Words
	for _, w := range list {
		out = append(out, val(w))
	}
	return val(out)
}

func date(s string) unit.Date {
	d, err := unit.ParseDate(s)
	if err != nil {
		panic(err)
	}
	return d
}

var (
	plug = &catalog.Part{ID: "NC", Kind: val("connector")}
	coax = &catalog.Part{ID: "CX", Kind: val("cable")}
)

// yard is a shop, two vans, a dock and a crew for each van.
func yard() *catalog.Premises {
	return &catalog.Premises{
		Shelves: []catalog.Shelf{{ID: "shop", Kind: val("shop")}, {ID: "van-1", Kind: val("van")}, {ID: "van-2", Kind: val("van")}, {ID: "dock", Kind: val("inbound")}},
		Crews: []catalog.Crew{
			{ID: "north", Shelves: words("van-1", "shop")},
			{ID: "south", Shelves: words("shop")},
			{ID: "west", Shelves: words("van-2", "shop")},
		},
	}
}

// jobOf is a demand for connectors; day may be empty.
func jobOf(id, stage, crew, day string, plugs int, lengths ...float64) *bom.Demand {
	d := &bom.Demand{Job: id, Path: "plans/" + id + ".toml", Stage: stage, Crew: crew}
	if day != "" {
		d.On = date(day)
	}
	if len(lengths) > 0 {
		n := bom.Need{Part: coax}
		for i, l := range lengths {
			mm := unit.MM(l * 1000)
			n.Pieces = append(n.Pieces, bom.Piece{Line: fmt.Sprintf("C%d", i+1), Length: mm, Bare: mm - 300})
		}
		d.Needs = append(d.Needs, n)
	}
	if plugs > 0 {
		d.Needs = append(d.Needs, bom.Need{Part: plug, Each: plugs})
	}
	return d
}

func bin(where, kind string, n int64) catalog.Bin {
	return catalog.Bin{Part: "NC", Where: where, Kind: kind, Qty: catalog.Quantity{Each: n}}
}

func tag(id, where, kind string, metres float64) catalog.Tag {
	return catalog.Tag{ID: id, Part: "CX", Where: where, Kind: kind, Left: unit.MM(metres * 1000)}
}

func onOrder(id, part string, each int64, due string, jobs ...string) catalog.Open {
	l := &catalog.OrderLine{Part: val(part), Packs: val(int(each)), Jobs: words(jobs...)}
	if due != "" {
		l.Due = val(date(due))
	}
	return catalog.Open{Order: &catalog.Order{ID: id, To: val("shop")}, Line: l, Part: part, Left: catalog.Quantity{Each: each}}
}

func reelOnOrder(id string, metres float64, packs int, due string, jobs ...string) catalog.Open {
	o := onOrder(id, "CX", int64(packs), due, jobs...)
	pack := unit.MM(metres * 1000)
	o.Line.Pack = val(catalog.Pack{Length: pack})
	o.Left = catalog.Quantity{Length: pack * unit.MM(packs)}
	return o
}

// shared prints an allocation: who holds what from where, and what is short.
func shared(a *bom.Allocation) string {
	var out []string
	for _, c := range a.Claims {
		line := c.Job() + " " + c.Part().ID + ":"
		for _, h := range c.Held {
			if c.Part().CutStock() {
				line += fmt.Sprintf(" %s<%s", h.Piece.Line, h.Supply.Name())
			} else {
				line += fmt.Sprintf(" %d<%s", h.Each, h.Supply.Name())
			}
		}
		if c.Short > 0 {
			line += fmt.Sprintf(" short %d", c.Short)
		}
		for _, p := range c.ShortLines {
			line += " short " + p.Line
		}
		for _, h := range c.Late {
			line += fmt.Sprintf(" late %s%s<%s", strings.Trim(fmt.Sprint(h.Each), "0"), h.Piece.Line, h.Supply.Name())
		}
		out = append(out, line)
	}
	return strings.Join(out, "\n")
}

func share(stock *catalog.Stock, jobs ...*bom.Demand) *bom.Allocation {
	stock.Today = date("2026-12-01")
	return bom.Allocate(jobs, stock, yard(), &bom.House{})
}

func TestAllocate(t *testing.T) {
	reserve := func(d *bom.Demand, r bom.Reserve) *bom.Demand {
		d.Reserves = append(d.Reserves, r)
		return d
	}
	open := func(o ...catalog.Open) *catalog.Stock { return &catalog.Stock{Open: o} }
	bins := func(b ...catalog.Bin) *catalog.Stock { return &catalog.Stock{Bins: b} }
	tags := func(g ...catalog.Tag) *catalog.Stock { return &catalog.Stock{Tags: g} }
	for _, c := range []struct {
		name  string
		stock *catalog.Stock
		jobs  []*bom.Demand
		want  string
	}{
		{"a crew takes from its own van first", bins(bin("shop", "shop", 5), bin("van-1", "van", 2)),
			[]*bom.Demand{jobOf("a", "review", "north", "2026-12-10", 4)}, "a NC: 2<van-1 2<shop"},
		{"no crew takes from another's van", bins(bin("shop", "shop", 1), bin("van-1", "van", 9)),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-10", 4)}, "a NC: 1<shop short 3"},
		{"without a crew, every shop and no van", bins(bin("shop", "shop", 1), bin("van-1", "van", 9)),
			[]*bom.Demand{jobOf("a", "review", "", "2026-12-10", 4)}, "a NC: 1<shop short 3"},
		{"construction goes before an earlier review", bins(bin("shop", "shop", 4)),
			[]*bom.Demand{jobOf("early", "review", "south", "2026-12-02", 4), jobOf("built", "construction", "south", "2026-12-20", 4)},
			"built NC: 4<shop\nearly NC: short 4"},
		{"then the date, then no date, then the name", bins(bin("shop", "shop", 1)),
			[]*bom.Demand{jobOf("d", "review", "south", "", 1), jobOf("c", "review", "south", "2026-12-09", 1), jobOf("b", "review", "south", "2026-12-08", 1), jobOf("a", "review", "south", "2026-12-09", 1)},
			"b NC: 1<shop\na NC: short 1\nc NC: short 1\nd NC: short 1"},
		{"a job whose date is long past goes last", bins(bin("shop", "shop", 1)),
			[]*bom.Demand{jobOf("dead", "construction", "south", "2026-10-31", 1), jobOf("live", "review", "south", "2026-12-09", 1)},
			"live NC: 1<shop\ndead NC: short 1"},
		{"on its last day it still goes first", bins(bin("shop", "shop", 1)),
			[]*bom.Demand{jobOf("dead", "construction", "south", "2026-11-01", 1), jobOf("live", "review", "south", "2026-12-09", 1)},
			"dead NC: 1<shop\nlive NC: short 1"},
		{"drafts, finished and cancelled jobs claim nothing", bins(bin("shop", "shop", 1)),
			[]*bom.Demand{jobOf("a", "draft", "south", "", 1), jobOf("b", "as-built", "south", "", 1), jobOf("c", "cancelled", "south", "", 1)}, ""},
		{"goods on the dock count, in quarantine they do not", bins(bin("dock", "inbound", 2), bin("returns", "quarantine", 9)),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-10", 3)}, "a NC: 2<dock short 1"},
		{"what comes in time serves, on the day too", open(onOrder("PO-1", "NC", 4, "2026-12-09")),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-10", 3)}, "a NC: 3<PO-1"},
		{"what comes a day later is late", open(onOrder("PO-1", "NC", 2, "2026-12-10")),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-10", 3)}, "a NC: short 3 late 2<PO-1"},
		{"an overdue line is expected five working days from now", open(onOrder("PO-1", "NC", 2, "2026-11-20")),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-08", 1), jobOf("b", "review", "south", "2026-12-09", 1)},
			"a NC: short 1 late 1<PO-1\nb NC: 1<PO-1"},
		{"an order line goes to the jobs it was bought for", &catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 2)}, Open: []catalog.Open{onOrder("PO-1", "NC", 3, "2026-12-04", "b")}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 4), jobOf("b", "review", "south", "2026-12-09", 2)},
			"a NC: 2<shop 1<PO-1 short 1\nb NC: 2<PO-1"},
		{"nobody is short while others can move over", bins(bin("shop", "shop", 2), bin("van-1", "van", 2)),
			[]*bom.Demand{jobOf("n", "construction", "north", "2026-12-08", 2), jobOf("s", "review", "south", "2026-12-09", 2)},
			"n NC: 2<van-1\ns NC: 2<shop"},
		{"the first moves over to what comes in time for it", &catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 2)}, Open: []catalog.Open{onOrder("PO-1", "NC", 2, "2026-12-10")}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-20", 2), jobOf("b", "review", "south", "2026-12-08", 2)},
			"a NC: 2<PO-1\nb NC: 2<shop"},
		{"what was issued is claimed no more", &catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 9)}, Issues: []catalog.Issue{{Job: "a", Part: "NC", Net: catalog.Quantity{Each: 3}}}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-20", 4)}, "a NC: 1<shop"},
		{"a reserve goes before all", bins(bin("shop", "shop", 4)),
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 4), reserve(jobOf("b", "review", "south", "2026-12-09", 3), bom.Reserve{Part: val("NC"), Qty: val(3), Until: val(date("2026-12-01"))})},
			"a NC: 1<shop short 3\nb NC: 3<shop"},
		{"but not when its day has passed", bins(bin("shop", "shop", 4)),
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 4), reserve(jobOf("b", "review", "south", "2026-12-09", 3), bom.Reserve{Part: val("NC"), Qty: val(3), Until: val(date("2026-11-30"))})},
			"a NC: 4<shop\nb NC: short 3"},
		{"cable is short by piece", tags(tag("R-1", "shop", "shop", 45), tag("R-2", "shop", "shop", 23.6)),
			[]*bom.Demand{jobOf("mill", "construction", "south", "2026-12-08", 0, 22.4), jobOf("ferry", "review", "south", "2026-12-09", 0, 41.3)},
			"mill CX: C1<R-2\nferry CX: C1<R-1"},
		{"and the later job's piece where one must be", tags(tag("R-1", "shop", "shop", 52), tag("R-2", "shop", "shop", 16.6)),
			[]*bom.Demand{jobOf("mill", "construction", "south", "2026-12-08", 0, 22.4), jobOf("ferry", "review", "south", "2026-12-09", 0, 41.3)},
			"mill CX: C1<R-1\nferry CX: short C1"},
		{"of a guess half a metre is kept back", &catalog.Stock{Tags: []catalog.Tag{{ID: "R-1", Part: "CX", Where: "shop", Kind: "shop", Left: 50000, How: "guess"}}},
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-08", 0, 49.6)}, "a CX: short C1"},
		{"a reel is reserved for a piece", tags(tag("R-1", "shop", "shop", 45), tag("R-2", "shop", "shop", 23.6)),
			[]*bom.Demand{reserve(jobOf("mill", "construction", "south", "2026-12-08", 0, 22.4), bom.Reserve{Tag: val("R-1"), Cable: val("C1"), Until: val(date("2026-12-05"))}), jobOf("ferry", "review", "south", "2026-12-09", 0, 41.3)},
			"mill CX: C1<R-1\nferry CX: short C1"},
		{"a reel reserved for a job is closed to others", tags(tag("R-1", "shop", "shop", 45)),
			[]*bom.Demand{jobOf("mill", "construction", "south", "2026-12-08", 0, 5), reserve(jobOf("ferry", "review", "south", "2026-12-09", 0, 20), bom.Reserve{Tag: val("R-1"), Until: val(date("2026-12-05"))})},
			"mill CX: short C1\nferry CX: C1<R-1"},
		{"a reel too short for what is reserved on it lets go", tags(tag("R-1", "shop", "shop", 30), tag("R-2", "shop", "shop", 30)),
			[]*bom.Demand{reserve(reserve(jobOf("a", "review", "south", "2026-12-08", 0, 20, 20), bom.Reserve{Tag: val("R-1"), Cable: val("C1"), Until: val(date("2026-12-05"))}), bom.Reserve{Tag: val("R-1"), Cable: val("C2"), Until: val(date("2026-12-05"))})},
			"a CX: C1<R-1 C2<R-2"},
		{"reels of an order, a pack each", open(reelOnOrder("PO-1", 30, 2, "2026-12-04")),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-08", 0, 20, 20, 20)}, "a CX: C1<PO-1 C2<PO-1 short C3"},
		{"what is here goes before what is to come, where nobody goes short for it", &catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 25)}, Open: []catalog.Open{reelOnOrder("PO-1", 60, 1, "2026-12-04")}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 0, 20), jobOf("b", "review", "south", "2026-12-09", 0, 20)},
			"a CX: C1<R-1\nb CX: C1<PO-1"},
		{"but the first waits where only what is here comes in time for another", &catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 25)}, Open: []catalog.Open{reelOnOrder("PO-1", 60, 1, "2026-12-08")}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-11", 0, 20), jobOf("b", "review", "south", "2026-12-07", 0, 20)},
			"a CX: C1<PO-1\nb CX: C1<R-1"},
		{"a reel that comes too late", open(reelOnOrder("PO-1", 30, 1, "2026-12-09")),
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-08", 0, 20)}, "a CX: short C1 late C1<PO-1"},
		{"a reel bought for one job", &catalog.Stock{Open: []catalog.Open{reelOnOrder("PO-1", 30, 1, "2026-12-04", "b")}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 0, 20, 9), jobOf("b", "review", "south", "2026-12-09", 0, 20)},
			"a CX: C2<PO-1 short C1\nb CX: C1<PO-1"},
		{"a cut for the line is an issue", &catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 45)}, Pieces: []catalog.Piece{{Job: "a", Cable: "C1", Tag: "R-1", Part: "CX", Length: 20000}},
			Issues: []catalog.Issue{{Job: "a", Part: "CX", Net: catalog.Quantity{Length: 20000}}}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 0, 20, 20)}, "a CX: C2<R-1"},
		{"a reel issued whole serves the lines as far as it goes", &catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 45)},
			Issues: []catalog.Issue{{Job: "a", Part: "CX", Net: catalog.Quantity{Length: 41000}}}},
			[]*bom.Demand{jobOf("a", "construction", "south", "2026-12-08", 0, 20, 20, 20)}, "a CX: C3<R-1"},
	} {
		if got := shared(share(c.stock, c.jobs...)); got != c.want {
			t.Errorf("%s:\n%s\nwant\n%s", c.name, got, c.want)
		}
	}
}
