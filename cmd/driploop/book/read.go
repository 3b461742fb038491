package book

import (
	"archive/zip"
	"bytes"
	"errors"
	"fmt"
	"io"
	"path"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
)

// What a workbook that is read may have. A small file can unpack to any size.
const (
	mostUnpacked = 64 << 20 // bytes in all
	mostPart     = 16 << 20 // bytes of one part
	mostParts    = 1000
	mostCells    = 500_000 // with something in them, in all
	mostColumns  = 256
)

// Read takes a workbook of ours back that somebody filled in and saved with whatever
// program. Sheets that are not ours are passed over. It refuses, and says why: what
// is no workbook; one that unpacks to more than a workbook of ours does; keys or
// titles that stand twice. What stands in the cells is for whoever asks for it.
func Read(b []byte) (bom.FilledBook, error) {
	p, err := unpack(b)
	if err != nil {
		return nil, err
	}
	tabs, err := p.tabs()
	if err != nil {
		return nil, err
	}
	shared, err := p.sharedTexts()
	if err != nil {
		return nil, err
	}
	var out bom.FilledBook
	r := &reader{shared: shared, cells: mostCells}
	for _, tab := range tabs {
		text, err := p.part(tab.part)
		if err != nil {
			return nil, err
		}
		g, err := r.grid(text)
		if err != nil {
			return nil, fmt.Errorf("reading the sheet %s: %w", source.Quote(tab.name), err)
		}
		s, err := g.filled(tab.name)
		if err != nil {
			return nil, err
		}
		if s == nil {
			continue
		}
		if _, err := out.Sheet(s.Key); err == nil {
			return nil, fmt.Errorf("the sheet %s is there twice; delete the copy", source.Quote(s.Key))
		}
		out = append(out, s)
	}
	if len(out) == 0 {
		return nil, errors.New("the file has no sheet that driploop made: the hidden column at the right says which one it is")
	}
	return out, nil
}

// unpacked are the parts of a workbook.
type unpacked struct {
	parts map[string]*zip.File
	left  int64 // bytes that may still be unpacked
}

func unpack(b []byte) (*unpacked, error) {
	r, err := zip.NewReader(bytes.NewReader(b), int64(len(b)))
	if err != nil {
		return nil, errors.New("the file is no workbook (.xlsx), or it is locked with a password")
	}
	if len(r.File) > mostParts {
		return nil, fmt.Errorf("the file has %d parts; a workbook of ours has a few", len(r.File))
	}
	p := &unpacked{map[string]*zip.File{}, mostUnpacked}
	var size uint64
	for _, f := range r.File {
		if size += f.UncompressedSize64; f.UncompressedSize64 > mostPart || size > mostUnpacked {
			return nil, tooLarge()
		}
		if p.parts[f.Name] != nil {
			return nil, fmt.Errorf("the part %s is in the file twice", source.Quote(f.Name))
		}
		p.parts[f.Name] = f
	}
	return p, nil
}

func tooLarge() error {
	return fmt.Errorf("the file unpacks to more than the %d MiB that a workbook may have", mostUnpacked>>20)
}

// part unpacks one part. What the archive says of its size is not believed.
func (p *unpacked) part(name string) ([]byte, error) {
	f := p.parts[name]
	if f == nil {
		return nil, fmt.Errorf("the file is no workbook: the part %s is missing", source.Quote(name))
	}
	in, err := f.Open()
	if err != nil {
		return nil, fmt.Errorf("unpacking %s: %w", source.Quote(name), err)
	}
	defer in.Close()
	most := min(p.left, mostPart)
	text, err := io.ReadAll(io.LimitReader(in, most+1))
	if err != nil {
		return nil, fmt.Errorf("unpacking %s: %w", source.Quote(name), err)
	}
	if int64(len(text)) > most {
		return nil, tooLarge()
	}
	p.left -= int64(len(text))
	return text, nil
}

// tab is a sheet as the workbook lists it.
type tab struct{ name, part string }

// The parts that every workbook has.
const (
	workbookPart  = "xl/workbook.xml"
	relationsPart = "xl/_rels/workbook.xml.rels"
	textsPart     = "xl/sharedStrings.xml"
)

func (p *unpacked) tabs() ([]tab, error) {
	text, err := p.part(workbookPart)
	if err != nil {
		return nil, err
	}
	relations, err := p.part(relationsPart)
	if err != nil {
		return nil, err
	}
	targets := map[string]string{}
	err = elements(relations, func(e element) error {
		if e.name == "Relationship" && e.attr["TargetMode"] == "" {
			target := e.attr["Target"]
			if !strings.HasPrefix(target, "/") {
				target = "xl/" + target
			}
			targets[e.attr["Id"]] = strings.TrimPrefix(path.Clean(target), "/")
		}
		return nil
	})
	if err != nil {
		return nil, err
	}
	var out []tab
	seen := map[string]bool{}
	err = elements(text, func(e element) error {
		switch {
		case e.name == "workbookPr" && (e.attr["date1904"] == "1" || e.attr["date1904"] == "true"):
			return errors.New("the file counts its days from 1904; save it as an ordinary .xlsx")
		case e.name == "sheet":
			part := targets[e.attr["id"]]
			if seen[part] {
				return errors.New("two sheets of the file are one")
			}
			seen[part] = true
			if strings.HasPrefix(part, "xl/worksheets/") {
				out = append(out, tab{cutName(e.attr["name"], maxName), part})
			}
		}
		return nil
	})
	return out, err
}

// sharedTexts are the texts that cells refer to by number.
func (p *unpacked) sharedTexts() ([]string, error) {
	if p.parts[textsPart] == nil {
		return nil, nil
	}
	text, err := p.part(textsPart)
	if err != nil {
		return nil, err
	}
	return readTexts(text)
}
