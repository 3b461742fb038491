package rules

import (
	"bytes"
	"fmt"
	"slices"

	"driploop/catalog/source"
)

// Origin says which trees a result was made from: "worktree", ":index", or a
// revision.
type Origin struct {
	At         string   // plans, catalog, offers and premises
	LimitsFrom string   // profiles, codes, house figures, weights and the default profile and code
	StockFrom  string   // stock sheets and orders
	Differs    []string // what is other here than in the trees that limits and stock came from
}

// Origin says which trees the firm was read from.
func (f *Firm) Origin() Origin { return f.origin }

// measureBy takes what plans are measured by from another tree. The firm's own
// rulers have been read: what is wrong with them stays said.
func (f *Firm) measureBy(own *loader, from source.Tree) error {
	base, err := f.open(from, from.Name())
	if err != nil {
		return err
	}
	set := base.limits()
	w := &base.workspace
	f.Workspace.House, f.Workspace.Weights = w.House, w.Weights
	f.Workspace.Profile, f.Workspace.Code = w.Profile, w.Code
	f.Limits = set
	base.note(f.unknownNames())
	f.origin.LimitsFrom = from.Name()

	differs := headDiffers(own.head, base.head)
	differs = append(differs, filesDiffer(own, base, own.profileFiles(), base.profileFiles())...)
	f.origin.differ("limits", "are", from, differs)
	if !sameKey(own.head, base.head, "workspace", "plans") {
		f.origin.Differs = append(f.origin.Differs, fmt.Sprintf("[workspace] plans is other than in %s: which files are plans is taken from here", from.Name()))
	}
	return nil
}

// stockOf reads the stock sheets and orders of another tree. Those of the firm's own
// have been read.
func (f *Firm) stockOf(own *loader, from source.Tree) (stockFiles, error) {
	base, err := f.open(from, from.Name())
	if err != nil {
		return stockFiles{}, err
	}
	out := base.stock()
	f.origin.StockFrom = from.Name()
	f.origin.differ("stock", "is", from, filesDiffer(own, base, own.shelfFiles(), base.shelfFiles()))
	return out, nil
}

// mostDiffers is how many things that differ are named.
const mostDiffers = 8

func (o *Origin) differ(what, verb string, from source.Tree, things []string) {
	if len(things) == 0 {
		return
	}
	does := "differ"
	if len(things) == 1 {
		does = "differs"
	}
	if more := len(things) - mostDiffers; more > 0 {
		things = append(things[:mostDiffers:mostDiffers], fmt.Sprintf("%d more", more))
	}
	o.Differs = append(o.Differs, fmt.Sprintf("the %s of %s %s used; here %s %s", what, from.Name(), verb, list(things), does))
}

// headDiffers names what measures plans in one driploop.toml and is other in
// another.
func headDiffers(a, b *source.Doc) []string {
	var out []string
	for _, k := range []string{"profile", "code", "profiles"} {
		if !sameKey(a, b, "workspace", k) {
			out = append(out, "[workspace] "+k)
		}
	}
	for _, table := range []string{"house", "rule"} {
		for _, k := range keysOf(a.Root.Get(table), b.Root.Get(table)) {
			if !sameKey(a, b, table, k) {
				out = append(out, "["+table+"] "+k)
			}
		}
	}
	return out
}

// keysOf lists the keys that one of two tables has, in alphabetical order.
func keysOf(tables ...*source.KeyNode) []string {
	var out []string
	for _, t := range tables {
		if t == nil {
			continue
		}
		for _, k := range t.Value.Keys {
			out = append(out, k.Name)
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

func sameKey(a, b *source.Doc, table, key string) bool {
	value := func(d *source.Doc) *source.Node {
		t := d.Root.Get(table)
		if t == nil {
			return nil
		}
		if k := t.Value.Get(key); k != nil {
			return k.Value
		}
		return nil
	}
	return source.Same(value(a), value(b))
}

// filesDiffer names the files that are in one of two trees only, or are other bytes
// there; those that cannot be read count among them. Both lists are in order of path.
func filesDiffer(l, m *loader, a, b []source.Entry) []string {
	var out []string
	for len(a) > 0 || len(b) > 0 {
		switch {
		case len(b) == 0 || len(a) > 0 && a[0].Path < b[0].Path:
			out, a = append(out, a[0].Path), a[1:]
		case len(a) == 0 || b[0].Path < a[0].Path:
			out, b = append(out, b[0].Path), b[1:]
		default:
			if !sameFile(l.tree, m.tree, a[0], b[0]) {
				out = append(out, a[0].Path)
			}
			a, b = a[1:], b[1:]
		}
	}
	return out
}

func sameFile(t, u source.Tree, a, b source.Entry) bool {
	if a.ID != "" && a.ID == b.ID {
		return true
	}
	x, err := t.Read(a)
	if err != nil {
		return false
	}
	y, err := u.Read(b)
	return err == nil && bytes.Equal(x, y)
}
