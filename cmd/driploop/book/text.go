package book

import (
	"fmt"
	"strings"
	"unicode/utf8"

	"driploop/cmd/driploop/show"
)

// text is a string that a cell may hold: every character shows itself, and there are
// no more of them than a cell can take.
type text string

// maxText is how many units of UTF-16 a cell takes; longer texts would be cut off
// without a word.
const maxText = 32767

const cutMark = " … (cut off here)"

// changes counts the texts that could not be written as they were.
type changes struct{ escaped, cut int }

// notes says what was changed, for the sheet itself.
func (c changes) notes() []string {
	var out []string
	if c.escaped > 0 {
		out = append(out, fmt.Sprintf(`%s characters that do not show themselves; they are written as escapes, such as \x1b.`, cells(c.escaped)))
	}
	if c.cut > 0 {
		out = append(out, fmt.Sprintf("%s more than the %d characters that a cell takes; the text ends with%s.", cells(c.cut), maxText, cutMark))
	}
	return out
}

func cells(n int) string {
	if n == 1 {
		return "One text has"
	}
	return fmt.Sprintf("%d texts have", n)
}

// of makes a text of a string, and counts what had to be changed.
func (c *changes) of(s string) text {
	clean := escape(s)
	if clean != s {
		c.escaped++
	}
	if short := shorten(clean); short != clean {
		c.cut++
		return text(short)
	}
	return text(clean)
}

// escape writes what does not show itself as an escape.
func escape(s string) string {
	if !strings.ContainsFunc(s, func(r rune) bool { return r == utf8.RuneError || hides(r) }) {
		return s
	}
	var b strings.Builder
	for i, r := range s {
		_, n := utf8.DecodeRuneInString(s[i:])
		switch {
		case r == utf8.RuneError && n == 1:
			fmt.Fprintf(&b, `\x%02x`, s[i])
		case hides(r) && r < 0x100:
			fmt.Fprintf(&b, `\x%02x`, r)
		case hides(r) && r > 0xFFFF:
			fmt.Fprintf(&b, `\U%08x`, r)
		case hides(r):
			fmt.Fprintf(&b, `\u%04x`, r)
		default:
			b.WriteRune(r)
		}
	}
	return b.String()
}

// hides reports a character that does something else than show itself, or that the
// format does not know.
func hides(r rune) bool { return show.Acts(r) || r == 0xFFFE || r == 0xFFFF }

// shorten cuts a text that no cell takes and marks where.
func shorten(s string) string {
	if len(s) <= maxText {
		return s // no character has more units than bytes
	}
	units, keep := 0, 0
	for i, r := range s {
		if units <= maxText-utf16Len(cutMark) {
			keep = i
		}
		units += utf16Units(r)
	}
	if units <= maxText {
		return s
	}
	return s[:keep] + cutMark
}

func utf16Units(r rune) int {
	if r > 0xFFFF {
		return 2
	}
	return 1
}

func utf16Len(s string) int {
	n := 0
	for _, r := range s {
		n += utf16Units(r)
	}
	return n
}
