package source

import (
	"errors"
	"fmt"

	"github.com/pelletier/go-toml/v2/unstable"
)

// indexer is the first reading of a file. It turns the expressions of go-toml's
// parser into nodes, which that parser does not know: it reports keys and plain
// values with their place, but neither tables nor the extent of what is in
// brackets. It holds the caps and sees to it that nothing is defined twice.
type indexer struct {
	file   *File
	parser unstable.Parser

	root  *Node
	table *Node // the one that key = value lines go into
	depth int   // of table, in steps from the root
	nodes int
	end   int // where the last expression that was read ends

	spare     []Node // made in rows, because a file has hundreds
	spareKeys []KeyNode

	problems  []Problem
	uncounted int  // problems above MaxProblems
	partial   bool // something was left out of the tree
	stopped   bool // by a cap
	odd       bool // something is written in a way that two readers could take differently
}

func newIndexer(f *File) *indexer {
	root := &Node{Kind: Table, At: f.Start(), made: byHeader}
	x := &indexer{file: f, root: root, table: root}
	x.parser.Reset(f.Src)
	return x
}

func (x *indexer) run() {
	for !x.stopped && x.next() {
		switch e := x.parser.Expression(); e.Kind {
		case unstable.KeyValue:
			x.keyValue(x.table, x.depth, e)
			x.end = x.rawEnd(e)
		case unstable.Table, unstable.ArrayTable:
			x.header(e)
		}
	}
	var broken *unstable.ParserError
	if errors.As(x.parser.Error(), &broken) {
		x.stopped, x.partial = true, true
		x.report(x.syntaxProblem(broken))
	}
}

// next reads one expression. A panic inside the parser would be a defect of that
// parser; the file is refused then like one that cannot be read.
func (x *indexer) next() (more bool) {
	defer func() {
		if r := recover(); r != nil {
			x.stop(x.file.stretch(x.end, x.end), "the file cannot be read from here on", "write this part in a simpler way")
			more = false
		}
	}()
	return x.parser.NextExpression()
}

// part is one part of a key with its place.
type part struct {
	name string
	at   Place
}

// key collects the parts of a key into buf, or reports a cap and returns nil.
func (x *indexer) key(e *unstable.Node, buf []part) []part {
	for it := e.Key(); it.Next(); {
		n := it.Node()
		at := x.raw(n)
		if len(buf) == MaxParts {
			x.stop(at, fmt.Sprintf("the key has more than %d parts", MaxParts), "use fewer dots")
			return nil
		}
		if len(n.Data) > MaxKey {
			x.stop(at, fmt.Sprintf("the key has %d bytes, more than the %d that a key may have", len(n.Data), MaxKey), "shorten it")
			return nil
		}
		x.refuseNewEscapes(at)
		x.odd = x.odd || int(at.To-at.From) != len(n.Data) // in quotes
		buf = append(buf, part{string(n.Data), at})
	}
	return buf
}

// keyValue reads a key and its value into the table t.
func (x *indexer) keyValue(t *Node, depth int, e *unstable.Node) {
	var buf [MaxParts]part
	parts := x.key(e, buf[:0])
	if parts == nil {
		return
	}
	last := parts[len(parts)-1]
	for _, p := range parts[:len(parts)-1] {
		depth++
		if t = x.dotted(t, p, depth); t == nil {
			return
		}
	}
	if first := t.Get(last.name); first != nil {
		x.twice(last, first)
		return
	}
	from := x.afterEquals(int(last.at.To))
	v, _ := x.value(e.Value(), from, depth+1)
	t.add(x.entry(last, v))
}

// value turns a value that begins at an offset into a node, and returns the
// offset of its end with it.
func (x *indexer) value(e *unstable.Node, from, depth int) (*Node, int) {
	switch e.Kind {
	case unstable.Array:
		return x.array(e, from, depth)
	case unstable.InlineTable:
		return x.inlineTable(e, from, depth)
	}
	n := x.node(x.raw(e), depth)
	x.scalar(n, e)
	return n, x.rawEnd(e)
}

func (x *indexer) array(e *unstable.Node, from, depth int) (*Node, int) {
	n := x.node(x.file.stretch(from, from+1), depth)
	n.Kind = Array
	at := from + 1
	for it := e.Children(); !x.stopped && it.Next(); {
		var item *Node
		item, at = x.value(it.Node(), x.file.skipBetween(at), depth+1)
		n.Items = append(n.Items, item)
	}
	if !x.stopped {
		at = x.file.skipBetween(at) + 1
		n.At.To = int32(at)
	}
	return n, at
}

func (x *indexer) inlineTable(e *unstable.Node, from, depth int) (*Node, int) {
	n := x.node(x.file.stretch(from, from+1), depth)
	n.Kind = Table
	at, lines := from+1, false
	for it := e.Children(); !x.stopped && it.Next(); {
		c := it.Node()
		lines = lines || x.file.breaksLine(at, int(c.Raw.Offset))
		x.keyValue(n, depth, c)
		at = x.rawEnd(c)
	}
	if x.stopped {
		return n, at
	}
	end := x.file.skipBetween(at)
	lines = lines || x.file.breaksLine(at, end)
	n.At.To = int32(end + 1)
	x.refuseNewInline(n.At, at, lines)
	return n, end + 1
}

// node makes a node and counts it.
func (x *indexer) node(at Place, depth int) *Node {
	x.nodes++
	switch {
	case x.stopped:
	case x.nodes > MaxNodes:
		x.stop(at, fmt.Sprintf("the file holds more than %d values", MaxNodes), "split it into several files")
	case depth > MaxDepth:
		x.stop(at, fmt.Sprintf("the value lies more than %d levels deep", MaxDepth), "nest less")
	}
	if len(x.spare) == 0 {
		x.spare = make([]Node, 64)
	}
	n := &x.spare[0]
	x.spare = x.spare[1:]
	n.At = at
	return n
}

// entry makes a key with its value.
func (x *indexer) entry(p part, v *Node) *KeyNode {
	if len(x.spareKeys) == 0 {
		x.spareKeys = make([]KeyNode, 64)
	}
	k := &x.spareKeys[0]
	x.spareKeys = x.spareKeys[1:]
	*k = KeyNode{Name: p.name, At: p.at, Value: v}
	return k
}

func (x *indexer) raw(e *unstable.Node) Place {
	return x.file.stretch(int(e.Raw.Offset), x.rawEnd(e))
}

func (x *indexer) rawEnd(e *unstable.Node) int { return int(e.Raw.Offset + e.Raw.Length) }

// afterEquals is the offset of the value whose key ends at an offset.
func (x *indexer) afterEquals(at int) int {
	return x.file.skip(x.file.skip(at, " \t")+len("="), " \t")
}

func (x *indexer) report(p Problem) {
	if len(x.problems) == MaxProblems {
		x.uncounted++
		return
	}
	x.problems = append(x.problems, p)
}

// stop reports a cap and ends the reading.
func (x *indexer) stop(at Place, says, do string) {
	x.stopped, x.partial = true, true
	x.report(Problem{Kind: Syntax, At: at, Says: says, Do: do})
}
