package show

import (
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Term is a string that does nothing on a terminal or in the log of a build but
// show itself: no control characters, no marks that turn or hide text, no line
// breaks, and nothing that a build runner takes for a command.
type Term string

// Clean makes a string harmless; what does more than show itself is written as an
// escape.
func Clean(s string) Term {
	if !strings.ContainsFunc(s, actsOrBad) && !strings.Contains(s, "::") && !strings.Contains(s, "##") {
		return Term(s)
	}
	var b strings.Builder
	last := rune(0) // as it was written, 0 behind an escape
	for i, r := range s {
		_, n := utf8.DecodeRuneInString(s[i:])
		switch {
		case r == utf8.RuneError && n == 1:
			fmt.Fprintf(&b, `\x%02x`, s[i])
		case r == '\n':
			b.WriteString(`\n`)
		case r == '\t':
			b.WriteString(`\t`)
		case r < 0x100 && acts(r), r == last && commands(r):
			fmt.Fprintf(&b, `\x%02x`, r)
		case acts(r) && r > 0xFFFF:
			fmt.Fprintf(&b, `\U%08x`, r)
		case acts(r):
			fmt.Fprintf(&b, `\u%04x`, r)
		default:
			b.WriteRune(r)
			last = r
			continue
		}
		last = 0
	}
	return Term(b.String())
}

// commands reports a character that, twice in a row, begins a command to a build
// runner: "::error::" at the start of a line, however far it is indented, and
// "##[error]" or the like anywhere in it.
func commands(r rune) bool { return r == ':' || r == '#' }

// acts reports a character that does something else than show itself: controls,
// marks of direction, what joins, hides or picks variants, line and paragraph
// separators, tags.
func acts(r rune) bool {
	if r < 0x7F {
		return r < ' '
	}
	return unicode.IsControl(r) || unicode.In(r, unicode.Cf, unicode.Zl, unicode.Zp,
		unicode.Variation_Selector, unicode.Other_Default_Ignorable_Code_Point)
}

// Acts is acts, for those who write text elsewhere.
func Acts(r rune) bool { return acts(r) }

func actsOrBad(r rune) bool { return r == utf8.RuneError || acts(r) }

// Terms cleans what a line is put together from.
func Terms(format string, args ...any) Term { return Clean(fmt.Sprintf(format, args...)) }

// ink is a way in which a terminal may show text.
type ink string

const (
	plain  ink = ""
	strong ink = "1"
	faint  ink = "2"
	stop   ink = "1;35"
	mend   ink = "1;34"
	fine   ink = "1;36"
)

// sheet collects text of a page's width.
type sheet struct {
	page Page
	b    strings.Builder
}

// line writes one line with an indent, without wrapping.
func (s *sheet) line(indent int, how ink, text Term) {
	s.b.WriteString(strings.Repeat(" ", indent))
	s.b.WriteString(s.paint(how, string(text)))
	s.b.WriteByte('\n')
}

func (s *sheet) gap() { s.b.WriteByte('\n') }

func (s *sheet) paint(how ink, text string) string {
	if !s.page.Color || how == plain || text == "" {
		return text
	}
	return "\x1b[" + string(how) + "m" + text + "\x1b[0m"
}

// para writes text wrapped to the page, the first line behind lead, the others
// under it.
func (s *sheet) para(lead Term, how ink, text Term) {
	s.hang(lead, plain, utf8.RuneCountInString(string(lead)), how, text)
}

// hang is para with an indent of its own for the lines after the first. The lead
// is a word of our own, or ends in a space: two harmless ends may do harm side by
// side.
func (s *sheet) hang(lead Term, leadHow ink, indent int, how ink, text Term) {
	width := max(s.page.Width-indent, 16)
	first := max(s.page.Width-utf8.RuneCountInString(string(lead)), 16)
	for i, row := range wrap(string(text), first, width) {
		if i == 0 {
			s.b.WriteString(s.paint(leadHow, string(lead)))
		} else {
			s.b.WriteString(strings.Repeat(" ", indent))
		}
		s.b.WriteString(s.paint(how, row))
		s.b.WriteByte('\n')
	}
}

// wrap breaks text at spaces; a word longer than a line stands on its own, broken
// where the line ends.
func wrap(text string, first, width int) []string {
	var out []string
	row, used, room := "", 0, first
	flush := func() {
		out = append(out, row)
		row, used, room = "", 0, width
	}
	for _, word := range strings.Fields(text) {
		n := utf8.RuneCountInString(word)
		if used > 0 && used+1+n > room {
			flush()
		}
		for n > room {
			cut := []rune(word)[:room]
			row = string(cut)
			word = word[len(row):]
			n -= room
			flush()
		}
		if used > 0 {
			row += " "
			used++
		}
		row += word
		used += n
	}
	if used > 0 || len(out) == 0 {
		flush()
	}
	return out
}
