package rules

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
)

// Touched lists the plans that changed files concern: a plan file is one itself;
// a catalog, offer or stock file touches the plans that name one of its parts; a
// profile file those that use one of its profiles or codes; driploop.toml, and a
// file of the workspace that is gone or cannot be read, touch all. Where base is
// given, the workspace before the change, what a file says no longer counts as well,
// and a file that is gone touches what it touched there.
func (f *Firm) Touched(changed []string, base source.Tree) []source.Entry {
	t := touch{firm: f, base: base, plans: map[string]bool{}, parts: map[string]bool{}, names: map[string]bool{}}
	for _, path := range changed {
		t.file(path)
	}
	var out []source.Entry
	for _, e := range f.PlanFiles {
		if t.all || t.plans[e.Path] || t.concerns(e) {
			out = append(out, e)
		}
	}
	return out
}

type touch struct {
	firm  *Firm
	base  source.Tree // nil: not known
	all   bool
	plans map[string]bool
	parts map[string]bool // IDs of parts
	names map[string]bool // of profiles and codes
}

func (t *touch) file(path string) {
	w := &t.firm.Workspace
	switch {
	case path == WorkspaceFile:
		t.all = true
	case anyMatch(patterns(w.Plans, "plans"), path):
		t.plans[path] = true
	case anyMatch(patterns(w.Catalog, "catalog"), path):
		t.tables(path, "part", t.parts)
	case anyMatch(patterns(w.Profiles, "profiles"), path):
		t.tables(path, "profile", t.names)
		t.tables(path, "code", t.names)
	case anyMatch(patterns(w.Offers, "offers"), path), anyMatch(patterns(w.Stock, "stock"), path):
		t.mentions(path)
	}
}

// docs reads a changed file as it is and as it was, or makes every plan touched
// where it is not there to be read. What could not be read before the change needs
// no look: no plan stood on it.
func (t *touch) docs(path string) []*source.Doc {
	now, there := t.doc(t.firm.Tree, path)
	was, _ := t.doc(t.base, path)
	switch {
	case now != nil && was != nil:
		return []*source.Doc{was, now}
	case now != nil:
		return []*source.Doc{now}
	case was != nil && !there:
		return []*source.Doc{was}
	}
	t.all = true
	return nil
}

// doc reads a file of a tree, nil where it is not there or cannot be read whole.
func (t *touch) doc(tree source.Tree, path string) (d *source.Doc, there bool) {
	if tree == nil {
		return nil, false
	}
	entries, err := tree.Files()
	if err != nil {
		return nil, true
	}
	i := slices.IndexFunc(entries, func(e source.Entry) bool { return e.Path == path })
	if i < 0 {
		return nil, false
	}
	if entries[i].Skip != "" {
		return nil, true
	}
	if d, _ = readDoc(tree, entries[i]); d == nil || d.Ended {
		return nil, true
	}
	return d, true
}

// tables notes the names under [table.NAME].
func (t *touch) tables(path, table string, into map[string]bool) {
	for _, d := range t.docs(path) {
		if k := d.Root.Get(table); k != nil {
			for _, e := range k.Value.Keys {
				into[e.Name] = true
			}
		}
	}
}

// mentions notes the parts that an offer or stock file names.
func (t *touch) mentions(path string) {
	for _, d := range t.docs(path) {
		if offers, _ := catalog.ReadOffers(d); offers != nil {
			for i := range offers.Offers {
				o := &offers.Offers[i]
				t.parts[o.Part.V] = true
				for _, b := range o.Brings {
					t.parts[b.Name] = true
				}
			}
		}
		sheet, order, _ := catalog.ReadStock(d)
		if sheet != nil {
			t.sheet(sheet)
		}
		if order != nil {
			for i := range order.Lines {
				t.parts[order.Lines[i].Part.V] = true
				for _, b := range order.Lines[i].Brings {
					t.parts[b.Name] = true
				}
			}
		}
	}
}

// sheet notes the parts of a stock sheet; a tag stands for the part on its reel.
func (t *touch) sheet(s *catalog.Sheet) {
	tag := func(id string) {
		if on := t.firm.Stock.Tag(id); on != nil {
			t.parts[on.Part] = true
		}
	}
	for i := range s.Counts {
		t.parts[s.Counts[i].Part.V] = true
	}
	for i := range s.Reels {
		t.parts[s.Reels[i].Part.V] = true
	}
	for i := range s.Moves {
		t.parts[s.Moves[i].Part.V] = true
		tag(s.Moves[i].Tag.V)
	}
	for i := range s.Cuts {
		tag(s.Cuts[i].Tag.V)
	}
	if s.Head.Complete.V {
		t.missed(s)
	}
}

// missed notes the parts of which a complete count says, without naming them, that
// none is there.
func (t *touch) missed(s *catalog.Sheet) {
	for i := range t.firm.Stock.Bins {
		if b := &t.firm.Stock.Bins[i]; b.Where == s.Head.Where.V {
			t.parts[b.Part] = true
		}
	}
	for i := range t.firm.Stock.Tags {
		if on := &t.firm.Stock.Tags[i]; on.At.Path() == s.File.Path {
			t.parts[on.Part] = true
		}
	}
}

// concerns reports whether a plan names a part or profile that is touched.
func (t *touch) concerns(e source.Entry) bool {
	if len(t.parts) == 0 && len(t.names) == 0 {
		return false
	}
	c, broken := t.firm.Case(e)
	if broken {
		return true
	}
	if t.names[c.ProfileName()] || t.names[c.CodeName()] {
		return true
	}
	for _, id := range c.parts() {
		if t.parts[id] {
			return true
		}
	}
	return false
}
