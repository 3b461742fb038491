package main

import (
	"archive/zip"
	"bytes"
	"cmp"
	"encoding/xml"
	"fmt"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"sync"
	"testing"
	"time"

	"driploop/bom"
	"driploop/cmd/driploop/book"
)

// fills are what somebody writes into a sheet of a workbook: values by cell, "=…" for
// a formula.
type fills map[string]string

// fillIn writes into a workbook as an office program would, sheet by sheet of their
// keys.
func fillIn(t *testing.T, file string, sheets map[string]fills) {
	t.Helper()
	b, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	all, err := book.Read(b)
	if err != nil {
		t.Fatal(err)
	}
	in, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
	if err != nil {
		t.Fatal(err)
	}
	var out bytes.Buffer
	w := zip.NewWriter(&out)
	for _, f := range in.File {
		r, err := f.Open()
		if err != nil {
			t.Fatal(err)
		}
		text, err := io.ReadAll(r)
		if err != nil {
			t.Fatal(err)
		}
		for i, s := range all {
			if f.Name == fmt.Sprintf("xl/worksheets/sheet%d.xml", i+1) {
				text = fillPart(t, text, sheets[s.Key])
				delete(sheets, s.Key)
			}
		}
		to, err := w.Create(f.Name)
		if err == nil {
			_, err = to.Write(text)
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	if err := w.Close(); err != nil || len(sheets) > 0 {
		t.Fatal(err, "not filled in: ", sheets)
	}
	if err := os.WriteFile(file, out.Bytes(), 0o666); err != nil {
		t.Fatal(err)
	}
}

var cellOf = regexp.MustCompile(`<c r="([A-Z]+)\d+"[^>]*?(?:/>|>.*?</c>)`)

// fillPart writes into the rows of one sheet.
func fillPart(t *testing.T, text []byte, cells fills) []byte {
	t.Helper()
	for at, v := range cells {
		column := strings.TrimRight(at, "0123456789")
		line := strings.TrimPrefix(at, column)
		row := regexp.MustCompile(`(?s)(<row r="` + line + `"[^>]*>)(.*?)(</row>)`)
		found := row.FindSubmatch(text)
		if found == nil {
			t.Fatalf("there is no row %s", line)
		}
		var list [][2]string
		for _, c := range cellOf.FindAllSubmatch(found[2], -1) {
			if string(c[1]) != column {
				list = append(list, [2]string{string(c[1]), string(c[0])})
			}
		}
		list = append(list, [2]string{column, filledCell(at, v)})
		slices.SortFunc(list, func(a, b [2]string) int {
			return cmp.Or(cmp.Compare(len(a[0]), len(b[0])), strings.Compare(a[0], b[0]))
		})
		cells := ""
		for _, c := range list {
			cells += c[1]
		}
		text = bytes.Replace(text, found[0], []byte(string(found[1])+cells+string(found[3])), 1)
	}
	return text
}

func filledCell(at, v string) string {
	var b bytes.Buffer
	xml.EscapeText(&b, []byte(strings.TrimPrefix(v, "=")))
	switch _, err := strconv.ParseFloat(v, 64); {
	case strings.HasPrefix(v, "="):
		return fmt.Sprintf(`<c r="%s"><f>%s</f><v>2</v></c>`, at, &b)
	case err == nil:
		return fmt.Sprintf(`<c r="%s"><v>%s</v></c>`, at, v)
	}
	return fmt.Sprintf(`<c r="%s" t="inlineStr"><is><t>%s</t></is></c>`, at, &b)
}

// sheetOf reads a sheet of a workbook back.
func sheetOf(t *testing.T, file, key string) *bom.FilledSheet {
	t.Helper()
	b, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	all, err := book.Read(b)
	if err != nil {
		t.Fatal(err)
	}
	s, err := all.Sheet(key)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// under names the cell of a row under a title. Rows are known by their keys, facts by
// theirs: these are filled in in the column behind the label.
func under(t *testing.T, s *bom.FilledSheet, key, title string) string {
	t.Helper()
	for i := range s.Rows {
		if r := &s.Rows[i]; r.Key == key {
			if at := slices.Index(s.Columns, title); at >= 0 {
				return string(rune('A'+at)) + strconv.Itoa(r.Line)
			}
		}
	}
	for _, f := range s.Facts {
		if _, line, ok := strings.Cut(f.Where, "row "); ok && f.Key == key {
			return "C" + line
		}
	}
	t.Fatalf("the sheet %s has no %s under %q", s.Key, key, title)
	return ""
}

// ok makes a call that must end well, and returns what it printed.
func ok(t *testing.T, args ...string) string {
	t.Helper()
	out, messages, status := run(args)
	if status > statusHeld {
		t.Fatalf("%v: status %d, %s%s", args, status, out, messages)
	}
	return out
}

// refused makes a call that must be refused, and returns what it said.
func refused(t *testing.T, args ...string) string {
	t.Helper()
	out, messages, status := run(args)
	if status != statusCall {
		t.Fatalf("%v: status %d, %s%s", args, status, out, messages)
	}
	return out + messages
}

// want holds that a text has parts.
func want(t *testing.T, text string, parts ...string) {
	t.Helper()
	text = strings.Join(strings.Fields(text), " ")
	for _, p := range parts {
		if !strings.Contains(text, p) {
			t.Errorf("there is no %q in\n%s", p, text)
		}
	}
}

func in(dir string, args ...string) []string {
	return append(args, "--root", dir, "--today", "2026-12-01")
}

// A count sheet that goes out, is filled in with what the book has, and comes back
// changes no finding, whichever form it has and whatever its lengths are in.
func TestCountRoundTrip(t *testing.T) {
	for _, form := range []string{"csv", "xlsx", "csv in ft", "xlsx in ft"} {
		dir := demoCopy(t)
		form, feet := strings.CutSuffix(form, " in ft")
		if feet {
			inFeet(t, dir)
		}
		file := filepath.Join(t.TempDir(), "count."+form)
		before := ok(t, in(dir, "inspect")...)
		ok(t, in(dir, "stock", "--sheet", file)...)
		if form == "csv" {
			copyBook(t, file)
		} else {
			sheets := map[string]fills{}
			for _, key := range []string{"count shop", "reels shop", "count van-1", "reels van-1"} {
				s, f := sheetOf(t, file, key), fills{}
				for i := range s.Rows {
					r := &s.Rows[i]
					title := "loose"
					if strings.HasPrefix(key, "reels") {
						title = "left"
						f[under(t, s, r.Key, "how")] = "tape"
					}
					f[under(t, s, r.Key, title)] = r.Entry("by the book").Text
				}
				f[under(t, s, "by", "")] = "jo"
				sheets[key] = f
			}
			fillIn(t, file, sheets)
		}
		out := ok(t, in(dir, "stock", "--read", file, "--by", "jo")...)
		want(t, out, "25 bins and 8 reels by jo, all as the book has them, in stock/counts/2026-12-01-shop-jo.toml.",
			"2 bins and 1 reel by jo, all as the book has them, in stock/counts/2026-12-01-van-1-jo.toml.")
		if after := ok(t, in(dir, "inspect")...); after != before {
			t.Errorf("%s: inspect said\n%s and says\n%s", form, before, after)
		}
		if out, _, _ := run(in(dir, "dress", "--list")); out != "" {
			t.Errorf("%s: dress would lay out anew %s", form, out)
		}
		want(t, refused(t, in(dir, "stock", "--read", file, "--by", "jo")...), "2026-12-01-shop-jo.toml is there already")
	}
}

// inFeet makes a workspace show lengths in feet.
func inFeet(t *testing.T, dir string) {
	t.Helper()
	text := bytes.Replace(read(t, dir, "driploop.toml"), []byte("lengths  = \"m\""), []byte("lengths  = \"ft\""), 1)
	if !bytes.Contains(text, []byte("\"ft\"")) {
		t.Fatal("the workspace is in metres all the same")
	}
	if err := os.WriteFile(filepath.Join(dir, "driploop.toml"), text, 0o666); err != nil {
		t.Fatal(err)
	}
}

// copyBook fills a table in with what the book has.
func copyBook(t *testing.T, file string) {
	t.Helper()
	b, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	s, err := book.ReadTable(b)
	if err != nil {
		t.Fatal(err)
	}
	left := "left m"
	if s.Has(left) != nil {
		left = "left ft"
	}
	out := "where;part;tag;loose;" + left + ";how\n"
	for i := range s.Rows {
		r := &s.Rows[i]
		is := r.Entry("by the book").Text
		cells := []string{r.Entry("where").Text, r.Entry("part").Text, r.Entry("tag").Text, is, "", ""}
		if cells[2] != "" {
			cells[3], cells[4], cells[5] = "", is, "tape"
			if left == "left m" { // in feet it has three decimals, and behind a comma these may be thousands
				cells[4] = strings.ReplaceAll(is, ".", ",")
			}
		}
		out += strings.Join(cells, ";") + "\r\n"
	}
	if err := os.WriteFile(file, []byte("\ufeff"+out), 0o666); err != nil {
		t.Fatal(err)
	}
}

// What is wrong with a workbook is said with its cell, and nothing is written.
func TestCountWorkbookRefused(t *testing.T) {
	dir := demoCopy(t)
	fresh := filepath.Join(t.TempDir(), "count.xlsx")
	ok(t, in(dir, "stock", "--sheet", fresh, "--blind")...)
	s := sheetOf(t, fresh, "count shop")
	if s.Has("by the book") == nil {
		t.Error("a blind sheet says what the book has")
	}
	clamp := func(title string) string { return under(t, s, "NC-10-NM", title) }
	by := under(t, s, "by", "")
	for _, c := range []struct {
		name  string
		cells fills
		want  string
	}{
		{"blank", fills{by: "jo"}, "nothing was filled in"},
		{"formula", fills{by: "jo", clamp("loose"): "=1+1"}, "a whole number, 0 or more, is wanted, not a formula"},
		{"half", fills{by: "jo", clamp("loose"): "1.5"}, "is wanted, not"},
		{"negative", fills{by: "jo", clamp("bags of 25"): "-1"}, "is wanted, not"},
		{"nobody", fills{clamp("loose"): "1"}, "who counted shop?"},
		{"sum", fills{by: "jo", clamp("loose"): "1", clamp("in all"): "2"}, "2 in all, and bags and loose pieces make 1"},
		{"bag that it does not come in", fills{by: "jo", under(t, s, "DOME-NF", "bags of 25"): "1"}, "DOME-NF does not come in bags of 25"},
		{"name", fills{by: "jo", clamp("part"): "NC-5-NM", clamp("loose"): "1"}, `the row was made for NC-10-NM, and says "NC-5-NM"`},
		{"shelf", fills{by: "jo", under(t, s, "NC-10-NM", "loose"): "1", "C4": "van-1"}, `made for the shelf shop, and says "van-1"`},
		{"another day", fills{by: "jo", clamp("loose"): "1", under(t, s, "on", ""): "2026-11-30"}, "add --today 2026-11-30"},
		{"a day to come", fills{by: "jo", clamp("loose"): "1", under(t, s, "on", ""): "2026-12-02"}, "is still to come"},
		{"title", fills{by: "jo", clamp("loose"): "1", "E8": "lose"}, `there is no column "lose"; did you mean loose?`},
	} {
		file := filepath.Join(t.TempDir(), "count.xlsx")
		b, err := os.ReadFile(fresh)
		if err == nil {
			err = os.WriteFile(file, b, 0o666)
		}
		if err != nil {
			t.Fatal(err)
		}
		fillIn(t, file, map[string]fills{"count shop": c.cells})
		t.Run(c.name, func(t *testing.T) { want(t, refused(t, in(dir, "stock", "--read", file)...), c.want) })
	}
	sameButIssue(t, dir)
}

// The pick workbook comes back: what was taken is issued, with the allowance of what
// was laid, and what is left on a reel is read.
func TestPickRoundTrip(t *testing.T) {
	dir, file := demoCopy(t), filepath.Join(t.TempDir(), "pick.xlsx")
	ok(t, in(dir, "pick", "quay-lane", "--as", "xlsx", "--out", file)...)
	s := sheetOf(t, file, "pick")
	cells := fills{under(t, s, "by", ""): "kit"}
	for i := range s.Rows {
		r := &s.Rows[i]
		switch {
		case strings.HasPrefix(r.Key, "bin "):
			cells[under(t, s, r.Key, "taken")] = r.Entry("take").Text
		case strings.HasPrefix(r.Key, "cut "):
			cells[under(t, s, r.Key, "laid")] = r.Entry("to lay").Text
		}
	}
	cells[under(t, s, "bin shop DOME-NF", "taken")] = "2"
	cells[under(t, s, "bin shop MT-42", "taken")] = "0"
	cells[under(t, s, "cut R-121 G3", "laid")] = "4.2"
	cells[under(t, s, "cut R-121 G3", "left on reel")] = "26"
	fillIn(t, file, map[string]fills{"pick": cells})
	want(t, refused(t, in(dir, "pick", "mill-cottage", "--read", file)...), `the sheet is for "quay-lane", not for mill-cottage`)
	want(t, refused(t, in(dir, "pick", "quay-lane", "--read", file, "--by", "jo")...), "the goods were taken by kit, and --by says jo")
	out := ok(t, in(dir, "pick", "quay-lane", "--read", file)...)
	want(t, out, "Issued to quay-lane: 18 pieces and 5 cuts, in stock/issue/quay-lane-1.toml.", "2 of DOME-NF from shop; the list has 3",
		"none of MT-42 from shop was taken; the list has 1", "4.5 m for G3 from R-121; the list has 4.3 m")
	want(t, string(read(t, dir, issueFile)), `by = "kit"`, `[[reel]] tag = "R-121" part = "BC-10-CU" where = "shop" left = "26 m"`, `[[cut]] tag = "R-121" length = "4.5 m" cable = "G3"`)
	inspected, _, _ := run(in(dir, "inspect"))
	for _, bad := range []string{"file/", "stock/below", "stock/unknown", "stock/jump", "stock/over"} {
		if strings.Contains(inspected, bad) {
			t.Errorf("inspect finds %s:\n%s", bad, inspected)
		}
	}
	if out, _, _ := run(in(dir, "dress", "--list")); out != "" {
		t.Errorf("dress would lay out anew %s", out)
	}
	want(t, refused(t, in(dir, "pick", "quay-lane", "--read", file)...), "quay-lane was issued already")
	want(t, ok(t, in(dir, "pick", "quay-lane", "--read", file, "--more")...), "quay-lane-2.toml")
}

// The purchase workbook comes back as orders, and nothing is bought twice.
func TestPurchaseRoundTrip(t *testing.T) {
	dir, file := demoCopy(t), filepath.Join(t.TempDir(), "buy.xlsx")
	ok(t, in(dir, "purchase", "--as", "xlsx", "--out", file)...)
	want(t, refused(t, in(dir, "purchase", "--read", file)...), "no order sheet was given an order number")
	tern, plover := sheetOf(t, file, "order tern"), sheetOf(t, file, "order plover")
	cells := fills{under(t, tern, "po", ""): "PO-32", under(t, tern, "sent", ""): "2026-12-01"}
	cells[under(t, tern, "CX-5 | T-40031 | 76.2 m", "confirmed price")] = "75.5"
	cells[under(t, tern, "CX-5 | T-40031 | 76.2 m", "promised day")] = "2026-12-11"
	cells[under(t, tern, "CX-5 | T-40031 | 76.2 m", "note")] = "by \"rail\""
	cells[under(t, tern, "NC-10-NM | T-21004 | 10", "ordered packs")] = "3"
	cells[under(t, tern, "SPL-2-75 | T-23075 | 1", "ordered packs")] = "0"
	fillIn(t, file, map[string]fills{"order tern": cells, "order plover": {under(t, plover, "po", ""): "PO-33"}})
	moved := filepath.Join(dir, "offers", "late.toml")
	if err := os.WriteFile(moved, []byte("[vendor.new]\nname = \"New\"\n"), 0o666); err != nil {
		t.Fatal(err)
	}
	want(t, refused(t, in(dir, "purchase", "--read", file)...), "SINCE THE WORKBOOK WAS MADE", "digest of offers", "nothing is written")
	if _, err := os.Stat(filepath.Join(dir, "stock/orders/PO-32.toml")); err == nil {
		t.Error("it wrote all the same")
	}
	if err := os.Remove(moved); err != nil {
		t.Fatal(err)
	}
	out := ok(t, in(dir, "purchase", "--read", file)...)
	want(t, out, "6 lines to tern, sent on 2026-12-01; in stock/orders/PO-32.toml", "75.50 confirmed, 74.00 on the list; promised for 2026-12-11, needed by 2026-12-09",
		"3 ordered, 1 planned", "planned, and not ordered", "PO-33", "a wish and not as supply")
	want(t, string(read(t, dir, "stock/orders/PO-32.toml")), `[order] vendor = "tern" sent = 2026-12-01 to = "shop"`,
		`[[line]] part = "CX-5" code = "T-40031" pack = "76.2 m" packs = 1 price = "75.50" due = 2026-12-11 jobs = ["heron-clinic"]`, `# by "rail"`)
	if bad := ok(t, in(dir, "inspect")...); strings.Contains(bad, "file/") || strings.Contains(bad, "PO-32") && strings.Contains(bad, "stock/unknown") {
		t.Errorf("inspect finds\n%s", bad)
	}
	if out, _, _ := run(in(dir, "dress", "--list")); out != "" {
		t.Errorf("dress would lay out anew %s", out)
	}
	if again := ok(t, in(dir, "purchase", "--as", "csv")...); strings.Contains(again, "T-21005") || !strings.Contains(again, "T-23075") {
		t.Errorf("what was ordered is bought again, or what was not is forgotten:\n%s", again)
	}
	want(t, refused(t, in(dir, "purchase", "--read", file, "--yes")...), "there is an order PO-32 already")
}

// Killed at any time, the sheet of a count is there whole or not at all.
func TestCountKilled(t *testing.T) {
	whole, file := demoCopy(t), filepath.Join(t.TempDir(), "count.csv")
	ok(t, in(whole, "stock", "--sheet", file)...)
	copyBook(t, file)
	args := func(dir string) []string {
		return in(dir, "stock", "--read", file, "--by", "jo", "--where", "shop")
	}
	began := time.Now()
	ok(t, args(whole)...)
	took := 3*time.Since(began) + 20*time.Millisecond
	const name = "stock/counts/2026-12-01-shop-jo.toml"
	sheet := read(t, whole, name)
	for i := range 12 {
		dir := demoCopy(t)
		cmd := exec.Command("driploop", args(dir)...)
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(took * time.Duration(i) / 12)
		cmd.Process.Kill()
		cmd.Wait()
		if got, err := os.ReadFile(filepath.Join(dir, name)); err == nil && !bytes.Equal(got, sheet) {
			t.Fatalf("killed after %v the sheet is\n%s", took*time.Duration(i)/12, got)
		}
	}
}

// Of many who read one sheet at the same time one writes it, and all of it.
func TestCountAtOnce(t *testing.T) {
	dir, file := demoCopy(t), filepath.Join(t.TempDir(), "count.csv")
	ok(t, in(dir, "stock", "--sheet", file)...)
	copyBook(t, file)
	status := make([]int, 8)
	var wg sync.WaitGroup
	for i := range status {
		wg.Go(func() { _, _, status[i] = run(in(dir, "stock", "--read", file, "--by", "jo")) })
	}
	wg.Wait()
	slices.Sort(status)
	if status[0] != statusClear || status[1] == statusClear {
		t.Errorf("of 8 the statuses are %v", status)
	}
	left, err := filepath.Glob(filepath.Join(dir, "stock/counts/*2026-12-01*"))
	if err != nil || len(left) != 2 {
		t.Errorf("files left: %v %v", left, err)
	}
}

// Where one of several sheets cannot be written, none is.
func TestSheetsAllOrNone(t *testing.T) {
	dir := demoCopy(t)
	c := &Command{Stderr: io.Discard, Now: time.Now, shared: shared{root: dir, today: "2026-12-01"}}
	firm, done, err := c.workspace(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	defer done()
	text := []byte("[sheet]\non = 2026-12-01\nwhere = \"shop\"\n")
	b := newSheet{"stock/counts/b.toml", text}
	err = c.writeSheets(firm, []newSheet{{"stock/counts/a.toml", text}, b, b})
	if err == nil || !strings.Contains(err.Error(), "b.toml is there already") {
		t.Error(err)
	}
	sameButIssue(t, dir)
	if left, _ := filepath.Glob(filepath.Join(dir, "stock/counts/?.toml")); left != nil {
		t.Errorf("it left %v", left)
	}
	err = c.writeSheets(firm, []newSheet{b, {"stock/counts/c.toml", []byte("[[count]]\nqty = 1\n")}})
	if err == nil || !strings.Contains(err.Error(), "c.toml could not be read again") {
		t.Error(err)
	}
	sameButIssue(t, dir)
}
