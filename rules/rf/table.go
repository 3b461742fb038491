package rf

import "driploop/catalog/unit"

// Lookup reads a table over frequency: linear in MHz between its points, flat
// beyond its ends, and no value outside the span for which the part is stated. The
// zero Span sets no bounds. One point is a constant. Points must rise in frequency,
// or nothing is known.
func Lookup(points []Point, valid unit.Span, f unit.MHz) (unit.DB, bool) {
	if len(points) == 0 || !positive(float64(f)) {
		return 0, false
	}
	if valid != (unit.Span{}) && !valid.Contains(f) {
		return 0, false
	}
	value := points[0].DB
	for i := 1; i < len(points); i++ {
		a, b := points[i-1], points[i]
		if !(a.MHz < b.MHz) {
			return 0, false
		}
		switch {
		case f >= b.MHz:
			value = b.DB
		case f > a.MHz:
			share := float64((f - a.MHz) / (b.MHz - a.MHz))
			value = a.DB + unit.DB(share)*(b.DB-a.DB)
		}
	}
	return known(float64(value))
}
