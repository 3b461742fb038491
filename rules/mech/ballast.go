package mech

// Overturning is how many times the weight of a mount in N, over half of its base in
// m, holds the moment in N·m that turns it over: W·(b/2)/M (a guide to ballasted
// antenna mounts, W ≥ SF·ΣF·h/(b/2); read). Where nothing turns it there is no ratio.
func Overturning(weight, base, moment float64) (float64, bool) {
	if !positive(weight, base, moment) {
		return 0, false
	}
	return figure(weight * base / 2 / moment)
}

// Sliding is how many times friction under a weight holds a force: µ·W/F (same guide,
// W ≥ SF·F/µ; read).
func Sliding(weight, friction, force float64) (float64, bool) {
	if !positive(weight, friction, force) {
		return 0, false
	}
	return figure(friction * weight / force)
}

// BallastFor is the mass in kg that a mount needs to hold a moment and a force a
// number of times, the greater of the two (same guide; read).
func BallastFor(times, base, friction, moment, force float64) (float64, bool) {
	if !positive(times, base, friction) || !notNegative(moment, force) {
		return 0, false
	}
	return figure(max(times*moment/(base/2), times*force/friction) / Gravity)
}

// Bearing is the pressure in N/m² of a mass in kg on a footprint in m² (calculated).
func Bearing(mass, area float64) (float64, bool) {
	if !notNegative(mass) || !positive(area) {
		return 0, false
	}
	return figure(mass * Gravity / area)
}
