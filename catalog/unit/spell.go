package unit

import "strings"

// Spell is the usual spelling of a length, temperature, speed or size as one of the
// functions here reads it: the number without needless zeros, one blank, the unit.
// The unit stays the one that was written; nothing is converted or rounded.
func Spell(s string) string {
	num, u, found := strings.Cut(strings.TrimSpace(s), " ")
	if !found {
		return s
	}
	u = strings.TrimPrefix(strings.TrimSpace(u), "°")
	if u == "mm²" {
		u = "mm2"
	}
	return spellNumber(num) + " " + u
}

// spellNumber takes needless zeros off a plain decimal number; anything else, like
// the 2/0 of a gauge, stays as it is.
func spellNumber(s string) string {
	digits, minus := strings.CutPrefix(s, "-")
	whole, frac, _ := strings.Cut(digits, ".")
	if whole+frac == "" || strings.Trim(whole+frac, "0123456789") != "" {
		return s
	}
	whole, frac = strings.TrimLeft(whole, "0"), strings.TrimRight(frac, "0")
	if whole == "" {
		whole = "0"
	}
	if frac != "" {
		whole += "." + frac
	}
	if minus {
		return "-" + whole
	}
	return whole
}
