package bom

import (
	"fmt"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// joining is one wish of the plan to join two nodes, before both are known.
type joining struct {
	from    *Node // a cable end, or nil for a joint
	a, b    source.Val[Ref]
	through source.Val[catalog.Words]
	joint   *JointRow
	on      string
}

// mate ties ends together. References that name a port go first, so that a bare
// name means one of the ports that are left.
func (g *Graph) mate() {
	var wishes []joining
	for _, c := range g.Cables {
		if c.Row.From.Set {
			wishes = append(wishes, joining{from: c.Ends[0], b: c.Row.From, on: c.On()})
		}
		if c.Row.To.Set {
			wishes = append(wishes, joining{from: c.Ends[1], b: c.Row.To, through: c.Row.Through, on: c.On()})
		}
	}
	for i := range g.Plan.Joints {
		j := &g.Plan.Joints[i]
		if j.A.Set && j.B.Set {
			wishes = append(wishes, joining{a: j.A, b: j.B, joint: j, on: "joint." + strings.ReplaceAll(j.A.V.String(), ".", "-")})
		}
	}
	for _, bare := range []bool{false, true} {
		for _, w := range wishes {
			if bare == (w.b.V.Port == "" || w.joint != nil && w.a.V.Port == "") {
				g.join(w)
			}
		}
	}
}

func (g *Graph) join(w joining) {
	a, b := w.from, (*Node)(nil)
	adapters := g.adapters(w)
	if w.joint != nil {
		a = g.node(w.a, w.on, nil)
		if a == nil {
			return
		}
	}
	facing := a
	if len(adapters) > 0 {
		facing = nil // the adapter's far face decides, see below
	}
	if facing == nil {
		b = g.nodeFor(w.b, w.on, adapters[len(adapters)-1].Out.Connector, adapters[len(adapters)-1].Out.Impedance)
	} else {
		b = g.node(w.b, w.on, facing)
	}
	if b == nil {
		return
	}
	if a == b {
		g.hole(BadRef, w.b.At, w.on, w.b.V.String()+" is joined to itself", "name another port")
		return
	}
	m := &Mate{A: a, B: b, Adapters: adapters, At: w.b.At, Joint: w.joint}
	if w.joint != nil {
		m.Way = g.way(w.joint.Way, w.on)
	}
	turn(m)
	for _, n := range []*Node{a, b} {
		if len(n.Mates) > 0 {
			g.hole(SharedPort, w.b.At, n.On(), fmt.Sprintf("%s already mates with %s", n.Name(), n.Mates[0].Other(n).Name()),
				"a port takes one line: use a splitter, or another port", n.Mates[0].At)
		}
		n.Mates = append(n.Mates, m)
	}
	g.Mates = append(g.Mates, m)
}

// adapters looks up what a cable passes through at its to end.
func (g *Graph) adapters(w joining) []Adapter {
	var out []Adapter
	for _, id := range w.through.V {
		p := g.part(id, w.on, "adapter", "attenuator", "dc-block")
		if p == nil || len(p.Ports) != 2 {
			continue
		}
		out = append(out, Adapter{Part: p, In: &p.Ports[0], Out: &p.Ports[1], At: id.At})
	}
	return out
}

// turn sets each adapter the way round in which it mates with what comes before
// it, as the person holding it would.
func turn(m *Mate) {
	left := m.A.half()
	for i := range m.Adapters {
		a := &m.Adapters[i]
		if !joins(left.Face, a.In.Connector) && joins(left.Face, a.Out.Connector) {
			a.In, a.Out = a.Out, a.In
		}
		left = Half{Face: a.Out.Connector, Ohm: a.Out.Impedance}
	}
}

// turnJumpers turns each jumper round that mates only so, as the person holding it
// would: a made-up cable has no end 1 until it is connected.
func (g *Graph) turnJumpers() {
	for _, c := range g.Cables {
		if c.Part == nil || c.Part.Jumper == nil {
			continue
		}
		before := c.fitting()
		c.turn()
		if c.fitting() <= before {
			c.turn()
		}
	}
}

// turn swaps the faces of a jumper's ends and sets the adapters at them anew.
func (c *Cable) turn() {
	c.Ends[0].Face, c.Ends[1].Face = c.Ends[1].Face, c.Ends[0].Face
	for _, e := range c.Ends {
		for _, m := range e.Mates {
			turn(m)
		}
	}
}

// fitting counts the ends of a cable that mate with what they go to.
func (c *Cable) fitting() int {
	n := 0
	for _, e := range c.Ends {
		if joins(e.Face, e.target().Face) {
			n++
		}
	}
	return n
}

func joins(a, b source.Val[catalog.Face]) bool {
	return a.Set && b.Set && catalog.Meet(a.V, b.V, 0, 0).Fit == catalog.Mates
}

// node finds what a reference means. facing, where it is given, is the end that
// is to mate, and picks among the free ports of a bare name.
func (g *Graph) node(r source.Val[Ref], on string, facing *Node) *Node {
	var face source.Val[catalog.Face]
	var ohm source.Val[float64]
	if facing != nil {
		face, ohm = facing.Face, facing.Ohm
	}
	return g.nodeFor(r, on, face, ohm)
}

func (g *Graph) nodeFor(r source.Val[Ref], on string, face source.Val[catalog.Face], ohm source.Val[float64]) *Node {
	if c := g.cables[r.V.Name]; c != nil {
		return g.endOf(c, r, on)
	}
	d := g.devices[r.V.Name]
	switch {
	case d == nil:
		known := append(sortedKeys(g.devices), sortedKeys(g.cables)...)
		g.hole(BadRef, r.At, on, "the plan has no device or cable "+source.Quote(r.V.Name),
			didYouMean(source.Nearest(r.V.Name, known), "add it, or correct the name"))
		return nil
	case d.Part == nil:
		return nil // the part has a finding already, or has no ports that anybody knows
	case r.V.Port != "":
		return g.portOf(d, r, on)
	}
	return g.freePort(d, r, on, face, ohm, (*catalog.Port).RF)
}

func (g *Graph) endOf(c *Cable, r source.Val[Ref], on string) *Node {
	switch r.V.Port {
	case "1":
		return c.Ends[0]
	case "2":
		return c.Ends[1]
	}
	g.hole(NoPort, r.At, on, source.Quote(r.V.String())+" names no end of cable "+c.ID, "write "+c.ID+".1 or "+c.ID+".2")
	return nil
}

func (g *Graph) portOf(d *Device, r source.Val[Ref], on string) *Node {
	if n := d.Node(r.V.Port); n != nil {
		return n
	}
	names := d.Part.PortNames()
	do := "its ports are " + strings.Join(names, ", ")
	if len(names) == 0 {
		do = "the part has no ports"
	}
	if near := source.Nearest(r.V.Port, names); near != "" {
		do = "did you mean " + d.ID + "." + near + "?"
	}
	g.hole(NoPort, r.At, on, fmt.Sprintf("%s (part %s) has no port %s", d.ID, d.Part.ID, source.Quote(r.V.Port)), do, d.Part.At)
	return nil
}

// freePort is the one free port of a device that mates with the face. Where no
// free port mates, a single free port is taken all the same: what is wrong with
// it is then said of that port.
func (g *Graph) freePort(d *Device, r source.Val[Ref], on string, face source.Val[catalog.Face], ohm source.Val[float64], use func(*catalog.Port) bool) *Node {
	var free, fits []*Node
	for _, n := range d.Nodes {
		if !use(n.Port) || len(n.Mates) > 0 || n.Data != nil {
			continue
		}
		free = append(free, n)
		if face.Set && n.Face.Set && catalog.Meet(face.V, n.Face.V, ohm.V, n.Ohm.V).Fit == catalog.Mates {
			fits = append(fits, n)
		}
	}
	switch {
	case len(fits) == 1:
		return fits[0]
	case len(free) == 1:
		return free[0]
	case len(free) == 0:
		g.hole(NoPort, r.At, on, d.ID+" has no free port left for this", "name the port, or free one", d.At)
	default:
		g.hole(NoPort, r.At, on, fmt.Sprintf("%s alone does not say which port: %s are free", source.Quote(r.V.String()), names(free)),
			"write one of them", d.At)
	}
	return nil
}

func names(nodes []*Node) string {
	var out []string
	for _, n := range nodes {
		out = append(out, n.Name())
	}
	return strings.Join(out, ", ")
}

// dressEnds finds the connector part of every field-cut end that the plan gives
// as a face, or leaves to the tool.
func (g *Graph) dressEnds() {
	for _, c := range g.Cables {
		if c.Part == nil || c.Part.Cable == nil {
			continue
		}
		for _, e := range c.Ends {
			if e.Fit == nil && !e.names() {
				g.dressEnd(c, e)
			}
		}
	}
}

// names reports an end for which the plan names a connector part. Where that part
// did not resolve, none is guessed in its place.
func (n *Node) names() bool {
	ends := n.Cable.Row.Ends
	return ends.Set && ends.V[n.End-1].Set && !ends.V[n.End-1].V.Face.Set
}

func (g *Graph) dressEnd(c *Cable, e *Node) {
	target := e.target()
	if !e.Face.Set && !target.Face.Set {
		return // nothing says what the end must look like; an end that goes nowhere is a finding of its own
	}
	var could []*catalog.Part
	for _, p := range g.Catalog.Connectors(c.Part.ID) {
		f := p.Connector.Face
		if !f.Set {
			continue
		}
		if e.Face.Set && sameFace(f.V, e.Face.V) || !e.Face.Set && catalog.Meet(f.V, target.Face.V, p.Connector.Impedance.V, target.Ohm.V).Fit == catalog.Mates {
			could = append(could, p)
		}
	}
	switch {
	case len(could) == 0:
		g.lackConnector(c, e, target)
	case len(could) > 1:
		for _, p := range could {
			e.Could = append(e.Could, p.ID)
		}
		if !c.Row.Existing.V {
			g.hole(OpenChoice, e.writtenAt(), c.On(), fmt.Sprintf("end %d can be made with %s", e.End, strings.Join(e.Could, " or ")),
				"name one of them in ends")
		}
		fallthrough
	default:
		if !e.Face.Set {
			e.Face, e.Ohm = could[0].Connector.Face, could[0].Connector.Impedance
		}
		if len(could) == 1 {
			e.Fit = could[0]
		}
	}
}

func (g *Graph) lackConnector(c *Cable, e *Node, target Half) {
	if c.Row.Existing.V {
		return
	}
	want := "a face that mates with " + target.Name
	if e.Face.Set {
		want = e.Face.V.Written
	}
	g.hole(NoConnector, e.writtenAt(), c.On(), fmt.Sprintf("no connector part fits %s and has %s", c.Part.ID, want),
		"add one to the catalog, or use a cable or face that has one", c.Part.At)
}

// target is what the end is to mate with: the near face of the first adapter, or
// the node itself.
func (n *Node) target() Half {
	if len(n.Mates) == 0 {
		return Half{}
	}
	m := n.Mates[0]
	cs := m.Contacts()
	if m.A == n {
		return cs[0].B
	}
	return cs[len(cs)-1].A
}

// writtenAt is where the plan says what the end looks like, else where it goes,
// else the cable.
func (n *Node) writtenAt() source.Place {
	switch {
	case n.Cable.Row.Ends.Set && n.Cable.Row.Ends.V[n.End-1].Set:
		return n.Cable.Row.Ends.V[n.End-1].At
	case len(n.Mates) > 0:
		return n.Mates[0].At
	}
	return n.Cable.At
}

func sameFace(a, b catalog.Face) bool {
	return a.Series == b.Series && a.Shell == b.Shell && a.Contact == b.Contact
}
