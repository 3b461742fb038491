package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Coax is the cross-section of a coaxial line: what its cable tables should follow
// from. It gives tables a second opinion; no table is made from it.
type Coax struct {
	Outer, Inner float64 // diameters that face one another, mm; Inner of a solid centre
	Permittivity float64 // relative, of what lies between
}

func (c Coax) valid() bool {
	return positive(c.Inner) && finite(c.Outer) && c.Outer > c.Inner && c.Permittivity >= 1 && finite(c.Permittivity)
}

// Impedance is (59.9585/√εr)·ln(D/d) ohms. Calculated; the handbook's 138·log10
// differs by 0.04 %.
func (c Coax) Impedance() (float64, bool) {
	if !c.valid() {
		return 0, false
	}
	return figure(59.9585 / math.Sqrt(c.Permittivity) * math.Log(c.Outer/c.Inner))
}

// Cutoff is where the first waveguide mode, TE11, can travel as well:
// 2c/(π(D+d)√εr), an approximation good to a few per cent (calculator page, read).
func (c Coax) Cutoff() (unit.MHz, bool) {
	if !c.valid() {
		return 0, false
	}
	v, ok := figure(2 * lightSpeed / 1000 / (math.Pi * (c.Outer + c.Inner) * math.Sqrt(c.Permittivity)))
	return unit.MHz(v), ok
}

// ConductorLoss is the skin-effect loss in dB per metre of conductors of one
// conductivity in S/m: 8.6859·Rs/(4πZ0)·(1/r + 1/R), Rs = √(πfµ0/σ) (standard
// texts, memory). Braids and strands lose more.
func (c Coax) ConductorLoss(f unit.MHz, conductivity float64) (unit.DB, bool) {
	z, ok := c.Impedance()
	if !ok || !positive(float64(f)) || !positive(conductivity) {
		return 0, false
	}
	const mu0 = 4e-7 * math.Pi
	rs := math.Sqrt(math.Pi * float64(f) * 1e6 * mu0 / conductivity)
	return known(neper * rs / (4 * math.Pi * z) * 2000 * (1/c.Inner + 1/c.Outer))
}

// DielectricLoss is the loss in the dielectric in dB per metre:
// 8.6859·πf·√εr·tan δ/c (standard texts, memory).
func (c Coax) DielectricLoss(f unit.MHz, tanDelta float64) (unit.DB, bool) {
	if !c.valid() || !positive(float64(f)) || !(tanDelta >= 0) {
		return 0, false
	}
	return known(neper * math.Pi * float64(f) * 1e6 * math.Sqrt(c.Permittivity) * tanDelta / lightSpeed)
}

// neper is one neper in decibels.
const neper = 20 / math.Ln10
