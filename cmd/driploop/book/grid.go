package book

import (
	"encoding/xml"
	"errors"
	"fmt"
	"slices"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
)

// reader reads the cells of sheets.
type reader struct {
	shared []string
	cells  int // that may still come
}

// grid is the cells of a sheet in which something stands.
type grid struct{ rows []gridRow }

type gridRow struct {
	line  int
	cells []gridCell // by rising column
}

type gridCell struct {
	column int
	bom.Entry
}

// at finds the cell of a column, blank where there is none.
func (r *gridRow) at(column int) bom.Entry {
	for _, c := range r.cells {
		if c.column == column {
			return c.Entry
		}
	}
	return bom.Entry{}
}

// cellReader is a cell while it is being read.
type cellReader struct {
	column      int
	kind        string
	formula     bool
	value, text strings.Builder
}

// grid reads the cells of one sheet. Nothing is kept of blank ones, wherever they
// stand.
func (r *reader) grid(text []byte) (*grid, error) {
	g := &grid{}
	var row gridRow
	var cell *cellReader
	into := ""
	err := tokens(text, func(t xml.Token) error {
		switch t := t.(type) {
		case xml.StartElement:
			switch t.Name.Local {
			case "row":
				line, err := r.line(t, g)
				row = gridRow{line: line}
				return err
			case "c":
				c, err := newCell(t, &row)
				cell = c
				return err
			case "f":
				if cell != nil {
					cell.formula = true
				}
			}
			into = t.Name.Local
		case xml.EndElement:
			into = ""
			switch {
			case t.Name.Local == "c" && cell != nil:
				err := r.put(cell, &row)
				cell = nil
				return err
			case t.Name.Local == "row" && len(row.cells) > 0:
				g.rows = append(g.rows, row)
				row = gridRow{line: row.line}
			}
		case xml.CharData:
			switch {
			case cell == nil:
			case into == "v":
				cell.value.Write(t)
			case into == "t":
				cell.text.Write(t)
			}
		}
		return nil
	})
	return g, err
}

// line is the number of a row. Rows rise.
func (r *reader) line(t xml.StartElement, g *grid) (int, error) {
	last := 0
	if n := len(g.rows); n > 0 {
		last = g.rows[n-1].line
	}
	at := elementOf(t).attr["r"]
	if at == "" {
		return last + 1, nil
	}
	n, err := strconv.Atoi(at)
	if err != nil || n <= last || n > maxRows {
		return 0, errors.New("its rows are out of order")
	}
	return n, nil
}

// newCell begins a cell. Cells of a row rise.
func newCell(t xml.StartElement, row *gridRow) (*cellReader, error) {
	e := elementOf(t)
	last := 0
	if n := len(row.cells); n > 0 {
		last = row.cells[n-1].column
	}
	c := &cellReader{column: last + 1, kind: e.attr["t"]}
	if at := e.attr["r"]; at != "" {
		column, line := cellAt(at)
		if column <= last || line != row.line {
			return nil, errors.New("its cells are out of order")
		}
		c.column = column
	}
	return c, nil
}

// cellAt takes a name like K9 apart; what is no such name is 0, 0.
func cellAt(name string) (column, row int) {
	i := 0
	for i < len(name) && name[i] >= 'A' && name[i] <= 'Z' && i < 4 {
		column = column*26 + int(name[i]-'A') + 1
		i++
	}
	row, err := strconv.Atoi(name[i:])
	if err != nil || i == 0 || row < 1 || name[i] == '+' {
		return 0, 0
	}
	return column, row
}

// put keeps what stands in a cell.
func (r *reader) put(c *cellReader, row *gridRow) error {
	e, err := r.entry(c)
	if err != nil || e.Kind == bom.EntryBlank {
		return err
	}
	if c.column > mostColumns {
		return fmt.Errorf("something stands right of column %d", mostColumns)
	}
	if r.cells--; r.cells < 0 {
		return fmt.Errorf("the file has more than %d cells with something in them", mostCells)
	}
	row.cells = append(row.cells, gridCell{c.column, e})
	return nil
}

// entry is what stands in a cell.
func (r *reader) entry(c *cellReader) (bom.Entry, error) {
	value := strings.TrimSpace(c.value.String())
	e := bom.Entry{Text: value}
	switch c.kind {
	case "", "n":
		if value != "" {
			e.Kind = bom.EntryNumber
		}
	case "s":
		n, err := strconv.Atoi(value)
		if err != nil || n < 0 || n >= len(r.shared) {
			return e, errors.New("a cell refers to a text that is not there")
		}
		e.Kind, e.Text = bom.EntryText, r.shared[n]
	case "inlineStr":
		e.Kind, e.Text = bom.EntryText, unescape(c.text.String())
	case "str", "d":
		e.Kind, e.Text = bom.EntryText, unescape(c.value.String())
	case "b":
		e.Kind = bom.EntryTruth
	case "e":
		e.Kind = bom.EntryFault
	default:
		return e, fmt.Errorf("a cell is of the unknown kind %s", source.Quote(c.kind))
	}
	switch {
	case c.formula:
		e.Kind = bom.EntryFormula
	case e.Kind == bom.EntryText && e.Text == "":
		e = bom.Entry{}
	}
	return e, nil
}

// filled finds the table of a sheet by the marker beside its titles; it is nil where
// the sheet is none of ours. A text may look like a marker, but it stands left of the
// keys or, as the key of a row, below the marker.
func (g *grid) filled(name string) (*bom.FilledSheet, error) {
	head, column := -1, 0
	for i, r := range g.rows {
		for _, c := range r.cells {
			if c.column > column && c.Kind == bom.EntryText && strings.HasPrefix(c.Text, marker) {
				head, column = i, c.column
			}
		}
	}
	if head < 0 {
		return nil, nil
	}
	t := &table{FilledSheet: &bom.FilledSheet{Name: name, Key: strings.TrimPrefix(g.rows[head].at(column).Text, marker)}, key: column, lines: map[string]int{}}
	if err := t.titles(&g.rows[head]); err != nil {
		return nil, err
	}
	for i := range g.rows {
		var err error
		switch {
		case i < head:
			err = t.fact(&g.rows[i])
		case i > head:
			err = t.row(&g.rows[i])
		}
		if err != nil {
			return nil, err
		}
	}
	return t.FilledSheet, nil
}

// table is a sheet of ours while it is put together.
type table struct {
	*bom.FilledSheet
	key    int // column
	titled []gridCell
	lines  map[string]int // of the keys
}

func (t *table) titles(head *gridRow) error {
	for _, c := range head.cells {
		if c.column >= t.key {
			continue
		}
		title := strings.TrimSpace(c.Text)
		if slices.Contains(t.Columns, title) {
			return fmt.Errorf("%s: the title %s stands over two columns", t.Name, source.Quote(title))
		}
		t.Columns = append(t.Columns, title)
		t.titled = append(t.titled, c)
	}
	return nil
}

// keyOf is the key of a row; no key stands twice.
func (t *table) keyOf(r *gridRow) (string, error) {
	e := r.at(t.key)
	if e.Kind == bom.EntryBlank {
		return "", nil
	}
	if e.Kind != bom.EntryText {
		return "", fmt.Errorf("%s, row %d: the hidden key was changed", t.Name, r.line)
	}
	if before := t.lines[e.Text]; before > 0 {
		return "", fmt.Errorf("%s: rows %d and %d are one and the same row; delete one", t.Name, before, r.line)
	}
	t.lines[e.Text] = r.line
	return e.Text, nil
}

// fact reads a row above the table: its value is the first one right of the label.
func (t *table) fact(r *gridRow) error {
	key, err := t.keyOf(r)
	if err != nil || key == "" {
		return err
	}
	f := bom.FilledFact{Key: key, Entry: bom.Entry{Where: fmt.Sprintf("%s, row %d", t.Name, r.line)}}
	for _, c := range r.cells {
		if c.column > 1 && c.column < t.key {
			f.Entry = c.Entry
			f.Where = t.Name + ", " + ref(c.column, r.line)
			break
		}
	}
	t.Facts = append(t.Facts, f)
	return nil
}

func (t *table) row(r *gridRow) error {
	key, err := t.keyOf(r)
	if err != nil {
		return err
	}
	entries := map[string]bom.Entry{}
	for i, title := range t.titled {
		if e := r.at(title.column); e.Kind != bom.EntryBlank {
			e.Where = t.Name + ", " + ref(title.column, r.line)
			entries[t.Columns[i]] = e
		}
	}
	t.Add(key, r.line, entries)
	return nil
}
