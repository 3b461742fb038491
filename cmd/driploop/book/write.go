package book

import (
	"bytes"
	"errors"
	"fmt"
	"io"

	"github.com/xuri/excelize/v2"

	"driploop/bom"
	"driploop/catalog/unit"
)

// Meta is what a workbook says of itself.
type Meta struct {
	Title string
	Today unit.Date
}

// creator stands in every workbook as its maker.
const creator = "driploop"

// builder is a workbook while it is made.
type builder struct {
	file    *excelize.File
	styles  styles
	layouts []*layout
}

// Write makes a workbook of sheets, in their order. The same sheets give the same
// bytes. An error means that there are no sheets, that one has more rows than a
// workbook takes, or that a value is said to follow from cells that are not there.
func Write(sheets []bom.Sheet, m Meta) (_ []byte, err error) {
	if len(sheets) == 0 {
		return nil, errors.New("there is no sheet to write")
	}
	b := &builder{file: excelize.NewFile()}
	defer func() { err = errors.Join(err, b.file.Close()) }()
	b.styles = styles{b.file, map[look]int{}}
	taken := names{}
	for i := range sheets {
		l, err := layOut(&sheets[i], taken.of(sheets[i].Name))
		if err != nil {
			return nil, err
		}
		b.layouts = append(b.layouts, l)
	}
	for i, l := range b.layouts {
		if err := b.begin(l, i == 0); err != nil {
			return nil, fmt.Errorf("making the sheet %q: %w", l.name, err)
		}
	}
	for _, l := range b.layouts {
		if err := b.sheet(l); err != nil {
			return nil, fmt.Errorf("making the sheet %q: %w", l.name, err)
		}
	}
	return b.bytes(m)
}

func (b *builder) begin(l *layout, first bool) error {
	if first {
		return b.file.SetSheetName("Sheet1", l.name)
	}
	_, err := b.file.NewSheet(l.name)
	return err
}

func (b *builder) bytes(m Meta) ([]byte, error) {
	var none changes
	at := m.Today.String() + "T00:00:00Z"
	err := b.file.SetDocProps(&excelize.DocProperties{Title: string(none.of(m.Title)), Creator: creator, LastModifiedBy: creator,
		Created: at, Modified: at})
	if err != nil {
		return nil, err
	}
	if err := b.file.SetAppProps(&excelize.AppProperties{Application: creator}); err != nil {
		return nil, err
	}
	var out bytes.Buffer
	b.file.SetZipWriter(func(w io.Writer) excelize.ZipWriter { return &pack{to: w} })
	err = b.file.Write(&out)
	return out.Bytes(), err
}

// sheet writes one sheet: what the library wants to know before the first row, then
// the rows.
func (b *builder) sheet(l *layout) error {
	if err := b.print(l); err != nil {
		return err
	}
	if err := b.validate(l); err != nil {
		return err
	}
	w, err := b.file.NewStreamWriter(l.name)
	if err != nil {
		return err
	}
	s := &sheetWriter{builder: b, layout: l, to: w}
	if err := s.columns(); err != nil {
		return err
	}
	if err := s.above(); err != nil {
		return err
	}
	if err := s.table(); err != nil {
		return err
	}
	return w.Flush()
}
