package rules

import (
	"fmt"
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var gainSystem = &Rule{
	Name:    "gain/system",
	Title:   "The gain from antenna to antenna keeps the limit where the instrument counts it so",
	Why:     "some instruments limit the whole system, antennas and cables included; a better antenna then uses up what the amplifier may give",
	Basis:   []Basis{byProfile, {Document: "system gain = set gain + antenna gains − least line losses, at the low edge, middle and high edge of the band", Kind: "calculated"}},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, direction := range directions {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkSystemGain(c, r, x, d) })
		}
	},
}

func checkSystemGain(c *Case, r *Report, x *BandChain, d *Direction) {
	a := c.Profile.Assess(x.query("system_gain", d.Name), x.inputs())
	if a.None() {
		return
	}
	k := c.systemGain(x, d)
	s, doubt := k.V, c.systemTolerance(k.V)
	switch lacks := slices.Concat(k.Lacks, c.rowsLack(x, a)); {
	case k.OK && a.Exceeded(s.total()):
		limit := a.Value
		r.Fails(x.settingAt(), x.Amp.On(), "%s with its antennas and cables has %s of %s gain in %s at %s; the limit is %s dB (%s)", x.Amp.ID,
			s.sum(""), d.Name, x.Band.Name, s.mhz, unit.Fixed(limit, 2), x.formula(a.Row)).
			Then("set it back: set = { %s = { back_off_db = %s } }", x.Band.Name, x.backOff(d, limit-float64(s.donor.net()+s.server.net()))).
			InBand(x.Band.Name).Over("gain_db", s.total(), "limit_db", limit).By(c.citation(a.Row))
	case k.OK && a.Exceeded(s.total()+doubt):
		r.AtWorst(x.settingAt(), x.Amp.On(), "%s with its antennas and cables has %s of %s gain in %s at %s; the limit is %s dB (%s)", x.Amp.ID,
			s.sum(" ± "+unit.Fixed(doubt, 2)), d.Name, x.Band.Name, s.mhz, unit.Fixed(a.Value, 2), x.formula(a.Row)).
			Then("measure it at commissioning").InBand(x.Band.Name).Over("gain_db", s.total(), "limit_db", a.Value).With("tolerance_db", doubt).By(c.citation(a.Row))
	case len(lacks) > 0:
		x.unassessed(r, "the "+d.Name+" system gain", lacks)
	}
}

// systemGain is the set gain between the best antennas of both sides.
type systemGain struct {
	mhz           unit.MHz
	set           unit.DB
	donor, server netGained
}

// netGained is an antenna behind the least loss of its line.
type netGained struct {
	node *bom.Node
	gain unit.DB
	line LineSum
}

func (n netGained) net() unit.DB { return n.gain - n.line.Loss.Least }

func (s systemGain) total() float64 { return float64(s.set + s.donor.net() + s.server.net()) }

// sum shows the addends: "101.40 dB (90 dB + 11 dBi − 2.60 dB of donor + …)".
func (s systemGain) sum(spread string) string {
	side := func(n netGained) string {
		return fmt.Sprintf("%s dBi − %s dB of %s", hundredths(float64(n.gain)), unit.Fixed(float64(n.line.Loss.Least), 2), n.node.Device.ID)
	}
	return fmt.Sprintf("%s%s dB (%s dB + %s + %s)", unit.Fixed(s.total(), 2), spread, hundredths(float64(s.set)), side(s.donor), side(s.server))
}

// systemGain is the gain from antenna to antenna with the strongest antennas and the
// least losses, the greatest over the low edge, the middle and the high edge.
func (c *Case) systemGain(x *BandChain, d *Direction) Known[systemGain] {
	if !d.Set.OK {
		return Known[systemGain]{Lacks: d.Set.Lacks}
	}
	var best Known[systemGain]
	for _, f := range points(d.Span) {
		donor, lacks := c.bestNet(x.Feeds, f)
		server, more := c.bestNet(x.Legs, f)
		switch lacks = append(lacks, more...); {
		case len(lacks) > 0:
			return Known[systemGain]{Lacks: dedupe(lacks)}
		case donor == nil || server == nil:
			return unknown[systemGain](x.Amp.At, "a feed and a leg")
		}
		if s := (systemGain{f, d.Set.V, *donor, *server}); !best.OK || s.total() > best.V.total() {
			best = known(s)
		}
	}
	return best
}

// bestNet is the antenna with the greatest gain behind the least loss of its line,
// or nil.
func (c *Case) bestNet(lines []*bom.Line, f unit.MHz) (best *netGained, lacks []Lack) {
	for _, l := range lines {
		n := l.From
		if l.Kind == bom.Leg {
			n = l.To
		}
		sum, rng := c.Sum(l, f), antennaAt(n, f)
		if !sum.Known() || rng == nil {
			lacks = slices.Concat(lacks, sum.Missing, needGain(n, rng))
			continue
		}
		if g := (netGained{n, unit.DB(rng.Gain.V), sum}); best == nil || g.net() > best.net() {
			best = &g
		}
	}
	return best, lacks
}

// systemTolerance is how far the sum may lie above its nominal: the antennas and the
// lines by what the house takes them to be good for, the amplifier's gain not at all,
// which is a certified maximum.
func (c *Case) systemTolerance(s systemGain) float64 {
	antenna := rf.Either(unit.DB(c.House().AntennaToleranceDB.Or(0.5)))
	share := unit.DB(c.House().CableTolerance.Or(4) / 100)
	t, ok := rf.Together(antenna, antenna, rf.Either(share*s.donor.line.Sum(OfCable).Nominal), rf.Either(share*s.server.line.Sum(OfCable).Nominal))
	if !ok {
		return 0
	}
	return float64(t.Above)
}
