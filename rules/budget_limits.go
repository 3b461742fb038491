package rules

import (
	"fmt"
	"slices"

	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// LimitCheck is one limit with the figure held against it. Outcome is "holds", or
// what the rule says: "fails", "at-worst", "unknown"; "advice" where network
// protection keeps the limit by itself.
type LimitCheck struct {
	Rule      string
	Of        string // what the figure is of, where that is not what the rule is named after
	Value     Known[float64]
	Limit     Known[float64]
	Tolerance float64
	Unit      string
	Outcome   string
	Formula   string
	Basis     string
}

// Margin is limit less value; false where one of them is not known.
func (l LimitCheck) Margin() (float64, bool) {
	return l.Limit.V - l.Value.V, l.Limit.OK && l.Value.OK
}

// against is a figure that is held against rows. Of several antennas the value is
// that of the strongest that is known; what the others lack stands with it.
type against struct {
	rule, kind string
	value      Known[float64]
	tolerance  float64
}

// limitChecks holds a direction against the rows of the profile, and its noise also
// against what the trade expects at a base station.
func (c *Case) limitChecks(x *BandChain, d *Direction) []LimitCheck {
	out := c.profileChecks(x, d)
	if d.Name == "uplink" && !d.off() {
		out = append(out, c.baseNoiseCheck(x))
	}
	return out
}

// profileChecks holds the direction against each kind of limit that the profile has.
// Where the profile is not made for the amplifier there is nothing to hold.
func (c *Case) profileChecks(x *BandChain, d *Direction) []LimitCheck {
	if c.Profile == nil || c.Profile.NeedsOperatorPermission() || !c.fits(x.Amp) {
		return nil
	}
	var out []LimitCheck
	hold := func(g against, a limits.Assessment) *LimitCheck {
		if a.None() {
			return &LimitCheck{}
		}
		l := c.limitCheck(g, a, c.rowsLack(x, a))
		if a.Row != nil {
			l.Formula = x.formula(a.Row)
		}
		out = append(out, l)
		return &out[len(out)-1]
	}
	set := Known[float64]{V: float64(d.Set.V), OK: d.Set.OK, Lacks: d.Set.Lacks}
	q := x.query("gain", d.Name)
	hold(against{rule: "gain/amplifier", value: set}, c.gainLimit(x, q, false))
	hold(against{rule: "gain/profile", value: set}, c.gainLimit(x, q, true)).protected(x)
	for _, g := range c.figures(x, d) {
		for _, q := range eachPer(c.Profile, x.query(g.kind, d.Name)) {
			hold(g, c.Profile.Assess(q, x.inputs()))
		}
	}
	if !d.off() {
		g := against{rule: "gain/noise", value: c.portNoise(x, d)}
		q = x.query("noise_per_mhz", d.Name)
		hold(g, c.gainLimit(x, q, false))
		hold(g, c.gainLimit(x, q, true)).protected(x)
	}
	return out
}

// protected turns a limit that depends on the site into advice, where network
// protection keeps it.
func (l *LimitCheck) protected(x *BandChain) {
	if l.Outcome == "fails" && x.Amp.Part.Amplifier.NetworkProtection.V {
		l.Outcome = "advice"
	}
}

// baseNoiseCheck holds the uplink noise at the strongest site against that site's
// own.
func (c *Case) baseNoiseCheck(x *BandChain) LimitCheck {
	l := LimitCheck{Rule: "gain/noise", Of: "at the site", Unit: "dBm/MHz", Tolerance: float64(referenceOff), Outcome: "unknown",
		Basis: practice(fmt.Sprintf("%s dB under the base station's own noise", plainFigure(float64(baseNoise)))).String()}
	floor, ok := rf.BaseFloor(baseNF)
	l.Limit = Known[float64]{V: floor.Plus(-baseNoise).Value(), OK: ok}
	n, lacks := c.noiseAtBase(x)
	if l.Value = (Known[float64]{V: n.level.Value(), OK: len(lacks) == 0, Lacks: lacks}); !l.Value.OK || !ok {
		return l
	}
	l.Formula = fmt.Sprintf("port %s + donor antenna %s − feed %s − path to the site of %s %s", unit.Fixed(n.port.Value(), 2), unit.Fixed(float64(n.donor), 2),
		unit.Fixed(float64(n.feed), 2), n.site.Operator.V, unit.Fixed(float64(n.path), 2))
	switch {
	case rf.Exceeds(l.Value.V, l.Limit.V):
		l.Outcome = "fails"
	case rf.Exceeds(l.Value.V+l.Tolerance, l.Limit.V):
		l.Outcome = "at-worst"
	default:
		l.Outcome = "holds"
	}
	return l
}

// figures are what the direction puts out, radiates, and amplifies altogether.
func (c *Case) figures(x *BandChain, d *Direction) []against {
	power := Known[float64]{Lacks: []Lack{x.noOutput()}}
	if d.rated() {
		power = known(d.Spec.MaxOut.V)
	}
	out := []against{{rule: "gain/" + d.Name + "-power", kind: "conducted", value: power}}
	if d.Name == "uplink" || len(d.Antennas) > 0 || x.coupling() == "antenna" { // nothing radiates toward a phone in a cradle
		eirp := c.eirpOf(d.strongest(), d.Antennas)
		if len(d.Antennas) == 0 {
			eirp.value.Lacks = []Lack{{"an antenna", x.Amp.At}}
		}
		eirp.rule, eirp.kind = "gain/"+d.Name+"-eirp", "eirp"
		out = append(out, eirp)
	}
	system := against{rule: "gain/system", kind: "system_gain"}
	if k := c.systemGain(x, d); k.OK {
		system.value, system.tolerance = known(k.V.total()), c.systemTolerance(k.V)
	} else {
		system.value.Lacks = k.Lacks
	}
	return append(out, system)
}

// eirpOf is the EIRP of the strongest antenna, with what the others lack.
func (c *Case) eirpOf(strongest *Antenna, all []Antenna) against {
	var g against
	if strongest != nil {
		g.value, g.tolerance = known(strongest.Worst.EIRP.Most.Value()), c.eirpTolerance(strongest)
	}
	for _, a := range all {
		g.value.Lacks = append(g.value.Lacks, a.Lacks...)
	}
	g.value.Lacks = dedupe(g.value.Lacks)
	return g
}

// radioChecks holds a router against the limits of its radio service and the antenna
// gain of its grant.
func (c *Case) radioChecks(x *RadioChain) []LimitCheck {
	if c.Profile == nil || len(x.Feeds) == 0 {
		return nil
	}
	g := c.eirpOf(x.strongest(), x.Antennas)
	g.rule = "gain/radio-eirp"
	var out []LimitCheck
	for _, a := range c.assessRadio(x) {
		l := c.limitCheck(g, a, x.rowsLack(c, a))
		if a.Row != nil {
			l.Formula = a.Row.Formula()
		}
		out = append(out, l)
	}
	return append(out, x.grantCheck())
}

// grantCheck holds the greatest antenna gain, net of its line, against the router's
// grant.
func (x *RadioChain) grantCheck() LimitCheck {
	part := x.Router.Part
	grant := part.Router.GrantGain(x.Band.Name)
	l := LimitCheck{Rule: "gain/radio-eirp", Of: "antenna gain", Unit: "dBi", Outcome: "unknown", Basis: "the grant of " + part.ID + ", as the part states it",
		Limit: Known[float64]{V: grant.V, OK: grant.Set}}
	if !grant.Set {
		l.Limit.Lacks = []Lack{{"max_antenna_gain_dbi of " + part.ID, part.At}}
	}
	for _, a := range x.Antennas {
		gain := float64(netGain(a.Worst))
		switch {
		case len(a.Lacks) > 0:
			l.Value.Lacks = append(l.Value.Lacks, a.Lacks...)
		case !l.Value.OK || gain > l.Value.V:
			l.Value.V, l.Value.OK = gain, true
		}
	}
	switch {
	case !l.Limit.OK || !l.Value.OK:
	case rf.Exceeds(l.Value.V, l.Limit.V):
		l.Outcome = "fails"
	case len(l.Value.Lacks) == 0:
		l.Outcome = "holds"
	}
	return l
}

// limitCheck holds a figure against an assessment; lacks is what keeps rows of it
// from being known.
func (c *Case) limitCheck(g against, a limits.Assessment, lacks []Lack) LimitCheck {
	l := LimitCheck{Rule: g.rule, Value: g.value, Tolerance: g.tolerance, Limit: Known[float64]{Lacks: slices.Clone(lacks)}, Outcome: "unknown"}
	switch {
	case a.Row != nil:
		l.Limit.V, l.Limit.OK = a.Value, true
		l.Unit, l.Basis = a.Row.Unit(), c.citation(a.Row)
	case len(a.Open) > 0:
		l.Unit = a.Open[0].Row.Unit()
	}
	switch {
	case a.Row == nil || !g.value.OK:
	case a.Exceeded(g.value.V) && a.Row.Per.Set: // a composite figure says nothing about a part of it
	case a.Exceeded(g.value.V):
		l.Outcome = "fails"
	case a.Exceeded(g.value.V + g.tolerance):
		l.Outcome = "at-worst"
	case len(lacks) > 0, len(g.value.Lacks) > 0:
	default:
		l.Outcome = "holds"
	}
	return l
}
