package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Position is a point on site in metres: east, north, height above ground.
type Position struct{ East, North, Up float64 }

// Direction is the way from one position to another.
type Direction struct {
	Metres    float64
	Bearing   float64 // degrees clockwise from true north, 0 to 360
	Elevation float64 // degrees above the horizon
}

// Toward is the way from p to q. Between equal positions there is none.
func (p Position) Toward(q Position) (Direction, bool) {
	e, n, u := q.East-p.East, q.North-p.North, q.Up-p.Up
	flat := math.Hypot(e, n)
	d := math.Hypot(flat, u)
	if !positive(d) {
		return Direction{}, false
	}
	bearing := math.Mod(degrees(math.Atan2(e, n))+360, 360)
	return Direction{d, bearing, degrees(math.Atan2(u, flat))}, true
}

func degrees(rad float64) float64 { return rad * 180 / math.Pi }

// frontToBackCredit is the most that a pattern may take off on a building: walls
// and the mast itself fill a deep null (common practice).
const frontToBackCredit unit.DB = 20

// Pattern is what a data sheet says of an antenna's directions: half-power beam
// widths in degrees and the front-to-back ratio. Zero is not stated, and what is
// not stated is not credited.
type Pattern struct {
	Horizontal, Vertical float64
	FrontToBack          unit.DB
}

// Discrimination is how far the gain lies below the main beam in a direction off
// boresight, both angles in degrees: min(12·(a/beam)², F/B) in each plane, added,
// and no more than F/B or 20 dB. The parabola is that of 3GPP TR 36.814
// table A.2.1.1-2 (memory). ± 8 dB.
func (p Pattern) Discrimination(azimuth, elevation float64) (unit.DB, bool) {
	if !finite(azimuth) || !finite(elevation) || !(p.FrontToBack >= 0) {
		return 0, false
	}
	off := p.plane(azimuth, p.Horizontal) + p.plane(elevation, p.Vertical)
	return known(float64(min(off, p.FrontToBack, frontToBackCredit)))
}

func (p Pattern) plane(off, beam float64) unit.DB {
	if !(beam > 0 && beam < 360) {
		return 0
	}
	a := math.Remainder(off, 360) / beam
	return min(unit.DB(12*a*a), p.FrontToBack)
}

// OffBoresight is the discrimination toward a direction of an antenna that looks
// horizontally along a bearing.
func (p Pattern) OffBoresight(aim float64, d Direction) (unit.DB, bool) {
	return p.Discrimination(d.Bearing-aim, d.Elevation)
}
