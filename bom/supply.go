package bom

import (
	"fmt"
	"maps"

	"driploop/catalog"
	"driploop/catalog/source"
)

// addSupply resolves Ethernet lines and direct current lines.
func (g *Graph) addSupply() {
	for i := range g.Plan.Data {
		row := &g.Plan.Data[i]
		g.Data = append(g.Data, &DataLine{Row: row, Part: g.part(row.Part, "data."+row.ID, "data-cable"), Way: g.way(row.Way, "data."+row.ID)})
	}
	g.plugData()
	for i := range g.Plan.Wires {
		row := &g.Plan.Wires[i]
		w := &WireLine{Row: row, Part: g.part(row.Part, "wire."+row.ID, "wire"), Way: g.way(row.Way, "wire."+row.ID)}
		w.Fuse = g.part(row.Fuse, w.On(), "fuse")
		w.From = g.plug(row.From, w.On(), "power")
		w.To = g.plug(row.To, w.On(), "power")
		g.Wires = append(g.Wires, w)
	}
}

// plugData plugs the ends of data lines in: those that name a port first, then the
// bare names, all of which mean what the first left free.
func (g *Graph) plugData() {
	type end struct {
		line *DataLine
		to   **Node
		ref  source.Val[Ref]
	}
	var named, bare []end
	for _, d := range g.Data {
		for _, e := range []end{{d, &d.From, d.Row.From}, {d, &d.To, d.Row.To}} {
			if e.ref.V.Port != "" {
				named = append(named, e)
			} else {
				bare = append(bare, e)
			}
		}
	}
	for _, ends := range [][]end{named, bare} {
		for _, e := range ends {
			*e.to = g.plug(e.ref, e.line.On(), "data")
		}
		for _, e := range ends {
			g.occupy(*e.to, e.line, e.ref.At)
		}
	}
}

// plug finds the data or power port of a reference. Unlike radio ports these are
// not mated, and a power port may feed several wires.
func (g *Graph) plug(r source.Val[Ref], on, use string) *Node {
	if !r.Set {
		return nil
	}
	d := g.devices[r.V.Name]
	switch {
	case d == nil:
		g.hole(BadRef, r.At, on, "the plan has no device "+source.Quote(r.V.Name),
			g.guessDevice(r.V.Name))
		return nil
	case d.Part == nil:
		return nil
	case r.V.Port != "":
		n, miss := g.portOf(d, r, on)
		if miss != nil {
			miss()
		}
		if n != nil && n.Port.Use.Or("cellular") != use {
			g.hole(NoPort, r.At, on, fmt.Sprintf("%s carries %s; a %s port is expected", n.Name(), n.Port.Use.Or("cellular"), use), "name a "+use+" port")
			return nil
		}
		return n
	}
	n, miss := g.freePort(d, r, on, nil, func(p *catalog.Port) bool { return p.Use.V == use })
	if miss != nil {
		miss()
	}
	return n
}

// occupy marks a data port as taken by a line.
func (g *Graph) occupy(n *Node, d *DataLine, at source.Place) {
	switch {
	case n == nil:
	case n.Data != nil:
		g.hole(SharedPort, at, d.On(), n.Name()+" already takes the line "+n.Data.Row.ID, "a port takes one line", n.Data.Row.At)
	default:
		n.Data = d
	}
}

// addBonds resolves the bonding conductors.
func (g *Graph) addBonds() {
	for i := range g.Plan.Bonds {
		row := &g.Plan.Bonds[i]
		b := &Bond{Row: row, Part: g.part(row.Part, "bond."+row.ID, "bond-conductor")}
		b.From = g.bonded(row.From, b.On())
		b.To = g.bonded(row.To, b.On())
		if b.From != nil && b.From == b.To {
			g.hole(BadRef, row.To.At, b.On(), b.From.ID+" is bonded to itself", "name another device")
			b.To = nil
		}
		g.Bonds = append(g.Bonds, b)
		if b.From != nil && b.To != nil {
			g.bonds[b.From] = append(g.bonds[b.From], b)
			g.bonds[b.To] = append(g.bonds[b.To], b)
		}
	}
	g.findEarth()
}

func (g *Graph) bonded(r source.Val[Ref], on string) *Device {
	if !r.Set {
		return nil
	}
	d := g.devices[r.V.Name]
	if d == nil {
		g.hole(BadRef, r.At, on, "the plan has no device "+source.Quote(r.V.Name),
			g.guessDevice(r.V.Name))
	}
	return d
}

// checkRefs follows the references of tables that only name things.
func (g *Graph) checkRefs() {
	for _, b := range g.Plan.Betweens {
		g.place(b.A, "site")
		g.place(b.B, "site")
	}
	for i := range g.Plan.Areas {
		a := &g.Plan.Areas[i]
		on := "area." + a.Name.V
		for _, s := range a.ServedBy.V {
			g.bonded(source.Val[Ref]{V: Ref{Name: s.V}, At: s.At, Set: s.Set}, on)
		}
		for _, o := range a.Operators.V {
			g.operator(o, on)
		}
		for _, b := range a.Before.V {
			g.operator(b.V.Operator, on)
		}
	}
	for i := range g.Plan.Readings {
		r := &g.Plan.Readings[i]
		on := fmt.Sprintf("reading.%d", i+1)
		g.readingRef(r.From, on)
		g.readingRef(r.To, on)
		g.operator(r.Operator, on)
	}
	for i := range g.Plan.Extras {
		g.part(g.Plan.Extras[i].Part, "job", catalog.KindNames()...)
	}
	for _, r := range g.Plan.Reserves {
		g.part(r.Part, "job", catalog.KindNames()...)
		if r.Cable.Set && g.cables[r.Cable.V] == nil && !g.hasLine(r.Cable.V) {
			g.hole(BadRef, r.Cable.At, "job", "the plan has no line "+source.Quote(r.Cable.V), "correct the name")
		}
	}
	g.checkWaivers()
}

func (g *Graph) operator(o source.Val[string], on string) {
	if !o.Set {
		return
	}
	if g.operators == nil {
		g.operators = map[string]bool{}
		for i := range g.Plan.Operators {
			g.operators[g.Plan.Operators[i].ID] = true
		}
		for i := range g.Plan.Signals {
			g.operators[g.Plan.Signals[i].Operator.V] = true
		}
	}
	if !g.operators[o.V] {
		g.hole(BadRef, o.At, on, "the plan has no operator "+source.Quote(o.V), g.guess(o.V, maps.Keys(g.operators), "add it, or correct the name"))
	}
}

func (g *Graph) readingRef(r source.Val[Ref], on string) {
	if !r.Set {
		return
	}
	if d := g.devices[r.V.Name]; d != nil {
		if r.V.Port != "" && d.Part != nil {
			if _, miss := g.portOf(d, r, on); miss != nil {
				miss()
			}
		}
		return
	}
	if c := g.cables[r.V.Name]; c != nil {
		if r.V.Port != "" {
			if _, miss := g.endOf(c, r, on); miss != nil {
				miss()
			}
		}
		return
	}
	if !g.hasLine(r.V.Name) {
		g.hole(BadRef, r.At, on, "the plan has nothing named "+source.Quote(r.V.Name), "correct the name")
	}
}

// hasLine reports whether a data line, wire or bond has the name.
func (g *Graph) hasLine(id string) bool {
	for i := range g.Plan.Data {
		if g.Plan.Data[i].ID == id {
			return true
		}
	}
	for i := range g.Plan.Wires {
		if g.Plan.Wires[i].ID == id {
			return true
		}
	}
	for i := range g.Plan.Bonds {
		if g.Plan.Bonds[i].ID == id {
			return true
		}
	}
	return false
}
