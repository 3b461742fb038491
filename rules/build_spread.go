package rules

import (
	"math"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// spreadLine is a coaxial, data or supply line with the places that it passes.
type spreadLine struct {
	id, on string
	at     source.Place
	part   *catalog.Part // what the plan names
	jacket *catalog.Part // whose jacket it is: of a jumper, its cable; nil where nobody knows
	cable  *bom.Cable    // of a coaxial line
	length source.Val[unit.MM]
	stops  []bom.Section // ends included, with the lengths that the plan gives

	existing bool
}

// spread lists the lines of the plan with their places. A line whose part did not
// resolve has a finding and is left out.
func (c *Case) spread() []spreadLine {
	out := make([]spreadLine, 0, len(c.Graph.Cables)+len(c.Graph.Data)+len(c.Graph.Wires))
	for _, x := range c.Graph.Cables {
		if x.Part == nil {
			continue
		}
		s := spreadLine{id: x.ID, on: x.On(), at: placeOr(x.Row.Part.At, x.At), part: x.Part, jacket: x.Part, cable: x, length: x.Length, existing: x.Row.Existing.V}
		if x.Part.Jumper != nil {
			s.jacket = c.Firm.Catalog.Look(x.Part.Jumper.Cable.V)
		}
		s.stops = wholeWay(endPlaces(x.Ends[0]), x.Way, endPlaces(x.Ends[1]))
		out = append(out, s)
	}
	for _, d := range c.Graph.Data {
		if d.Part != nil {
			out = append(out, spreadLine{id: d.Row.ID, on: d.On(), at: d.Row.Part.At, part: d.Part, jacket: d.Part, length: d.Row.Length, existing: d.Row.Existing.V,
				stops: wholeWay(nodePlace(d.From), d.Way, nodePlace(d.To))})
		}
	}
	for _, w := range c.Graph.Wires {
		if w.Part != nil {
			out = append(out, spreadLine{id: w.Row.ID, on: w.On(), at: w.Row.Part.At, part: w.Part, jacket: w.Part, length: w.Row.Length, existing: w.Row.Existing.V,
				stops: wholeWay(nodePlace(w.From), w.Way, nodePlace(w.To))})
		}
	}
	return out
}

// wholeWay puts the way of a line between the places of its ends; an end that lies
// where the way begins or ends adds nothing.
func wholeWay(from *bom.Place, way []bom.Section, to *bom.Place) []bom.Section {
	out := slices.Clone(way)
	if from != nil && (len(out) == 0 || out[0].Place != from) {
		out = append([]bom.Section{{Place: from}}, out...)
	}
	if to != nil && (len(out) == 0 || out[len(out)-1].Place != to) {
		out = append(out, bom.Section{Place: to})
	}
	return out
}

func endPlaces(e *bom.Node) *bom.Place {
	for _, m := range e.Mates {
		if p := nodePlace(m.Other(e)); p != nil {
			return p
		}
	}
	return nil
}

func nodePlace(n *bom.Node) *bom.Place {
	if n == nil || n.Device == nil {
		return nil
	}
	return n.Device.Place
}

// places lists the places that the line passes, each once.
func (s *spreadLine) places() []*bom.Place {
	out := make([]*bom.Place, 0, len(s.stops))
	for _, x := range s.stops {
		if !slices.Contains(out, x.Place) {
			out = append(out, x.Place)
		}
	}
	return out
}

// lengthIn is how much of the line lies in some places, in mm: by the lengths of its
// way; all of it where it passes no others but entries; else at most what is left.
func (s *spreadLine) lengthIn(in func(*bom.Place) bool) span {
	inside, outside, all, only := 0.0, 0.0, true, true
	for _, x := range s.stops {
		switch {
		case in(x.Place):
			inside += float64(x.Length.V)
			all = all && x.Length.Set
		case x.Place.Kind.V != "entry":
			only = false
			outside += float64(x.Length.V)
		}
	}
	switch {
	case all && inside > 0:
		return exactly(inside)
	case !s.length.Set:
		return span{inside, math.Inf(1)}
	case only:
		return exactly(float64(s.length.V))
	}
	return span{inside, max(inside, float64(s.length.V)-outside)}
}
