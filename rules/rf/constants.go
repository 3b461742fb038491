package rf

import (
	"math"

	"driploop/catalog/unit"
)

const (
	lightSpeed = 299792458.0  // m/s, exact (SI)
	boltzmann  = 1.380649e-23 // J/K, exact (SI)

	// RoomKelvin is the source temperature that noise figures refer to (definition
	// of the noise factor, IEEE; memory).
	RoomKelvin = 290.0

	// DipoleGain is what a half-wave dipole gains over an isotropic antenna. The
	// exact figure is 2.1509 dB; limits and data sheets use 2.15, the factor 1.64 (common
	// practice).
	DipoleGain unit.DB = 2.15
)

// Wavelength is the length of a wave in air, in metres.
func Wavelength(f unit.MHz) (float64, bool) {
	if !positive(float64(f)) {
		return 0, false
	}
	return figure(lightSpeed / (float64(f) * 1e6))
}

// QuarterWave is a quarter of the wavelength in a medium of the given velocity
// factor (1 in air, 0.66 in solid polyethylene), in metres. Velocity factors lie
// above 0 and up to 1.
func QuarterWave(f unit.MHz, velocity float64) (float64, bool) {
	wave, ok := Wavelength(f)
	if !ok || !(velocity > 0 && velocity <= 1) {
		return 0, false
	}
	return wave * velocity / 4, true
}

// DBiFromDBd turns a gain over a dipole into a gain over an isotropic antenna.
func DBiFromDBd(g unit.DB) unit.DB { return g + DipoleGain }

// EIRPFromERP turns a power radiated relative to a dipole into one relative to an
// isotropic antenna.
func EIRPFromERP(erp unit.DBm) unit.DBm { return erp.Plus(DipoleGain) }

// DBuV is the voltage of a level across a resistance, in dB over 1 µV:
// 20·log10(√(P·R)/1 µV), so 106.99 over dBm in 50 ohms. Calculated.
func DBuV(level unit.DBm, ohm float64) (float64, bool) {
	if !positive(ohm) {
		return 0, false
	}
	return figure(level.Value() + 90 + 10*math.Log10(ohm))
}
