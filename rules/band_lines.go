package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// everything is all spectrum that a plan can speak of.
var everything = unit.Span{Lo: 0, Hi: 300000}

// activeEnds are the ends of a line at an amplifier or router.
func activeEnds(l *bom.Line) []*bom.Node {
	out := make([]*bom.Node, 0, 2)
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device != nil && n.Device.Part != nil && n.Device.Active() {
			out = append(out, n)
		}
	}
	return out
}

// bandWays knows which planned bands are to go over which line.
type bandWays struct {
	c     *Case
	by    division
	at    map[*bom.Node][]*bom.Line // by the nodes at both ends
	whole map[wayOut]bool
}

// wayOut is a port of an amplifier or router, a kind of line, and a band.
type wayOut struct {
	from *bom.Node
	kind bom.LineKind
	band string
}

func (c *Case) bandWays() *bandWays {
	w := &bandWays{c: c, by: c.division(), at: map[*bom.Node][]*bom.Line{}, whole: map[wayOut]bool{}}
	for _, l := range c.Lines().All {
		w.at[l.From] = append(w.at[l.From], l)
		if l.To != l.From {
			w.at[l.To] = append(w.at[l.To], l)
		}
	}
	return w
}

// meant reports whether a planned band is to go over a feed, leg or link. It is not where a port
// at its end is for something else, where another amplifier or router of the plan
// does the band, and where a diplexer or filter sends it another way.
func (w *bandWays) meant(l *bom.Line, b catalog.Band) bool {
	for _, n := range activeEnds(l) {
		if n.Port.Use.Or("cellular") != "cellular" || n.Port.Bands.Set && listLeavesOut(b, n.Port.Bands.V).All() {
			return false
		}
		if left, known := runsWithout(n.Device, b); known && left.All() && w.by.elsewhere(n.Device, b) != "" {
			return false
		}
	}
	return !parts(l, b) || !w.goesAnotherWay(l, b)
}

// parts reports a line on which a diplexer or filter keeps some of a band off.
func parts(l *bom.Line, b catalog.Band) bool {
	for _, s := range l.Steps {
		if s.Pass == nil {
			continue
		}
		switch s.Pass.Part.Kind.V {
		case "diplexer", "filter":
			if left, known := passLeavesOut(s.Pass, b); known && !left.Nothing() {
				return true
			}
		}
	}
	return false
}

// goesAnotherWay reports whether a line from the same amplifier or router port
// passes the whole band; one on which parts holds is not itself that line.
func (w *bandWays) goesAnotherWay(l *bom.Line, b catalog.Band) bool {
	for _, n := range activeEnds(l) {
		key := wayOut{n, l.Kind, b.Name}
		passes, known := w.whole[key]
		if !known {
			passes = slices.ContainsFunc(w.at[n], func(o *bom.Line) bool { return o.Kind == l.Kind && passesAll(o, b) })
			w.whole[key] = passes
		}
		if passes {
			return true
		}
	}
	return false
}

func passesAll(l *bom.Line, b catalog.Band) bool {
	for _, s := range l.Steps {
		if s.Pass == nil {
			continue
		}
		if left, known := passLeavesOut(s.Pass, b); !known || !left.Nothing() {
			return false
		}
	}
	return true
}

// passLeavesOut is what of a band the rows of a passive part do not hold for;
// false where it has no row for that way through.
func passLeavesOut(p *bom.Pass, b catalog.Band) (leftOut, bool) {
	covers, known := passCovers(p)
	return leavesOut(b, covers, covers), known
}

func passCovers(p *bom.Pass) ([]unit.Span, bool) {
	var out []unit.Span
	for _, row := range p.Rows {
		if row.MHz.Set {
			out = append(out, row.MHz.V)
		} else {
			out = append(out, everything)
		}
	}
	return out, len(out) > 0
}
