package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Arrival is one surveyed signal as it comes in at an amplifier's donor port, an
// addend of the composite input.
type Arrival struct {
	Survey *bom.Signal
	Line   *bom.Line // the feed
	Signal rf.Signal
	Load   unit.DB  // all subcarriers that lie in the band, over one of them
	Level  unit.DBm // at the port, at full load
}

// Arrivals are the addends of the composite input of an amplifier in a band. Where
// one of them is not known there are none, for then the sum is not known either.
func (c *Case) Arrivals(x *BandChain) []Arrival {
	if !x.RSSI.OK {
		return nil
	}
	var out []Arrival
	for _, feed := range x.Feeds {
		for i := range c.Plan.Signals {
			s := &c.Plan.Signals[i]
			ch, ok := channel(s)
			if !ok || ch.Overlap(x.Own.Downlink).Empty() {
				continue
			}
			k := c.arriving(s, ch, feed)
			level, ok := rf.CompositeInput(x.Own.Downlink, []rf.Signal{k.V})
			if !k.OK || !ok {
				return nil
			}
			out = append(out, Arrival{s, feed, k.V, level.Minus(k.V.RSRP.Plus(k.V.Gain - k.V.Feed)), level})
		}
	}
	return out
}

// PhoneTerms are the addends from a phone's output to where a chain of the uplink
// starts, with the output itself.
func (c *Case) PhoneTerms(ch StageChain, f unit.MHz) (unit.DBm, []ReachTerm) {
	metres := rf.BuildingPhoneMetres
	if c.Vehicle() {
		metres = rf.VehiclePhoneMetres
	}
	out := unit.DBmOf(phoneDBm)
	path, ok := rf.MSCL(f, metres, 0, 0)
	if !ok {
		return out, nil
	}
	return out, []ReachTerm{
		{What: fmt.Sprintf("free space at %s m and 3 dB of polarization", plainFigure(metres)), DB: -path},
		{What: "server antenna", DB: ch.Start.Minus(out) + path},
	}
}
