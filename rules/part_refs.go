package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// partUse is one place of a plan that names a part.
type partUse struct {
	id source.Val[string]
	on string
}

// partUses lists every place where the plan names a part, table by table.
func (c *Case) partUses() []partUse {
	var out []partUse
	add := func(id source.Val[string], on string) {
		if id.Set {
			out = append(out, partUse{id, on})
		}
	}
	for i := range c.Plan.Devices {
		d := &c.Plan.Devices[i]
		add(d.Part, "device."+d.ID)
	}
	for _, x := range c.Graph.Cables {
		add(x.Row.Part, x.On())
		for _, e := range x.Ends {
			if e.Fit != nil {
				add(source.Val[string]{V: e.Fit.ID, At: endAt(e), Set: true}, x.On())
			}
		}
		for _, t := range x.Row.Through.V {
			add(t, x.On())
		}
	}
	for _, d := range c.Graph.Data {
		add(d.Row.Part, d.On())
	}
	for _, w := range c.Graph.Wires {
		add(w.Row.Part, w.On())
		add(w.Row.Fuse, w.On())
	}
	for _, b := range c.Graph.Bonds {
		add(b.Row.Part, b.On())
	}
	for i := range c.Plan.Extras {
		add(c.Plan.Extras[i].Part, "job")
	}
	return out
}

// endAt is where the plan says what a cable end looks like, else the cable.
func endAt(e *bom.Node) source.Place {
	if ends := e.Cable.Row.Ends; ends.Set && ends.V[e.End-1].Set {
		return ends.V[e.End-1].At
	}
	return e.Cable.At
}

// partRef is one place of the firm's own files, beside the stock and the offers,
// that names a part.
type partRef struct {
	id   source.Val[string]
	part *catalog.Part // in whose table it stands; nil in driploop.toml
	role string        // what the named part is to that one
	kind string        // what it must be
	idle bool          // work can go on without it
}

const substitute = "a substitute"

func (r partRef) on() string {
	if r.part == nil {
		return "file"
	}
	return "part." + r.part.ID
}

func (r partRef) owner() string {
	if r.part == nil {
		return "the house"
	}
	return r.part.ID
}

// mark says on which part a finding stands.
func (r partRef) mark(f *Finding) {
	if r.part != nil {
		f.Part = r.part.ID
	}
}

// eachPartRef calls fn for every part that the firm's own catalog and house refer
// to, part by part.
func (f *Firm) eachPartRef(fn func(partRef)) {
	visit := func(id source.Val[string], p *catalog.Part, role, kind string, idle bool) {
		if id.Set {
			fn(partRef{id, p, role, kind, idle})
		}
	}
	visit(f.Workspace.House.Sealing, nil, "sealing", "consumable", false)
	for _, p := range f.Catalog.Own() {
		for _, id := range p.Instead.V {
			visit(id, p, substitute, p.Kind.V, true)
		}
		for i := range p.Ports {
			if l := p.Ports[i].Lead; l != nil {
				visit(l.Cable, p, "the lead", "cable", false)
			}
		}
		if j := p.Jumper; j != nil {
			visit(j.Cable, p, "the cable", "cable", j.Loss.Set)
		}
		if c := p.Connector; c != nil {
			for _, id := range c.Fits.V {
				visit(id, p, "a cable", "cable", true)
			}
		}
		if a := p.Amplifier; a != nil {
			for i := range a.Kits {
				visit(a.Kits[i].Antenna, p, "a kit row", "antenna", true)
			}
		}
	}
}
