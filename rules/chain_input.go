package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// received is the composite downlink power at the donor port over all signals in
// the amplifier's band, and the strongest single one: each at full load, with the
// donor antenna's gain toward its bearing and the least loss of the feed. What
// several donor antennas bring to one port adds up.
func (c *Case) received(x *BandChain) (all, loudest Known[unit.DBm]) {
	if len(x.Feeds) == 0 {
		all = unknown[unit.DBm](x.Amp.At, "a feed")
		return all, all
	}
	ports := map[*bom.Node][]rf.Signal{}
	for _, feed := range x.Feeds {
		k := c.signals(x, feed)
		if !k.OK {
			all = Known[unit.DBm]{Lacks: k.Lacks}
			return all, all
		}
		ports[feed.To] = append(ports[feed.To], k.V...)
	}
	var sums, each []unit.DBm
	for _, signals := range ports {
		sum, ok := rf.CompositeInput(x.Own.Downlink, signals)
		if !ok {
			all = unknown[unit.DBm](c.JobAt(), "signals whose power can be added up")
			return all, all
		}
		sums = append(sums, sum)
		for i := range signals {
			if one, ok := rf.CompositeInput(x.Own.Downlink, signals[i:i+1]); ok {
				each = append(each, one)
			}
		}
	}
	return loudestOf(sums), loudestOf(each)
}

func loudestOf(levels []unit.DBm) Known[unit.DBm] {
	top, ok := rf.Strongest(levels...)
	return Known[unit.DBm]{V: top, OK: ok}
}

// noSurvey is what is missing where the plan has no signal in the band.
const noSurvey = "a survey ([[signal]])"

// signals are the surveyed signals in the amplifier's band as they come in through
// a feed.
func (c *Case) signals(x *BandChain, feed *bom.Line) Known[[]rf.Signal] {
	var out []rf.Signal
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		ch, ok := channel(s)
		switch {
		case !ok && mayLieIn(s, x.Own.Downlink):
			return unknown[[]rf.Signal](s.At, "width_mhz of the signal of "+s.Operator.V+" in "+s.Band.V)
		case !ok || ch.Overlap(x.Own.Downlink).Empty():
			continue
		}
		k := c.arriving(s, ch, feed)
		if !k.OK {
			return Known[[]rf.Signal]{Lacks: k.Lacks}
		}
		out = append(out, k.V)
	}
	if len(out) == 0 {
		return unknown[[]rf.Signal](c.JobAt(), noSurvey)
	}
	return known(out)
}

// channel is what a surveyed signal occupies; false where its width is not given.
func channel(s *bom.Signal) (unit.Span, bool) {
	band, ok := catalog.LookBand(s.Band.V)
	if !ok || !s.WidthMHz.Set {
		return unit.Span{}, false
	}
	mid := unit.MHz(s.MHz.Or(float64(band.Downlink.Mid())))
	half := unit.MHz(s.WidthMHz.V) / 2
	return unit.Span{Lo: mid - half, Hi: mid + half}, true
}

// mayLieIn reports a signal whose width is not given and that by its frequency or
// its band may lie in a stretch of spectrum.
func mayLieIn(s *bom.Signal, span unit.Span) bool {
	band, ok := catalog.LookBand(s.Band.V)
	return ok && !band.Downlink.Overlap(span).Empty() || s.MHz.Set && span.Contains(unit.MHz(s.MHz.V))
}

// arriving is a surveyed signal as it comes in through a feed.
func (c *Case) arriving(s *bom.Signal, ch unit.Span, feed *bom.Line) Known[rf.Signal] {
	blocks, ok := blocksOf(s)
	if !ok {
		return unknown[rf.Signal](s.At, "a channel width of 3GPP, and scs_khz for NR, of the signal of "+s.Operator.V+" in "+s.Band.V)
	}
	sum := c.Sum(feed, ch.Mid())
	rng := antennaAt(feed.From, ch.Mid())
	switch {
	case !s.RSRP.Set:
		return unknown[rf.Signal](s.At, "rsrp_dbm of the signal of "+s.Operator.V+" in "+s.Band.V)
	case s.Through != nil && !(s.Through.GainDBi.Set && s.Through.LossDB.Set):
		return unknown[rf.Signal](s.At, "gain_dbi and loss_db of what the signal of "+s.Operator.V+" in "+s.Band.V+" was taken through")
	case !sum.Known():
		return Known[rf.Signal]{Lacks: sum.Missing}
	case rng == nil:
		return Known[rf.Signal]{Lacks: []Lack{noGain(feed.From)}}
	}
	level := unit.DBmOf(s.RSRP.V)
	if t := s.Through; t != nil {
		level, ok = rf.AtIsotropic(level, unit.DB(t.GainDBi.V), unit.DB(t.LossDB.V))
	}
	gain := unit.DB(rng.Gain.V) - offBeam(feed.From.Device, rng, s.Bearing)
	return Known[rf.Signal]{V: rf.Signal{RSRP: level, Channel: ch, Blocks: blocks, Gain: gain, Feed: sum.Loss.Least}, OK: ok}
}

// blocksOf is the number of resource blocks of a signal: NR where the band's name
// says so, else LTE.
func blocksOf(s *bom.Signal) (int, bool) {
	width := unit.MHz(s.WidthMHz.V)
	if s.Band.V != "" && s.Band.V[0] == 'n' {
		if !s.SCSkHz.Set {
			return 0, false
		}
		return rf.NRBlocks(width, int(s.SCSkHz.V))
	}
	return rf.LTEBlocks(width)
}

// offBeam is how far the gain lies below the main beam toward a bearing; nothing
// where the aim or the bearing is not given.
func offBeam(d *bom.Device, r *catalog.Range, bearing source.Val[float64]) unit.DB {
	if !d.Row.AimDeg.Set || !bearing.Set {
		return 0
	}
	off, _ := pattern(r).Discrimination(bearing.V-d.Row.AimDeg.V, 0)
	return off
}

func pattern(r *catalog.Range) rf.Pattern {
	return rf.Pattern{Horizontal: r.Beam.V[0], Vertical: r.Beam.V[1], FrontToBack: unit.DB(r.FB.V)}
}
