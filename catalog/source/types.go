package source

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
	"time"

	"driploop/catalog/unit"
)

// Type reads one kind of value. Its zero value reads nothing.
type Type[T any] struct {
	Shape TypeDoc
	parse func(*Node) (T, []bad)
	spell func(*Node, *layout) // notes what could be spelled otherwise; nil: nothing
}

// bad is one thing wrong inside a value, at the element at fault.
type bad struct {
	kind     ProblemKind // 0: nothing more to say
	at       Place
	says, do string
	also     []Place
	missing  bool // a key that is not there
}

func refuse(at Place, says, do string) []bad {
	return []bad{{kind: Value, at: at, says: says, do: do}}
}

func expected(n *Node, want, example string) []bad {
	if n.Kind == Refused {
		return []bad{{}} // reported when the file was parsed
	}
	return refuse(n.At, fmt.Sprintf("%s was read, %s is expected", n.describe(), want), "write "+example)
}

// Text is any string.
var Text = Type[string]{TypeDoc{Name: "text", Example: `"…"`}, parseText, nil}

func parseText(n *Node) (string, []bad) {
	if n.Kind != String {
		return "", expected(n, "text", "it in quotes")
	}
	return n.Str, nil
}

// Flag is true or false.
var Flag = Type[bool]{TypeDoc{Name: "true or false", Example: "true", Form: &Form{Base: Truth}}, func(n *Node) (bool, []bad) {
	if n.Kind != Bool {
		return false, expected(n, "true or false", "true or false without quotes")
	}
	return n.Bool, nil
}, nil}

// Name is an ID as parts, devices and places carry it.
var Name = Shaped(Checked("name", `"amp-1"`, NameOf), Form{Pattern: NamePattern})

// NamePattern is the form of an ID.
const NamePattern = `^[A-Za-z0-9][A-Za-z0-9_-]{0,63}$`

// NameOf returns s, or the reason why it is no name.
func NameOf(s string) (string, error) {
	if !ValidID(s) {
		return "", fmt.Errorf("%s is no name: letters, digits, - and _, 64 at most", Quote(s))
	}
	return s, nil
}

// Quantities that carry their unit in the string.
var (
	Length      = Spelled(Shaped(Checked("length", `"18.5 m"`, unit.ParseLength), Form{Pattern: unit.LengthPattern}), unit.Spell, equal)
	Temperature = Spelled(Shaped(Checked("temperature", `"45 C"`, unit.ParseTemperature), Form{Pattern: unit.TemperaturePattern}), unit.Spell, equal)
	Speed       = Spelled(Shaped(Checked("speed", `"44 m/s"`, unit.ParseSpeed), Form{Pattern: unit.SpeedPattern}), unit.Spell, equal)
	Size        = Spelled(Shaped(Checked("conductor size", `"10 AWG"`, unit.ParseGauge), Form{Pattern: unit.GaugePattern}), unit.Spell, sameSize)
	Price       = Shaped(Checked("money amount", `"318.00"`, unit.ParseMoney), Form{Pattern: unit.MoneyPattern})
)

// Checked is a string that a function reads or refuses.
func Checked[T any](name, example string, read func(string) (T, error)) Type[T] {
	return Type[T]{TypeDoc{Name: name, Example: example}, func(n *Node) (T, []bad) {
		var none T
		if n.Kind != String {
			return none, expected(n, article(name)+" "+name, "it like "+example)
		}
		v, err := read(n.Str)
		if err != nil {
			return none, refuse(n.At, err.Error(), "write it like "+example)
		}
		return v, nil
	}, nil}
}

// Shaped adds to a type what a machine may know of its values.
func Shaped[T any](t Type[T], f Form) Type[T] {
	t.Shape.Form = &f
	return t
}

// Filled is a list with one item at least; the function that takes the list says so.
func Filled[T any](t Type[[]Val[T]]) Type[[]Val[T]] {
	t.Shape.Form = filledForm
	return t
}

// Exactly is a list of n items; the function that takes the list holds it to that.
func Exactly[T any](n int, t Type[[]Val[T]]) Type[[]Val[T]] {
	return Shaped(t, Form{Least: n, Most: n})
}

// AtMost is a list of no more than n items; what says what they are, as in "places". A
// longer one is none.
func AtMost[T any](n int, t Type[[]Val[T]], what string) Type[[]Val[T]] {
	t.Shape.Form = &Form{Most: n}
	list := t.parse
	t.parse = func(node *Node) ([]Val[T], []bad) {
		if len(node.Items) > n {
			return nil, refuse(node.At, fmt.Sprintf("%d %s were read, %d are the most", len(node.Items), what, n), "leave some out")
		}
		return list(node)
	}
	return t
}

func article(noun string) string {
	if strings.ContainsRune("aeiou", rune(noun[0])) {
		return "an"
	}
	return "a"
}

// Day is a local date.
var Day = Type[unit.Date]{TypeDoc{Name: "date", Example: "2026-12-01", Form: &Form{Base: OfDay}}, func(n *Node) (unit.Date, []bad) {
	if n.Kind != LocalDate {
		return unit.Date{}, expected(n, "a date", "it like 2026-12-01, without quotes")
	}
	return unit.DateOf(n.Time), nil
}, nil}

// When is a local date-time.
var When = Type[time.Time]{TypeDoc{Name: "local time", Example: "2026-12-01T16:00:00", Form: &Form{Base: OfTime}}, func(n *Node) (time.Time, []bad) {
	if n.Kind != LocalDateTime {
		return time.Time{}, expected(n, "a date or a local time", "it like 2026-12-01T16:00:00, without quotes and without zone")
	}
	return n.Time, nil
}, nil}

// Number is any finite number.
var Number = number("number", nil, nil)

// Between is a number from lo to hi, both inside, in the unit that is named.
func Between(lo, hi float64, unit string) Type[float64] { return number(unit, &lo, &hi) }

// AtLeast is a number from lo on, in the unit that is named.
func AtLeast(lo float64, unit string) Type[float64] { return number(unit, &lo, nil) }

var (
	numberForm = &Form{Base: AnyNumber}
	wholeForm  = &Form{Base: Whole}
	pairForm   = &Form{Least: 2, Most: 2}
	filledForm = &Form{Least: 1}
)

func number(name string, lo, hi *float64) Type[float64] {
	return Type[float64]{TypeDoc{Name: name, Min: lo, Max: hi, Form: numberForm}, func(n *Node) (float64, []bad) {
		v, ok := n.number()
		if !ok {
			return 0, expected(n, "a number ("+name+")", "it without quotes and without unit")
		}
		if lo != nil && v < *lo || hi != nil && v > *hi {
			return 0, refuse(n.At, fmt.Sprintf("%s is outside %s", plain(v), bounds(lo, hi, name)), "check the figure and its unit")
		}
		return v, nil
	}, nil}
}

func bounds(lo, hi *float64, unit string) string {
	if unit = " " + unit; unit == " number" {
		unit = ""
	}
	switch {
	case lo != nil && hi != nil:
		return plain(*lo) + " to " + plain(*hi) + unit
	case lo != nil:
		return "what begins at " + plain(*lo) + unit
	}
	return "what ends at " + plain(*hi) + unit
}

func plain(v float64) string { return strconv.FormatFloat(v, 'f', -1, 64) }

// Count is a whole number from lo to hi.
func Count(lo, hi int) Type[int] {
	l, h := float64(lo), float64(hi)
	return Type[int]{TypeDoc{Name: "whole number", Min: &l, Max: &h, Form: wholeForm}, func(n *Node) (int, []bad) {
		if n.Kind != Integer {
			return 0, expected(n, "a whole number", "it without quotes and without decimals")
		}
		if n.Int < int64(lo) || n.Int > int64(hi) {
			return 0, refuse(n.At, fmt.Sprintf("%d is outside %d to %d", n.Int, lo, hi), "check the figure")
		}
		return int(n.Int), nil
	}, nil}
}

// OneOf is one word of a fixed list.
func OneOf(words ...string) Type[string] {
	return Type[string]{TypeDoc{Name: "one of", OneOf: words}, func(n *Node) (string, []bad) {
		if n.Kind == String && contains(words, n.Str) {
			return n.Str, nil
		}
		all := strings.Join(words, ", ")
		if n.Kind != String {
			return "", expected(n, "one of "+all, "one of them in quotes")
		}
		do := "write one of them"
		if near := Nearest(n.Str, words); near != "" {
			do = "did you mean " + near + "?"
		}
		return "", refuse(n.At, fmt.Sprintf("%s is not one of %s", Quote(n.Str), all), do)
	}, nil}
}

// ListOf is a list whose items are all of one type; every item keeps its place.
func ListOf[T any](t Type[T]) Type[[]Val[T]] {
	item := t.Shape
	return Type[[]Val[T]]{TypeDoc{Name: "list", List: &item}, func(n *Node) ([]Val[T], []bad) {
		if n.Kind != Array {
			return nil, expected(n, "a list", "it in brackets")
		}
		if len(n.Items) == 0 {
			return nil, nil
		}
		out := make([]Val[T], 0, len(n.Items))
		var all []bad
		for _, i := range n.Items {
			v, b := t.parse(i)
			all = append(all, b...)
			out = append(out, Val[T]{v, i.At, len(b) == 0})
		}
		return out, all
	}, spellItems(t)}
}

// Pair is a list of exactly two values.
func Pair[T any](t Type[T], example string) Type[[2]T] {
	item := t.Shape
	return Type[[2]T]{TypeDoc{Name: "pair", Example: example, List: &item, Form: pairForm}, func(n *Node) ([2]T, []bad) {
		var out [2]T
		if n.Kind != Array || len(n.Items) != 2 {
			return out, expected(n, "a pair", "it like "+example)
		}
		var all []bad
		for i, item := range n.Items {
			v, b := t.parse(item)
			out[i], all = v, append(all, b...)
		}
		return out, all
	}, spellItems(t)}
}

// Either reads a value by the first type if its kind fits, else by the second.
func Either[T any](fits func(*Node) bool, a, b Type[T], name string) Type[T] {
	both := func() []TypeDoc { return []TypeDoc{a.Shape, b.Shape} }
	return Type[T]{TypeDoc{Name: name, Example: a.Shape.Example, Choice: both}, func(n *Node) (T, []bad) {
		if fits(n) {
			return a.parse(n)
		}
		return b.parse(n)
	}, spellEither(fits, a, b)}
}

// Map changes what a type yields, or refuses it after all.
func Map[A, B any](t Type[A], convert func(A) (B, error)) Type[B] {
	return Type[B]{t.Shape, func(n *Node) (B, []bad) {
		var none B
		a, bads := t.parse(n)
		if len(bads) > 0 {
			return none, bads
		}
		v, err := convert(a)
		if err != nil {
			return none, refuse(n.At, err.Error(), "check the figure")
		}
		return v, nil
	}, t.spell}
}

// IsArray, IsTable and IsString tell the shapes that Either chooses by.
func IsArray(n *Node) bool { return n.Kind == Array }

// IsTable reports an inline or other table.
func IsTable(n *Node) bool { return n.Kind == Table }

// IsDay reports a local date.
func IsDay(n *Node) bool { return n.Kind == LocalDate }

// IsString reports a string.
func IsString(n *Node) bool { return n.Kind == String }

// Inline is a table read by a bind function, as a value inside lists and pairs.
func Inline[R any](bind func(*R, *Keys)) Type[R] {
	sub := func() *Record { return Describe(func(k *Keys) { bind(new(R), k) }) }
	return Type[R]{TypeDoc{Name: "table", Sub: sub}, func(n *Node) (R, []bad) {
		var row R
		if n.Kind != Table {
			return row, expected(n, "a table", "it in braces")
		}
		r := &reading{}
		readInline(&row, n, bind, r)
		var all []bad
		for i, p := range r.problems {
			all = append(all, bad{p.Kind, p.At, p.Says, p.Do, p.Also, slices.Contains(r.missing, i)})
		}
		return row, all
	}, spellInline(bind)}
}

func readInline[R any](row *R, n *Node, bind func(*R, *Keys), r *reading) {
	k := &Keys{at: n.At, table: n, read: r, known: make([]string, 0, 8)}
	bind(row, k)
	k.finish()
}

func (n *Node) number() (float64, bool) {
	switch n.Kind {
	case Integer:
		return float64(n.Int), true
	case Float:
		return n.Float, !math.IsNaN(n.Float) && !math.IsInf(n.Float, 0)
	}
	return 0, false
}

// describe names a value in a message.
func (n *Node) describe() string {
	switch n.Kind {
	case String:
		return "the text " + Quote(n.Str)
	case Integer:
		return "the number " + strconv.FormatInt(n.Int, 10)
	case Float:
		return "the number " + plain(n.Float)
	case Bool:
		return strconv.FormatBool(n.Bool)
	case Table:
		return "a table"
	case Array:
		return "a list"
	case LocalDate:
		return "the date " + n.Time.Format("2006-01-02")
	case LocalDateTime, DateTime:
		return "the time " + n.Time.Format("2006-01-02 15:04:05")
	case LocalTime:
		return "the time " + n.Time.Format("15:04:05")
	}
	return "nothing"
}
