package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/elec"
	"driploop/rules/rf"
)

// checkPassing looks at the protectors of a line that does not come in from
// outdoors; of those that do ground/data speaks.
func (p *poeRun) checkPassing(kind string) {
	if !p.c.Vehicle() && len(p.crossings()) > 0 {
		return
	}
	for _, d := range p.spds {
		if d.Part == nil {
			continue
		}
		switch k := d.Part.Data.PoE; {
		case !k.Set:
			p.r.Lacking(deviceAt(d), d.On(), []Lack{{"poe of " + d.Part.ID, d.Part.At}}, "whether %s passes %s", d.ID, poeWord(kind))
		case !passesPower(k.V, kind):
			f := p.r.Fails(deviceAt(d), d.On(), "%s passes %s; its line carries %s", named(d), poeWord(k.V), poeWord(kind)).
				Then("%s", p.c.protectorFor(d, kind)).Beside(k.At, "the part's poe")
			if !passive(k.V) && !passive(kind) {
				f.Lighter(Punch)
			}
		}
	}
}

// protectorFor names a surge protector of the catalog for a kind of power.
func (c *Case) protectorFor(d *bom.Device, kind string) string {
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == "data-arrestor" && passesPower(p.Data.PoE.V, kind)
	})
	if p == nil {
		return "take one that passes " + poeWord(kind) + " in place of " + d.Part.ID + "; the catalog has none"
	}
	return "take " + c.Firm.OnHand(p) + " in place of " + d.Part.ID
}

// checkCables holds the cables of a run against the kind that they carry, and
// reports whether what gets through them can be computed.
func (p *poeRun) checkCables(kind string) bool {
	fit := true
	for _, l := range p.lines() {
		if l.Part == nil {
			return false // part/unknown says so
		}
		k := l.Part.Data
		switch {
		case k.Conductor.V == "cca":
			p.r.Fails(l.Row.Part.At, l.On(), "%s (%s) is copper-clad aluminium and carries %s; solid copper is expected", l.Row.ID, l.Part.ID, poeWord(kind)).
				Then("%s", p.c.dataCableFor(l, kind)).Lighter(Punch).Beside(k.Conductor.At, "the part's conductor")
			fit = false
		case k.PoE.Set && !passive(kind) && !passesPower(k.PoE.V, kind):
			p.r.Fails(l.Row.Part.At, l.On(), "%s (%s) is made for %s and carries %s", l.Row.ID, l.Part.ID, poeWord(k.PoE.V), poeWord(kind)).
				Then("%s", p.c.dataCableFor(l, kind)).Lighter(Punch).Beside(k.PoE.At, "the part's poe")
			fit = false
		}
	}
	return fit
}

// dataCableFor names a data cable of the catalog in place of one.
func (c *Case) dataCableFor(l *bom.DataLine, kind string) string {
	outdoors := catalog.Has(l.Part.Rated, "outdoor")
	for _, s := range l.Way {
		outdoors = outdoors || s.Place.Outdoors()
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == "data-cable" && p.Data.Conductor.V == "copper" && (passive(kind) || passesPower(p.Data.PoE.V, kind)) &&
			(!outdoors || catalog.Has(p.Rated, "outdoor"))
	})
	if p == nil {
		return "take a copper cable made for " + poeWord(kind) + "; the catalog has none"
	}
	return "take " + c.Firm.OnHand(p) + " in place of " + l.Part.ID
}

// loop is the resistance out and back of all cables of a run, at their hottest.
func (p *poeRun) loop(pairSets int) (ohm float64, lacks []Lack) {
	for _, l := range p.lines() {
		k := l.Part.Data
		for _, need := range []struct {
			set  bool
			what string
			at   source.Place
		}{
			{l.Row.Length.Set, "length of " + l.Row.ID, l.Row.At},
			{k.Conductor.Set, "conductor of " + l.Part.ID, l.Part.At},
			{k.Size.Set, "size of " + l.Part.ID, l.Part.At},
		} {
			if !need.set {
				lacks = append(lacks, Lack{need.what, need.at})
			}
		}
		hot := p.c.hottest(l.Way, p.c.Graph.Device(l.Row.From.V.Name), p.c.Graph.Device(l.Row.To.V.Name))
		per, _ := elec.Solid(k.Size.V.MM2, float64(hot))
		v, _ := elec.Pairs(l.Row.Length.V.Metres(), per, pairSets)
		ohm += v
	}
	return ohm, lacks
}

// checkReach holds what gets to the gear against what it takes, on the kind of power
// that the gear asks for.
func (p *poeRun) checkReach(give, take int, kind string) {
	std, negotiated := elec.Kind(kind)
	s, load := p.ends[give].Part.Supply, loadOf(p.ends[take])
	pairSets, from, least := 1, passiveVolts(kind), 0.0
	if negotiated {
		pairSets, from, least = std.PairSets, std.Volts, std.DeviceVolts()
	}
	if s.Volts.Set {
		from = s.Volts.V
	}
	ohm, lacks := p.loop(pairSets)
	part := p.ends[take].Part
	if load == nil || !load.W.Set {
		lacks = append(lacks, Lack{"load.w of " + part.ID, part.At})
	}
	if !negotiated {
		if load != nil && load.Volts.Set {
			least = load.Volts.V[0]
		} else {
			lacks = append(lacks, Lack{"load.volts of " + part.ID, part.At})
		}
	}
	l := p.longest()
	at, on := placeOr(l.Row.Length.At, l.Row.At), l.On()
	if len(lacks) > 0 {
		p.r.Lacking(at, on, lacks, "what of the %s from %s gets to %s", poeWord(kind), p.port(give), p.port(take))
		return
	}
	if at, on := p.place(take); negotiated && rf.Exceeds(load.W.V, std.DeviceWatt()) {
		p.r.Fails(at, on, "%s takes %s; %s gives %s at the device", p.ends[take].ID, watts(load.W.V), poeWord(kind), watts(std.DeviceWatt())).
			Then("%s", p.c.sourceFor(p.ends[take], kind)).Over("load_w", load.W.V, "limit_w", std.DeviceWatt()).Lighter(Punch).Beside(p.ends[give].At, "the source")
		return
	}
	p.checkEnd(poeEnd{at: at, on: on, from: p.port(give), to: p.port(take), kind: kind, least: least,
		lead: elec.Lead{Volts: from, Ohm: ohm, Watt: load.W.V}, most: std.Watt, channel: std.LoopOhm / float64(max(1, std.PairSets))})
}

// poeEnd is what gets to the end of a data line.
type poeEnd struct {
	at       source.Place
	on       string
	from, to string
	kind     string
	lead     elec.Lead
	least    float64 // voltage at the gear
	most     float64 // power at the source, 0 where the kind has no figure
	channel  float64 // loop of the longest channel, likewise
}

func (p *poeRun) checkEnd(e poeEnd) {
	fed, ok := e.lead.Feed()
	line := fmt.Sprintf("the line from %s to %s has %s Ω out and back", e.from, e.to, unit.Fixed(e.lead.Ohm, 2))
	var f *Finding
	switch {
	case !ok:
		f = p.r.Fails(e.at, e.on, "%s; at %s V it can't carry the %s that %s takes", line, plainFigure(e.lead.Volts), watts(e.lead.Watt), e.to)
	case e.channel > 0 && rf.Exceeds(e.lead.Ohm, e.channel):
		f = p.r.Fails(e.at, e.on, "%s; %s counts with %s Ω at most", line, poeWord(e.kind), plainFigure(e.channel)).Over("loop_ohm", e.lead.Ohm, "limit_ohm", e.channel)
	case rf.Below(fed.Volts, e.least):
		f = p.r.Fails(e.at, e.on, "%s: of %s V %s get there, and %s V are needed (%s × %s A)", line, plainFigure(e.lead.Volts), volts(fed.Volts),
			plainFigure(Round(e.least)), unit.Fixed(e.lead.Ohm, 2)+" Ω", unit.Fixed(fed.Amps, 2)).Under("volts", fed.Volts, "least_v", e.least)
	case e.most > 0 && rf.Exceeds(fed.Watt, e.most):
		f = p.r.Fails(e.at, e.on, "%s: %s at the gear take %s at the source; %s gives %s", line, watts(e.lead.Watt), watts(fed.Watt), poeWord(e.kind), watts(e.most)).
			Over("source_w", fed.Watt, "limit_w", e.most)
	}
	if f != nil {
		f.Then("shorten the line, take a cable with thicker conductors, or feed the gear by a wire of its own").Lighter(Punch)
	}
}

// longest is the longest data line of a run.
func (p *poeRun) longest() *bom.DataLine {
	var out *bom.DataLine
	for _, l := range p.lines() {
		if out == nil || l.Row.Length.V > out.Row.Length.V {
			out = l
		}
	}
	return out
}
