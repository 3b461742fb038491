package rules

import (
	"fmt"

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

// eachDirection visits one direction of every band that there is something to hold
// against: a profile with figures, and spectrum in that direction.
func (c *Case) eachDirection(name string, visit func(*BandChain, *Direction)) {
	if c.Profile == nil || c.Profile.NeedsOperatorPermission() {
		return
	}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			if d.Name == name && !d.Span.Empty() {
				visit(x, d)
			}
		}
	}
}

func checkPower(c *Case, r *Report, x *BandChain, d *Direction) {
	for _, q := range eachPer(c.Profile, x.query("conducted", d.Name)) {
		a := c.Profile.Assess(q, x.inputs())
		switch {
		case a.None():
			continue
		case d.Spec == nil || !d.Spec.MaxOut.Set:
			x.unassessed(r, "the "+d.Name+" output", []Lack{{"max_out_dbm of " + x.Amp.Part.ID + " in " + x.Own.Name, x.Row.At}})
			return
		}
		v := d.Spec.MaxOut.V
		if a.Exceeded(v) && q.Per == "" {
			r.Fails(partAt(x.Amp), x.Amp.On(), "%s puts out up to %s dBm in the %s of %s; the limit at the port is %s %s",
				x.Amp.ID, unit.Fixed(v, 1), d.Name, x.Band.Name, unit.Fixed(a.Value, 1), a.Row.Unit()).
				Then("take an amplifier with less output, or another profile if the job falls under one").InBand(x.Band.Name).
				Over("output_dbm", v, "limit_dbm", a.Value).By(c.citation(a.Row)).Beside(d.Spec.MaxOut.At, "its rated output")
			continue
		}
		x.openLimits(c, r, q, a, "the "+d.Name+" output", v)
	}
}

// openLimits says what keeps a figure that breaks no known limit from being inside
// all of them: rows that lack an input, spectrum without a row, or a limit counted
// in something narrower than the rated composite power.
func (x *BandChain) openLimits(c *Case, r *Report, q limits.Query, a limits.Assessment, what string, v float64) {
	at := partAt(x.Amp)
	if a.Exceeded(v) {
		r.Unknown(at, x.Amp.On(), "%s of %s in %s is not assessed per %s: it is rated as a composite of %s dBm, the limit is %s %s", what, x.Amp.ID, x.Band.Name,
			q.Per, unit.Fixed(v, 1), unit.Fixed(a.Value, 1), a.Row.Unit()).Then("ask the maker for the figure per %s", q.Per).InBand(x.Band.Name).By(c.citation(a.Row))
		return
	}
	lacks := x.lacking(a.Open)
	for _, s := range a.Left {
		lacks = append(lacks, Lack{"a row of profile " + c.Profile.ID + " for " + s.String(), c.Plan.Job.Profile.At})
	}
	if len(lacks) > 0 {
		x.unassessed(r, what, lacks)
	}
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
	for _, q := range eachPer(c.Profile, x.query("eirp", d.Name)) {
		a := c.Profile.Assess(q, x.inputs())
		if a.None() {
			continue
		}
		strongest := d.strongest()
		if strongest == nil {
			x.noEIRP(c, r, d)
			return
		}
		v := strongest.Worst.EIRP.Most.Value()
		tolerance := c.eirpTolerance(strongest)
		switch {
		case a.Exceeded(v) && q.Per == "":
			x.eirpFinding(c, r.Fails, a, d, strongest, "").Then("%s", c.lessEIRP(x, strongest, v-a.Value))
		case q.Per == "" && a.Exceeded(v+tolerance):
			x.eirpFinding(c, r.AtWorst, a, d, strongest, fmt.Sprintf(" ± %s dB", unit.Fixed(tolerance, 1))).With("tolerance_db", tolerance).
				Then("measure it at commissioning, or %s", c.lessEIRP(x, strongest, v+tolerance-a.Value))
		default:
			x.openLimits(c, r, q, a, "the "+d.Name+" EIRP", v)
		}
		for _, ant := range d.Antennas {
			if len(ant.Lacks) > 0 && q.Per == "" {
				x.unassessed(r, "the "+d.Name+" EIRP of "+ant.Node.Name(), ant.Lacks)
			}
		}
	}
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

// noEIRP says why nothing is known of what a direction radiates. An amplifier
// whose phones lie in a cradle, or hang on a wire, has no server antenna.
func (x *BandChain) noEIRP(c *Case, r *Report, d *Direction) {
	var lacks []Lack
	for _, a := range d.Antennas {
		lacks = append(lacks, a.Lacks...)
	}
	if len(lacks) == 0 {
		if d.Name == "downlink" && x.coupling() != "antenna" {
			return
		}
		lacks = []Lack{{"a line from " + x.Amp.ID + " to an antenna", x.Amp.At}}
	}
	x.unassessed(r, "the "+d.Name+" EIRP", lacks)
}

type reportFunc = func(at source.Place, on, says string, args ...any) *Finding

// eirpFinding shows the sum.
func (x *BandChain) eirpFinding(c *Case, report reportFunc, a limits.Assessment, d *Direction, ant *Antenna, spread string) *Finding {
	w := ant.Worst
	f := report(partAt(ant.Node.Device), ant.Node.On(), "%s radiates %s dBm%s in the %s of %s at %s: %s dBm + %s dBi − %s dB = %s dBm, limit %s %s",
		ant.Node.Device.ID, unit.Fixed(w.EIRP.Most.Value(), 1), spread, d.Name, x.Band.Name, w.MHz,
		unit.Fixed(w.Out.Value(), 1), unit.Fixed(float64(w.Gain), 1), unit.Fixed(float64(w.Line.Loss.Least), 1),
		unit.Fixed(w.EIRP.Most.Value(), 1), unit.Fixed(a.Value, 1), a.Row.Unit())
	return f.InBand(x.Band.Name).Over("eirp_dbm", w.EIRP.Most.Value(), "limit_dbm", a.Value).
		With("output_dbm", w.Out.Value()).With("antenna_gain_dbi", float64(w.Gain)).With("least_loss_db", float64(w.Line.Loss.Least)).
		By(c.citation(a.Row)).Beside(x.Amp.Row.Part.At, "the amplifier").Beside(lineAt(ant.Line), "the line between them")
}

// lessEIRP says how an antenna could radiate less by an amount.
func (c *Case) lessEIRP(x *BandChain, ant *Antenna, by float64) string {
	want := float64(ant.Worst.Gain) - by
	var other *catalog.Part
	for _, p := range c.Firm.Catalog.All() {
		if p.Antenna == nil || p.ID == ant.Node.Device.Part.ID || p.Router != nil || len(p.Ports) != len(ant.Node.Device.Part.Ports) || !fitsInstead(p, ant.Node, x.Band) {
			continue
		}
		if g, ok := greatestGain(p, x.Band); ok && g <= want && (other == nil || c.Firm.held(p) && !c.Firm.held(other)) {
			other = p
		}
	}
	add := fmt.Sprintf("put %s dB more loss into the line", unit.Fixed(by+0.05, 1))
	if other == nil {
		return "take an antenna with " + unit.Fixed(by+0.05, 1) + " dB less gain, or " + add
	}
	return fmt.Sprintf("take an antenna with less gain such as %s, or %s", c.Firm.OnHand(other), add)
}

// fitsInstead reports an antenna with the same connector, held the same way.
func fitsInstead(p *catalog.Part, n *bom.Node, b catalog.Band) bool {
	now := n.Device.Part
	return len(p.Ports) > 0 && p.Ports[0].Connector.Set && n.Face.Set && p.Ports[0].Connector.V == n.Face.V &&
		p.Antenna.Fixing.V == now.Antenna.Fixing.V && p.Antenna.RangeAt(p.Ports[0].Name, b.Uplink.Mid()) != nil
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
