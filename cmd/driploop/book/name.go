package book

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// maxName is how long the name on a tab may be.
const maxName = 31

// names gives every sheet a name of its own that all readers take: letters, digits
// and a few marks, no longer than a tab allows, none twice whatever the case.
type names map[string]bool

func (n names) of(want string) string {
	name := strings.Map(func(r rune) rune {
		if unicode.IsLetter(r) || unicode.IsDigit(r) || strings.ContainsRune(" -_.", r) && r < utf8.RuneSelf {
			return r
		}
		return '-'
	}, strings.ToValidUTF8(want, "-"))
	name = strings.Trim(name, " -.")
	if name == "" || strings.EqualFold(name, "history") { // a name that some programs keep for themselves
		name = strings.TrimSpace("Sheet " + name)
	}
	short := cutName(name, maxName)
	for i := 2; n[strings.ToLower(short)]; i++ {
		end := fmt.Sprintf(" %d", i)
		short = cutName(name, maxName-len(end)) + end
	}
	n[strings.ToLower(short)] = true
	return short
}

// cutName keeps so many units of UTF-16.
func cutName(s string, most int) string {
	units := 0
	for i, r := range s {
		if units += utf16Units(r); units > most {
			return strings.TrimSpace(s[:i])
		}
	}
	return s
}
