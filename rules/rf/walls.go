package rf

import "driploop/catalog/unit"

// WallTolerance is how far a wall's loss may be off, either way, where it comes
// from the low-band table or from a P.2040 row carried on below 1 GHz (common
// practice).
const WallTolerance unit.DB = 5

// LowBandWalls is the loss of outer walls as such, whatever their thickness: COST
// Action 231, final report, 4.6 (1999) (read in a network simulator's
// documentation, section memory). Concrete without windows spans 10 to 20 dB.
var LowBandWalls = []struct {
	Name string
	Loss unit.DB
}{
	{"wood", 4},
	{"concrete with windows", 7},
	{"concrete without windows", 15},
	{"stone", 12},
}

// lowBand is where LowBandWalls holds: the action's own measurements were made at
// 900 and 1800 MHz (memory).
var lowBand = unit.Span{Lo: 400, Hi: 2000}

// WallLoss is the loss of one wall and how good the figure is.
type WallLoss struct {
	Loss      unit.DB
	Tolerance unit.DB // 0: the source covers the frequency
	Basis     string
}

// Wall is the loss of a wall by the name of its material: a slab of ITU-R P.2040-3
// if its thickness (in millimetres, 0 for unknown) is given and the row has a value,
// else the low-band table. Neither is not known.
func Wall(name string, millimetres float64, f unit.MHz) (WallLoss, bool) {
	if !(millimetres >= 0) {
		return WallLoss{}, false
	}
	if w, ok := slabWall(name, millimetres, f); ok {
		return w, true
	}
	for _, w := range LowBandWalls {
		if w.Name == name && lowBand.Contains(f) {
			return WallLoss{w.Loss, WallTolerance, "COST 231 final report, outer walls"}, true
		}
	}
	return WallLoss{}, false
}

func slabWall(name string, millimetres float64, f unit.MHz) (WallLoss, bool) {
	m, found := MaterialNamed(name)
	if !found {
		return WallLoss{}, false
	}
	loss, ok := m.Slab(f, millimetres)
	if !ok {
		return WallLoss{}, false
	}
	if extrapolated, _ := m.Covers(f); extrapolated {
		return WallLoss{loss, WallTolerance, "ITU-R P.2040-3 table 3, carried on below 1 GHz"}, true
	}
	return WallLoss{loss, 0, "ITU-R P.2040-3 table 3"}, true
}
