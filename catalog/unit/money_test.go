package unit_test

import (
	"strings"
	"testing"

	"driploop/catalog/unit"
)

func TestParseMoney(t *testing.T) {
	for text, want := range map[string]unit.Money{
		"318.00": 3_180_000, "318": 3_180_000, "0": 0, "0.0125": 125, "2.95": 29_500, "0.1": 1000, "0.0001": 1,
		"007.5": 75_000, "999999999999.9999": 9_999_999_999_999_999,
	} {
		if got, err := unit.ParseMoney(text); err != nil || got != want {
			t.Errorf("%q is %d (%v), want %d", text, int64(got), err, int64(want))
		}
	}
	for text, want := range map[string]string{
		"":               "at most four decimals",
		".5":             "at most four decimals",
		"5.":             "at most four decimals",
		"1.00001":        "at most four decimals",
		"1.2.3":          "plain digits",
		"-1.00":          "plain digits",
		"+1":             "plain digits",
		"1,000.00":       "plain digits",
		"1 000":          "plain digits",
		"12e3":           "plain digits",
		"$5":             "plain digits",
		"٣":              "plain digits",
		"1234567890123":  "at most four decimals",
		"9999999999999.": "at most four decimals",
	} {
		if got, err := unit.ParseMoney(text); err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q is %d (%v), want an error with %q", text, int64(got), err, want)
		}
	}
}

func TestMoneyRoundsHalfUp(t *testing.T) {
	for amount, want := range map[string]string{
		"0.0049": "0.00", "0.0050": "0.01", "0.0051": "0.01", "0.0149": "0.01", "0.0150": "0.02",
		"2.3449": "2.34", "2.3450": "2.35", "1.995": "2.00", "318": "318.00",
		"0.0250": "0.03", // up, and not to the even digit
	} {
		m, err := unit.ParseMoney(amount)
		if got := m.Cents().String(); err != nil || got != want {
			t.Errorf("%s rounds to %s (%v), want %s", amount, got, err, want)
		}
	}
}

func TestMoneyPrints(t *testing.T) {
	for m, want := range map[unit.Money]string{
		0: "0.00", 1: "0.0001", 99: "0.0099", 100: "0.01", 125: "0.0125", 10_000: "1.00", 12_500: "1.25",
		3_180_000: "318.00", 10_050: "1.0050", -100: "-0.01", -12_345: "-1.2345", -1: "-0.0001",
	} {
		if got := m.String(); got != want {
			t.Errorf("%d prints %q, want %q", int64(m), got, want)
		}
		if m < 0 {
			continue
		}
		if back, err := unit.ParseMoney(m.String()); err != nil || back != m {
			t.Errorf("%q reads back as %d (%v), want %d", m, int64(back), err, int64(m))
		}
	}
}
