package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// downward is the RSRP in the area at a 0 dBi antenna, as it was surveyed outdoors
// and will be read when the job is closed: the surveyed level, through the donor
// antenna and the greatest loss of the feed, the gain that runs, the greatest loss
// of the leg, the server antenna and the path indoors.
func (c *Case) downward(r *AreaReach) Known[unit.DBm] {
	d := &r.Chain.Down
	in := c.entering(r)
	path := c.indoors(r.Area, r.MHz)
	leg := c.weakestLeg(r, r.MHz)
	lacks := slices.Concat(d.Runs.Lacks, in.Lacks, path.lacks, leg.Lacks)
	if d.off() {
		lacks = append(lacks, Lack{"a gain above 0 dB in " + r.Chain.Band.Name, r.Chain.Amp.At})
	}
	if !d.Runs.OK || !in.OK || !leg.OK || len(lacks) > 0 {
		return Known[unit.DBm]{Lacks: dedupe(lacks)}
	}
	r.Feed, r.Doubt = in.V.feed, path.doubt
	r.Terms = []ReachTerm{
		{What: "donor antenna toward the site", DB: in.V.signal.Gain}, {What: "feed", DB: -in.V.loss},
		{What: "gain that runs (" + string(d.Runs.V.By) + ")", DB: d.Runs.V.Gain},
		{What: "leg to " + leg.V.node.Device.ID, DB: -leg.V.line.Loss.Greatest}, {What: "server antenna", DB: leg.V.gain},
		{path: &path, DB: -path.loss},
	}
	level := in.V.signal.RSRP
	for _, t := range r.Terms {
		level = level.Plus(t.DB)
	}
	return known(level)
}

// entry is a surveyed signal as it enters through one feed.
type entry struct {
	feed   *bom.Line
	signal rf.Signal
	loss   unit.DB // the greatest of the feed
}

// entering is the signal through the feed that brings most of it.
func (c *Case) entering(r *AreaReach) Known[entry] {
	var best Known[entry]
	for _, feed := range r.Chain.Feeds {
		k := c.arriving(r.Signal, unit.Span{Lo: r.MHz, Hi: r.MHz}, feed)
		if !k.OK {
			return Known[entry]{Lacks: k.Lacks}
		}
		e := entry{feed, k.V, c.Sum(feed, r.MHz).Loss.Greatest}
		if !best.OK || e.signal.Gain-e.loss > best.V.signal.Gain-best.V.loss {
			best = known(e)
		}
	}
	if !best.OK {
		return unknown[entry](r.Chain.Amp.At, "a feed")
	}
	return best
}

// weakestLeg is the antenna, of those that serve the area, that brings least behind
// the greatest loss of its leg.
func (c *Case) weakestLeg(r *AreaReach, f unit.MHz) Known[netGained] {
	var worst Known[netGained]
	for _, l := range r.Chain.Legs {
		if !servedBy(r.Area, l.To.Device) {
			continue
		}
		sum, rng := c.Sum(l, f), antennaAt(l.To, f)
		if lacks := slices.Concat(sum.Missing, needGain(l.To, rng)); len(lacks) > 0 {
			return Known[netGained]{Lacks: lacks}
		}
		g := netGained{l.To, unit.DB(rng.Gain.V), sum}
		if !worst.OK || g.atWorst() < worst.V.atWorst() {
			worst = known(g)
		}
	}
	return worst
}

// atWorst is the gain behind the greatest loss.
func (n netGained) atWorst() unit.DB { return n.gain - n.line.Loss.Greatest }

// upward is the phone's signal at the base station over the same way, at the middle
// of the uplink. The path outdoors follows from the reference signal's power and
// what the survey received. What a phone brings may drive the amplifier to its rated
// output, which then holds the level down.
func (c *Case) upward(r *AreaReach) Known[UplinkReach] {
	x, d, f := r.Chain, &r.Chain.Up, r.Chain.Band.Uplink.Mid()
	if d.Span.Empty() {
		return Known[UplinkReach]{} // a band without an uplink lacks nothing
	}
	path := c.indoors(r.Area, f)
	leg := c.weakestLeg(r, f)
	out := c.leaving(r, f)
	lacks := slices.Concat(d.Runs.Lacks, path.lacks, leg.Lacks, out.Lacks)
	if !d.rated() {
		lacks = append(lacks, x.noOutput())
	}
	if d.off() {
		lacks = append(lacks, Lack{"a gain above 0 dB in " + x.Band.Name, x.Amp.At})
	}
	if !d.Runs.OK || !leg.OK || !out.OK || len(lacks) > 0 {
		return Known[UplinkReach]{Lacks: dedupe(lacks)}
	}
	h := c.House()
	up := out.V
	up.Phone, up.Hand, up.Body = unit.DBmOf(phoneDBm), unit.DB(h.PhoneGainDBi.Or(phoneGainDBi)), unit.DB(h.BodyLossDB.Or(bodyLossDB))
	up.Path, up.Server, up.Leg = path.loss, leg.V.gain, leg.V.line.Loss.Greatest
	up.Gain, up.MaxOut = d.Runs.V.Gain, unit.DBmOf(d.Spec.MaxOut.V)
	level, limited, ok := up.AtBase()
	doubt, sure := rf.Together(rf.Either(path.doubt), rf.Either(referenceOff))
	if !ok || !sure {
		return unknown[UplinkReach](x.Amp.At, "an uplink that adds up")
	}
	needed := unit.DBmOf(h.SensitivityDBm.Or(sensitivityRB)).Plus(unit.DB(h.FadeMarginDB.Or(fadeMarginDB)))
	return known(UplinkReach{level, limited, needed, doubt.Above, uplinkTerms(up, limited, &path, string(d.Runs.V.By))})
}

// leaving is the outdoor half of the way back: the donor antenna that brings most of
// the signal, its feed, and the path to the base station.
func (c *Case) leaving(r *AreaReach, f unit.MHz) Known[rf.Uplink] {
	in := c.entering(r)
	at, ok := surveyed(r.Signal)
	if !in.OK || !ok {
		return Known[rf.Uplink]{Lacks: in.Lacks}
	}
	feed := in.V.feed
	sum, rng := c.Sum(feed, f), antennaAt(feed.From, f)
	if lacks := slices.Concat(sum.Missing, needGain(feed.From, rng)); len(lacks) > 0 {
		return Known[rf.Uplink]{Lacks: lacks}
	}
	path, ok := rf.PathLossTo(c.reference(), at)
	if !ok {
		return unknown[rf.Uplink](r.Signal.At, "a path to the base station")
	}
	return known(rf.Uplink{Feed: sum.Loss.Greatest, Donor: unit.DB(rng.Gain.V) - offBeam(feed.From.Device, rng, r.Signal.Bearing), ToBase: path})
}

// uplinkTerms are the addends behind the phone's 23 dBm, with what the rated output
// takes off.
func uplinkTerms(u rf.Uplink, limited bool, path *indoors, by string) []ReachTerm {
	terms := append(make([]ReachTerm, 0, 10),
		ReachTerm{What: "phone's antenna", DB: u.Hand}, ReachTerm{What: "body", DB: -u.Body}, ReachTerm{path: path, DB: -u.Path},
		ReachTerm{What: "server antenna", DB: u.Server}, ReachTerm{What: "leg", DB: -u.Leg}, ReachTerm{What: "gain that runs (" + by + ")", DB: u.Gain})
	if limited {
		out := u.Phone
		for _, t := range terms {
			out = out.Plus(t.DB)
		}
		terms = append(terms, ReachTerm{What: "held at the rated output", DB: u.MaxOut.Minus(out)})
	}
	return append(terms, ReachTerm{What: "feed", DB: -u.Feed}, ReachTerm{What: "donor antenna", DB: u.Donor}, ReachTerm{What: "path to the base station", DB: -u.ToBase})
}
