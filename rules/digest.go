package rules

import (
	"crypto/sha256"
	"encoding/hex"
	"errors"
	"fmt"

	"driploop/catalog/source"
)

// Digest stands for the contents of all files of one kind: the same digest, the same
// files with the same bytes.
type Digest struct {
	Kind  string // "plans"
	Files []source.Entry
	Sum   string // the first 16 digits of a SHA-256
}

// Digests are those of the workspace's files, by what they are for. They tell
// whether what was printed from a workspace still belongs to it. An error means that
// a file cannot be read.
func (f *Firm) Digests() ([]Digest, error) {
	entries, err := f.Tree.Files()
	if err != nil {
		return nil, err
	}
	w := &f.Workspace
	out := []Digest{{Kind: WorkspaceFile}, {Kind: "catalog"}, {Kind: "offers"}, {Kind: "stock"}, {Kind: "profiles"}, {Kind: "plans"}}
	of := [][]string{{WorkspaceFile}, patterns(w.Catalog, "catalog"), patterns(w.Offers, "offers"), patterns(w.Stock, "stock"),
		patterns(w.Profiles, "profiles"), patterns(w.Plans, "plans")}
	for i := range out {
		for _, e := range entries {
			if e.Skip == "" && (e.Path == WorkspaceFile) == (i == 0) && anyMatch(of[i], e.Path) {
				out[i].Files = append(out[i].Files, e)
			}
		}
		if out[i].Sum, err = f.digest(out[i].Files); err != nil {
			return nil, err
		}
	}
	return out, nil
}

// digest is over names, sizes and bytes, so that no two lists of files read as one.
// A file too large to be read counts by its name.
func (f *Firm) digest(files []source.Entry) (string, error) {
	h := sha256.New()
	for _, e := range files {
		src, err := f.Tree.Read(e)
		if big := (*source.TooBig)(nil); errors.As(err, &big) {
			src = nil
		} else if err != nil {
			return "", fmt.Errorf("reading %s: %w", e.Path, err)
		}
		fmt.Fprintf(h, "%d %s %d ", len(e.Path), e.Path, len(src))
		h.Write(src)
	}
	return hex.EncodeToString(h.Sum(nil))[:16], nil
}
