package rules

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainRules = []*Rule{gainProfile, gainMobility, gainAmplifier, gainUplinkPower, gainDownlinkPower,
	gainUplinkEIRP, gainDownlinkEIRP, gainKit}

// mindOperator is the caution of all rules about what an amplifier radiates.
const mindOperator = "An amplifier works under the network operator's licence and stops when the operator or the radio authority asks. The figures here come from the profile that is named, not from the law itself."

// byProfile is the basis of rules whose limits are rows of the profile; a finding
// prints the row that it stands on.
var byProfile = Basis{Document: "the rows of the plan's limit profile", Kind: "code"}

var gainProfile = &Rule{
	Name:    "gain/profile",
	Title:   "The set gain keeps the limits that depend on the site: received level and coupling losses",
	Why:     "too much gain near a base station raises its noise floor for everybody in the cell",
	Basis:   []Basis{byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Lighter: "an amplifier with network protection lowers its gain by itself: then it is said as advice, with the gain that will run",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if !c.haveLimits(r) {
			return
		}
		for _, x := range c.Chain().Bands {
			for _, d := range x.directions() {
				checkGain(c, r, x, d, true)
			}
		}
	},
}

var gainAmplifier = &Rule{
	Name:    "gain/amplifier",
	Title:   "The set gain keeps the limits that follow from the band alone",
	Why:     "an amplifier set above what its class allows is outside its certification",
	Basis:   []Basis{byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Profile == nil {
			return // gain/profile says so
		}
		for _, x := range c.Chain().Bands {
			for _, d := range x.directions() {
				checkGain(c, r, x, d, false)
			}
		}
	},
}

func (x *BandChain) directions() []*Direction { return []*Direction{&x.Up, &x.Down} }

// haveLimits reports whether there is a profile with figures to hold gains
// against; where there is none, it says once that nothing is assessed.
func (c *Case) haveLimits(r *Report) bool {
	amps := c.amplifiers()
	if len(amps) == 0 {
		return false
	}
	at := placeOr(c.Plan.Job.Profile.At, c.JobAt())
	switch {
	case c.Profile == nil && c.ProfileName() == "":
		r.Unknown(at, "job", "no limit profile is named, in the plan or in the workspace; gain and power are not assessed").
			Then("name one: profile = …; basis lists them")
		return false
	case c.Profile == nil:
		return false // the name has a finding of its own
	case c.Profile.NeedsOperatorPermission():
		r.Unknown(at, "job", "profile %s has no figures of its own; gain and power are not assessed: the operator's permission sets them", c.Profile.ID).
			Then("get the operator's written permission, and enter its figures as a profile of the workspace")
		return false
	}
	return true
}

// amplifiers lists the amplifiers of the plan.
func (c *Case) amplifiers() []*bom.Device {
	var out []*bom.Device
	for _, d := range c.Graph.Devices {
		if d.Part != nil && d.Part.Amplifier != nil {
			out = append(out, d)
		}
	}
	return out
}

// checkGain holds the set gain of one direction against one half of the gain
// rows: those that depend on the site, or those that follow from the band.
func checkGain(c *Case, r *Report, x *BandChain, d *Direction, bySite bool) {
	if d.Span.Empty() {
		return
	}
	q := x.query("gain", d.Name)
	band, site := limits.Split(c.Profile.Match(q))
	rows := band
	if bySite {
		rows = site
	}
	if len(rows) == 0 {
		return
	}
	a := limits.Least(q, x.inputs(), rows...)
	if lacks := append(x.lacking(a.Open), d.Set.Lacks...); len(lacks) > 0 && (!d.Set.OK || a.Row == nil || !a.Exceeded(float64(d.Set.V))) {
		x.unassessed(r, "the "+d.Name+" gain", lacks)
		return
	}
	if !a.Exceeded(float64(d.Set.V)) {
		return
	}
	set := float64(d.Set.V)
	says := fmt.Sprintf("%s is set to %s dB of %s gain in %s; the limit is %s dB (%s)", x.Amp.ID, unit.Fixed(set, 1), d.Name,
		x.Band.Name, unit.Fixed(a.Value, 2), x.formula(a.Row))
	do := fmt.Sprintf("set %s back by %s dB more: set = { %s = { back_off_db = %s } }", x.Amp.ID, unit.Fixed(set-a.Value, 1), x.Band.Name, x.backOff(d, a.Value))
	var f *Finding
	if bySite && x.Amp.Part.Amplifier.NetworkProtection.V {
		f = r.Advice(x.settingAt(), x.Amp.On(), "%s; its network protection will run it at no more than that", says)
	} else {
		f = r.Fails(x.settingAt(), x.Amp.On(), "%s", says).Then("%s", do)
	}
	f.InBand(x.Band.Name).Over("gain_db", set, "limit_db", a.Value).By(c.citation(a.Row)).Beside(d.Spec.At, "gain of %s in %s", x.Amp.Part.ID, x.Own.Name)
}

// backOff is the back-off from the greatest gain that reaches a limit, in whole
// steps.
func (x *BandChain) backOff(d *Direction, limit float64) string {
	run, ok := rf.GainRuns(unit.DB(d.Spec.GainDB.V), unit.DB(x.Amp.Part.Amplifier.StepDB.V), rf.ProtectionCeiling(unit.DB(limit)))
	if !ok {
		return "…"
	}
	return plainFigure(Round(float64(run.BackOff)))
}

// settingAt is where the plan sets the amplifier in the band, else the device.
func (x *BandChain) settingAt() source.Place {
	for _, s := range x.Amp.Row.Set {
		if s.Name == x.Band.Name || s.Name == x.Own.Name {
			return s.At
		}
	}
	return partAt(x.Amp)
}

// formula prints the row with the figures that went into it.
func (x *BandChain) formula(row *limits.Row) string {
	out := row.Formula()
	var with []string
	in := x.inputs()
	for _, t := range []struct {
		k, v float64
		name string
		unit string
	}{
		{row.KF.V, in.UplinkMid.V, "f", "MHz"}, {row.KR.V, in.RSSI.V, "RSSI", "dBm"},
		{row.KM.V, in.MSCL.V, "MSCL", "dB"}, {row.KB.V, in.BSCL.V, "BSCL", "dB"},
	} {
		if t.k != 0 {
			with = append(with, fmt.Sprintf("%s = %s %s", t.name, plainFigure(Round2(t.v)), t.unit))
		}
	}
	if len(with) > 0 {
		out += ", with " + strings.Join(with, ", ")
	}
	return out
}

// citation is the document that a row stands on.
func (c *Case) citation(row *limits.Row) string {
	return limits.Origin(row.Clause.V, row.Edition.Or(c.Profile.Edition.V), row.Proof.V)
}

// cutOff reports an amplifier that is not connected on one side. The rules about
// mating say what is open there; figures that lack nothing else are passed over.
func (x *BandChain) cutOff() bool {
	return len(x.Feeds) == 0 || len(x.Legs) == 0 && x.coupling() == "antenna"
}

// unassessed says once for a figure of a band what it lacks.
func (x *BandChain) unassessed(r *Report, what string, lacks []Lack) {
	if x.cutOff() {
		if r.rule.Name == "gain/profile" {
			r.Unknown(partAt(x.Amp), x.Amp.On(), "%s has no whole line to a donor antenna and to where the phones are; nothing of its radio chain is assessed", x.Amp.ID).
				Then("connect it").AcrossBands(x.Band.Name)
		}
		return
	}
	f := r.Unknown(partAt(x.Amp), x.Amp.On(), "%s of %s in "+inBands+" is not assessed: it lacks %s", what, x.Amp.ID, lackWords(lacks)).
		Then("add what is missing").AcrossBands(x.Band.Name)
	for _, l := range lacks {
		f.Beside(l.At, "what is missing: %s", l.What)
	}
}

var gainMobility = &Rule{
	Name:    "gain/mobility",
	Title:   "Amplifier, limit profile and setting are of one kind: in a building or in a vehicle, and of one class",
	Why:     "an amplifier certified for a vehicle has other gain, noise and antenna limits than one for a building",
	Basis:   []Basis{{Document: "47 CFR 20.3, definitions of fixed and mobile signal boosters", Kind: "code", Proof: "memory"}, byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, d := range c.amplifiers() {
			checkMobility(c, r, d)
		}
	},
}

func checkMobility(c *Case, r *Report, d *bom.Device) {
	amp, at := d.Part.Amplifier, partAt(d)
	setting := c.Plan.Job.Setting.Or("building")
	switch {
	case !amp.Mobility.Set:
		r.Unknown(at, d.On(), "part %s does not say whether it is for buildings or vehicles; that is not assessed", d.Part.ID).
			Then("add mobility to the part").Beside(d.Part.At, "the part")
	case (amp.Mobility.V == "mobile") != (setting == "vehicle"):
		r.Fails(at, d.On(), "%s is a %s amplifier, the job is in a %s", d.ID, amp.Mobility.V, setting).
			Then("take an amplifier that is certified for a %s", setting).Beside(amp.Mobility.At, "mobility of %s", d.Part.ID)
		return
	}
	if c.Profile == nil {
		return
	}
	for _, m := range []struct{ word, profile, amp string }{
		{"class", c.Profile.Class.V, amp.Class.V}, {"mobility", c.Profile.Mobility.V, amp.Mobility.V},
	} {
		if m.profile != "" && m.amp != "" && m.profile != m.amp {
			r.Fails(at, d.On(), "%s is %s by its %s, profile %s is for %s", d.ID, m.amp, m.word, c.Profile.ID, m.profile).
				Then("name the profile that fits the amplifier, or take an amplifier that fits the profile").Beside(c.Plan.Job.Profile.At, "the profile")
			return
		}
	}
	if s := c.Profile.Setting; s.Set && s.V != setting {
		r.Fails(placeOr(c.Plan.Job.Profile.At, at), d.On(), "profile %s is for a %s, the job is in a %s", c.Profile.ID, s.V, setting).
			Then("name the profile that fits the job")
	}
	if !amp.Class.Set && c.Profile.Class.Set {
		r.Unknown(at, d.On(), "part %s states no class; profile %s is for class %s, and whether it fits is not assessed", d.Part.ID, c.Profile.ID, c.Profile.Class.V).
			Then("add class to the part").Beside(d.Part.At, "the part")
	}
}

// Round2 rounds a figure for a message.
func Round2(v float64) float64 { return Round(Round(v*100) / 100) }

// eachPer asks a question for the composite figure and for whatever else the rows
// are counted in.
func eachPer(p *limits.Profile, q limits.Query) []limits.Query {
	pers := p.Pers(q)
	if !slices.Contains(pers, "") {
		pers = append([]string{""}, pers...)
	}
	var out []limits.Query
	for _, per := range pers {
		q.Per = per
		out = append(out, q)
	}
	return out
}
