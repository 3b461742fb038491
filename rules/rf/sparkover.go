package rf

import (
	"math"

	"driploop/catalog/unit"
)

// PeakVoltage is the greatest voltage that a carrier puts on a line, in volts:
// √(2·P·Z)·(1+Γ), with Γ from the standing wave ratio of what ends the line.
// Carriers that meet in phase add by voltage. Calculated from the definitions.
func PeakVoltage(out unit.DBm, ohm, vswr float64) (float64, bool) {
	gamma, ok := Gamma(vswr)
	if !ok || !positive(ohm) {
		return 0, false
	}
	return figure(math.Sqrt(2*out.Watt()*ohm) * (1 + gamma))
}

// OpenEnd is the factor by which the peak voltage grows at most, on a line whose
// end reflects everything. Calculated.
const OpenEnd = 2.0
