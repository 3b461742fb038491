package rules

import (
	"slices"

	"driploop/rules/limits"
)

// LimitCheck is one limit with the figure held against it. Outcome is "holds", or
// what the rule says: "fails", "at-worst", "unknown"; "advice" where network
// protection keeps the limit by itself.
type LimitCheck struct {
	Rule      string
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

// against is a figure that is held against rows.
type against struct {
	rule, kind string
	value      Known[float64]
	tolerance  float64
}

// limitChecks holds the direction against each kind of limit that the profile has.
// Where the profile is not made for the amplifier there is nothing to hold.
func (c *Case) limitChecks(x *BandChain, d *Direction) []LimitCheck {
	if c.Profile == nil || c.Profile.NeedsOperatorPermission() || !c.fits(x.Amp) {
		return nil
	}
	var out []LimitCheck
	hold := func(g against, a limits.Assessment) {
		if a.None() {
			return
		}
		l := c.limitCheck(g, a, c.rowsLack(x, a))
		if a.Row != nil {
			l.Formula = x.formula(a.Row)
		}
		out = append(out, l)
	}
	set := Known[float64]{V: float64(d.Set.V), OK: d.Set.OK, Lacks: d.Set.Lacks}
	q := x.query("gain", d.Name)
	hold(against{rule: "gain/amplifier", value: set}, c.gainLimit(x, q, false))
	hold(against{rule: "gain/profile", value: set}, c.gainLimit(x, q, true))
	if last := len(out) - 1; last >= 0 && out[last].Rule == "gain/profile" && out[last].Outcome == "fails" && x.Amp.Part.Amplifier.NetworkProtection.V {
		out[last].Outcome = "advice"
	}
	for _, g := range c.figures(x, d) {
		for _, q := range eachPer(c.Profile, x.query(g.kind, d.Name)) {
			hold(g, c.Profile.Assess(q, x.inputs()))
		}
	}
	return out
}

// figures are what the direction puts out, radiates, and amplifies altogether.
func (c *Case) figures(x *BandChain, d *Direction) []against {
	power := Known[float64]{Lacks: []Lack{x.noOutput()}}
	if d.rated() {
		power = known(d.Spec.MaxOut.V)
	}
	eirp := against{rule: "gain/" + d.Name + "-eirp", kind: "eirp", value: unknown[float64](x.Amp.At, "an antenna whose EIRP is known")}
	if s := d.strongest(); s != nil {
		eirp.value, eirp.tolerance = known(s.Worst.EIRP.Most.Value()), c.eirpTolerance(s)
	}
	system := against{rule: "gain/system", kind: "system_gain"}
	if k := c.systemGain(x, d); k.OK {
		system.value, system.tolerance = known(k.V.total()), c.systemTolerance(k.V)
	} else {
		system.value.Lacks = k.Lacks
	}
	out := []against{{rule: "gain/" + d.Name + "-power", kind: "conducted", value: power}, eirp, system}
	if !d.off() {
		out = append(out, against{rule: "gain/noise", kind: "noise_per_mhz", value: c.portNoise(x, d)})
	}
	return out
}

// radioChecks holds a router against the limits of its radio service.
func (c *Case) radioChecks(x *RadioChain) []LimitCheck {
	if c.Profile == nil || len(x.Feeds) == 0 {
		return nil
	}
	g := against{rule: "gain/radio-eirp"}
	if s := x.strongest(); s != nil {
		g.value, g.tolerance = known(s.Worst.EIRP.Most.Value()), c.eirpTolerance(s)
	} else {
		for _, a := range x.Antennas {
			g.value.Lacks = append(g.value.Lacks, a.Lacks...)
		}
	}
	var out []LimitCheck
	for _, a := range c.assessRadio(x) {
		l := c.limitCheck(g, a, x.rowsLack(c, a))
		if a.Row != nil {
			l.Formula = a.Row.Formula()
		}
		out = append(out, l)
	}
	return out
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
	case len(lacks) > 0:
	case a.Exceeded(g.value.V + g.tolerance):
		l.Outcome = "at-worst"
	default:
		l.Outcome = "holds"
	}
	return l
}
