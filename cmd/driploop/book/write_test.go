package book

import (
	"archive/zip"
	"bytes"
	"fmt"
	"io"
	"regexp"
	"strings"
	"testing"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
	"driploop/catalog/unit"
)

var today = unit.Date{Year: 2026, Month: 12, Day: 1}

// order is a small sheet that has everything.
func order() bom.Sheet {
	s := bom.Sheet{Key: "order tern", Name: "Tern", Title: "Order to Tern Supply", Wide: true, Filter: true,
		Notes: []string{"Prices are net of tax."},
		Facts: []bom.Fact{{Key: "po", Label: "order number", Cell: bom.Cell{}, Ask: &bom.Ask{Hint: "as in your books"}},
			{Key: "day", Label: "day", Cell: bom.DayCell(today)}},
		Columns: []bom.Column{{Title: "line", Kind: bom.KindCount}, {Title: "part", Kind: bom.KindWords}, {Title: "packs", Kind: bom.KindCount},
			{Title: "unit price", Kind: bom.KindMoney}, {Title: "total", Kind: bom.KindMoney}, {Title: "left", Kind: bom.KindLength},
			{Title: "ordered packs", Kind: bom.KindCount, Ask: &bom.Ask{Most: 500}},
			{Title: "how", Kind: bom.KindWords, Ask: &bom.Ask{Choice: []string{"tape", "marks"}}},
			{Title: "promised", Kind: bom.KindDay, Ask: &bom.Ask{}}, {Title: "price", Kind: bom.KindMoney, Ask: &bom.Ask{}},
			{Title: "note", Kind: bom.KindWords, Ask: &bom.Ask{}}, {Title: "rest", Kind: bom.KindLength, Ask: &bom.Ask{}}}}
	line := func(n, packs int64, part string, price unit.Money) {
		s.Row("CX-"+part, bom.CountCell(n), bom.WordsCell(part), bom.CountCell(packs), bom.MoneyCell(price),
			bom.MoneyCell((price * unit.Money(packs)).Cents()).By(bom.Live{How: bom.LiveProduct, Of: []string{"packs", "unit price"}}), bom.LengthCell(12_345))
	}
	line(1, 3, "10", 3_180_000)
	line(2, 7, "5", 3_350)
	s.Sum("total", "together", "total")
	return s
}

// parts are the files in a workbook.
func parts(t *testing.T, b []byte) map[string]string {
	t.Helper()
	r, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]string{}
	for _, f := range r.File {
		in, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		text, err := io.ReadAll(in)
		if err != nil {
			t.Fatal(err)
		}
		out[f.Name] = string(text)
	}
	return out
}

func write(t *testing.T, sheets ...bom.Sheet) []byte {
	t.Helper()
	b, err := Write(sheets, Meta{Title: "Test", Today: today})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// What a viewer that does not compute shows stands beside every formula.
func TestFormulasHaveValues(t *testing.T) {
	ref := bom.Sheet{Key: "summary", Name: "Summary", Columns: []bom.Column{{Title: "vendor", Kind: bom.KindWords}, {Title: "goods", Kind: bom.KindMoney}}}
	ref.Row("tern", bom.WordsCell("tern"), bom.MoneyCell(9_563_500).By(bom.Live{How: bom.LiveSame, Sheet: "order tern", Row: "total", Of: []string{"total"}}))
	all := parts(t, write(t, ref, order()))
	for _, want := range []string{
		`<f>ROUND(C8*D8,2)</f><v>954</v>`,
		`<f>ROUND(C9*D9,2)</f><v>2.35</v>`, // 7 at 0.335 are 2.345
		`<f>SUBTOTAL(9,E8:E9)</f><v>956.35</v>`,
	} {
		if !strings.Contains(all["xl/worksheets/sheet2.xml"], want) {
			t.Errorf("the order lacks %s", want)
		}
	}
	if want := `<f>&#39;Tern&#39;!E10</f><v>956.35</v>`; !strings.Contains(all["xl/worksheets/sheet1.xml"], want) {
		t.Errorf("the summary lacks %s:\n%s", want, all["xl/worksheets/sheet1.xml"])
	}
}

// Packs of several sizes and single pieces, of which nothing is counted yet.
func TestPacksAreBlankUntilCounted(t *testing.T) {
	s := bom.Sheet{Key: "count", Name: "Count", Columns: []bom.Column{{Title: "bags of 25", Kind: bom.KindCount, Ask: &bom.Ask{}}, {Title: "loose", Kind: bom.KindCount, Ask: &bom.Ask{}},
		{Title: "total", Kind: bom.KindCount}}}
	live := bom.Live{How: bom.LivePacks, Of: []string{"bags of 25", "loose"}, Per: []int64{25, 1}}
	s.Row("a", bom.Cell{}, bom.Cell{}, bom.Cell{}.By(live))
	s.Row("b", bom.CountCell(2), bom.CountCell(3), bom.CountCell(53).By(live))
	sheet := parts(t, write(t, s))["xl/worksheets/sheet1.xml"]
	for _, want := range []string{`t="str"><f>IF(COUNT(A4,B4)=0,&#34;&#34;,N(A4)*25+N(B4))</f></c>`, `<f>IF(COUNT(A5,B5)=0,&#34;&#34;,N(A5)*25+N(B5))</f><v>53</v>`} {
		if !strings.Contains(sheet, want) {
			t.Errorf("the sheet lacks %s:\n%s", want, sheet)
		}
	}
}

// Strings that begin like formulas, hide or turn text, or are too long.
func TestTextStaysText(t *testing.T) {
	texts := []string{"=1+1", "+1", "-1", "@SUM(A1)", "\t=1", "\r=1", "=HYPERLINK(\"http://h.example\")", "\x1b[31m", "a\x00b", "\u202eturned", "a\xffb",
		"_x0041_", "_x001b_", "]]>", "<v>1</v>", "&#x41;", "\ufffe", "a\nb", "  lead", strings.Repeat("🛠", 20000), strings.Repeat("=", 40000)}
	s := bom.Sheet{Key: "=1", Name: "=1+1", Title: texts[0], Notes: texts, Columns: []bom.Column{{Title: "=1+1", Kind: bom.KindWords}}}
	for _, x := range texts {
		s.Facts = append(s.Facts, bom.Fact{Key: x, Label: x, Cell: bom.WordsCell(x)})
		s.Row(x, bom.WordsCell(x))
		s.Heading(x)
		s.Sum(x, x)
	}
	b, err := Write([]bom.Sheet{s}, Meta{Title: "=1+1\x1b", Today: today})
	if err != nil {
		t.Fatal(err)
	}
	all := parts(t, b)
	sheet := all["xl/worksheets/sheet1.xml"]
	if strings.Contains(sheet, "<f>") {
		t.Error("a text became a formula")
	}
	for _, notes := range []string{"texts have characters that do not show themselves", "texts have more than the 32767 characters"} {
		if !strings.Contains(sheet, notes) {
			t.Errorf("the sheet does not say that %s", notes)
		}
	}
	for name, text := range all {
		for i, r := range text {
			if r < ' ' && r != '\n' && r != '\r' || r == 0xFFFD {
				t.Errorf("%s has %U at %d: %q", name, r, i, text[max(0, i-40):i])
				break
			}
		}
	}
	f, err := excelize.OpenReader(bytes.NewReader(b))
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := f.GetRows(f.GetSheetName(0))
	if err != nil {
		t.Fatal(err)
	}
	found := map[string]bool{}
	for _, r := range rows {
		for _, c := range r {
			found[c] = true
			if n := utf16Len(c); n > maxText {
				t.Errorf("a cell has %d characters", n)
			}
		}
	}
	for _, x := range texts[:5] {
		if !found[strings.ReplaceAll(x, "\t", `\x09`)] {
			t.Errorf("%q is not there as it was written", x)
		}
	}
	if !found["_x0041_"] {
		t.Error("a text that looks like an escape of the format is read as the character it stands for")
	}
}

func TestNames(t *testing.T) {
	n := names{}
	long := strings.Repeat("a", 40)
	for _, c := range []struct{ in, want string }{
		{"Tern", "Tern"}, {"tern", "tern 2"}, {"TERN", "TERN 3"}, {"", "Sheet"}, {"History", "Sheet History"}, {"a/b:c*?[d]", "a-b-c---d"},
		{"'x'", "x"}, {"=1+1", "1-1"}, {long, long[:31]}, {long, long[:29] + " 2"}, {"\x00\n", "Sheet 2"},
		{strings.Repeat("🛠", 20), "Sheet 3"}, {strings.Repeat("\U00010400", 20), strings.Repeat("\U00010400", 15)},
	} {
		if got := n.of(c.in); got != c.want {
			t.Errorf("the tab of %q is called %q, want %q", c.in, got, c.want)
		}
	}
}

// Properties, print settings and what may be filled in, as they stand in the file.
func TestSettings(t *testing.T) {
	all := parts(t, write(t, order()))
	sheet := all["xl/worksheets/sheet1.xml"]
	for _, want := range []string{`fitToPage="true"`, `fitToHeight="0"`, `orientation="landscape"`, `&amp;RPage &amp;P of &amp;N`, `<autoFilter ref="$A$7:$L$9"`, `ySplit="7"`,
		`<col min="12" max="12" width="9" customWidth="1"/><col min="13" max="13" width="9.140625" customWidth="1" hidden="1"/></cols>`, `<dimension ref="A1:M10">`, `type="whole"`, `type="decimal"`, `type="date"`, `type="list"`, `type="textLength"`, `state="frozen"`} {
		if !strings.Contains(sheet, want) {
			t.Errorf("the sheet lacks %s", want)
		}
	}
	for part, want := range map[string]string{
		"docProps/core.xml": `<dc:creator>driploop</dc:creator>`,
		"docProps/app.xml":  `<Application>driploop</Application>`,
		"xl/workbook.xml":   `&#39;Tern&#39;!$7:$7`,
		"xl/styles.xml":     `yyyy-mm-dd`,
	} {
		if !strings.Contains(all[part], want) {
			t.Errorf("%s lacks %s:\n%s", part, want, all[part])
		}
	}
	core := all["docProps/core.xml"]
	if got := strings.Count(core, "2026-12-01T00:00:00Z"); got != 2 {
		t.Errorf("the day stands %d times in %s", got, core)
	}
	for _, stranger := range []string{"xuri", "Excel"} {
		if strings.Contains(core, stranger) || strings.Contains(all["docProps/app.xml"], stranger) {
			t.Errorf("the properties name %s", stranger)
		}
	}
	if regexp.MustCompile(`<sheetProtection`).MatchString(sheet) {
		t.Error("the sheet is locked")
	}
}

func TestRefused(t *testing.T) {
	live := bom.Sheet{Name: "A", Columns: []bom.Column{{Title: "a", Kind: bom.KindMoney}}}
	live.Row("", bom.MoneyCell(1).By(bom.Live{How: bom.LiveProduct, Of: []string{"a", "b"}}))
	elsewhere := bom.Sheet{Name: "A", Columns: live.Columns}
	elsewhere.Row("", bom.MoneyCell(1).By(bom.Live{How: bom.LiveSame, Sheet: "x", Row: "y", Of: []string{"a"}}))
	alone := bom.Sheet{Name: "A", Columns: live.Columns}
	alone.Row("", bom.MoneyCell(1).By(bom.Live{How: bom.LiveProduct, Of: []string{"a"}}))
	cells := bom.Sheet{Name: "A", Columns: live.Columns}
	cells.Row("", bom.Cell{}, bom.Cell{})
	for _, c := range []struct {
		want   string
		sheets []bom.Sheet
	}{
		{"there is no sheet", nil},
		{"has no column \"b\"", []bom.Sheet{live}},
		{"which is not there", []bom.Sheet{elsewhere}},
		{"from 1 columns", []bom.Sheet{alone}},
		{"2 cells in row 1 under 1 columns", []bom.Sheet{cells}},
		{"would have 1048579 rows; a workbook takes 1048576", []bom.Sheet{{Name: "A", Columns: live.Columns, Rows: make([]bom.SheetRow, 1<<20)}}},
	} {
		if _, err := Write(c.sheets, Meta{Today: today}); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("the error is %v, want %s", err, c.want)
		}
	}
}

// Streamed sheets come out of the library in any order; the bytes do not.
func TestSameBytes(t *testing.T) {
	var sheets []bom.Sheet
	for i := range 6 {
		s := order()
		s.Key, s.Name = fmt.Sprint(i), fmt.Sprint("Sheet ", i)
		sheets = append(sheets, s)
	}
	first := write(t, sheets...)
	for range 20 {
		if !bytes.Equal(first, write(t, sheets...)) {
			t.Fatal("the same sheets are other bytes")
		}
	}
	r, err := zip.NewReader(bytes.NewReader(first), int64(len(first)))
	if err != nil {
		t.Fatal(err)
	}
	for i, f := range r.File {
		if i > 0 && f.Name <= r.File[i-1].Name {
			t.Errorf("%s stands behind %s", f.Name, r.File[i-1].Name)
		}
	}
}

// FuzzWrite holds that any text, wherever it stands, is written as a text, that it
// comes back as it is shown, and that whatever was changed in it is said.
func FuzzWrite(f *testing.F) {
	for _, s := range []string{"=1+1", "\x1b[31m", "a\xffb", "_x0041_", "]]>&<", "\u202e", "", " ", "\n::error::x", "driploop:k", "🛠"} {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, text string) {
		s := bom.Sheet{Key: "k" + text, Name: text, Title: text, Columns: []bom.Column{bom.TextColumn("a")},
			Facts: []bom.Fact{{Key: "f", Label: text, Cell: bom.WordsCell(text)}}}
		s.Row(text+"r", bom.WordsCell(text))
		b, err := Write([]bom.Sheet{s}, Meta{Title: text, Today: today})
		if err != nil {
			t.Fatal(err)
		}
		sheet := parts(t, b)["xl/worksheets/sheet1.xml"]
		if strings.Contains(sheet, "<f>") {
			t.Error("a text became a formula")
		}
		shown := shorten(escape(text))
		if (shown != text) != strings.Contains(sheet, "characters that") {
			t.Errorf("%q is shown as %q, and the sheet says that of it: %v", text, shown, strings.Contains(sheet, "characters that"))
		}
		all, err := Read(b)
		if err != nil {
			t.Fatal(err)
		}
		if got := all[0].Rows[0].Entry("a"); got.Text != shown {
			t.Errorf("%q comes back as %q", text, got.Text)
		}
		if all[0].Key != keyText("k"+text) || all[0].Rows[0].Key != keyText(text+"r") {
			t.Errorf("the keys come back as %q and %q", all[0].Key, all[0].Rows[0].Key)
		}
	})
}
