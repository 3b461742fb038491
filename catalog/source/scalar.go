package source

import (
	"bytes"
	"errors"
	"math"
	"strconv"
	"strings"
	"time"

	"github.com/pelletier/go-toml/v2/unstable"
)

var timeKinds = map[unstable.Kind]NodeKind{
	unstable.DateTime:      DateTime,
	unstable.LocalDateTime: LocalDateTime,
	unstable.LocalDate:     LocalDate,
	unstable.LocalTime:     LocalTime,
}

// scalar puts kind and value into the node of a plain value.
func (x *indexer) scalar(n *Node, e *unstable.Node) {
	switch e.Kind {
	case unstable.String:
		x.refuseNewEscapes(n.At)
		x.odd = x.odd || int(n.At.To-n.At.From) != len(e.Data)+len(`""`) // escapes, or several lines
		n.Kind, n.Str = String, string(e.Data)
	case unstable.Bool:
		n.Kind, n.Bool = Bool, e.Data[0] == 't'
	case unstable.Integer:
		x.odd = x.odd || !plainNumber(e.Data)
		x.integer(n, e.Data)
	case unstable.Float:
		x.odd = x.odd || !plainNumber(e.Data)
		x.float(n, e.Data)
	default:
		x.odd = x.odd || e.Kind != unstable.LocalDate
		x.time(n, timeKinds[e.Kind], e.Data)
	}
}

// plainNumber reports digits with at most a minus and a point.
func plainNumber(text []byte) bool {
	for i, c := range text {
		if (c < '0' || c > '9') && c != '.' && (c != '-' || i > 0) {
			return false
		}
	}
	return true
}

func (x *indexer) integer(n *Node, text []byte) {
	v, err := strconv.ParseInt(withoutUnderscores(text), 0, 64)
	if err != nil {
		x.refuse(n, Value, "the whole number is too large to be held exactly", "check the figure")
		return
	}
	n.Kind, n.Int = Integer, v
}

func (x *indexer) float(n *Node, text []byte) {
	v, err := strconv.ParseFloat(withoutUnderscores(text), 64)
	switch {
	case errors.Is(err, strconv.ErrRange):
		x.refuse(n, Value, "the number is too large", "check the figure")
	case err != nil || math.IsNaN(v) || math.IsInf(v, 0):
		x.refuse(n, Value, string(text)+" is no figure to reckon with", "give the figure, or leave the key out where it is unknown")
	default:
		n.Kind, n.Float = Float, v
	}
}

func (x *indexer) time(n *Node, kind NodeKind, text []byte) {
	v, fault := readTime(kind, string(text))
	if fault != "" {
		x.refuse(n, Syntax, fault, "write a date like 2026-12-01, a time like 14:30:00, both joined by T, and an offset like +01:00")
		return
	}
	n.Kind, n.Time = kind, v
}

// refuse reports a value that cannot stand and leaves the node without kind.
func (x *indexer) refuse(n *Node, kind ProblemKind, says, do string) {
	n.Kind = Refused
	x.report(Problem{Kind: kind, At: n.At, Says: says, Do: do})
}

func withoutUnderscores(text []byte) string {
	return string(bytes.ReplaceAll(text, []byte("_"), nil))
}

var (
	uniform  = strings.NewReplacer("t", "T", " ", "T", "z", "Z")
	layouts  = map[NodeKind]string{DateTime: time.RFC3339, LocalDateTime: "2006-01-02T15:04:05", LocalDate: time.DateOnly, LocalTime: time.TimeOnly}
	patterns = map[NodeKind]string{DateTime: "0000-00-00T00:00:00", LocalDateTime: "0000-00-00T00:00:00", LocalDate: "0000-00-00", LocalTime: "00:00:00"}
)

// readTime reads a date or time, local ones as if in UTC. It is stricter than
// package time, which takes single digits and offsets of 99 minutes.
func readTime(kind NodeKind, text string) (t time.Time, fault string) {
	text = uniform.Replace(text)
	pattern := patterns[kind]
	rest, ok := cutPattern(text, pattern)
	if !ok {
		if rest, ok := cutPattern(text, strings.TrimSuffix(pattern, ":00")); ok && kind != LocalDate && !strings.HasPrefix(rest, ":") {
			return t, "the time has no seconds"
		}
		return t, "this is no date or time"
	}
	if kind != LocalDate {
		rest = cutFraction(rest)
	}
	if kind == DateTime && !offsetStands(rest) {
		return t, "the offset of the time is no time zone"
	}
	if kind != DateTime && rest != "" {
		return t, "this is no date or time"
	}
	t, err := time.ParseInLocation(layouts[kind], text, time.UTC)
	if err != nil {
		return t, "there is no such date or time"
	}
	return t, ""
}

// cutPattern cuts off what the pattern stands for: 0 is any digit, all else itself.
func cutPattern(text, pattern string) (rest string, ok bool) {
	if len(text) < len(pattern) {
		return text, false
	}
	for i := range len(pattern) {
		c := text[i]
		if digit := c >= '0' && c <= '9'; pattern[i] == '0' && !digit || pattern[i] != '0' && c != pattern[i] {
			return text, false
		}
	}
	return text[len(pattern):], true
}

// cutFraction cuts off fractions of a second; that there are digits behind the
// point is for package time to see.
func cutFraction(text string) string {
	if digits, ok := strings.CutPrefix(text, "."); ok {
		return strings.TrimLeft(digits, "0123456789")
	}
	return text
}

// offsetStands reports whether text is Z or an offset of at most 23:59.
func offsetStands(text string) bool {
	if text == "Z" {
		return true
	}
	if text == "" || text[0] != '+' && text[0] != '-' {
		return false
	}
	rest, ok := cutPattern(text[1:], "00:00")
	return ok && rest == "" && text[1:3] <= "23" && text[4:] <= "59"
}
