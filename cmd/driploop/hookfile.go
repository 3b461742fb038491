package main

import (
	"errors"
	"fmt"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"github.com/google/renameio/v2"
)

type hookState int

const (
	hookAbsent hookState = iota
	hookOurs
	hookEdited  // ours, and changed since
	hookForeign // of somebody else
	hookOther   // no file
)

// hookFile is one hook in its folder.
type hookFile struct {
	dir, name string
	state     hookState
	text      string // where it is ours
	mode      fs.FileMode
	legacy    bool // a foreign hook runs ours under its name with legacySuffix
	before    bool // a hook is kept under its name with beforeSuffix
}

func (h *hookFile) path() string { return filepath.Join(h.dir, h.name) }

// look finds what is there.
func (h *hookFile) look() (err error) {
	if h.state, h.text, h.mode, err = hookAt(h.path()); err != nil {
		return err
	}
	if h.state == hookForeign {
		state, _, _, err := hookAt(h.path() + legacySuffix)
		if err != nil {
			return err
		}
		h.legacy = state == hookOurs
	}
	state, _, _, err := hookAt(h.path() + beforeSuffix)
	h.before = state != hookAbsent
	return err
}

// hookAt tells what a file is; only a plain one is ever ours.
func hookAt(path string) (hookState, string, fs.FileMode, error) {
	info, err := os.Lstat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist):
		return hookAbsent, "", 0, nil
	case err != nil:
		return hookAbsent, "", 0, failure{err}
	case info.Mode()&fs.ModeSymlink != 0:
		return hookForeign, "", 0, nil
	case !info.Mode().IsRegular():
		return hookOther, "", 0, nil
	}
	f, err := os.Open(path)
	if err != nil {
		return hookAbsent, "", 0, failure{err}
	}
	defer f.Close()
	b, err := io.ReadAll(io.LimitReader(f, 64<<10))
	if err != nil {
		return hookAbsent, "", 0, failure{err}
	}
	rest, ours := strings.CutPrefix(string(b), hookHead)
	sum, body, _ := strings.Cut(rest, "\n")
	switch {
	case !ours:
		return hookForeign, "", info.Mode(), nil
	case sum != hookSum(body):
		return hookEdited, "", info.Mode(), nil
	}
	return hookOurs, string(b), info.Mode(), nil
}

// refusal is why the hook cannot be put in, or be taken out where it was edited.
func (h *hookFile) refusal() error {
	switch {
	case h.state == hookEdited:
		return fmt.Errorf("%s was put there by driploop and edited since: take it away yourself, its text may be wanted", h.path())
	case h.state == hookOther:
		return fmt.Errorf("%s is no file", h.path())
	case h.state == hookForeign && h.before && !h.legacy:
		return fmt.Errorf("%s is another's hook, and %s%s keeps one already: take one of them away", h.path(), h.name, beforeSuffix)
	}
	return nil
}

// install puts the hook in and says what was done. A hook of somebody else is moved,
// as it is, to the name under which ours runs it.
func (h *hookFile) install(text string) (says string, err error) {
	switch {
	case h.state == hookForeign && h.legacy:
		return h.path() + " runs it already, as " + h.name + legacySuffix, nil
	case h.state == hookOurs && h.text == text && h.mode&0o111 != 0:
		return h.path() + ", as before" + h.first(), nil
	case h.state == hookForeign:
		if err := os.Rename(h.path(), h.path()+beforeSuffix); err != nil {
			return "", cause(err)
		}
		if err := writeProgram(h.path(), text); err != nil {
			return "", errors.Join(cause(err), os.Rename(h.path()+beforeSuffix, h.path()))
		}
		h.before = true
		return h.path() + h.first(), nil
	}
	if err := writeProgram(h.path(), text); err != nil {
		return "", cause(err)
	}
	return h.path() + h.first(), nil
}

// first says what the hook runs first.
func (h *hookFile) first() string {
	if !h.before {
		return ""
	}
	return "; the hook that was there runs first, as " + h.name + beforeSuffix
}

// remove takes our hook out, puts back the one before it, and says what was done.
func (h *hookFile) remove() (says string, err error) {
	path := h.path()
	switch {
	case h.legacy:
		path += legacySuffix
	case h.state == hookForeign || h.state == hookOther:
		return path + " is another's, and stays", nil
	case h.state == hookAbsent && !h.before:
		return path + " is not there", nil
	}
	if h.before {
		if err := os.Rename(h.path()+beforeSuffix, path); err != nil {
			return "", cause(err)
		}
		return path + " is the one that was there before", nil
	}
	if err := os.Remove(path); err != nil {
		return "", cause(err)
	}
	return path + " is taken out", nil
}

// writeProgram writes a file that can be run, whole or not at all.
func writeProgram(path, text string) error {
	f, err := renameio.NewPendingFile(path, renameio.WithPermissions(0o777))
	if err != nil {
		return err
	}
	defer f.Cleanup()
	if _, err := f.WriteString(text); err != nil {
		return err
	}
	return f.CloseAtomicallyReplace()
}
