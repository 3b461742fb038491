package rf

import "driploop/catalog/unit"

// Conventions of certification for the coupling between phone and server antenna.
const (
	BuildingPhoneMetres = 2.0   // phone to server antenna in a building (memory)
	VehiclePhoneMetres  = 0.457 // in a vehicle, 1.5 ft (read in a test report)

	polarizationLoss unit.DB = 3 // a phone held at 45 degrees, 3.01 dB rounded
)

// MSCL is the mobile station coupling loss of one server antenna, the least loss
// between a phone and the amplifier's server port: free space + 3 dB − (server gain
// − least loss of the leg). 47 CFR 20.21(e)(8)(i)(C)(1) names it; the formula is
// that of test laboratories (read in a test report of an in-vehicle amplifier). It
// is for radiating antennas; a cradle has its own coupling figure. f is the middle
// of the uplink for both directions.
func MSCL(f unit.MHz, metres float64, server, leastLeg unit.DB) (unit.DB, bool) {
	path, ok := FreeSpaceLoss(f, metres)
	if !ok {
		return 0, false
	}
	return known(float64(path + polarizationLoss - (server - leastLeg)))
}

// LeastCoupling is the coupling loss that counts of several antennas: the least.
func LeastCoupling(losses ...unit.DB) (unit.DB, bool) {
	if len(losses) == 0 {
		return 0, false
	}
	least := losses[0]
	for _, l := range losses[1:] {
		least = min(least, l) // NaN stays NaN
	}
	return known(float64(least))
}
