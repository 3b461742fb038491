package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainUplinkPower = powerRule("gain/uplink-power", "uplink",
	"The rated uplink output keeps the limit at the port", "what leaves the port toward the network is what the operator has to bear")

var gainDownlinkPower = powerRule("gain/downlink-power", "downlink",
	"The rated downlink output keeps the limit at the port", "what leaves the port toward the phones reaches past the walls and into other cells")

func powerRule(name, direction, title, why string) *Rule {
	return &Rule{
		Name: name, Title: title, Why: why, Basis: []Basis{byProfile}, Caution: mindOperator, Weight: Hold, Grave: true,
		Check: func(c *Case, r *Report) {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkPower(c, r, x, d) })
		},
	}
}

func checkPower(c *Case, r *Report, x *BandChain, d *Direction) {
	what := "the " + d.Name + " output"
	for _, q := range eachPer(c.Profile, x.query("conducted", d.Name)) {
		a := c.Profile.Assess(q, x.inputs())
		switch {
		case a.None():
			continue
		case !d.rated():
			x.lacksFigures(r, what, []Lack{x.noOutput()})
			return
		}
		v := d.Spec.MaxOut.V
		switch lacks := c.rowsLack(x, a); {
		case a.Exceeded(v) && q.Per == "":
			r.Fails(partAt(x.Amp), x.Amp.On(), "%s puts out up to %s dBm in the %s of %s; the limit at the port is %s %s",
				x.Amp.ID, hundredths(v), d.Name, x.Band.Name, hundredths(a.Value), a.Row.Unit()).
				Then("take an amplifier with less output, or another profile if the job falls under one").InBand(x.Band.Name).
				Over("output_dbm", v, "limit_dbm", a.Value).By(c.citation(a.Row)).Beside(d.Spec.MaxOut.At, "its rated output")
			return // what is counted in something narrower would say it again
		case a.Exceeded(v):
			x.onlyComposite(c, r, a, what, v)
		case len(lacks) > 0:
			x.lacksFigures(r, what, lacks)
		}
	}
}

// onlyComposite says that a composite figure breaks a limit which is counted in
// something narrower; by how much of it nobody can tell.
func (x *BandChain) onlyComposite(c *Case, r *Report, a limits.Assessment, what string, v float64) {
	r.Unknown(partAt(x.Amp), x.Amp.On(), "%s of %s in "+inBands+" is not assessed against %s %s: it is known as a composite of %s dBm", what, x.Amp.ID,
		hundredths(a.Value), a.Row.Unit(), hundredths(v)).
		Then("ask the maker for the figure %s", a.Row.Per.V).AcrossBands(x.Band.Name).By(c.citation(a.Row))
}

var gainUplinkEIRP = eirpRule("gain/uplink-eirp", "uplink",
	"What the donor antenna radiates at the rated output keeps the limit",
	"a donor antenna with too much gain, or a feed that loses too little, carries the uplink past its limit")

var gainDownlinkEIRP = eirpRule("gain/downlink-eirp", "downlink",
	"What the strongest server antenna radiates at the rated output keeps the limit",
	"a server antenna with too much gain on a short leg carries the downlink past its limit")

func eirpRule(name, direction, title, why string) *Rule {
	return &Rule{
		Name: name, Title: title, Why: why,
		Basis:   []Basis{byProfile, {Document: "EIRP = rated output − least line loss + antenna gain, at the low edge, middle and high edge of the band", Kind: "calculated"}},
		Caution: mindOperator, Weight: Hold, Grave: true,
		Check: func(c *Case, r *Report) {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkEIRP(c, r, x, d) })
		},
	}
}

func checkEIRP(c *Case, r *Report, x *BandChain, d *Direction) {
	limited := false
	for _, q := range eachPer(c.Profile, x.query("eirp", d.Name)) {
		a := c.Profile.Assess(q, x.inputs())
		if a.None() {
			continue
		}
		limited = true
		if strongest := d.strongest(); strongest != nil && x.holdEIRP(c, r, d, strongest, a) {
			break // what is counted in something narrower would say it again
		}
	}
	if limited {
		x.unknownEIRP(r, d)
	}
}

// holdEIRP holds the strongest antenna of a direction against the row that binds,
// and reports whether it broke it.
func (x *BandChain) holdEIRP(c *Case, r *Report, d *Direction, ant *Antenna, a limits.Assessment) bool {
	what := "the " + d.Name + " EIRP"
	v := ant.Worst.EIRP.Most.Value()
	tolerance := c.eirpTolerance(ant)
	switch lacks := c.rowsLack(x, a); {
	case a.Exceeded(v) && !a.Row.Per.Set:
		x.eirpFinding(c, r.Fails, a, d, ant, "").Then("%s", c.lessEIRP(x, ant, v-a.Value))
		return true
	case a.Exceeded(v):
		x.onlyComposite(c, r, a, what, v)
	case a.Exceeded(v + tolerance):
		x.eirpFinding(c, r.AtWorst, a, d, ant, " ± "+unit.Fixed(tolerance, 2)+" dB").With("tolerance_db", tolerance).
			Then("measure it at commissioning, or %s", c.lessEIRP(x, ant, v+tolerance-a.Value))
	case len(lacks) > 0:
		x.lacksFigures(r, what, lacks)
	}
	return false
}

// partAt is where the plan names a device's part, else the device.
func partAt(d *bom.Device) source.Place { return placeOr(d.Row.Part.At, d.At) }

// strongest is the antenna with the highest EIRP of those that are known, or nil.
func (d *Direction) strongest() *Antenna {
	var best *Antenna
	for i := range d.Antennas {
		a := &d.Antennas[i]
		if len(a.Lacks) == 0 && (best == nil || best.Worst.EIRP.Most.Below(a.Worst.EIRP.Most)) {
			best = a
		}
	}
	return best
}

// unknownEIRP says of which antennas nothing is known.
func (x *BandChain) unknownEIRP(r *Report, d *Direction) {
	what := "the " + d.Name + " EIRP"
	if len(d.Antennas) > 0 && !d.rated() {
		x.unassessed(r, what, []Lack{x.noOutput()})
		return
	}
	for _, ant := range d.Antennas {
		if len(ant.Lacks) > 0 {
			x.unassessed(r, what+" at "+ant.Node.Device.ID, ant.Lacks)
		}
	}
}

type reportFunc = func(at source.Place, on, says string, args ...any) *Finding

// eirpFinding shows the sum.
func (x *BandChain) eirpFinding(c *Case, report reportFunc, a limits.Assessment, d *Direction, ant *Antenna, spread string) *Finding {
	w := ant.Worst
	f := report(partAt(ant.Node.Device), ant.Node.On(), "%s radiates %s dBm%s in the %s of %s at %s: %s dBm + %s dBi − %s dB; the limit is %s %s",
		ant.Node.Device.ID, unit.Fixed(w.EIRP.Most.Value(), 2), spread, d.Name, x.Band.Name, w.MHz,
		hundredths(w.Out.Value()), hundredths(float64(w.Gain)), unit.Fixed(float64(w.Line.Loss.Least), 2),
		hundredths(a.Value), a.Row.Unit())
	return f.InBand(x.Band.Name).Over("eirp_dbm", w.EIRP.Most.Value(), "limit_dbm", a.Value).
		With("output_dbm", w.Out.Value()).With("antenna_gain_dbi", float64(w.Gain)).With("least_loss_db", float64(w.Line.Loss.Least)).
		By(c.citation(a.Row)).Beside(x.Amp.Row.Part.At, "the amplifier").Beside(lineAt(ant.Line), "the line between them")
}

// lessEIRP says how an antenna could radiate less by an amount: with another one,
// what is on hand before what is not, and of those the one with the most gain.
func (c *Case) lessEIRP(x *BandChain, ant *Antenna, by float64) string {
	want := float64(ant.Worst.Gain) - by
	var other *catalog.Part
	var gain float64
	better := func(p *catalog.Part, g float64) bool {
		switch {
		case other == nil:
			return true
		case c.Firm.held(p) != c.Firm.held(other):
			return c.Firm.held(p)
		}
		return g > gain
	}
	for _, p := range c.Firm.Catalog.All() {
		if p.Antenna == nil || p.ID == ant.Node.Device.Part.ID || p.Router != nil || len(p.Ports) != len(ant.Node.Device.Part.Ports) || !fitsInstead(p, ant.Node, x.Band) {
			continue
		}
		g, ok := greatestGain(p, x.Band)
		if ok && !rf.Exceeds(g, want) && c.kitTakes(x, ant.Line, p, g) && better(p, g) {
			other, gain = p, g
		}
	}
	amount := unit.Fixed(math.Ceil(by*10-rf.Slack)/10, 1)
	add := "put " + amount + " dB more loss into the line"
	if other == nil {
		return "take an antenna with " + amount + " dB less gain, or " + add
	}
	return fmt.Sprintf("take an antenna with less gain such as %s, or %s", c.Firm.OnHand(other), add)
}

// fitsInstead reports an antenna that goes where another one is: the same
// connector and impedance, held the same way, for the weather where that one is.
func fitsInstead(p *catalog.Part, n *bom.Node, b catalog.Band) bool {
	if len(p.Ports) == 0 {
		return false
	}
	now, port := n.Device.Part, &p.Ports[0]
	joins := port.Connector.Set && n.Face.Set && sameHalf(port.Connector.V, n.Face.V) && port.Impedance.V == n.Ohm.V
	held := now.Antenna.Fixing.Set && p.Antenna.Fixing.V == now.Antenna.Fixing.V
	weather := catalog.Has(p.Rated, "outdoor") || !catalog.Has(now.Rated, "outdoor")
	return joins && held && weather && p.Antenna.RangeAt(port.Name, b.Uplink.Mid()) != nil
}

func greatestGain(p *catalog.Part, b catalog.Band) (float64, bool) {
	top, found := 0.0, false
	for _, f := range bandPoints(b) {
		r := p.Antenna.RangeAt(p.Ports[0].Name, f)
		if r == nil {
			return 0, false
		}
		if !found || r.Gain.V > top {
			top, found = r.Gain.V, true
		}
	}
	return top, found
}

// eirpTolerance is how far an EIRP may lie above its nominal: nothing from the
// rated output, which is a certified maximum; the antenna's gain and the line's
// loss by what the house takes them to be good for.
func (c *Case) eirpTolerance(ant *Antenna) float64 {
	cable := float64(ant.Worst.Line.Sum(OfCable).Nominal) * c.House().CableTolerance.Or(4) / 100
	t, ok := rf.Together(rf.Either(unit.DB(c.House().AntennaToleranceDB.Or(0.5))), rf.Either(unit.DB(cable)))
	if !ok {
		return 0
	}
	return float64(t.Above)
}
