package show

import (
	"context"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules"
)

// orderBook is the purchase of the demo.
func orderBook(t *testing.T, firm *rules.Firm) *OrderBook {
	t.Helper()
	d, err := firm.Demands(context.Background())
	if err != nil {
		t.Fatal(err)
	}
	a := firm.Allocate(d)
	return &OrderBook{Buying: &Buying{Purchase: bom.Buy(a, firm.Offers, firm.Catalog.Look, bom.Terms{}), Currency: "USD"},
		Allocation: a, Premises: &firm.Workspace.Premises, Offers: firm.Offers}
}

func sheetOf(t *testing.T, all []bom.Sheet, key string) *bom.Sheet {
	t.Helper()
	for i := range all {
		if all[i].Key == key {
			return &all[i]
		}
	}
	t.Fatalf("there is no sheet %s", key)
	return nil
}

func cellOf(t *testing.T, s *bom.Sheet, row, column string) bom.Cell {
	t.Helper()
	r, c := s.RowOf(row), s.Column(column)
	if r < 0 || c < 0 {
		t.Fatalf("%s has no %s of %s", s.Key, column, row)
	}
	return s.Rows[r].Cells[c]
}

// The sheets of a purchase add up to the purchase.
func TestOrderBookAddsUp(t *testing.T) {
	o := orderBook(t, demo(t))
	if len(o.Freight) < 2 {
		t.Fatal("the demo buys from fewer than two vendors")
	}
	all := o.Sheets()
	var lines int
	for _, f := range o.Freight {
		s := sheetOf(t, all, OrderKey(f.Vendor.ID))
		if got := cellOf(t, s, "goods", ColumnTotal).Money; got != f.Goods {
			t.Errorf("%s: the goods are %s, want %s", s.Name, got, f.Goods)
		}
		if got := cellOf(t, s, "total", ColumnTotal).Money; got != f.Goods+f.Amount {
			t.Errorf("%s: with freight it is %s, want %s", s.Name, got, f.Goods+f.Amount)
		}
		lines += len(o.LinesFor(f.Vendor))
	}
	if lines != len(o.Rows) {
		t.Errorf("%d lines stand on order sheets, want %d", lines, len(o.Rows))
	}
	summary := sheetOf(t, all, "summary")
	if got := cellOf(t, summary, "total", "together").Money; got != o.Total {
		t.Errorf("the summary comes to %s, want %s", got, o.Total)
	}
	var byDay unit.Money
	for i := range summary.Rows {
		if what := summary.Rows[i].Cells[0].Words; strings.HasPrefix(what, "order ") || what == "no day asks for it" {
			byDay += summary.Rows[i].Cells[summary.Column("goods")].Money
		}
	}
	if goods := cellOf(t, summary, "total", "goods").Money; byDay != goods {
		t.Errorf("by days the goods come to %s, want %s", byDay, goods)
	}
}

// What a claim takes is what the demand sheet says where it comes from.
func TestDemandAddsUp(t *testing.T) {
	o := orderBook(t, demo(t))
	s := sheetOf(t, o.Sheets(), "demand")
	if len(s.Rows) != len(o.Allocation.Claims) {
		t.Errorf("%d rows for %d claims", len(s.Rows), len(o.Allocation.Claims))
	}
	bought := 0
	for i := range s.Rows {
		cells := s.Rows[i].Cells
		at := func(title string) bom.Cell { return cells[s.Column(title)] }
		var count int64
		var length unit.MM
		for _, title := range []string{"from shelves", "from orders", "bought now", "not yet"} {
			count, length = count+at(title).Count, length+at(title).MM
		}
		if count != at("takes").Count || length != at("takes").MM {
			t.Errorf("%s: %d and %s of %+v", s.Rows[i].Key, count, length, at("takes"))
		}
		if at("bought now").Kind != bom.KindBlank {
			bought++
		}
	}
	if bought == 0 {
		t.Error("nothing is bought")
	}
}

// Every row that is filled in can be told from all others, and every formula refers
// to columns that are there.
func TestSheetsCanBeReadBack(t *testing.T) {
	firm := demo(t)
	o := orderBook(t, firm)
	stock := &Stock{Allocation: o.Allocation, Look: firm.Catalog.Look}
	all := append(o.Sheets(), stock.CountSheets("shop", true)...)
	seen := map[string]bool{}
	for i := range all {
		s := &all[i]
		if seen[s.Key] {
			t.Errorf("two sheets are called %s", s.Key)
		}
		seen[s.Key] = true
		asks := slices.ContainsFunc(s.Columns, func(c bom.Column) bool { return c.Ask != nil })
		keys, titles := map[string]bool{}, map[string]bool{}
		for _, c := range s.Columns {
			if titles[c.Title] {
				t.Errorf("%s has two columns %s", s.Key, c.Title)
			}
			titles[c.Title] = true
		}
		for _, r := range s.Rows {
			if asks && r.Role == bom.PlainRow && r.Key == "" {
				t.Errorf("a row of %s has no key: %+v", s.Key, r)
			}
			if r.Key != "" && keys[r.Key] {
				t.Errorf("two rows of %s are called %s", s.Key, r.Key)
			}
			keys[r.Key] = true
		}
	}
}

// A blind sheet does not say what the book has; the other does.
func TestCountSheets(t *testing.T) {
	firm := demo(t)
	o := orderBook(t, firm)
	stock := &Stock{Allocation: o.Allocation, Look: firm.Catalog.Look}
	open := stock.CountSheets("shop", false)
	blind := stock.CountSheets("shop", true)
	if len(open) != 2 || len(blind) != 2 {
		t.Fatalf("%d and %d sheets for the shop", len(open), len(blind))
	}
	for i := range open {
		if open[i].Column("by the book") < 0 || blind[i].Column("by the book") >= 0 {
			t.Errorf("%s: the book's figures stand on the wrong sheet", open[i].Key)
		}
	}
	s := &blind[0]
	row := s.Rows[s.RowOf("NC-10-NM")]
	all := row.Cells[s.Column(ColumnAll)]
	if all.Kind != bom.KindBlank || all.Live == nil || !slices.Equal(all.Live.Of, []string{"bags of 25", "bags of 10", ColumnLoose}) || !slices.Equal(all.Live.Per, []int64{25, 10, 1}) {
		t.Errorf("the bags of NC-10-NM add up by %+v", all.Live)
	}
	if other := s.Rows[s.RowOf("AMP-W-65")]; !other.Cells[s.Column("bags of 25")].Shut {
		t.Error("an amplifier is asked for by the bag")
	}
	if none := stock.CountSheets("returns", false); len(none) != 0 {
		t.Errorf("a shelf without anything has %d sheets", len(none))
	}
}
