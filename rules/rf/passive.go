package rf

import (
	"math"

	"driploop/catalog/unit"
)

// SplitLoss is what an equal split among n outputs takes at least, 10·log10 n;
// real splitters add 0.2 to 1 dB (common practice). Calculated.
func SplitLoss(n int) (unit.DB, bool) {
	if n < 1 {
		return 0, false
	}
	return known(decibels(float64(n)))
}

// TapThroughLoss is what the through path of a tap or coupler loses at least to
// its coupled port: −10·log10(1−10^(−C/10)). Calculated.
func TapThroughLoss(coupling unit.DB) (unit.DB, bool) {
	if !positive(float64(coupling)) {
		return 0, false
	}
	return known(-decibels(1 - ratio(-coupling)))
}

// CombineLoss is what two equal-gain branches lose in a two-way combiner against
// the sum of their powers, when they carry one signal with an amplitude difference
// and a phase between them: −10·log10[(1+r²+2r·cos φ)/(2(1+r²))]. Branches in
// opposite phase cancel, and the loss has no figure. Calculated.
func CombineLoss(difference unit.DB, phaseDeg float64) (unit.DB, bool) {
	r := math.Pow(10, -math.Abs(float64(difference))/20)
	both := 1 + r*r
	got := (both + 2*r*math.Cos(phaseDeg*math.Pi/180)) / (2 * both)
	return known(math.Abs(decibels(got)))
}

// ThirdOrder is where the nearest intermodulation products of two carriers fall,
// 2·f1−f2 and 2·f2−f1, the lower first. A product below 0 MHz is its mirror and is
// not known here.
func ThirdOrder(f1, f2 unit.MHz) (lower, upper unit.MHz, ok bool) {
	a, b := min(f1, f2), max(f1, f2)
	if !positive(float64(a)) || !positive(float64(b)) || 2*a <= b {
		return 0, 0, false
	}
	return 2*a - b, 2*b - a, true
}

// PIMLevel is the passive intermodulation of a part rated in dBc, as a level, when
// it is tested with two carriers of the given power each; IEC 62037 tests with
// two of +43 dBm (read).
func PIMLevel(dbc unit.DB, carrier unit.DBm) (unit.DBm, bool) {
	return knownLevel(carrier.Plus(dbc))
}
