package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// feeder is a port that puts direct current on a line.
type feeder struct {
	name string
	port *catalog.Port
	at   source.Place
	step int  // −1 at the line's beginning, len(Steps) at its end
	on   bool // it feeds onward along the line; else back
}

// feeders lists the ports that put direct current on a line.
func feeders(l *bom.Line) []feeder {
	var out []feeder
	if p := l.From.Port; p != nil && p.DCOut != nil {
		out = append(out, feeder{l.From.Name(), p, p.At, -1, true})
	}
	for i, s := range l.Steps {
		if s.Pass == nil || s.Pass.Device == nil {
			continue
		}
		if p := s.Pass.In; p.DCOut != nil {
			out = append(out, feeder{s.Pass.Device.ID + "." + p.Name, p, p.At, i, false})
		}
		if p := s.Pass.Out; p.DCOut != nil {
			out = append(out, feeder{s.Pass.Device.ID + "." + p.Name, p, p.At, i, true})
		}
	}
	if p := l.To.Port; p != nil && p.DCOut != nil {
		out = append(out, feeder{l.To.Name(), p, p.At, len(l.Steps), false})
	}
	return out
}
