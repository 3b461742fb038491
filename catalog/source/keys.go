package source

import (
	"fmt"
	"slices"
	"strings"
)

// Val is a value read from a file with its place. Set tells a value that was
// given from one that was left out.
type Val[T any] struct {
	V   T
	At  Place
	Set bool
}

// Or is the value, or fallback where none was given.
func (v Val[T]) Or(fallback T) T {
	if v.Set {
		return v.V
	}
	return fallback
}

// Keys is a cursor over one table while a bind function reads it. Without a
// table it only records what the function asks for: that is how the formats
// document themselves.
type Keys struct {
	name  string
	at    Place
	table *Node
	known []string
	lacks map[string]int // keys reported missing, each with its problem
	mute  bool
	read  *reading
	rec   *Record
}

// reading collects what one file has to say.
type reading struct {
	problems []Problem
	rooms    [][]string // lists of known keys that tables are done with
	missing  []int      // those of the problems that are missing keys
	partial  bool       // keys that seem missing may well be there
	layout   *layout    // filled while Dress reads, else nil
}

// Read runs a bind function over the root of a document and returns the
// problems it met in the order of the document.
func Read(d *Doc, bind func(*Keys)) []Problem {
	r := &reading{partial: d.Partial, layout: d.layout}
	k := &Keys{at: d.File.Start(), table: d.Root, read: r}
	bind(k)
	k.finish()
	problems := r.standing()
	SortProblems(problems)
	return firstOf(problems, 0)
}

// ID is the name under which the table stands in its parent, for Named records.
func (k *Keys) ID() string { return k.name }

// At is the place of the table: its name for Named records, its header or
// opening bracket for the others.
func (k *Keys) At() Place { return k.at }

// Recording reports that there is no document and the function only documents.
func (k *Keys) Recording() bool { return k.rec != nil }

// Has reports whether the table carries the key at all.
func (k *Keys) Has(name string) bool { return k.table.Get(name) != nil }

// Mute keeps quiet about unknown keys of this table, where an earlier problem
// leaves open which keys belong to it.
func (k *Keys) Mute() { k.mute = true }

// Fault reports a value that was read but cannot stand.
func (k *Keys) Fault(at Place, says, do string, also ...Place) {
	if k.read != nil {
		k.read.add(Problem{Value, at, says, do, also})
	}
}

// Missing reports a key that the record needs and does not have.
func (k *Keys) Missing(name, doc string) {
	if k.read == nil || k.read.partial {
		return
	}
	if k.lacks == nil {
		k.lacks = map[string]int{}
	}
	k.lacks[name] = len(k.read.problems)
	k.read.missing = append(k.read.missing, len(k.read.problems))
	k.read.add(Problem{Key, k.at, fmt.Sprintf("%s has no %s: %s", k.called(), name, doc), "add " + name, nil})
}

// standing lists the problems but for those that another one has taken up.
func (r *reading) standing() []Problem {
	var out []Problem
	for _, p := range r.problems {
		if p.Kind != 0 {
			out = append(out, p)
		}
	}
	return out
}

// room is an empty list for the known keys of one table.
func (r *reading) room() []string {
	n := len(r.rooms)
	if n == 0 {
		return make([]string, 0, 24)
	}
	room := r.rooms[n-1]
	r.rooms = r.rooms[:n-1]
	return room
}

func (r *reading) add(p Problem) { r.problems = append(r.problems, p) }

// called is how messages speak of the table.
func (k *Keys) called() string {
	if k.name == "" {
		return "this table"
	}
	return Quote(k.name)
}

// take looks a key up, marks it as known and records it.
func (k *Keys) take(d KeyDoc) *KeyNode {
	if k.rec != nil {
		k.rec.Keys = append(k.rec.Keys, d)
		return nil
	}
	k.known = append(k.known, d.Name)
	return k.table.Get(d.Name)
}

// Need reads a key that must be there.
func Need[T any](k *Keys, to *Val[T], name string, t Type[T], doc string) {
	n := k.take(KeyDoc{Name: name, Required: true, Type: t.Shape, Doc: doc})
	if k.rec != nil {
		return
	}
	if n == nil {
		k.Missing(name, doc)
		return
	}
	accept(k, to, n, t)
}

// Opt reads a key that may be left out.
func Opt[T any](k *Keys, to *Val[T], name string, t Type[T], doc string) {
	n := k.take(KeyDoc{Name: name, Type: t.Shape, Doc: doc})
	if n != nil {
		accept(k, to, n, t)
	}
}

// Some reads a list that may be left out, and of one with faults what is good: items
// that could not be read stay in their places, not set. The list counts as given where
// one of its items is good.
func Some[T any](k *Keys, to *Val[[]Val[T]], name string, t Type[[]Val[T]], doc string) {
	n := k.take(KeyDoc{Name: name, Type: t.Shape, Doc: doc})
	if n == nil {
		return
	}
	if v, ok := parse(k, n, t); ok {
		*to = Val[[]Val[T]]{v, n.Value.At, true}
	} else if v != nil {
		*to = Val[[]Val[T]]{v, n.Value.At, slices.ContainsFunc(v, func(i Val[T]) bool { return i.Set })}
	}
}

func accept[T any](k *Keys, to *Val[T], n *KeyNode, t Type[T]) {
	if v, ok := parse(k, n, t); ok {
		*to = Val[T]{v, n.Value.At, true}
	}
}

// parse reads the value of a key and reports what is wrong with it; not ok where
// anything is.
func parse[T any](k *Keys, n *KeyNode, t Type[T]) (T, bool) {
	if k.read.layout != nil && t.spell != nil {
		t.spell(n.Value, k.read.layout)
	}
	v, bad := t.parse(n.Value)
	for _, b := range bad {
		if b.kind == 0 || b.missing && k.read.partial {
			continue // reported when the file was parsed, or may well be there
		}
		k.read.add(Problem{b.kind, b.at, n.Name + ": " + b.says, b.do, b.also})
	}
	return v, len(bad) == 0
}

// One reads a sub-table that may be left out, and reports whether it is there.
func One[R any](k *Keys, to *R, name string, bind func(*R, *Keys), doc string) bool {
	n := k.take(k.sub(name, OneTable, doc, func(s *Keys) { bind(new(R), s) }))
	if n == nil || !k.isTable(n.Name, n.Value) {
		return false
	}
	bindTable(k, n.Name, n.At, n.Value, func(s *Keys) { bind(to, s) })
	return true
}

// Rows reads an array of tables.
func Rows[R any](k *Keys, to *[]R, name string, bind func(*R, *Keys), doc string) {
	n := k.take(k.sub(name, RowTables, doc, func(s *Keys) { bind(new(R), s) }))
	if n == nil {
		return
	}
	if n.Value.Kind == Refused {
		return
	}
	if n.Value.Kind != Array {
		k.wrongShape(n, "rows, written [["+name+"]]")
		return
	}
	*to = slices.Grow(*to, len(n.Value.Items))
	for _, item := range n.Value.Items {
		if !k.isTable(name, item) {
			continue
		}
		row := extend(to)
		bindTable(k, "", item.At, item, func(s *Keys) { bind(row, s) })
	}
}

// extend adds an empty record to a list; records are too large to be copied for
// nothing.
func extend[R any](to *[]R) *R {
	var empty R
	*to = append(*to, empty)
	return &(*to)[len(*to)-1]
}

// Named reads a table of tables whose keys are IDs, in document order. Two IDs
// that differ in case only are a problem.
func Named[R any](k *Keys, to *[]R, name string, bind func(*R, *Keys), doc string) {
	n := k.take(k.sub(name, NamedTables, doc, func(s *Keys) { bind(new(R), s) }))
	if n == nil || !k.isTable(name, n.Value) {
		return
	}
	*to = slices.Grow(*to, len(n.Value.Keys))
	seen := make(map[string]Place, len(n.Value.Keys))
	for _, e := range n.Value.Keys {
		if !k.idStands(e, seen) || !k.isTable(e.Name, e.Value) {
			continue
		}
		row := extend(to)
		bindTable(k, e.Name, e.At, e.Value, func(s *Keys) { bind(row, s) })
	}
}

// Pick is one key of a table whose keys are not fixed, with its value.
type Pick[T any] struct {
	Name string
	At   Place // the key
	Val  Val[T]
}

// Naming says which keys may stand in a table whose keys the file chooses.
type Naming struct {
	Check func(string) error
	Form  *Form
}

// Names is the naming of tables by ID.
var Names = Naming{func(s string) error { _, err := NameOf(s); return err }, &Form{Pattern: NamePattern}}

// Each reads a table whose keys the file chooses, in document order.
func Each[T any](k *Keys, to *[]Pick[T], key string, names Naming, t Type[T], doc string) {
	shape := t.Shape
	n := k.take(KeyDoc{Name: key, Type: TypeDoc{Name: "table", Each: &shape, Form: names.Form}, Doc: doc})
	if n == nil || !k.isTable(key, n.Value) {
		return
	}
	for _, e := range n.Value.Keys {
		if err := names.Check(e.Name); err != nil {
			k.Fault(e.At, key+": "+err.Error(), "check the name")
			continue
		}
		row := Pick[T]{Name: e.Name, At: e.At}
		accept(k, &row.Val, e, t)
		*to = append(*to, row)
	}
}

func (k *Keys) idStands(e *KeyNode, seen map[string]Place) bool {
	if !ValidID(e.Name) {
		k.Fault(e.At, "the name "+Quote(e.Name)+" cannot be referred to", "use letters, digits, - and _, starting with a letter or digit, 64 at most")
		return false
	}
	low := strings.ToLower(e.Name)
	if first, twice := seen[low]; twice {
		k.Fault(e.At, "the name "+Quote(e.Name)+" stands already, but for its case", "give it a name of its own", first)
		return false
	}
	seen[low] = e.At
	return true
}

func bindTable(k *Keys, name string, at Place, table *Node, bind func(*Keys)) {
	s := &Keys{name: name, at: at, table: table, read: k.read, known: k.read.room()}
	bind(s)
	s.finish()
	k.read.rooms = append(k.read.rooms, s.known[:0])
}

func (k *Keys) isTable(name string, v *Node) bool {
	if v.Kind == Table {
		return true
	}
	if v.Kind == Refused {
		return false // reported when the file was parsed
	}
	k.Fault(v.At, fmt.Sprintf("%s: %s was read, a table is expected", name, v.describe()), "write it as a table")
	return false
}

func (k *Keys) wrongShape(n *KeyNode, want string) {
	k.Fault(n.Value.At, fmt.Sprintf("%s: %s was read, %s is expected", n.Name, n.Value.describe(), want), "write it as "+want)
}

// finish reports the keys that nobody asked for.
func (k *Keys) finish() {
	if k.read.layout != nil {
		k.read.layout.ranks[k.table] = slices.Clone(k.known)
	}
	if k.mute {
		return
	}
	for _, e := range k.table.Keys {
		if contains(k.known, e.Name) {
			continue
		}
		do := "take it out"
		near := Nearest(e.Name, k.known)
		if near != "" {
			do = "did you mean " + near + "?"
		}
		says := "nothing reads the key " + Quote(e.Name) + " here"
		if i, lacking := k.lacks[near]; lacking {
			says += ", and " + near + " is needed"
			k.read.problems[i].Kind = 0 // one slip of the pen, said once
			delete(k.lacks, near)
		}
		k.read.add(Problem{Key, e.At, says, do, nil})
	}
}

func contains(list []string, s string) bool {
	for _, l := range list {
		if l == s {
			return true
		}
	}
	return false
}

// ValidID reports whether s may name a part, device, cable, port, place, job or tag.
func ValidID(s string) bool {
	if s == "" || len(s) > 64 {
		return false
	}
	for i := range len(s) {
		c := s[i]
		alnum := c >= 'a' && c <= 'z' || c >= 'A' && c <= 'Z' || c >= '0' && c <= '9'
		if !alnum && (i == 0 || c != '-' && c != '_') {
			return false
		}
	}
	return true
}
