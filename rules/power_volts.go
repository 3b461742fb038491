package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/rules/rf"
)

var powerVolts = &Rule{
	Name:    "power/volts",
	Title:   "What feeds a device has the voltage that the device asks for",
	Why:     "24 V into a 12 V amplifier is its end, and below its least voltage it starts over and over",
	Caution: cautionIsolate,
	Basis: []Basis{
		practice("the maker's range of voltage against the nominal voltage of what feeds it"),
		practice("a lead-acid battery charges at 2.4 V a cell, 14.4 V for 12 V (charging_percent), and goes down to about 9 V while an engine starts (cranking_percent)")},
	Weight:  Hold,
	Lighter: "gear that only drops out while the engine starts is at worst outside: a punch, and none where the plan has it switched",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, w := range c.supplies().leads {
			c.checkBatteryOfVehicle(r, w)
			c.checkVolts(r, w)
		}
		for _, d := range c.Graph.Devices {
			if wantsPower(d) && !c.supplied(d) {
				c.reportUnsupplied(r, d)
			}
		}
	},
}

// checkBatteryOfVehicle holds that the battery which is there is of the vehicle's
// voltage.
func (c *Case) checkBatteryOfVehicle(r *Report, w lead) {
	site, d := c.Plan.Site.Volts, w.source
	if !c.Vehicle() || !site.Set || d == nil || d.Kind() != "battery" || d.Part == nil || !d.Part.Supply.Volts.Set || !d.Row.Existing.V {
		return
	}
	if v := d.Part.Supply.Volts; v.V != site.V {
		r.Fails(w.Row.From.At, w.On(), "%s comes from %s, a battery of %s V; the vehicle has %s V", w.Row.ID, named(d), plainFigure(v.V), plainFigure(site.V)).
			Then("look which of the two it is; half of a battery pair is no supply").Beside(site.At, "the vehicle").Beside(v.At, "the battery's part")
	}
}

// wrongVolts reports a lead whose nominal voltage is known to be outside what its
// load takes.
func (c *Case) wrongVolts(w lead) bool {
	takes, wants := asksFor(w.load)
	gives := c.voltsOf(w.source)
	return wants && takes.OK && gives.OK && (rf.Exceeds(gives.V, takes.V[1]) || rf.Below(gives.V, takes.V[0]))
}

// checkVolts holds the voltage of a lead against what its load asks for.
func (c *Case) checkVolts(r *Report, w lead) {
	if w.source == nil || w.load == nil {
		return
	}
	takes, wants := asksFor(w.load)
	if !wants {
		return
	}
	gives := c.voltsOf(w.source)
	lacks := append(append([]Lack(nil), gives.Lacks...), takes.Lacks...)
	if len(lacks) > 0 {
		r.Lacking(w.Row.At, w.On(), lacks, "whether %s gives %s its voltage", w.source.ID, w.load.ID)
		return
	}
	switch {
	case c.wrongVolts(w):
		do := c.supplyFor(w.load)
		if w.source.Kind() == "battery" {
			do = c.converterFor(w.load)
		}
		f := r.Fails(w.Row.At, w.On(), "%s gives %s V to %s, which takes %s", named(w.source), plainFigure(gives.V), w.load.ID, voltRange(takes.V)).
			Then("%s", do).Beside(w.load.At, "what is fed")
		if lo, hi := takes.V[0], takes.V[1]; gives.V > hi {
			f.Over("volts", gives.V, "limit_v", hi)
		} else {
			f.Under("volts", gives.V, "limit_v", lo)
		}
	case w.source.Kind() == "battery" && loadOf(w.load) != nil:
		c.checkBatteryVolts(r, w, gives.V, takes.V)
	}
}

// checkBatteryVolts looks at what a battery has while it charges and, in a vehicle,
// while its engine starts.
func (c *Case) checkBatteryVolts(r *Report, w lead, nominal float64, takes [2]float64) {
	charging := nominal * c.House().ChargingPercent.Or(120) / 100
	cranking := nominal * c.House().CrankingPercent.Or(75) / 100
	switch {
	case rf.Exceeds(charging, takes[1]):
		r.Fails(w.Row.At, w.On(), "%s has up to %s V while it charges (%s V nominal); %s takes %s", named(w.source), plainFigure(Round(charging)), plainFigure(nominal), w.load.ID, voltRange(takes)).
			Then("%s", c.converterFor(w.load)).Over("volts", charging, "limit_v", takes[1]).Beside(w.load.At, "what is fed")
	case c.Vehicle() && !w.Row.Switched.Set && rf.Below(cranking, takes[0]):
		r.AtWorst(w.Row.At, w.On(), "%s goes down to about %s V while the engine starts; %s takes %s and %s is not switched, so it drops out at each start",
			named(w.source), plainFigure(Round(cranking)), w.load.ID, voltRange(takes), w.Row.ID).
			Then("switch it with the ignition (switched), or %s", c.converterFor(w.load)).Under("volts", cranking, "limit_v", takes[0]).Beside(w.load.At, "what is fed")
	}
}

// asksFor is the range of voltage that a device takes at its power port; wants is
// false for what has no range of its own, such as a converter. A bias tee takes up
// to what its port is made for.
func asksFor(d *bom.Device) (takes Known[[2]float64], wants bool) {
	switch {
	case d.Kind() == "bias-tee" && d.Part != nil:
		for i := range d.Part.Ports {
			if dc := d.Part.Ports[i].DCOut; dc != nil {
				return known([2]float64{0, dc.Volts.V}), true
			}
		}
		return takes, false
	case !d.Active():
		return takes, false
	}
	if l := loadOf(d); l != nil && l.Volts.Set {
		return known(l.Volts.V), true
	}
	return unknown[[2]float64](partOrDevice(d), "load.volts of "+partName(d)), true
}

// wantsPower reports a device that does nothing without a supply and has a port for
// one: what is there already has its own, what lives on its coax alone is the matter
// of power/dc-path.
func wantsPower(d *bom.Device) bool {
	if d.Row.Existing.V || d.Part == nil || loadOf(d) == nil && d.Kind() != "bias-tee" && !d.Active() {
		return false
	}
	return hasPowerPort(d.Part) || takesPoE(d.Part)
}

func hasPowerPort(p *catalog.Part) bool {
	for i := range p.Ports {
		if p.Ports[i].Use.V == "power" {
			return true
		}
	}
	return false
}

func takesPoE(p *catalog.Part) bool {
	for i := range p.Ports {
		if p.Ports[i].Use.V == "data" && p.Ports[i].PoE.Set {
			return true
		}
	}
	return false
}

// supplied reports a device to which the plan brings power, whether enough or not.
func (c *Case) supplied(d *bom.Device) bool {
	return c.wired(d) || c.fedOverCoax(d) && !fedElsewhere(d)
}

// wired reports a device with a wire, or with a data line in a port that takes power.
func (c *Case) wired(d *bom.Device) bool {
	for _, w := range c.Graph.Wires {
		if w.Row.From.V.Name == d.ID || w.Row.To.V.Name == d.ID {
			return true
		}
	}
	for _, x := range c.Graph.Data {
		for _, n := range []*bom.Node{x.From, x.To} {
			if n != nil && n.Device == d && n.Port.PoE.Set {
				return true
			}
		}
	}
	return false
}

// fedOverCoax reports a device toward which some port on its lines feeds current,
// whether it gets there or not.
func (c *Case) fedOverCoax(d *bom.Device) bool { return c.supplies().toward[d] }

func (c *Case) reportUnsupplied(r *Report, d *bom.Device) {
	takes := ""
	if l := loadOf(d); l != nil && l.W.Set {
		takes = ", which takes " + watts(l.W.V)
		if l.Volts.Set {
			takes += " at " + voltRange(l.Volts.V)
		}
	}
	r.Unknown(deviceAt(d), d.On(), "the plan does not say what feeds %s%s; its supply is not assessed", d.ID, takes).
		Then("%s", c.supplyFor(d))
}

// supplyFor names a supply of the catalog with the voltage and power of a device.
func (c *Case) supplyFor(d *bom.Device) string {
	takes, _ := asksFor(d)
	if !hasPowerPort(d.Part) {
		return "feed " + d.ID + " over its data line, from an injector of its kind"
	}
	if d.Kind() == "bias-tee" {
		return "feed " + d.ID + " from " + plainFigure(takes.V[1]) + " V, with a wire to its power port"
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == "supply" && p.Port("in") == nil && suits(p, takes, c.drawOf(d))
	})
	if p == nil {
		return "feed " + d.ID + " from a supply of its voltage, with a wire; the catalog has none"
	}
	return "feed " + d.ID + " from " + c.Firm.OnHand(p) + ", with a wire to its power port"
}

// converterFor names a converter of the catalog for a device behind a battery.
func (c *Case) converterFor(d *bom.Device) string {
	takes, _ := asksFor(d)
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == "supply" && p.Port("in") != nil && suits(p, takes, c.drawOf(d))
	})
	if p == nil {
		return "put a converter of its voltage ahead of " + d.ID + "; the catalog has none"
	}
	return "put converter " + c.Firm.OnHand(p) + " ahead of " + d.ID
}

// suits reports a supply whose voltage lies in a range and whose power is enough.
func suits(p *catalog.Part, takes Known[[2]float64], d draw) bool {
	s := p.Supply
	return takes.OK && s.Volts.Set && s.Amps.Set && len(d.lacks) == 0 &&
		s.Volts.V >= takes.V[0] && s.Volts.V <= takes.V[1] && s.Volts.V*s.Amps.V >= d.watt
}
