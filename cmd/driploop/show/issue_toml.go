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

// TOML writes the stock sheet of the issue.
func (i *Issue) TOML() []byte { return i.taken().TOML() }

// taken is the issue as if a filled sheet had said of everything that it was taken.
func (i *Issue) taken() *Taken {
	t := &Taken{Pick: i.Pick, On: i.On, By: i.By, Stock: i.Stock}
	for _, x := range i.bins() {
		t.Bins = append(t.Bins, TakenBin{Part: x.Part.ID, Where: x.Where, Qty: int64(x.Qty)})
	}
	for _, r := range i.reels() {
		for _, c := range r.Cuts {
			t.Cuts = append(t.Cuts, TakenCut{Tag: r.Tag.ID, Line: c.Line, Length: c.Length})
		}
	}
	return t
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
	for _, left := range append(i.taken().counted(), i.leftOut()...) {
		s.hang("  · ", plain, 4, plain, Clean(left))
	}
	s.para("", plain, Clean(seen))
	return []byte(s.b.String())
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
