package show

import (
	"fmt"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

// Issue is what is booked when a crew takes what its pick list says.
type Issue struct {
	*bom.Pick
	On string // a date or a local time, as TOML has them
	By string // initials of who takes it

	Stock *catalog.Stock // that it is taken from
}

// bins and reels are what can be booked: what lies ready, and is not to be counted
// first.
func (i *Issue) bins() []bom.PickBin {
	var out []bom.PickBin
	for _, b := range i.Bins {
		if !b.CountFirst {
			out = append(out, b)
		}
	}
	return out
}

func (i *Issue) reels() []bom.PickReel {
	var out []bom.PickReel
	for _, r := range i.Reels {
		if !r.CountFirst {
			out = append(out, r)
		}
	}
	return out
}

// Empty reports that there is nothing to book.
func (i *Issue) Empty() bool { return len(i.bins()) == 0 && len(i.reels()) == 0 }

// TOML writes the stock sheet of the issue. All it takes from files are IDs, which
// hold nothing that needs an escape.
func (i *Issue) TOML() []byte {
	b := &paste{}
	b.line("[sheet]")
	b.line("on  = " + i.On)
	b.line("by  = " + tomlString(i.By))
	b.line("job = " + tomlString(i.Job))
	for _, x := range i.bins() {
		b.line("")
		b.line("[[move]]")
		b.line("part = " + tomlString(x.Part.ID))
		b.line("from = " + tomlString(x.Where))
		b.line(`to   = "job"`)
		b.line("qty  = " + strconv.Itoa(x.Qty))
	}
	for _, r := range i.reels() {
		for _, c := range r.Cuts {
			b.line("")
			b.line("[[cut]]")
			b.line("tag    = " + tomlString(r.Tag.ID))
			b.line("length = " + tomlString(c.Length.String()))
			b.line("cable  = " + tomlString(c.Line))
		}
	}
	return []byte(b.out.String())
}

// tomlString writes a string for TOML; what acts is escaped, also what only acts in a
// log in which the file is shown.
func tomlString(s string) string {
	out := `"`
	for _, r := range s {
		switch {
		case r == '#' && strings.HasSuffix(out, "#"):
			out += `\u0023`
		case r == '"' || r == '\\':
			out += `\` + string(r)
		case acts(r) && r > 0xFFFF:
			out += fmt.Sprintf(`\U%08X`, r)
		case acts(r):
			out += fmt.Sprintf(`\u%04X`, r)
		default:
			out += string(r)
		}
	}
	return out + `"`
}

// Text says what was written where, what is left out and why.
func (i *Issue) Text(page Page, file, seen string) []byte {
	s := &sheet{page: page}
	pieces, cuts := 0, 0
	for _, b := range i.bins() {
		pieces += b.Qty
	}
	for _, r := range i.reels() {
		cuts += len(r.Cuts)
	}
	s.para("", strong, Terms("Issued to %s: %s and %s, in %s.", i.Job, words(pieces, "piece", "pieces"), words(cuts, "cut", "cuts"), file))
	for _, left := range append(i.counted(), i.leftOut()...) {
		s.hang("  · ", plain, 4, plain, Clean(left))
	}
	s.para("", plain, Clean(seen))
	return []byte(s.b.String())
}

// counted lists what is booked on the day of its count, or of its reading, that says no
// time: there the book takes the count to have seen the issue.
func (i *Issue) counted() []string {
	const mind = "%s was %s on %s at no time of day, so what is there stays %s; if this was taken after it, write the time into %s"
	var out []string
	for _, b := range i.bins() {
		for _, s := range i.Stock.Bins {
			if s.Part == b.Part.ID && s.Where == b.Where && i.sameDay(s.Counted) {
				out = append(out, fmt.Sprintf(mind, s.Part+" at "+s.Where, "counted", s.Counted, s.Qty, s.At.File.Path))
			}
		}
	}
	for _, r := range i.reels() {
		// What arrived today, or was left over today, was there before it was cut.
		if t := r.Tag; t.Order == "" && t.Of == "" && i.sameDay(t.Read) {
			out = append(out, fmt.Sprintf(mind, t.ID+" at "+t.Where, "read", t.Read, t.Left, t.At.File.Path))
		}
	}
	return out
}

// sameDay reports a bare date that is the day of the issue.
func (i *Issue) sameDay(m catalog.Moment) bool {
	return !m.Clock && strings.HasPrefix(i.On, m.Day.String())
}

// leftOut lists what the job still waits for.
func (i *Issue) leftOut() []string {
	var out []string
	for _, b := range i.Bins {
		if b.CountFirst {
			out = append(out, fmt.Sprintf("not issued: %d of %s at %s, to be counted and put away first", b.Qty, b.Part.ID, b.Where))
		}
	}
	for _, r := range i.Reels {
		if r.CountFirst {
			out = append(out, fmt.Sprintf("not issued: cuts from %s at %s, to be measured and put away first", r.Tag.ID, r.Where))
		}
	}
	for _, c := range i.Coming {
		what := c.Piece.Line
		if c.Each > 0 {
			what = strconv.Itoa(c.Each)
		}
		out = append(out, fmt.Sprintf("not issued: %s of %s, on order with %s", what, c.Part.ID, c.Supply.Name()))
	}
	for _, c := range i.Missing {
		out = append(out, fmt.Sprintf("not issued: %s of %s, from nowhere in time", c.ShortBy(), c.Part().ID))
	}
	return out
}
