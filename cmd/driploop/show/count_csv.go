package show

import (
	"slices"
	"strconv"

	"driploop/catalog/unit"
)

// The titles of a count sheet that is a plain table. Lengths stand there without their
// unit; the title has it.
const (
	ColumnWhere  = "where"
	ColumnPart   = "part"
	ColumnName   = "name"
	ColumnTag    = "tag"
	ColumnBook   = "by the book"
	ColumnBy     = "by"
	ColumnLeftM  = "left m"
	ColumnLeftFt = "left ft"
)

// CountCSV is one table to count shelves on: a row for each bin, with a column for
// each size of bag, and one for each reel. A blind one leaves out what the book says.
func (s *Stock) CountCSV(shelves []string, blind bool) ([]byte, error) {
	sizes := s.sizesOn(shelves)
	left := ColumnLeftM
	if s.Feet {
		left = ColumnLeftFt
	}
	head := []Cell{ColumnWhere, ColumnPart, ColumnName, ColumnTag}
	if !blind {
		head = append(head, ColumnBook)
	}
	bags := make([]Cell, len(sizes))
	for i, n := range sizes {
		bags[i] = Cell(BagColumn(n))
	}
	rows := [][]Cell{append(append(head, bags...), ColumnLoose, ColumnAll, Cell(left), ColumnHow, ColumnBy, ColumnNote)}
	blanks := make([]Cell, len(sizes)+6)
	row := func(where, part, tag string, book Cell) {
		r := []Cell{CellOf(where), CellOf(part), CellOf(s.name(part)), CellOf(tag)}
		if !blind {
			r = append(r, book)
		}
		rows = append(rows, append(r, blanks...))
	}
	bins, reels := s.Standings(), s.Reels()
	for _, where := range shelves {
		for _, r := range bins {
			if r.Where == where && !s.cutStock(r.Part) {
				row(where, r.Part, "", Cell(strconv.FormatInt(r.OnHand.Each, 10)))
			}
		}
		for _, r := range reels {
			if r.Where == where {
				row(where, r.Part, r.ID, lengthCell(r.Left, s.Feet))
			}
		}
	}
	return csvOf(rows)
}

// sizesOn are the sizes of bags of what lies on shelves, the largest first.
func (s *Stock) sizesOn(shelves []string) []int {
	var out []int
	for _, r := range s.Standings() {
		if slices.Contains(shelves, r.Where) && !s.cutStock(r.Part) {
			out = append(out, s.bags(r.Part)...)
		}
	}
	slices.Sort(out)
	out = slices.Compact(out)
	slices.Reverse(out)
	return out
}

func lengthCell(l unit.MM, feet bool) Cell {
	if feet {
		return Cell(unit.Fixed(l.Feet(), 3)) // to the millimetre, so that a copied figure is the same length
	}
	return Cell(strconv.FormatFloat(l.Metres(), 'f', -1, 64))
}
