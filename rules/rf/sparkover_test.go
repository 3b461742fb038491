package rf_test

import (
	"math"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// The figures were worked by hand from √(2·P·Z)·(1+Γ): 1, 10, 50 and 100 W on
// 50 ohm, and 50 W with a standing wave ratio of 1.5 (Γ = 0.2).
func TestPeakVoltage(t *testing.T) {
	for _, c := range []struct{ watt, ohm, vswr, volts float64 }{
		{1, 50, 1, 10.0},
		{10, 50, 1, 31.62},
		{50, 50, 1, 70.71},
		{100, 50, 1, 100.0},
		{50, 50, 1.5, 84.85},
		{1, 75, 1, 12.25},
	} {
		got, ok := rf.PeakVoltage(unit.DBmOfWatt(c.watt), c.ohm, c.vswr)
		if !ok || math.Abs(got-c.volts) > 0.01 {
			t.Errorf("%v W on %v ohm at %v: %v V, %v expected", c.watt, c.ohm, c.vswr, got, c.volts)
		}
	}
}

// The largest power of one carrier that a tube of a nominal voltage stands with
// 20 % tolerance and a factor of 1.5, as tables print it: 23, 150, 348, 1024 W.
func TestPeakVoltageAgainstTubes(t *testing.T) {
	for nominal, watt := range map[float64]float64{90: 23, 230: 150, 350: 348, 600: 1024} {
		low := 0.8 * nominal
		if v, ok := rf.PeakVoltage(unit.DBmOfWatt(watt), 50, 1); !ok || math.Abs(1.5*v/low-1) > 0.005 {
			t.Errorf("%v V tube: %v W make %v V, %v V expected", nominal, watt, 1.5*v, low)
		}
	}
}

func TestPeakVoltageRefuses(t *testing.T) {
	for _, c := range []struct {
		out       unit.DBm
		ohm, vswr float64
	}{
		{unit.DBmOf(30), 0, 1},
		{unit.DBmOf(30), 50, 0.9},
		{unit.DBmOf(30), 50, math.Inf(1)},
		{unit.DBmOf(math.NaN()), 50, 1},
	} {
		if v, ok := rf.PeakVoltage(c.out, c.ohm, c.vswr); ok {
			t.Errorf("%v on %v ohm at %v gave %v V", c.out, c.ohm, c.vswr, v)
		}
	}
	// No real standing wave ratio reaches the open end.
	v, _ := rf.PeakVoltage(unit.DBmOf(30), 50, 1e9)
	if most := 10 * rf.OpenEnd; v > most || v < most-0.001 {
		t.Errorf("a line that is as good as open has %v V, %v expected", v, most)
	}
}
