package elec

import "math"

// Lead is a direct current line with a load at its end that takes a fixed power, as
// gear with a converter inside does: the less it gets, the more it draws.
type Lead struct {
	Volts float64 // at the source
	Ohm   float64 // out and back
	Watt  float64 // at the load
}

// Fed is what a lead comes to.
type Fed struct {
	Volts float64 // at the load
	Drop  float64 // V
	Amps  float64
	Watt  float64 // at the source: the load's and the lead's
}

// Feed solves V·(V₀−V)/R = P for the voltage at the load; of the two answers the
// greater is the one that gear comes up at. false where the lead can't carry the
// power at all: V₀² < 4·R·P. Calculated from Ohm's law.
func (l Lead) Feed() (Fed, bool) {
	if !positive(l.Volts) || !(l.Ohm >= 0) || !(l.Watt >= 0) || math.IsInf(l.Ohm, 0) || math.IsInf(l.Watt, 0) {
		return Fed{}, false
	}
	under := l.Volts*l.Volts - 4*l.Ohm*l.Watt
	if under < 0 {
		return Fed{}, false
	}
	v := (l.Volts + math.Sqrt(under)) / 2
	amps := l.Watt / v
	return Fed{Volts: v, Drop: amps * l.Ohm, Amps: amps, Watt: l.Volts * amps}, true
}

// Drop is the voltage that a lead takes at a fixed current: 2·L·R′·I, with R′ of
// one conductor in Ω/km and the length one way. Calculated from Ohm's law.
func Drop(metres, ohmPerKm, amps float64) (float64, bool) {
	ohm, ok := Loop(metres, ohmPerKm)
	if !ok || !(amps >= 0) || math.IsInf(amps, 0) {
		return 0, false
	}
	return ohm * amps, true
}

// Loop is the resistance out and back of a two-core line, Ω.
func Loop(metres, ohmPerKm float64) (float64, bool) {
	if !(metres >= 0) || math.IsInf(metres, 0) || !positive(ohmPerKm) {
		return 0, false
	}
	return 2 * metres * ohmPerKm / 1000, true
}
