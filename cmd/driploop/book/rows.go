package book

import (
	"github.com/xuri/excelize/v2"

	"driploop/bom"
)

// marker stands in the hidden column beside the titles of the columns and says what
// the sheet is; the keys of its rows stand below and above it.
const marker = creator + ":"

// lineHeight is the height of a line, in points, and mostLines how many a row shows:
// no row is higher than 409 points.
const (
	lineHeight = 15
	mostLines  = 20
)

// mostFrozen is how many rows may be held in sight: with more, nothing would be left
// of a small screen to move the table in.
const mostFrozen = 20

func height(lines int) float64 { return float64(min(lines, mostLines)*lineHeight + 2) }

// sheetWriter writes the rows of a sheet from the top down.
type sheetWriter struct {
	*builder
	*layout
	to *excelize.StreamWriter
}

// columns sets widths, hides the column of keys and holds the titles in sight.
func (s *sheetWriter) columns() error {
	if err := s.to.SetColVisible(s.key, s.key, false); err != nil {
		return err
	}
	for i := len(s.widths); i > 0; i-- { // the library puts each in front of the others
		if err := s.to.SetColWidth(i, i, float64(s.widths[i-1])); err != nil {
			return err
		}
	}
	if s.head == 0 || s.head > mostFrozen {
		return nil
	}
	return s.to.SetPanes(&excelize.Panes{Freeze: true, YSplit: s.head, TopLeftCell: ref(1, s.head+1), ActivePane: "bottomLeft",
		Selection: []excelize.Selection{{SQRef: ref(1, s.head+1), ActiveCell: ref(1, s.head+1), Pane: "bottomLeft"}}})
}

// above writes title, notes and facts.
func (s *sheetWriter) above() error {
	if err := s.across(1, s.Title, ofTitle, 22); err != nil {
		return err
	}
	for i, n := range s.notes {
		if err := s.across(2+i, n, ofNote, height(lines(n, s.left(len(s.widths)+1)))); err != nil {
			return err
		}
	}
	for i := range s.Facts {
		if err := s.fact(s.facts+i, &s.Facts[i]); err != nil {
			return err
		}
	}
	return nil
}

// across writes a text over the whole width.
func (s *sheetWriter) across(row int, words string, r role, high float64) error {
	c, err := s.cell(bom.WordsCell(words), look{role: r, kind: bom.KindWords})
	if err != nil {
		return err
	}
	if err := s.to.SetRow(ref(1, row), []any{c}, excelize.RowOpts{Height: high}); err != nil {
		return err
	}
	return s.to.MergeCell(ref(1, row), ref(len(s.widths), row))
}

func (s *sheetWriter) fact(row int, f *bom.Fact) error {
	label, err := s.cell(bom.WordsCell(f.Label), look{role: ofLabel, kind: bom.KindWords})
	if err != nil {
		return err
	}
	value, err := s.cell(f.Cell, s.factLook(f))
	if err != nil {
		return err
	}
	cells := make([]any, s.key)
	cells[0] = label
	last := s.value
	for f.Ask != nil && last < len(s.widths) && s.left(last+1)-s.left(s.value) < 24 {
		last++
	}
	for at := s.value; at <= last; at++ {
		cells[at-1] = excelize.Cell{StyleID: value.StyleID}
	}
	cells[s.value-1] = value
	if f.Key != "" {
		cells[s.key-1] = keyText(f.Key)
	}
	if err := s.to.SetRow(ref(1, row), cells, excelize.RowOpts{Height: height(1)}); err != nil || last == s.value {
		return err
	}
	return s.to.MergeCell(ref(s.value, row), ref(last, row))
}

func (s *sheetWriter) factLook(f *bom.Fact) look {
	kind := kindOf(*f)
	return look{role: ofFact, kind: kind, digits: max(decimals(f.Cell, s.Feet), leastDecimals(kind, s.Feet)), feet: s.Feet, clerk: f.Ask != nil}
}

// table writes the titles of the columns and the rows below them.
func (s *sheetWriter) table() error {
	if s.head == 0 {
		return nil
	}
	titles := make([]any, s.key)
	high := 1
	for i, c := range s.Columns {
		cell, err := s.cell(bom.WordsCell(c.Title), look{role: ofHead, kind: c.Kind, clerk: c.Ask != nil})
		if err != nil {
			return err
		}
		titles[i] = cell
		high = max(high, lines(c.Title, s.widths[i]))
	}
	titles[s.key-1] = keyText(marker + s.Key)
	if err := s.to.SetRow(ref(1, s.head), titles, excelize.RowOpts{Height: height(high)}); err != nil {
		return err
	}
	cells := make([]any, s.key)
	for i := range s.Rows {
		clear(cells)
		high, err := s.line(i, cells)
		if err != nil {
			return err
		}
		if err := s.to.SetRow(ref(1, s.rowOf(i)), cells, excelize.RowOpts{Height: high}); err != nil {
			return err
		}
		if s.Rows[i].Role == bom.HeadingRow && len(s.Columns) > 1 {
			if err := s.to.MergeCell(ref(1, s.rowOf(i)), ref(len(s.Columns), s.rowOf(i))); err != nil {
				return err
			}
		}
	}
	return nil
}

// roles of the rows of a sheet.
var roles = map[bom.RowRole]role{bom.PlainRow: ofTable, bom.FixedRow: ofTable, bom.HeadingRow: ofHeading, bom.SumRow: ofSum}

// line fills in the cells of the i-th row and says how high it is.
func (s *sheetWriter) line(i int, cells []any) (high float64, err error) {
	r := &s.Rows[i]
	most := 1
	for at, c := range s.Columns {
		cell := bom.Cell{}
		if at < len(r.Cells) {
			cell = r.Cells[at]
		}
		k := look{role: roles[r.Role], kind: cell.Kind, feet: s.Feet, clerk: c.Ask != nil && r.Role == bom.PlainRow && !cell.Shut}
		if cell.Kind == bom.KindBlank {
			k.kind = c.Kind
		}
		if k.kind == bom.KindMoney || k.kind == bom.KindLength {
			k.digits = max(s.digits[at], leastDecimals(k.kind, s.Feet))
		}
		switch {
		case cell.Kind != bom.KindWords || r.Role == bom.SumRow:
		case r.Role == bom.HeadingRow:
			most = max(most, lines(cell.Words, s.left(len(s.widths)+1)))
		case len(cell.Words) >= s.widths[at]:
			most = max(most, lines(cell.Words, s.widths[at]))
		}
		out, err := s.cell(cell, k)
		if err != nil {
			return 0, err
		}
		if cell.Live != nil {
			f, err := s.formula(s.layout, s.rowOf(i), at+1, cell.Live)
			if err != nil {
				return 0, err
			}
			out.Formula = string(f)
		}
		cells[at] = out
	}
	if r.Key != "" && (r.Role == bom.PlainRow || r.Role == bom.FixedRow) {
		cells[s.key-1] = keyText(r.Key)
	}
	return height(most), nil
}

// keyText is a key as it stands in the hidden column.
func keyText(key string) string { return shorten(escape(key)) }

// cell is a value with its look.
func (s *sheetWriter) cell(c bom.Cell, k look) (excelize.Cell, error) {
	id, err := s.styles.of(k)
	out := excelize.Cell{StyleID: id}
	switch c.Kind {
	case bom.KindBlank:
	case bom.KindWords:
		var told changes
		out.Value = string(told.of(c.Words))
	case bom.KindCount:
		out.Value = c.Count
	default:
		out.Value = s.number(c)
	}
	return out, err
}
