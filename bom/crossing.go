package bom

import (
	"iter"

	"driploop/catalog/source"
)

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
	n := 0
	for range l.crossed() {
		n++
	}
	if n == 0 {
		return nil
	}
	out := make([]Crossing, 0, n)
	for from, to := range l.crossed() {
		out = append(out, l.crossing(from, to))
	}
	return out
}

// crossed yields the stations on either side of each crossing.
func (l *Line) crossed() iter.Seq2[station, station] {
	return func(yield func(from, to station) bool) {
		var last station
		for s := range l.stations {
			if !s.place.Outdoors() && !s.place.Indoors() {
				continue
			}
			if last.place != nil && last.place.Outdoors() != s.place.Outdoors() && !yield(last, s) {
				return
			}
			last = s
		}
	}
}

func (l *Line) crossing(from, to station) Crossing {
	c := Crossing{Line: l, Out: from.place, In: to.place, Outer: from.step, Inner: to.step}
	if from.place.Indoors() {
		c.Out, c.In, c.Outer, c.Inner, c.In1st = to.place, from.place, to.step, from.step, true
	}
	for i := from.step; i <= to.step && i < len(l.Steps); i++ {
		switch s := l.Steps[i]; {
		case s.Cable != nil:
			c.On, c.At, c.There = s.Cable.On(), s.Cable.At, s.Cable.Row.Existing.V
			return c
		case s.Mate != nil && s.Mate.Joint != nil && s.Contact != nil:
			c.On, c.At, c.There = s.Mate.On(), s.Mate.At, s.Mate.existing()
		}
	}
	if c.On == "" {
		c.On, c.At = l.On(), l.At()
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

// stations yields the places that the line passes, its ends included.
func (l *Line) stations(yield func(station) bool) {
	at := func(p *Place, step int) bool { return p == nil || yield(station{p, step}) }
	if l.From.Device != nil && !at(l.From.Device.Place, 0) {
		return
	}
	for i, s := range l.Steps {
		var way []Section
		switch {
		case s.Cable != nil:
			way = s.Cable.Way
		case s.Mate != nil && len(s.Mate.Way) > 0:
			way = s.Mate.Way
		case s.Pass != nil && s.Pass.Device != nil:
			if !at(s.Pass.Device.Place, i) {
				return
			}
		}
		for k := range way {
			if s.Reverse {
				k = len(way) - 1 - k
			}
			if !at(way[k].Place, i) {
				return
			}
		}
	}
	if l.To.Device != nil {
		at(l.To.Device.Place, len(l.Steps))
	}
}
