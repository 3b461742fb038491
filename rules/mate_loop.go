package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// apart is how far two ways between the same ports must lie apart in loss to be
// one way and a leak, in dB. At 20 dB the weaker one moves the level by 0.9 dB at
// most, 20·log10(1 − 0.1) (calculated).
const apart = 20

var mateLoop = &Rule{
	Name:  "mate/loop",
	Title: "In no planned band do two ways of like loss lead from one port to another",
	Why:   "a signal that comes over two ways cancels itself here and doubles itself there, by frequency; no level in the budget is then worth anything",
	Basis: []Basis{practice("two paths less than 20 dB apart, band by band: branches split by band and joined again are one way in each band")},

	Weight: Hold,
	Check: func(c *Case, r *Report) {
		rings := c.rings()
		for _, g := range rings {
			c.checkRing(r, g)
		}
		c.checkClosed(r, rings)
		if !c.Lines().Whole {
			r.Fails(c.JobAt(), "job", "the lines of this plan are a tangle: there are more ways through its passive parts than can be followed").
				Then("look for splitters whose outputs are joined to each other")
		}
	},
}

// ring is two lines between the same two ports, and where they part and meet.
type ring struct {
	a, b       *bom.Line
	part, meet string       // "split.in": where they part, and where they meet again
	viaA, viaB string       // first cable of each branch
	at         source.Place // of the second branch
	on         string       // likewise
	passed     []*bom.Device
}

// rings pairs the lines that join the same two ports. Lines that share a ring, as
// the legs behind it do, count once.
func (c *Case) rings() []ring {
	var out []ring
	seen := map[[4]string]bool{}
	lines := c.Lines().All
	for i, b := range lines {
		for _, a := range lines[:i] {
			if a.From != b.From || a.To != b.To {
				continue
			}
			g := ringOf(a, b)
			if key := [4]string{g.part, g.meet, g.viaA, g.viaB}; !seen[key] {
				seen[key] = true
				out = append(out, g)
			}
		}
	}
	return out
}

// ringOf finds where two lines part and meet.
func ringOf(a, b *bom.Line) ring {
	g := ring{a: a, b: b, part: a.From.Name(), meet: a.To.Name(), on: b.On(), at: b.At()}
	sa, sb := a.Steps, b.Steps
	for len(sa) > 0 && len(sb) > 0 && sameStep(sa[0], sb[0]) {
		sa, sb = sa[1:], sb[1:]
	}
	for len(sa) > 0 && len(sb) > 0 && sameStep(sa[len(sa)-1], sb[len(sb)-1]) {
		sa, sb = sa[:len(sa)-1], sb[:len(sb)-1]
	}
	if len(sa) > 0 {
		if p := sa[0].Pass; p != nil && p.Device != nil {
			g.part = p.Device.ID + "." + p.In.Name
		}
		if p := sa[len(sa)-1].Pass; p != nil && p.Device != nil {
			g.meet = p.Device.ID + "." + p.Out.Name
		}
	}
	g.viaA, _ = via(sa)
	var first *bom.Cable
	if g.viaB, first = via(sb); first != nil {
		g.on, g.at = first.On(), first.At
	}
	for _, s := range append(sa[:len(sa):len(sa)], sb...) {
		if s.Pass != nil && s.Pass.Device != nil {
			g.passed = append(g.passed, s.Pass.Device)
		}
	}
	return g
}

// via is the first cable of a branch, else the first device, by name.
func via(steps []bom.Step) (string, *bom.Cable) {
	name := "a direct joint"
	for _, s := range steps {
		if s.Cable != nil {
			return s.Cable.ID, s.Cable
		}
		if s.Pass != nil && s.Pass.Device != nil && name == "a direct joint" {
			name = s.Pass.Device.ID + "." + s.Pass.Out.Name
		}
	}
	return name, nil
}

func sameStep(a, b bom.Step) bool {
	switch {
	case a.Pass != nil && b.Pass != nil:
		return a.Pass.Device == b.Pass.Device && a.Pass.Part == b.Pass.Part && a.Pass.In == b.Pass.In && a.Pass.Out == b.Pass.Out
	case a.Contact != nil && b.Contact != nil:
		return a.Mate == b.Mate && *a.Contact == *b.Contact
	}
	return a.Cable == b.Cable && a.Lead == b.Lead && a.Pass == b.Pass && a.Contact == b.Contact
}

// checkRing compares the two ways of a ring band by band.
func (c *Case) checkRing(r *Report, g ring) {
	var lacks []Lack
	var bands []string
	worst, at := math.Inf(1), unit.MHz(0)
	for _, b := range c.bands {
		d, f, missing := c.nearest(g, b)
		lacks = append(lacks, missing...)
		if rf.Below(d, apart) {
			bands = append(bands, b.Name)
			if d < worst {
				worst, at = d, f
			}
		}
	}
	if len(c.bands) == 0 {
		lacks = []Lack{{"the planned bands", c.JobAt()}}
	}
	says := fmt.Sprintf("two ways lead from %s to %s, over %s and over %s", g.part, g.meet, g.viaA, g.viaB)
	switch {
	case len(bands) > 0:
		r.Fails(g.at, g.on, "%s: in %s they are %s dB apart (at %s), %d dB or more is expected", says, list(bands), unit.Fixed(worst, 1), at, apart).
			Then("take one of the two out, or keep them apart by band with a diplexer at each end").
			Under("apart_db", worst, "limit_db", apart)
	case len(lacks) > 0:
		r.Unknown(g.at, g.on, "%s; how far apart they are is not assessed: it lacks %s", says, lackWords(lacks)).
			Then("add what is missing, or take one of the two out").Beside(lacks[0].At, "what it lacks")
	}
}

// nearest is the least difference in loss between the two ways over the edges and
// middles of a band; infinite where one of them stops the whole band.
func (c *Case) nearest(g ring, b catalog.Band) (float64, unit.MHz, []Lack) {
	least, at := math.Inf(1), unit.MHz(0)
	var lacks []Lack
	for _, f := range bandPoints(b) {
		if stops(g.a, f) || stops(g.b, f) {
			continue
		}
		a, b := c.Sum(g.a, f), c.Sum(g.b, f)
		lacks = append(append(lacks, a.Missing...), b.Missing...)
		if d := math.Abs(float64(a.Loss.Nominal - b.Loss.Nominal)); a.Known() && b.Known() && d < least {
			least, at = d, f
		}
	}
	return least, at, lacks
}

// stops reports whether some part on a line has no way through at a frequency.
func stops(l *bom.Line, f unit.MHz) bool {
	for _, s := range l.Steps {
		if s.Pass != nil && len(s.Pass.Rows) > 0 && rowAt(s.Pass.Rows, f) == nil {
			return true
		}
	}
	return false
}

// rowAt is the row that holds at a frequency, or nil.
func rowAt(rows []*catalog.Path, f unit.MHz) *catalog.Path {
	for _, row := range rows {
		if !row.MHz.Set || row.MHz.V.Contains(f) {
			return row
		}
	}
	return nil
}

// checkClosed reports the ways that come back to a part they have passed, as where
// two outputs of a splitter are joined. A ring between two ports has been reported.
func (c *Case) checkClosed(r *Report, rings []ring) {
	said := map[*bom.Device]bool{}
	for _, g := range rings {
		for _, d := range g.passed {
			said[d] = true
		}
	}
	for _, n := range c.Lines().Loops {
		d := n.Device
		if d == nil || said[d] {
			continue
		}
		said[d] = true
		says := fmt.Sprintf("a way out of %s comes back to it", d.ID)
		switch bands := c.closedBands(d); {
		case len(c.bands) == 0:
			r.Unknown(d.At, d.On(), "%s; whether it does so in a planned band is not assessed: the plan names no bands", says).
				Then("write the planned bands in bands, or open the ring")
		case len(bands) > 0:
			r.Fails(d.At, d.On(), "%s in %s: two of its ports are joined outside it", says, list(bands)).
				Then("open the ring: an output goes to an antenna, the next part's input, or a load")
		}
	}
}

// closedBands lists the planned bands in which a ring through a device is closed.
func (c *Case) closedBands(d *bom.Device) []string {
	var out []string
	for _, b := range c.bands {
		for _, f := range bandPoints(b) {
			if c.ringThrough(d, f) {
				out = append(out, b.Name)
				break
			}
		}
	}
	return out
}

// ringThrough reports whether two ports of a device that pass on to each other at
// a frequency are joined outside that way as well.
func (c *Case) ringThrough(d *bom.Device, f unit.MHz) bool {
	for i, a := range d.Nodes {
		for _, b := range d.Nodes[i+1:] {
			if passes(a, b, f) && joinedOtherwise(a, b, f) {
				return true
			}
		}
	}
	return false
}

func passes(a, b *bom.Node, f unit.MHz) bool {
	return rowAt(a.Device.Part.Between(a.Port.Name, b.Port.Name), f) != nil
}

// joinedOtherwise looks for a way from a to b at a frequency that does not take the
// way between the two inside their device.
func joinedOtherwise(a, b *bom.Node, f unit.MHz) bool {
	seen := map[*bom.Node]bool{a: true}
	queue := []*bom.Node{a}
	for len(queue) > 0 {
		n := queue[0]
		queue = queue[1:]
		for _, o := range onward(n, f, a, b) {
			if o == b {
				return true
			}
			if !seen[o] {
				seen[o] = true
				queue = append(queue, o)
			}
		}
	}
	return false
}

// onward lists the nodes next to a node at a frequency: over its mates, along its
// cable, through its passive part, but not through that part from a to b.
func onward(n *bom.Node, f unit.MHz, a, b *bom.Node) []*bom.Node {
	var out []*bom.Node
	for _, m := range n.Mates {
		if mateOpenAt(m, f) {
			out = append(out, m.Other(n))
		}
	}
	if n.Cable != nil {
		return append(out, n.Cable.Ends[2-n.End])
	}
	if n.Device.Part == nil || n.Device.Active() || n.Device.Kind() == "antenna" {
		return out
	}
	for _, o := range n.Device.Nodes {
		if o != n && passes(n, o, f) && !(n == a && o == b) {
			out = append(out, o)
		}
	}
	return out
}

// mateOpenAt reports whether every adapter of a mate has a way through at a frequency.
func mateOpenAt(m *bom.Mate, f unit.MHz) bool {
	for _, a := range m.Adapters {
		if rowAt(a.Part.Between(a.In.Name, a.Out.Name), f) == nil {
			return false
		}
	}
	return true
}
