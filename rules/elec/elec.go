// Package elec computes direct current: resistance of conductors, what is left at
// the end of a lead, what a conductor may carry, and power over Ethernet. Pure
// numbers in, pure numbers out; the unit stands in the name. What makes no sense
// gives false, never a number.
package elec

import "math"

// positive reports figures that are numbers above 0.
func positive(list ...float64) bool {
	for _, v := range list {
		if !(v > 0) || math.IsInf(v, 0) {
			return false
		}
	}
	return true
}
