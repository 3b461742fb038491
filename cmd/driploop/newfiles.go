package main

import (
	"errors"
	"fmt"
	"io/fs"
	"os"
	"path"
	"slices"
	"strconv"
)

// newFiles writes files that are not there yet below a folder. What it has made can be
// undone.
type newFiles struct {
	root    *os.Root
	made    []string // files, in the order in which they were made
	folders []string // likewise
}

// taken is the name of a file that is there already.
type taken string

func (t taken) Error() string { return string(t) + " is there already, and nothing is written over" }

func openNew(dir string) (*newFiles, error) {
	root, err := os.OpenRoot(dir)
	if err != nil {
		return nil, fmt.Errorf("opening the folder: %w", err)
	}
	return &newFiles{root: root}, nil
}

func (w *newFiles) close() { w.root.Close() }

// there reports whether anything has the name, be it a link that leads nowhere.
func (w *newFiles) there(name string) bool {
	_, err := w.root.Lstat(name)
	return err == nil
}

// folder makes a folder and those above it, where they are not there.
func (w *newFiles) folder(name string) error {
	if name == "." || w.there(name) {
		return nil
	}
	if err := w.folder(path.Dir(name)); err != nil {
		return err
	}
	if err := w.root.Mkdir(name, 0o777); err != nil {
		return fmt.Errorf("making the folder %s: %w", name, err)
	}
	w.folders = append(w.folders, name)
	return nil
}

// write makes a file. It is written under another name beside its place and linked
// there once it is whole; a link, unlike a rename, refuses a name that is taken.
func (w *newFiles) write(name string, text []byte) error {
	if err := w.folder(path.Dir(name)); err != nil {
		return err
	}
	draft := path.Join(path.Dir(name), ".driploop-"+strconv.Itoa(os.Getpid())+"-"+path.Base(name))
	err := w.draft(draft, text)
	if err == nil {
		err = w.root.Link(draft, name)
	}
	if gone := w.root.Remove(draft); err == nil {
		err = gone
	}
	if errors.Is(err, fs.ErrExist) {
		return taken(name)
	}
	if l := (*os.LinkError)(nil); errors.As(err, &l) {
		err = l.Err
	}
	if err != nil {
		return fmt.Errorf("writing %s: %w", name, cause(err))
	}
	w.made = append(w.made, name)
	return nil
}

func (w *newFiles) draft(name string, text []byte) error {
	f, err := w.root.OpenFile(name, os.O_WRONLY|os.O_CREATE|os.O_EXCL, 0o666)
	if err != nil {
		return err
	}
	_, err = f.Write(text)
	return errors.Join(err, f.Sync(), f.Close())
}

// undo takes away what was made, the last first. A folder in which somebody else has
// put something in the meantime stays.
func (w *newFiles) undo() {
	for _, list := range [][]string{w.made, w.folders} {
		for _, name := range slices.Backward(list) {
			w.root.Remove(name)
		}
	}
	w.made, w.folders = nil, nil
}
