// Package filled takes sheets back that somebody filled in: counts, pick lists and
// orders. A sheet comes as the cells that stand in it, be it from a workbook or from a
// table of text; what leaves is what is to be booked, held against the book.
//
// A sheet is taken whole or not at all. Everything that is wrong with it is said at
// once, each with the cell in which it stands: Faults.
package filled

import (
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Ground is what a sheet is held against.
type Ground struct {
	Catalog  *catalog.Catalog
	Premises *catalog.Premises
	Stock    *catalog.Stock
	Today    unit.Date
	Feet     bool   // of figures that do not say it themselves
	By       string // initials that came with the call; "" where none did
}

// mostFaults is how many faults of one sheet are said.
const mostFaults = 40

// Faults is all that is wrong with a sheet.
type Faults []string

// Error says how much it is, and the first of it.
func (f Faults) Error() string {
	if len(f) == 1 {
		return f[0]
	}
	return fmt.Sprintf("%s; and %d more", f[0], len(f)-1)
}

// full reports that more would not be said anyhow: looking for the nearest name among
// thousands, ten thousand times, takes its time.
func (f *Faults) full() bool { return len(*f) >= mostFaults }

func (f *Faults) add(format string, args ...any) {
	if !f.full() {
		*f = append(*f, fmt.Sprintf(format, args...))
	}
}

// err adds an error about an entry; a blank is none.
func (f *Faults) err(err error) {
	if err != nil && !errors.Is(err, bom.ErrBlank) {
		f.add("%s", err)
	}
}

// all is the faults as an error, nil where there are none.
func (f Faults) all() error {
	if len(f) == 0 {
		return nil
	}
	return f
}

// titles refuses columns that the sheet of ours does not have: a title with a slip
// of the pen would else leave a column unread.
func titles(s *bom.FilledSheet, known ...string) error {
	for _, t := range s.Columns {
		if t == "" || slices.Contains(known, t) || bagSize(t) > 0 {
			continue
		}
		if near := source.Nearest(t, known); near != "" {
			return fmt.Errorf("%s: there is no column %s; did you mean %s?", s.Name, source.Quote(t), near)
		}
		return fmt.Errorf("%s: there is no column %s; the columns are %s", s.Name, source.Quote(t), strings.Join(known, ", "))
	}
	return nil
}

// bagSize is the size of bag that the title of a column names, or 0.
func bagSize(title string) int {
	n, ok := strings.CutPrefix(title, "bags of ")
	size, err := strconv.Atoi(n)
	if !ok || err != nil || size < 1 || size > bom.MostFilledCount {
		return 0
	}
	return size
}

// unknown says that there is nothing of a name, and what is nearest.
func unknown(where, what, name string, known []string) string {
	text := fmt.Sprintf("%s: there is no %s %s", where, what, source.Quote(name))
	if near := source.Nearest(name, known); near != "" {
		text += "; did you mean " + near + "?"
	}
	return text
}

// part looks a part up in the catalog. One that only the book knows is nil, with its
// name good.
func (g *Ground) part(f *Faults, where, id string) (p *catalog.Part, good bool) {
	if p := g.Catalog.Look(id); p != nil {
		return p, true
	}
	known := g.booked()
	if slices.Contains(known, id) {
		return nil, true
	}
	if f.full() {
		return nil, false
	}
	for _, p := range g.Catalog.All() {
		known = append(known, p.ID)
	}
	f.add("%s", unknown(where, "part", id, known))
	return nil, false
}

// booked are the parts that lie somewhere by the book.
func (g *Ground) booked() []string {
	var out []string
	for i := range g.Stock.Bins {
		out = append(out, g.Stock.Bins[i].Part)
	}
	return slices.Compact(out)
}

// shelf looks a shelf up.
func (g *Ground) shelf(f *Faults, where, id string) bool {
	if g.Premises.Shelf(id) != nil {
		return true
	}
	if f.full() {
		return false
	}
	f.add("%s", unknown(where, "shelf", id, g.Premises.ShelfNames()))
	return false
}

// tag looks a reel up, or is nil.
func (g *Ground) tag(f *Faults, where, id string) *catalog.Tag {
	if t := g.Stock.Tag(id); t != nil {
		return t
	}
	if f.full() {
		return nil
	}
	var known []string
	for i := range g.Stock.Tags {
		known = append(known, g.Stock.Tags[i].ID)
	}
	f.add("%s", unknown(where, "reel", id, known)+" A new reel comes into the book with a sheet of its own.")
	return nil
}

// onReels reports a part that no catalog has, and that lies on reels by the book.
func (g *Ground) onReels(part string) bool {
	return slices.ContainsFunc(g.Stock.Tags, func(t catalog.Tag) bool { return t.Part == part })
}

// onShelf is what lies of a part on a shelf by the book.
func (g *Ground) onShelf(part, shelf string) catalog.Quantity {
	_, bins := g.Stock.OnHand(part)
	for _, b := range bins {
		if b.Where == shelf {
			return b.Qty
		}
	}
	return catalog.Quantity{}
}

// initials reads who did something: a word that can stand in the name of a file.
func initials(f *Faults, e bom.Entry) string {
	who, err := e.Words()
	if err != nil {
		f.err(err)
		return ""
	}
	if !source.ValidID(who) {
		f.add("%s: initials are letters and digits, without spaces, not %s", e.Where, source.Quote(who))
		return ""
	}
	return who
}

// words reads a text, blank where there is none.
func words(f *Faults, e bom.Entry) string {
	text, err := e.Words()
	f.err(err)
	return text
}

// dayOf refuses a day that is not the one that the book is read of: a count of another
// day has to be held against the book of that day.
func (g *Ground) dayOf(f *Faults, e bom.Entry) {
	d, err := e.Day()
	switch {
	case err != nil:
		f.err(err)
	case d.After(g.Today):
		f.add("%s: %s is still to come", e.Where, d)
	case d != g.Today:
		f.add("%s: the sheet is of %s, and the book is read as of %s; add --today %s", e.Where, d, g.Today, d)
	}
}

// feet reports whether a workbook has its lengths in feet: it says so itself.
func feet(b bom.FilledBook, otherwise bool) bool {
	s, err := b.Sheet("made-from")
	if err != nil {
		return otherwise
	}
	for i := range s.Rows {
		if s.Rows[i].Key == "lengths" {
			return s.Rows[i].Entry("is").Text == "ft"
		}
	}
	return otherwise
}
