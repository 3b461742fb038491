package main

import (
	"archive/zip"
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
)

// Sheets of a workspace whose every text is an attack go out harmless.
func TestHostileSheets(t *testing.T) {
	for _, form := range []string{"csv", "xlsx"} {
		file := filepath.Join(t.TempDir(), "count."+form)
		out, messages, status := run([]string{"stock", "--root", hostile, "--today", "2026-12-01", "--sheet", file})
		if status > statusHeld {
			t.Fatal(messages)
		}
		b, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if bad := readers[form](string(b)); bad != "" {
			t.Errorf("%s: %s", form, bad)
		}
		if bad := inLog(out); bad != "" {
			t.Errorf("%s: %s", form, bad)
		}
		if bad := inMessages(messages); bad != "" {
			t.Errorf("%s: %s", form, bad)
		}
	}
}

// attacks are texts that do something to a terminal, a build runner or a TOML file.
var attacks = []string{"\x1b[31mred", "\u202eturned", "::error::x", "##[error]x", "a\nb = 1", `"""`, `\u0041"`, "[[count]]", "=1+1", "@SUM(A1)", "\ufeffbom", strings.Repeat("long ", 4000)}

// What stands in a sheet that came back is said harmless, and none of it gets out of
// its string in what is written.
func TestHostileFilledSheets(t *testing.T) {
	quoted := func(s string) string { return `"` + strings.ReplaceAll(s, `"`, `""`) + `"` }
	booked := 0
	for _, a := range attacks {
		for _, row := range []string{quoted(a) + ",NC-10-NM,,1,,,,", "shop," + quoted(a) + ",,1,,,,", "shop,," + quoted(a) + ",,1,tape,,", "shop,NC-10-NM,," + quoted(a) + ",,,,",
			"shop,,R-107,," + quoted(a) + ",,,", "shop,,R-107,,1," + quoted(a) + ",,", "shop,NC-10-NM,,1,,," + quoted(a) + ",", "shop,NC-10-NM,,1,,,," + quoted(a)} {
			dir, file := demoCopy(t), filepath.Join(t.TempDir(), "count.csv")
			if err := os.WriteFile(file, []byte("where,part,tag,loose,left m,how,by,note\n"+row+"\n"), 0o666); err != nil {
				t.Fatal(err)
			}
			out, messages, status := run(in(dir, "stock", "--read", file, "--by", "jo"))
			if bad := inLog(out); bad != "" {
				t.Errorf("%q: %s", row, bad)
			}
			if bad := inMessages(messages); bad != "" {
				t.Errorf("%q, messages: %s", row, bad)
			}
			if status == statusClear {
				booked++
				if inspected, _, _ := run(in(dir, "inspect")); strings.Contains(inspected, "file/") {
					t.Errorf("%q: inspect finds\n%s", row, inspected)
				}
			}
		}
	}
	if booked != 6 { // as notes: all but those that act, the formula, and the long one
		t.Errorf("%d attacks were written down, so nothing was seen of the others", booked)
	}
}

// Files that are no sheets, and those that are too large, are refused in words; a pipe
// is not waited for.
func TestNoSheets(t *testing.T) {
	dir, at := demoCopy(t), t.TempDir()
	file := func(name string, b []byte) string {
		name = filepath.Join(at, name)
		if err := os.WriteFile(name, b, 0o666); err != nil {
			t.Fatal(err)
		}
		return name
	}
	pipe := filepath.Join(at, "pipe.csv")
	if err := syscall.Mkfifo(pipe, 0o600); err != nil {
		t.Fatal(err)
	}
	var bomb bytes.Buffer
	w := zip.NewWriter(&bomb)
	for _, name := range []string{"xl/workbook.xml", "xl/_rels/workbook.xml.rels", "xl/worksheets/sheet1.xml"} {
		f, err := w.Create(name)
		if err == nil {
			_, err = f.Write(make([]byte, 30<<20))
		}
		if err != nil {
			t.Fatal(err)
		}
	}
	w.Close()
	long := "where,part,loose\n"
	for i := range 10_000 {
		long += fmt.Sprintf("shop,P-%d,%d\n", i, i)
	}
	for _, c := range []struct{ file, want string }{
		{pipe, "it is no file"},
		{file("bomb.xlsx", bomb.Bytes()), "the file unpacks to more than the 64 MiB"},
		{file("huge.xlsx", make([]byte, mostFilled+1)), "it has more than 16 MiB"},
		{file("huge.csv", bytes.Repeat([]byte("shop,NC-10-NM,1\n"), 1<<19)), "more than the 4 MiB"},
		{file("empty.csv", nil), "the file is empty"},
		{file("empty.xlsx", nil), "the file is no workbook"},
		{file("long.csv", []byte(long)), "40 things are wrong, and nothing is written"},
	} {
		for _, args := range [][]string{{"stock"}, {"pick", "quay-lane"}} {
			if strings.HasSuffix(c.file, "long.csv") && args[0] == "pick" {
				continue
			}
			want(t, refused(t, in(dir, append(args, "--read", c.file, "--by", "jo")...)...), c.want)
		}
	}
	sameButIssue(t, dir)
}

// A sheet of ten thousand rows is read; what the workspace could not read again is not
// written.
func TestLongSheets(t *testing.T) {
	dir := t.TempDir()
	write := func(name, text string) {
		name = filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(name, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	write("driploop.toml", "[workspace]\n[shelf.shop]\nkind = \"shop\"\n[shelf.van]\nkind = \"van\"\n")
	for i := range 80 {
		text := ""
		for j := range 100 {
			text += fmt.Sprintf("[part.P-%d]\nkind = \"consumable\"\nper = \"entry\"\n", i*100+j)
		}
		write(fmt.Sprintf("catalog/c%d.toml", i), text)
	}
	one, both := "where,part,loose\n", "where,part,loose\n"
	for i := range 8000 {
		one += fmt.Sprintf("shop,P-%d,1\n", i)
		if i < 5000 {
			both += fmt.Sprintf("shop,P-%d,1\nvan,P-%d,2\n", i, i)
		}
	}
	write("one.csv", one)
	write("both.csv", both)
	want(t, refused(t, in(dir, "stock", "--read", filepath.Join(dir, "one.csv"), "--by", "jo")...), "the sheet is larger than the 256 KiB that a file may have")
	if left, _ := filepath.Glob(filepath.Join(dir, "stock/*/*")); left != nil {
		t.Errorf("it wrote %v", left)
	}
	want(t, ok(t, in(dir, "stock", "--read", filepath.Join(dir, "both.csv"), "--by", "jo")...), "5000 bins and 0 reels by jo", "2026-12-01-van-jo.toml")
	if said, _, _ := run(in(dir, "inspect")); strings.Contains(said, "file/") {
		t.Error(said)
	}
}
