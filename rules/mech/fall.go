package mech

import "math"

// FallGap is how near to a point of a power line something comes that stands on a
// foot and falls, in m; below 0 where it reaches it. east, north and up lead from the
// foot to the point. A fall ends below the foot as well as beside it, so for a point
// that lies lower only the distance over ground counts (calculated; that no part may
// come near a line when mast and antenna fall is in the US amateur question pool,
// T0B06, and in utilities' advice; read).
func FallGap(east, north, up, radius float64) (float64, bool) {
	if !positive(radius) {
		return 0, false
	}
	over := math.Max(0, up)
	return figure(math.Sqrt(east*east+north*north+over*over) - radius)
}

// ApproachSteps is the distance that people who are not qualified keep from an
// overhead line: least up to a voltage, and a step more for each stretch of voltage
// begun above it; 10 ft up to 50 kV and 4 in per 10 kV in 29 CFR 1910.333(c)(3)(i)
// (memory; the same figures read in 1910.268 and .269). Any unit of length will do.
func ApproachSteps(kv, least, upTo, step, stretch float64) (float64, bool) {
	if !notNegative(kv, upTo, step) || !positive(least, stretch) {
		return 0, false
	}
	over := math.Max(0, kv-upTo)
	return figure(least + step*math.Ceil(over/stretch-1e-9))
}

// LadderFoot is how far out the foot of a ladder stands for a working length, by the
// share of it that a code gives: a quarter (29 CFR 1926.1053(b)(5)(i); read). Any unit
// of length will do.
func LadderFoot(length, share float64) (float64, bool) {
	if !positive(length, share) {
		return 0, false
	}
	return figure(length * share)
}

// Vec is a point in metres: east, north, up.
type Vec struct{ E, N, U float64 }

// Apart is the least distance between a point and the straight stretch from a to b
// (geometry; calculated).
func Apart(p, a, b Vec) (float64, bool) {
	ab, ap := Vec{b.E - a.E, b.N - a.N, b.U - a.U}, Vec{p.E - a.E, p.N - a.N, p.U - a.U}
	long := ab.dot(ab)
	along := 0.0
	if long > 0 {
		along = math.Min(1, math.Max(0, ap.dot(ab)/long))
	}
	off := Vec{ap.E - along*ab.E, ap.N - along*ab.N, ap.U - along*ab.U}
	return figure(math.Sqrt(off.dot(off)))
}

func (v Vec) dot(w Vec) float64 { return v.E*w.E + v.N*w.N + v.U*w.U }
