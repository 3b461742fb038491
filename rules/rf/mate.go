package rf

import (
	"math"

	"driploop/catalog/unit"
)

// PairLoss is the loss of one mated pair of connectors. A loss stated for one of
// the two halves is that of the pair; of two the greater counts. Without any it is
// 0.05·√(f/GHz) dB, what sound pairs measure (common practice, memory); planning
// tables of the 1990s allow 0.25 to 0.6 dB, which is corroded connectors.
func PairLoss(f unit.MHz, stated ...unit.DB) (unit.DB, bool) {
	if !positive(float64(f)) {
		return 0, false
	}
	if len(stated) == 0 {
		return known(0.05 * math.Sqrt(float64(f)/1000))
	}
	var greater unit.DB
	for _, s := range stated {
		if !(s >= 0) {
			return 0, false
		}
		greater = max(greater, s)
	}
	return known(float64(greater))
}
