package rf

import (
	"math"

	"driploop/catalog/unit"
)

// FreeSpaceLoss is the basic transmission loss of free space between isotropic
// antennas, 20·log10(4πd/λ): ITU-R P.525-5 (11/2024), 2.2 (formula read, section
// memory), with the exact constant, −27.5522 dB at metres and MHz, where the text
// rounds to 32.4 dB at kilometres.
// It holds in the far field; closer than λ/2π it is not known.
func FreeSpaceLoss(f unit.MHz, metres float64) (unit.DB, bool) {
	wave, ok := Wavelength(f)
	if !ok || !(metres >= wave/(2*math.Pi)) {
		return 0, false
	}
	return known(20 * math.Log10(4*math.Pi*metres/wave))
}

// PathLossTo is the loss between a base station and a 0 dBi antenna on site, from
// the power of a reference signal's resource element at the base station's antenna
// port with its gain, and the same signal as surveyed. Calculated.
func PathLossTo(reference, rsrp unit.DBm) (unit.DB, bool) {
	loss := reference.Minus(rsrp)
	if !(loss >= 0) {
		return 0, false
	}
	return known(float64(loss))
}
