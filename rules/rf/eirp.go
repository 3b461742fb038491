package rf

import "driploop/catalog/unit"

// Radiated is the power radiated behind a line, relative to an isotropic antenna.
// Limits hold Most, which meets the least loss; reach counts on Least.
type Radiated struct{ Most, Nominal, Least unit.DBm }

// EIRP is out − loss + gain, by each of the three losses of the line. Calculated.
func EIRP(out unit.DBm, line Loss, gain unit.DB) (Radiated, bool) {
	most, ok1 := knownLevel(out.Plus(gain - line.Least))
	nominal, ok2 := knownLevel(out.Plus(gain - line.Nominal))
	least, ok3 := knownLevel(out.Plus(gain - line.Greatest))
	if !ok1 || !ok2 || !ok3 {
		return Radiated{}, false
	}
	return Radiated{most, nominal, least}, true
}

// Strongest is the highest of several levels: the EIRP of several servers is that
// of the strongest one, not their sum.
func Strongest(levels ...unit.DBm) (unit.DBm, bool) {
	if len(levels) == 0 {
		return unit.DBm{}, false
	}
	top := levels[0]
	for _, l := range levels[1:] {
		if !finite(l.Value()) {
			return unit.DBm{}, false
		}
		if top.Below(l) {
			top = l
		}
	}
	return knownLevel(top)
}

// GreatestGain is the most antenna gain that keeps an EIRP limit, when the output
// is shared equally among a number of antennas behind the same loss.
func GreatestGain(limit, out unit.DBm, loss unit.DB, antennas int) (unit.DB, bool) {
	share, ok := SplitLoss(antennas)
	if !ok {
		return 0, false
	}
	return known(float64(limit.Minus(out) + share + loss))
}
