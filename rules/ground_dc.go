package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var groundDC = &Rule{
	Name:    "ground/dc",
	Title:   "An arrestor lets through the direct current that its line carries to an active part",
	Why:     "a stub arrestor is a short to the supply, a high-pass keeps the current from the antenna that lives on it: one burns, the other stays dead",
	Caution: "Switch the supply off before an arrestor goes into a line that carries current. " + cautionThunder,
	Basis: []Basis{
		practice("a quarter-wave stub shorts direct current, a high-pass blocks it, a gas tube passes it; the part's own dc key is what counts")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		said := map[*bom.Device]bool{}
		for _, l := range c.leadIns() {
			for _, f := range feeders(l) {
				c.checkFed(r, l, f, said)
			}
		}
	},
}

// feeder is a port that puts direct current on a line.
type feeder struct {
	name string
	port *catalog.Port
	at   source.Place
	step int  // −1 at the line's beginning, len(Steps) at its end
	on   bool // it feeds onward along the line; else back
}

// String names the port with its voltage: "5 V from radio.gnss".
func (f feeder) String() string { return plainFigure(f.port.DCOut.Volts.V) + " V from " + f.name }

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

// fed lists the passes that the current of a feeder meets, in its direction, up to
// the first that stops it; that one is the last. end is the device that it gets
// to, or nil where it is stopped.
func fed(l *bom.Line, f feeder) (met []*bom.Pass, end *bom.Device) {
	step, stop, end := 1, len(l.Steps), l.To.Device
	if !f.on {
		step, stop, end = -1, -1, l.From.Device
	}
	for i := f.step + step; i != stop; i += step {
		p := l.Steps[i].Pass
		if p == nil {
			continue
		}
		met = append(met, p)
		if s := currentThrough(p.Part); s == "block" || s == "short" {
			return met, nil
		}
	}
	return met, end
}

// currentThrough is what a passive part does to direct current, "" where its file
// does not say.
func currentThrough(p *catalog.Part) string {
	switch {
	case p.Arrestor != nil:
		return p.Arrestor.DC.V
	case p.Passive != nil:
		return p.Passive.DC.V
	}
	return ""
}

// checkFed looks at the arrestors that a feeder's current meets.
func (c *Case) checkFed(r *Report, l *bom.Line, f feeder, said map[*bom.Device]bool) {
	met, _ := fed(l, f)
	for _, p := range met {
		if p.Part.Arrestor == nil || p.Device == nil || said[p.Device] {
			continue
		}
		said[p.Device] = c.checkCurrent(r, l, f, p)
	}
	for _, d := range []*bom.Device{l.From.Device, l.To.Device} {
		if len(met) == 0 && pathless(d) && !said[d] {
			said[d] = true
			r.Unknown(placeOr(d.Row.Part.At, d.At), d.On(), "%s gets %s, and its part %s has no path from line to gear; what becomes of the current is not assessed", d.ID, f, d.Part.ID).
				Then("add the path to the part, with its loss and its frequencies").Beside(d.Part.At, "the part").Beside(f.at, "the port that feeds the line")
		}
	}
}

// pathless reports an arrestor whose part does not say that anything gets through.
func pathless(d *bom.Device) bool {
	return d != nil && d.Part != nil && d.Part.Arrestor != nil && len(d.Part.Paths) == 0
}

func (c *Case) checkCurrent(r *Report, l *bom.Line, f feeder, p *bom.Pass) bool {
	d, consumer := p.Device, l.To.Device
	if !f.on {
		consumer = l.From.Device
	}
	at := placeOr(d.Row.Part.At, d.At)
	does := p.Part.Arrestor.DC
	needs, known := livesOnCurrent(consumer)
	var found *Finding
	switch {
	case !does.Set:
		found = r.Unknown(at, d.On(), "%s gets %s; what its part %s does to direct current is not known, so this is not assessed", d.ID, f, p.Part.ID).
			Then("add dc to the part: pass, block or short").Beside(p.Part.At, "the part")
	case does.V == "short":
		found = r.Fails(at, d.On(), "%s (%s) shorts direct current, and its line carries %s", d.ID, p.Part.ID, f).
			Then("%s", c.arrestorFor(l, "in its place")).Beside(does.At, "the part's dc")
	case does.V == "block" && !known:
		found = r.Unknown(at, d.On(), "%s (%s) blocks direct current, and its line carries %s; whether %s lives on it is not known", d.ID, p.Part.ID, f, consumer.ID).
			Then("add dc to the part of %s", consumer.ID).Beside(consumer.At, "what is fed")
	case does.V == "block" && needs:
		found = r.Fails(at, d.On(), "%s (%s) blocks direct current; the %s never get to %s", d.ID, p.Part.ID, f, consumer.ID).
			Then("%s", c.arrestorFor(l, "in its place")).Beside(does.At, "the part's dc").Beside(consumer.At, "what is fed")
	}
	if found == nil {
		return false
	}
	found.Beside(f.at, "the port that feeds the line")
	return true
}

// livesOnCurrent reports whether a device at the end of a fed line is taken to live
// on it: an active part does, an antenna that is a short does not.
func livesOnCurrent(d *bom.Device) (needs, known bool) {
	switch {
	case d == nil || d.Part == nil:
		return false, false
	case d.Active():
		return true, true
	case d.Part.Antenna != nil:
		return d.Part.Antenna.DC.V != "short", d.Part.Antenna.DC.Set
	}
	return false, true
}
