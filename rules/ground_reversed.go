package rules

import (
	"driploop/bom"
)

var groundReversed = &Rule{
	Name:    "ground/reversed",
	Title:   "A directional arrestor has its line side toward the antenna, and nothing active lies between them",
	Why:     "the wrong way round the tube sits behind the part that it should spare, and an amplifier in front of it takes the strike",
	Caution: cautionThunder + " " + cautionStrike,
	Basis:   []Basis{practice("line side of an arrestor toward the antenna; a second arrestor where a mast carries an active part")},
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		lines := c.leadIns()
		said := map[*bom.Device]bool{}
		var unclear []*bom.Device
		for _, l := range lines {
			for _, p := range protectors(l) {
				if p.pass == nil && pathless(p.dev) && !p.block() && !said[p.dev] {
					said[p.dev] = true
					r.Unknown(placeOr(p.dev.Row.Part.At, p.dev.At), p.dev.On(), "the part %s of %s has no path from line to gear; which of its sides is toward the antenna is not assessed", p.dev.Part.ID, p.dev.ID).
						Then("add the path to the part, with its loss and its frequencies").onRow(c.codeRow("reversed")).Beside(p.dev.Part.At, "the part")
				}
				if p.pass == nil || said[p.dev] {
					continue
				}
				said[p.dev] = c.checkSide(r, l, p)
				if _, known := towardOutside(l, p); !known && !p.block() && p.dev.Part.Arrestor.Directional.Or(true) {
					unclear = append(unclear, unplaced(l.From.Device), unplaced(l.To.Device))
				}
			}
		}
		reportUnplaced(r, unclear, c.codeRow("reversed"), "which side of an arrestor is toward the outside")
		for _, l := range lines {
			c.checkBetween(r, lines, l, said)
		}
	},
}

// checkSide holds the side that an arrestor turns to the antenna.
func (c *Case) checkSide(r *Report, l *bom.Line, p protector) bool {
	side, known := towardOutside(l, p)
	if !known || side != "gear" || p.block() {
		return false
	}
	a, row := p.dev.Part.Arrestor, c.codeRow("reversed")
	at := p.dev.At
	if n := p.dev.Node("gear"); n != nil && len(n.Mates) > 0 {
		at = n.Mates[0].At
	}
	outer := l.From.Device
	if p.pass.Out.Name == "gear" {
		outer = l.To.Device
	}
	switch {
	case !a.Directional.Set:
		r.Unknown(at, p.dev.On(), "%s has its gear side toward %s; whether its part %s may be turned round is not known", p.dev.ID, outer.ID, p.dev.Part.ID).
			Then("add directional to the part, or turn %s round", p.dev.ID).onRow(row).Beside(p.dev.Part.At, "the part")
	case a.Directional.V:
		r.Fails(at, p.dev.On(), "%s (%s) has its gear side toward %s; its line side is expected there", p.dev.ID, p.dev.Part.ID, outer.ID).
			Then("turn %s round: the antenna on %s.line, the gear on %s.gear", p.dev.ID, p.dev.ID, p.dev.ID).onRow(row).Beside(a.Directional.At, "the part is directional")
	default:
		return false
	}
	return true
}

// towardOutside is the port that an arrestor turns to the antenna of its line, or
// on a line between two devices to the outdoors.
func towardOutside(l *bom.Line, p protector) (port string, known bool) {
	switch {
	case l.From.Device.Kind() == "antenna":
		return p.pass.In.Name, true
	case l.To.Device.Kind() == "antenna":
		return p.pass.Out.Name, true
	}
	xs := crossingsOf(l)
	for i, x := range xs {
		g := guarding([]protector{p}, xs, i)
		switch {
		case len(g) == 0:
		case x.In1st:
			return g[0].pass.Out.Name, true
		default:
			return g[0].pass.In.Name, true
		}
	}
	return "", false
}

// checkBetween looks for an active part outdoors whose line has an arrestor while
// the line from the antenna to it has none.
func (c *Case) checkBetween(r *Report, lines []*bom.Line, l *bom.Line, said map[*bom.Device]bool) {
	for _, ps := range protectors(l) {
		for _, active := range []*bom.Device{l.From.Device, l.To.Device} {
			if active == nil || !active.Active() || !active.Place.Outdoors() || said[active] {
				continue
			}
			if ant := bareAntenna(lines, active, l); ant != nil {
				said[active] = true
				r.Fails(active.At, active.On(), "%s hangs outdoors between %s and %s, and nothing protects it from what comes down from %s", active.ID, ps.dev.ID, ant.ID, ant.ID).
					Then("%s", c.arrestorFor(l, "between "+ant.ID+" and "+active.ID+" too")).onRow(c.codeRow("reversed")).Beside(ps.dev.At, "the arrestor").Beside(ant.At, "the antenna")
			}
		}
	}
}

// bareAntenna is an outdoor antenna that reaches a device over another line without
// an arrestor, or nil.
func bareAntenna(lines []*bom.Line, active *bom.Device, but *bom.Line) *bom.Device {
	for _, l := range lines {
		ant := l.From.Device
		if l.To.Device != active {
			if l.From.Device != active {
				continue
			}
			ant = l.To.Device
		}
		if l != but && ant.Kind() == "antenna" && ant.Place.Outdoors() && len(protectors(l)) == 0 {
			return ant
		}
	}
	return nil
}
