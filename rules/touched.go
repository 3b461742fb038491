package rules

import (
	"driploop/catalog"
	"driploop/catalog/source"
)

// Touched lists the plans that changed files concern: a plan file is one itself;
// a catalog, offer or stock file touches the plans that name one of its parts; a
// profile file those that use one of its profiles or codes; driploop.toml, and a
// file of the workspace that is gone or cannot be read, touch all.
func (f *Firm) Touched(changed []string) []source.Entry {
	t := touch{firm: f, plans: map[string]bool{}, parts: map[string]bool{}, names: map[string]bool{}}
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

// doc reads a changed file, or makes every plan touched where that fails.
func (t *touch) doc(path string) *source.Doc {
	entries, err := t.firm.Tree.Files()
	if err == nil {
		for _, e := range entries {
			if e.Path != path || e.Skip != "" {
				continue
			}
			if d, _ := readDoc(t.firm.Tree, e); d != nil && !d.Ended {
				return d
			}
		}
	}
	t.all = true
	return nil
}

// tables notes the names under [table.NAME].
func (t *touch) tables(path, table string, into map[string]bool) {
	d := t.doc(path)
	if d == nil {
		return
	}
	if k := d.Root.Get(table); k != nil {
		for _, e := range k.Value.Keys {
			into[e.Name] = true
		}
	}
}

// mentions notes the parts that an offer or stock file names.
func (t *touch) mentions(path string) {
	d := t.doc(path)
	if d == nil {
		return
	}
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
