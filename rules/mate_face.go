package rules

import (
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var mateSeries = &Rule{
	Name:  "mate/series",
	Title: "Connectors that meet are of series that join",
	Why:   "the plug in the crew's hand does not go on, and the job stands still for an adapter",
	Basis: []Basis{{Document: "the connector series' own interface standards, as the mating table names them (IEC 61169-15 SMA, -16 N, -24 F and others)", Kind: "standard", Proof: "memory"}},

	Weight: Hold,
	Check: func(c *Case, r *Report) {
		c.meetings(catalog.OtherMake, func(t touching) {
			t.fails(c, r, "%s is %s and %s is %s: the two series do not join", t.A.Name, t.A.Face.V, t.B.Name, t.B.Face.V)
		})
		c.checkFaceless(r)
	},
}

var mateGender = &Rule{
	Name:   "mate/gender",
	Title:  "A male half meets a female half",
	Why:    "two nuts, or two threads for a nut, do not go together, and the job stands still for an adapter",
	Basis:  []Basis{practice("one half has the nut or latch, the other takes it; for threaded series male and female follow the thread")},
	Weight: Hold,
	Check: func(c *Case, r *Report) {
		c.meetings(catalog.SameShell, func(t touching) {
			a, b := t.A.Face.V, t.B.Face.V
			if a.Written == b.Written {
				t.fails(c, r, "%s and %s are both %s: %s", t.A.Name, t.B.Name, a, bothHalves(a))
				return
			}
			t.fails(c, r, "%s is %s and %s is %s: %s", t.A.Name, a, t.B.Name, b, bothHalves(a))
		})
	},
}

var matePolarity = &Rule{
	Name:  "mate/polarity",
	Title: "Where the shells join, a pin meets a socket",
	Why:   "reverse polarity screws on as if it were right: pin on pin breaks both contacts, socket on socket passes next to nothing",
	Basis: []Basis{{Document: "encyclopedia article 'SMA connector': thread and contact of normal and reverse polarity", Kind: "practice", Proof: "read"}},

	Weight: Hold,
	Check: func(c *Case, r *Report) {
		c.meetings(catalog.WrongCore, func(t touching) {
			f := t.fails(c, r, "%s is %s and %s is %s: %s", t.A.Name, t.A.Face.V, t.B.Name, t.B.Face.V, t.core())
			if t.meets.Text != "" {
				f.By(Basis{Document: "mating table: " + t.meets.Source, Proof: t.meets.Proof}.String())
			}
		})
	},
}

// bothHalves says what two halves of one kind have in common.
func bothHalves(f catalog.Face) string {
	s, _ := catalog.LookSeries(f.Series)
	threaded := s != nil && (strings.HasPrefix(s.Coupling, "thread") || strings.HasPrefix(s.Coupling, "screw"))
	switch {
	case threaded && f.Shell == "inside":
		return "both have the nut, neither has the thread for it"
	case threaded:
		return "both have the thread, neither has the nut for it"
	case f.Shell == "inside":
		return "both go over the other half, and neither goes in"
	}
	return "both go into the other half, and neither goes over"
}

// touching is one pair of faces that meet in the plan, with what comes of it.
type touching struct {
	*bom.Contact
	mate  *bom.Mate
	index int // among the contacts of the mate
	meets catalog.Meeting
}

// touchings lists the pairs of faces of the plan that are both known, found once.
func (c *Case) touchings() []touching {
	if c.touch == nil {
		c.touch = c.findTouchings()
	}
	return c.touch
}

func (c *Case) findTouchings() []touching {
	out := []touching{}
	for _, m := range c.Graph.Mates {
		contacts := m.Contacts()
		for i := range contacts {
			x := &contacts[i]
			if x.A.Face.Set && x.B.Face.Set {
				out = append(out, touching{x, m, i, catalog.Meet(x.A.Face.V, x.B.Face.V, x.A.Ohm.V, x.B.Ohm.V)})
			}
		}
	}
	return out
}

// meetings calls do for each pair that meets in one way.
func (c *Case) meetings(fit catalog.Fit, do func(touching)) {
	for _, t := range c.touchings() {
		if t.meets.Fit == fit {
			do(t)
		}
	}
}

// fails reports the pair at the end, adapter or reference that makes it, with what
// of the catalog would join the two.
func (t touching) fails(c *Case, r *Report, says string, args ...any) *Finding {
	return r.Fails(t.at(), t.mate.On(), says, args...).Then("%s", c.remedy(t))
}

// core says what the contacts do.
func (t touching) core() string {
	if t.meets.Text != "" {
		return t.meets.Text
	}
	if t.A.Face.V.Contact == "pin" {
		return "the shells engage and pin meets pin"
	}
	return "the shells engage and socket faces socket"
}

// at is the tightest place that makes the pair: an adapter, a written cable end, or
// the reference.
func (t touching) at() source.Place {
	if t.index > 0 {
		return t.mate.Adapters[t.index-1].At
	}
	if n := t.mate.A; n.Cable != nil {
		return endPlace(n)
	}
	return t.mate.At
}

// endPlace is where the plan says what a cable end looks like, else where it goes,
// else the cable. What a cable takes over from another is not written on it.
func endPlace(n *bom.Node) source.Place {
	x := n.Cable
	if written, ok := writtenEnd(n); ok && !inherited(x, written.At) {
		return written.At
	}
	if len(n.Mates) > 0 {
		return n.Mates[0].At
	}
	return x.At
}

// writtenEnd is what the plan says of a cable end.
func writtenEnd(n *bom.Node) (source.Val[bom.EndRow], bool) {
	if ends := n.Cable.Row.Ends; ends.Set && ends.V[n.End-1].Set {
		return ends.V[n.End-1], true
	}
	return source.Val[bom.EndRow]{}, false
}

func inherited(x *bom.Cable, at source.Place) bool {
	if x.Like == nil || !x.Like.Row.Ends.Set {
		return false
	}
	for _, e := range x.Like.Row.Ends.V {
		if e.At == at {
			return true
		}
	}
	return false
}

// checkFaceless reports the ends of which nobody says what they look like. Where a
// part or connector did not resolve, another rule has said so.
func (c *Case) checkFaceless(r *Report) {
	for _, m := range c.Graph.Mates {
		for _, n := range []*bom.Node{m.A, m.B} {
			if !faceless(n, m) {
				continue
			}
			do := "write it in ends"
			if n.Cable.Row.Existing.V {
				do = "look at it on site and write it in ends"
			}
			r.Unknown(endPlace(n), n.On(), "the plan does not say which connector %s has; whether it joins %s is not assessed", n.Name(), neighbour(m, n).Name).
				Then("%s", do)
			break // one of the two is enough to ask for
		}
	}
}

// faceless reports a cable end whose face only the plan could give: of a cable that
// is there already and is to go on something new, or of two ends that neither of
// them says anything of. Two things that are both there already are joined already.
func faceless(n *bom.Node, m *bom.Mate) bool {
	x := n.Cable
	if x == nil || x.Part == nil || x.Part.Cable == nil {
		return false
	}
	if _, written := writtenEnd(n); written {
		return false
	}
	if x.Row.Existing.V {
		return !standing(m.Other(n))
	}
	return !n.Face.Set && !neighbour(m, n).Face.Set && m.Other(n).Cable != nil
}

// standing reports what is there already.
func standing(n *bom.Node) bool {
	if n.Device != nil {
		return n.Device.Row.Existing.V
	}
	return n.Cable.Row.Existing.V
}

// neighbour is the half that a node of a mate meets.
func neighbour(m *bom.Mate, n *bom.Node) bom.Half {
	contacts := m.Contacts()
	if m.A == n {
		return contacts[0].B
	}
	return contacts[len(contacts)-1].A
}
