package rules

import (
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// The stock rules say what about the shelf does not add up, or will not do. What
// they find stands on the row of the stock file and on each plan that claims the
// part, and on no other.

var stockRules = []*Rule{stockBelow, stockTag, stockCountedTwice, stockUnknown, stockOver, stockOverdue, stockJump, stockSameDay, stockOld, stockFuture,
	stockShort, stockLate, stockClaimed, stockIssued, stockCutWas, stockStranded}

// ledger is the basis of rules about rows that contradict each other.
var ledger = practice("a store's books: every piece that comes, goes or is counted has its row")

// stockRow is a row of a stock file on which a finding stands, with the parts
// whose claims it concerns.
type stockRow struct {
	at     source.Place
	parts  []string
	also   []source.Place
	beside string // what the other rows are
}

// on is what a finding at the row stands on.
func (w stockRow) on() string {
	for _, p := range w.parts {
		if p != "" {
			return "part." + p
		}
	}
	return "file"
}

// stand reports at the row, and again on each plan that claims one of its parts,
// where the plan first names it.
func (s *Shelf) stand(w stockRow, report func(at source.Place, on string) *Finding) {
	own := report(w.at, w.on())
	for _, p := range w.also {
		own.Beside(p, "%s", w.beside)
	}
	told := map[*bom.Demand]bool{}
	for _, part := range w.parts {
		for _, d := range s.Claiming(part) {
			if told[d] {
				continue
			}
			told[d] = true
			x := report(d.Need(part).At, "part."+part).Beside(w.at, "the row")
			x.row = own
			for _, p := range w.also {
				x.Beside(p, "%s", w.beside)
			}
		}
	}
}

// notes lists what the book says of some kinds, as rows to report at. What one name
// or date spoils for several parts is one row.
func (s *Shelf) notes(beside string, kinds ...catalog.NoteKind) []bookNote {
	var out []bookNote
	for i := range s.Stock.Notes {
		n := &s.Stock.Notes[i]
		if !slices.Contains(kinds, n.Kind) {
			continue
		}
		if last := len(out) - 1; last >= 0 && sharesRow(n, out[last].Note) {
			out[last].row.parts = append(out[last].row.parts, n.Part)
			continue
		}
		out = append(out, bookNote{n, stockRow{at: n.At, parts: []string{n.Part}, also: n.Also, beside: beside}})
	}
	return out
}

// bookNote is a note of the book and the row it is reported at.
type bookNote struct {
	*catalog.Note
	row stockRow
}

// sharesRow reports two notes of one name or one date.
func sharesRow(n, m *catalog.Note) bool {
	return n.At == m.At && n.Kind == m.Kind && (n.Kind == catalog.NoteUnknown || n.Kind == catalog.NoteFuture)
}

// thing names what a note is about: "NC-10-NM at shop", "CX-10 on R-107".
func thing(n *catalog.Note) string {
	switch {
	case n.Tag != "":
		return n.Part + " on " + n.Tag
	case n.Where != "":
		return n.Part + " at " + n.Where
	}
	return n.Part
}

// amountOf prints a quantity of a part: "14 NC-10-NM", "22.4 m of CX-10".
func amountOf(q catalog.Quantity, part string) string {
	if q.Length != 0 {
		return q.String() + " of " + part
	}
	return strings.TrimSpace(q.String() + " " + part)
}

// stockFigure is a quantity as a figure, and its name with its unit: "taken_m" of
// cut stock, else "taken".
func stockFigure(name string, q catalog.Quantity, cut bool) (string, float64) {
	if cut {
		return name + "_m", q.Length.Metres()
	}
	return name, float64(q.Each)
}
