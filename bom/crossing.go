package bom

import "driploop/catalog/source"

// Crossing is where a line goes between outdoors and indoors.
type Crossing struct {
	Line  *Line
	On    string       // what findings about it stand on: the cable or joint that crosses
	At    source.Place // of that
	Out   *Place       // last place outdoors
	In    *Place       // first place indoors
	Outer int          // step of the line up to which it is outdoors
	Inner int          // step of the line from which on it is indoors
	In1st bool         // the line is indoors first and comes out
	There bool         // what crosses is there already
}

// station is a place that a line passes, with the step that it belongs to.
type station struct {
	place *Place
	step  int
}

// Crossings lists where a line crosses, in its direction. An entry is the
// boundary itself and belongs to neither side.
func (l *Line) Crossings() []Crossing {
	var out []Crossing
	var last station
	for _, s := range l.stations() {
		if !s.place.Outdoors() && !s.place.Indoors() {
			continue
		}
		if last.place != nil && last.place.Outdoors() != s.place.Outdoors() {
			out = append(out, l.crossing(last, s))
		}
		last = s
	}
	return out
}

func (l *Line) crossing(from, to station) Crossing {
	c := Crossing{Line: l, Out: from.place, In: to.place, Outer: from.step, Inner: to.step}
	if from.place.Indoors() {
		c.Out, c.In, c.Outer, c.Inner, c.In1st = to.place, from.place, to.step, from.step, true
	}
	c.On, c.At = l.On(), l.At()
	for i := from.step; i <= to.step && i < len(l.Steps); i++ {
		switch s := l.Steps[i]; {
		case s.Cable != nil:
			c.On, c.At, c.There = s.Cable.On(), s.Cable.At, s.Cable.Row.Existing.V
			return c
		case s.Mate != nil && s.Mate.Joint != nil && s.Contact != nil:
			c.On, c.At, c.There = s.Mate.On(), s.Mate.At, s.Mate.existing()
		}
	}
	return c
}

// On is what findings about a mate stand on: its cable, or the joint.
func (m *Mate) On() string {
	if m.Joint != nil {
		n := m.A
		if n.Device == nil {
			n = m.B
		}
		if n.Device != nil {
			return "joint." + n.Device.ID + "-" + n.Port.Name
		}
	}
	for _, n := range []*Node{m.A, m.B} {
		if n.Cable != nil {
			return n.Cable.On()
		}
	}
	return m.A.On()
}

// stations lists the places that the line passes, its ends included.
func (l *Line) stations() []station {
	var out []station
	add := func(p *Place, step int) {
		if p != nil {
			out = append(out, station{p, step})
		}
	}
	if l.From.Device != nil {
		add(l.From.Device.Place, 0)
	}
	for i, s := range l.Steps {
		switch {
		case s.Cable != nil:
			for _, leg := range turnWay(s.Cable.Way, s.Reverse) {
				add(leg.Place, i)
			}
		case s.Mate != nil && len(s.Mate.Way) > 0:
			for _, leg := range turnWay(s.Mate.Way, s.Reverse) {
				add(leg.Place, i)
			}
		case s.Pass != nil && s.Pass.Device != nil:
			add(s.Pass.Device.Place, i)
		}
	}
	if l.To.Device != nil {
		add(l.To.Device.Place, len(l.Steps))
	}
	return out
}

func turnWay(way []Section, back bool) []Section {
	if !back {
		return way
	}
	out := make([]Section, len(way))
	for i, leg := range way {
		out[len(way)-1-i] = leg
	}
	return out
}
