package unit_test

import (
	"math"
	"strings"
	"testing"

	"driploop/catalog/unit"
)

func TestParseLength(t *testing.T) {
	for text, want := range map[string]unit.MM{
		"18.5 m":       18500,
		"25 mm":        25,
		"2.5 cm":       25,
		"60 ft":        18288, // 60 × 304.8 mm, the international foot of 1959
		"8 in":         203,   // 203.2 mm
		"0 m":          0,
		"-0 m":         0,
		"0.4 mm":       0,
		"0.5 mm":       1, // half goes up
		"0.5 in":       13,
		" 3  m ":       3000,
		".5 m":         500,
		"100000 m":     100_000_000, // the greatest
		"500 ft":       152400,
		"0.3 m":        300, // not 299, whatever 0.3 is in binary
		"1.005 m":      1005,
		"328083.98 ft": 99_999_997,
	} {
		if got, err := unit.ParseLength(text); err != nil || got != want {
			t.Errorf("%q is %d mm (%v), want %d", text, got, err, want)
		}
	}
}

func TestParseLengthRefuses(t *testing.T) {
	for text, want := range map[string]string{
		"18.5":          "needs a number, a space and a unit",
		"18.5m":         "needs a number, a space and a unit",
		"18.5 ":         "needs a number, a space and a unit",
		"":              "needs a number, a space and a unit",
		"-1 m":          "between 0 and 100 km",
		"-0.001 mm":     "between 0 and 100 km",
		"100000.1 m":    "between 0 and 100 km",
		"1 km":          `unit "km" is not one of`,
		"1 M":           `unit "M" is not one of`,
		"1 m m":         `unit "m m" is not one of`,
		"1e3 m":         "no plain decimal number",
		"0x10 m":        "no plain decimal number",
		"1_000 m":       "no plain decimal number",
		"+1 m":          "no plain decimal number",
		"1,5 m":         "no plain decimal number",
		"1.2.3 m":       "no plain decimal number",
		"1-2 m":         "no plain decimal number",
		"- m":           "no plain decimal number",
		". m":           "no plain decimal number",
		"inf m":         "no plain decimal number",
		"nan m":         "no plain decimal number",
		"٣ m":           "no plain decimal number",
		digits() + " m": "no plain decimal number", // beyond any float
	} {
		if got, err := unit.ParseLength(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%.40q is %d mm (%v), want an error with %q", text, got, err, want)
		}
	}
}

func digits() string { return strings.Repeat("9", 400) }

func TestLengthPrints(t *testing.T) {
	for l, want := range map[unit.MM]string{
		0: "0 m", 1: "0.001 m", 300: "0.3 m", 18500: "18.5 m", 152400: "152.4 m", 100_000_000: "100000 m", -250: "-0.25 m",
	} {
		if got := l.String(); got != want {
			t.Errorf("%d mm prints %q, want %q", int64(l), got, want)
		}
	}
	if got := unit.MM(18288).Feet(); math.Abs(got-60) > 1e-12 {
		t.Errorf("18288 mm are %v ft, want 60", got)
	}
	if got := unit.MM(18288).Metres(); got != 18.288 {
		t.Errorf("18288 mm are %v m, want 18.288", got)
	}
}

// What is printed reads back as the same length.
func TestLengthReadsBack(t *testing.T) {
	for _, l := range []unit.MM{0, 1, 7, 999, 1000, 1001, 12345, 99_999_999, 100_000_000} {
		if got, err := unit.ParseLength(l.String()); err != nil || got != l {
			t.Errorf("%d mm prints %q, which reads as %d (%v)", int64(l), l, int64(got), err)
		}
	}
}

func TestParseTemperature(t *testing.T) {
	for text, want := range map[string]float64{
		"45 C": 45, "-15 C": -15, "45 °C": 45, "0 C": 0,
		"113 F": 45, "-40 F": -40, "32 F": 0, "68 °F": 20, // (F − 32) · 5/9
		"-90 C": -90, "150 C": 150, "302 F": 150,
	} {
		got, err := unit.ParseTemperature(text)
		if err != nil || math.Abs(float64(got)-want) > 1e-12 {
			t.Errorf("%q is %v (%v), want %v", text, float64(got), err, want)
		}
	}
	for text, want := range map[string]string{
		"-90.1 C": "between -90 C and 150 C", "150.1 C": "between -90 C and 150 C", "303 F": "between -90 C and 150 C",
		"300 K": `unit "K"`, "45 c": `unit "c"`, "45C": "a space", "−15 C": "no plain decimal number",
	} {
		if got, err := unit.ParseTemperature(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is %v (%v), want an error with %q", text, float64(got), err, want)
		}
	}
	for c, want := range map[unit.Celsius]string{45: "45 °C", -15: "−15 °C", 37.77: "37.8 °C", -0.04: "0 °C", -0.05: "−0.1 °C", 0.1: "0.1 °C"} {
		if got := c.String(); got != want {
			t.Errorf("%v prints %q, want %q", float64(c), got, want)
		}
	}
}

func TestParseSpeed(t *testing.T) {
	for text, want := range map[string]float64{
		"44 m/s": 44, "0 m/s": 0, "150 m/s": 150,
		"115 mph":  51.4096, // 0.44704 m/s to the mile an hour, exact (NIST SP 811, appendix B.8; memory)
		"160 km/h": 400.0 / 9,
		"540 km/h": 150,
	} {
		if got, err := unit.ParseSpeed(text); err != nil || math.Abs(float64(got)-want) > 1e-9 {
			t.Errorf("%q is %v (%v), want %v", text, float64(got), err, want)
		}
	}
	for text, want := range map[string]string{
		"-1 m/s": "between 0 and 150", "150.1 m/s": "between 0 and 150", "336 mph": "between 0 and 150",
		"40 kn": `unit "kn"`, "40 kmh": `unit "kmh"`, "44": "a space",
	} {
		if got, err := unit.ParseSpeed(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is %v (%v), want an error with %q", text, float64(got), err, want)
		}
	}
}
