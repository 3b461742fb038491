package bom

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
)

// LineKind says what a line is for.
type LineKind int

const (
	Feed LineKind = iota + 1 // donor antenna to amplifier or router
	Leg                      // amplifier to server antenna
	Link                     // between two active devices
	Stub                     // ends at a load, an open port, or nowhere
)

// String is the word of the trade.
func (k LineKind) String() string {
	return [...]string{"", "feed", "leg", "link", "stub"}[k]
}

// Line is one way that signals take between two ports, through cables, leads,
// mated pairs and passives. A feed runs from the antenna, a leg from the
// amplifier.
type Line struct {
	Kind     LineKind
	From, To *Node // To is the last node reached where the line leads nowhere
	Steps    []Step
	Open     bool // To has nothing connected
}

// Step is one thing on a line; exactly one of its pointers is set.
type Step struct {
	Contact *Contact
	Mate    *Mate // the mate that the contact belongs to
	Cable   *Cable
	Lead    *Node // port whose captive lead it is
	Pass    *Pass

	Reverse bool // the cable or the contact is passed from its end 2, or from its B side
}

// Pass is the way through a passive part.
type Pass struct {
	Device  *Device // nil for an adapter on a cable
	Part    *catalog.Part
	In, Out *catalog.Port
	Rows    []*catalog.Path // all rows of the part between the two ports
}

// most bounds the number of lines of one plan, mostSteps the steps that are taken to
// find them. A plan that has more ways through its splitters is a tangle, and said
// to be one: splitters joined back to back double the ways with each pair, and a
// small file could keep the walk busy for ever.
const (
	most      = 4000
	mostSteps = 1 << 18
)

// Lines are the lines of the plan in the order of its devices.
type Lines struct {
	All   []*Line
	Loops []*Node // where a way comes back to a passive it has passed
	Whole bool    // false: there are more than could be followed
}

// Of lists the lines of a kind.
func (l *Lines) Of(kind LineKind) []*Line {
	var out []*Line
	for _, x := range l.All {
		if x.Kind == kind {
			out = append(out, x)
		}
	}
	return out
}

// At lists the lines that begin or end at a node.
func (l *Lines) At(n *Node) []*Line {
	var out []*Line
	for _, x := range l.All {
		if x.From == n || x.To == n {
			out = append(out, x)
		}
	}
	return out
}

// Lines follows every way from each amplifier, router and antenna port to where
// it ends. They are found once for a graph.
func (g *Graph) Lines() *Lines {
	if g.lines == nil {
		g.lines = g.walk()
	}
	return g.lines
}

func (g *Graph) walk() *Lines {
	w := &walker{lines: &Lines{Whole: true}, seen: map[*Node]bool{}, reached: map[*Node]bool{}, walked: map[*Node]bool{}}
	for _, d := range g.Devices {
		if d.Active() {
			w.from(d.Nodes)
		}
	}
	var left []*Node
	for _, d := range g.Devices {
		if d.Kind() != "antenna" {
			continue
		}
		for _, n := range d.Nodes {
			if !w.reached[n] {
				left = append(left, n)
			}
		}
	}
	w.from(left)
	return w.lines
}

// Active reports a device that signals start from or end at by their own power.
func (d *Device) Active() bool { return d.Kind() == "amplifier" || d.Kind() == "router" }

type walker struct {
	lines   *Lines
	seen    map[*Node]bool // nodes on the way at hand
	reached map[*Node]bool // antenna ports that some line has reached
	walked  map[*Node]bool // ports from which every way has been followed
	start   *Node
	steps   []Step
	taken   int // steps in all, those of the lines found included
}

// spent counts steps, and reports whether no more are to be taken.
func (w *walker) spent(steps int) bool {
	w.taken += steps
	if w.taken > mostSteps {
		w.lines.Whole = false
	}
	return !w.lines.Whole
}

func (w *walker) from(ports []*Node) {
	for _, n := range ports {
		if !n.Port.RF() || len(n.Mates) == 0 {
			continue
		}
		w.start, w.steps = n, nil
		w.lead(n)
		w.leave(n)
		w.walked[n] = true
	}
}

// lead steps over the captive lead of a port, if it has one.
func (w *walker) lead(n *Node) {
	if n.Port != nil && n.Port.Lead != nil {
		w.steps = append(w.steps, Step{Lead: n})
	}
}

// leave follows every mate of a node outward.
func (w *walker) leave(n *Node) {
	if w.spent(1) {
		return
	}
	w.seen[n] = true
	defer delete(w.seen, n)
	if len(n.Mates) == 0 {
		w.end(n, true)
		return
	}
	for _, m := range n.Mates {
		mark := len(w.steps)
		w.cross(m, n)
		w.arrive(m.Other(n))
		w.steps = w.steps[:mark]
	}
}

// cross steps over the contacts and adapters of a mate, starting at n.
func (w *walker) cross(m *Mate, n *Node) {
	contacts, back := m.Contacts(), m.B == n
	for i := range contacts {
		if !back {
			w.steps = append(w.steps, Step{Contact: &contacts[i], Mate: m})
			if i < len(m.Adapters) {
				w.steps = append(w.steps, adapterStep(&m.Adapters[i], false))
			}
			continue
		}
		j := len(contacts) - 1 - i
		w.steps = append(w.steps, Step{Contact: &contacts[j], Mate: m, Reverse: true})
		if j > 0 {
			w.steps = append(w.steps, adapterStep(&m.Adapters[j-1], true))
		}
	}
}

func adapterStep(a *Adapter, back bool) Step {
	in, out := a.In, a.Out
	if back {
		in, out = out, in
	}
	return Step{Pass: &Pass{Part: a.Part, In: in, Out: out, Rows: a.Part.Between(in.Name, out.Name)}}
}

// arrive goes on from the far node of a mate.
func (w *walker) arrive(n *Node) {
	if w.seen[n] {
		w.lines.Loops = append(w.lines.Loops, n)
		return
	}
	w.seen[n] = true
	defer delete(w.seen, n)
	if n.Cable != nil {
		w.along(n)
		return
	}
	w.lead(n)
	onward := n.Device.onward(n.Port)
	if len(onward) == 0 {
		w.end(n, false)
		return
	}
	for _, o := range onward {
		if w.seen[o] {
			w.lines.Loops = append(w.lines.Loops, o)
			continue
		}
		mark := len(w.steps)
		w.steps = append(w.steps, Step{Pass: &Pass{Device: n.Device, Part: n.Device.Part, In: n.Port, Out: o.Port,
			Rows: n.Device.Part.Between(n.Port.Name, o.Port.Name)}})
		w.lead(o)
		w.leave(o)
		w.steps = w.steps[:mark]
	}
}

// along passes a cable from one end to the other.
func (w *walker) along(n *Node) {
	far := n.Cable.Ends[2-n.End]
	if w.seen[far] {
		w.lines.Loops = append(w.lines.Loops, far)
		return
	}
	mark := len(w.steps)
	w.steps = append(w.steps, Step{Cable: n.Cable, Reverse: n.End == 2})
	w.leave(far)
	w.steps = w.steps[:mark]
}

// onward lists the ports that a passive device passes signals on to.
func (d *Device) onward(p *catalog.Port) []*Node {
	if d.Part == nil || d.Active() || d.Part.Kind.V == "antenna" {
		return nil
	}
	var out []*Node
	for _, n := range d.Nodes {
		if n.Port != p && len(d.Part.Between(p.Name, n.Port.Name)) > 0 {
			out = append(out, n)
		}
	}
	return out
}

// end closes the way at hand at its last node. A way between two ports from which
// ways are followed is met from both of them, and kept once.
func (w *walker) end(n *Node, open bool) {
	if w.walked[n] {
		return
	}
	if len(w.lines.All) >= most {
		w.lines.Whole = false
	}
	if w.spent(len(w.steps)) {
		return
	}
	line := &Line{From: w.start, To: n, Steps: append([]Step(nil), w.steps...), Open: open}
	if !open && n.Device != nil && n.Device.Kind() == "antenna" {
		w.reached[n] = true
	}
	line.Kind = kindOf(line)
	if line.turned() {
		line.reverse()
	}
	w.lines.All = append(w.lines.All, line)
}

func kindOf(l *Line) LineKind {
	a, b := l.From, l.To
	switch {
	case l.Open || b.Device == nil:
		return Stub
	case a.Device.Active() && b.Device.Active():
		return Link
	case a.Device.Active() && b.Device.Kind() == "antenna":
		if a.Port.Side.V == "server" {
			return Leg
		}
		return Feed
	}
	return Stub
}

// turned reports a line that was found against its direction: a feed from the
// radio, or a link to a server side. Where the two ends are alike their names decide,
// so that nothing depends on the order of the file.
func (l *Line) turned() bool {
	switch l.Kind {
	case Feed:
		return true
	case Leg:
		return false
	case Link:
		if from, to := l.From.Port.Side.V == "server", l.To.Port.Side.V == "server"; from != to {
			return to
		}
	case Stub:
		if l.Open || l.From.Device.Kind() != "antenna" || l.To.Device.Kind() != "antenna" {
			return false
		}
	}
	return l.From.Name() > l.To.Name()
}

func (l *Line) reverse() {
	l.From, l.To = l.To, l.From
	for i, j := 0, len(l.Steps)-1; i <= j; i, j = i+1, j-1 {
		l.Steps[i], l.Steps[j] = l.Steps[j].back(), l.Steps[i].back()
		if i == j {
			break
		}
	}
}

func (s Step) back() Step {
	if s.Pass != nil {
		p := *s.Pass
		p.In, p.Out = p.Out, p.In
		s.Pass = &p
		return s
	}
	s.Reverse = !s.Reverse
	return s
}

// Cables lists the cables of the line in its direction.
func (l *Line) Cables() []*Cable {
	var out []*Cable
	for _, s := range l.Steps {
		if s.Cable != nil {
			out = append(out, s.Cable)
		}
	}
	return out
}

// Holds reports whether a cable is one of the line's.
func (l *Line) Holds(c *Cable) bool {
	return slices.ContainsFunc(l.Steps, func(s Step) bool { return s.Cable == c })
}

// Passes reports whether the line goes through a device.
func (l *Line) Passes(d *Device) bool {
	for _, s := range l.Steps {
		if s.Pass != nil && s.Pass.Device == d {
			return true
		}
	}
	return false
}

// Name is how messages speak of the line: "donor.rf to amp.donor".
func (l *Line) Name() string { return l.From.Name() + " to " + l.To.Name() }

// At is a place for what concerns the whole line: its first cable, else where it
// begins.
func (l *Line) At() source.Place {
	if c := l.Cables(); len(c) > 0 {
		return c[0].At
	}
	return l.From.At()
}

// On is what findings about the whole line stand on: its first cable, else the
// device where it begins.
func (l *Line) On() string {
	if c := l.Cables(); len(c) > 0 {
		return c[0].On()
	}
	return l.From.On()
}
