package rf

import (
	"math"
	"math/cmplx"

	"driploop/catalog/unit"
)

// Material is a row of ITU-R P.2040: relative permittivity a·f^b and conductivity
// c·f^d in S/m, f in GHz.
type Material struct {
	Name       string
	a, b, c, d float64
	Valid      unit.Span
}

// P2040Materials is table 3 of ITU-R P.2040-3 (08/2023), up to 100 GHz (read in an
// open implementation; P.2040-1 had other figures for several rows).
var P2040Materials = []Material{
	{"concrete", 5.24, 0, 0.0462, 0.7822, gigahertz(1, 100)},
	{"brick", 3.91, 0, 0.0238, 0.16, gigahertz(1, 40)},
	{"plasterboard", 2.73, 0, 0.0085, 0.9395, gigahertz(1, 100)},
	{"wood", 1.99, 0, 0.0047, 1.0718, gigahertz(0.001, 100)},
	{"glass", 6.31, 0, 0.0036, 1.3394, gigahertz(0.1, 100)},
	{"ceiling board", 1.48, 0, 0.0011, 1.0750, gigahertz(1, 100)},
	{"chipboard", 2.58, 0, 0.0217, 0.78, gigahertz(1, 100)},
	{"plywood", 2.71, 0, 0.33, 0, gigahertz(1, 40)},
	{"marble", 7.074, 0, 0.0055, 0.9262, gigahertz(1, 60)},
	{"floorboard", 3.66, 0, 0.0044, 1.3515, gigahertz(50, 100)},
	{"metal", 1, 0, 1e7, 0, gigahertz(1, 100)},
	{"very dry ground", 3, 0, 0.00015, 2.52, gigahertz(1, 10)},
	{"medium dry ground", 15, -0.1, 0.035, 1.63, gigahertz(1, 10)},
	{"wet ground", 30, -0.4, 0.15, 1.30, gigahertz(1, 10)},
}

func gigahertz(lo, hi unit.MHz) unit.Span { return unit.Span{Lo: lo * 1000, Hi: hi * 1000} }

const (
	// extrapolateFrom is how far below 1 GHz a row that starts there is carried on:
	// to the lowest cellular bands (common practice).
	extrapolateFrom unit.MHz = 400

	// mostThroughSlab is the loss from which a slab has no figure: what arrives
	// then came round it, through doors and gaps (common practice).
	mostThroughSlab unit.DB = 100
)

// MaterialNamed finds a row by its name.
func MaterialNamed(name string) (Material, bool) {
	for _, m := range P2040Materials {
		if m.Name == name {
			return m, true
		}
	}
	return Material{}, false
}

// Covers reports whether the row has a value at f, and whether that is carried on
// below the row's own validity of 1 GHz. Such a value is good to WallTolerance.
func (m Material) Covers(f unit.MHz) (extrapolated, ok bool) {
	if m.Valid.Contains(f) {
		return false, true
	}
	low := m.Valid.Lo == 1000 && f >= extrapolateFrom && f < 1000
	return low, low
}

// Permittivity is the relative permittivity at f.
func (m Material) Permittivity(f unit.MHz) (float64, bool) { return m.power(f, m.a, m.b) }

// Conductivity is the conductivity at f in S/m.
func (m Material) Conductivity(f unit.MHz) (float64, bool) { return m.power(f, m.c, m.d) }

func (m Material) power(f unit.MHz, factor, exponent float64) (float64, bool) {
	if _, ok := m.Covers(f); !ok {
		return 0, false
	}
	return figure(factor * math.Pow(float64(f)/1000, exponent))
}

// LossPerMetre is the loss inside a material that is a good dielectric,
// 1636·σ/√εr dB per metre, ITU-R P.2040-3, 2.1 (read).
func (m Material) LossPerMetre(f unit.MHz) (unit.DB, bool) {
	epsilon, ok1 := m.Permittivity(f)
	sigma, ok2 := m.Conductivity(f)
	if !ok1 || !ok2 {
		return 0, false
	}
	return known(1636 * sigma / math.Sqrt(epsilon))
}

// Slab is the loss through a single layer in air at normal incidence with all its
// inner reflections, so that it ripples with frequency: r = (1−√η)/(1+√η),
// q = 2πd√η/λ, T = (1−r²)e^(−jq)/(1−r²e^(−2jq)), loss −20·log10 |T|, where
// η = εr − j·17.98·σ/f, ITU-R P.2040-3, 2.2.2.2 (memory). Thickness in millimetres.
func (m Material) Slab(f unit.MHz, millimetres float64) (unit.DB, bool) {
	epsilon, ok1 := m.Permittivity(f)
	sigma, ok2 := m.Conductivity(f)
	wave, ok3 := Wavelength(f)
	if !ok1 || !ok2 || !ok3 || !positive(millimetres) {
		return 0, false
	}
	root := cmplx.Sqrt(complex(epsilon, -17.98*sigma/(float64(f)/1000)))
	r := (1 - root) / (1 + root)
	q := complex(2*math.Pi*millimetres/1000/wave, 0) * root
	through := (1 - r*r) * cmplx.Exp(-1i*q) / (1 - r*r*cmplx.Exp(-2i*q))
	loss, ok := known(-20 * math.Log10(cmplx.Abs(through)))
	if !ok || loss > mostThroughSlab {
		return 0, false
	}
	return max(0, loss), true
}
