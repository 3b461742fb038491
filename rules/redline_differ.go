package rules

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// differ collects the changes of one file.
type differ struct {
	meaning
	file   string
	charge func(table, key string) Charge
	out    []Change

	list    string            // of rows at hand
	numbers map[string]string // "signal.3" of the base, "signal.4" of the head
}

func (d *differ) add(c Change) {
	if c.File == "" {
		c.File = d.file
	}
	c.Price = priceKeys[c.Key]
	if private[c.Key] {
		if c.Was != "" {
			c.Was = "…"
		}
		if c.Now != "" {
			c.Now = "…"
		}
	}
	d.out = append(d.out, c)
}

// table compares the keys of two tables that are one thing.
func (d *differ) table(table, on string, a, b *source.Node) {
	var names []string
	for _, n := range []*source.Node{b, a} {
		if n == nil {
			continue
		}
		for _, k := range n.Keys {
			if !slices.Contains(names, k.Name) {
				names = append(names, k.Name)
			}
		}
	}
	for _, name := range names {
		x, y := a.Get(name), b.Get(name)
		c := Change{Charge: d.charge(table, name), On: on, Key: name, How: "changed"}
		switch {
		case x == nil:
			c.How, c.Now, c.Line = "added", valueText(y.Value), y.At.Line()
		case y == nil:
			c.How, c.Was, c.Line = "gone", valueText(x.Value), x.At.Line()
		case d.under(name).same(x.Value, y.Value):
			continue
		default:
			c.Was, c.Now, c.Line = valueText(x.Value), valueText(y.Value), y.At.Line()
		}
		d.add(c)
	}
}

// named compares tables whose keys are IDs.
func (d *differ) named(table string, a, b *source.KeyNode) {
	x, y := tableOf(a), tableOf(b)
	seen := map[string]bool{}
	for _, k := range keysIn(x) {
		now := d.renames.Of(k.Name)
		other := y.Get(now)
		if other == nil {
			d.add(Change{Charge: d.charge(table, ""), On: table + "." + k.Name, How: "gone", Was: valueText(k.Value), Line: k.At.Line()})
			continue
		}
		seen[now] = true
		if now != k.Name {
			d.add(Change{Charge: d.charge(table, ""), On: table + "." + now, How: "renamed", Was: k.Name, Now: now, Line: other.At.Line()})
		}
		d.table(table, table+"."+now, k.Value, other.Value)
	}
	for _, k := range keysIn(y) {
		if !seen[k.Name] && x.Get(k.Name) == nil {
			d.add(Change{Charge: d.charge(table, ""), On: table + "." + k.Name, How: "added", Now: valueText(k.Value), Line: k.At.Line()})
		}
	}
}

func tableOf(k *source.KeyNode) *source.Node {
	if k == nil {
		return nil
	}
	return k.Value
}

func keysIn(n *source.Node) []*source.KeyNode {
	if n == nil || n.Kind != source.Table {
		return nil
	}
	return n.Keys
}

func itemsIn(k *source.KeyNode) []*source.Node {
	if k == nil || k.Value.Kind != source.Array {
		return nil
	}
	return k.Value.Items
}

// rowPair is a row as it was and as it is, with its number in the file; one of the two
// may be missing.
type rowPair struct {
	was, now *source.Node
	n        int // from 1, in the head, or in the base where it is gone
}

// rowsOf pairs the rows of two lists that are not the same: by what names them, then
// what is left over is gone or added.
func (d *differ) rowsOf(a, b []*source.Node, by ...string) []rowPair {
	usedA, usedB := make([]bool, len(a)), make([]bool, len(b))
	match := func(same func(x, y *source.Node) bool, note func(i, j int)) {
		for i, x := range a {
			for j := range b {
				if !usedA[i] && !usedB[j] && same(x, b[j]) {
					usedA[i], usedB[j] = true, true
					note(i, j)
				}
			}
		}
	}
	var out []rowPair
	match(d.same, d.number)
	match(func(x, y *source.Node) bool { return d.sameName(x, y, by) }, func(i, j int) {
		d.number(i, j)
		out = append(out, rowPair{a[i], b[j], j + 1})
	})
	for i := range a {
		if !usedA[i] {
			out = append(out, rowPair{was: a[i], n: i + 1})
		}
	}
	for j := range b {
		if !usedB[j] {
			out = append(out, rowPair{now: b[j], n: j + 1})
		}
	}
	return out
}

// number notes that a row has another number than it had.
func (d *differ) number(i, j int) {
	if i != j && d.numbers != nil {
		d.numbers[fmt.Sprintf("%s.%d", d.list, i+1)] = fmt.Sprintf("%s.%d", d.list, j+1)
	}
}

func (d *differ) sameName(x, y *source.Node, by []string) bool {
	for _, k := range by {
		if !d.under(k).same(tableOf(x.Get(k)), tableOf(y.Get(k))) {
			return false
		}
	}
	return len(by) > 0
}

// rows compares lists of rows.
func (d *differ) rows(table string, a, b *source.KeyNode, by ...string) {
	d.list = table
	for _, p := range d.rowsOf(itemsIn(a), itemsIn(b), by...) {
		on := fmt.Sprintf("%s.%d", table, p.n)
		if name := rowName(p, by); name != "" {
			on = table + " " + name
		}
		switch {
		case p.was == nil:
			d.add(Change{Charge: d.charge(table, ""), On: on, How: "added", Now: valueText(p.now), Line: p.now.At.Line()})
		case p.now == nil:
			d.add(Change{Charge: d.charge(table, ""), On: on, How: "gone", Was: valueText(p.was), Line: p.was.At.Line()})
		default:
			d.table(table, on, p.was, p.now)
		}
	}
}

// rowName puts what names a row into words: "northbank B12".
func rowName(p rowPair, by []string) string {
	n := p.now
	if n == nil {
		n = p.was
	}
	var out []string
	for _, k := range by {
		if v := n.Get(k); v != nil {
			out = append(out, valueText(v.Value))
		}
	}
	return strings.Join(out, " ")
}
