package unit_test

import (
	"testing"
	"time"

	"driploop/catalog/unit"
)

func day(t *testing.T, s string) unit.Date {
	t.Helper()
	d, err := unit.ParseDate(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

func TestParseDate(t *testing.T) {
	if got, want := day(t, "2026-12-01"), (unit.Date{Year: 2026, Month: 12, Day: 1}); got != want {
		t.Errorf("read %v, want %v", got, want)
	}
	day(t, "2028-02-29")
	for _, text := range []string{"", "2026-12-32", "2026-02-29", "2026-13-01", "2026-00-01", "2026-12-00", "26-12-01", "2026-12-1",
		"2026/12/01", "2026-12-01 ", "2026-12-01T00:00:00", "1 December 2026"} {
		if d, err := unit.ParseDate(text); err == nil {
			t.Errorf("%q is read as %v", text, d)
		}
	}
}

func TestDateArithmetic(t *testing.T) {
	for _, c := range []struct {
		from string
		days int
		want string
	}{
		{"2026-12-01", 0, "2026-12-01"},
		{"2026-12-31", 1, "2027-01-01"},
		{"2027-01-01", -1, "2026-12-31"},
		{"2028-02-28", 1, "2028-02-29"},
		{"2027-02-28", 1, "2027-03-01"},
		{"2026-12-01", 365, "2027-12-01"},
		{"2028-01-01", 366, "2029-01-01"},
		{"2026-03-29", 1, "2026-03-30"}, // the day on which Europe's clocks change
		{"2100-02-28", 1, "2100-03-01"}, // no leap year
		{"2026-12-15", -30, "2026-11-15"},
	} {
		if got := day(t, c.from).Add(c.days); got.String() != c.want {
			t.Errorf("%s and %d days: %v, want %s", c.from, c.days, got, c.want)
		}
	}
	if got := day(t, "2026-12-01").Weekday(); got != time.Tuesday {
		t.Errorf("2026-12-01 is a %v, want a Tuesday", got)
	}
}

func TestDateOrder(t *testing.T) {
	order := []string{"2025-12-31", "2026-01-01", "2026-01-31", "2026-02-01", "2026-11-30", "2026-12-01", "2027-01-01"}
	for i, a := range order {
		for j, b := range order {
			if got := day(t, a).Before(day(t, b)); got != (i < j) {
				t.Errorf("%s before %s: %v", a, b, got)
			}
			if got := day(t, a).After(day(t, b)); got != (i > j) {
				t.Errorf("%s after %s: %v", a, b, got)
			}
		}
	}
}

func TestDaysUntil(t *testing.T) {
	for _, c := range []struct {
		from, to string
		want     int
	}{
		{"2026-12-01", "2026-12-01", 0},
		{"2026-10-02", "2026-12-01", 60},
		{"2026-12-01", "2026-10-02", -60},
		{"2028-02-28", "2028-03-01", 2}, // a leap year
		{"0001-01-01", "9999-12-31", 3652058},
	} {
		if got := day(t, c.from).DaysUntil(day(t, c.to)); got != c.want {
			t.Errorf("from %s to %s are %d days, want %d", c.from, c.to, got, c.want)
		}
	}
}

func TestNoDay(t *testing.T) {
	var none unit.Date
	if !none.IsZero() || day(t, "2026-12-01").IsZero() {
		t.Error("only the zero date is no day")
	}
	if none.String() != "" {
		t.Errorf("no day prints %q", none)
	}
	if !none.Before(day(t, "0001-01-01")) {
		t.Error("no day sorts before every day")
	}
}

func TestDateOf(t *testing.T) {
	east := time.FixedZone("east", 10*3600)
	at := time.Date(2026, 12, 1, 1, 0, 0, 0, east) // 2026-11-30 in UTC
	if got := unit.DateOf(at).String(); got != "2026-12-01" {
		t.Errorf("the day in its own zone is %s, want 2026-12-01", got)
	}
	if got := unit.DateOf(at.UTC()).String(); got != "2026-11-30" {
		t.Errorf("the day in UTC is %s, want 2026-11-30", got)
	}
}
