package rules

import (
	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var reachRules = []*Rule{reachDownlink, reachUplink, reachBenefit, reachNearFar, reachQuality, reachDominance}

var reachBasis = []Basis{
	{Document: "free space by ITU-R P.525", Edition: "P.525-5, 11/2024", Kind: "standard", Proof: "read"},
	{Document: "walls by ITU-R P.2040-3 table 3, or outer walls by COST 231; without walls ITU-R P.1238-9, older form", Kind: "standard", Proof: "copy"},
	practice("gain that runs, with the greatest losses along the way; of the server antennas that serve an area the one that brings least, at the distance to the nearest"),
}

var reachDownlink = &Rule{
	Name:   "reach/downlink",
	Title:  "Each wanted signal reaches its target in each area",
	Why:    "what the customer pays for is the signal at the counter, not the gain on the box",
	Basis:  reachBasis,
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for i := range c.Plan.Areas {
			c.sayUnsurveyed(r, &c.Plan.Areas[i])
		}
		for _, a := range c.Reach() {
			if !a.Chain.cutOff() {
				checkDownlink(r, a)
			}
		}
	},
}

// areaOn is what findings about an area stand on.
func areaOn(a *bom.Area) string { return "area." + a.Name.V }

// sayUnsurveyed says of an area that an amplifier serves which wanted operators were
// not surveyed in any of the planned bands; of an area with none at all, that.
func (c *Case) sayUnsurveyed(r *Report, a *bom.Area) {
	if !c.served(a) {
		return
	}
	heard := map[string]bool{}
	for _, x := range c.Reach() {
		if x.Area == a {
			heard[x.Signal.Operator.V] = true
		}
	}
	if len(heard) == 0 {
		r.Lacking(a.At, areaOn(a), []Lack{{noSurvey, c.JobAt()}}, "the level in the area %s", a.Name.V)
		return
	}
	for _, o := range c.wanted(a) {
		if !heard[o] {
			r.Lacking(a.At, areaOn(a), []Lack{{noSurvey + " of " + o, c.JobAt()}}, "the level of %s in the area %s", o, a.Name.V)
		}
	}
}

// served reports whether an amplifier that is connected on both sides serves the
// area; where none does, what is open is said elsewhere.
func (c *Case) served(a *bom.Area) bool {
	for _, x := range c.Chain().Bands {
		if !x.cutOff() && x.serves(a) {
			return true
		}
	}
	return false
}

func checkDownlink(r *Report, a *AreaReach) {
	if !a.RSRP.OK {
		r.Lacking(a.Area.At, areaOn(a.Area), a.RSRP.Lacks, "the level of %s in "+inBands+" in the area %s", a.Signal.Operator.V, a.Area.Name.V).AcrossBands(a.Signal.Band.V)
		return
	}
	if !a.Area.Target.Set {
		r.Lacking(a.Area.At, areaOn(a.Area), []Lack{{"target_rsrp_dbm of the area " + a.Area.Name.V, a.Area.At}}, "whether the area %s is reached", a.Area.Name.V).
			Then("add what is promised there").AcrossBands(a.Signal.Band.V)
		return
	}
	v, target, doubt := a.RSRP.V.Value(), a.Area.Target.V, float64(a.Doubt)
	report, spread := r.Fails, ""
	switch {
	case rf.Below(v, target):
	case rf.Below(v-doubt, target):
		report = r.AtWorst
	default:
		return
	}
	if doubt > 0 {
		spread = " (" + unit.Fixed(v-doubt, 2) + " dBm at worst)"
	}
	f := report(a.Area.Target.At, areaOn(a.Area), "%s in %s reaches the area %s with %s dBm%s, target %s dBm: survey %s dBm%s", a.Signal.Operator.V, a.Signal.Band.V, a.Area.Name.V,
		unit.Fixed(v, 2), spread, plainFigure(target), unit.Fixed(a.surveyed().Value(), 2), termWords(a.Terms)).
		Then("bring a server antenna closer, take a better feed or donor antenna, or promise less").InBand(a.Signal.Band.V).
		Under("rsrp_dbm", v, "target_dbm", target).Beside(a.Signal.At, "the survey")
	if doubt > 0 {
		f.With("tolerance_db", doubt)
	}
}

// surveyed is the level that the sum begins with.
func (a *AreaReach) surveyed() unit.DBm {
	level, _ := surveyed(a.Signal)
	return level
}

// termWords prints addends as a sum.
func termWords(terms []ReachTerm) string {
	out := ""
	for _, t := range terms {
		sign, v := " + ", float64(t.DB)
		if v < 0 {
			sign, v = " − ", -v
		}
		out += sign + unit.Fixed(v, 2) + " " + t.Words()
	}
	return out
}

var reachUplink = &Rule{
	Name:   "reach/uplink",
	Title:  "A phone in each area reaches the base station back",
	Why:    "five bars and no call: the phone hears the network and is not heard",
	Basis:  append([]Basis{practice("phone of 23 dBm, −3 dBi, 3 dB of body, 8 dB of fade margin; base station −118 dBm in one resource block; reference signal 18 dBm ± 3 dB")}, reachBasis...),
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			if !a.Chain.cutOff() && !a.Chain.Up.Span.Empty() {
				checkUplink(r, a)
			}
		}
	},
}

func checkUplink(r *Report, a *AreaReach) {
	if !a.Up.OK {
		r.Lacking(a.Area.At, areaOn(a.Area), a.Up.Lacks, "the way back from the area %s to %s in "+inBands, a.Area.Name.V, a.Signal.Operator.V).AcrossBands(a.Signal.Band.V)
		return
	}
	v, need, doubt := a.Up.V.Level.Value(), a.Up.V.Needed.Value(), float64(a.Up.V.Doubt)
	report := r.Fails
	switch {
	case rf.Below(v, need):
	case rf.Below(v-doubt, need):
		report = r.AtWorst
	default:
		return
	}
	report(a.Area.At, areaOn(a.Area), "a phone in the area %s arrives at %s in %s with %s dBm (%s dBm at worst), needed %s dBm: 23 dBm%s", a.Area.Name.V, a.Signal.Operator.V, a.Signal.Band.V,
		unit.Fixed(v, 2), unit.Fixed(v-doubt, 2), plainFigure(need), termWords(a.Up.V.Terms)).
		Then("bring a server antenna closer, or take a better donor antenna and feed").InBand(a.Signal.Band.V).
		Under("level_dbm", v, "needed_dbm", need).With("tolerance_db", doubt).Beside(a.Signal.At, "the survey")
}
