package book

import (
	"fmt"
	"strconv"
	"strings"
	"unicode/utf8"

	"driploop/bom"
)

// maxRows is how many rows a sheet of a workbook takes.
const maxRows = 1 << 20

// Widths of columns, in characters.
const (
	narrowest = 8
	widest    = 44
)

// layout is where everything of a sheet stands. Rows and columns count from 1.
type layout struct {
	*bom.Sheet
	name   string
	notes  []string
	head   int // row of the titles of columns; 0 where the sheet has no table
	facts  int // row of the first fact
	key    int // hidden column with the keys of rows
	value  int // column in which the values of facts stand
	widths []int
	digits []int // decimals of each column of money or lengths
}

// layOut finds where everything of a sheet stands, and what of its texts has to be
// changed.
func layOut(s *bom.Sheet, name string) (*layout, error) {
	l := &layout{Sheet: s, name: name, key: max(len(s.Columns), 2) + 1}
	var c changes
	l.measure(&c)
	l.notes = append(append(l.notes, s.Notes...), c.notes()...)
	row := 1 + len(l.notes)
	if len(s.Facts) > 0 {
		l.facts = row + 2
		row = l.facts + len(s.Facts) - 1
	}
	if len(s.Columns) > 0 {
		l.head = row + 2
		row = l.head + len(s.Rows)
	}
	if row > maxRows {
		return nil, fmt.Errorf("the sheet %q would have %d rows; a workbook takes %d", name, row, maxRows)
	}
	for i, r := range s.Rows {
		if len(r.Cells) > len(s.Columns) {
			return nil, fmt.Errorf("the sheet %q has %d cells in row %d under %d columns", name, len(r.Cells), i+1, len(s.Columns))
		}
	}
	return l, nil
}

// rowOf is where the i-th row of the table stands.
func (l *layout) rowOf(i int) int { return l.head + 1 + i }

// measure finds how wide the columns are and how many decimals they need.
func (l *layout) measure(c *changes) {
	l.widths, l.digits = make([]int, max(len(l.Columns), 2)), make([]int, max(len(l.Columns), 2))
	for i, col := range l.Columns {
		l.widths[i] = max(narrowest, min(widest, longestWord(string(c.of(col.Title)))+3))
		l.digits[i] = leastDecimals(col.Kind, l.Feet)
		if col.Ask != nil {
			l.widths[i] = max(l.widths[i], map[bom.CellKind]int{bom.KindWords: 20, bom.KindDay: 13}[col.Kind], 9)
		}
	}
	for _, r := range l.Rows {
		for i, cell := range r.Cells {
			if i >= len(l.Columns) {
				break
			}
			l.digits[i] = max(l.digits[i], decimals(cell, l.Feet))
			if r.Role != bom.HeadingRow && (r.Role != bom.SumRow || cell.Kind != bom.KindWords) {
				l.widths[i] = max(l.widths[i], l.widthOf(cell, l.digits[i], c))
			} else {
				c.of(cell.Words)
			}
		}
	}
	label := 0
	for _, f := range l.Facts {
		label = max(label, min(widest, utf8.RuneCountInString(string(c.of(f.Label)))+1))
		c.of(f.Cell.Words)
	}
	for _, n := range append([]string{l.Title}, l.Sheet.Notes...) {
		c.of(n)
	}
	l.place(label)
}

// place finds the column for the values of facts, right of the longest label.
func (l *layout) place(label int) {
	if len(l.Columns) == 0 {
		l.widths = []int{max(label, narrowest), 60}
	}
	for l.value = 2; l.value < len(l.widths) && l.left(l.value) < label; l.value++ {
	}
	if lack := label - l.left(l.value); lack > 0 {
		l.widths[0] += lack
	}
}

// left is how wide the columns left of one are together.
func (l *layout) left(column int) int {
	sum := 0
	for _, w := range l.widths[:column-1] {
		sum += w
	}
	return sum
}

func (l *layout) widthOf(cell bom.Cell, digits int, c *changes) int {
	switch cell.Kind {
	case bom.KindBlank:
		return 0
	case bom.KindWords:
		return min(widest, utf8.RuneCountInString(string(c.of(cell.Words)))+2)
	case bom.KindDay:
		return 13
	}
	whole := strconv.FormatFloat(l.number(cell), 'f', 0, 64)
	n := len(whole) + (len(whole)-1)/3 + 4
	if cell.Kind != bom.KindCount {
		n += digits + 1
	}
	if cell.Kind == bom.KindLength {
		n += 3
	}
	return n
}

// number is what a cell holds as a spreadsheet counts: metres or feet, whole units
// of money, days since the last of 1899.
func (l *layout) number(c bom.Cell) float64 {
	switch c.Kind {
	case bom.KindCount:
		return float64(c.Count)
	case bom.KindLength:
		if l.Feet {
			return c.MM.Feet()
		}
		return c.MM.Metres()
	case bom.KindMoney:
		return float64(c.Money) / 10000
	case bom.KindDay:
		return float64(bom.DayNumber(c.Day))
	}
	return 0
}

// decimals is how many decimals a cell needs to be shown whole.
func decimals(c bom.Cell, feet bool) int {
	switch {
	case c.Kind == bom.KindMoney && c.Money%100 != 0:
		return 4
	case c.Kind == bom.KindLength && !feet && c.MM%10 != 0:
		return 3
	case c.Kind == bom.KindLength && !feet && c.MM%100 != 0:
		return 2
	}
	return 0
}

func leastDecimals(k bom.CellKind, feet bool) int {
	switch k {
	case bom.KindMoney:
		return 2
	case bom.KindLength:
		return 1
	}
	return 0
}

func longestWord(s string) int {
	n := 0
	for _, w := range strings.Fields(s) {
		n = max(n, utf8.RuneCountInString(w))
	}
	return n
}

// lines is how many lines a text takes in a column. Widths are counted in digits, and
// letters are on the whole a little narrower.
func lines(s string, width int) int {
	width = max(width*11/10-1, 1)
	n, used := 1, 0
	for _, w := range strings.Fields(s) {
		long := utf8.RuneCountInString(w)
		if used > 0 && used+1+long > width {
			n, used = n+1, 0
		}
		if used > 0 {
			used++
		}
		used += long
		for used > width {
			n, used = n+1, used-width
		}
	}
	return n
}
