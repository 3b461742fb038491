package rf

import (
	"math"

	"driploop/catalog/unit"
)

// The relations of this file follow from the definition of the reflection
// coefficient on a lossless line (calculated); Γ is its magnitude.

// Gamma is (VSWR−1)/(VSWR+1). A VSWR below 1 does not exist.
func Gamma(vswr float64) (float64, bool) {
	if !(vswr >= 1) || !finite(vswr) {
		return 0, false
	}
	return (vswr - 1) / (vswr + 1), true
}

// VSWR is (1+Γ)/(1−Γ) of a return loss in dB. A return loss of 0 dB is a short or
// an open end, whose VSWR has no figure.
func VSWR(returnLoss unit.DB) (float64, bool) {
	if !positive(float64(returnLoss)) {
		return 0, false
	}
	gamma := math.Pow(10, -float64(returnLoss)/20)
	return figure((1 + gamma) / (1 - gamma))
}

// ReturnLoss is −20·log10 Γ. A perfect match has no figure.
func ReturnLoss(vswr float64) (unit.DB, bool) {
	gamma, ok := Gamma(vswr)
	if !ok {
		return 0, false
	}
	return known(-20 * math.Log10(gamma))
}

// ReflectedShare is the share of the power that comes back, Γ².
func ReflectedShare(vswr float64) (float64, bool) {
	gamma, ok := Gamma(vswr)
	return gamma * gamma, ok
}

// MismatchLoss is −10·log10(1−Γ²), what does not get through.
func MismatchLoss(vswr float64) (unit.DB, bool) {
	share, ok := ReflectedShare(vswr)
	if !ok {
		return 0, false
	}
	return known(math.Abs(decibels(1 - share))) // Abs: a perfect match is 0, not −0
}

// StepVSWR is the VSWR where two impedances meet, the greater over the smaller.
func StepVSWR(ohm1, ohm2 float64) (float64, bool) {
	if !positive(ohm1) || !positive(ohm2) {
		return 0, false
	}
	return figure(max(ohm1, ohm2) / min(ohm1, ohm2))
}

// CompositeVSWR is the best and the worst that mismatches in a row can add up to,
// whatever the line lengths between them. On a lossless line they combine like the
// sides of a polygon of lengths ln(VSWR): the worst is the product, the best the
// largest over the product of the others, or 1 where those outweigh it.
func CompositeVSWR(vswrs ...float64) (best, worst float64, ok bool) {
	largest, worst := 1.0, 1.0
	for _, v := range vswrs {
		if _, ok := Gamma(v); !ok {
			return 0, 0, false
		}
		largest = max(largest, v)
		worst *= v
	}
	if !finite(worst) {
		return 0, 0, false
	}
	return max(1, largest*largest/worst), worst, true
}

// MismatchRun is the loss of several impedance steps in one run: the least of the
// best composite VSWR, nominally the sum of each step by itself, the greatest of
// the worst composite VSWR. A run without steps loses nothing.
func MismatchRun(vswrs ...float64) (Loss, bool) {
	best, worst, ok := CompositeVSWR(vswrs...)
	if !ok {
		return Loss{}, false
	}
	var sum unit.DB
	for _, v := range vswrs {
		step, _ := MismatchLoss(v) // known: CompositeVSWR has looked at it
		sum += step
	}
	least, ok1 := MismatchLoss(best)
	greatest, ok2 := MismatchLoss(worst)
	return Loss{least, sum, greatest}, ok1 && ok2
}

// MismatchUncertainty is how far a power reading can stray up and down between two
// mismatches, 20·log10(1±Γ1Γ2).
func MismatchUncertainty(vswr1, vswr2 float64) (up, down unit.DB, ok bool) {
	g1, ok1 := Gamma(vswr1)
	g2, ok2 := Gamma(vswr2)
	if !ok1 || !ok2 {
		return 0, 0, false
	}
	up, ok1 = known(20 * math.Log10(1+g1*g2))
	down, ok2 = known(20 * math.Log10(1-g1*g2))
	return up, down, ok1 && ok2
}

// ReturnLossThrough is the return loss seen ahead of a matched line of the given
// loss: the reflection passes it twice.
func ReturnLossThrough(atLoad, line unit.DB) (unit.DB, bool) {
	if !(atLoad >= 0) || !(line >= 0) {
		return 0, false
	}
	return known(float64(atLoad + 2*line))
}

// MinimumLossPad is the resistive pad that matches two impedances both ways:
// series on the side of the higher, shunt on that of the lower, in ohms, and its
// loss. Equal impedances need no pad.
func MinimumLossPad(ohm1, ohm2 float64) (series, shunt float64, loss unit.DB, ok bool) {
	step, ok := StepVSWR(ohm1, ohm2)
	if !ok || step == 1 {
		return 0, 0, 0, false
	}
	high, low := max(ohm1, ohm2), min(ohm1, ohm2)
	root := math.Sqrt(1 - low/high)
	loss, ok = known(20 * math.Log10(math.Sqrt(step)+math.Sqrt(step-1)))
	return high * root, low / root, loss, ok
}
