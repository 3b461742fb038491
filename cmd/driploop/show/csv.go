package show

import (
	"bytes"
	"encoding/csv"
	"strings"
)

// Cell is a string that a spreadsheet takes for text. Programs that open CSV take
// a cell that begins with = + - @, tab or carriage return for a formula; such a
// cell gets an apostrophe in front, which they show or drop, but never run.
type Cell string

// CellOf makes a cell of text from a file. Figures of our own are cells as they are.
func CellOf(s string) Cell {
	s = strings.ToValidUTF8(strings.ReplaceAll(s, "\x00", "\uFFFD"), "\uFFFD")
	if lead := strings.TrimLeft(s, " "); lead != "" && strings.ContainsRune("=+-@\t\r\n", rune(lead[0])) {
		return Cell("'" + s)
	}
	return Cell(s)
}

// csvOf writes rows as RFC 4180 has them.
func csvOf(rows [][]Cell) ([]byte, error) {
	var b bytes.Buffer
	w := csv.NewWriter(&b)
	w.UseCRLF = true
	for _, r := range rows {
		record := make([]string, len(r))
		for i, c := range r {
			record[i] = string(c)
		}
		if err := w.Write(record); err != nil {
			return nil, err
		}
	}
	w.Flush()
	return b.Bytes(), w.Error()
}
