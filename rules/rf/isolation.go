package rf

import (
	"math"

	"driploop/catalog/unit"
)

// IsolationTolerance is how far a computed isolation may be off, either way
// (common practice): buildings reflect, patterns are parabolas only on paper. A
// measured isolation goes before any of these.
const IsolationTolerance unit.DB = 8

// Coupling is the way from one server antenna into the donor antenna, port to
// port. The gains are those toward each other.
type Coupling struct {
	Path          unit.DB // AirGap at the antennas' distance
	Shell         unit.DB // what stands between: roof, walls, vehicle skin
	Donor, Server unit.DB // gains
	Feed, Leg     unit.DB // least losses
}

// AirGap is the free-space loss between two antennas of one site. Closer than a
// wavelength they are one antenna, and it is not known.
func AirGap(f unit.MHz, metres float64) (unit.DB, bool) {
	if !atLeastWavelength(f, metres) {
		return 0, false
	}
	return FreeSpaceLoss(f, metres)
}

func atLeastWavelength(f unit.MHz, metres float64) bool {
	wave, ok := Wavelength(f)
	return ok && metres >= wave*(1-Slack)
}

// Isolation is path + shell − gains + feed + leg. Calculated. A site that is meant
// to isolate and would gain is not known.
func (c Coupling) Isolation() (unit.DB, bool) {
	v := c.Path + c.Shell - c.Donor - c.Server + c.Feed + c.Leg
	if !(v >= 0) {
		return 0, false
	}
	return known(float64(v))
}

// TotalIsolation is the isolation of several servers together: their powers add,
// −10·log10 Σ10^(−I/10).
func TotalIsolation(each ...unit.DB) (unit.DB, bool) {
	sum := 0.0
	for _, i := range each {
		sum += ratio(-i)
	}
	return known(-decibels(sum))
}

// VerticalIsolation is that of two antennas exactly above one another on a mast:
// 28 + 40·log10(d/λ) (published calculator formula, read). Holds for vertical
// half-wave dipoles, from one wavelength, up to 70 dB; no gain corrects it.
func VerticalIsolation(f unit.MHz, metres float64) (unit.DB, bool) {
	v, ok := spaced(f, metres, 28, 40)
	if !ok || Exceeds(float64(v), 70) {
		return 0, false
	}
	return v, true
}

// HorizontalIsolation is that of two antennas beside one another:
// 22 + 20·log10(d/λ) − (G1+G2), the gains toward each other in dBi (manual of a
// repeater, read; 22 is the 21.98 of free space rounded). Holds from one
// wavelength; one published calculator asks for 15.24 m with gain antennas, so
// closer it is coarse.
func HorizontalIsolation(f unit.MHz, metres float64, gain1, gain2 unit.DB) (unit.DB, bool) {
	v, ok := spaced(f, metres, 22, 20)
	if !ok || !(v-gain1-gain2 >= 0) {
		return 0, false
	}
	return known(float64(v - gain1 - gain2))
}

// spaced is base + slope·log10(d/λ).
func spaced(f unit.MHz, metres, base, slope float64) (unit.DB, bool) {
	wave, ok := Wavelength(f)
	if !ok || !atLeastWavelength(f, metres) {
		return 0, false
	}
	return known(base + slope*math.Log10(metres/wave))
}

// SlantIsolation lies between the two by the angle of the line between the
// antennas: (Iv−Ih)·θ/90° + Ih, θ = arctan(up/across) (manual of a repeater, read).
func SlantIsolation(vertical, horizontal unit.DB, up, across float64) (unit.DB, bool) {
	if !(up >= 0) || !(across >= 0) || up+across == 0 {
		return 0, false
	}
	share := math.Atan2(up, across) / (math.Pi / 2)
	return known(float64(horizontal) + share*float64(vertical-horizontal))
}
