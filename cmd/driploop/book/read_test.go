package book

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"slices"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
	"driploop/catalog/unit"
)

// filledIn writes values into cells of a workbook as a spreadsheet would.
func filledIn(t *testing.T, b []byte, cells map[string]any) []byte {
	t.Helper()
	f, err := excelize.OpenReader(bytes.NewReader(b))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	sheet := f.GetSheetName(0)
	for at, v := range cells {
		if formula, ok := v.(formula); ok {
			err = f.SetCellFormula(sheet, at, string(formula))
		} else {
			err = f.SetCellValue(sheet, at, v)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	var out bytes.Buffer
	if err := f.Write(&out); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

func read(t *testing.T, b []byte, key string) *bom.FilledSheet {
	t.Helper()
	all, err := Read(b)
	if err != nil {
		t.Fatal(err)
	}
	s, err := all.Sheet(key)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// What was filled in comes back with its type, and what was not comes back blank.
func TestReadBack(t *testing.T) {
	s := read(t, filledIn(t, write(t, order()), map[string]any{
		"B4": "PO-32", "G8": 3, "J8": 318.5, "I8": 46000, "K8": "ring first", "L8": 12.3456, "H9": "tape", "G9": " 7 ", "J9": "3.3501", "L9": "60 ft", "I9": "2026-12-09",
	}), "order tern")
	if s.Fact("po").Text != "PO-32" || s.Fact("po").Where != "Tern, B4" {
		t.Errorf("the number is %+v", s.Fact("po"))
	}
	if d, err := s.Fact("day").Day(); err != nil || d != today {
		t.Errorf("the day is %v, %v", d, err)
	}
	if err := s.Has("part", "ordered packs", "note"); err != nil {
		t.Error(err)
	}
	if len(s.Rows) != 3 || s.Rows[0].Key != "CX-10" || s.Rows[1].Key != "CX-5" || s.Rows[2].Key != "" {
		t.Fatalf("the rows are %+v", s.Rows)
	}
	show := func(r *bom.FilledRow) string {
		packs, e1 := r.Entry("ordered packs").Count()
		price, e2 := r.Entry("price").Money()
		day, e3 := r.Entry("promised").Day()
		rest, e4 := r.Entry("rest").Length(false)
		how, e5 := r.Entry("how").Words()
		note, e6 := r.Entry("note").Words()
		return fmt.Sprint(packs, " ", price, " ", day, " ", rest, " ", how, " ", note, " ", []error{e1, e2, e3, e4, e5, e6})
	}
	blank := bom.ErrBlank.Error()
	for i, want := range []string{
		"3 318.50 2025-12-09 12.346 m  ring first [<nil> <nil> <nil> <nil> " + blank + " <nil>]",
		"7 3.3501 2026-12-09 18.288 m tape  [<nil> <nil> <nil> <nil> <nil> " + blank + "]",
	} {
		if got := show(&s.Rows[i]); got != want {
			t.Errorf("row %d is\n%s want\n%s", i, got, want)
		}
	}
	if feet, err := s.Rows[0].Entry("rest").Length(true); err != nil || feet != 3763 {
		t.Errorf("12.3456 ft are %v, %v", feet, err)
	}
	if e := s.Rows[0].Entry("total"); e.Kind != bom.EntryFormula {
		t.Errorf("the computed total is %+v", e)
	}
}

// Values that are not what a column asks for are refused where they are asked for.
func TestReadRefusesValues(t *testing.T) {
	for _, c := range []struct {
		cell string
		v    any
		want string
	}{
		{"G8", "two", `Tern, G8: a whole number, 0 or more, is wanted, not "two"`},
		{"G8", -1, "is wanted, not"},
		{"G8", 1.5, "is wanted, not"},
		{"G8", 1e12, "is wanted, not"},
		{"G8", true, "is wanted, not"},
		{"G8", formula("1+1"), "Tern, G8: a whole number, 0 or more, is wanted, not a formula"},
		{"J8", formula(`HYPERLINK("http://h.example","5")`), "not a formula"},
		{"J8", "1,50", "an amount with at most four decimals is wanted"},
		{"J8", 1.00001, "an amount with at most four decimals is wanted"},
		{"J8", -0.5, "an amount with at most four decimals is wanted"},
		{"I8", "soon", "a day like 2026-12-01 is wanted"},
		{"I8", 46000.5, "without a time"},
		{"I8", 12, "a day like 2026-12-01 is wanted"},
		{"L8", "long", "a length in metres is wanted"},
		{"L8", 1e9, "a length in metres is wanted"},
		{"K8", strings.Repeat("x", 501), "more than 500 characters"},
		{"K8", "a\nb", "a text on one line is wanted"},
		{"K8", "\u202eturned", "a text on one line is wanted"},
	} {
		s := read(t, filledIn(t, write(t, order()), map[string]any{c.cell: c.v}), "order tern")
		r := &s.Rows[0]
		_, e1 := r.Entry("ordered packs").Count()
		_, e2 := r.Entry("price").Money()
		_, e3 := r.Entry("promised").Day()
		_, e4 := r.Entry("rest").Length(false)
		_, e5 := r.Entry("note").Words()
		var found []string
		for _, err := range []error{e1, e2, e3, e4, e5} {
			if !errors.Is(err, bom.ErrBlank) {
				found = append(found, fmt.Sprint(err))
			}
		}
		if len(found) != 1 || !strings.Contains(found[0], c.want) {
			t.Errorf("%v in %s: %q, want %s", c.v, c.cell, found, c.want)
		}
	}
}

// archive packs parts; a nil text leaves a part of the order out.
func archive(t *testing.T, change map[string]func(string) string) []byte {
	t.Helper()
	all := parts(t, write(t, order()))
	for name, f := range change {
		if all[name] = f(all[name]); all[name] == "" {
			delete(all, name)
		}
	}
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for name, text := range all {
		out, err := w.Create(name)
		if err == nil {
			_, err = io.WriteString(out, text)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

func replace(old, new string) func(string) string {
	return func(s string) string { return strings.Replace(s, old, new, 1) }
}

// Files that are no workbook of ours, and files that mean harm.
func TestReadRefusesFiles(t *testing.T) {
	const sheet = "xl/worksheets/sheet1.xml"
	bomb := func(string) string { return strings.Repeat(" ", mostPart+1) }
	cells := func(s string) map[string]func(string) string {
		return map[string]func(string) string{sheet: func(string) string { return "<worksheet><sheetData>" + s + "</sheetData></worksheet>" }}
	}
	for _, c := range []struct {
		want   string
		change map[string]func(string) string
	}{
		{"the part \"xl/workbook.xml\" is missing", map[string]func(string) string{workbookPart: func(string) string { return "" }}},
		{"the part \"xl/worksheets/sheet1.xml\" is missing", map[string]func(string) string{sheet: func(string) string { return "" }}},
		{"unpacks to more than the 64 MiB", map[string]func(string) string{sheet: bomb}},
		{"unpacks to more than the 64 MiB", map[string]func(string) string{"xl/other.xml": bomb}},
		{"no sheet that driploop made", map[string]func(string) string{sheet: replace("driploop:order tern", "mine")}},
		{"the title \"part\" stands over two columns", map[string]func(string) string{sheet: replace("ordered packs", "part")}},
		{"rows 8 and 9 are one and the same", map[string]func(string) string{sheet: replace("<t>CX-5<", "<t>CX-10<")}},
		{"the hidden key was changed", map[string]func(string) string{sheet: replace(`<c r="M9" t="inlineStr"><is><t>CX-5</t></is></c>`, `<c r="M9"><v>5</v></c>`)}},
		{"counts its days from 1904", map[string]func(string) string{workbookPart: replace("<workbookPr ", `<workbookPr date1904="1" `)}},
		{"has definitions of its own", map[string]func(string) string{sheet: replace("<worksheet", `<!DOCTYPE x [<!ENTITY a "b">]><worksheet`)}},
		{"the file is damaged", map[string]func(string) string{sheet: replace("</sheetData>", "&a;")}},
		{"two sheets of the file are one", map[string]func(string) string{workbookPart: replace("<sheets>", `<sheets><sheet name="B" sheetId="9" r:id="rId1"/>`)}},
		{"refers to a text that is not there", cells(`<row r="1"><c r="A1" t="s"><v>7</v></c></row>`)},
		{"of the unknown kind \"q\"", cells(`<row r="1"><c r="A1" t="q"><v>7</v></c></row>`)},
		{"its rows are out of order", cells(`<row r="2"><c r="A2"><v>1</v></c></row><row r="2"/>`)},
		{"its rows are out of order", cells(`<row r="1048577"/>`)},
		{"its cells are out of order", cells(`<row r="1"><c r="B1"><v>1</v></c><c r="A1"/></row>`)},
		{"its cells are out of order", cells(`<row r="1"><c r="A2"/></row>`)},
		{"right of column 256", cells(`<row r="1"><c r="XFD1"><v>1</v></c></row>`)},
		{"more than 500000 cells", cells(strings.Repeat("<row>"+strings.Repeat("<c><v>1</v></c>", 250)+"</row>", 2001))},
		// Far cells in which nothing stands take no room.
		{"no sheet that driploop made", cells(strings.Repeat(`<row><c r="XFD1"/></row>`, 1) + `<row r="1048576"><c r="XFD1048576"/></row>`)},
	} {
		_, err := Read(archive(t, c.change))
		if err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("the error is %v, want %s", err, c.want)
		}
	}
	for _, b := range [][]byte{nil, []byte("PK"), []byte("part,where\n"), bytes.Repeat([]byte{0xD0, 0xCF}, 600)} {
		if _, err := Read(b); err == nil || !strings.Contains(err.Error(), "no workbook") {
			t.Errorf("%q: %v", b[:min(len(b), 8)], err)
		}
	}
	if _, err := Read(write(t, order(), bom.Sheet{Key: "order tern", Name: "Copy", Columns: order().Columns})); err == nil || !strings.Contains(err.Error(), "is there twice") {
		t.Errorf("a copied sheet: %v", err)
	}
}

// An archive that lies about the size of a part.
func TestReadBelievesNoSize(t *testing.T) {
	b := archive(t, map[string]func(string) string{"xl/worksheets/sheet1.xml": func(string) string { return strings.Repeat(" ", mostPart+1) }})
	size := []byte{1, 0, 0, 1} // 16 MiB and one byte, as the archive writes it
	if !bytes.Contains(b, size) {
		t.Fatal("the size is not where it should be")
	}
	if _, err := Read(bytes.ReplaceAll(b, size, []byte{9, 0, 0, 0})); err == nil {
		t.Error("a part that is larger than the archive says was read")
	}
}

// Sheets and columns that are not there are named.
func TestMissing(t *testing.T) {
	all, err := Read(write(t, order()))
	if err != nil {
		t.Fatal(err)
	}
	if _, err := all.Sheet("order plover"); err == nil || !strings.Contains(err.Error(), `no sheet "order plover"`) {
		t.Error(err)
	}
	if err := all[0].Has("part", "gone"); err == nil || !strings.Contains(err.Error(), `Tern: the column "gone" is missing`) {
		t.Error(err)
	}
	if e := all[0].Fact("gone"); !e.Blank() {
		t.Error(e)
	}
}

// Whatever is written comes back as it was, whatever the text.
func TestTextsComeBack(t *testing.T) {
	texts := []string{"=1+1", "+1", "driploop:k", "driploop:", "_x0041_", "]]>", "<t>", "&amp;", "'x", "ä🛠", "1", "2026-12-01"}
	s := bom.Sheet{Key: "k", Name: "K", Columns: []bom.Column{bom.TextColumn("a")}}
	for _, x := range texts {
		s.Row("key "+x, bom.WordsCell(x))
	}
	got := read(t, write(t, s), "k")
	for i, x := range texts {
		if e := got.Rows[i].Entry("a"); e.Text != x || e.Kind != bom.EntryText || got.Rows[i].Key != "key "+x {
			t.Errorf("%q comes back as %+v under %q", x, e, got.Rows[i].Key)
		}
	}
}

// Whoever sorts the rows or moves the columns about is understood.
func TestReadSorted(t *testing.T) {
	b := archive(t, map[string]func(string) string{"xl/worksheets/sheet1.xml": func(s string) string {
		first := s[strings.Index(s, `<row r="8"`):strings.Index(s, `<row r="9"`)]
		second := s[strings.Index(s, `<row r="9"`):strings.Index(s, `<row r="10"`)]
		swapped := strings.NewReplacer(`r="8"`, `r="9"`, "8\"", "9\"").Replace(first)
		return strings.Replace(s, first+second, strings.NewReplacer(`r="9"`, `r="8"`, "9\"", "8\"").Replace(second)+swapped, 1)
	}})
	s := read(t, b, "order tern")
	var keys []string
	for _, r := range s.Rows[:2] {
		keys = append(keys, r.Key)
	}
	if !slices.Equal(keys, []string{"CX-5", "CX-10"}) {
		t.Errorf("the rows are %q", keys)
	}
}

// sheetArchive is a workbook of one sheet with nothing to spare.
func sheetArchive(t testing.TB, sheet string) []byte {
	t.Helper()
	var b bytes.Buffer
	w := zip.NewWriter(&b)
	for _, p := range [][2]string{
		{workbookPart, `<workbook><sheets><sheet name="A" id="1"/></sheets></workbook>`},
		{relationsPart, `<Relationships><Relationship Id="1" Target="worksheets/sheet1.xml"/></Relationships>`},
		{"xl/worksheets/sheet1.xml", sheet},
	} {
		out, err := w.CreateHeader(&zip.FileHeader{Name: p[0], Method: zip.Store})
		if err == nil {
			_, err = io.WriteString(out, p[1])
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return b.Bytes()
}

// FuzzRead holds that no bytes make the reader fail or take long, and that whatever
// it takes can be asked for anything.
func FuzzRead(f *testing.F) {
	for _, cells := range []string{
		`<row r="2"><c r="A2" t="inlineStr"><is><t>a</t></is></c><c r="B2" t="str"><v>driploop:k</v></c></row><row r="3"><c r="A3"><v>1.5</v></c><c r="B3" t="str"><v>x</v></c></row>`,
		`<row r="1"><c r="A1" t="str"><v>a</v></c><c t="str"><v>driploop:</v></c></row><row><c t="b"><f>1</f><v>1</v></c></row><row><c t="e"><v>#N/A</v></c></row>`,
		`<row r="1"><c r="ZZZZ1" t="str"><f/><v>_x0000_</v></c></row>`,
	} {
		f.Add([]byte("<sheetData>"+cells+"</sheetData></worksheet>"), true)
		f.Add(sheetArchive(f, "<worksheet>"+cells+"</worksheet>"), false)
	}
	f.Fuzz(func(t *testing.T, text []byte, packed bool) {
		if packed { // as the sheet of a sound archive
			text = sheetArchive(t, "<worksheet>"+string(text))
		}
		all, err := Read(text)
		if err != nil {
			return
		}
		for _, s := range all {
			for i := range s.Rows {
				for _, title := range s.Columns {
					e := s.Rows[i].Entry(title)
					if n, err := e.Count(); err == nil && (n < 0 || n > bom.MostFilledCount) {
						t.Errorf("a count of %d", n)
					}
					if m, err := e.Money(); err == nil && (m < 0 || m > bom.MostFilledMoney*unit.Money(10000)) {
						t.Errorf("an amount of %v", m)
					}
					if d, err := e.Day(); err == nil && (d.Before(bom.FirstFilledDay) || d.After(bom.LastFilledDay)) {
						t.Errorf("a day of %v", d)
					}
					if l, err := e.Length(true); err == nil && l < 0 {
						t.Errorf("a length of %v", l)
					}
					if w, err := e.Words(); err == nil && (w == "" || strings.ContainsAny(w, "\n\x1b")) {
						t.Errorf("words of %q", w)
					}
				}
			}
		}
	})
}
