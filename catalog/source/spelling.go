package source

import (
	"strings"

	"driploop/catalog/unit"
)

// layout is what reading a document teaches about how it is best laid out.
type layout struct {
	ranks  map[*Node][]string // the keys that a table was asked for, in order of declaration
	spells map[*Node]spelling // values that are usually spelled in another way
}

// spelling is the usual spelling of a value.
type spelling struct {
	text string           // without quotes
	same func(*Node) bool // reports whether another value means the same
}

// Spelled is a string type of which one spelling out of several is the usual one.
// spell turns a string that the type reads into it; it is taken only where the type
// reads it too and same reports that both values mean one thing.
func Spelled[T any](t Type[T], spell func(string) string, same func(a, b T) bool) Type[T] {
	t.spell = func(n *Node, l *layout) {
		v, bad := t.parse(n)
		if len(bad) > 0 || n.Kind != String {
			return
		}
		means := func(other *Node) bool {
			w, bad := t.parse(other)
			return len(bad) == 0 && same(v, w)
		}
		text := spell(n.Str)
		if text != n.Str && !strings.ContainsFunc(text, needsEscape) && means(&Node{Kind: String, Str: text}) {
			l.spells[n] = spelling{text, means}
		}
	}
	return t
}

func needsEscape(r rune) bool { return r < ' ' || r == '"' || r == '\\' || r == 0x7F }

func equal[T comparable](a, b T) bool { return a == b }

// sameSize compares the metal; the written form may differ.
func sameSize(a, b unit.Gauge) bool { return a.MM2 == b.MM2 }

func spellItems[T any](t Type[T]) func(*Node, *layout) {
	if t.spell == nil {
		return nil
	}
	return func(n *Node, l *layout) {
		for _, item := range n.Items {
			t.spell(item, l)
		}
	}
}

func spellEither[T any](fits func(*Node) bool, a, b Type[T]) func(*Node, *layout) {
	return func(n *Node, l *layout) {
		t := b
		if fits(n) {
			t = a
		}
		if t.spell != nil {
			t.spell(n, l)
		}
	}
}

func spellInline[R any](bind func(*R, *Keys)) func(*Node, *layout) {
	return func(n *Node, l *layout) {
		if n.Kind == Table {
			readInline(new(R), n, bind, &reading{layout: l})
		}
	}
}
