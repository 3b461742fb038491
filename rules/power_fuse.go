package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/elec"
	"driploop/rules/rf"
)

var powerFuse = &Rule{
	Name:    "power/fuse",
	Title:   "A lead from a battery has a fuse close to it, and no lead carries more than it stands",
	Why:     "a chafed lead without a fuse is a fire under the carpet, and so is one behind a fuse that lets more through than the wire stands",
	Caution: cautionFire,
	Basis: []Basis{
		practice("every lead is fused at the battery, by the thinnest conductor behind the fuse"),
		house("fuse_reach (0.3 m where it says nothing)"),
		{"NFPA 70 (NEC) 240.4(D) for 18 to 10 AWG, where the wire's part states no amps", "2020", "code", "copy"},
		{"NFPA 70 (NEC) table 310.16, 60 °C column, for 8 to 4 AWG, likewise", "2020", "code", "memory"}},
	Weight: Hold,
	Lighter: "A fuse further from the battery than the house allows is a punch, and so is one that the load itself would blow. " +
		"A mains supply limits its own current: its lead wants a fuse only where the supply gives more than the wire stands.",
	Grave: true,
	Check: func(c *Case, r *Report) {
		for _, w := range c.supplies().leads {
			switch {
			case !w.Row.From.Set || !w.Row.To.Set && w.source == nil:
				r.Unknown(w.Row.At, w.On(), "%s does not say what it comes from; whether it wants a fuse is not assessed", w.Row.ID).Then("add from")
			case w.source == nil || w.Part == nil:
			case w.Row.Fuse.Set:
				c.checkFuse(r, w)
			case w.source.Kind() == "battery":
				c.reportNoFuse(r, w)
			default:
				c.checkSelfLimited(r, w)
			}
		}
	},
}

// stands is the greatest fuse ahead of a wire: what its part states, else by size.
func stands(p *catalog.Part) Known[float64] {
	if p.Wire.Amps.Set {
		return known(p.Wire.Amps.V)
	}
	if p.Wire.Size.Set {
		if a, ok := elec.FuseAmps(p.Wire.Size.V.MM2); ok {
			return known(a)
		}
		return unknown[float64](p.At, "amps of "+p.ID+", thinner than 18 AWG")
	}
	return unknown[float64](p.At, "amps or size of "+p.ID)
}

// wireName is a wire's part with its size: "W-25-2, 2.5 mm2".
func wireName(p *catalog.Part) string {
	if p.Wire.Size.Set {
		return p.ID + ", " + p.Wire.Size.V.Written
	}
	return p.ID
}

// fuseReach is how far from the battery a fuse may sit.
func (c *Case) fuseReach() unit.MM { return c.House().FuseReach.Or(300) }

func (c *Case) reportNoFuse(r *Report, w lead) {
	most := stands(w.Part)
	if w.Row.Existing.V {
		r.Unknown(w.Row.At, w.On(), "%s is there already; whether it has a fuse at %s is not assessed", w.Row.ID, w.source.ID).
			Then("look, and name the fuse and its distance").Beside(w.source.At, "the battery")
		return
	}
	f := r.Fails(w.Row.At, w.On(), "%s comes from %s without a fuse; one is expected within %s of it", w.Row.ID, w.source.ID, c.fuseReach()).
		Then("%s", c.fuseFor(w)).Beside(w.source.At, "the battery")
	if most.OK {
		f.Says += ", of " + plainFigure(most.V) + " A at most for " + wireName(w.Part)
	}
}

// checkFuse holds the fuse of a lead against its wire, its load and, where it comes
// from a battery, its place.
func (c *Case) checkFuse(r *Report, w lead) {
	if w.Fuse != nil {
		c.checkFuseSize(r, w)
	}
	if w.source.Kind() != "battery" {
		return
	}
	at, reach := w.Row.FuseFromSource, c.fuseReach()
	switch {
	case !at.Set:
		r.Unknown(w.Row.Fuse.At, w.On(), "how far the fuse of %s sits from %s is not assessed: it lacks fuse_from_source", w.Row.ID, w.source.ID).
			Then("add fuse_from_source; up to %s are allowed", reach)
	case at.V > reach:
		r.Fails(at.At, w.On(), "the fuse of %s sits %s from %s, and nothing protects that stretch; the house allows %s (fuse_reach)", w.Row.ID, at.V, w.source.ID, reach).
			Then("move the fuse to within %s of %s", reach, w.source.ID).
			Over("distance_m", at.V.Metres(), "limit_m", reach.Metres()).Lighter(Punch)
	}
}

func (c *Case) checkFuseSize(r *Report, w lead) {
	blows, most := w.Fuse.Wire.Amps, stands(w.Part)
	if !blows.Set {
		r.Lacking(w.Row.Fuse.At, w.On(), []Lack{{"amps of " + w.Fuse.ID, w.Fuse.At}}, "whether %s protects %s", w.Fuse.ID, w.Row.ID)
		return
	}
	switch {
	case !most.OK:
		r.Lacking(w.Row.Fuse.At, w.On(), most.Lacks, "whether %s protects %s", w.Fuse.ID, w.Row.ID)
	case rf.Exceeds(blows.V, most.V):
		r.Fails(w.Row.Fuse.At, w.On(), "the fuse of %s (%s) lets %s A through; its wire (%s) stands %s A", w.Row.ID, w.Fuse.ID, plainFigure(blows.V), wireName(w.Part), plainFigure(most.V)).
			Then("%s", c.fuseFor(w)).Over("fuse_a", blows.V, "wire_a", most.V).Beside(w.Part.At, "the wire")
	}
	if takes := c.leadAmps(w); takes.OK && rf.Exceeds(takes.V, blows.V) {
		r.Fails(w.Row.Fuse.At, w.On(), "the fuse of %s (%s) blows above %s A; %s takes up to %s A", w.Row.ID, w.Fuse.ID, plainFigure(blows.V), w.load.ID, unit.Fixed(takes.V, 2)).
			Then("%s", c.fuseFor(w)).Over("load_a", takes.V, "fuse_a", blows.V).Beside(w.load.At, "the load").Lighter(Punch)
	}
}

// checkSelfLimited looks at a lead without a fuse from something that limits its
// own current.
func (c *Case) checkSelfLimited(r *Report, w lead) {
	most := stands(w.Part)
	lacks := most.Lacks
	var gives source.Val[float64]
	if p := w.source.Part; p != nil && p.Supply != nil {
		gives = p.Supply.Amps
	}
	if !gives.Set {
		lacks = append(lacks, Lack{"amps of " + partName(w.source), partOrDevice(w.source)})
	}
	switch {
	case len(lacks) > 0:
		r.Lacking(w.Row.At, w.On(), lacks, "whether %s needs a fuse", w.Row.ID)
	case rf.Exceeds(gives.V, most.V):
		r.Fails(w.Row.At, w.On(), "%s has no fuse; %s gives up to %s A and its wire (%s) stands %s A", w.Row.ID, named(w.source), plainFigure(gives.V), wireName(w.Part), plainFigure(most.V)).
			Then("%s", c.fuseFor(w)).Over("supply_a", gives.V, "wire_a", most.V).Beside(w.source.At, "the supply")
	}
}

// leadAmps is the greatest current of a lead: what its load takes at the least
// voltage that it works at.
func (c *Case) leadAmps(w lead) Known[float64] {
	l := loadOf(w.load)
	if l == nil || !l.W.Set || !l.Volts.Set || l.Volts.V[0] <= 0 {
		return Known[float64]{}
	}
	return known(l.W.V / l.Volts.V[0])
}

// headroom is how much more than its load a fuse that is proposed carries: one that
// is loaded to the last ampere ages and blows. Common practice.
const headroom = 1.25

// fuseFor names the smallest fuse that carries the load and protects the wire, or the
// greatest that protects it where nobody knows the load.
func (c *Case) fuseFor(w lead) string {
	most, least := stands(w.Part), c.leadAmps(w)
	if !most.OK {
		return "give the wire's part its size or amps, and fuse it by that"
	}
	would := func(p *catalog.Part) bool {
		return p.Kind.V == "fuse" && p.Wire.Amps.Set && !rf.Exceeds(p.Wire.Amps.V, most.V) && !rf.Below(p.Wire.Amps.V, least.V*headroom)
	}
	var amps float64
	for _, p := range c.Firm.Catalog.All() {
		if would(p) && p.Status.V != "withdrawn" && (amps == 0 || (p.Wire.Amps.V < amps) == least.OK) {
			amps = p.Wire.Amps.V
		}
	}
	if amps == 0 {
		return "take a thicker wire: the catalog has no fuse that carries the load and protects this one"
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool { return would(p) && p.Wire.Amps.V == amps })
	return "put " + c.Firm.OnHand(p) + " into it" + c.fuseWhere(w.source)
}

func (c *Case) fuseWhere(d *bom.Device) string {
	if d.Kind() != "battery" {
		return ""
	}
	return ", within " + c.fuseReach().String() + " of " + d.ID
}
