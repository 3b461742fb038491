package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var lossRules = []*Rule{lossFeed, lossCable, lossLeg}

var lossFeed = &Rule{
	Name:  "loss/feed",
	Title: "A feed loses no more than the house allows, on every planned band",
	Why:   "what the feed loses is lost before the amplifier: it goes straight into the noise figure and out of the uplink",
	Basis: []Basis{house("feed_loss_db (6 dB where it says nothing)"),
		practice("cable attenuation k1·√f + k2·f through the part's own points, 0.2 % per kelvin")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		limit := c.House().FeedLossDB.Or(6)
		for _, l := range c.Lines().Of(bom.Feed) {
			for _, b := range c.Bands() {
				checkLineLoss(c, r, l, b, limit, "feed_loss_db", func(s LineSum) rf.Loss { return s.Loss })
			}
		}
	},
}

var lossLeg = &Rule{
	Name:   "loss/leg",
	Title:  "The cables and connectors of a leg lose no more than the house allows",
	Why:    "every decibel between amplifier and server antenna is coverage that somebody paid for",
	Basis:  []Basis{house("leg_loss_db (8 dB where it says nothing); what splitters and taps divide is left out")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		limit := c.House().LegLossDB.Or(8)
		for _, l := range c.Lines().Of(bom.Leg) {
			for _, b := range c.Bands() {
				checkLineLoss(c, r, l, b, limit, "leg_loss_db", func(s LineSum) rf.Loss { return s.Sum(OfCable, OfPair, OfSteps) })
			}
		}
	},
}

// checkLineLoss holds the greatest loss of a line, over the edges of a band,
// against a figure of the house.
func checkLineLoss(c *Case, r *Report, l *bom.Line, b catalog.Band, limit float64, key string, of func(LineSum) rf.Loss) {
	if !reaches(l, b) {
		return // no antenna of the line works in the band: band/antenna says so
	}
	worst, at, lacks := c.worstLoss(l, b, of)
	if len(lacks) > 0 {
		r.Unknown(lineAt(l), l.On(), "%s %s in "+inBands+" is not assessed: it lacks %s", l.Kind, l.Name(), lackWords(lacks)).
			Then("add what is missing").AcrossBands(b.Name).Beside(lacks[0].At, "what it lacks")
		return
	}
	v := float64(of(worst).Greatest)
	if !rf.Exceeds(v, limit) {
		return
	}
	f := r.Fails(lineAt(l), l.On(), "%s %s loses %s dB in %s at %s; the house allows %s dB (%s)", l.Kind, l.Name(),
		unit.Fixed(v, 2), b.Name, at, plainFigure(limit), key).InBand(b.Name).
		Over("loss_db", v, "limit_db", limit).With("least_db", float64(of(worst).Least))
	f.Says += ": " + addends(worst, greatest)
	f.Then("%s", c.lowerLoss(l, at, v-limit))
}

// reaches reports whether the antenna at an end of the line works in some part of
// the band.
func reaches(l *bom.Line, b catalog.Band) bool {
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device == nil || n.Device.Part == nil || n.Device.Part.Antenna == nil {
			continue
		}
		for _, rng := range n.Device.Part.Antenna.RangesOf(n.Port.Name) {
			if !rng.MHz.V.Overlap(b.Uplink).Empty() || !rng.MHz.V.Overlap(b.Downlink).Empty() {
				return true
			}
		}
	}
	return false
}

// worstLoss is the sum of a line at the edge or middle of a band where it loses
// most.
func (c *Case) worstLoss(l *bom.Line, b catalog.Band, of func(LineSum) rf.Loss) (LineSum, unit.MHz, []Lack) {
	var worst LineSum
	var at unit.MHz
	for _, f := range bandPoints(b) {
		s := c.Sum(l, f)
		if !s.Known() {
			return s, f, s.Missing
		}
		if at == 0 || of(worst).Greatest < of(s).Greatest {
			worst, at = s, f
		}
	}
	return worst, at, nil
}

// bandPoints are the low edge, the middle and the high edge of a band's uplink and
// downlink.
func bandPoints(b catalog.Band) []unit.MHz {
	var out []unit.MHz
	for _, s := range []unit.Span{b.Uplink, b.Downlink} {
		if !s.Empty() {
			out = append(out, s.Lo, s.Mid(), s.Hi)
		}
	}
	return out
}
