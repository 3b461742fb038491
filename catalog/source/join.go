package source

import (
	"errors"
	"fmt"
	"time"

	"github.com/BurntSushi/toml"
)

// disagreement reads the file a second time, with a parser that shares no code
// with the first, and reports the first place where the two differ: what two
// programs read differently, a third would too, and a plan must mean one thing.
// The document is complete without it; the second reading is a referee only.
func disagreement(d *Doc) []Problem {
	var second map[string]any
	if err := decode(d.File.Src, &second); err != nil {
		return []Problem{refusal(d.File, err)}
	}
	at, differs := difference(d.Root, second)
	if !differs {
		return nil
	}
	return []Problem{{Kind: Syntax, At: at,
		Says: "two readers of TOML understand this differently",
		Do:   "write it in a simpler way"}}
}

// decode is the second reading. The parser panics on some texts that its own
// scanner let pass.
func decode(src []byte, to *map[string]any) (err error) {
	defer func() {
		if r := recover(); r != nil {
			err = fmt.Errorf("%v", r)
		}
	}()
	_, err = toml.Decode(string(src), to)
	return err
}

// refusal is the problem of a file that the second reading refuses as a whole.
func refusal(f *File, err error) Problem {
	at, says := f.Start(), err.Error()
	var parse toml.ParseError
	if errors.As(err, &parse) {
		from := min(max(parse.Position.Start, 0), len(f.Src))
		at = f.stretch(from, min(from+max(parse.Position.Len, 0), len(f.Src)))
		says = parse.Message
	}
	return Problem{Kind: Syntax, At: at,
		Says: "one of two readers of TOML refuses this: " + Quote(says),
		Do:   "write it in a simpler way"}
}

// difference finds the first place at which a node and the value of the second
// reading differ.
func difference(n *Node, v any) (Place, bool) {
	switch v := v.(type) {
	case map[string]any:
		return differentTable(n, v)
	case []map[string]any:
		return differentItems(n, v)
	case []any:
		return differentItems(n, v)
	}
	return n.At, !sameScalar(n, v)
}

func differentTable(n *Node, v map[string]any) (Place, bool) {
	if n.Kind != Table || len(n.Keys) != len(v) {
		return n.At, true
	}
	for _, k := range n.Keys {
		second, ok := v[k.Name]
		if !ok {
			return k.At, true
		}
		if at, differs := difference(k.Value, second); differs {
			return at, true
		}
	}
	return Place{}, false
}

func differentItems[T any](n *Node, v []T) (Place, bool) {
	if n.Kind != Array || len(n.Items) != len(v) {
		return n.At, true
	}
	for i, item := range n.Items {
		if at, differs := difference(item, v[i]); differs {
			return at, true
		}
	}
	return Place{}, false
}

func sameScalar(n *Node, v any) bool {
	switch v := v.(type) {
	case string:
		return n.Kind == String && n.Str == v
	case int64:
		return n.Kind == Integer && n.Int == v
	case float64:
		return n.Kind == Float && n.Float == v
	case bool:
		return n.Kind == Bool && n.Bool == v
	case time.Time:
		kind, t := timeOf(v)
		return n.Kind == kind && n.Time.Equal(t)
	}
	return false
}

// timeOf tells the kind of a time of the second reading, which marks local ones
// by the name of their zone, and moves local ones to UTC.
func timeOf(t time.Time) (NodeKind, time.Time) {
	kind := DateTime
	switch t.Location().String() {
	case "datetime-local":
		kind = LocalDateTime
	case "date-local":
		kind = LocalDate
	case "time-local":
		kind = LocalTime
	default:
		return kind, t
	}
	y, m, d := t.Date()
	return kind, time.Date(y, m, d, t.Hour(), t.Minute(), t.Second(), t.Nanosecond(), time.UTC)
}
