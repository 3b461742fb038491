package main

import (
	"context"
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/cmd/driploop/filled"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// counting are the flags of stock with which shelves are counted.
type counting struct {
	sheet, read, where, by string
	blind, yes             bool
}

// refuse says which flags do not go together. It finds the form of the sheet.
func (k *counting) refuse(c *Command, args []string) (form string, err error) {
	switch {
	case k.sheet != "" && k.read != "":
		return "", errors.New("--sheet writes a sheet to count on, and --read takes one back; one at a time")
	case k.sheet == "" && k.read == "" && k.where != "":
		return "", errors.New("--where chooses a shelf for --sheet or --read")
	case k.read == "" && (k.by != "" || k.yes):
		return "", errors.New("--by and --yes belong to --read")
	case k.read != "" && k.blind:
		return "", errors.New("--blind is for a sheet that goes out, not for one that comes back")
	case k.sheet == "" && k.read == "":
		return "", nil
	case len(args) > 0:
		return "", errors.New("shelves are counted, not plans; --where chooses one")
	case k.sheet != "" && (c.shared.as != "" || c.shared.out != ""):
		return "", errors.New("--sheet writes a file of its own; --as and --out do not go with it")
	case k.sheet != "":
		return sheetForm("--sheet", k.sheet, "csv", "xlsx")
	}
	if k.by != "" && !source.ValidID(k.by) {
		return "", fmt.Errorf("--by %s: initials are letters and digits, for they become part of a file's name", source.Quote(k.by))
	}
	if err := c.writesItself("stock --read"); err != nil {
		return "", err
	}
	return sheetForm("--read", k.read, "csv", "xlsx")
}

// countSheet writes a sheet to count on, where no file of the name is.
func (c *Command) countSheet(ctx context.Context, firm *rules.Firm, s *show.Stock, k *counting, form string) error {
	shelves := firm.Workspace.Premises.ShelfNames()
	if k.where != "" {
		if firm.Workspace.Premises.Shelf(k.where) == nil {
			if near := source.Nearest(k.where, shelves); near != "" {
				return fmt.Errorf("--where: there is no shelf %s; did you mean %s?", source.Quote(k.where), near)
			}
			return fmt.Errorf("--where: there is no shelf %s", source.Quote(k.where))
		}
		shelves = []string{k.where}
	}
	var sheets []bom.Sheet
	var full []string
	for _, w := range shelves {
		if of := s.CountSheets(w, k.blind); len(of) > 0 {
			sheets, full = append(sheets, of...), append(full, w)
		}
	}
	if full == nil {
		return errors.New("by the book nothing lies there that could be counted")
	}
	var b []byte
	var err error
	if form == "xlsx" {
		b, err = c.bookOf(ctx, firm, firm.PlanFiles, "Count", sheets)
	} else {
		b, err = s.CountCSV(full, k.blind)
	}
	if err != nil {
		return failure{err}
	}
	if err := writeBeside(k.sheet, b); err != nil {
		return err
	}
	return c.emit(show.CountOut(full, k.sheet))
}

// writeBeside writes a file that is not there yet, wherever the call wants it.
func writeBeside(file string, b []byte) error {
	if _, err := os.Lstat(file); err == nil {
		return taken(file)
	}
	root, err := os.OpenRoot(filepath.Dir(file))
	if err == nil {
		defer root.Close()
		err = writeNew(root, filepath.Base(file), b)
	}
	switch {
	case errors.Is(err, fs.ErrExist):
		return taken(file)
	case err != nil:
		return failure{fmt.Errorf("writing %s: %w", file, cause(err))}
	}
	return nil
}

// countRead takes a count sheet back, as a stock sheet for each shelf.
func (c *Command) countRead(firm *rules.Firm, k *counting, form string, page show.Page) error {
	b, err := readFilled(k.read, form)
	if err != nil {
		return err
	}
	counts, err := filled.Count(b, ground(firm, k.by), k.where)
	if err != nil {
		return c.faulty(k.read, err)
	}
	bags := 0
	var sheets []newSheet
	for _, n := range counts {
		for _, x := range n.Bins {
			if x.Bag > 0 {
				bags++
			}
		}
		file := fmt.Sprintf("stock/counts/%s-%s-%s.toml", n.On, n.Shelf, n.By)
		if slices.ContainsFunc(sheets, func(s newSheet) bool { return s.name == file }) {
			return fmt.Errorf("the counts of two shelves would both be %s; --where reads one at a time, by somebody else", file)
		}
		sheets = append(sheets, newSheet{file, n.TOML()})
	}
	if bags > 0 && !k.yes {
		text, err := show.CountedText(page, counts, false)
		if err != nil {
			return failure{err}
		}
		if err := c.emit(text); err != nil {
			return err
		}
		return fmt.Errorf("were bags counted for pieces? It looks so %s; nothing is written. --yes writes it as it stands", times(bags))
	}
	if err := c.writeSheets(firm, sheets); err != nil {
		return err
	}
	for i := range counts {
		counts[i].File = sheets[i].name
	}
	text, err := show.CountedText(page, counts, true)
	if err != nil {
		return failure{err}
	}
	return c.emit(text)
}

func times(n int) string {
	if n == 1 {
		return "once"
	}
	return fmt.Sprintf("%d times", n)
}
