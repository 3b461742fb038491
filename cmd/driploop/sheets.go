package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/cmd/driploop/book"
	"driploop/cmd/driploop/filled"
	"driploop/rules"
)

// mostFilled is how many bytes a file may have that comes back filled in.
const mostFilled = 16 << 20

// sheetForm is the form of a sheet that goes out or comes back, by its name's end.
func sheetForm(flag, file string, forms ...string) (string, error) {
	end := strings.ToLower(filepath.Ext(file))
	for _, f := range forms {
		if end == "."+f {
			return f, nil
		}
	}
	return "", fmt.Errorf("%s %s: the name of the file has to end in .%s", flag, file, strings.Join(forms, " or ."))
}

// readFilled reads a file that came back filled in. It is named by the call and need
// not lie in the workspace: it may come out of a mail.
func readFilled(file, form string) (bom.FilledBook, error) {
	b, err := readBounded(file)
	if err != nil {
		return nil, fmt.Errorf("reading %s: %w", file, cause(err))
	}
	if form == "xlsx" {
		all, err := book.Read(b)
		if err != nil {
			return nil, fmt.Errorf("reading %s: %w", file, err)
		}
		return all, nil
	}
	s, err := book.ReadTable(b)
	if err != nil {
		return nil, fmt.Errorf("reading %s: %w", file, err)
	}
	return bom.FilledBook{s}, nil
}

// readBounded reads a file that is a file: a pipe would never end.
func readBounded(file string) ([]byte, error) {
	info, err := os.Stat(file)
	if err != nil {
		return nil, err
	}
	if !info.Mode().IsRegular() {
		return nil, errors.New("it is no file")
	}
	f, err := os.Open(file)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	b, err := io.ReadAll(io.LimitReader(f, mostFilled+1))
	if err == nil && len(b) > mostFilled {
		err = fmt.Errorf("it has more than %d MiB", mostFilled>>20)
	}
	return b, err
}

// ground is what a sheet that came back is held against.
func ground(firm *rules.Firm, by string) *filled.Ground {
	return &filled.Ground{Catalog: firm.Catalog, Premises: &firm.Workspace.Premises, Stock: firm.Stock, Today: firm.Today,
		Feet: firm.Workspace.Lengths.V == "ft", By: by}
}

// faulty says everything that is wrong with a file, a line each.
func (c *Command) faulty(file string, err error) error {
	var all filled.Faults
	if errors.As(err, &all) && len(all) > 1 {
		for _, f := range all {
			c.say("%s", f)
		}
		return fmt.Errorf("reading %s: %d things are wrong, and nothing is written", file, len(all))
	}
	return fmt.Errorf("reading %s: %w", file, err)
}

// newSheet is a file to be written into the workspace.
type newSheet struct {
	name string
	text []byte
}

// readable refuses a file that the workspace could not read again.
func (s *newSheet) readable() error {
	if len(s.text) > source.MaxFile {
		return fmt.Errorf("%s: %w; take it in two halves, by two people or on two days", s.name, &source.TooBig{Path: "the sheet", Size: int64(len(s.text))})
	}
	file, problems := source.NewFile(s.name, s.text)
	doc, more := source.Parse(file)
	_, _, wrong := catalog.ReadStock(doc)
	for _, p := range append(append(problems, more...), wrong...) {
		return fmt.Errorf("%s could not be read again: %s; take it in smaller parts", s.name, p.Says)
	}
	return nil
}

// writeSheets writes files that are not there yet and that the workspace reads: all of
// them, or none. Each is there whole or not at all even where the program is killed.
func (c *Command) writeSheets(firm *rules.Firm, sheets []newSheet) error {
	root, err := os.OpenRoot(c.shared.root)
	if err != nil {
		return err
	}
	defer root.Close()
	for _, s := range sheets {
		if !firm.ReadsStock(s.name) {
			return fmt.Errorf("the workspace's stock files do not include %s; name it in [workspace] stock", s.name)
		}
		if err := s.readable(); err != nil {
			return err
		}
		if _, err := root.Lstat(s.name); err == nil {
			return taken(s.name)
		} else if !errors.Is(err, fs.ErrNotExist) {
			return fmt.Errorf("looking for %s: %w", s.name, cause(err))
		}
	}
	for i, s := range sheets {
		err := writeNew(root, s.name, s.text)
		if err == nil {
			continue
		}
		for _, before := range sheets[:i] {
			root.Remove(before.name)
		}
		if errors.Is(err, fs.ErrExist) {
			return taken(s.name)
		}
		return failure{fmt.Errorf("writing %s: %w", s.name, cause(err))}
	}
	return nil
}
