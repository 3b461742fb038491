package elec

import "driploop/catalog/unit"

const (
	// CopperOhm is the resistivity of annealed copper at 20 °C in Ω·mm²/m. IEC
	// 60028, 1925; from memory, and equal to the copper tables that were read.
	CopperOhm = 1.0 / 58

	// CopperPerKelvin is how its resistance grows from 20 °C. IEC 60028, 1925;
	// from memory.
	CopperPerKelvin = 0.00393

	// Lay is how much more a stranded conductor has than a solid one of the same
	// metal: its wires run round, and so are longer. 2 % nominal after ASTM B8,
	// from memory.
	Lay = 1.02

	// CCA is the resistance of copper-clad aluminium wire with 10 % of copper over
	// that of copper. ASTM B566, class 10A; from memory.
	CCA = 1 / 0.63

	absoluteZero = -273.15
)

// flexible is the greatest resistance in Ω/km at 20 °C of plain flexible copper
// conductors by nominal area in mm². IEC 60228, class 5, edition 3 (2004); read in
// a copy of the table. A metric conductor is made to its resistance: its copper may
// be less than its name.
var flexible = []struct{ mm2, ohm float64 }{
	{0.5, 39.0}, {0.75, 26.0}, {1, 19.5}, {1.5, 13.3}, {2.5, 7.98}, {4, 4.95},
	{6, 3.30}, {10, 1.91}, {16, 1.21}, {25, 0.780}, {35, 0.554},
}

// Solid is the resistance of a solid copper conductor, Ω/km: one way. Calculated
// from CopperOhm, linear in the temperature from 20 °C.
func Solid(mm2, celsius float64) (ohmPerKm float64, ok bool) {
	if !positive(mm2) || !(celsius >= absoluteZero && celsius < 1000) {
		return 0, false
	}
	return CopperOhm * 1000 / mm2 * grown(celsius), true
}

// Stranded is the resistance of a stranded copper conductor, Ω/km: one way. A
// nominal metric area has the greatest resistance of its class (IEC 60228 class 5),
// any other, and so every AWG, that of its metal with the lay.
func Stranded(mm2, celsius float64) (ohmPerKm float64, ok bool) {
	r, ok := Solid(mm2, celsius)
	if !ok {
		return 0, false
	}
	for _, f := range flexible {
		if f.mm2 == mm2 {
			return f.ohm * grown(celsius), true
		}
	}
	return r * Lay, true
}

func grown(celsius float64) float64 { return 1 + CopperPerKelvin*(celsius-20) }

// protection is the greatest fuse or breaker ahead of copper conductors, by gauge,
// thickest first. NFPA 70 (NEC), 2020: 18 to 10 AWG are 240.4(D)(1) to (7), read in
// a copy; 8 to 4 AWG are the 60 °C column of table 310.16, from memory.
var protection = []struct {
	awg  int
	amps float64
}{
	{4, 70}, {6, 55}, {8, 40}, {10, 30}, {12, 20}, {14, 15}, {16, 10}, {18, 7},
}

// FuseAmps is the greatest fuse ahead of a copper conductor, in A. An area between
// two gauges counts as the thinner one; below 18 AWG there is no figure.
func FuseAmps(mm2 float64) (float64, bool) {
	if !positive(mm2) {
		return 0, false
	}
	for _, p := range protection {
		if mm2 >= unit.AWGArea(p.awg) {
			return p.amps, true
		}
	}
	return 0, false
}
