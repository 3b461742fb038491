package main

import (
	"archive/zip"
	"bytes"
	"encoding/xml"
	"errors"
	"fmt"
	"io"
	"regexp"
	"strings"
	"testing"
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
