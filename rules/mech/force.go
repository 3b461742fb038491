package mech

// EffectiveArea is a projected area with its drag in it, in m². It is a type of its
// own because drag is counted once: a maker's effective area holds it already.
type EffectiveArea float64

// Drag makes an effective area of a plain projected one: A·Cf. Force coefficients
// are 1.2 for long round tubes and 2.0 for long flat plates (engineering handbooks;
// TIA-222-G table of appurtenances; read).
func Drag(area, cf float64) (EffectiveArea, bool) {
	if !positive(area, cf) {
		return 0, false
	}
	v, ok := figure(area * cf)
	return EffectiveArea(v), ok
}

// Force is what the wind presses an effective area with: q·G·(Cf·A), in N for q in
// N/m². G is the gust effect factor: 0.85 for rigid structures (ASCE 7-16 26.11; read),
// 1 where the pressure is a gust's already (EN 60728-11 clause 12; read).
func Force(q, gust float64, a EffectiveArea) (float64, bool) {
	if !notNegative(q) || !positive(gust, float64(a)) {
		return 0, false
	}
	return figure(q * gust * float64(a))
}

// Load is a force with its lever above a fixing.
type Load struct {
	Force float64
	Lever float64
}

// Moment is the bending moment of some loads at the fixing: ΣF·h (calculated). Any
// consistent units will do.
func Moment(loads ...Load) (float64, bool) {
	sum := 0.0
	for _, l := range loads {
		if !notNegative(l.Force, l.Lever) {
			return 0, false
		}
		sum += l.Force * l.Lever
	}
	return figure(sum)
}

// TubeLoad is the wind on a round tube of diameter od between two heights above the
// fixing; it acts half-way between them. Any consistent units will do.
func TubeLoad(q, gust, cf, od, from, to float64) (Load, bool) {
	if !notNegative(from) || !(to > from) {
		return Load{}, false
	}
	area, ok := Drag(od*(to-from), cf)
	if !ok {
		return Load{}, false
	}
	force, ok := Force(q, gust, area)
	return Load{force, (from + to) / 2}, ok
}
