// Package mech is the mechanics of the tool: pure numbers in and out, for what
// stands in the wind, what carries it, and how far it reaches when it falls.
//
// It reads from the wind inward. VelocityPressure is what the wind presses with at
// a height, by Kz of the terrain (wind.go); an area becomes an EffectiveArea once,
// and only that makes a force (force.go); forces with their levers make a moment,
// and a tube bends under it (tube.go); a mount that stands by its weight turns over
// or slides (ballast.go); what falls comes near a power line (fall.go); and metal
// keeps its distance from a lightning protection system (separation.go).
//
// Constants that a code or standard gives are arguments: they are rows of package
// limits, where each has its section, edition and proof.
//
// Lengths are in metres, tube sizes in millimetres, forces in newtons, moments in
// newton metres, stress in megapascals, unless a comment says that any consistent
// units will do. A function whose formula holds only within bounds answers
// (0, false) outside them and where a number is missing (NaN): not known, never a
// guess. How sure each formula's source is stands beside it: "read" in the document
// or a public copy of it, "memory" written down without the text at hand,
// "calculated" from definitions, "common practice".
package mech

import "math"

// figure is the one door through which results leave: NaN and infinity are none.
func figure(v float64) (float64, bool) {
	if math.IsNaN(v) || math.IsInf(v, 0) {
		return 0, false
	}
	return v, true
}

// positive is false for NaN and infinity as well.
func positive(list ...float64) bool {
	for _, v := range list {
		if !(v > 0) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}

// notNegative is false for NaN and infinity as well.
func notNegative(list ...float64) bool {
	for _, v := range list {
		if !(v >= 0) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}
