package book

import (
	"bytes"
	"encoding/csv"
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
)

// shown is a table on one line: the titles, then each cell that something stands in.
func shown(s *bom.FilledSheet) string {
	out := strings.Join(s.Columns, ",")
	for i := range s.Rows {
		out += fmt.Sprintf(" /%d", s.Rows[i].Line)
		for _, t := range s.Columns {
			if e := s.Rows[i].Entry(t); e.Kind != bom.EntryBlank {
				out += fmt.Sprintf(" %s=%s%s", t, [...]string{"", "", "#", "", "", "f"}[e.Kind], e.Text)
			}
		}
	}
	return out
}

func TestReadTable(t *testing.T) {
	for _, c := range []struct{ name, in, want string }{
		{"plain", "part,loose\nA,3\nB,0\n", "part,loose /2 part=A loose=#3 /3 part=B loose=#0"},
		{"no end of line", "part,loose\nA,3", "part,loose /2 part=A loose=#3"},
		{"CR LF", "part,loose\r\nA,3\r\n", "part,loose /2 part=A loose=#3"},
		{"CR alone", "part,loose\rA,3\r", "part,loose /2 part=A loose=#3"},
		{"BOM", "\ufeffpart,loose\nA,3\n", "part,loose /2 part=A loose=#3"},
		{"semicolons", "part;loose;left m\nA;3;61,4\n", "part,loose,left m /2 part=A loose=#3 left m=#61.4"},
		{"semicolons and points", "part;left m\nA;61.4\n", "part,left m /2 part=A left m=#61.4"},
		{"one and a half, or fifteen hundred", "part;left m\nA;1,500\n", "part,left m /2 part=A left m=1,500"},
		{"a comma is no point between commas", "part,left m\nA,\"61,4\"\n", "part,left m /2 part=A left m=61,4"},
		{"tabs", "part\tloose\nA\t3\n", "part,loose /2 part=A loose=#3"},
		{"it says itself", "sep=;\npart;a,b,c\nA;3\n", "part,a,b,c /2 part=A a,b,c=#3"},
		{"quotes", "part,note\nA,\"one \"\"two\"\", three\"\n", `part,note /2 part=A note=one "two", three`},
		{"a line break in quotes", "part,note\nA,\"one\ntwo\"\nB,x\n", "part,note /2 part=A note=one\ntwo /4 part=B note=x"},
		{"spaces and capitals", " Part , Bags  of 25\n A , 3 \n", "part,bags of 25 /2 part=A bags of 25=#3"},
		{"blank lines and rows", "\n\npart,loose\n\n,\nA,3\n", "part,loose /4 part=A loose=#3"},
		{"titles at the end that are none", "part,loose,,\nA,3,,\n", "part,loose /2 part=A loose=#3"},
		{"a formula", "part,loose\nA,=1+1\nB,+1\nC,-1\nD,@a\n", "part,loose /2 part=A loose=f=1+1 /3 part=B loose=+1 /4 part=C loose=-1 /5 part=D loose=@a"},
		{"fewer cells", "part,loose,note\nA\n", "part,loose,note /2 part=A"},
		{"figures that are a name", "part,loose\n007,3\n", "part,loose /2 part=#007 loose=#3"},
	} {
		s, err := ReadTable([]byte(c.in))
		if err != nil {
			t.Errorf("%s: %v", c.name, err)
			continue
		}
		if got := shown(s); got != c.want {
			t.Errorf("%s:\n%s want\n%s", c.name, got, c.want)
		}
	}
}

func TestReadTableRefuses(t *testing.T) {
	for _, c := range []struct{ name, in, want string }{
		{"empty", "", "the file is empty"},
		{"blank", "\n , \n", "the file is empty"},
		{"a workbook", "PK\x03\x04", "has to end in .xlsx"},
		{"UTF-16", "\xff\xfea\x00", "save it as CSV UTF-8"},
		{"Latin-1", "part\nGer\xe4t\n", "save it as CSV UTF-8"},
		{"zero bytes", "part\na\x00b\n", "save it as CSV UTF-8"},
		{"a title twice", "part,loose,Part\n", `the title "part" stands over two columns`},
		{"a cell without a title", "part,,loose\nA,x,3\n", `line 2: "x" stands in column 2, which has no title`},
		{"a cell behind the titles", "part,loose\nA,3,4\n", `line 2: "4" stands in column 3`},
		{"quotes that do not end", "part,note\nA,\"one\n", "line 2: the quotes do not pair up"},
		{"quotes within", "part,note\nA,12\" long\n", "line 2: the quotes do not pair up"},
		{"columns", strings.Repeat("a,", 300) + "\n", "the file has 301 columns"},
		{"cells", "a\n" + strings.Repeat(",", mostCells+1), "more than 500000 cells"},
		{"size", strings.Repeat("a", mostTable+1), "more than the 4 MiB"},
	} {
		if _, err := ReadTable([]byte(c.in)); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: the error is %v, want %s", c.name, err, c.want)
		}
	}
}

// Ten thousand rows are read, and each is there with its line.
func TestReadTableLong(t *testing.T) {
	var b strings.Builder
	b.WriteString("where,part,loose\r\n")
	for i := range 10_000 {
		fmt.Fprintf(&b, "shop,P-%d,%d\r\n", i, i)
	}
	s, err := ReadTable([]byte(b.String()))
	if err != nil || len(s.Rows) != 10_000 {
		t.Fatal(len(s.Rows), err)
	}
	for i := range s.Rows {
		if n, err := s.Rows[i].Entry("loose").Count(); err != nil || int(n) != i || s.Rows[i].Line != i+2 {
			t.Fatalf("row %d is %d on line %d, %v", i, n, s.Rows[i].Line, err)
		}
	}
}

// What is read is the same when it is written by another writer and read again; no
// entry stands outside the table.
func FuzzReadTable(f *testing.F) {
	for _, seed := range []string{"where,part,loose\nshop,A,3\n", "\ufeffa;b\r\n\"1,5\";\"x\"\"y\"\r\n", "sep=\t\na\tb\n=1\t 2 \n", "a\n\"1\n2\"\n", "a;b\n1,500;.5\n", "A,a \n", ",\n\r\r\n"} {
		f.Add([]byte(seed))
	}
	f.Fuzz(func(t *testing.T, in []byte) {
		s, err := ReadTable(in)
		if err != nil {
			return
		}
		if len(s.Columns) == 0 {
			t.Fatal("a table without titles")
		}
		lines := bytes.Count(in, []byte("\n")) + bytes.Count(in, []byte("\r")) + 1
		again := [][]string{s.Columns}
		for i := range s.Rows {
			if n := s.Rows[i].Line; n < 1 || n > lines {
				t.Fatalf("line %d of %d", n, lines)
			}
			var row []string
			for _, c := range s.Columns {
				row = append(row, s.Rows[i].Entry(c).Text)
			}
			again = append(again, row)
		}
		var b bytes.Buffer
		b.WriteString("sep=,\n")
		if err := csv.NewWriter(&b).WriteAll(again); err != nil {
			t.Fatal(err)
		}
		second, err := ReadTable(b.Bytes())
		if err != nil {
			t.Fatalf("what was read cannot be read: %v\n%q", err, b.String())
		}
		if len(second.Rows) != len(s.Rows) {
			t.Fatalf("%d rows, then %d", len(s.Rows), len(second.Rows))
		}
		for i := range s.Rows {
			for _, c := range s.Columns {
				if x, y := s.Rows[i].Entry(c), second.Rows[i].Entry(c); x.Kind != y.Kind || x.Text != y.Text {
					t.Fatalf("%q is %+v, then %+v", c, x, y)
				}
			}
		}
	})
}
