package show

import (
	"bytes"
	"encoding/csv"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Cell is a string that a spreadsheet takes for text, on one line. Programs that
// open CSV take a cell that begins with = + - @ for a formula, in some languages
// their wide forms too; such a cell gets an apostrophe in front, which they show or
// drop, but never run.
type Cell string

// CellOf makes a cell of text from a file. Figures of our own are cells as they are.
// Line breaks and other controls become spaces, for what stands behind a break is
// the start of a cell to a program that splits lines first, and a command to a
// build runner; so are :: at the start and ## anywhere.
func CellOf(s string) Cell {
	s = strings.Map(func(r rune) rune {
		if acts(r) {
			return ' '
		}
		return r
	}, strings.ToValidUTF8(s, "\uFFFD"))
	for strings.Contains(s, "##") {
		s = strings.ReplaceAll(s, "##", "# #")
	}
	lead := strings.TrimLeftFunc(s, unicode.IsSpace)
	if strings.ContainsAny(firstOf(lead), "=+-@＝＋－＠") || strings.HasPrefix(lead, "::") {
		return Cell("'" + s)
	}
	return Cell(s)
}

// firstOf is the first character of a string.
func firstOf(s string) string {
	_, n := utf8.DecodeRuneInString(s)
	return s[:n]
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
