package source

import (
	"bytes"
	"slices"
)

// block is a header with the keys below it, or the keys above the first header.
type block struct {
	table *Node
	items []item
	kept  bool // the keys stand in the order in which they stood
}

// dressed puts the items in order and joins their lines.
func (d *draft) dressed() []byte {
	blocks := d.blocks()
	root := d.layout.rank(d.doc.Root)
	slices.SortStableFunc(blocks[1:], func(a, b block) int { return root(a.items[0]) - root(b.items[0]) })
	for i := range blocks {
		b := &blocks[i]
		keys := b.items
		if i > 0 {
			keys = keys[1:]
		}
		rank := d.layout.rank(b.table)
		byRank := func(x, y item) int { return rank(x) - rank(y) }
		b.kept = slices.IsSortedFunc(keys, byRank)
		slices.SortStableFunc(keys, byRank)
	}
	return d.joined(blocks)
}

// blocks divides the items at their headers. The first block has none.
func (d *draft) blocks() []block {
	blocks := []block{{table: d.doc.Root}}
	for _, it := range d.items {
		if it.header != nil {
			blocks = append(blocks, block{table: it.header})
		}
		last := &blocks[len(blocks)-1]
		last.items = append(last.items, it)
	}
	return blocks
}

// rank is where an item of a table belongs. In a table that has no order of its own
// all are alike; what nobody asked for comes last.
func (l *layout) rank(table *Node) func(item) int {
	names := l.ranks[table]
	if names == nil {
		return func(item) int { return 0 }
	}
	place := make(map[string]int, len(names))
	for i, n := range names {
		if _, twice := place[n]; !twice {
			place[n] = i
		}
	}
	return func(it item) int {
		if r, asked := place[it.name]; asked {
			return r
		}
		return len(names)
	}
}

// joined writes the blocks with the blank lines between them.
func (d *draft) joined(blocks []block) []byte {
	p := page{end: d.lineEnd}
	p.group(d.head)
	p.open = len(d.head) > 0
	var above *block
	for i := range blocks {
		b := &blocks[i]
		for j := range b.items {
			it := &b.items[j]
			if p.b.Len() == 0 && len(it.apart) == 0 {
				p.top(it)
			}
			p.open = p.open || b.standsApart(j, above)
			p.item(it)
		}
		if len(b.items) > 0 {
			above = b
		}
	}
	for _, g := range d.tail {
		p.open = true
		p.group(g)
	}
	return p.b.Bytes()
}

// standsApart reports a blank line above the i-th item for its own sake: between
// tables of different names always, between those of one name where it stood before,
// and between keys where it stood before and they still follow each other.
func (b *block) standsApart(i int, above *block) bool {
	it := &b.items[i]
	switch {
	case it.header != nil:
		return it.gap || above == nil || above.items[0].header == nil || above.items[0].name != it.name
	case i == 0 || b.items[i-1].header != nil:
		return false
	}
	return it.gap && b.kept
}

// page collects lines.
type page struct {
	b    bytes.Buffer
	end  string
	open bool // a blank line is due, unless the page is empty
}

func (p *page) line(text string) {
	if p.open && p.b.Len() > 0 {
		p.b.WriteString(p.end)
	}
	p.open = false
	p.b.WriteString(text)
	p.b.WriteString(p.end)
}

func (p *page) group(lines []string) {
	for _, l := range lines {
		p.line(l)
	}
}

// top writes what must stay at the top of the file from the comment of its first
// item.
func (p *page) top(it *item) {
	var directives []string
	directives, it.lead = cutDirectives(it.lead)
	p.group(directives)
	p.open = len(directives) > 0
}

// item writes an item with its comments so that they are found again where they
// belong.
func (p *page) item(it *item) {
	for _, g := range it.apart {
		p.open = true
		p.group(g)
	}
	p.open = p.open || len(it.apart) > 0
	p.group(it.lead)
	p.line(it.text)
	p.group(it.foot)
	p.open = len(it.foot) > 0
}
