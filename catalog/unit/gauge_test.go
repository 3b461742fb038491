package unit_test

import (
	"math"
	"strings"
	"testing"

	"driploop/catalog/unit"
)

// The areas are those of ASTM B258 table 1, as handbooks print them (memory), to
// the digits printed.
func TestAWGArea(t *testing.T) {
	for _, c := range []struct {
		gauge     int
		area, tol float64 // mm²
	}{
		{-3, 107.2, 0.05}, // 4/0
		{-2, 85.0, 0.05},  // 3/0
		{-1, 67.4, 0.05},  // 2/0
		{0, 53.5, 0.05},   // 1/0
		{1, 42.4, 0.05},
		{2, 33.6, 0.05},
		{4, 21.2, 0.05},
		{6, 13.3, 0.05},
		{8, 8.37, 0.005},
		{10, 5.26, 0.005},
		{12, 3.31, 0.005},
		{14, 2.08, 0.005},
		{24, 0.205, 0.0005},
		{36, 0.0127, 0.00005}, // 0.005 in
	} {
		if got := unit.AWGArea(c.gauge); math.Abs(got-c.area) > c.tol {
			t.Errorf("AWG %d is %v mm², want %v", c.gauge, got, c.area)
		}
	}
	if got, want := unit.AWGArea(36), math.Pi/4*0.127*0.127; math.Abs(got-want) > 1e-15 {
		t.Errorf("AWG 36 is %v mm², want a diameter of 0.005 in: %v", got, want)
	}
}

func TestParseGauge(t *testing.T) {
	for text, want := range map[string]unit.Gauge{
		"10 AWG":     {MM2: unit.AWGArea(10), Written: "10 AWG"},
		" 10  AWG ":  {MM2: unit.AWGArea(10), Written: "10 AWG"},
		"0 AWG":      {MM2: unit.AWGArea(0), Written: "0 AWG"},
		"40 AWG":     {MM2: unit.AWGArea(40), Written: "40 AWG"},
		"1/0 AWG":    {MM2: unit.AWGArea(0), Written: "1/0 AWG"},
		"2/0 AWG":    {MM2: unit.AWGArea(-1), Written: "2/0 AWG"},
		"4/0 AWG":    {MM2: unit.AWGArea(-3), Written: "4/0 AWG"},
		"16 mm2":     {MM2: 16, Written: "16 mm2"},
		"2.5 mm²":    {MM2: 2.5, Written: "2.5 mm2"},
		"1000 mm2":   {MM2: 1000, Written: "1000 mm2"},
		"0.0001 mm2": {MM2: 0.0001, Written: "0.0001 mm2"},
	} {
		if got, err := unit.ParseGauge(text); err != nil || got != want {
			t.Errorf("%q is %+v (%v), want %+v", text, got, err, want)
		}
	}
	if g, _ := unit.ParseGauge("6 AWG"); g.String() != "6 AWG" {
		t.Errorf("6 AWG prints %q", g)
	}
}

// A thicker conductor has a smaller number; nothing may compare by the number.
func TestGaugesOrderByArea(t *testing.T) {
	order := []string{"40 AWG", "16 AWG", "10 AWG", "6 mm2", "6 AWG", "16 mm2", "4 AWG", "0 AWG", "2/0 AWG", "3/0 AWG", "4/0 AWG", "120 mm2"}
	last := 0.0
	for _, text := range order {
		g, err := unit.ParseGauge(text)
		if err != nil || g.MM2 <= last {
			t.Errorf("%s is %v mm² (%v), want more than %v", text, g.MM2, err, last)
		}
		last = g.MM2
	}
}

func TestParseGaugeRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"10AWG":       "is written",
		"10":          "is written",
		"":            "is written",
		"10 awg":      "AWG or mm2",
		"10 sqmm":     "AWG or mm2",
		"41 AWG":      "4/0 over 0 to 40",
		"-1 AWG":      "4/0 over 0 to 40",
		"-0 AWG":      "4/0 over 0 to 40",
		"+6 AWG":      "4/0 over 0 to 40",
		"06 AWG":      "4/0 over 0 to 40",
		"6.5 AWG":     "4/0 over 0 to 40",
		"5/0 AWG":     "1/0 to 4/0",
		"0/0 AWG":     "1/0 to 4/0",
		"+2/0 AWG":    "1/0 to 4/0",
		"02/0 AWG":    "1/0 to 4/0",
		"/0 AWG":      "1/0 to 4/0",
		"00 AWG":      "written 2/0", // two aught, and not 0
		"000 AWG":     "written 3/0",
		"0000 AWG":    "written 4/0",
		"00000 AWG":   "4/0 over 0 to 40",
		"0 mm2":       "above 0 and up to 1000",
		"-1 mm2":      "above 0 and up to 1000",
		"1000.01 mm2": "above 0 and up to 1000",
		"1e2 mm2":     "no plain decimal number",
	} {
		if got, err := unit.ParseGauge(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is %+v (%v), want an error with %q", text, got, err, want)
		}
	}
}
