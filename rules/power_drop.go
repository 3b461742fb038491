package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/elec"
	"driploop/rules/rf"
)

var powerDrop = &Rule{
	Name:  "power/drop",
	Title: "A lead leaves enough voltage at its end",
	Why:   "thin wire on a long way eats the voltage just when the load takes most: the gear runs on the bench and drops out in the roof",
	Basis: []Basis{
		house("drop_percent (5 % of the nominal voltage where it says nothing)"),
		practice("drop 2·L·R·I with the current that gear of fixed power draws at the voltage it gets; the least voltage of the gear goes first"),
		{"IEC 60228 class 5, resistance of metric wire", "2004", "standard", "copy"},
		{"IEC 60028, copper 1/58 Ω·mm²/m at 20 °C and 0.393 % per kelvin; AWG areas of ASTM B258, 2 % for the lay", "1925", "standard", "memory"}},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, w := range c.supplies().leads {
			if w.source != nil && w.load != nil && w.Part != nil && !c.wrongVolts(w) {
				c.checkDrop(r, w)
			}
		}
		for _, x := range c.supplies().coax {
			c.checkCoaxDrop(r, x)
		}
	},
}

// checkDrop computes what a wire takes at the greatest power of its load.
func (c *Case) checkDrop(r *Report, w lead) {
	gives, takes := c.voltsOf(w.source), c.drawOf(w.load)
	run, at := c.runOf(w), placeOr(w.Row.Length.At, w.Row.At)
	theirs := append(append([]Lack(nil), gives.Lacks...), takes.lacks...)
	if lacks := append(theirs, run.lacks...); len(lacks) > 0 {
		if len(run.lacks) > 0 || w.source.Part == nil || w.source.Part.Supply == nil {
			r.Lacking(at, w.On(), lacks, "the drop of %s", w.Row.ID)
		}
		return // what volts, amps and watts lack is said by power/budget
	}
	ohm, _ := elec.Loop(run.metres, run.ohmPerKm)
	f := c.reportDrop(r, drop{
		what: fmt.Sprintf("%s (%s of %s)", w.Row.ID, w.Row.Length.V, wireName(w.Part)),
		lead: elec.Lead{Volts: gives.V, Ohm: ohm, Watt: takes.watt}, to: w.load,
		sum: func(amps float64) string {
			return fmt.Sprintf("2 × %s × %s Ω/km at %s × %s A", w.Row.Length.V, unit.Fixed(run.ohmPerKm, 2), run.hot, unit.Fixed(amps, 2))
		},
	}, at, w.On())
	if f != nil {
		f.Then("%s", c.thickerFor(w, run, gives.V, takes.watt))
	}
}

// wireRun is what a wire's resistance depends on.
type wireRun struct {
	metres, ohmPerKm float64
	hot              unit.Celsius
	lacks            []Lack
}

func (c *Case) runOf(w lead) wireRun {
	run := wireRun{metres: w.Row.Length.V.Metres(), hot: c.hottest(w.Way, w.source, w.load)}
	if !w.Row.Length.Set {
		run.lacks = append(run.lacks, Lack{"length of " + w.Row.ID, w.Row.At})
	}
	if !w.Part.Wire.Size.Set {
		run.lacks = append(run.lacks, Lack{"size of " + w.Part.ID, w.Part.At})
		return run
	}
	run.ohmPerKm, _ = elec.Stranded(w.Part.Wire.Size.V.MM2, float64(run.hot))
	return run
}

// hottest is the hottest that a line meets on its way, 20 °C at least.
func (c *Case) hottest(way []bom.Section, ends ...*bom.Device) unit.Celsius {
	var places []*bom.Place
	for _, d := range ends {
		if d != nil && d.Place != nil {
			places = append(places, d.Place)
		}
	}
	_, hot := c.temperatures(way, places)
	return max(20, hot)
}

// drop is one lead with what it comes to.
type drop struct {
	what string
	lead elec.Lead
	to   *bom.Device
	sum  func(amps float64) string
}

// reportDrop holds a lead against the house's drop and the least voltage of the
// load, and returns what it reported, or nil.
func (c *Case) reportDrop(r *Report, d drop, at source.Place, on string) *Finding {
	percent := c.House().DropPercent.Or(5)
	fed, ok := d.lead.Feed()
	if !ok {
		most := d.lead.Volts * d.lead.Volts / 4 / d.lead.Ohm
		return r.Fails(at, on, "%s can't carry %s to %s at %s V: its %s Ω let %s through at most", d.what, watts(d.lead.Watt), d.to.ID,
			plainFigure(d.lead.Volts), unit.Fixed(d.lead.Ohm, 2), watts(most)).Over("load_w", d.lead.Watt, "limit_w", most)
	}
	share := 100 * fed.Drop / d.lead.Volts
	takes, wants := asksFor(d.to)
	low := wants && takes.OK && rf.Below(fed.Volts, takes.V[0]) && !rf.Below(d.lead.Volts, takes.V[0])
	switch {
	case low:
		return r.Fails(at, on, "%s leaves %s of %s V at %s, which takes %s: the drop is %s (%s)", d.what, volts(fed.Volts), plainFigure(d.lead.Volts), d.to.ID, voltRange(takes.V), volts(fed.Drop), d.sum(fed.Amps)).
			Under("volts", fed.Volts, "least_v", takes.V[0]).With("drop_percent", share)
	case rf.Exceeds(share, percent):
		return r.Fails(at, on, "%s takes %s of %s V on the way to %s, %s %%: %s; the house allows %s %% (drop_percent)", d.what, volts(fed.Drop), plainFigure(d.lead.Volts), d.to.ID, unit.Fixed(share, 1), d.sum(fed.Amps), plainFigure(percent)).
			Over("drop_percent", share, "limit_percent", percent).With("volts", fed.Volts)
	}
	return nil
}

// thickerFor names the thinnest wire of the catalog that would do, or the length up
// to which this one does.
func (c *Case) thickerFor(w lead, run wireRun, from, watt float64) string {
	takes, _ := asksFor(w.load)
	var least float64
	would := func(p *catalog.Part) bool {
		if p.Kind.V != "wire" || !p.Wire.Size.Set || p.Wire.Cores.V != w.Part.Wire.Cores.V {
			return false
		}
		per, ok := elec.Stranded(p.Wire.Size.V.MM2, float64(run.hot))
		ohm, _ := elec.Loop(run.metres, per)
		fed, feeds := elec.Lead{Volts: from, Ohm: ohm, Watt: watt}.Feed()
		return ok && feeds && !rf.Exceeds(100*fed.Drop/from, c.House().DropPercent.Or(5)) && !(takes.OK && rf.Below(fed.Volts, takes.V[0]))
	}
	for _, p := range c.Firm.Catalog.All() {
		if p.Status.V != "withdrawn" && would(p) && (least == 0 || p.Wire.Size.V.MM2 < least) {
			least = p.Wire.Size.V.MM2
		}
	}
	if least == 0 {
		return "bring the source closer, or feed it at a higher voltage with a converter at the load; the catalog has no wire that does"
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool { return would(p) && p.Wire.Size.V.MM2 == least })
	return "take " + c.Firm.OnHand(p) + " in place of " + w.Part.ID
}

// checkCoaxDrop computes what the cables of a line take of the direct current that
// something lives on.
func (c *Case) checkCoaxDrop(r *Report, x coaxFeed) {
	l := loadOf(x.to.Device)
	if l == nil {
		return // what an antenna's own amplifier takes is not known, and is milliamperes
	}
	ohm, terms, lacks := c.coaxOhm(x)
	at := lineAt(x.line)
	if !l.W.Set {
		lacks = append(lacks, Lack{"load.w of " + x.to.Device.Part.ID, x.to.Device.Part.At})
	}
	if len(lacks) > 0 {
		r.Lacking(at, x.line.On(), lacks, "the drop on the coax from %s to %s", x.name, x.to.Device.ID)
		return
	}
	f := c.reportDrop(r, drop{
		what: "the coax from " + x.name,
		lead: elec.Lead{Volts: x.port.DCOut.Volts.V, Ohm: ohm, Watt: l.W.V}, to: x.to.Device,
		sum: func(amps float64) string {
			return "(" + strings.Join(terms, " + ") + ") × " + unit.Fixed(amps, 2) + " A"
		},
	}, at, x.line.On())
	if f != nil {
		f.Then("bring the current in closer to %s, feed it by a wire, or take coax with less resistance", x.to.Device.ID)
	}
}

// coaxOhm is the resistance, out and back, of the cables between a feeder and what
// lives on it, with its addends.
func (c *Case) coaxOhm(x coaxFeed) (ohm float64, terms []string, lacks []Lack) {
	steps := x.line.Steps[:x.step]
	if x.on {
		steps = x.line.Steps[x.step+1:]
	}
	add := func(name string, p *catalog.Part, length source.Val[unit.MM], at source.Place) {
		switch {
		case p == nil || p.Cable == nil:
			lacks = append(lacks, Lack{"the cable of " + name, at})
		case !length.Set:
			lacks = append(lacks, Lack{"length of " + name, at})
		case !p.Cable.DCOhmKm.Set:
			lacks = append(lacks, Lack{"dc_ohm_per_km of " + p.ID, p.At})
		default:
			v := p.Cable.DCOhmKm.V * length.V.Metres() / 1000
			ohm += v
			terms = append(terms, unit.Fixed(v, 3)+" Ω ("+name+")")
		}
	}
	for _, s := range steps {
		switch {
		case s.Cable != nil && s.Cable.Part != nil && s.Cable.Part.Jumper != nil:
			add(s.Cable.ID, c.Firm.Catalog.Look(s.Cable.Part.Jumper.Cable.V), s.Cable.Length, s.Cable.Part.At)
		case s.Cable != nil:
			add(s.Cable.ID, s.Cable.Part, s.Cable.Length, s.Cable.At)
		case s.Lead != nil:
			l := s.Lead.Port.Lead
			add("the lead of "+s.Lead.Name(), c.Firm.Catalog.Look(l.Cable.V), l.Length, s.Lead.Port.At)
		}
	}
	return ohm, terms, lacks
}
