package rules

import (
	"fmt"
	"math"
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// The rules of this list are about what the site does to an amplifier: what comes
// in, how well its antennas are apart, and what it gives back to the network.
var gainSiteRules = []*Rule{gainSystem, gainInput, gainOverload, gainIsolation, gainNoise, gainPhoneClose}

var gainInput = &Rule{
	Name:    "gain/input",
	Title:   "What comes in, amplified as set, stays within the rated downlink output",
	Why:     "an amplifier driven past its output distorts and fills the band with noise; one that protects itself turns down, and the far rooms lose their signal",
	Basis:   []Basis{{Document: "composite input at full load: RSRP + 10·log10(12·N_RB) over all signals in the amplifier's band; blocks by TS 36.101 table 5.6-1 and TS 38.101-1 table 5.3.2-1", Kind: "standard", Proof: "memory"}, practice("a typical hour is 3 dB below full load; the data of an NR signal may be 6 dB off the reference that was surveyed")},
	Caution: mindOperator,
	Weight:  Hold,
	Lighter: "a punch where the amplifier lowers its gain by itself (network_protection)",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			if !x.Down.Span.Empty() {
				checkInput(c, r, x)
			}
		}
	},
}

func checkInput(c *Case, r *Report, x *BandChain) {
	d := &x.Down
	lacks := slices.Concat(d.Input.Lacks, d.Set.Lacks)
	if !d.rated() {
		lacks = append(lacks, x.noOutput())
	}
	if len(lacks) > 0 {
		x.unassessed(r, "the input", dedupe(lacks))
		return
	}
	in, set, limit, doubt := d.Input.V, d.Set.V, d.Spec.MaxOut.V, c.inputDoubt(x)
	out := in.Plus(set).Value()
	report, spread := r.Fails, ""
	switch {
	case rf.Exceeds(out, limit):
	case rf.Exceeds(out+doubt, limit):
		report, spread = r.AtWorst, " ± "+plainFigure(doubt)+" dB"
	default:
		return
	}
	f := report(x.settingAt(), x.Amp.On(), "%s receives %s dBm%s in %s at full load and is set to %s dB: %s dBm, rated output %s dBm", x.Amp.ID,
		unit.Fixed(in.Value(), 2), spread, x.Band.Name, hundredths(float64(set)), unit.Fixed(out, 2), hundredths(limit)).
		Then("set it back: set = { %s = { back_off_db = %s } }, aim the donor antenna off the strong site, or put an attenuator into the feed", x.Band.Name, x.backOff(d, limit-in.Value())).
		InBand(x.Band.Name).Over("output_dbm", out, "limit_dbm", limit).With("input_dbm", in.Value())
	if s, _ := c.strongestSite(x); s != nil {
		f.Beside(s.At, "the strongest signal, of %s", s.Operator.V)
	}
	if x.Amp.Part.Amplifier.NetworkProtection.V {
		f.Lighter(Punch).Says += "; it will turn itself down" + runsTo(d)
	}
}

// nrDoubt is how far the power of an NR channel may lie off what its reference
// signal says, dB (common practice).
const nrDoubt = 6.0

// inputDoubt is how far the composite input may lie above what was surveyed.
func (c *Case) inputDoubt(x *BandChain) float64 {
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		if ch, ok := channel(s); ok && isNR(s) && !ch.Overlap(x.Own.Downlink).Empty() {
			return nrDoubt
		}
	}
	return 0
}

// isNR reports a signal in a band of NR, by the name of the band.
func isNR(s *bom.Signal) bool { return s.Band.V != "" && s.Band.V[0] == 'n' }

// runsTo says at which gain a direction will run.
func runsTo(d *Direction) string {
	switch {
	case !d.Runs.OK:
		return ""
	case !d.Runs.V.On:
		return " until the band is off"
	}
	return fmt.Sprintf(" to %s dB", unit.Fixed(float64(d.Runs.V.Gain), 1))
}

// strongestSite is the surveyed signal with the highest level at a 0 dBi antenna in
// the amplifier's band, or nil.
func (c *Case) strongestSite(x *BandChain) (best *bom.Signal, level unit.DBm) {
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		ch, ok := channel(s)
		if !ok || ch.Overlap(x.Own.Downlink).Empty() {
			continue
		}
		if l, ok := surveyed(s); ok && (best == nil || level.Below(l)) {
			best, level = s, l
		}
	}
	return best, level
}

// surveyed is a signal's level at a 0 dBi antenna.
func surveyed(s *bom.Signal) (unit.DBm, bool) {
	level := unit.DBmOf(s.RSRP.V)
	switch t := s.Through; {
	case !s.RSRP.Set || t != nil && !(t.GainDBi.Set && t.LossDB.Set):
		return unit.DBm{}, false
	case t != nil:
		return rf.AtIsotropic(level, unit.DB(t.GainDBi.V), unit.DB(t.LossDB.V))
	}
	return level, true
}

// tenthsUp prints a figure rounded up to a tenth: as much as is needed, not less.
func tenthsUp(v float64) string { return unit.Fixed(math.Ceil(v*10-rf.Slack)/10, 1) }
