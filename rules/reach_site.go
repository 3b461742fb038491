package rules

import (
	"slices"
	"strconv"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var reachBenefit = &Rule{
	Name:   "reach/benefit",
	Title:  "An outside antenna brings a router more than the antenna that it replaces",
	Why:    "a long thin feed at 3.5 GHz eats more than the antenna gains: the router was better off with its own",
	Basis:  []Basis{house("replaced_gain_dbi (2 dBi where it says nothing)"), practice("antenna gain less the greatest loss of the feed, at the low edge, middle and high edge of uplink and downlink")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Radios {
			for _, l := range x.Feeds {
				if reaches(l, x.Band) {
					checkBenefit(c, r, x, l)
				}
			}
		}
	},
}

func checkBenefit(c *Case, r *Report, x *RadioChain, l *bom.Line) {
	worst, at := netGained{}, unit.MHz(0)
	for _, f := range bandPoints(x.Band) {
		sum, rng := c.Sum(l, f), antennaAt(l.From, f)
		if lacks := slices.Concat(sum.Missing, needGain(l.From, rng)); len(lacks) > 0 {
			r.Lacking(lineAt(l), l.On(), lacks, "what %s brings %s in "+inBands, l.From.Device.ID, x.Router.ID).AcrossBands(x.Band.Name)
			return
		}
		if g := (netGained{l.From, unit.DB(rng.Gain.V), sum}); at == 0 || g.atWorst() < worst.atWorst() {
			worst, at = g, f
		}
	}
	replaced, net := c.House().ReplacedGainDBi.Or(2), float64(worst.atWorst())
	if rf.Below(net, replaced) {
		r.Fails(lineAt(l), l.On(), "%s brings %s %s dBi net at %s of %s: %s dBi − %s dB; the antenna that it replaces has %s dBi", l.From.Device.ID, x.Router.ID, unit.Fixed(net, 2), at, x.Band.Name,
			hundredths(float64(worst.gain)), unit.Fixed(float64(worst.line.Loss.Greatest), 2), plainFigure(replaced)).
			Then("shorten the feed, take a cable that loses less, or leave the router with its own antennas").InBand(x.Band.Name).Under("net_gain_dbi", net, "replaced_dbi", replaced)
	}
}

var reachNearFar = &Rule{
	Name:   "reach/near-far",
	Title:  "A strong operator does not take the amplifier's power from a wanted weak one",
	Why:    "one amplifier serves the whole band: it turns down for the near site, and the far operator's customers see nothing",
	Basis:  append([]Basis{practice("the gain that would run without the strong operator's signals")}, reachBasis...),
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			if strong := c.strongestOther(a); strong != nil && !a.Chain.cutOff() {
				checkNearFar(c, r, a, strong)
			}
		}
	},
}

func checkNearFar(c *Case, r *Report, a *AreaReach, strong *bom.Signal) {
	lacks := a.RSRP.Lacks
	if !a.Area.Target.Set {
		lacks = append(slices.Clone(lacks), Lack{"target_rsrp_dbm of the area " + a.Area.Name.V, a.Area.At})
	}
	if len(lacks) > 0 {
		r.Lacking(a.Area.At, areaOn(a.Area), lacks, "whether %s leaves enough for %s in "+inBands+" in the area %s", strong.Operator.V, a.Signal.Operator.V, a.Area.Name.V).AcrossBands(a.Signal.Band.V)
		return
	}
	with, without := a.Chain.Down.Runs.V, c.without(strong.Operator.V).downlinkGain(a.Chain)
	v, target := a.RSRP.V.Value(), a.Area.Target.V
	alone := v + float64(without.V.Gain-with.Gain)
	if !without.OK || !without.V.On || !rf.Below(v, target) || rf.Below(alone, target) {
		return
	}
	r.Fails(a.Signal.At, areaOn(a.Area), "%s in %s is strong (%s dBm) and turns %s down to %s dB; %s then reaches the area %s with %s dBm, target %s dBm; without it %s dB would run and bring %s dBm", strong.Operator.V, a.Signal.Band.V,
		plainFigure(strong.RSRP.V), a.Chain.Amp.ID, hundredths(float64(with.Gain)), a.Signal.Operator.V, a.Area.Name.V,
		unit.Fixed(v, 2), plainFigure(target), hundredths(float64(without.V.Gain)), unit.Fixed(alone, 2)).
		Then("aim the donor antenna off the site of %s, or serve %s with an amplifier of its own", strong.Operator.V, a.Signal.Operator.V).
		InBand(a.Signal.Band.V).Under("rsrp_dbm", v, "target_dbm", target).Beside(strong.At, "the strong one")
}

// strongestOther is the strongest signal of another operator in the amplifier's
// band, where it is stronger than the area's own, or nil.
func (c *Case) strongestOther(a *AreaReach) *bom.Signal {
	var best *bom.Signal
	top := a.surveyed()
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		ch, ok := channel(s)
		level, known := surveyed(s)
		if ok && known && s.Operator.V != a.Signal.Operator.V && !ch.Overlap(a.Chain.Own.Downlink).Empty() && top.Below(level) {
			best, top = s, level
		}
	}
	return best
}

// without is the same case with an operator's signals out of the air.
func (c *Case) without(operator string) *Case {
	plan, other := *c.Plan, *c
	plan.Signals = slices.DeleteFunc(slices.Clone(plan.Signals), func(s bom.Signal) bool { return s.Operator.V == operator })
	other.Plan = &plan
	return &other
}

// downlinkGain is the gain at which an amplifier would run with what this case has
// in the air.
func (c *Case) downlinkGain(x *BandChain) Known[rf.Running] {
	alone := *x
	alone.RSSI, alone.Loud = c.received(&alone)
	alone.BSCL, alone.BSCLBy = c.bscl(&alone)
	alone.Down.Input = alone.RSSI
	return c.gainRuns(&alone, &alone.Down)
}

var reachQuality = &Rule{
	Name:   "reach/quality",
	Title:  "A wanted signal is better than its noise",
	Why:    "amplifying a signal under its interference makes both louder",
	Basis:  []Basis{practice("SINR of 0 dB at the survey")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for i := range c.Plan.Signals {
			if s := &c.Plan.Signals[i]; c.wants(s) {
				checkQuality(c, r, s, "signal."+strconv.Itoa(i+1))
			}
		}
	},
}

func checkQuality(c *Case, r *Report, s *bom.Signal, on string) {
	switch {
	case !s.SINR.Set:
		r.Lacking(c.JobAt(), "job", []Lack{{"sinr_db of the surveyed signals", s.At}}, "the quality of what was surveyed in "+inBands).AcrossBands(s.Band.V)
	case rf.Below(s.SINR.V, 0):
		r.Fails(s.SINR.At, on, "%s in %s was surveyed with a SINR of %s dB; 0 dB or more is expected", s.Operator.V, s.Band.V, plainFigure(s.SINR.V)).
			Then("aim at another site, or take an antenna with a narrower beam: more gain does not mend it").InBand(s.Band.V).Under("sinr_db", s.SINR.V, "expected_db", 0)
	}
}

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

// leastRise is how far a boosted level should stand above the one before, dB.
const leastRise = 6.0

var reachDominance = &Rule{
	Name:   "reach/dominance",
	Title:  "The boosted signal stands clear above what was there before",
	Why:    "a phone hangs on to the outdoor cell where the two are alike, and flips between them",
	Basis:  []Basis{practice("6 dB above the level before")},
	Weight: Note,
	Check: func(c *Case, r *Report) {
		for _, a := range c.Reach() {
			if !a.Chain.cutOff() {
				checkDominance(r, a)
			}
		}
	},
}

func checkDominance(r *Report, a *AreaReach) {
	lacks := slices.Clone(a.RSRP.Lacks)
	if !a.Before.Set {
		lacks = append(lacks, Lack{"before, the level without the install", a.Area.At})
	}
	if len(lacks) > 0 {
		r.Lacking(a.Area.At, areaOn(a.Area), lacks, "how far the signals in "+inBands+" rise in the area %s", a.Area.Name.V).AcrossBands(a.Signal.Band.V)
		return
	}
	v := a.RSRP.V.Value()
	if rise := v - a.Before.V; rf.Below(rise, leastRise) {
		r.Fails(a.Before.At, areaOn(a.Area), "%s in %s comes to %s dBm in the area %s, before it was %s dBm: %s dB more, 6 dB are expected", a.Signal.Operator.V, a.Signal.Band.V,
			unit.Fixed(v, 2), a.Area.Name.V, plainFigure(a.Before.V), unit.Fixed(rise, 2)).
			Then("bring a server antenna closer, or leave this area out").InBand(a.Signal.Band.V).Under("rise_db", rise, "expected_db", leastRise)
	}
}
