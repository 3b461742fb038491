package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"

	"github.com/google/renameio/v2"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/cmd/driploop/book"
	"driploop/rules"
)

// emit writes a finished result to standard output or to --out. A file is written
// beside its place and moved there when it is complete; what stood there before
// stays until then.
func (c *Command) emit(b []byte) error {
	c.settled()
	if c.shared.out == "" {
		if _, err := c.Stdout.Write(b); err != nil {
			return failure{fmt.Errorf("writing the result: %w", err)}
		}
		return nil
	}
	if err := writeWhole(c.shared.out, b); err != nil {
		return failure{fmt.Errorf("writing %s: %w", c.shared.out, cause(err))}
	}
	return nil
}

// bookOf makes a workbook of sheets, with one on what they were made from.
func (c *Command) bookOf(ctx context.Context, firm *rules.Firm, plans []source.Entry, title string, sheets []bom.Sheet) ([]byte, error) {
	from, err := c.madeFrom(ctx, firm, plans)
	if err != nil {
		return nil, err
	}
	b, err := book.Write(append(sheets, from), book.Meta{Title: title, Today: firm.Today})
	if err != nil {
		return nil, fmt.Errorf("making the workbook: %w", err)
	}
	return b, nil
}

// cause is what went wrong with a file, without the name of the file beside its
// place, which nobody knows and which is another every time.
func cause(err error) error {
	if p := (*fs.PathError)(nil); errors.As(err, &p) {
		return p.Err
	}
	return err
}

func writeWhole(path string, b []byte) error {
	info, err := os.Lstat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
	case err != nil:
		return err
	case info.Mode()&fs.ModeSymlink != 0:
		if path, err = filepath.EvalSymlinks(path); err != nil {
			return err
		}
	case info.IsDir():
		return errors.New("it is a folder")
	case !info.Mode().IsRegular():
		return writeThrough(path, b)
	}
	return renameio.WriteFile(path, b, 0o644)
}

// writeThrough writes to a pipe or device, which cannot be replaced.
func writeThrough(path string, b []byte) error {
	f, err := os.OpenFile(path, os.O_WRONLY, 0)
	if err != nil {
		return err
	}
	_, err = f.Write(b)
	return errors.Join(err, f.Close())
}
