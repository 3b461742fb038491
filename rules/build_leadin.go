package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/mech"
	"driploop/rules/rf"
)

// lowVoltageKV is up to where a lead-in may come nearer to a line: 250 V between
// conductors (NEC 810.18(A); read).
const lowVoltageKV = 0.25

// run is a coaxial or data line as it hangs outdoors: straight from point to point.
type run struct {
	id, on string
	at     source.Place
	stops  []runStop
}

type runStop struct {
	place *bom.Place
	point source.Val[bom.Point]
}

// checkLeadIns holds every line outdoors against the power lines that no mast comes
// near: what falls onto a line has been said.
func (c *Case) checkLeadIns(r *Report, up []*bom.Device, near map[*bom.PowerLine]bool) {
	said := map[*bom.Place]bool{}
	for _, d := range up {
		said[d.Place] = said[d.Place] || !d.Point.Set // what its fall lacks is the same
	}
	for _, x := range c.outdoorRuns() {
		for i, s := range x.stops {
			if x.hangs(i) && !s.point.Set && !said[s.place] {
				said[s.place] = true
				r.Unknown(s.place.At, x.on, "%s has no point; how near %s hangs to a power line there is not assessed", s.place.ID, x.id).
					Then("give %s its point (at)", s.place.ID).onRow(c.firstRow("lead-in-high", "fall-zone"))
			}
		}
		for i := range c.Plan.PowerLines {
			line := &c.Plan.PowerLines[i]
			if near[line] || !line.Point.Set || !line.KV.Set {
				continue
			}
			if row := c.leadInRow(line.KV.V); row != nil {
				x.check(r, line, row)
			}
		}
	}
}

func (c *Case) leadInRow(kv float64) *limits.CodeRow {
	if kv <= lowVoltageKV {
		return c.codeRow("lead-in-low")
	}
	return c.codeRow("lead-in-high")
}

// outdoorRuns lists the coaxial and data lines of the plan that this job hangs.
func (c *Case) outdoorRuns() []run {
	var out []run
	for _, x := range c.Graph.Cables {
		if x.Row.Existing.V {
			continue
		}
		s := run{id: x.ID, on: x.On(), at: x.At}
		s.stop(x.Ends[0])
		s.pass(x.Way)
		s.stop(x.Ends[1])
		out = append(out, s)
	}
	for _, d := range c.Graph.Data {
		if d.Row.Existing.V {
			continue
		}
		s := run{id: d.Row.ID, on: d.On(), at: d.Row.At}
		s.end(d.From)
		s.pass(d.Way)
		s.end(d.To)
		out = append(out, s)
	}
	return out
}

// stop notes where a cable end goes to.
func (s *run) stop(e *bom.Node) {
	for _, m := range e.Mates {
		s.end(m.Other(e))
	}
}

func (s *run) end(n *bom.Node) {
	if n != nil && n.Device != nil && n.Device.Place != nil {
		s.stops = append(s.stops, runStop{n.Device.Place, n.Device.Point})
	}
}

func (s *run) pass(way []bom.Section) {
	for _, w := range way {
		s.stops = append(s.stops, runStop{w.Place, w.Place.Point})
	}
}

// check compares the nearest that the run comes to a power line with the row.
func (s *run) check(r *Report, line *bom.PowerLine, row *limits.CodeRow) {
	nearest, known := s.nearest(line.Point.V)
	if !known || !rf.Below(nearest, row.Length.V.Metres()) {
		return
	}
	r.Fails(s.at, s.on, "%s hangs %s m from the line of %s kV; %s is expected", s.id, unit.Fixed(nearest, 2), plainFigure(line.KV.V), row.Figure()).
		Under("distance_m", nearest, "limit_m", row.Length.V.Metres()).onRow(row).Beside(placeOr(line.Point.At, line.At), "the line").
		Then("lead it down on the other side, or ask the utility")
}

// hangs reports a stop outdoors, or one that a stretch from outdoors leads to.
func (s *run) hangs(i int) bool {
	for j := max(0, i-1); j < min(len(s.stops), i+2); j++ {
		if s.stops[j].place.Outdoors() {
			return true
		}
	}
	return false
}

// nearest is the least distance of the stretches outdoors from a point.
func (s *run) nearest(p bom.Point) (nearest float64, known bool) {
	for i := range s.stops {
		a := s.stops[max(0, i-1)]
		b := s.stops[i]
		if !a.point.Set || !b.point.Set || !a.place.Outdoors() && !b.place.Outdoors() {
			continue
		}
		if d, ok := mech.Apart(vec(p), vec(a.point.V), vec(b.point.V)); ok && (!known || d < nearest) {
			nearest, known = d, true
		}
	}
	return nearest, known
}

func vec(p bom.Point) mech.Vec { return mech.Vec{E: p.East, N: p.North, U: p.Up} }
