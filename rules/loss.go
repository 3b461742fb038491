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
				checkLineLoss(c, r, l, b, limit, "feed_loss_db")
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
				checkLineLoss(c, r, l, b, limit, "leg_loss_db", OfCable, OfPair, OfSteps)
			}
		}
	},
}

// checkLineLoss holds the greatest loss of a line, over the edges of a band,
// against a figure of the house: of all its addends, or of some kinds.
func checkLineLoss(c *Case, r *Report, l *bom.Line, b catalog.Band, limit float64, key string, kinds ...TermKind) {
	if !carries(l, b) {
		return // band/antenna and band/amplifier say what is left out
	}
	worst, at := c.worstLoss(l, b, kinds)
	if !worst.Known() {
		r.Unknown(lineAt(l), l.On(), "%s %s in "+inBands+" is not assessed: it lacks %s", l.Kind, l.Name(), lackWords(worst.Missing)).
			Then("add what is missing").AcrossBands(b.Name).Beside(worst.Missing[0].At, "what it lacks")
		return
	}
	v := float64(worst.Loss.Greatest)
	if !rf.Exceeds(v, limit) {
		return
	}
	r.Fails(lineAt(l), l.On(), "%s %s loses %s dB in %s at %s; the house allows %s dB (%s): %s", l.Kind, l.Name(),
		unit.Fixed(v, 2), b.Name, at, plainFigure(limit), key, addends(worst, greatest)).InBand(b.Name).
		Over("loss_db", v, "limit_db", limit).With("least_db", float64(worst.Loss.Least)).Then("%s", c.lowerLoss(l, at, v-limit))
}

// carries reports whether a band runs over a line: the antenna at one end works in
// some part of it, and so does the amplifier or router at the other, as far as
// either says.
func carries(l *bom.Line, b catalog.Band) bool {
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device == nil || n.Device.Part == nil {
			continue
		}
		p := n.Device.Part
		if p.Amplifier != nil && !among(ampBands(p.Amplifier), b) || p.Router != nil && p.Router.Bands.Set && !among(p.Router.Bands.V, b) {
			return false
		}
	}
	return reaches(l, b)
}

// reaches reports whether the antenna at an end of the line works in some part of
// the band.
func reaches(l *bom.Line, b catalog.Band) bool {
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device == nil || n.Device.Part == nil || n.Device.Kind() != "antenna" || n.Device.Part.Antenna == nil {
			continue
		}
		if worksIn(n.Device.Part.Antenna, n.Port.Name, b) {
			return true
		}
	}
	return false
}

// worksIn reports whether an antenna works at a port in some part of a band.
func worksIn(a *catalog.Antenna, port string, b catalog.Band) bool {
	for i := range a.Ranges {
		rng := &a.Ranges[i]
		if rng.Serves(port) && (!rng.MHz.V.Overlap(b.Uplink).Empty() || !rng.MHz.V.Overlap(b.Downlink).Empty()) {
			return true
		}
	}
	return false
}

// among reports whether one of the named bands shares spectrum with a band.
func among(names catalog.Words, b catalog.Band) bool {
	for _, n := range names {
		if n.V == b.Name {
			return true
		}
	}
	for _, n := range names {
		own, ok := catalog.LookBand(n.V)
		if ok && (!own.Uplink.Overlap(b.Uplink).Empty() || !own.Downlink.Overlap(b.Downlink).Empty()) {
			return true
		}
	}
	return false
}

// worstLoss is the sum of a line at the edge or middle of a band where it loses
// most, or the first that is not known.
func (c *Case) worstLoss(l *bom.Line, b catalog.Band, kinds []TermKind) (LineSum, unit.MHz) {
	var worst LineSum
	var at unit.MHz
	for _, f := range bandPoints(b) {
		s := c.Sum(l, f)
		if !s.Known() {
			return s, f
		}
		if len(kinds) > 0 {
			s = s.Only(kinds...)
		}
		if at == 0 || worst.Loss.Greatest < s.Loss.Greatest {
			worst, at = s, f
		}
	}
	return worst, at
}

// bandPoints are the low edge, the middle and the high edge of a band's uplink and
// downlink.
func bandPoints(b catalog.Band) []unit.MHz {
	out := make([]unit.MHz, 0, 6)
	for _, s := range [2]unit.Span{b.Uplink, b.Downlink} {
		if !s.Empty() {
			out = append(out, s.Lo, s.Mid(), s.Hi)
		}
	}
	return out
}

// points are the low edge, the middle and the high edge of a stretch of spectrum.
func points(s unit.Span) []unit.MHz {
	if s.Empty() {
		return nil
	}
	return []unit.MHz{s.Lo, s.Mid(), s.Hi}
}
