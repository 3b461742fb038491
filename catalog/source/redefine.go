package source

import (
	"fmt"

	"github.com/pelletier/go-toml/v2/unstable"
)

// made says how a table or array came to be. It decides what may be added later:
// TOML lets a table grow from several places of a file, but each part of it may
// be written once only, and not from everywhere.
type made uint8

const (
	asValue  made = iota // written after a key: closed, nothing can be added
	byHeader             // [table]: closed once its header has passed, but for tables below it
	byRows               // [[table]]: every further header adds a row
	onTheWay             // the a of [a.b]: its own header may still come
	byDots               // the a of a.b = 1: grows by further dotted keys of the same table
)

var madeBy = map[made]string{
	asValue:  "as a value",
	byHeader: "as a [table]",
	byRows:   "as [[rows]]",
	onTheWay: "by the header of a table below it",
	byDots:   "by a dotted key",
}

// dotted steps into the table that a part of a dotted key names, and makes it
// where it is new. It returns nil where the table may not grow that way.
func (x *indexer) dotted(t *Node, p part, depth int) *Node {
	k := t.Get(p.name)
	if k == nil {
		return x.newTable(t, p, depth, byDots)
	}
	if k.Value.Kind != Table || k.Value.made != byDots {
		x.closed(p, k, "put the key where the table is written")
		return nil
	}
	return k.Value
}

// header opens the table or row that a header names.
func (x *indexer) header(e *unstable.Node) {
	var buf [MaxParts]part
	parts := x.key(e, buf[:0])
	if parts == nil {
		return
	}
	x.end = int(x.around(parts).To)
	// Until the header has proved good, what follows goes into a table that hangs
	// nowhere: its values are still checked.
	x.table = &Node{Kind: Table, made: byHeader}
	t, depth := x.root, 0
	for _, p := range parts[:len(parts)-1] {
		if t, depth = x.through(t, p, depth); t == nil {
			return
		}
	}
	last, at := parts[len(parts)-1], x.around(parts)
	x.depth = depth + 1
	if e.Kind == unstable.ArrayTable {
		x.row(t, last, at)
	} else {
		x.open(t, last, at)
	}
}

// through steps into the table that a part of a header names on the way to its
// last one: of rows the latest.
func (x *indexer) through(t *Node, p part, depth int) (*Node, int) {
	k := t.Get(p.name)
	switch {
	case k == nil:
		return x.newTable(t, p, depth+1, onTheWay), depth + 1
	case k.Value.made == byRows:
		return k.Value.Items[len(k.Value.Items)-1], depth + 2
	case k.Value.made == asValue:
		x.closed(p, k, "write it as a [table] in the first place")
		return nil, 0
	}
	return k.Value, depth + 1
}

// open begins a [table].
func (x *indexer) open(t *Node, last part, at Place) {
	k := t.Get(last.name)
	switch {
	case k == nil:
		x.table = x.newTable(t, last, x.depth, byHeader)
	case k.Value.made == onTheWay:
		k.At, k.Value.made = last.at, byHeader
		x.table = k.Value
	default:
		x.twice(last, k)
		return
	}
	x.table.At = at
}

// row adds a row of [[rows]].
func (x *indexer) row(t *Node, last part, at Place) {
	k := t.Get(last.name)
	if k == nil {
		rows := x.node(at, x.depth)
		rows.Kind, rows.made = Array, byRows
		k = x.entry(last, rows)
		t.add(k)
	}
	if k.Value.made != byRows {
		x.twice(last, k)
		return
	}
	x.depth++
	x.table = x.node(at, x.depth)
	x.table.Kind, x.table.made = Table, byHeader
	k.Value.Items = append(k.Value.Items, x.table)
}

func (x *indexer) newTable(t *Node, p part, depth int, how made) *Node {
	n := x.node(p.at, depth)
	n.Kind, n.made = Table, how
	t.add(x.entry(p, n))
	return n
}

// around is the place of a header with its brackets.
func (x *indexer) around(parts []part) Place {
	src := x.file.Src
	from, to := int(parts[0].at.From), int(parts[len(parts)-1].at.To)
	for from > 0 && src[from] != '[' {
		from--
	}
	if from > 0 && src[from-1] == '[' {
		from--
	}
	to = x.file.skip(x.file.skip(to, " \t"), "]")
	return x.file.stretch(from, to)
}

// twice reports a name that is defined a second time; the first one stays.
func (x *indexer) twice(second part, first *KeyNode) {
	x.partial = true
	x.report(Problem{Kind: Merge, At: second.at,
		Says: fmt.Sprintf("%s is defined a second time, first %s on line %d", Quote(second.name), madeBy[first.Value.made], first.At.Line()),
		Do:   "keep one of them; a merge may have taken both sides",
		Also: []Place{first.At}})
}

// closed reports something added to a table that cannot take it.
func (x *indexer) closed(added part, first *KeyNode, do string) {
	x.partial = true
	x.report(Problem{Kind: Syntax, At: added.at,
		Says: fmt.Sprintf("%s was made %s on line %d, nothing can be added to it here", Quote(added.name), madeBy[first.Value.made], first.At.Line()),
		Do:   do,
		Also: []Place{first.At}})
}
