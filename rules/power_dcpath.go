package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var powerDCPath = &Rule{
	Name:    "power/dc-path",
	Title:   "Direct current on coax runs into no short, and gets to what lives on it",
	Why:     "a load or a grounded antenna is a short to a bias tee: something burns; and an amplifier behind a DC block stays dead on its mast",
	Caution: "Switch the supply off before a coaxial line that carries direct current is opened or closed.",
	Basis: []Basis{
		practice("what a part does to direct current is its dc key: pass, block or short; a port with dc_out feeds its line"),
		practice("an arrestor in the line of a building is the matter of ground/dc")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		p := pathCheck{c, r, map[string]bool{}}
		for _, l := range c.Lines().All {
			for _, f := range feeders(l) {
				p.follow(l, f)
			}
		}
		for _, d := range c.Graph.Devices {
			if livesOnCoax(d) && !c.fedOverCoax(d) {
				p.unfed(d)
			}
		}
	},
}

// pathCheck follows direct current. Lines share their parts, and each part is told
// of each feeder once.
type pathCheck struct {
	c    *Case
	r    *Report
	said map[string]bool
}

// spot is where something of a line is found in the plan.
type spot struct {
	name, on string
	at       source.Place
	part     *catalog.Part
}

// follow goes along a line from a port that feeds it, up to what stops the current.
func (p *pathCheck) follow(l *bom.Line, f feeder) {
	step, stop, end := 1, len(l.Steps), l.To
	if !f.on {
		step, stop, end = -1, -1, l.From
	}
	for i := f.step + step; i != stop; i += step {
		pass := l.Steps[i].Pass
		if pass == nil {
			continue
		}
		does := currentThrough(pass.Part)
		if pass.Part.Arrestor != nil && !p.c.Vehicle() {
			if does != "pass" {
				return // ground/dc says so
			}
			continue
		}
		s := spotOf(l, i)
		switch does {
		case "pass":
			continue
		case "block":
			p.blocked(f, s, end)
		default:
			p.shorted(f, s, does, end)
		}
		return
	}
	if !(l.Open && f.on) && end.Device != nil && end.Device.Part != nil {
		p.arrives(f, end)
	}
}

// spotOf is the place in the plan of what a line passes at a step.
func spotOf(l *bom.Line, i int) spot {
	pass := l.Steps[i].Pass
	if d := pass.Device; d != nil {
		return spot{named(d), d.On(), deviceAt(d), d.Part}
	}
	for _, j := range []int{i - 1, i + 1} {
		if j < 0 || j >= len(l.Steps) || l.Steps[j].Mate == nil {
			continue
		}
		for _, a := range l.Steps[j].Mate.Adapters {
			if a.Part == pass.Part {
				return spot{pass.Part.ID, l.Steps[j].Mate.On(), a.At, a.Part}
			}
		}
	}
	return spot{pass.Part.ID, l.On(), l.At(), pass.Part}
}

// once reports whether a feeder has not been told of a spot before.
func (p *pathCheck) once(f feeder, s spot) bool {
	key := f.name + " " + s.on + " " + s.name
	was := p.said[key]
	p.said[key] = true
	return !was
}

// shorted reports a part that is a short to the current, or does not say that it is
// none.
func (p *pathCheck) shorted(f feeder, s spot, does string, end *bom.Node) {
	switch {
	case !p.once(f, s):
	case does == "":
		p.r.Lacking(s.at, s.on, []Lack{{"dc of " + s.part.ID, s.part.At}}, "what %s does to the %s on its line", s.name, f).
			Beside(f.at, "the port that feeds the line")
	case p.c.lives(end) == yes:
		p.r.Fails(s.at, s.on, "%s is a short to direct current, and its line carries %s to %s", s.name, f, end.Device.ID).
			Then("%s", p.c.passing(s.part)).Beside(f.at, "the port that feeds the line")
	default:
		p.r.Fails(s.at, s.on, "%s is a short to direct current, and its line carries %s", s.name, f).
			Then("%s", p.c.blockFor(f)).Beside(f.at, "the port that feeds the line")
	}
}

// blocked reports a part that keeps the current from something that lives on it.
func (p *pathCheck) blocked(f feeder, s spot, end *bom.Node) {
	if end.Device == nil || end.Device.Part == nil {
		return
	}
	switch needs := p.c.lives(end); {
	case needs == no || !p.once(f, s):
	case needs == yes:
		p.r.Fails(s.at, s.on, "%s blocks direct current; the %s never get to %s", s.name, f, end.Device.ID).
			Then("%s", p.c.passing(s.part)).Beside(f.at, "the port that feeds the line").Beside(end.Device.At, "what is fed")
	default:
		p.r.Lacking(s.at, s.on, []Lack{{"dc of " + end.Device.Part.ID, end.Device.Part.At}}, "whether %s, behind %s, lives on %s", end.Device.ID, s.name, f)
	}
}

// arrives looks at what the current gets to.
func (p *pathCheck) arrives(f feeder, end *bom.Node) {
	d := end.Device
	s := spot{named(d), d.On(), deviceAt(d), d.Part}
	does := currentThrough(d.Part)
	switch {
	case d.Active() && end.Port.DCOut != nil:
		if p.once(f, s) {
			p.r.Fails(s.at, s.on, "%s feeds its line, and %s feed the same line from the other end", end.Name(), f).
				Then("let one of the two feed it; %s", p.c.blockFor(f)).Beside(f.at, "the port at the other end")
		}
	case d.Active():
		p.reachesRadio(f, s, end)
	case d.Part.Antenna != nil:
		does = d.Part.Antenna.DC.V
		fallthrough
	default:
		if does == "short" || does == "" {
			p.shorted(f, s, does, end)
		}
	}
}

// reachesRadio looks at current into the radio port of a device that does not live on
// it. Ports do not say what direct current they stand.
func (p *pathCheck) reachesRadio(f feeder, s spot, end *bom.Node) {
	if p.c.lives(end) == yes || !p.once(f, s) {
		return
	}
	p.r.Unknown(s.at, s.on, "%s run into %s, and %s does not live on its coax; whether the port stands them is not assessed", f, end.Name(), end.Device.ID).
		Then("turn what feeds the line round if it looks the wrong way; else %s", p.c.blockFor(f)).Beside(f.at, "the port that feeds the line")
}

// answer is yes, no, or not known.
type answer int

const (
	notKnown answer = iota
	yes
	no
)

// lives reports whether what stands at the end of a line lives on its current: an
// amplifier without another supply does, a router only where it has no other port
// for one, and an antenna for satellite signals that is no short.
func (c *Case) lives(end *bom.Node) answer {
	d := end.Device
	if d == nil || d.Part == nil {
		return no
	}
	if d.Active() {
		if c.wired(d) || fedElsewhere(d) {
			return no
		}
		return yes
	}
	if d.Part.Antenna == nil || end.Port.Use.Or("cellular") != "gnss" || d.Part.Antenna.DC.V == "short" {
		return no
	}
	if !d.Part.Antenna.DC.Set {
		return notKnown
	}
	return yes
}

// fedElsewhere reports a router that has a port for its supply; an amplifier with one
// is fed over its coax all the same where a mast is far from a socket.
func fedElsewhere(d *bom.Device) bool {
	return d.Part.Router != nil && (hasPowerPort(d.Part) || takesPoE(d.Part))
}

// livesOnCoax reports an amplifier that has no port for its power but its radio ports.
func livesOnCoax(d *bom.Device) bool {
	return d.Part != nil && d.Part.Amplifier != nil && !d.Row.Existing.V && !hasPowerPort(d.Part) && !takesPoE(d.Part)
}

// unfed reports an amplifier that only its coax could feed, and that none does.
func (p *pathCheck) unfed(d *bom.Device) {
	if d.Part.Amplifier.Load == nil {
		p.r.Unknown(deviceAt(d), d.On(), "the part %s of %s gives neither a load nor a port for power; what feeds it is not assessed", d.Part.ID, d.ID).
			Then("add its power port, or the load that its coax has to feed").Beside(d.Part.At, "the part")
		return
	}
	for _, n := range d.Nodes {
		for _, l := range p.c.Lines().At(n) {
			if l.Open && l.To.Device == nil {
				p.r.Unknown(deviceAt(d), d.On(), "%s lives on its coax, and %s leads nowhere yet; whether it gets current is not assessed", d.ID, l.Name()).
					Then("complete the line")
				return
			}
		}
	}
	p.r.Fails(deviceAt(d), d.On(), "%s has no power port, and no port on its lines gives it direct current", named(d)).
		Then("%s", p.c.teeFor(d))
}

// passing names a part of the same kind and connectors that passes current.
func (c *Case) passing(part *catalog.Part) string {
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == part.Kind.V && currentThrough(p) == "pass" && samePorts(p, part) && (len(p.Ports) != 2 || c.passesBands(p))
	})
	switch {
	case part.Kind.V == "dc-block":
		return "take it out of the line, or bring the current in behind it"
	case p == nil:
		return "take one that passes direct current in place of " + part.ID + ", or bring the current in behind it"
	}
	return "take " + c.Firm.OnHand(p) + " in place of " + part.ID + ": it passes direct current"
}

// samePorts reports two parts with the same number of ports and the same faces.
func samePorts(a, b *catalog.Part) bool {
	if len(a.Ports) != len(b.Ports) {
		return false
	}
	for i := range a.Ports {
		x, y := &a.Ports[i], &b.Ports[i]
		if x.Connector.V.Series != y.Connector.V.Series || x.Connector.V.Shell != y.Connector.V.Shell || x.Impedance.V != y.Impedance.V {
			return false
		}
	}
	return true
}

// blockFor names a DC block for the line of a feeder.
func (c *Case) blockFor(f feeder) string {
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		if p.Kind.V != "dc-block" || len(p.Ports) == 0 {
			return false
		}
		return p.Ports[0].Connector.V.Series == f.port.Connector.V.Series && p.Ports[0].Impedance.V == f.port.Impedance.V
	})
	without := ""
	if d := c.deviceOf(f); d.Kind() == "bias-tee" {
		without = ", or leave " + d.ID + " out if nothing lives on its current"
	}
	if p == nil {
		return "put a DC block ahead of it" + without + "; the catalog has no block for this line"
	}
	return "put DC block " + c.Firm.OnHand(p) + " ahead of it" + without
}

// teeFor names a bias tee for an amplifier that its coax has to feed.
func (c *Case) teeFor(d *bom.Device) string {
	var takes Known[[2]float64]
	if l := loadOf(d); l.Volts.Set {
		takes = known(l.Volts.V)
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		if p.Kind.V != "bias-tee" || !takes.OK || len(d.Nodes) == 0 {
			return false
		}
		for i := range p.Ports {
			q := &p.Ports[i]
			if q.DCOut != nil && q.DCOut.Volts.V >= takes.V[0] && q.DCOut.Volts.V <= takes.V[1] && q.Impedance.V == d.Nodes[0].Ohm.V {
				return true
			}
		}
		return false
	})
	if p == nil {
		return "put a bias tee of its voltage into its line indoors; the catalog has none"
	}
	return "put bias tee " + c.Firm.OnHand(p) + " into its line indoors"
}
