package show

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// Taken is what a crew says it took for a job, beside what its pick list said.
type Taken struct {
	*bom.Pick
	On, By   string
	Bins     []TakenBin
	Cuts     []TakenCut
	Left     []TakenRead
	Unbooked []TakenBin // what reorder levels keep and no job is charged with

	Stock *catalog.Stock // that it was taken from
}

// TakenBin is a number of pieces from one shelf.
type TakenBin struct {
	Part, Where, Note string
	Qty, Book         int64 // Book is what lay there
}

// TakenCut is a length that left a reel for a line of the job.
type TakenCut struct {
	Tag, Line, Note string
	Part, Planned   string // what is on the reel, and what the plan has for the line
	Length          unit.MM
}

// TakenRead is what was left on a reel after the last cut.
type TakenRead struct {
	Tag, Part, Where, Note string
	Left                   unit.MM
}

// TOML writes the stock sheet of the issue.
func (t *Taken) TOML() []byte {
	b := &paste{}
	b.line("[sheet]")
	b.line("on  = " + t.On)
	b.line("by  = " + tomlString(t.By))
	b.line("job = " + tomlString(t.Job))
	for _, r := range t.Left {
		b.line("")
		b.row("reel", [2]string{"because", tomlWord(r.Note)}, [2]string{"tag", tomlString(r.Tag)}, [2]string{"part", tomlString(r.Part)},
			[2]string{"where", tomlString(r.Where)}, [2]string{"left", tomlString(r.Left.String())})
	}
	for _, x := range t.Bins {
		b.line("")
		b.row("move", [2]string{"because", tomlWord(x.Note)}, [2]string{"part", tomlString(x.Part)}, [2]string{"qty", strconv.FormatInt(x.Qty, 10)},
			[2]string{"from", tomlString(x.Where)}, [2]string{"to", `"job"`})
	}
	for _, c := range t.Cuts {
		b.line("")
		b.row("cut", [2]string{"because", tomlWord(c.Note)}, [2]string{"tag", tomlString(c.Tag)}, [2]string{"length", tomlString(c.Length.String())},
			[2]string{"cable", tomlString(c.Line)})
	}
	return []byte(b.out.String())
}

// Text says what was written where and how it differs from the pick list.
func (t *Taken) Text(page Page, file, seen string) []byte {
	s := &sheet{page: page}
	pieces := int64(0)
	for _, b := range t.Bins {
		pieces += b.Qty
	}
	s.para("", strong, Terms("Issued to %s: %s and %s, in %s.", t.Job, words(int(pieces), "piece", "pieces"), words(len(t.Cuts), "cut", "cuts"), file))
	differs := append(append(t.binsDiffer(), t.cutsDiffer()...), t.counted()...)
	if differs == nil {
		s.para("", plain, "All as the pick list has it.")
	}
	for _, d := range differs {
		s.hang("  · ", plain, 4, plain, Clean(d))
	}
	for _, u := range t.Unbooked {
		s.hang("  · ", plain, 4, plain, Terms("not booked: %d of %s, which reorder levels keep", u.Qty, u.Part))
	}
	s.para("", plain, Clean(seen))
	return []byte(s.b.String())
}

// binsDiffer says of each bin of the list or of the sheet where the two differ, and
// where more was taken than the book has.
func (t *Taken) binsDiffer() []string {
	var out []string
	for _, b := range t.Pick.Bins {
		i := slices.IndexFunc(t.Bins, func(x TakenBin) bool { return x.Part == b.Part.ID && x.Where == b.Where })
		switch {
		case i < 0:
			out = append(out, fmt.Sprintf("none of %s from %s was taken; the list has %d", b.Part.ID, b.Where, b.Qty))
		case t.Bins[i].Qty != int64(b.Qty):
			out = append(out, fmt.Sprintf("%d of %s from %s; the list has %d", t.Bins[i].Qty, b.Part.ID, b.Where, b.Qty))
		}
	}
	for _, x := range t.Bins {
		if !slices.ContainsFunc(t.Pick.Bins, func(b bom.PickBin) bool { return x.Part == b.Part.ID && x.Where == b.Where }) {
			out = append(out, fmt.Sprintf("%d of %s from %s, which the list does not have", x.Qty, x.Part, x.Where))
		}
		if x.Qty > x.Book {
			out = append(out, fmt.Sprintf("%d of %s from %s, where the book has %d: count the bin", x.Qty, x.Part, x.Where, x.Book))
		}
	}
	return out
}

// cutsDiffer does the same for cuts.
func (t *Taken) cutsDiffer() []string {
	var out []string
	listed := t.listed()
	for _, x := range t.Cuts {
		alike := func(l TakenCut) bool { return l.Tag == x.Tag && l.Line == x.Line }
		i := slices.IndexFunc(listed, func(l TakenCut) bool { return alike(l) && l.Length == x.Length })
		if i < 0 {
			if i = slices.IndexFunc(listed, alike); i < 0 {
				out = append(out, fmt.Sprintf("%s for %s from %s, which the list does not have", x.Length, x.Line, x.Tag))
			} else {
				out = append(out, fmt.Sprintf("%s for %s from %s; the list has %s", x.Length, x.Line, x.Tag, listed[i].Length))
			}
		}
		if i >= 0 {
			listed = slices.Delete(listed, i, i+1)
		}
		if x.Planned != x.Part {
			out = append(out, fmt.Sprintf("%s is %s in the plan, and on %s is %s", x.Line, x.Planned, x.Tag, x.Part))
		}
	}
	for _, l := range listed {
		out = append(out, fmt.Sprintf("%s was not cut from %s; the list has %s", l.Line, l.Tag, l.Length))
	}
	return out
}

// listed are the cuts of the pick list.
func (t *Taken) listed() []TakenCut {
	var out []TakenCut
	for _, r := range t.Reels {
		for _, c := range r.Cuts {
			out = append(out, TakenCut{Tag: r.Tag.ID, Line: c.Line, Length: c.Length})
		}
	}
	return out
}

// counted lists what is booked on the day of its count, or of its reading, that says no
// time: there the book takes the count to have seen the issue.
func (t *Taken) counted() []string {
	const mind = "%s was %s on %s at no time of day, so what is there stays %s; if this was taken after it, write the time into %s"
	var out []string
	for _, b := range t.Bins {
		for _, s := range t.Stock.Bins {
			if s.Part == b.Part && s.Where == b.Where && t.sameDay(s.Counted) {
				out = append(out, fmt.Sprintf(mind, s.Part+" at "+s.Where, "counted", s.Counted, s.Qty, s.At.File.Path))
			}
		}
	}
	seen := map[string]bool{}
	for _, c := range t.Cuts {
		// What arrived today, or was left over today, was there before it was cut.
		if g := t.Stock.Tag(c.Tag); !seen[c.Tag] && g != nil && g.Order == "" && g.Of == "" && t.sameDay(g.Read) {
			out = append(out, fmt.Sprintf(mind, g.ID+" at "+g.Where, "read", g.Read, g.Left, g.At.File.Path))
		}
		seen[c.Tag] = true
	}
	return out
}

// sameDay reports a bare date that is the day of the issue.
func (t *Taken) sameDay(m catalog.Moment) bool {
	return !m.Clock && strings.HasPrefix(t.On, m.Day.String())
}
