package rules

import (
	"cmp"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// PastRow is a row of stock history, or the head of a sheet, that is other than it
// was: books are kept by adding rows, and one that is edited takes with it what was
// counted from it.
type PastRow struct {
	File     string
	Line     int
	Row      string // "count NC-10-NM shop"
	How      string // edited, deleted
	Was, Now string
}

// MovedBin is what lies on a shelf, or is left on a reel, otherwise than it did.
type MovedBin struct {
	Part, Where string
	Tag         string // of cut stock
	Was, Now    catalog.Quantity
}

// stockRows are the lists of a stock file and what names their rows.
var stockLists = []struct {
	table string
	by    []string
}{{"count", []string{"part", "where"}}, {"reel", []string{"tag", "on"}}, {"move", []string{"part", "tag", "from", "to", "job"}}, {"cut", []string{"tag", "job", "cable"}}}

// stockChanges compares stock sheets and orders: rows that are new, and rows of the
// past that are not as they were.
func (c *comparison) stockChanges(files []ownFile) {
	d := &differ{charge: func(string, string) Charge { return ToFacts }}
	for i := range files {
		f := &files[i]
		c.goods.facts = true
		d.file = f.path
		c.sheetHead(d, f)
		for _, l := range stockLists {
			for _, p := range d.rowsOf(itemsIn(f.key(atBase, l.table)), itemsIn(f.key(atHead, l.table)), l.by...) {
				c.pastRow(f.path, l.table, p, l.by)
			}
		}
		c.orderChanges(d, f)
	}
	c.out.Changes = append(c.out.Changes, d.out...)
	slices.SortStableFunc(c.out.Past, func(a, b PastRow) int {
		return cmp.Or(cmp.Compare(a.File, b.File), cmp.Compare(a.Line, b.Line))
	})
}

// sheetHead compares the heads of a sheet, which hold for all its rows.
func (c *comparison) sheetHead(d *differ, f *ownFile) {
	a, b := tableOf(f.key(atBase, "sheet")), tableOf(f.key(atHead, "sheet"))
	if a == nil || b == nil || d.same(a, b) {
		return
	}
	c.out.Past = append(c.out.Past, PastRow{File: f.path, Line: b.At.Line(), Row: "sheet", How: "edited", Was: valueText(a), Now: valueText(b)})
}

// pastRow notes a row that was edited or deleted, or counts a new one.
func (c *comparison) pastRow(path, table string, p rowPair, by []string) {
	if p.was == nil {
		c.out.NewRows++
		return
	}
	r := PastRow{File: path, Line: p.was.At.Line(), Row: table + " " + rowName(p, by), How: "deleted", Was: valueText(p.was)}
	if p.now != nil {
		r.How, r.Line, r.Now = "edited", p.now.At.Line(), valueText(p.now)
	}
	c.out.Past = append(c.out.Past, r)
}

// progress are the keys of an order that change while it is under way.
var progress = map[string]bool{"sent": true, "due": true, "dropped": true, "because": true, "jobs": true, "to": true}

// orderChanges compares an order: what vendors promise may move, what was ordered of a
// sent order may not.
func (c *comparison) orderChanges(d *differ, f *ownFile) {
	a, b := tableOf(f.key(atBase, "order")), tableOf(f.key(atHead, "order"))
	if a == nil && b == nil {
		return
	}
	sent := a.Get("sent") != nil
	if a != nil && (b == nil || sent && b.Get("sent") == nil) {
		c.out.Past = append(c.out.Past, PastRow{File: f.path, Line: a.At.Line(), Row: "order", How: map[bool]string{true: "deleted", false: "edited"}[b == nil],
			Was: valueText(a), Now: textOrNone(b)})
	}
	d.table("order", "order "+bom.JobOf(f.path), a, b)
	for _, p := range d.rowsOf(itemsIn(f.key(atBase, "line")), itemsIn(f.key(atHead, "line")), "part", "code") {
		name := "order " + bom.JobOf(f.path) + " " + rowName(p, []string{"part"})
		switch {
		case p.was == nil:
			c.out.NewRows++
			d.add(Change{Charge: ToFacts, On: name, How: "added", Now: lineText(p.now), Line: p.now.At.Line()})
		case p.now == nil:
			c.out.Past = append(c.out.Past, PastRow{File: f.path, Line: p.was.At.Line(), Row: "line " + rowName(p, []string{"part"}), How: "deleted", Was: lineText(p.was)})
		default:
			n := len(d.out)
			d.table("line", name, p.was, p.now)
			if sent && slices.ContainsFunc(d.out[n:], func(x Change) bool { return !progress[x.Key] }) {
				c.out.Past = append(c.out.Past, PastRow{File: f.path, Line: p.now.At.Line(), Row: "line " + rowName(p, []string{"part"}), How: "edited",
					Was: lineText(p.was), Now: lineText(p.now)})
			}
		}
	}
}

// lineText is a line of an order without its price.
func lineText(n *source.Node) string {
	bare := *n
	bare.Keys = slices.DeleteFunc(slices.Clone(n.Keys), func(k *source.KeyNode) bool { return priceKeys[k.Name] })
	return valueText(&bare)
}

func textOrNone(n *source.Node) string {
	if n == nil {
		return ""
	}
	return valueText(n)
}

// movedBins lists what lies where otherwise than it did.
func movedBins(was, now *catalog.Stock) []MovedBin {
	type key struct{ part, where, tag string }
	at := map[key]*MovedBin{}
	var order []key
	note := func(k key, side int, q catalog.Quantity) {
		m := at[k]
		if m == nil {
			m = &MovedBin{Part: k.part, Where: k.where, Tag: k.tag}
			at[k] = m
			order = append(order, k)
		}
		if side == atBase {
			m.Was = m.Was.Plus(q)
		} else {
			m.Now = m.Now.Plus(q)
		}
	}
	for side, s := range []*catalog.Stock{was, now} {
		for i := range s.Bins {
			if b := &s.Bins[i]; b.Qty.Length == 0 && !b.Qty.IsZero() {
				note(key{b.Part, b.Where, ""}, side, b.Qty)
			}
		}
		for i := range s.Tags {
			if t := &s.Tags[i]; t.Where != "" && t.Left > 0 {
				note(key{t.Part, t.Where, t.ID}, side, catalog.Quantity{Length: t.Left})
			}
		}
	}
	var out []MovedBin
	for _, k := range order {
		if m := at[k]; m.Was != m.Now {
			out = append(out, *m)
		}
	}
	slices.SortStableFunc(out, func(a, b MovedBin) int {
		return cmp.Or(cmp.Compare(a.Part, b.Part), cmp.Compare(a.Where, b.Where), cmp.Compare(a.Tag, b.Tag))
	})
	return out
}
