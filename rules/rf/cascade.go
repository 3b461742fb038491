package rf

import "driploop/catalog/unit"

// Stage is one part of a chain by its gain (negative where it loses) and its
// noise figure.
type Stage struct{ Gain, NF unit.DB }

// Attenuator is a matched passive part at 290 K: its noise figure is its loss.
func Attenuator(loss unit.DB) Stage { return Stage{-loss, loss} }

// Cumulate is the chain from its first stage up to and including each one:
// F = F1 + (F2−1)/G1 + (F3−1)/(G1·G2) + … (H. T. Friis, Noise figures of radio
// receivers, Proc. IRE, July 1944; worked examples read). A noise figure below
// 0 dB does not exist, and nothing is known.
func Cumulate(stages ...Stage) ([]Stage, bool) {
	totals := make([]Stage, 0, len(stages))
	gain, factor := 1.0, 1.0
	for _, s := range stages {
		if !(s.NF >= 0) {
			return nil, false
		}
		factor += (ratio(s.NF) - 1) / gain
		gain *= ratio(s.Gain)
		g, ok1 := known(decibels(gain))
		nf, ok2 := known(decibels(factor))
		if !ok1 || !ok2 {
			return nil, false
		}
		totals = append(totals, Stage{g, nf})
	}
	return totals, true
}

// Cascade is the whole chain as one stage. A chain of nothing is not known.
func Cascade(stages ...Stage) (Stage, bool) {
	totals, ok := Cumulate(stages...)
	if !ok || len(totals) == 0 {
		return Stage{}, false
	}
	return totals[len(totals)-1], true
}
