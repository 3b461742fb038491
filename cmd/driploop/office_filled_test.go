package main

import (
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// TestOfficeFilled saves filled sheets with an office program, which writes every part of
// them anew, and takes them back: the workbook, and the table, which it may part and quote
// as it likes.
func TestOfficeFilled(t *testing.T) {
	needed(t, "soffice")
	at := t.TempDir()
	dir := demoCopy(t)
	workbook, table := filepath.Join(at, "count.xlsx"), filepath.Join(at, "table.csv")
	ok(t, in(dir, "stock", "--sheet", workbook)...)
	ok(t, in(dir, "stock", "--sheet", table)...)
	s, r := sheetOf(t, workbook, "count shop"), sheetOf(t, workbook, "reels shop")
	fillIn(t, workbook, map[string]fills{
		"count shop": {under(t, s, "by", ""): "jo", under(t, s, "NC-10-NM", "bags of 25"): "1", under(t, s, "NC-10-NM", "loose"): "8", under(t, s, "NC-10-NM", "note"): `"torn", = bag`,
			under(t, s, "SPL-3", "loose"): "0"},
		"reels shop": {under(t, r, "by", ""): "jo", under(t, r, "R-107", "left"): "61.35", under(t, r, "R-107", "how"): "tape"},
	})
	b, err := os.ReadFile(table)
	if err != nil {
		t.Fatal(err)
	}
	const tail = ",,,,,,,,\r\n"
	for row, filled := range map[string]string{",,34" + tail: ",,34,1,,8,,,,jo,bag torn\r\n", ",R-107,61.4" + tail: ",R-107,61.4,,,,,61.35,tape,,\r\n"} {
		if strings.Count(string(b), row) != 1 {
			t.Fatalf("the table has no one row that ends in %q:\n%s", row, b)
		}
		b = []byte(strings.Replace(string(b), row, filled, 1))
	}
	if err := os.WriteFile(table, b, 0o666); err != nil {
		t.Fatal(err)
	}
	office(t, at, "xlsx", []string{workbook})
	office(t, at, "csv", []string{table})
	said := ok(t, in(dir, "stock", "--read", filepath.Join(at, "xlsx", "count.xlsx"))...)
	want(t, said, "2 bins and 1 reel by jo, 3 not as the book has them", "NC-10-NM 33 34 -1", "SPL-3 0 2 -2", "R-107 61.35 m 61.4 m -0.05 m")
	want(t, string(read(t, dir, "stock/counts/2026-12-01-shop-jo.toml")), `because = "\"torn\", = bag" part = "NC-10-NM" qty = 33`)
	said = ok(t, in(dir, "stock", "--read", filepath.Join(at, "csv", "table.csv"), "--by", "kit")...)
	want(t, said, "1 bin and 1 reel by kit, all as the book has them, in stock/counts/2026-12-01-shop-kit.toml")
}
