package rf

import "driploop/catalog/unit"

// Signal is one channel in the air, on its way into an amplifier's donor port.
type Signal struct {
	RSRP    unit.DBm  // of a reference signal's resource element, at a 0 dBi antenna
	Channel unit.Span // what it occupies
	Blocks  int       // resource blocks; 0 is not known
	Gain    unit.DB   // of the donor antenna toward this site
	Feed    unit.DB   // the least loss of the feed at this channel
}

// AtIsotropic takes a survey antenna and its lead out of a reading.
func AtIsotropic(rsrp unit.DBm, gain, loss unit.DB) (unit.DBm, bool) {
	return knownLevel(rsrp.Plus(loss - gain))
}

// atPort is the full-load power of the signal at the donor port, for the share of
// its channel that lies in the passband.
func (s Signal) atPort(passband unit.Span) (unit.DBm, bool) {
	rssi, ok := RSSI(s.RSRP, s.Blocks)
	if !ok {
		return unit.DBm{}, false
	}
	share := decibels(float64(s.Channel.Overlap(passband).Width() / s.Channel.Width()))
	return knownLevel(rssi.Plus(unit.DB(share) + s.Gain - s.Feed))
}

// CompositeInput is the power of all signals in an amplifier's passband at its
// donor port, each at full load and by the share of its channel inside. Signals
// outside the passband do not count. If a signal inside lacks something, or there
// is none, the sum is not known: a part of it would look like good news.
func CompositeInput(passband unit.Span, signals []Signal) (unit.DBm, bool) {
	var levels []unit.DBm
	for _, s := range signals {
		if s.Channel.Empty() {
			return unit.DBm{}, false
		}
		if s.Channel.Overlap(passband).Empty() {
			continue
		}
		level, ok := s.atPort(passband)
		if !ok {
			return unit.DBm{}, false
		}
		levels = append(levels, level)
	}
	return knownLevel(unit.PowerSum(levels...))
}
