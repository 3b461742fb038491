package filled

import (
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// sold is a workspace with offers of every sort, and an order that is out.
func sold(t *testing.T) *rules.Firm {
	t.Helper()
	dir := t.TempDir()
	for name, text := range map[string]string{
		"driploop.toml":          "[workspace]\n[shelf.shop]\nkind = \"shop\"\n",
		"stock/orders/PO-1.toml": "[order]\nvendor = \"tern\"\nsent = 2026-11-01\n[[line]]\npart = \"GEN-CX-10\"\npack = \"30 m\"\npacks = 1\n",
		"offers/o.toml": `[vendor.tern]
[[offer]]
part = "GEN-NM-CX10-CLAMP"
vendor = "tern"
code = "T | 4"
pack = 10
price = "62.00"
[[offer]]
part = "GEN-CX-10"
vendor = "tern"
code = "T-CUT"
cut_from = "10 m"
cut_to = "150 m"
price = "2.95"
[[offer]]
brings = {GEN-AMP-5 = 1, GEN-PS-12 = 2}
vendor = "tern"
code = "BOX"
price = "500.00"
`} {
		name = filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	tree, err := source.Disk(dir)
	if err != nil {
		t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	return firm
}

// orderBook is a workbook with one order sheet. Facts are key=value; of a row the key
// is followed by title=value. =x is a formula.
func orderBook(facts []string, rows ...[]string) bom.FilledBook {
	entry := func(at, text string) bom.Entry {
		e := bom.Entry{Kind: bom.EntryText, Text: text, Where: at}
		if strings.Trim(text, "0123456789.") == "" {
			e.Kind = bom.EntryNumber
		}
		return e
	}
	s := &bom.FilledSheet{Key: "order tern", Name: "Order Tern", Columns: append([]string{show.ColumnPacks, show.ColumnPrice, show.ColumnNeeded, show.ColumnFor}, clerks...)}
	for _, f := range append([]string{"vendor=tern"}, facts...) {
		key, v, _ := strings.Cut(f, "=")
		s.Facts = slices.Insert(s.Facts, 0, bom.FilledFact{Key: key, Entry: entry("Order Tern, "+key, v)})
	}
	for i, r := range rows {
		entries := map[string]bom.Entry{}
		for _, c := range r[1:] {
			title, v, _ := strings.Cut(c, "=")
			entries[title] = entry(fmt.Sprintf("Order Tern, %s %d", title, i+1), v)
		}
		s.Add(r[0], i+1, entries)
	}
	return bom.FilledBook{s}
}

const (
	clampKey = "GEN-NM-CX10-CLAMP | T | 4 | 10"
	cutKey   = "GEN-CX-10 | T-CUT | 29.3 m"
	boxKey   = "GEN-AMP-5 | BOX | 1"
)

func TestOrders(t *testing.T) {
	firm := sold(t)
	for _, c := range []struct {
		name  string
		facts []string
		row   []string
		want  string
	}{
		{"as planned", []string{"po=PO-2", "to=shop", "sent=2026-12-01"}, []string{clampKey, "packs=2", "price=62", "for=first 12, reorder level 3"},
			"[order]\nvendor = \"tern\"\nsent   = 2026-12-01\nto     = \"shop\"\n\n[[line]]\npart  = \"GEN-NM-CX10-CLAMP\"\ncode  = \"T | 4\"\npack  = 10\npacks = 2\nprice = \"62.00\"\njobs  = [\"first\"]\n"},
		{"otherwise", []string{"po=PO-2"}, []string{clampKey, "packs=2", "price=62", "ordered packs=3", "confirmed price=61.5", "promised day=2026-12-09", "note=by rail"},
			"[order]\nvendor = \"tern\"\n\n# by rail\n[[line]]\npart  = \"GEN-NM-CX10-CLAMP\"\ncode  = \"T | 4\"\npack  = 10\npacks = 3\nprice = \"61.50\"\ndue   = 2026-12-09\n"},
		{"cut to length", []string{"po=PO-2"}, []string{cutKey, "packs=29.3", "price=2.95"},
			"[order]\nvendor = \"tern\"\n\n[[line]]\npart  = \"GEN-CX-10\"\ncode  = \"T-CUT\"\npack  = \"29.3 m\"\npacks = 1\nprice = \"86.4350\"\n"},
		{"cut to another length", []string{"po=PO-2"}, []string{cutKey + " | 2", "packs=29.3", "price=2.95", "ordered packs=30"},
			"[order]\nvendor = \"tern\"\n\n[[line]]\npart  = \"GEN-CX-10\"\ncode  = \"T-CUT\"\npack  = \"30 m\"\npacks = 1\nprice = \"88.50\"\n"},
		{"a box", []string{"po=PO-2"}, []string{boxKey, "packs=1", "price=500"},
			"[order]\nvendor = \"tern\"\n\n[[line]]\nbrings = {GEN-AMP-5 = 1, GEN-PS-12 = 2}\ncode   = \"BOX\"\npack   = 1\npacks  = 1\nprice  = \"500.00\"\n"},
	} {
		orders, err := Orders(orderBook(c.facts, c.row), groundOf(firm, ""), firm.Offers, []string{"first"})
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if got := string(orders[0].TOML()); got != c.want {
			t.Errorf("%s:\n%s want\n%s", c.name, got, c.want)
		}
	}
}

func TestOrdersRefused(t *testing.T) {
	firm := sold(t)
	line := []string{clampKey, "packs=2", "price=62"}
	with := func(more ...string) []string { return append(slices.Clone(line), more...) }
	for _, c := range []struct {
		name  string
		facts []string
		row   []string
		want  string
	}{
		{"blank", nil, line, "no order sheet was given an order number"},
		{"no number", nil, with("ordered packs=2"), "something was filled in, and the order has no number"},
		{"sent without number", []string{"sent=2026-12-01"}, line, "the order has no number"},
		{"number that is there", []string{"po=po-1"}, line, "there is an order PO-1 already"},
		{"number that is a path", []string{"po=../PO-2"}, line, `an order number is of letters, digits, - and _, not "../PO-2"`},
		{"day to come", []string{"po=PO-2", "sent=2026-12-02"}, line, "2026-12-02 is still to come"},
		{"day that is none", []string{"po=PO-2", "sent=soon"}, line, "a day like 2026-12-01 is wanted"},
		{"promised before it was sent", []string{"po=PO-2", "sent=2026-12-01"}, with("promised day=2026-11-30"), "2026-11-30 is before the order was sent"},
		{"shelf", []string{"po=PO-2", "to=shp"}, line, `there is no shelf "shp"; did you mean shop?`},
		{"other vendor", []string{"po=PO-2", "vendor=plover"}, line, `made for the vendor tern, and says "plover"`},
		{"packs", []string{"po=PO-2"}, with("ordered packs=1.5"), "a whole number, 0 or more, is wanted"},
		{"price", []string{"po=PO-2"}, with("confirmed price=cheap"), "an amount with at most four decimals is wanted"},
		{"all of it not ordered", []string{"po=PO-2"}, with("ordered packs=0"), "nothing is ordered under PO-2"},
		{"offer that is gone", []string{"po=PO-2"}, []string{"GEN-NM-CX10-CLAMP | T-9 | 10", "packs=1", "price=1"}, "has no offer"},
		{"offer with another pack", []string{"po=PO-2"}, []string{"GEN-NM-CX10-CLAMP | T | 4 | 25", "packs=1", "price=1"}, "has no offer"},
		{"row by hand", []string{"po=PO-2"}, []string{"", "ordered packs=1"}, "the row is no line of the order that was planned"},
		{"too short", []string{"po=PO-2"}, []string{cutKey, "packs=29.3", "price=2.95", "ordered packs=2"}, "is cut to length from 10 m to 150 m, not to 2 m"},
	} {
		_, err := Orders(orderBook(c.facts, c.row), groundOf(firm, ""), firm.Offers, nil)
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: the error is %v, want %s", c.name, err, c.want)
		}
	}
	two := orderBook([]string{"po=PO-2"}, line)
	two = append(two, orderBook([]string{"po=po-2"}, line)...)
	if _, err := Orders(two, groundOf(firm, ""), firm.Offers, nil); err == nil || !strings.Contains(err.Error(), "two sheets have the order number po-2") {
		t.Error(err)
	}
}
