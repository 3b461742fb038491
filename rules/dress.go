package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules/limits"
)

// File is one TOML file of a workspace with the function that reads its sort.
type File struct {
	source.Entry
	Read func(*source.Doc) []source.Problem
}

// Files lists the workspace's own TOML files in order of path, those that must not
// be read included. A file that two patterns name is of the first sort.
func (f *Firm) Files() ([]File, error) {
	entries, err := f.Tree.Files()
	if err != nil {
		return nil, err
	}
	var out []File
	for _, e := range entries {
		if read := f.reader(e.Path); read != nil {
			out = append(out, File{e, read})
		}
	}
	return out, nil
}

// reader is the function that reads a file of the workspace, or nil for any other.
func (f *Firm) reader(path string) func(*source.Doc) []source.Problem {
	w := &f.Workspace
	switch {
	case path == WorkspaceFile:
		return func(d *source.Doc) []source.Problem { return source.Read(d, new(Workspace).keys) }
	case anyMatch(patterns(w.Plans, "plans"), path):
		return func(d *source.Doc) []source.Problem { _, p := bom.ReadPlan(d); return p }
	case anyMatch(patterns(w.Catalog, "catalog"), path):
		return func(d *source.Doc) []source.Problem { _, p := catalog.ReadParts(d); return p }
	case anyMatch(patterns(w.Profiles, "profiles"), path):
		return func(d *source.Doc) []source.Problem { _, p := limits.Load(d); return p }
	case anyMatch(patterns(w.Offers, "offers"), path):
		return func(d *source.Doc) []source.Problem { _, p := catalog.ReadOffers(d); return p }
	case anyMatch(patterns(w.Stock, "stock"), path):
		return func(d *source.Doc) []source.Problem { _, _, p := catalog.ReadStock(d); return p }
	}
	return nil
}
