package bom_test

import (
	"fmt"
	"testing"

	"driploop/bom"
	"driploop/catalog"
)

// instead is the connector that may stand in for NC.
var instead = &catalog.Part{ID: "NI", Kind: val("connector")}

func TestChoice(t *testing.T) {
	look := func(id string) *catalog.Part {
		if id == "NI" {
			return instead
		}
		return partOf(id)
	}
	spare := func(n int64) *catalog.Stock {
		return &catalog.Stock{Today: date("2026-12-01"), Bins: []catalog.Bin{{Part: "NI", Where: "shop", Kind: "shop", Qty: catalog.Quantity{Each: n}}}}
	}
	jobs := func() []*bom.Demand {
		return []*bom.Demand{jobOf("a", "review", "south", "2026-12-15", 3), jobOf("b", "review", "south", "2026-12-16", 3)}
	}
	for _, c := range []struct {
		name, offers string
		stock        *catalog.Stock
		refuse       bool
		want         string
	}{
		{"what is free on the shelf costs nothing", ":t\n t NC*1 2.00 4d\n t NI*1 3.00 4d", spare(3), false, "total 6.00 by [{a NC NI}]"},
		{"a cheaper part", ":t\n t NC*1 2.00 4d\n t NI*1 1.00 4d", spare(0), false, "total 6.00 by [{a NC NI} {b NC NI}]"},
		{"a dearer one", ":t\n t NC*1 2.00 4d\n t NI*1 3.00 4d", spare(0), false, "total 12.00 by []"},
		{"a dearer one that comes in time", ":t\n t NC*1 2.00 20d\n t NI*1 3.00 4d", spare(0), false, "total 18.00 by [{a NC NI} {b NC NI}]"},
		{"a cheaper one that comes too late", ":t\n t NC*1 2.00 4d\n t NI*1 1.00 20d", spare(0), false, "total 12.00 by []"},
		{"one that the plan does not stand", ":t\n t NC*1 2.00 4d\n t NI*1 1.00 4d", spare(6), true, "total 12.00 by []"},
		{"one that is all there is", ":t\n t NI*1 1.00 4d", spare(0), false, "total 6.00 by [{a NC NI} {b NC NI}]"},
	} {
		demands := jobs()
		p, _ := bom.Choice{
			Demands: demands, Swaps: []bom.Swap{{"a", "NC", "NI"}, {"b", "NC", "NI"}},
			Replan: func(job string, _ []bom.Swap) *bom.Demand {
				if c.refuse {
					return nil
				}
				for _, d := range jobs() {
					if d.Job == job {
						d.Needs[0].Part = instead
						return d
					}
				}
				return nil
			},
			Share: func(all []*bom.Demand) *bom.Allocation { return bom.Allocate(all, c.stock, yard(), &bom.House{}) },
			Buy:   func(a *bom.Allocation) *bom.Purchase { return bom.Buy(a, market(c.offers), look, bom.Terms{}) },
		}.Best()
		if got := fmt.Sprintf("total %s by %v", p.Total, p.Swaps); got != c.want {
			t.Errorf("%s: %s, want %s", c.name, got, c.want)
		}
	}
}

// A substitute is put in wherever the plan takes the part, at cable ends that are given as faces too.
func TestSwapPut(t *testing.T) {
	row := func() *bom.Plan {
		return &bom.Plan{
			Devices: []bom.DeviceRow{{ID: "d", Part: val("A")}, {ID: "e", Part: val("B")}},
			Cables:  []bom.CableRow{{ID: "C1", Part: val("CX"), Through: words("A", "B")}},
			Wires:   []bom.WireRow{{ID: "P1", Part: val("B"), Fuse: val("A")}},
			Extras:  []bom.Extra{{Part: val("A")}},
		}
	}
	p := row()
	g := &bom.Graph{Plan: row(), Cables: []*bom.Cable{{ID: "C1", Row: &row().Cables[0], Ends: [2]*bom.Node{{Fit: &catalog.Part{ID: "A"}}, {Fit: &catalog.Part{ID: "B"}}}}}}
	bom.Swap{Job: "j", From: "A", To: "Z"}.Put(p, g)
	ends := p.Cables[0].Ends.V
	got := fmt.Sprint(p.Devices[0].Part.V, p.Devices[1].Part.V, p.Cables[0].Through.V[0].V, p.Cables[0].Through.V[1].V, p.Wires[0].Fuse.V, p.Extras[0].Part.V, ends[0].V.Part, ends[1].Set)
	if got != "ZBZBZZZfalse" {
		t.Errorf("put in: %s", got)
	}
	if p.Wires[0].Part.V != "B" {
		t.Error("a part that was not swapped changed")
	}
}
