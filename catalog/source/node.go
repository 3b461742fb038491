package source

import "time"

// NodeKind is the TOML type of a node.
type NodeKind uint8

const (
	Refused NodeKind = iota // a value that Parse has refused and reported: nan, inf, out of range
	Table                   // [table], dotted key, or {inline = "table"}
	Array                   // [1, 2], or the [[rows]] of an array of tables
	String
	Integer
	Float
	Bool
	DateTime // with an offset
	LocalDateTime
	LocalDate
	LocalTime
)

// Node is one value of a document with its place.
type Node struct {
	Kind NodeKind
	made made // how a Table or Array came to be, while the file is read
	Bool bool // of a Bool

	// At is the value's place: all of a scalar, array or inline table with its
	// brackets, and the header of a [table] or [[row]].
	At Place

	Keys  []*KeyNode // of a Table, in document order
	Items []*Node    // of an Array, in document order

	Str   string    // of a String
	Int   int64     // of an Integer
	Float float64   // of a Float; never nan or inf
	Time  time.Time // of the four kinds of date and time; local ones in UTC

	byName map[string]*KeyNode // of a Table with many keys
}

// KeyNode is one key of a table.
type KeyNode struct {
	Name  string
	At    Place // the key itself, its last part where it is dotted or in a header
	Value *Node
}

// Get finds the key of a table, or nil.
func (n *Node) Get(name string) *KeyNode {
	if n == nil || n.Kind != Table {
		return nil
	}
	if n.byName != nil {
		return n.byName[name]
	}
	for _, k := range n.Keys {
		if k.Name == name {
			return k
		}
	}
	return nil
}

// Same reports two values that mean the same: the order of keys, and how a number or
// a string is written, do not matter. A value that is not there is nil.
func Same(a, b *Node) bool {
	if a == nil || b == nil {
		return a == b
	}
	if a.Kind != b.Kind || a.Kind == Refused || len(a.Keys) != len(b.Keys) || len(a.Items) != len(b.Items) {
		return false
	}
	for _, k := range a.Keys {
		if other := b.Get(k.Name); other == nil || !Same(k.Value, other.Value) {
			return false
		}
	}
	for i := range a.Items {
		if !Same(a.Items[i], b.Items[i]) {
			return false
		}
	}
	return a.Str == b.Str && a.Int == b.Int && a.Float == b.Float && a.Bool == b.Bool && a.Time.Equal(b.Time)
}

// fewKeys is up to how many keys a search one by one beats a map.
const fewKeys = 12

// add puts a new key into a table. A Doc that is read no longer changes, so that
// many may read it at once.
func (n *Node) add(k *KeyNode) {
	if n.Keys == nil {
		n.Keys = make([]*KeyNode, 0, 4)
	}
	n.Keys = append(n.Keys, k)
	if n.byName == nil && len(n.Keys) > fewKeys {
		n.byName = make(map[string]*KeyNode, 2*len(n.Keys))
		for _, k := range n.Keys {
			n.byName[k.Name] = k
		}
	}
	if n.byName != nil {
		n.byName[k.Name] = k
	}
}

// Doc is one parsed file.
type Doc struct {
	File *File
	Root *Node // always a Table
	// Partial: a syntax problem or a double definition left something out of the
	// tree, so a key that seems missing may well be there.
	Partial bool
	// Ended: the tree ends where a syntax problem stands; what follows it was not
	// read at all.
	Ended bool

	layout *layout // what reading it notes for Dress, nil for anybody else
}
