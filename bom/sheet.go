package bom

import (
	"driploop/catalog"
	"driploop/catalog/unit"
)

// Sheet is a table to be printed, to be filled in by hand and to be read back. It
// says what stands where and how a value comes about, and nothing of the program in
// which somebody opens it.
type Sheet struct {
	Key     string // what it is to a program: "order tern"; no two of a book are the same
	Name    string // on its tab
	Title   string
	Notes   []string // sentences below the title
	Facts   []Fact   // labelled values above the table
	Columns []Column
	Rows    []SheetRow
	Wide    bool // printed across the long side of the page
	Filter  bool // the reader may choose rows by their values
	Feet    bool // lengths are shown in feet
}

// Fact is one labelled value above a table. One with a key can be read back.
type Fact struct {
	Key, Label string
	Cell       Cell
	Kind       CellKind // of what is filled in, where the cell is blank
	Ask        *Ask     // where it is filled in by hand
}

// Column is one column of a sheet. Titles of a sheet differ.
type Column struct {
	Title string
	Kind  CellKind
	Ask   *Ask // where it is filled in by hand
}

// TextColumn is a column of words.
func TextColumn(title string) Column { return Column{Title: title, Kind: KindWords} }

// CountColumn is a column of numbers of things.
func CountColumn(title string) Column { return Column{Title: title, Kind: KindCount} }

// LengthColumn is a column of lengths.
func LengthColumn(title string) Column { return Column{Title: title, Kind: KindLength} }

// MoneyColumn is a column of amounts of money.
func MoneyColumn(title string) Column { return Column{Title: title, Kind: KindMoney} }

// DayColumn is a column of days.
func DayColumn(title string) Column { return Column{Title: title, Kind: KindDay} }

// Asked is the column as one that is filled in by hand.
func (c Column) Asked(a Ask) Column { c.Ask = &a; return c }

// Ask says what somebody who fills a sheet in may write. A blank is always allowed.
type Ask struct {
	Least, Most int64    // of counts and amounts; of days, lengths and words what is sensible holds
	Choice      []string // of words: one of these
	Hint        string
}

// CellKind is what kind of value a cell holds.
type CellKind int

// The kinds of cells.
const (
	KindBlank CellKind = iota
	KindWords
	KindCount
	KindLength
	KindMoney
	KindDay
)

// Cell is one value of a sheet.
type Cell struct {
	Kind  CellKind
	Words string
	Count int64
	MM    unit.MM
	Money unit.Money
	Day   unit.Date
	Live  *Live // how the value follows from other cells; nil where it stands by itself
	Shut  bool  // nothing is to be filled in here, though the column asks for it
}

// WordsCell holds text.
func WordsCell(s string) Cell {
	if s == "" {
		return Cell{}
	}
	return Cell{Kind: KindWords, Words: s}
}

// CountCell holds a number of things.
func CountCell(n int64) Cell { return Cell{Kind: KindCount, Count: n} }

// LengthCell holds a length.
func LengthCell(l unit.MM) Cell { return Cell{Kind: KindLength, MM: l} }

// MoneyCell holds an amount of money.
func MoneyCell(m unit.Money) Cell { return Cell{Kind: KindMoney, Money: m} }

// DayCell holds a day; of no day it is blank.
func DayCell(d unit.Date) Cell {
	if d.IsZero() {
		return Cell{}
	}
	return Cell{Kind: KindDay, Day: d}
}

// ShutCell is a blank that stays one.
func ShutCell() Cell { return Cell{Shut: true} }

// QuantityCell holds pieces or a length.
func QuantityCell(q catalog.Quantity) Cell {
	if q.Length != 0 {
		return LengthCell(q.Length)
	}
	return CountCell(q.Each)
}

// By is the cell with the way in which its value follows from others.
func (c Cell) By(l Live) Cell { c.Live = &l; return c }

// Live is how a value follows from other cells, so that it stays right when
// somebody changes them.
type Live struct {
	How LiveKind
	Of  []string // titles of columns, of the same row but for LiveSame
	Per []int64  // of LivePacks, how many one of each column stands for

	Sheet, Row string // of LiveSame: the keys of the sheet and of the row
	Rows       int    // of LiveSum: over so many rows, sums in them left out
}

// LiveKind is a way in which a value follows from others.
type LiveKind int

// The ways in which values follow from others.
const (
	LiveProduct LiveKind = iota // two columns multiplied, half a cent rounded up
	LivePacks                   // columns times what one of each stands for; blank while all of them are
	LiveSum                     // the rows above in the same column
	LiveSame                    // the value in another sheet
	LivePlus                    // columns added
)

// SheetRow is one row of a sheet.
type SheetRow struct {
	Key   string // by which a program knows the row when it is read back
	Role  RowRole
	Cells []Cell // as many as there are columns, or fewer
}

// RowRole is what a row is in its sheet.
type RowRole int

// The roles of rows.
const (
	PlainRow RowRole = iota
	FixedRow         // like a plain one, but nothing in it is filled in by hand
	HeadingRow
	SumRow
)

// Row adds a row.
func (s *Sheet) Row(key string, cells ...Cell) {
	s.Rows = append(s.Rows, SheetRow{Key: key, Cells: cells})
}

// Fixed adds a row in which nothing is filled in by hand.
func (s *Sheet) Fixed(key string, cells ...Cell) {
	s.Rows = append(s.Rows, SheetRow{Key: key, Role: FixedRow, Cells: cells})
}

// Heading begins a group of rows.
func (s *Sheet) Heading(text string) {
	s.Rows = append(s.Rows, SheetRow{Role: HeadingRow, Cells: []Cell{WordsCell(text)}})
}

// Sum closes a group: the sums of the named columns over the rows since the last
// heading or sum.
func (s *Sheet) Sum(key, label string, titles ...string) {
	from := len(s.Rows)
	for from > 0 && s.Rows[from-1].counts() {
		from--
	}
	s.sum(key, label, from, titles)
}

// SumAll adds the sums of the named columns over all rows.
func (s *Sheet) SumAll(key, label string, titles ...string) { s.sum(key, label, 0, titles) }

func (s *Sheet) sum(key, label string, from int, titles []string) {
	row := SheetRow{Key: key, Role: SumRow, Cells: make([]Cell, len(s.Columns))}
	row.Cells[0] = WordsCell(label)
	for i, c := range s.Columns {
		for _, t := range titles {
			if t == c.Title {
				row.Cells[i] = s.sumOf(i, from).By(Live{How: LiveSum, Rows: len(s.Rows) - from})
			}
		}
	}
	s.Rows = append(s.Rows, row)
}

// counts reports a row whose values sums are made of.
func (r *SheetRow) counts() bool { return r.Role == PlainRow || r.Role == FixedRow }

// sumOf adds up a column from a row on, sums left out.
func (s *Sheet) sumOf(column, from int) Cell {
	sum := Cell{Kind: s.Columns[column].Kind}
	for _, r := range s.Rows[from:] {
		if !r.counts() || column >= len(r.Cells) {
			continue
		}
		c := r.Cells[column]
		sum.Count += c.Count
		sum.MM += c.MM
		sum.Money += c.Money
	}
	return sum
}

// Column finds a column by its title, or is -1.
func (s *Sheet) Column(title string) int {
	for i, c := range s.Columns {
		if c.Title == title {
			return i
		}
	}
	return -1
}

// RowOf finds a row by its key, or is -1.
func (s *Sheet) RowOf(key string) int {
	for i, r := range s.Rows {
		if r.Key == key {
			return i
		}
	}
	return -1
}
