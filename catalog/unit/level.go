package unit

import (
	"math"
	"strconv"
)

// DB is a ratio in decibels. Whether a positive value is a gain or a loss is
// said by the name of whatever holds it.
type DB float64

// DBm is a power level referred to 1 mW. It is a struct so that two levels
// cannot be added by accident: Plus takes a ratio, Minus gives one, and PowerSum
// is the only way to combine two levels.
type DBm struct{ v float64 }

// DBmOf makes a level from its value in dBm.
func DBmOf(v float64) DBm { return DBm{v} }

// DBmOfWatt makes a level from a power in watts; zero watts is minus infinity.
func DBmOfWatt(w float64) DBm { return DBm{10*math.Log10(w) + 30} }

// Value is the level in dBm.
func (l DBm) Value() float64 { return l.v }

// Watt is the power in watts.
func (l DBm) Watt() float64 { return math.Pow(10, (l.v-30)/10) }

// Plus is the level after a gain (or, with a negative ratio, a loss).
func (l DBm) Plus(g DB) DBm { return DBm{l.v + float64(g)} }

// Minus is how far l stands above m.
func (l DBm) Minus(m DBm) DB { return DB(l.v - m.v) }

// Below reports whether l is the lower level.
func (l DBm) Below(m DBm) bool { return l.v < m.v }

// String prints one decimal, as levels are read aloud on site.
func (l DBm) String() string { return Fixed(l.v, 1) + " dBm" }

// String prints one decimal.
func (d DB) String() string { return Fixed(float64(d), 1) + " dB" }

// PowerSum is the level of all powers together. Without a level there is no
// power at all, and the sum is minus infinity.
func PowerSum(levels ...DBm) DBm {
	mw := 0.0
	for _, l := range levels {
		mw += math.Pow(10, l.v/10)
	}
	return DBm{10 * math.Log10(mw)}
}

// Fixed prints v with the given number of decimals, with a true minus sign and
// never a negative zero.
func Fixed(v float64, decimals int) string {
	s := strconv.FormatFloat(v, 'f', decimals, 64)
	if len(s) > 0 && s[0] == '-' {
		if allZero(s[1:]) {
			return s[1:]
		}
		return "−" + s[1:]
	}
	return s
}

func allZero(s string) bool {
	for i := range len(s) {
		if s[i] != '0' && s[i] != '.' {
			return false
		}
	}
	return true
}
