package main

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/cmd/driploop/book"
	"driploop/cmd/driploop/show"
)

func init() { readers["xlsx"] = inWorkbook }

// ownFormula is what a formula of ours looks like: references, our functions, plain
// numbers.
var ownFormula = regexp.MustCompile(`^(ROUND\([A-Z]+\d+\*[A-Z]+\d+,2\)|SUM\([A-Z]+\d+(,[A-Z]+\d+)*\)|SUBTOTAL\(9,[A-Z]+\d+:[A-Z]+\d+\)|'[\p{L}\p{N} ._-]+'![A-Z]+\d+|0|` +
	`IF\(COUNT\([A-Z]+\d+(,[A-Z]+\d+)*\)=0,"",N\([A-Z]+\d+\)(\*\d+)?(\+N\([A-Z]+\d+\)(\*\d+)?)*\))$`)

// inWorkbook reads a workbook as a spreadsheet does: parts that must not be there,
// formulas that are not ours, texts that do more than show themselves.
func inWorkbook(page string) string {
	r, err := zip.NewReader(strings.NewReader(page), int64(len(page)))
	if err != nil {
		return err.Error()
	}
	sheets := 0
	for _, f := range r.File {
		for _, bad := range []string{"vba", "external", "activeX", "embeddings", "connections", "queryTable"} {
			if strings.Contains(f.Name, bad) {
				return "it has the part " + f.Name
			}
		}
		in, err := f.Open()
		if err != nil {
			return err.Error()
		}
		text, err := io.ReadAll(in)
		if err != nil {
			return err.Error()
		}
		if strings.HasPrefix(f.Name, "xl/worksheets/") {
			sheets++
		}
		if bad := inPart(text); bad != "" {
			return f.Name + ": " + bad
		}
	}
	if sheets == 0 {
		return "it has no sheet"
	}
	return ""
}

// inPart reads one part of a workbook.
func inPart(text []byte) string {
	d := xml.NewDecoder(bytes.NewReader(text))
	element := ""
	for {
		token, err := d.Token()
		if errors.Is(err, io.EOF) {
			return ""
		}
		if err != nil {
			return err.Error()
		}
		switch token := token.(type) {
		case xml.StartElement:
			if element = token.Name.Local; element == "hyperlink" || element == "externalReference" || element == "oleObject" {
				return "it has a " + element
			}
			for _, a := range token.Attr {
				if a.Name.Local == "TargetMode" {
					return "it leads out to " + fmt.Sprint(token.Attr)
				}
			}
		case xml.EndElement:
			element = ""
		case xml.CharData:
			switch element {
			case "f":
				if !ownFormula.Match(token) {
					return "a formula: " + string(token)
				}
			case "t", "v", "title", "definedName":
				if bad := inCell(string(token)); bad != "" {
					return bad
				}
			}
		}
	}
}

// inCell reads the text of a cell. A build runner does not read workbooks.
func inCell(text string) string {
	return inLog(strings.NewReplacer("::", ":", "##", "#").Replace(text))
}

// TestWorkbookReaderComplains holds that the reader finds what it looks for.
func TestWorkbookReaderComplains(t *testing.T) {
	sheet := func(s string) map[string]string {
		return map[string]string{"xl/worksheets/sheet1.xml": "<worksheet>" + s + "</worksheet>"}
	}
	for want, parts := range map[string]map[string]string{
		"no sheet":              {"xl/workbook.xml": "<a/>"},
		"the part xl/vbaProj":   {"xl/vbaProject.bin": ""},
		"a formula: 1+1":        sheet("<c><f>1+1</f></c>"),
		`a formula: HYPERLINK(`: sheet(`<c><f>HYPERLINK("http://h.example")</f></c>`),
		"it has a hyperlink":    sheet(`<hyperlink/>`),
		"it leads out":          {"xl/_rels/a.rels": `<Relationship TargetMode="External"/>`},
		"the character U+202E":  sheet("<t>\u202e</t>"),
		"XML syntax error":      sheet("<t>"),
	} {
		var b bytes.Buffer
		w := zip.NewWriter(&b)
		for name, text := range parts {
			out, err := w.Create(name)
			if err != nil {
				t.Fatal(err)
			}
			io.WriteString(out, text)
		}
		if err := w.Close(); err != nil {
			t.Fatal(err)
		}
		if got := inWorkbook(b.String()); !strings.Contains(got, want) {
			t.Errorf("the reader finds %q, want %q", got, want)
		}
	}
	if got := inWorkbook("PK"); got == "" {
		t.Error("the reader takes anything")
	}
}

// The order sheet of a vendor whose every text is an attack: name, account, contact,
// code. They stay texts, and the sheet can be read back by its keys.
func TestHostileOrder(t *testing.T) {
	dir := t.TempDir()
	err := filepath.WalkDir(hostile, func(name string, e fs.DirEntry, err error) error {
		if err == nil && !e.IsDir() {
			copyFile(t, name, filepath.Join(dir, strings.TrimPrefix(name, hostile)))
		}
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	const code = `=HYPERLINK("http://h.example";"x")`
	offers := fmt.Sprintf("[vendor.heron]\nname = %s\naccount = %s\ncontact = %s\n", tomlText("=1+1\u202e'!A1"), tomlText("@SUM(A1)"), tomlText("+1+1\n::error::x"))
	for _, part := range []string{"NC-10-NM", "DOME-NF", "BAR-6"} {
		offers += fmt.Sprintf("[[offer]]\npart = %q\nvendor = \"heron\"\ncode = %s\nprice = \"1.00\"\nlead_days = 1\n", part, tomlText(code))
	}
	if err := os.WriteFile(filepath.Join(dir, "offers", "heron.toml"), []byte(offers), 0o666); err != nil {
		t.Fatal(err)
	}
	out, messages, status := run([]string{"purchase", "--root", dir, "--today", "2026-12-01", "--as", "xlsx"})
	if status > statusHeld {
		t.Fatal(messages)
	}
	if bad := inWorkbook(out); bad != "" {
		t.Error(bad)
	}
	all, err := book.Read([]byte(out))
	if err != nil {
		t.Fatal(err)
	}
	s, err := all.Sheet(show.OrderKey("heron"))
	if err != nil {
		t.Fatal(err)
	}
	lines := 0
	for i := range s.Rows {
		if r := &s.Rows[i]; r.Key != "" {
			lines++
			if e := r.Entry("their code"); e.Kind != bom.EntryText || e.Text != code {
				t.Errorf("the code is %+v", e)
			}
		}
	}
	if lines != 3 || s.Fact("account").Text != "@SUM(A1)" || s.Fact("contact").Text != `+1+1\x0a::error::x` {
		t.Errorf("%d lines, %+v", lines, s.Facts)
	}
}
