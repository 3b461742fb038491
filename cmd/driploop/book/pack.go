package book

import (
	"archive/zip"
	"bytes"
	"errors"
	"io"
	"io/fs"
	"slices"
	"strings"
	"time"
)

// pack collects the parts of a workbook and writes them in order of name under a
// fixed time. The library writes streamed sheets in no fixed order.
type pack struct {
	to    io.Writer
	parts []*part
}

type part struct {
	name string
	bytes.Buffer
}

// packTime stands on every part; the format knows no time before it.
var packTime = time.Date(1980, 1, 1, 0, 0, 0, 0, time.UTC)

// Create begins a part.
func (p *pack) Create(name string) (io.Writer, error) {
	part := &part{name: name}
	p.parts = append(p.parts, part)
	return part, nil
}

// AddFS is asked of a writer of archives; no workbook of ours needs it.
func (p *pack) AddFS(fs.FS) error { return errors.ErrUnsupported }

// Close writes all parts.
func (p *pack) Close() error {
	slices.SortStableFunc(p.parts, func(a, b *part) int { return strings.Compare(a.name, b.name) })
	w := zip.NewWriter(p.to)
	for _, part := range p.parts {
		out, err := w.CreateHeader(&zip.FileHeader{Name: part.name, Method: zip.Deflate, Modified: packTime})
		if err != nil {
			return err
		}
		if _, err := part.WriteTo(out); err != nil {
			return err
		}
	}
	return w.Close()
}
