package mech

import "math"

// Gravity is the standard acceleration of free fall in m/s² (ISO 80000-3; the third
// CGPM of 1901; exact by convention).
const Gravity = 9.80665

// halfRho is half the density of air at 15 °C and sea level, 1.225 kg/m³ (ISO 2533,
// standard atmosphere; memory).
const halfRho = 0.6125

// Terrain is an exposure category of ASCE 7: the constants of its velocity profile.
// Heights are in feet, as the table gives them.
type Terrain struct {
	Factor  float64 // 2.01 up to edition 7-16, 2.41 in 7-22
	LeastFt float64 // below it the profile is flat: 15 ft
	Alpha   float64
	GradeFt float64 // gradient height zg
}

// Kz is the velocity pressure exposure coefficient at a height above ground in feet:
// Factor·(max(z, least)/zg)^(2/alpha), ASCE 7-16 table 26.10-1 (read). Above zg it has
// no value.
func (t Terrain) Kz(ft float64) (float64, bool) {
	if !positive(t.Factor, t.LeastFt, t.Alpha, t.GradeFt) || !notNegative(ft) || ft > t.GradeFt {
		return 0, false
	}
	return figure(t.Factor * math.Pow(math.Max(ft, t.LeastFt)/t.GradeFt, 2/t.Alpha))
}

// VelocityPressure is c·V² times the factors of a code, such as Kz, Kzt, Kd and Ke of
// ASCE 7-16 equation 26.10-1 (read). c is 0.613 for m/s and N/m², 0.00256 for mph and
// lbf/ft². No wind at all gives no pressure; a factor of 0 is none.
func VelocityPressure(c, v float64, factors ...float64) (float64, bool) {
	if !positive(c) || !notNegative(v) || !positive(factors...) {
		return 0, false
	}
	q := c * v * v
	for _, k := range factors {
		q *= k
	}
	return figure(q)
}

// FreePressure is the pressure of a speed in m/s that already is the one at the
// height: ½ρV² with ρ = 1.225 kg/m³, in N/m² (calculated).
func FreePressure(v float64) (float64, bool) { return VelocityPressure(halfRho, v) }

// FreeSpeed is the speed in m/s whose free pressure is q N/m²: 36 m/s for the 800 N/m²
// of EN 60728-11, 42 m/s for its 1100 N/m² (calculated).
func FreeSpeed(q float64) (float64, bool) {
	if !notNegative(q) {
		return 0, false
	}
	return figure(math.Sqrt(q / halfRho))
}
