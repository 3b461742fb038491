package show

import (
	"encoding/csv"
	"strings"
	"testing"
	"unicode"
)

func TestCellOf(t *testing.T) {
	for _, c := range []struct{ in, want string }{
		{"CX-10", "CX-10"},
		{"N male, 50 Ω", "N male, 50 Ω"},
		{"=1+1", "'=1+1"},
		{"+1", "'+1"},
		{"-12 dB", "'-12 dB"},
		{"@SUM(A1)", "'@SUM(A1)"},
		{" =1", "' =1"},
		{"\t=1", "' =1"},
		{"\r\n=1", "'  =1"},
		{"\u3000=1", "'\u3000=1"},
		{"\x00=1", "' =1"},
		{"＝1+1", "'＝1+1"},
		{"a\n=1", "a =1"},
		{"::error::x", "'::error::x"},
		{"a ###[error]x", "a # # #[error]x"},
		{"a\xffb", "a\uFFFDb"},
		{"a\u202eb", "a b"},
	} {
		if got := CellOf(c.in); string(got) != c.want {
			t.Errorf("%q became %q, want %q", c.in, got, c.want)
		}
	}
}

// harmlessCSV says what of a CSV file does more than show itself, or "".
func harmlessCSV(file string) string {
	rows, err := csv.NewReader(strings.NewReader(file)).ReadAll()
	if err != nil {
		return err.Error()
	}
	for _, r := range rows {
		for _, c := range r {
			lead := strings.TrimLeftFunc(c, func(r rune) bool { return unicode.IsSpace(r) || unicode.IsControl(r) })
			if strings.ContainsAny(firstOf(lead), "=+-@＝＋－＠") {
				return "a cell begins a formula: " + c
			}
		}
	}
	if strings.Count(file, "\n") != len(rows) {
		return "a row takes more than one line"
	}
	return harmlessText(strings.ReplaceAll(file, "\r\n", "\n"))
}

// A stranger's text comes back from a reader of CSV as text: in one cell, on one
// line, and no formula.
func FuzzCSV(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s, s)
	}
	f.Fuzz(func(t *testing.T, a, b string) {
		file, err := csvOf([][]Cell{{"a", "b", "c"}, {CellOf(a), CellOf(b), "x"}, {CellOf(b), CellOf(a), CellOf(a + b)}})
		if err != nil {
			t.Fatal(err)
		}
		if bad := harmlessCSV(string(file)); bad != "" {
			t.Errorf("%q and %q: %s\n%q", a, b, bad, file)
		}
		rows, err := csv.NewReader(strings.NewReader(string(file))).ReadAll()
		if err != nil || len(rows) != 3 || len(rows[1]) != 3 || rows[1][0] != string(CellOf(a)) {
			t.Errorf("%q came back as %q (%v)", a, rows, err)
		}
	})
}
