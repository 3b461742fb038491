package bom

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode"
	"unicode/utf8"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// FilledBook is what came back of sheets that somebody filled in.
type FilledBook []*FilledSheet

// FilledSheet is one of these sheets, known by the key it was made with. Titles and
// keys are as they stand in the file: whoever uses them has to find them in what was
// asked for.
type FilledSheet struct {
	Key, Name string
	Facts     []FilledFact
	Columns   []string
	Rows      []FilledRow // in the order of the file; those without a key are sums, headings and what was added by hand
}

// FilledFact is a labelled value above the table.
type FilledFact struct {
	Key string
	Entry
}

// FilledRow is one row.
type FilledRow struct {
	Key     string
	Line    int // in the file, from 1
	entries map[string]Entry
	sheet   *FilledSheet
}

// Entry is what stands in one cell. The zero Entry is a blank.
type Entry struct {
	Kind  EntryKind
	Text  string // of a number its figures, with a point
	Where string // "Order Tern Supply, K9"
}

// EntryKind is what kind of thing stands in a cell.
type EntryKind int

// The kinds of entries.
const (
	EntryBlank EntryKind = iota
	EntryText
	EntryNumber
	EntryTruth   // yes or no
	EntryFault   // a computation that failed
	EntryFormula // something computed: whoever reads cannot know from what
)

// What may stand in a sheet that is filled in.
const (
	MostFilledCount  = 1_000_000
	MostFilledMoney  = 100_000_000 // whole units
	MostFilledLength = 100_000     // metres or feet
	MostFilledText   = 500         // characters
)

// FirstFilledDay and LastFilledDay bound the days that may be filled in.
var (
	FirstFilledDay = unit.Date{Year: 2000, Month: 1, Day: 1}
	LastFilledDay  = unit.Date{Year: 2099, Month: 12, Day: 31}
)

// Sheet finds a sheet by its key. The error says which one is missing.
func (b FilledBook) Sheet(key string) (*FilledSheet, error) {
	for _, s := range b {
		if s.Key == key {
			return s, nil
		}
	}
	return nil, fmt.Errorf("the file has no sheet %s; it may have been deleted, or its hidden column", source.Quote(key))
}

// Fact is the labelled value with a key, blank where there is none.
func (s *FilledSheet) Fact(key string) Entry {
	for _, f := range s.Facts {
		if f.Key == key {
			return f.Entry
		}
	}
	return Entry{Where: s.Name}
}

// Has reports whether the sheet has all these columns; the error names one that is
// missing.
func (s *FilledSheet) Has(titles ...string) error {
	for _, t := range titles {
		found := false
		for _, c := range s.Columns {
			found = found || c == t
		}
		if !found {
			return fmt.Errorf("%s: the column %s is missing", s.Name, source.Quote(t))
		}
	}
	return nil
}

// Add puts a row into the sheet.
func (s *FilledSheet) Add(key string, line int, entries map[string]Entry) {
	s.Rows = append(s.Rows, FilledRow{Key: key, Line: line, entries: entries, sheet: s})
}

// Entry is what stands under a title.
func (r *FilledRow) Entry(title string) Entry {
	if e, ok := r.entries[title]; ok {
		return e
	}
	return Entry{Where: fmt.Sprintf("%s, row %d", r.sheet.Name, r.Line)}
}

// ErrBlank is returned for a cell in which nothing stands.
var ErrBlank = errors.New("nothing was filled in")

// plain is the text of an entry that is a number or a text.
func (e Entry) plain(wanted string) (string, error) {
	text := strings.TrimSpace(e.Text)
	switch {
	case e.Kind == EntryFormula:
		return "", fmt.Errorf("%s: %s is wanted, not a formula", e.Where, wanted)
	case e.Kind == EntryBlank, e.Kind == EntryText && text == "":
		return "", ErrBlank
	case e.Kind == EntryText, e.Kind == EntryNumber:
		return text, nil
	}
	return "", e.refuse(wanted)
}

func (e Entry) refuse(wanted string) error {
	return fmt.Errorf("%s: %s is wanted, not %s", e.Where, wanted, source.Quote(e.Text))
}

// number is the value of an entry that is a number.
func (e Entry) number(wanted string, least, most float64) (float64, error) {
	v, err := strconv.ParseFloat(e.Text, 64)
	if err != nil || math.IsNaN(v) || v < least || v > most {
		return 0, e.refuse(wanted)
	}
	return v, nil
}

// Blank reports that nothing was filled in.
func (e Entry) Blank() bool {
	return e.Kind == EntryBlank || e.Kind == EntryText && strings.TrimSpace(e.Text) == ""
}

// Count reads a whole number, 0 or more. Errors: ErrBlank, or what is wrong and where.
func (e Entry) Count() (int64, error) {
	const wanted = "a whole number, 0 or more,"
	text, err := e.plain(wanted)
	if err != nil {
		return 0, err
	}
	if e.Kind == EntryText {
		e.Text = text
		if strings.Trim(text, "0123456789") != "" {
			return 0, e.refuse(wanted)
		}
	}
	v, err := e.number(wanted, 0, MostFilledCount)
	if err != nil || math.Abs(v-math.Round(v)) > 1e-9 {
		return 0, e.refuse(wanted)
	}
	return int64(math.Round(v)), nil
}

// Money reads an amount with at most four decimals. Errors: as Count.
func (e Entry) Money() (unit.Money, error) {
	const wanted = "an amount with at most four decimals"
	text, err := e.plain(wanted)
	if err != nil {
		return 0, err
	}
	if e.Kind == EntryText {
		m, err := unit.ParseMoney(text)
		if err != nil || m > MostFilledMoney*10000 {
			return 0, e.refuse(wanted)
		}
		return m, nil
	}
	v, err := e.number(wanted, 0, MostFilledMoney)
	if err != nil {
		return 0, err
	}
	whole := math.Round(v * 10000)
	if math.Abs(v*10000-whole) > 1e-4 { // what a spreadsheet keeps of 0.0001 differs by less
		return 0, e.refuse(wanted)
	}
	return unit.Money(whole), nil
}

// Length reads a length in metres, or in feet where the sheet has them; a text
// carries its unit. Errors: as Count.
func (e Entry) Length(feet bool) (unit.MM, error) {
	wanted := "a length in metres"
	if feet {
		wanted = "a length in feet"
	}
	text, err := e.plain(wanted)
	if err != nil {
		return 0, err
	}
	if e.Kind == EntryText {
		l, err := unit.ParseLength(text)
		if err != nil {
			return 0, e.refuse(wanted)
		}
		return l, nil
	}
	v, err := e.number(wanted, 0, MostFilledLength)
	if err != nil {
		return 0, err
	}
	per := 1000.0
	if feet {
		per = 304.8
	}
	return unit.MM(math.Round(v * per)), nil
}

// epoch is day 0 of a spreadsheet.
var epoch = unit.Date{Year: 1899, Month: 12, Day: 30}

// DayNumber is the number that a spreadsheet has for a day; programs agree on it from
// 1900-03-01 on.
func DayNumber(d unit.Date) int { return epoch.DaysUntil(d) }

// Day reads a day without a time: a date, or a text like 2026-12-01. Errors: as Count.
func (e Entry) Day() (unit.Date, error) {
	const wanted = "a day like 2026-12-01"
	text, err := e.plain(wanted)
	if err != nil {
		return unit.Date{}, err
	}
	var d unit.Date
	if e.Kind == EntryText {
		d, err = unit.ParseDate(text)
	} else {
		var v float64
		v, err = e.number(wanted, 0, float64(DayNumber(LastFilledDay)))
		if v != math.Trunc(v) {
			return d, e.refuse(wanted + ", without a time,")
		}
		d = epoch.Add(int(v))
	}
	if err != nil || d.Before(FirstFilledDay) || d.After(LastFilledDay) {
		return unit.Date{}, e.refuse(wanted)
	}
	return d, nil
}

// Words reads a text on one line. Errors: as Count.
func (e Entry) Words() (string, error) {
	const wanted = "a text on one line"
	text, err := e.plain(wanted)
	if err != nil {
		return "", err
	}
	if utf8.RuneCountInString(text) > MostFilledText {
		return "", fmt.Errorf("%s: the text has more than %d characters", e.Where, MostFilledText)
	}
	if !utf8.ValidString(text) || strings.ContainsFunc(text, func(r rune) bool { return unicode.IsControl(r) || unicode.Is(unicode.Cf, r) }) {
		return "", e.refuse(wanted)
	}
	return text, nil
}
