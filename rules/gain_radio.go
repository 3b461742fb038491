package rules

import (
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainRadioEIRP = &Rule{
	Name:    "gain/radio-eirp",
	Title:   "A router's antenna keeps the limit of its radio service, and the antenna gain of its grant",
	Why:     "an outside antenna of high gain on a short feed carries a router past the mobile limit that its certificate stands on",
	Basis:   []Basis{byProfile, {Document: "antenna gain in the module's grant, net of the least loss of the line", Kind: "code", Proof: "memory"}},
	Caution: "A router transmits under the operator's licence and its module's certificate; the figures come from the profile and the part, not from the papers themselves.",
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Radios {
			if len(x.Feeds) == 0 {
				continue // its own antenna is what it was certified with, or an amplifier feeds it
			}
			if x.covered() {
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
	if c.Profile == nil {
		r.Unknown(partAt(x.Router), x.Router.On(), "no limit profile is named or known; the EIRP of %s is not assessed", x.Router.ID).Then("name one: profile = …")
		return
	}
	a := c.Profile.Assess(x.query(), limits.For(x.Band.Name))
	s := x.strongest()
	if s == nil {
		var lacks []Lack
		for _, ant := range x.Antennas {
			lacks = append(lacks, ant.Lacks...)
		}
		r.Lacking(partAt(x.Router), x.Router.On(), lacks, "the EIRP of %s in "+inBands, x.Router.ID).AcrossBands(x.Band.Name)
		return
	}
	w, tolerance := s.Worst, c.eirpTolerance(s)
	v := w.EIRP.Most.Value()
	sum := unit.Fixed(w.Out.Value(), 1) + " dBm + " + unit.Fixed(float64(w.Gain), 1) + " dBi − " + unit.Fixed(float64(w.Line.Loss.Least), 1) + " dB = " + unit.Fixed(v, 1) + " dBm"
	switch {
	case a.Exceeded(v):
		r.Fails(partAt(s.Node.Device), s.Node.On(), "%s radiates %s in the uplink of %s at %s; the limit is %s dBm", s.Node.Device.ID, sum, x.Band.Name, w.MHz, unit.Fixed(a.Value, 1)).
			Then("take an antenna with %s dB less gain, or put that much more loss into the feed", unit.Fixed(v-a.Value+0.05, 1)).
			InBand(x.Band.Name).Over("eirp_dbm", v, "limit_dbm", a.Value).By(c.citation(a.Row)).Beside(partAt(x.Router), "the router")
	case !a.Whole():
		lacks := []Lack{}
		for _, left := range a.Left {
			lacks = append(lacks, Lack{"a row of profile " + c.Profile.ID + " for " + left.String(), c.Plan.Job.Profile.At})
		}
		for _, o := range a.Open {
			for _, m := range o.Missing {
				lacks = append(lacks, Lack{m, partAt(x.Router)})
			}
		}
		if a.None() {
			lacks = append(lacks, Lack{"rows of profile " + c.Profile.ID + " for routers", c.Plan.Job.Profile.At})
		}
		r.Lacking(partAt(x.Router), x.Router.On(), lacks, "the EIRP of %s in "+inBands, x.Router.ID).
			Then("name a profile that covers the band").AcrossBands(x.Band.Name)
	case a.Exceeded(v + tolerance):
		r.AtWorst(partAt(s.Node.Device), s.Node.On(), "%s radiates %s ± %s dB in the uplink of %s at %s; the limit is %s dBm", s.Node.Device.ID, sum, unit.Fixed(tolerance, 1), x.Band.Name, w.MHz, unit.Fixed(a.Value, 1)).
			Then("put %s dB more loss into the feed, or take an antenna with less gain", unit.Fixed(v+tolerance-a.Value+0.05, 1)).
			InBand(x.Band.Name).Over("eirp_dbm", v, "limit_dbm", a.Value).With("tolerance_db", tolerance).By(c.citation(a.Row)).Beside(partAt(x.Router), "the router")
	}
}

// checkGrant holds the antenna gain, net of the line's least loss, against the
// greatest that the router's grant names for the band.
func checkGrant(c *Case, r *Report, x *RadioChain) {
	grant := x.Router.Part.Router.GrantGain(x.Band.Name)
	if !grant.Set {
		r.Unknown(partAt(x.Router), x.Router.On(), "part %s states no antenna gain of its grant in "+inBands+"; that is not assessed", x.Router.Part.ID).
			Then("copy it from the grant into max_antenna_gain_dbi").AcrossBands(x.Band.Name).Beside(x.Router.Part.At, "the part")
		return
	}
	for i := range x.Antennas {
		ant := &x.Antennas[i]
		if len(ant.Lacks) > 0 {
			continue
		}
		gain := float64(netGain(ant.Worst))
		if rf.Exceeds(gain, grant.V) {
			r.Fails(partAt(ant.Node.Device), ant.Node.On(), "%s has %s dBi net of its feed in %s (%s dBi − %s dB); the grant of %s allows %s dBi", ant.Node.Device.ID,
				unit.Fixed(gain, 1), x.Band.Name, unit.Fixed(float64(ant.Worst.Gain), 1), unit.Fixed(float64(ant.Worst.Line.Loss.Least), 1), x.Router.Part.ID, plainFigure(grant.V)).
				Then("take an antenna with %s dB less gain, or put that much more loss into the feed", unit.Fixed(gain-grant.V+0.05, 1)).
				InBand(x.Band.Name).Over("gain_dbi", gain, "limit_dbi", grant.V).Beside(grant.At, "the grant")
		}
	}
}
