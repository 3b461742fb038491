package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Facade is the class of building of ITU-R P.2109: Efficient ones have metallised
// glass or foil-backed panels.
type Facade int

// Classes of building.
const (
	Traditional Facade = iota
	Efficient
)

// p2109 is table 1 of ITU-R P.2109-2 (08/2023), the same as in P.2109-1 (08/2019)
// (read in open implementations).
var p2109 = [2]struct{ r, s, t, u, v, w, x, y, z float64 }{
	Traditional: {12.64, 3.72, 0.96, 9.6, 2.0, 9.1, -3.0, 4.5, -2.0},
	Efficient:   {28.19, -3.00, 8.48, 13.5, 3.8, 27.8, -2.9, 9.4, -2.1},
}

// EntryLoss is the loss into a building that a share of places does not exceed,
// ITU-R P.2109-2 (08/2023) section 3, for antennas somewhere inside. Elevation is
// that of the path at the facade, −90 to 90 degrees. Holds from 80 MHz to 100 GHz
// and for shares between 0 and 1.
func EntryLoss(c Facade, f unit.MHz, elevation, share float64) (unit.DB, bool) {
	switch {
	case c != Traditional && c != Efficient:
		return 0, false
	case !(f >= 80 && f <= 100000), !(share > 0 && share < 1), !(math.Abs(elevation) <= 90):
		return 0, false
	}
	k, lg := p2109[c], math.Log10(float64(f)/1000)
	deviate := math.Sqrt2 * math.Erfinv(2*share-1)
	mean1 := k.r + k.s*lg + k.t*lg*lg + 0.212*math.Abs(elevation)
	a := deviate*(k.u+k.v*lg) + mean1
	b := deviate*(k.y+k.z*lg) + k.w + k.x*lg
	const floor = -3
	return known(decibels(ratio(unit.DB(a)) + ratio(unit.DB(b)) + ratio(floor)))
}
