package mech

import "math"

// Tube is a round tube: outer diameter and wall. Any unit of length will do, as long
// as both have it.
type Tube struct{ OD, Wall float64 }

// valid reports a tube that there can be; a solid rod is one.
func (t Tube) valid() bool { return positive(t.OD, t.Wall) && t.Wall <= t.OD/2 }

// Inertia is the second moment of area: π(D⁴−d⁴)/64 (strength of materials;
// calculated).
func (t Tube) Inertia() (float64, bool) {
	if !t.valid() {
		return 0, false
	}
	return figure(math.Pi / 64 * (math.Pow(t.OD, 4) - math.Pow(t.OD-2*t.Wall, 4)))
}

// Modulus is the elastic section modulus: I/(D/2) (strength of materials; calculated).
func (t Tube) Modulus() (float64, bool) {
	i, ok := t.Inertia()
	if !ok {
		return 0, false
	}
	return figure(i / (t.OD / 2))
}

// Stress is the bending stress of a tube in mm under a moment in N·m, in MPa: M/S
// (strength of materials; calculated).
func (t Tube) Stress(moment float64) (float64, bool) {
	s, ok := t.Modulus()
	if !ok || !notNegative(moment) {
		return 0, false
	}
	return figure(moment * 1000 / s)
}
