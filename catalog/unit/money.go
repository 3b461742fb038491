package unit

import (
	"errors"
	"strings"
)

// Money is an amount in 1/10 000 of the workspace's currency. Prices carry at
// most four decimals, so no amount is ever rounded on reading.
type Money int64

// ParseMoney reads a decimal string such as "318.00" or "0.0125".
func ParseMoney(s string) (Money, error) {
	whole, frac, dot := strings.Cut(s, ".")
	if whole == "" || len(whole) > 12 || len(frac) > 4 || (dot && frac == "") {
		return 0, errors.New("an amount is written \"318.00\", with at most four decimals")
	}
	var v int64
	for _, r := range whole + (frac + "0000")[:4] {
		if r < '0' || r > '9' {
			return 0, errors.New("an amount is written \"318.00\", in plain digits without sign")
		}
		v = v*10 + int64(r-'0')
	}
	return Money(v), nil
}

// Times is what a length costs at a price for one metre, rounded half up.
func (m Money) Times(l MM) Money { return Money((int64(m)*int64(l) + 500) / 1000) }

// Cents rounds half up to whole cents, as each line of an order is rounded. It
// is meant for amounts that are not negative, as all prices are.
func (m Money) Cents() Money { return (m + 50) / 100 * 100 }

// String prints two decimals, or four where the amount has them.
func (m Money) String() string {
	sign := ""
	if m < 0 {
		sign, m = "-", -m
	}
	s := digits(int64(m/10000)) + "." + pad4(int64(m%10000))
	if m%100 == 0 {
		s = s[:len(s)-2]
	}
	return sign + s
}
