package rules

import (
	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var reachRules = []*Rule{reachDownlink, reachUplink, reachBenefit, reachNearFar, reachQuality, reachDominance}

var reachBasis = []Basis{
	{Document: "free space by ITU-R P.525; walls by ITU-R P.2040-3 table 3, or COST 231 outer walls; without walls ITU-R P.1238-9, older form", Kind: "standard", Proof: "read"},
	practice("gain that runs, with the greatest losses along the way"),
}

var reachDownlink = &Rule{
	Name:   "reach/downlink",
	Title:  "Each wanted signal reaches its target in each area",
	Why:    "what the customer pays for is the signal at the counter, not the gain on the box",
	Basis:  reachBasis,
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			checkDownlink(r, a)
		}
	},
}

// areaOn is what findings about an area stand on.
func areaOn(a *bom.Area) string { return "area." + a.Name.V }

func checkDownlink(r *Report, a *AreaReach) {
	at := placeOr(a.Area.Target.At, a.Area.At)
	switch {
	case !a.Area.Target.Set:
		r.Unknown(a.Area.At, areaOn(a.Area), "the area %s has no target_rsrp_dbm; whether it is reached is not assessed", a.Area.Name.V).Then("add what is promised there").AcrossBands(a.Signal.Band.V)
	case !a.RSRP.OK:
		r.Lacking(a.Area.At, areaOn(a.Area), a.RSRP.Lacks, "the level of %s in "+inBands+" in the area %s", a.Signal.Operator.V, a.Area.Name.V).AcrossBands(a.Signal.Band.V)
	default:
		v, target, doubt := a.RSRP.V.Value(), a.Area.Target.V, float64(a.Doubt)
		report := r.Fails
		if !rf.Below(v, target) {
			if !rf.Below(v-doubt, target) {
				return
			}
			report = r.AtWorst
		}
		report(at, areaOn(a.Area), "%s in %s reaches the area %s with %s dBm%s, target %s dBm: survey %s dBm%s", a.Signal.Operator.V, a.Signal.Band.V, a.Area.Name.V,
			unit.Fixed(v, 1), spreadWords(doubt), plainFigure(target), plainFigure(a.Signal.RSRP.V), termWords(a.Terms)).
			Then("bring a server antenna closer, take a better feed or donor antenna, or promise less").InBand(a.Signal.Band.V).
			Under("rsrp_dbm", v, "target_dbm", target).Beside(a.Signal.At, "the survey")
	}
}

func spreadWords(doubt float64) string {
	if doubt == 0 {
		return ""
	}
	return " ± " + plainFigure(doubt) + " dB"
}

// termWords prints addends as a sum.
func termWords(terms []ReachTerm) string {
	out := ""
	for _, t := range terms {
		sign, v := " + ", float64(t.DB)
		if v < 0 {
			sign, v = " − ", -v
		}
		out += sign + unit.Fixed(v, 1) + " " + t.What
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
			if !a.RSRP.OK {
				continue // reach/downlink says what is missing
			}
			checkUplink(r, a)
		}
	},
}

func checkUplink(r *Report, a *AreaReach) {
	if !a.Up.OK {
		r.Lacking(a.Area.At, areaOn(a.Area), a.Up.Lacks, "the way back from the area %s to %s in "+inBands, a.Area.Name.V, a.Signal.Operator.V).AcrossBands(a.Signal.Band.V)
		return
	}
	v, need := a.Up.V.Level.Value(), a.Up.V.Needed.Value()
	if !rf.Below(v, need) {
		return
	}
	held := ""
	if a.Up.V.Limited {
		held = ", held down by the rated output"
	}
	r.Fails(a.Area.At, areaOn(a.Area), "a phone in the area %s arrives at %s in %s with %s dBm%s, needed %s dBm: 23 dBm%s", a.Area.Name.V, a.Signal.Operator.V, a.Signal.Band.V,
		unit.Fixed(v, 1), held, unit.Fixed(need, 1), termWords(a.Up.V.Terms)).
		Then("bring a server antenna closer, or take a better donor antenna and feed").InBand(a.Signal.Band.V).Under("level_dbm", v, "needed_dbm", need).Beside(a.Signal.At, "the survey")
}

var reachBenefit = &Rule{
	Name:   "reach/benefit",
	Title:  "An outside antenna brings a router more than the antenna that it replaces",
	Why:    "a long thin feed at 3.5 GHz eats more than the antenna gains: the router was better off with its own",
	Basis:  []Basis{house("replaced_gain_dbi (2 dBi where it says nothing)")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Radios {
			for _, l := range x.Feeds {
				checkBenefit(c, r, x, l)
			}
		}
	},
}

func checkBenefit(c *Case, r *Report, x *RadioChain, l *bom.Line) {
	replaced := c.House().ReplacedGainDBi.Or(2)
	for _, f := range bandPoints(x.Band) {
		sum, rng := c.Sum(l, f), antennaAt(l.From, f)
		if !sum.Known() || rng == nil {
			return // loss/feed and band/antenna say so
		}
		net := rng.Gain.V - float64(sum.Loss.Greatest)
		if rf.Below(net, replaced) {
			r.Fails(lineAt(l), l.On(), "%s brings %s %s dBi net at %s of %s (%s dBi − %s dB); the antenna that it replaces has %s dBi", l.From.Device.ID, x.Router.ID, unit.Fixed(net, 1), f, x.Band.Name,
				plainFigure(rng.Gain.V), unit.Fixed(float64(sum.Loss.Greatest), 1), plainFigure(replaced)).
				Then("shorten the feed, take a cable that loses less, or leave the router with its own antennas").InBand(x.Band.Name).Under("net_gain_dbi", net, "replaced_dbi", replaced)
			return
		}
	}
}

var reachNearFar = &Rule{
	Name:   "reach/near-far",
	Title:  "A strong operator does not take the amplifier's power from a wanted weak one",
	Why:    "one amplifier serves the whole band: it turns down for the near site, and the far operator's customers see nothing",
	Basis:  reachBasis,
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			checkNearFar(c, r, a)
		}
	},
}

func checkNearFar(c *Case, r *Report, a *AreaReach) {
	d := &a.Chain.Down
	if !a.RSRP.OK || !a.Area.Target.Set || !d.Runs.OK || d.Runs.V.By != rf.ByOutput || !rf.Below(a.RSRP.V.Value(), a.Area.Target.V) {
		return
	}
	asSet := a.RSRP.V.Plus(d.Set.V - d.Runs.V.Gain)
	strong := c.strongestOther(a)
	if strong == nil || rf.Below(asSet.Value(), a.Area.Target.V) {
		return
	}
	r.Fails(a.Signal.At, areaOn(a.Area), "%s in %s is strong (%s dBm) and turns %s down by %s dB; %s then reaches the area %s with %s dBm, target %s dBm, and would with %s dBm", strong.Operator.V, a.Signal.Band.V,
		plainFigure(strong.RSRP.V), a.Chain.Amp.ID, unit.Fixed(float64(d.Set.V-d.Runs.V.Gain), 1), a.Signal.Operator.V, a.Area.Name.V,
		unit.Fixed(a.RSRP.V.Value(), 1), plainFigure(a.Area.Target.V), unit.Fixed(asSet.Value(), 1)).
		Then("aim the donor antenna off the site of %s, or serve %s with an amplifier of its own", strong.Operator.V, a.Signal.Operator.V).
		InBand(a.Signal.Band.V).Under("rsrp_dbm", a.RSRP.V.Value(), "target_dbm", a.Area.Target.V).Beside(strong.At, "the strong one")
}

// strongestOther is the strongest signal of another operator in the amplifier's
// band.
func (c *Case) strongestOther(a *AreaReach) *bom.Signal {
	var best *bom.Signal
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		ch, ok := channel(s)
		if !ok || s.Operator.V == a.Signal.Operator.V || ch.Overlap(a.Chain.Own.Downlink).Empty() || s.RSRP.V <= a.Signal.RSRP.V {
			continue
		}
		if best == nil || s.RSRP.V > best.RSRP.V {
			best = s
		}
	}
	return best
}

var reachQuality = &Rule{
	Name:   "reach/quality",
	Title:  "A wanted signal is better than its noise",
	Why:    "amplifying a signal under its interference makes both louder",
	Basis:  []Basis{practice("SINR of 0 dB at the survey")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for i := range c.Plan.Signals {
			s := &c.Plan.Signals[i]
			if !s.SINR.Set || !rf.Below(s.SINR.V, 0) || !c.wants(s) {
				continue
			}
			r.Fails(s.SINR.At, signalOn(i), "%s in %s was surveyed with a SINR of %s dB; 0 dB or more is expected", s.Operator.V, s.Band.V, plainFigure(s.SINR.V)).
				Then("aim at another site, or take an antenna with a narrower beam: more gain does not mend it").InBand(s.Band.V).Under("sinr_db", s.SINR.V, "expected_db", 0)
		}
	},
}

func signalOn(i int) string { return "signal." + plainFigure(float64(i+1)) }

// wants reports whether the signal's operator is one whose licence the plan uses,
// in a planned band.
func (c *Case) wants(s *bom.Signal) bool {
	operator, band := len(c.Plan.Operators) == 0, false
	for _, o := range c.Plan.Operators {
		operator = operator || o.ID == s.Operator.V
	}
	ch, ok := channel(s)
	for _, b := range c.bands {
		band = band || b.Name == s.Band.V || ok && b.Downlink.Covers(ch)
	}
	return operator && band
}

var reachDominance = &Rule{
	Name:   "reach/dominance",
	Title:  "The boosted signal stands clear above what was there before",
	Why:    "a phone hangs on to the outdoor cell where the two are alike, and flips between them",
	Basis:  []Basis{practice("6 dB above the level before")},
	Weight: Note,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			if !a.RSRP.OK || !a.Before.Set {
				continue
			}
			rise := a.RSRP.V.Value() - a.Before.V
			if rf.Below(rise, 6) {
				r.Fails(a.Before.At, areaOn(a.Area), "%s in %s comes to %s dBm in the area %s, before it was %s dBm: %s dB more, 6 dB are expected", a.Signal.Operator.V, a.Signal.Band.V,
					unit.Fixed(a.RSRP.V.Value(), 1), a.Area.Name.V, plainFigure(a.Before.V), unit.Fixed(rise, 1)).
					Then("bring a server antenna closer, or leave this area out").InBand(a.Signal.Band.V).Under("rise_db", rise, "expected_db", 6)
			}
		}
	},
}

// Reach is what arrives in each area, computed once.
func (c *Case) Reach() []*AreaReach {
	ch := c.Chain()
	if ch.reach == nil {
		ch.reach = c.reach()
		if ch.reach == nil {
			ch.reach = []*AreaReach{}
		}
	}
	return ch.reach
}
