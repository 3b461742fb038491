package rules

import (
	"fmt"
	"slices"

	"driploop/catalog/source"
)

// sorts of a workspace's own files.
const (
	sortHead     = "workspace"
	sortPlan     = "plan"
	sortCatalog  = "catalog"
	sortProfiles = "profiles"
	sortOffers   = "offers"
	sortStock    = "stock"
)

// sortOf is the sort of a file of the workspace, "" of any other.
func (f *Firm) sortOf(path string) string {
	w := &f.Workspace
	switch {
	case path == WorkspaceFile:
		return sortHead
	case anyMatch(patterns(w.Plans, "plans"), path):
		return sortPlan
	case anyMatch(patterns(w.Catalog, "catalog"), path):
		return sortCatalog
	case anyMatch(patterns(w.Profiles, "profiles"), path):
		return sortProfiles
	case anyMatch(patterns(w.Offers, "offers"), path):
		return sortOffers
	case anyMatch(patterns(w.Stock, "stock"), path):
		return sortStock
	}
	return ""
}

// ownFile is one of the workspace's own files that differs, as it was and as it is.
type ownFile struct {
	path string
	sort sideOf[string] // "" where it is not of the workspace
	doc  sideOf[*source.Doc]
}

// ownFiles finds what differs in the workspace's own files, and what that concerns.
func (c *comparison) ownFiles() error {
	c.parts, c.names = map[string]bool{}, map[string]bool{}
	var catalogs, profiles, offers, stock []ownFile
	files, err := c.differing()
	if err != nil {
		return err
	}
	for _, f := range files {
		for side, s := range f.sort {
			if side == atHead && s == f.sort[atBase] {
				continue
			}
			switch s {
			case sortHead:
				c.headChanges(f)
			case sortCatalog:
				catalogs = append(catalogs, f)
			case sortProfiles:
				profiles = append(profiles, f)
			case sortOffers:
				offers = append(offers, f)
			case sortStock:
				stock = append(stock, f)
			}
		}
	}
	c.catalogChanges(catalogs)
	c.profileChanges(profiles)
	c.offerChanges(offers)
	c.stockChanges(stock)
	for _, x := range c.out.Changes {
		if x.Charge == ToRulers {
			c.moved.rulers = true
		}
	}
	return nil
}

// differing lists the workspace's own files, plans left out, that are other bytes in
// the two trees.
func (c *comparison) differing() ([]ownFile, error) {
	var lists sideOf[[]source.Entry]
	for side, f := range c.firms {
		entries, err := f.Tree.Files()
		if err != nil {
			return nil, err
		}
		for _, e := range entries {
			if s := f.sortOf(e.Path); s != "" && s != sortPlan && e.Skip == "" {
				lists[side] = append(lists[side], e)
			}
		}
	}
	var out []ownFile
	a, b := lists[atBase], lists[atHead]
	for len(a) > 0 || len(b) > 0 {
		switch {
		case len(b) == 0 || len(a) > 0 && a[0].Path < b[0].Path:
			out, a = append(out, c.ownFile(&a[0], nil)), a[1:]
		case len(a) == 0 || b[0].Path < a[0].Path:
			out, b = append(out, c.ownFile(nil, &b[0])), b[1:]
		default:
			if !sameFile(c.firms[atBase].Tree, c.firms[atHead].Tree, a[0], b[0]) {
				out = append(out, c.ownFile(&a[0], &b[0]))
			}
			a, b = a[1:], b[1:]
		}
	}
	return out, nil
}

func (c *comparison) ownFile(a, b *source.Entry) ownFile {
	var f ownFile
	for side, e := range []*source.Entry{a, b} {
		if e == nil {
			continue
		}
		f.path, f.sort[side] = e.Path, c.firms[side].sortOf(e.Path)
		f.doc[side], _ = c.firms[side].docs.read(c.firms[side].Tree, *e)
	}
	return f
}

// root is the table of a file, nil where there is no such file.
func (f *ownFile) root(side int) *source.Node {
	if f.doc[side] == nil {
		return nil
	}
	return f.doc[side].Root
}

func (f *ownFile) key(side int, name string) *source.KeyNode { return f.root(side).Get(name) }

// headCharge says what a key of driploop.toml is.
func headCharge(table, key string) Charge {
	switch table {
	case "house", "rule":
		return ToRulers
	case "workspace":
		if key == "profile" || key == "code" || key == "profiles" {
			return ToRulers
		}
		if key == "catalog" || key == "plans" {
			return ToWork
		}
	}
	return ToFacts
}

// headChanges compares driploop.toml. Another ruler there concerns all plans.
func (c *comparison) headChanges(f ownFile) {
	d := &differ{file: f.path, charge: headCharge}
	for _, t := range []string{"workspace", "house"} {
		d.table(t, t, tableOf(f.key(atBase, t)), tableOf(f.key(atHead, t)))
	}
	for _, t := range []string{"rule", "shelf", "crew"} {
		d.named(t, f.key(atBase, t), f.key(atHead, t))
	}
	d.table("calendar", "calendar", tableOf(f.key(atBase, "calendar")), tableOf(f.key(atHead, "calendar")))
	d.rows("keep", f.key(atBase, "keep"), f.key(atHead, "keep"), "part", "at")
	for _, x := range d.out {
		switch {
		case x.Charge == ToRulers && x.Key != "profiles":
			c.all = true
		case x.Charge == ToFacts && x.On != "workspace":
			c.goods.facts = true
		}
	}
	c.out.Changes = append(c.out.Changes, d.out...)
	c.weightChanges()
}

// weightChanges makes sure that a weight is said with what it was, which for a rule
// that nobody weighed anew is its own.
func (c *comparison) weightChanges() {
	for i := range c.out.Changes {
		x := &c.out.Changes[i]
		name, of := cutOn(x.On)
		r := Find(name)
		if of != "rule" || r == nil {
			continue
		}
		own, base, head := r.Weight.String(), c.firms[atBase].Override(name), c.firms[atHead].Override(name)
		weight := func(o *Override) string {
			if o == nil || !o.Weight.Set {
				return own + " (its own)"
			}
			return fmt.Sprintf("%s (%s)", o.Weight.V, o.Because.Or("no reason given"))
		}
		if x.Key == "" {
			x.Key, x.How, x.Was, x.Now = "weight", "changed", weight(base), weight(head)
		}
	}
}

// cutOn takes "rule.loss/feed" apart.
func cutOn(on string) (name, table string) {
	for i := range on {
		if on[i] == '.' {
			return on[i+1:], on[:i]
		}
	}
	return "", on
}

// catalogChanges finds the parts that differ, in whichever file they stand.
func (c *comparison) catalogChanges(files []ownFile) {
	var at sideOf[map[string]*source.KeyNode]
	var ids []string
	for side := range at {
		at[side] = map[string]*source.KeyNode{}
		for i := range files {
			for _, k := range keysIn(tableOf(files[i].key(side, "part"))) {
				if at[side][k.Name] == nil {
					at[side][k.Name] = k
					ids = append(ids, k.Name)
				}
			}
		}
	}
	slices.Sort(ids)
	d := &differ{charge: func(string, string) Charge { return ToWork }}
	for _, id := range slices.Compact(ids) {
		a, b := at[atBase][id], at[atHead][id]
		n := len(d.out)
		switch {
		case a == nil:
			d.file = b.At.Path()
			d.add(Change{Charge: ToWork, On: "part." + id, How: "added", Now: valueText(b.Value), Line: b.At.Line()})
		case b == nil:
			d.file = a.At.Path()
			d.add(Change{Charge: ToWork, On: "part." + id, How: "gone", Was: valueText(a.Value), Line: a.At.Line()})
		default:
			d.file = b.At.Path()
			d.table("part", "part."+id, a.Value, b.Value)
		}
		if len(d.out) > n {
			c.parts[id] = true
			c.moved.work = true
		}
	}
	c.out.Changes = append(c.out.Changes, d.out...)
	c.madeOfChanged()
}

// madeOfChanged adds the parts that are made of those that differ.
func (c *comparison) madeOfChanged() {
	for _, f := range c.firms {
		for _, p := range f.Catalog.All() {
			if slices.ContainsFunc(madeOf(p), func(id string) bool { return c.parts[id] }) {
				c.parts[p.ID] = true
			}
		}
	}
}

// offerChanges compares what vendors sell. It concerns no figure of a plan.
func (c *comparison) offerChanges(files []ownFile) {
	d := &differ{charge: func(string, string) Charge { return ToFacts }}
	for i := range files {
		f := &files[i]
		d.file = f.path
		d.named("vendor", f.key(atBase, "vendor"), f.key(atHead, "vendor"))
		d.rows("offer", f.key(atBase, "offer"), f.key(atHead, "offer"), "part", "vendor", "code")
	}
	if len(d.out) > 0 {
		c.goods.facts = true
	}
	c.out.Changes = append(c.out.Changes, d.out...)
}
