package unit_test

import (
	"math"
	"testing"

	"driploop/catalog/unit"
)

func near(a, b float64) bool { return math.Abs(a-b) < 1e-12*math.Max(1, math.Abs(b)) }

func TestLevels(t *testing.T) {
	l := unit.DBmOf(-50)
	if got := l.Plus(63.5).Value(); got != 13.5 {
		t.Errorf("-50 dBm and 63.5 dB are %v dBm, want 13.5", got)
	}
	if got := l.Plus(-3).Value(); got != -53 {
		t.Errorf("-50 dBm after 3 dB of loss are %v dBm, want -53", got)
	}
	if got := unit.DBmOf(17).Minus(unit.DBmOf(-4)); got != 21 {
		t.Errorf("17 dBm stand %v dB above -4 dBm, want 21", got)
	}
	if !unit.DBmOf(-51).Below(l) || l.Below(l) || unit.DBmOf(-49).Below(l) {
		t.Error("only -51 dBm lie below -50 dBm")
	}
}

func TestWatts(t *testing.T) {
	for dbm, watt := range map[float64]float64{30: 1, 0: 0.001, 33: math.Pow(10, 0.3), 20: 0.1, -30: 1e-6} {
		if got := unit.DBmOf(dbm).Watt(); !near(got, watt) {
			t.Errorf("%v dBm are %v W, want %v", dbm, got, watt)
		}
		if got := unit.DBmOfWatt(watt).Value(); !near(got, dbm) {
			t.Errorf("%v W are %v dBm, want %v", watt, got, dbm)
		}
	}
	if got := unit.DBmOfWatt(0).Value(); !math.IsInf(got, -1) {
		t.Errorf("0 W are %v dBm, want minus infinity", got)
	}
}

func TestPowerSum(t *testing.T) {
	level := unit.DBmOf
	for _, c := range []struct {
		name   string
		levels []unit.DBm
		want   float64
	}{
		{"one is itself", []unit.DBm{level(-47.3)}, -47.3},
		{"two equal ones add 3 dB", []unit.DBm{level(-50), level(-50)}, -50 + 10*math.Log10(2)},
		{"ten equal ones add 10 dB", []unit.DBm{level(3), level(3), level(3), level(3), level(3), level(3), level(3), level(3), level(3), level(3)}, 13},
		{"0 and 10 dBm are 11 mW", []unit.DBm{level(0), level(10)}, 10 * math.Log10(11)},
		{"the order does not count", []unit.DBm{level(10), level(0)}, 10 * math.Log10(11)},
		{"no power adds nothing", []unit.DBm{level(-90), level(math.Inf(-1))}, -90},
		{"a far weaker one hardly counts", []unit.DBm{level(0), level(-200)}, 0},
	} {
		if got := unit.PowerSum(c.levels...).Value(); !near(got, c.want) {
			t.Errorf("%s: %v dBm, want %v", c.name, got, c.want)
		}
	}
	if got := unit.PowerSum().Value(); !math.IsInf(got, -1) {
		t.Errorf("no level at all sums to %v dBm, want minus infinity", got)
	}
	if got := unit.PowerSum(unit.DBmOf(math.NaN()), unit.DBmOf(0)).Value(); !math.IsNaN(got) {
		t.Errorf("a level that is no number sums to %v dBm; it must not vanish", got)
	}
}

func TestFixed(t *testing.T) {
	for _, c := range []struct {
		v        float64
		decimals int
		want     string
	}{
		{0, 1, "0.0"},
		{math.Copysign(0, -1), 1, "0.0"}, // no negative zero
		{-0.04, 1, "0.0"},
		{-0.4, 0, "0"},
		{-0.06, 1, "−0.1"}, // U+2212, the minus sign
		{-12.34, 1, "−12.3"},
		{12.35, 1, "12.3"}, // 12.35 lies below its decimal in binary
		{12.36, 1, "12.4"},
		{-100, 0, "−100"},
		{-100.5, 3, "−100.500"},
		{9.96, 1, "10.0"},
		{math.Inf(-1), 1, "−Inf"},
	} {
		if got := unit.Fixed(c.v, c.decimals); got != c.want {
			t.Errorf("%v with %d decimals prints %q, want %q", c.v, c.decimals, got, c.want)
		}
	}
}

func TestLevelsPrint(t *testing.T) {
	for got, want := range map[string]string{
		unit.DBmOf(-101).String():  "−101.0 dBm",
		unit.DBmOf(-0.01).String(): "0.0 dBm",
		unit.DB(63.5).String():     "63.5 dB",
		unit.DB(-0.25).String():    "−0.2 dB", // a tie goes to the even digit
	} {
		if got != want {
			t.Errorf("printed %q, want %q", got, want)
		}
	}
}
