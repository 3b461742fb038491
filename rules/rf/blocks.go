package rf

import "driploop/catalog/unit"

// lteBlocks is 3GPP TS 36.101 table 5.6-1 (memory; several rows read): resource
// blocks by channel bandwidth in MHz.
var lteBlocks = map[unit.MHz]int{1.4: 6, 3: 15, 5: 25, 10: 50, 15: 75, 20: 100}

// nrBlocks is 3GPP TS 38.101-1 table 5.3.2-1, Release 18 (the same rows as
// TS 38.104 V18.9.0; read in open implementations): resource blocks by subcarrier
// spacing in kHz and channel bandwidth in MHz.
var nrBlocks = map[int]map[unit.MHz]int{
	15: {3: 15, 5: 25, 10: 52, 15: 79, 20: 106, 25: 133, 30: 160, 35: 188, 40: 216, 45: 242, 50: 270},
	30: {5: 11, 10: 24, 15: 38, 20: 51, 25: 65, 30: 78, 35: 92, 40: 106, 45: 119, 50: 133,
		60: 162, 70: 189, 80: 217, 90: 245, 100: 273},
	60: {10: 11, 15: 18, 20: 24, 25: 31, 30: 38, 35: 44, 40: 51, 45: 58, 50: 65,
		60: 79, 70: 93, 80: 107, 90: 121, 100: 135},
}

// LTEBlocks is the number of resource blocks of an LTE channel, N_RB; other widths
// are not known.
func LTEBlocks(width unit.MHz) (int, bool) {
	n, ok := lteBlocks[width]
	return n, ok
}

// NRBlocks is the number of resource blocks of an NR channel of frequency range 1
// at a subcarrier spacing of 15, 30 or 60 kHz; other widths are not known.
func NRBlocks(width unit.MHz, scsKHz int) (int, bool) {
	n, ok := nrBlocks[scsKHz][width]
	return n, ok
}

// subcarriers is how many resource elements a block has at one time,
// TS 36.211 6.2.3 and TS 38.211 4.4.4.1.
const subcarriers = 12

// RSSI is the power of a whole channel whose every resource element is as strong
// as the reference signal: RSRP + 10·log10(12·N_RB). It is a fully loaded cell
// without noise, the upper bound; a typical hour is about 3 dB less (common
// practice). Calculated from the definitions in TS 36.214 5.1.1 and 5.1.3.
func RSSI(rsrp unit.DBm, blocks int) (unit.DBm, bool) {
	if blocks < 1 {
		return unit.DBm{}, false
	}
	return knownLevel(rsrp.Plus(unit.DB(decibels(float64(subcarriers * blocks)))))
}

// RSRQ is N·RSRP/RSSI in dB, TS 36.214 5.1.3 (read).
func RSRQ(rsrp, rssi unit.DBm, blocks int) (unit.DB, bool) {
	if blocks < 1 {
		return 0, false
	}
	return known(decibels(float64(blocks)) + float64(rsrp.Minus(rssi)))
}
