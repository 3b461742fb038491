package bom_test

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
)

// A reorder level of a van is filled from what nobody holds before anything is
// bought for it, and what is on order for it is not bought again.
func TestLevelsAreFilledFromWhatIsFree(t *testing.T) {
	vanLevel := catalog.Keep{Part: val("NC"), Shelf: val("van-1"), Least: val(catalog.Quantity{Each: 6}), Fill: val(catalog.Quantity{Each: 12})}
	shopLevel := level("NC", 4, 5)
	for _, c := range []struct {
		name  string
		stock catalog.Stock
		keeps []catalog.Keep
		jobs  []*bom.Demand
		want  string
	}{
		{"nothing is free", catalog.Stock{}, []catalog.Keep{vanLevel}, nil, "buy 12"},
		{"at the level nothing is asked for", catalog.Stock{Bins: []catalog.Bin{bin("van-1", "van", 6)}}, []catalog.Keep{vanLevel}, nil, ""},
		{"below it the shop has some", catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 4), bin("van-1", "van", 5)}}, []catalog.Keep{vanLevel}, nil, "4<shop buy 3"},
		{"but not what a job holds", catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 4), bin("van-1", "van", 5)}}, []catalog.Keep{vanLevel},
			[]*bom.Demand{jobOf("a", "review", "south", "2026-12-15", 3)}, "1<shop buy 6"},
		{"the dock and an order serve as well", catalog.Stock{Bins: []catalog.Bin{bin("dock", "inbound", 4)}, Open: []catalog.Open{onOrder("PO-1", "NC", 20, "2026-12-04")}}, []catalog.Keep{vanLevel}, nil, "4<dock 8<PO-1"},
		{"another van does not", catalog.Stock{Bins: []catalog.Bin{bin("van-2", "van", 40)}}, []catalog.Keep{vanLevel}, nil, "buy 12"},
		{"the shop keeps its own level", catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 9)}}, []catalog.Keep{vanLevel, shopLevel}, nil, "4<shop buy 8"},
		{"and has nothing to spare below it", catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 3)}}, []catalog.Keep{vanLevel, shopLevel}, nil, "buy 14"},
		{"two vans share what there is", catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 15)}},
			[]catalog.Keep{vanLevel, {Part: val("NC"), Shelf: val("van-2"), Least: val(catalog.Quantity{Each: 1}), Fill: val(catalog.Quantity{Each: 5})}}, nil, "12<shop 3<shop buy 2"},
	} {
		c.stock.Today = date("2026-12-01")
		premises := yard()
		premises.Keeps = c.keeps
		a := bom.Allocate(c.jobs, &c.stock, premises, &bom.House{})
		p := bom.Buy(a, market(":t\n t NC*1 2.00"), partOf, bom.Terms{})
		var got []string
		for _, m := range p.Moves {
			got = append(got, fmt.Sprintf("%d<%s", m.Each, m.From.Name()))
		}
		for _, r := range p.Rows {
			got = append(got, fmt.Sprintf("buy %d", r.Packs))
		}
		if have := strings.Join(got, " "); have != c.want {
			t.Errorf("%s: %s, want %s", c.name, have, c.want)
		}
	}
}
