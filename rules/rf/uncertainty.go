package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Tolerance is how far a figure may lie above and below what is stated, both
// positive. A certified maximum has nothing above it.
type Tolerance struct{ Above, Below unit.DB }

// Either is a tolerance alike in both directions.
func Either(d unit.DB) Tolerance { return Tolerance{d, d} }

// Together is the root of the sum of squares of tolerances that do not depend on
// one another, each direction by itself; ISO/IEC Guide 98-3, 5.1.2 (memory). It is
// a likely bound, not the worst case.
func Together(each ...Tolerance) (Tolerance, bool) {
	var above, below float64
	for _, t := range each {
		if !(t.Above >= 0) || !(t.Below >= 0) {
			return Tolerance{}, false
		}
		above = math.Hypot(above, float64(t.Above))
		below = math.Hypot(below, float64(t.Below))
	}
	a, ok1 := known(above)
	b, ok2 := known(below)
	return Tolerance{a, b}, ok1 && ok2
}
