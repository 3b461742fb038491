package repo

import (
	"cmp"
	"context"
	"fmt"
	"path"
	"slices"
	"strings"

	"driploop/catalog/source"
)

// tree is the workspace in one revision.
type tree struct {
	name    string
	entries []source.Entry // in order of path, each path once
	blobs   *blobs
}

// At is the tree of a revision, or of what is staged where rev is Index. Its name
// is rev as written; the ID of an entry is the id of its blob. The files are the
// bytes git keeps, without the line ends or filters of a checkout. A tree may be
// read from several goroutines.
// Errors: a *Refusal where there is no such revision.
func (r *Repo) At(ctx context.Context, rev string) (source.Tree, error) {
	rows, err := r.rows(ctx, rev)
	if err != nil {
		return nil, err
	}
	return r.tree(rev, rows), nil
}

func (r *Repo) tree(name string, rows []row) *tree {
	return &tree{name: name, entries: r.entries(rows), blobs: r.blobs}
}

func (t *tree) Name() string { return t.name }

func (t *tree) Files() ([]source.Entry, error) { return slices.Clone(t.entries), nil }

func (t *tree) Read(e source.Entry) ([]byte, error) {
	doing := fmt.Sprintf("read %q at %s", e.Path, clean(t.name))
	if e.Skip != "" || !isID(e.ID) {
		return nil, &Refusal{Doing: doing, Says: cmp.Or(e.Skip, "it is no entry of this tree")}
	}
	a := t.blobs.read(e.ID, t.after(e))
	switch {
	case a.err != nil:
		return nil, fmt.Errorf("%s: %w", doing, a.err)
	case a.size > source.MaxFile:
		return nil, &source.TooBig{Path: e.Path, Size: a.size}
	}
	return a.blob, nil
}

// after is the ids that will likely be wanted next: whoever reads one plan goes
// on to the files of the same kind behind it.
func (t *tree) after(e source.Entry) []string {
	at, found := slices.BinarySearchFunc(t.entries, e.Path, func(e source.Entry, p string) int {
		return strings.Compare(e.Path, p)
	})
	if !found {
		return nil
	}
	var ids []string
	for _, next := range t.entries[at+1:] {
		if len(ids) == window {
			break
		}
		if next.Skip == "" && path.Ext(next.Path) == path.Ext(e.Path) {
			ids = append(ids, next.ID)
		}
	}
	return ids
}
