package rf

import (
	"math"

	"driploop/catalog/unit"
)

// How much a reflection adds to the power density of a far field, FCC OET
// Bulletin 65, edition 97-01, section 2 (memory; constants read in an open
// implementation).
const (
	FreeField        = 1.0
	GroundReflection = 2.56 // field × 1.6, typical ground or roof
	FullReflection   = 4.0  // field × 2
)

// FarFieldFrom is the distance in metres from which the far-field formulas hold for
// an antenna of a largest side: 0.6·D²/λ (OET Bulletin 65, section 2, aperture
// antennas; memory), and never closer than λ/2π, where the near field of small
// antennas ends. Without a size it is not known.
func FarFieldFrom(f unit.MHz, side float64) (float64, bool) {
	wave, ok := Wavelength(f)
	if !ok || !positive(side) {
		return 0, false
	}
	return figure(max(0.6*side*side/wave, wave/(2*math.Pi)))
}

// PowerDensity is reflection·EIRP/(4πR²) in W/m², OET Bulletin 65, edition 97-01,
// section 2 (memory). Closer than farFrom, as FarFieldFrom gives it, it is not known.
func PowerDensity(eirp unit.DBm, reflection, metres, farFrom float64) (float64, bool) {
	if !positive(metres) || !positive(reflection) || !(farFrom >= 0) || Below(metres, farFrom) {
		return 0, false
	}
	return figure(reflection * eirp.Watt() / (4 * math.Pi * metres * metres))
}

// LeastDistance is the distance in metres at which the power density falls to a
// limit in W/m²: √(reflection·EIRP/(4π·S)). Where it comes out closer than farFrom
// it is not known.
func LeastDistance(eirp unit.DBm, reflection, limit, farFrom float64) (float64, bool) {
	if !positive(limit) || !positive(reflection) || !(farFrom >= 0) {
		return 0, false
	}
	d := math.Sqrt(reflection * eirp.Watt() / (4 * math.Pi * limit))
	if Below(d, farFrom) {
		return 0, false
	}
	return figure(d)
}
