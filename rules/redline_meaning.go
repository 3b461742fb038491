package rules

import (
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// meaning compares values of two files by what they mean: "60 ft" is "18.288 m", 10
// is 10.0, and a name that was changed is the name that it has now.
type meaning struct {
	renames bom.Renames
	refs    bool // strings may be references: the value stands under a key that takes them
}

// refKeys are the keys of a plan whose strings name devices and lines.
var refKeys = map[string]bool{"from": true, "to": true, "on": true, "a": true, "b": true, "served_by": true, "like": true, "cable": true}

func (m meaning) same(a, b *source.Node) bool {
	switch {
	case a == nil || b == nil:
		return a == b
	case isNumber(a) && isNumber(b):
		return numberOf(a) == numberOf(b)
	case a.Kind != b.Kind || a.Kind == source.Refused:
		return false
	}
	switch a.Kind {
	case source.String:
		return a.Str == b.Str || m.refs && m.nameNow(a.Str) == b.Str || sameQuantity(a.Str, b.Str)
	case source.Array:
		return slices.EqualFunc(a.Items, b.Items, m.same)
	case source.Table:
		if len(a.Keys) != len(b.Keys) {
			return false
		}
		for _, k := range a.Keys {
			if other := b.Get(k.Name); other == nil || !m.under(k.Name).same(k.Value, other.Value) {
				return false
			}
		}
		return true
	}
	return source.Same(a, b)
}

// under is the comparison of what stands under a key.
func (m meaning) under(key string) meaning {
	m.refs = len(m.renames) > 0 && refKeys[key]
	return m
}

// nameNow is a reference under the names of the head: "donor.rf", or "cable.C1" of a
// waiver.
func (m meaning) nameNow(s string) string {
	name, rest, dotted := strings.Cut(s, ".")
	if now := m.renames.Of(name); now != name {
		if dotted {
			return now + "." + rest
		}
		return now
	}
	return m.renames.On(s)
}

func isNumber(n *source.Node) bool { return n.Kind == source.Integer || n.Kind == source.Float }

func numberOf(n *source.Node) float64 {
	if n.Kind == source.Integer {
		return float64(n.Int)
	}
	return n.Float
}

// sameQuantity reports two spellings of one quantity, connector or amount of money.
func sameQuantity(a, b string) bool {
	return both(a, b, unit.ParseLength) || both(a, b, unit.ParseTemperature) || both(a, b, unit.ParseSpeed) || both(a, b, unit.ParseMoney) ||
		both(a, b, func(s string) (float64, error) { g, err := unit.ParseGauge(s); return g.MM2, err }) || sameFace(a, b)
}

func sameFace(a, b string) bool {
	x, err := catalog.ParseFace(a)
	if err != nil {
		return false
	}
	y, err := catalog.ParseFace(b)
	return err == nil && catalog.SameFace(x, y)
}

func both[T comparable](a, b string, parse func(string) (T, error)) bool {
	x, err := parse(a)
	if err != nil {
		return false
	}
	y, err := parse(b)
	return err == nil && x == y
}

// mostValue is how long a value is shown, in characters.
const mostValue = 120

// valueText writes a value as a file would, on one line.
func valueText(n *source.Node) string {
	var b strings.Builder
	writeValue(&b, n)
	s := []rune(b.String())
	if len(s) > mostValue {
		return string(s[:mostValue-1]) + "…"
	}
	return string(s)
}

func writeValue(b *strings.Builder, n *source.Node) {
	if b.Len() > 4*mostValue {
		return
	}
	switch n.Kind {
	case source.Table:
		b.WriteString("{ ")
		for i, k := range n.Keys {
			if i > 0 {
				b.WriteString(", ")
			}
			b.WriteString(k.Name + " = ")
			if private[k.Name] || priceKeys[k.Name] { // a row as a whole is shown to everybody
				b.WriteString("…")
			} else {
				writeValue(b, k.Value)
			}
		}
		b.WriteString(" }")
	case source.Array:
		b.WriteString("[")
		for i, x := range n.Items {
			if i > 0 {
				b.WriteString(", ")
			}
			writeValue(b, x)
		}
		b.WriteString("]")
	case source.String:
		b.WriteString(n.Str)
	default:
		b.WriteString(n.At.Text())
	}
}

// private are the keys whose values are nobody's business but the firm's.
var private = map[string]bool{"serial": true, "serials": true, "address": true, "account": true, "contact": true}

// priceKeys tell what something costs.
var priceKeys = map[string]bool{"price": true, "breaks": true, "freight": true, "free_over": true, "least_order": true}
