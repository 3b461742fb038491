package unit

import (
	"fmt"
	"strconv"
	"time"
)

// Date is a day of the calendar without a time zone. The zero Date is no day.
type Date struct{ Year, Month, Day int }

// DateOf is the day on which t falls in t's own zone.
func DateOf(t time.Time) Date {
	y, m, d := t.Date()
	return Date{y, int(m), d}
}

// ParseDate reads "2026-12-01".
func ParseDate(s string) (Date, error) {
	t, err := time.Parse(time.DateOnly, s)
	if err != nil {
		return Date{}, fmt.Errorf("%q is no date; write it 2026-12-01", s)
	}
	return DateOf(t), nil
}

// IsZero reports whether there is no day.
func (d Date) IsZero() bool { return d == Date{} }

// Before reports whether d lies before e.
func (d Date) Before(e Date) bool { return d.ordinal() < e.ordinal() }

// After reports whether d lies after e.
func (d Date) After(e Date) bool { return d.ordinal() > e.ordinal() }

// Add is the day n days later.
func (d Date) Add(n int) Date { return DateOf(d.time().AddDate(0, 0, n)) }

// DaysUntil is how many days later e is than d; below zero where it is earlier.
func (d Date) DaysUntil(e Date) int { return int((e.time().Unix() - d.time().Unix()) / (24 * 60 * 60)) }

// Weekday is the day of the week.
func (d Date) Weekday() time.Weekday { return d.time().Weekday() }

// String prints ISO 8601, or "" for no day.
func (d Date) String() string {
	if d.IsZero() {
		return ""
	}
	return fmt.Sprintf("%04d-%02d-%02d", d.Year, d.Month, d.Day)
}

func (d Date) ordinal() int { return (d.Year*16+d.Month)*32 + d.Day }

func (d Date) time() time.Time {
	return time.Date(d.Year, time.Month(d.Month), d.Day, 0, 0, 0, 0, time.UTC)
}

func digits(v int64) string { return strconv.FormatInt(v, 10) }

func pad4(v int64) string { return fmt.Sprintf("%04d", v) }
