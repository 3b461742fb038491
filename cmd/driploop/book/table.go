package book

import (
	"bytes"
	"encoding/csv"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"unicode/utf8"

	"driploop/bom"
	"driploop/catalog/source"
)

// mostTable is how many bytes a table of text may have. The cells are bounded too: a
// file of nothing but separators is many times as large in memory.
const mostTable = 4 << 20

// ReadTable takes a table back that was filled in and saved as text: cells between
// commas, semicolons or tabs, quoted as RFC 4180 has it, the titles in the first line.
// The sheet it makes has no key; its titles are in small letters. It refuses what is
// no such text, titles that are missing or stand twice, and cells beyond the last
// title. Where cells are parted by semicolons, figures may have a decimal comma, as
// spreadsheets write them in countries that have one.
func ReadTable(b []byte) (*bom.FilledSheet, error) {
	text, err := plainText(b)
	if err != nil {
		return nil, err
	}
	text, comma := separator(text)
	if n := bytes.Count(text, []byte(string(comma))); n > mostCells {
		return nil, fmt.Errorf("the file has more than %d cells", mostCells)
	}
	r := csv.NewReader(bytes.NewReader(text))
	r.Comma, r.FieldsPerRecord, r.ReuseRecord = comma, -1, true
	t := &bom.FilledSheet{Name: "the file"}
	for {
		record, err := r.Read()
		if errors.Is(err, io.EOF) {
			break
		}
		if bad := (*csv.ParseError)(nil); errors.As(err, &bad) {
			return nil, fmt.Errorf("line %d: the quotes do not pair up", bad.StartLine)
		} else if err != nil {
			return nil, err
		}
		line, _ := r.FieldPos(0)
		switch {
		case !slices.ContainsFunc(record, func(s string) bool { return strings.TrimSpace(s) != "" }):
		case t.Columns == nil:
			err = tableTitles(t, record)
		default:
			err = tableRow(t, record, line, comma == ';')
		}
		if err != nil {
			return nil, err
		}
	}
	if t.Columns == nil {
		return nil, errors.New("the file is empty")
	}
	return t, nil
}

// plainText is the text of a file, lines ended by line feeds. Only UTF-8 is read: of
// other encodings nobody can tell which.
func plainText(b []byte) ([]byte, error) {
	switch {
	case len(b) > mostTable:
		return nil, fmt.Errorf("the file has more than the %d MiB that a table may have", mostTable>>20)
	case bytes.HasPrefix(b, []byte("PK\x03\x04")):
		return nil, errors.New("the file is no text; if it is a workbook, its name has to end in .xlsx")
	}
	b = bytes.TrimPrefix(b, []byte("\xef\xbb\xbf"))
	if !utf8.Valid(b) || bytes.IndexByte(b, 0) >= 0 {
		return nil, errors.New("the file is no text in UTF-8; save it as CSV UTF-8")
	}
	b = bytes.ReplaceAll(b, []byte("\r\n"), []byte("\n"))
	return bytes.ReplaceAll(b, []byte("\r"), []byte("\n")), nil
}

// separator finds what parts the cells: what a first line sep=; says, else what of
// commas, semicolons and tabs stands most often in the line of the titles.
func separator(text []byte) ([]byte, rune) {
	text = bytes.TrimLeft(text, "\n")
	line, rest, _ := bytes.Cut(text, []byte("\n"))
	if said, ok := strings.CutPrefix(strings.ToLower(string(line)), "sep="); ok && len(said) == 1 && strings.Contains(",;\t", said) {
		return rest, rune(said[0])
	}
	best := ','
	for _, c := range ";\t" {
		if bytes.Count(line, []byte(string(c))) > bytes.Count(line, []byte(string(best))) {
			best = c
		}
	}
	return text, best
}

// tableTitles reads the first line.
func tableTitles(t *bom.FilledSheet, record []string) error {
	if len(record) > mostColumns {
		return fmt.Errorf("the file has %d columns; a table of ours has a few", len(record))
	}
	for _, title := range record {
		title = strings.ToLower(strings.Join(strings.Fields(title), " "))
		if title != "" && slices.Contains(t.Columns, title) {
			return fmt.Errorf("the title %s stands over two columns", source.Quote(title))
		}
		t.Columns = append(t.Columns, title)
	}
	for len(t.Columns) > 0 && t.Columns[len(t.Columns)-1] == "" {
		t.Columns = t.Columns[:len(t.Columns)-1]
	}
	return nil
}

// tableRow reads a line below the titles.
func tableRow(t *bom.FilledSheet, record []string, line int, commas bool) error {
	entries := map[string]bom.Entry{}
	for i, s := range record {
		e := tableEntry(s, commas)
		switch {
		case e.Kind == bom.EntryBlank:
			continue
		case i >= len(t.Columns) || t.Columns[i] == "":
			return fmt.Errorf("line %d: %s stands in column %d, which has no title", line, source.Quote(e.Text), i+1)
		}
		e.Where = fmt.Sprintf("line %d, %s", line, t.Columns[i])
		entries[t.Columns[i]] = e
	}
	t.Add("", line, entries)
	return nil
}

// tableEntry is what stands in a cell. A text of figures is a number, as it is to a
// spreadsheet; what begins like a formula is one.
func tableEntry(s string, commas bool) bom.Entry {
	s = strings.TrimSpace(s)
	switch {
	case s == "":
		return bom.Entry{}
	case s[0] == '=':
		return bom.Entry{Kind: bom.EntryFormula, Text: s}
	}
	whole, part, pointed := strings.Cut(s, ".")
	if !pointed && commas {
		whole, part, pointed = strings.Cut(s, ",")
		pointed = pointed && len(part) != 3 // 1,500 may be one and a half, or fifteen hundred
		if !pointed {
			whole = s
		}
	}
	if !figures(whole) || pointed && !figures(part) {
		return bom.Entry{Kind: bom.EntryText, Text: s}
	}
	if pointed {
		s = whole + "." + part
	}
	return bom.Entry{Kind: bom.EntryNumber, Text: s}
}

func figures(s string) bool {
	return s != "" && len(s) <= 20 && strings.Trim(s, "0123456789") == ""
}
