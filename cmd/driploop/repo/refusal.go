package repo

import (
	"fmt"
	"os/exec"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Refusal is the error where git ran and could not do what was asked: the
// revision, the repository or its place is at fault, not this program.
type Refusal struct {
	Doing string // what was being done, with the user's own words quoted
	Says  string // why not; git's message as "git: …", one line without control characters
	Do    string // the remedy where one is known, else ""

	status int // exit status of git, 0 where the refusal is this package's own
}

func (r *Refusal) Error() string {
	s := r.Doing + ": " + r.Says
	if r.Do != "" {
		s += "; " + r.Do
	}
	return s
}

// firstBytes keeps the beginning of what git writes to standard error; a hostile
// repository can make it write without end.
type firstBytes struct{ kept []byte }

func (f *firstBytes) Write(p []byte) (int, error) {
	room := 4096 - len(f.kept)
	f.kept = append(f.kept, p[:min(room, len(p))]...)
	return len(p), nil
}

// first is the first line that tells what went wrong. Warnings and traces may
// stand before it; where git speaks another language than English no line is
// marked, and the first of all is taken. Where there is none exit must be given.
func (f *firstBytes) first(exit *exec.ExitError) string {
	lines := strings.Split(strings.TrimSpace(string(f.kept)), "\n")
	for _, line := range lines {
		for _, mark := range []string{"fatal: ", "error: "} {
			if says, ok := strings.CutPrefix(line, mark); ok {
				return clean(says)
			}
		}
	}
	if lines[0] == "" {
		return exit.String()
	}
	return clean(lines[0])
}

// longest is where a message is cut, in characters.
const longest = 300

// clean makes control characters, marks that turn the reading direction and
// bytes that are no text visible: the message quotes names out of the repository.
func clean(s string) string {
	var b strings.Builder
	for n := 0; len(s) > 0; n++ {
		if n == longest {
			b.WriteString("…")
			break
		}
		r, size := utf8.DecodeRuneInString(s)
		switch {
		case r == utf8.RuneError && size == 1:
			fmt.Fprintf(&b, `\x%02x`, s[0])
		case unicode.IsControl(r):
			fmt.Fprintf(&b, `\x%02x`, r)
		case unicode.In(r, unicode.Cf, unicode.Zl, unicode.Zp):
			fmt.Fprintf(&b, `\u%04x`, r)
		default:
			b.WriteRune(r)
		}
		s = s[size:]
	}
	return b.String()
}
