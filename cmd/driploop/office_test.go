package main

import (
	"archive/zip"
	"bytes"
	"encoding/json"
	"fmt"
	"io"
	"math"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/book"
)

// officeBooks are the workbooks that other programs open, with the pages that they
// print on.
var officeBooks = []struct {
	name  string
	pages int // 0: not looked at
	args  []string
}{
	{"takeoff", 8, []string{"takeoff", "--root", "../../testdata/saltmarsh"}},
	{"purchase", 13, []string{"purchase", "--root", "../../testdata/saltmarsh"}},
	{"stock", 9, []string{"stock", "--root", "../../testdata/saltmarsh"}},
	{"pick", 3, []string{"pick", "quay-lane", "--root", "../../testdata/saltmarsh"}},
	{"hostile-takeoff", 0, []string{"takeoff", "--root", hostile}},
	{"hostile-purchase", 0, []string{"purchase", "--root", hostile}},
	{"hostile-stock", 0, []string{"stock", "--root", hostile}},
	{"hostile-pick", 0, []string{"pick", "lane", "--root", hostile}},
}

// needed says where a program is; without it a test is left out, and in the gate,
// where nothing may be left out, fails.
func needed(t *testing.T, program string, probe ...string) {
	t.Helper()
	_, err := exec.LookPath(program)
	if err == nil && probe != nil {
		err = exec.Command(program, probe...).Run()
	}
	switch {
	case err == nil:
	case os.Getenv("DRIPLOOP_CI") != "":
		t.Fatalf("%s %v: %v, and nothing may be left out here", program, probe, err)
	default:
		t.Skipf("left out: workbooks in other programs, for want of %s; bash .ci/run installs it", program)
	}
}

// TestOffice opens every workbook with an office program and with another library:
// totals are computed again from nothing and are ours to the cent, nothing fails to
// compute, formats and checks are understood, and the pages are as many as they were
// when somebody looked at them.
func TestOffice(t *testing.T) {
	needed(t, "soffice")
	needed(t, "pdfinfo")
	needed(t, "fc-match")
	needed(t, "/usr/bin/python3", "-c", "import openpyxl")
	dir := t.TempDir()
	var plain, bare []string
	for _, b := range officeBooks {
		out, messages, status := run(append(b.args, "--today", "2026-12-01", "--as", "xlsx"))
		if status > statusHeld {
			t.Fatalf("%s: %s", b.name, messages)
		}
		plain = append(plain, officeFile(t, filepath.Join(dir, b.name+".xlsx"), []byte(out)))
		bare = append(bare, officeFile(t, filepath.Join(dir, "bare", b.name+".xlsx"), withoutValues(t, []byte(out))))
	}
	products := roundings(t)
	plain = append(plain, officeFile(t, filepath.Join(dir, "roundings.xlsx"), products))
	bare = append(bare, officeFile(t, filepath.Join(dir, "bare", "roundings.xlsx"), withoutValues(t, products)))
	office(t, dir, "xlsx", bare)
	office(t, dir, "pdf", plain[:len(officeBooks)])
	for i, b := range officeBooks {
		t.Run(b.name, func(t *testing.T) {
			sameFigures(t, plain[i], filepath.Join(dir, "xlsx", b.name+".xlsx"))
			if b.pages > 0 {
				samePages(t, filepath.Join(dir, "pdf", b.name+".pdf"), b.pages)
			}
		})
	}
	t.Run("roundings", func(t *testing.T) {
		sameFigures(t, plain[len(officeBooks)], filepath.Join(dir, "xlsx", "roundings.xlsx"))
	})
	otherLibrary(t, plain)
}

// roundings are lines of orders, many of which come to half a cent, with totals in
// whole numbers: prices are in 1/10 000, lengths in mm.
func roundings(t *testing.T) []byte {
	t.Helper()
	s := bom.Sheet{Key: "roundings", Name: "Roundings", Columns: []bom.Column{bom.CountColumn("packs"), bom.MoneyColumn("price"),
		bom.MoneyColumn("total").Asked(bom.Ask{})}}
	live := bom.Live{How: bom.LiveProduct, Of: []string{"packs", "price"}}
	halves, r := 0, rand.New(rand.NewPCG(1, 2))
	for i := range 4000 {
		packs, price := r.Int64N(400)+1, r.Int64N(500_000)+1
		if i%4 == 0 {
			price = price/50*50 + 50 // an odd number of packs at a half cent
		}
		if packs*price%100 == 50 {
			halves++
		}
		s.Row(fmt.Sprint("packs ", i), bom.CountCell(packs), bom.MoneyCell(unit.Money(price)), bom.MoneyCell(unit.Money(packs*price).Cents()).By(live))
		s.Row(fmt.Sprint("length ", i), bom.LengthCell(unit.MM(packs*137)), bom.MoneyCell(unit.Money(price)),
			bom.MoneyCell(unit.Money((packs*137*price+50_000)/100_000*100)).By(live))
	}
	s.SumAll("total", "together", "total")
	if halves < 200 {
		t.Fatalf("%d lines come to half a cent", halves)
	}
	from := bom.Sheet{Key: "summary", Name: "Summary", Columns: []bom.Column{bom.MoneyColumn("total")}}
	from.Row("total", s.Rows[len(s.Rows)-1].Cells[2].By(bom.Live{How: bom.LiveSame, Sheet: "roundings", Row: "total", Of: []string{"total"}}))
	b, err := book.Write([]bom.Sheet{from, s}, book.Meta{Title: "Roundings", Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	return b
}

func officeFile(t *testing.T, name string, b []byte) string {
	t.Helper()
	if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
		t.Fatal(err)
	}
	if err := os.WriteFile(name, b, 0o666); err != nil {
		t.Fatal(err)
	}
	return name
}

// office converts files with a profile of its own, so that no other instance is in
// the way.
func office(t *testing.T, dir, to string, files []string) {
	t.Helper()
	args := []string{"--headless", "--norestore", "-env:UserInstallation=file://" + filepath.Join(dir, "profile"), "--convert-to", to, "--outdir", filepath.Join(dir, to)}
	if out, err := exec.Command("soffice", append(args, files...)...).CombinedOutput(); err != nil {
		t.Fatalf("soffice: %v\n%s", err, out)
	}
}

var cachedValue = regexp.MustCompile(`</f><v>[^<]*</v>`)

// withoutValues takes the values of all formulas away, so that whoever opens the
// workbook has to compute them.
func withoutValues(t *testing.T, b []byte) []byte {
	t.Helper()
	r, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, f := range r.File {
		in, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		text, err := io.ReadAll(in)
		if err != nil {
			t.Fatal(err)
		}
		to, err := w.Create(f.Name)
		if err == nil {
			_, err = to.Write(cachedValue.ReplaceAll(text, []byte("</f>")))
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil {
		t.Fatal(err)
	}
	return out.Bytes()
}

// sameFigures holds what was computed against what we wrote, cell by cell.
func sameFigures(t *testing.T, ours, theirs string) {
	t.Helper()
	want, got := readBook(t, ours), readBook(t, theirs)
	formulas := 0
	for _, s := range want {
		other, err := got.Sheet(s.Key)
		if err != nil {
			t.Fatal(err)
		}
		if len(other.Rows) != len(s.Rows) || len(other.Facts) != len(s.Facts) {
			t.Fatalf("%s has %d rows and %d facts, and had %d and %d", s.Name, len(other.Rows), len(other.Facts), len(s.Rows), len(s.Facts))
		}
		for i := range s.Rows {
			for _, title := range s.Columns {
				a, b := s.Rows[i].Entry(title), other.Rows[i].Entry(title)
				if a.Kind == bom.EntryFormula {
					formulas++
				}
				if !sameEntry(a, b) {
					t.Errorf("%s, %s, row %s: ours is %q, computed is %q", s.Name, title, s.Rows[i].Key, a.Text, b.Text)
				}
			}
			if s.Rows[i].Key != other.Rows[i].Key {
				t.Errorf("%s: the row %q came back as %q", s.Name, s.Rows[i].Key, other.Rows[i].Key)
			}
		}
	}
	t.Logf("%d sheets, %d formulas computed again", len(want), formulas)
}

// sameEntry compares figures to the tenth of a cent or millimetre, and what is no
// formula must still be none.
func sameEntry(a, b bom.Entry) bool {
	if a.Kind != b.Kind {
		return a.Blank() && b.Blank()
	}
	x, errX := strconv.ParseFloat(a.Text, 64)
	y, errY := strconv.ParseFloat(b.Text, 64)
	if errX != nil || errY != nil {
		return a.Text == b.Text
	}
	return math.Abs(x-y) < 1e-6
}

func readBook(t *testing.T, name string) bom.FilledBook {
	t.Helper()
	b, err := os.ReadFile(name)
	if err != nil {
		t.Fatal(err)
	}
	out, err := book.Read(b)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

var pdfPages = regexp.MustCompile(`(?m)^Pages: +(\d+)$`)

// samePages counts the pages. How many there are depends on the letters: the gate has
// those that are as wide as the ones that the workbook names.
func samePages(t *testing.T, file string, want int) {
	t.Helper()
	font, err := exec.Command("fc-match", "Calibri").Output()
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Contains(font, []byte("Carlito")) {
		if os.Getenv("DRIPLOOP_CI") != "" {
			t.Fatalf("the pages are printed in %s", font)
		}
		t.Logf("left out: the pages, for want of fonts-crosextra-carlito")
		return
	}
	out, err := exec.Command("pdfinfo", file).Output()
	if err != nil {
		t.Fatal(err)
	}
	if m := pdfPages.FindSubmatch(out); m == nil || string(m[1]) != strconv.Itoa(want) {
		t.Errorf("it prints on %s pages, want %d", m, want)
	}
}

// otherSheet is what the other library finds in a sheet.
type otherSheet struct {
	Formats, Asks                  []string
	Frozen, Titles, Filter, Footer string
	Unlocked, Wide, High, Formulas int
	Fit                            bool
	Without                        [][]string
}

func otherLibrary(t *testing.T, files []string) {
	t.Helper()
	cmd := exec.Command("/usr/bin/python3", append([]string{"../../.ci/workbooks.py"}, files...)...)
	var messages bytes.Buffer
	cmd.Stderr = &messages
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%v\n%s", err, messages.Bytes())
	}
	var found map[string]struct {
		Creator, Created string
		Sheets           map[string]otherSheet
	}
	if err := json.Unmarshal(out, &found); err != nil {
		t.Fatal(err)
	}
	for _, file := range files {
		b := found[file]
		if b.Creator != "driploop" || b.Created != "2026-12-01T00:00:00" {
			t.Errorf("%s is by %s, %s", file, b.Creator, b.Created)
		}
		if len(b.Sheets) < 2 {
			t.Errorf("%s has %d sheets", file, len(b.Sheets))
		}
		for name, s := range b.Sheets {
			for _, w := range s.Without {
				if !strings.HasPrefix(w[1], "=IF(COUNT(") { // blank until something is counted
					t.Errorf("%s, %s: %v has no value", file, name, w)
				}
			}
			head, _, _ := strings.Cut(strings.ReplaceAll(s.Titles, "$", ""), ":")
			line, err := strconv.Atoi(head)
			if err != nil || (s.Frozen == "") != (line > 20) || !s.Fit || s.Wide != 1 || s.High != 0 || s.Footer != "Page &P of &N" {
				t.Errorf("%s, %s is set up as %+v", file, name, s)
			}
		}
	}
	tern := found[files[1]].Sheets["Order Tern Supply"]
	for _, want := range []string{"#,##0", "#,##0.00", "yyyy-mm-dd", "@"} {
		if !strings.Contains(fmt.Sprintf(" %q ", tern.Formats), strconv.Quote(want)) {
			t.Errorf("the order has the formats %q and not %s", tern.Formats, want)
		}
	}
	if got := strings.Join(tern.Asks, " "); got != "date decimal list textLength whole" {
		t.Errorf("the order asks for %s", got)
	}
	if tern.Unlocked < 4*7+3 {
		t.Errorf("the order has %d cells to fill in", tern.Unlocked)
	}
}
