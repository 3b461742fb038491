package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules/rf"
)

var powerBudget = &Rule{
	Name:    "power/budget",
	Title:   "A supply gives what everything that hangs on it takes",
	Why:     "an overloaded supply folds back or runs hot: the gear starts over at full load, months after the crew has left",
	Caution: cautionIsolate,
	Basis: []Basis{
		practice("the greatest power of all loads together against volts × amps of the supply"),
		house("supply_load_percent (100 % where it says nothing), converter_percent (85 %)")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, d := range c.Graph.Devices {
			if d.Part != nil && d.Part.Supply != nil {
				c.checkBudget(r, d)
			}
		}
		for _, x := range c.supplies().coax {
			c.checkCoaxBudget(r, x)
		}
	},
}

// checkBudget holds what hangs on a source against what it gives.
func (c *Case) checkBudget(r *Report, d *bom.Device) {
	all, s := c.hangsOn(d), d.Part.Supply
	if len(all.terms) == 0 && len(all.lacks) == 0 {
		return
	}
	lacks := all.lacks
	for _, k := range []struct {
		v    source.Val[float64]
		name string
	}{{s.Volts, "volts"}, {s.Amps, "amps"}} {
		if !k.v.Set {
			lacks = append(lacks, Lack{k.name + " of " + d.Part.ID, d.Part.At})
		}
	}
	if len(lacks) > 0 {
		r.Lacking(deviceAt(d), d.On(), lacks, "whether %s gives what hangs on it", d.ID)
		return
	}
	percent := c.House().SupplyPercent.Or(100)
	gives := s.Volts.V * s.Amps.V * percent / 100
	if !rf.Exceeds(all.watt, gives) {
		return
	}
	share := ""
	if percent != 100 {
		share = ", loaded to " + plainFigure(percent) + " % (supply_load_percent)"
	}
	r.Fails(deviceAt(d), d.On(), "what hangs on %s takes %s; it gives %s: %s V × %s A%s", named(d), all, watts(gives), plainFigure(s.Volts.V), plainFigure(s.Amps.V), share).
		Then("%s", c.biggerThan(d, all.watt*100/percent, len(all.terms) > 1)).Over("load_w", all.watt, "limit_w", gives).Beside(d.Part.At, "the supply's part")
}

// biggerThan names a source of the same kind and voltage with enough power.
func (c *Case) biggerThan(d *bom.Device, watt float64, several bool) string {
	s := d.Part.Supply
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		return p.Kind.V == d.Part.Kind.V && p.Supply.Volts.V == s.Volts.V && p.Supply.PoE.V == s.PoE.V && p.Supply.Volts.V*p.Supply.Amps.V >= watt &&
			(p.Port("in") == nil) == (d.Part.Port("in") == nil)
	})
	share := ""
	if several {
		share = ", or share the load between two of them"
	}
	if p == nil {
		return "take one of that voltage that gives " + watts(watt) + share + "; the catalog has none"
	}
	return "take " + c.Firm.OnHand(p) + " in place of " + d.Part.ID + share
}

// checkCoaxBudget holds what a device takes over its coax against what the port at
// the other end gives.
func (c *Case) checkCoaxBudget(r *Report, x coaxFeed) {
	d, l := x.to.Device, loadOf(x.to.Device)
	if l == nil {
		return // an antenna's own amplifier: its part has no key for what it takes
	}
	var lacks []Lack
	if !l.W.Set {
		lacks = append(lacks, Lack{"load.w of " + d.Part.ID, d.Part.At})
	}
	if !x.port.DCOut.MA.Set {
		lacks = append(lacks, Lack{"dc_out.ma of " + x.name, x.at})
	}
	if len(lacks) > 0 {
		r.Lacking(deviceAt(d), d.On(), lacks, "whether %s feeds %s enough", x.name, d.ID)
		return
	}
	dc := x.port.DCOut
	if gives := dc.Volts.V * dc.MA.V / 1000; rf.Exceeds(l.W.V, gives) {
		r.Fails(deviceAt(d), d.On(), "%s takes %s over its coax; %s gives %s: %s V × %s mA", named(d), watts(l.W.V), x.name, watts(gives), plainFigure(dc.Volts.V), plainFigure(dc.MA.V)).
			Then("feed %s by a wire, or from a bias tee that gives %s", d.ID, watts(l.W.V)).Over("load_w", l.W.V, "limit_w", gives).Beside(x.at, "the port that feeds it")
	}
}
