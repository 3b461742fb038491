package bom

import (
	"fmt"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// joining is one wish of the plan to join two nodes, before both are known.
type joining struct {
	from     *Node // a cable end, or nil for a joint
	a, b     source.Val[Ref]
	adapters []Adapter
	gap      bool // what it passes through did not resolve
	joint    *JointRow
	on       string
}

// bare reports a wish that leaves open which port of a device it means.
func (w *joining) bare() bool { return w.b.V.Port == "" || w.joint != nil && w.a.V.Port == "" }

// mate ties ends together. References that name a port go first, so that a bare
// name means one of the ports that are left. The bare ones go in rounds: what each
// of them means is settled before any of them is tied, and those that are still
// open have another try with what the others left. So nothing depends on the order
// of the file.
func (g *Graph) mate() {
	var open []joining
	for _, w := range g.wishes() {
		switch {
		case w.gap:
			g.checkAcross(w)
		case w.bare():
			open = append(open, w)
		default:
			g.join(w)
		}
	}
	for len(open) > 0 {
		left := g.round(open)
		if len(left) == len(open) {
			break
		}
		open = left
	}
	for _, w := range open {
		g.join(w)
	}
}

// round ties what is settled among the open wishes, and returns the others.
func (g *Graph) round(open []joining) (left []joining) {
	type pair struct {
		w    joining
		a, b *Node
	}
	var settled []pair
	for _, w := range open {
		if a, b, miss := g.meant(w); miss == nil && a != nil && b != nil {
			settled = append(settled, pair{w, a, b})
		} else {
			left = append(left, w)
		}
	}
	for _, p := range settled {
		g.tie(p.w, p.a, p.b)
	}
	return left
}

// wishes lists what the plan wants joined.
func (g *Graph) wishes() []joining {
	var out []joining
	for _, c := range g.Cables {
		if c.Row.From.Set {
			out = append(out, joining{from: c.Ends[0], b: c.Row.From, on: c.On()})
		}
		if c.Row.To.Set {
			w := joining{from: c.Ends[1], b: c.Row.To, on: c.On()}
			w.adapters, w.gap = g.adapters(c)
			out = append(out, w)
		}
	}
	for i := range g.Plan.Joints {
		j := &g.Plan.Joints[i]
		if j.A.Set && j.B.Set {
			out = append(out, joining{a: j.A, b: j.B, joint: j, on: j.On()})
		}
	}
	return out
}

// checkAcross looks only whether there is what a cable goes to. What it passes
// through is not known, so nobody can say what meets there, and nothing is tied.
func (g *Graph) checkAcross(w joining) {
	known := g.devices[w.b.V.Name] != nil || g.cables[w.b.V.Name] != nil
	if w.b.V.Port == "" && known {
		return
	}
	if _, miss := g.node(w.b, w.on, nil); miss != nil {
		miss()
	}
}

func (g *Graph) join(w joining) {
	a, b, miss := g.meant(w)
	switch {
	case miss != nil:
		miss()
	case a != nil && b != nil:
		g.tie(w, a, b)
	}
}

// meant finds the two nodes of a wish. Where they cannot be told, miss reports why;
// a nil node without a miss belongs to a part that has a finding already.
func (g *Graph) meant(w joining) (a, b *Node, miss func()) {
	if w.joint == nil {
		b, miss = g.node(w.b, w.on, w.facing())
		return w.from, b, miss
	}
	// The side that can be told by itself picks among the ports of the other.
	a, missA := g.node(w.a, w.on, nil)
	b, missB := g.node(w.b, w.on, nil)
	switch {
	case a != nil:
		b, missB = g.node(w.b, w.on, []Half{a.half()})
	case b != nil:
		a, missA = g.node(w.a, w.on, []Half{b.half()})
	}
	if missA != nil && missB != nil {
		return a, b, func() { missA(); missB() }
	}
	if missA == nil {
		missA = missB
	}
	return a, b, missA
}

// facing is what the port at the far end of a cable meets: the end itself, or the
// last adapter. While nothing says how the end looks, that adapter may be either
// way round.
func (w *joining) facing() []Half {
	if len(w.adapters) == 0 {
		return []Half{w.from.half()}
	}
	last := w.adapters[len(w.adapters)-1]
	out := []Half{{Face: last.Out.Connector, Ohm: last.Out.Impedance}}
	if !w.from.Face.Set {
		out = append(out, Half{Face: last.In.Connector, Ohm: last.In.Impedance})
	}
	return out
}

func (g *Graph) tie(w joining, a, b *Node) {
	if a == b {
		g.hole(BadRef, w.b.At, w.on, w.b.V.String()+" is joined to itself", "name another port")
		return
	}
	for _, m := range a.Mates {
		if m.Other(a) == b {
			g.hole(SharedPort, w.b.At, w.on, fmt.Sprintf("the plan joins %s and %s twice", a.Name(), b.Name()),
				"a joint of two cables is written in one of the two", m.At)
			return
		}
	}
	m := &Mate{A: a, B: b, Adapters: w.adapters, At: w.b.At, Joint: w.joint}
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

// adapters lists what a cable passes through at its to end, each turned the way it
// meets the end where that is known. gap reports one that did not resolve.
func (g *Graph) adapters(c *Cable) (out []Adapter, gap bool) {
	for i, p := range c.Through {
		at := c.Row.Through.V[i].At
		switch {
		case p == nil:
			gap = true
		case len(p.Ports) != 2:
			g.hole(WrongKind, at, c.On(), fmt.Sprintf("%s has %d ports; what a cable passes through has two", p.ID, len(p.Ports)),
				"make it a device with a cable to each port", p.At)
			gap = true
		default:
			out = append(out, Adapter{Part: p, In: &p.Ports[0], Out: &p.Ports[1], At: at})
		}
	}
	turnFrom(c.Ends[1].Face, out)
	return out, gap
}

// turn sets each adapter the way round in which it mates with what comes before
// it, as the person holding it would, or, where the end is still open, with what
// comes behind it.
func turn(m *Mate) {
	if m.A.Face.Set {
		turnFrom(m.A.Face, m.Adapters)
		return
	}
	right := m.B.Face
	for i := len(m.Adapters) - 1; i >= 0; i-- {
		a := &m.Adapters[i]
		if !joins(a.Out.Connector, right) && joins(a.In.Connector, right) {
			a.In, a.Out = a.Out, a.In
		}
		right = a.In.Connector
	}
}

func turnFrom(left source.Val[catalog.Face], adapters []Adapter) {
	for i := range adapters {
		a := &adapters[i]
		if !joins(left, a.In.Connector) && joins(left, a.Out.Connector) {
			a.In, a.Out = a.Out, a.In
		}
		left = a.Out.Connector
	}
}

func joins(a, b source.Val[catalog.Face]) bool {
	return a.Set && b.Set && catalog.Meet(a.V, b.V, 0, 0).Fit == catalog.Mates
}

// node finds what a reference of a coaxial line means. facing is what is to mate
// there, where that is known, and picks among the free ports of a bare name.
func (g *Graph) node(r source.Val[Ref], on string, facing []Half) (*Node, func()) {
	if c := g.cables[r.V.Name]; c != nil {
		return g.endOf(c, r, on)
	}
	d := g.devices[r.V.Name]
	switch {
	case d == nil:
		return nil, func() {
			g.hole(BadRef, r.At, on, "the plan has no device or cable "+source.Quote(r.V.Name),
				g.guess(r.V.Name, g.ends, "add it, or correct the name"))
		}
	case d.Part == nil:
		return nil, nil // the part has a finding already, or has no ports that anybody knows
	case r.V.Port == "":
		return g.freePort(d, r, on, facing, (*catalog.Port).RF)
	}
	port, miss := g.portOf(d, r, on)
	if port != nil && !port.Port.RF() {
		return nil, func() {
			g.hole(NoPort, r.At, on, fmt.Sprintf("%s carries %s; a port for radio signals is expected", port.Name(), port.Port.Use.V), radioPorts(d))
		}
	}
	return port, miss
}

// ends yields the names that a coaxial line may go to.
func (g *Graph) ends(yield func(string) bool) {
	for name := range g.devices {
		if !yield(name) {
			return
		}
	}
	for name := range g.cables {
		if !yield(name) {
			return
		}
	}
}

func radioPorts(d *Device) string {
	var names []string
	for _, n := range d.Nodes {
		if n.Port.RF() {
			names = append(names, n.Name())
		}
	}
	if len(names) == 0 {
		return "the part has none"
	}
	return "name one of " + strings.Join(names, ", ")
}

func (g *Graph) endOf(c *Cable, r source.Val[Ref], on string) (*Node, func()) {
	switch r.V.Port {
	case "1":
		return c.Ends[0], nil
	case "2":
		return c.Ends[1], nil
	}
	return nil, func() {
		g.hole(NoPort, r.At, on, source.Quote(r.V.String())+" names no end of cable "+c.ID, "write "+c.ID+".1 or "+c.ID+".2")
	}
}

func (g *Graph) portOf(d *Device, r source.Val[Ref], on string) (*Node, func()) {
	if n := d.Node(r.V.Port); n != nil {
		return n, nil
	}
	return nil, func() {
		names := d.Part.PortNames()
		do := "its ports are " + strings.Join(names, ", ")
		if len(names) == 0 {
			do = "the part has no ports"
		}
		if near := source.Nearest(r.V.Port, names); near != "" {
			do = "did you mean " + d.ID + "." + near + "?"
		}
		g.hole(NoPort, r.At, on, fmt.Sprintf("%s (part %s) has no port %s", d.ID, d.Part.ID, source.Quote(r.V.Port)), do, d.Part.At)
	}
}

// freePort is the one free port of a device that mates with what faces it. Where no
// free port mates, a single free port is taken all the same: what is wrong with it
// is then said of that port.
func (g *Graph) freePort(d *Device, r source.Val[Ref], on string, facing []Half, use func(*catalog.Port) bool) (*Node, func()) {
	var free, fits []*Node
	for _, n := range d.Nodes {
		if !use(n.Port) || len(n.Mates) > 0 || n.Data != nil {
			continue
		}
		free = append(free, n)
		if n.meetsOne(facing) {
			fits = append(fits, n)
		}
	}
	switch {
	case len(fits) == 1:
		return fits[0], nil
	case len(free) == 1:
		return free[0], nil
	case len(free) == 0:
		return nil, func() {
			g.hole(NoPort, r.At, on, d.ID+" has no free port left for this", "name the port, or free one", d.At)
		}
	}
	return nil, func() {
		g.hole(NoPort, r.At, on, fmt.Sprintf("%s alone does not say which port: %s are free", source.Quote(r.V.String()), names(free)),
			"write one of them", d.At)
	}
}

// meetsOne reports whether the node mates with one of several faces.
func (n *Node) meetsOne(facing []Half) bool {
	for _, h := range facing {
		if h.Face.Set && n.Face.Set && catalog.Meet(h.Face.V, n.Face.V, h.Ohm.V, n.Ohm.V).Fit == catalog.Mates {
			return true
		}
	}
	return false
}

func names(nodes []*Node) string {
	var out []string
	for _, n := range nodes {
		out = append(out, n.Name())
	}
	return strings.Join(out, ", ")
}
