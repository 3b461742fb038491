package rules

import (
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainRadioEIRP = &Rule{
	Name:  "gain/radio-eirp",
	Title: "A router's antenna keeps the limit of its radio service, and the antenna gain of its grant",
	Why:   "an outside antenna of high gain on a short feed carries a router past the mobile limit that its certificate stands on",
	Basis: []Basis{byProfile, {Document: "EIRP = total power over the ports − least line loss + antenna gain, at the low edge, middle and high edge of the band", Kind: "calculated"},
		{Document: "antenna gain in the module's grant, net of the least loss of the line", Kind: "code", Proof: "memory"}},
	Caution: "A router transmits under the operator's licence and its module's certificate; the figures come from the profile and the part, not from the papers themselves.",
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		c.saySilentRadios(r)
		for _, x := range c.Chain().Radios {
			// Without a feed its own antenna is what it was certified with, or an
			// amplifier feeds it.
			if len(x.Feeds) > 0 && x.covered() {
				checkRadio(c, r, x)
				checkGrant(c, r, x)
			}
		}
	},
}

// covered reports whether an antenna of the router works in the band at all; where
// none does, band/antenna says so.
func (x *RadioChain) covered() bool {
	for _, l := range x.Feeds {
		if reaches(l, x.Band) {
			return true
		}
	}
	return false
}

func checkRadio(c *Case, r *Report, x *RadioChain) {
	var lacks []Lack
	for _, ant := range x.Antennas {
		if reaches(ant.Line, x.Band) {
			lacks = append(lacks, ant.Lacks...)
		}
	}
	if c.Profile == nil {
		x.unassessed(r, append(lacks, c.lackProfile()))
		return
	}
	answers := c.assessRadio(x)
	if len(answers) == 0 {
		lacks = append(lacks, Lack{"rows of profile " + c.Profile.ID + " for routers", placeOr(c.Plan.Job.Profile.At, c.JobAt())})
	}
	if s := x.strongest(); s != nil {
		for _, a := range answers {
			lacks = append(lacks, x.holdEIRP(c, r, s, a)...)
		}
	}
	if len(lacks) > 0 {
		x.unassessed(r, dedupe(lacks))
	}
}

func (x *RadioChain) unassessed(r *Report, lacks []Lack) {
	r.Lacking(partAt(x.Router), x.Router.On(), lacks, "the EIRP of %s in "+inBands, x.Router.ID).AcrossBands(x.Band.Name)
}

// holdEIRP holds the strongest antenna against the row that binds, and returns what
// keeps the others from being assessed.
func (x *RadioChain) holdEIRP(c *Case, r *Report, s *Antenna, a limits.Assessment) []Lack {
	v, tolerance := s.Worst.EIRP.Most.Value(), c.eirpTolerance(s)
	switch {
	case a.Exceeded(v) && a.Row.Per.Set:
		// The power of the whole channel is known; how much of it stands in the
		// stretch that the row counts is not.
		return []Lack{{"the EIRP of " + x.Router.Part.ID + " in " + a.Row.Unit(), x.Router.Part.At}}
	case a.Exceeded(v):
		x.beyond(c, r.Fails, s, a, "").Then("take an antenna with %s dB less gain, or put that much more loss into the feed", tenthsUp(v-a.Value))
		return nil
	case a.Exceeded(v+tolerance) && !a.Row.Per.Set:
		x.beyond(c, r.AtWorst, s, a, " ± "+unit.Fixed(tolerance, 2)+" dB").With("tolerance_db", tolerance).
			Then("put %s dB more loss into the feed, or take an antenna with less gain", tenthsUp(v+tolerance-a.Value))
	}
	return x.rowsLack(c, a)
}

// beyond shows the sum.
func (x *RadioChain) beyond(c *Case, report reportFunc, s *Antenna, a limits.Assessment, spread string) *Finding {
	w := s.Worst
	return report(partAt(s.Node.Device), s.Node.On(), "%s radiates %s dBm%s in the uplink of %s at %s: %s dBm + %s dBi − %s dB; the limit is %s %s (%s)", s.Node.Device.ID,
		unit.Fixed(w.EIRP.Most.Value(), 2), spread, x.Band.Name, w.MHz, hundredths(w.Out.Value()), hundredths(float64(w.Gain)), unit.Fixed(float64(w.Line.Loss.Least), 2),
		hundredths(a.Value), a.Row.Unit(), a.Row.Formula()).
		InBand(x.Band.Name).Over("eirp_dbm", w.EIRP.Most.Value(), "limit_dbm", a.Value).By(c.citation(a.Row)).Beside(partAt(x.Router), "the router").Beside(lineAt(s.Line), "the line between them")
}

// checkGrant holds each antenna's gain, net of its line's least loss, against the
// greatest that the router's grant names for the band.
func checkGrant(c *Case, r *Report, x *RadioChain) {
	part := x.Router.Part
	grant := part.Router.GrantGain(x.Band.Name)
	if !grant.Set {
		r.Lacking(partAt(x.Router), x.Router.On(), []Lack{{"max_antenna_gain_dbi of " + part.ID + ", as its grant has it", part.At}},
			"the antenna gain of %s in "+inBands, x.Router.ID).Then("copy it from the grant into the part").AcrossBands(x.Band.Name)
		return
	}
	for i := range x.Antennas {
		ant := &x.Antennas[i]
		if len(ant.Lacks) > 0 {
			continue // said with the EIRP
		}
		w := ant.Worst
		gain := float64(netGain(w))
		if rf.Exceeds(gain, grant.V) {
			r.Fails(partAt(ant.Node.Device), ant.Node.On(), "%s has %s dBi net of its feed in %s at %s: %s dBi − %s dB; the grant of %s allows %s dBi", ant.Node.Device.ID,
				unit.Fixed(gain, 2), x.Band.Name, w.MHz, hundredths(float64(w.Gain)), unit.Fixed(float64(w.Line.Loss.Least), 2), part.ID, plainFigure(grant.V)).
				Then("take an antenna with %s dB less gain, or put that much more loss into the feed", tenthsUp(gain-grant.V)).
				InBand(x.Band.Name).Over("gain_dbi", gain, "limit_dbi", grant.V).Beside(grant.At, "the grant")
		}
	}
}
