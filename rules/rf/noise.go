package rf

import "driploop/catalog/unit"

// NoiseDensity is kT in dBm per hertz at a temperature in kelvin; −173.975 at
// 290 K, often rounded to −174. Calculated with the exact constant of the SI.
func NoiseDensity(kelvin float64) (unit.DBm, bool) {
	if !positive(kelvin) {
		return unit.DBm{}, false
	}
	return knownLevel(unit.DBmOfWatt(boltzmann * kelvin))
}

// ThermalNoise is kT0·B, the noise of a matched source at 290 K in a bandwidth.
func ThermalNoise(width unit.MHz) (unit.DBm, bool) {
	if !positive(float64(width)) {
		return unit.DBm{}, false
	}
	return knownLevel(unit.DBmOfWatt(boltzmann * RoomKelvin * float64(width) * 1e6))
}

// PortNoise is the noise that a chain puts out in 1 MHz: kT0 + NF + gain. A loss
// ahead of it raises the noise figure by what it takes off the gain, and so
// cancels.
func PortNoise(chain Stage) (unit.DBm, bool) {
	floor, ok := ThermalNoise(1)
	if !ok || !(chain.NF >= 0) {
		return unit.DBm{}, false
	}
	return knownLevel(floor.Plus(chain.NF + chain.Gain))
}

// NoiseAtBase is that noise when it arrives at a base station: through the feed,
// out of the donor antenna, over the path.
func NoiseAtBase(port unit.DBm, donor, feed, path unit.DB) (unit.DBm, bool) {
	return knownLevel(port.Plus(donor - feed - path))
}

// BaseFloor is the noise of a base station's own receiver in 1 MHz.
func BaseFloor(nf unit.DB) (unit.DBm, bool) { return PortNoise(Stage{NF: nf}) }

// Desense is how far outside noise raises a receiver's floor.
func Desense(outside, floor unit.DBm) (unit.DB, bool) {
	return known(float64(unit.PowerSum(outside, floor).Minus(floor)))
}
