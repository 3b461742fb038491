package rules

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
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
		c.sayNoPart(r)
		c.sayNoBands(r)
		if !c.haveLimits(r) {
			return
		}
		c.sayCutOff(r)
		for _, direction := range directions {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkGain(c, r, x, d, true) })
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
		for _, d := range c.amplifiers() {
			settingsLead(r, d)
		}
		for _, direction := range directions {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkGain(c, r, x, d, false) })
		}
	},
}

// settingsLead says where an amplifier is set in a band that it has no row for: the
// setting goes nowhere, and a slip in it would leave another band at full gain.
func settingsLead(r *Report, d *bom.Device) {
	for _, s := range d.Row.Set {
		b, known := catalog.LookBand(s.Name)
		if row, _ := ampRow(d.Part.Amplifier, b); known && row == nil {
			r.Advice(s.At, d.On(), "%s is set back in %s, and part %s has no row for it; nothing is set by that", d.ID, s.Name, d.Part.ID).
				Then("name a band of the amplifier: %s", list(words(ampBands(d.Part.Amplifier))))
		}
	}
}

var directions = []string{"uplink", "downlink"}

func (x *BandChain) directions() []*Direction { return []*Direction{&x.Up, &x.Down} }

// eachDirection visits one direction of every band that there is something to hold
// against: a profile with figures for this amplifier, and spectrum in that
// direction.
func (c *Case) eachDirection(name string, visit func(*BandChain, *Direction)) {
	if c.Profile == nil || c.Profile.NeedsOperatorPermission() {
		return // gain/profile says so
	}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			if d.Name == name && !d.Span.Empty() && c.fits(x.Amp) {
				visit(x, d)
			}
		}
	}
}

// fits reports whether the profile's rows are made for an amplifier of this class
// and mobility. Where they are not, gain/mobility says so, and figures made for
// something else would only say it again in every band.
func (c *Case) fits(d *bom.Device) bool {
	return c.Profile != nil && misfit(c.Profile, d.Part.Amplifier) == (trait{})
}

// trait is what an amplifier and a profile both state.
type trait struct{ word, profile, amp string }

// misfit is the first trait in which the two contradict each other; none where they
// do not.
func misfit(p *limits.Profile, a *catalog.Amplifier) trait {
	for _, t := range [2]trait{{"class", p.Class.V, a.Class.V}, {"mobility", p.Mobility.V, a.Mobility.V}} {
		if t.profile != "" && t.amp != "" && t.profile != t.amp {
			return t
		}
	}
	return trait{}
}

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
	case len(c.Profile.Limits) == 0 && !c.Profile.DonorAsRadio.V:
		r.Unknown(at, "job", "profile %s has no rows for amplifiers; gain and power of %s are not assessed", c.Profile.ID, amps[0].ID).
			Then("name the profile of the amplifier's class").Beside(partAt(amps[0]), "the amplifier")
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
	q := x.query("gain", d.Name)
	a := c.gainLimit(x, q, bySite)
	lacks := append(c.rowsLack(x, a), d.Set.Lacks...)
	switch {
	case d.Set.OK && a.Exceeded(float64(d.Set.V)):
	case a.None():
		return
	case len(lacks) > 0 && bySite:
		x.unassessed(r, "the "+d.Name+" gain", lacks)
		return
	case len(lacks) > 0:
		x.lacksFigures(r, "the "+d.Name+" gain", lacks)
		return
	default:
		return
	}
	set := float64(d.Set.V)
	says := fmt.Sprintf("%s is set to %s dB of %s gain in %s; the limit is %s dB (%s)", x.Amp.ID, hundredths(set), d.Name,
		x.Band.Name, unit.Fixed(a.Value, 2), x.formula(a.Row))
	var f *Finding
	if bySite && x.Amp.Part.Amplifier.NetworkProtection.V {
		f = r.Advice(x.settingAt(), x.Amp.On(), "%s; its network protection will run it at no more than that", says)
	} else {
		f = r.Fails(x.settingAt(), x.Amp.On(), "%s", says).
			Then("set it back: set = { %s = { back_off_db = %s } }", x.Band.Name, x.backOff(d, a.Value))
	}
	f.InBand(x.Band.Name).Over("gain_db", set, "limit_db", a.Value).By(c.citation(a.Row)).Beside(d.Spec.At, "gain of %s in %s", x.Amp.Part.ID, x.Own.Name)
}

// gainLimit is the least of one half of the gain rows. Spectrum for which the
// profile has no row at all counts with those that follow from the band.
func (c *Case) gainLimit(x *BandChain, q limits.Query, bySite bool) limits.Assessment {
	byBand, site := limits.Split(c.Profile.Match(q))
	if bySite {
		return limits.Least(q, x.inputs(), site...)
	}
	a := limits.Least(q, x.inputs(), byBand...)
	a.Left = c.Profile.Uncovered(q)
	return a
}

// rowsLack names what keeps rows from being assessed: inputs, and spectrum for
// which there is none.
func (c *Case) rowsLack(x *BandChain, a limits.Assessment) []Lack {
	lacks := x.lacking(a.Open)
	if len(a.Left) > 0 {
		lacks = append(lacks, Lack{"a row of profile " + c.Profile.ID + " for " + spans(a.Left), c.Plan.Job.Profile.At})
	}
	return lacks
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
	if s := x.setting(); s != nil {
		return s.At
	}
	return partAt(x.Amp)
}

// formula prints the row with the figures that went into it.
func (x *BandChain) formula(row *limits.Row) string {
	out := row.Formula()
	var with []string
	in := x.inputs()
	f := in.UplinkMid
	if row.FAt.V == "downlink-mid" {
		f = in.DownlinkMid
	}
	for _, t := range []struct {
		k, v float64
		name string
		unit string
	}{
		{row.KF.V, f.V, "f", "MHz"}, {row.KR.V, in.RSSI.V, "RSSI", "dBm"},
		{row.KM.V, in.MSCL.V, "MSCL", "dB"}, {row.KB.V, in.BSCL.V, "BSCL", "dB"},
	} {
		if t.k != 0 {
			with = append(with, fmt.Sprintf("%s = %s %s", t.name, hundredths(t.v), t.unit))
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

// cutOff reports an amplifier that is not connected on one side. gain/profile says
// so once; figures that take a line are passed over.
func (x *BandChain) cutOff() bool {
	return len(x.Feeds) == 0 || len(x.Legs) == 0 && x.coupling() == "antenna"
}

// sayCutOff says of an amplifier without a whole line on both sides that nothing is
// assessed of it, whatever the profile asks.
func (c *Case) sayCutOff(r *Report) {
	said := map[*bom.Device]bool{}
	for _, x := range c.Chain().Bands {
		if x.cutOff() && !said[x.Amp] {
			said[x.Amp] = true
			r.Unknown(partAt(x.Amp), x.Amp.On(), "%s has no whole line to a donor antenna and to where the phones are; what comes in and what it radiates is not assessed", x.Amp.ID).
				Then("connect it")
		}
	}
}

// sayNoPart says of an amplifier that is there already and that nobody knows the
// part of that nothing is assessed of it.
func (c *Case) sayNoPart(r *Report) {
	for _, d := range c.Graph.Devices {
		if d.Part == nil && !d.Row.Part.Set && d.Kind() == "amplifier" {
			r.Unknown(d.At, d.On(), "%s is an amplifier and no part is named for it; its gain and power are not assessed", d.ID).
				Then("read its label, add it to the catalog, and name it as part")
		}
	}
}

// unassessed says once for a figure of a band what it lacks; of an amplifier that is
// cut off there is more to say than one figure.
func (x *BandChain) unassessed(r *Report, what string, lacks []Lack) {
	if !x.cutOff() {
		x.lacksFigures(r, what, lacks)
	}
}

// lacksFigures is unassessed for what no line has a part in.
func (x *BandChain) lacksFigures(r *Report, what string, lacks []Lack) {
	r.Lacking(partAt(x.Amp), x.Amp.On(), lacks, "%s of %s in "+inBands, what, x.Amp.ID).AcrossBands(x.Band.Name)
}

// hundredths prints a figure with two decimals at most.
func hundredths(v float64) string { return plainFigure(math.Round(v*100) / 100) }

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
