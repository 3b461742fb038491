package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog/unit"
)

// checkClosed reports the ways that come back to a part they have passed, as where
// two outputs of a splitter are joined. A ring between two ports has been reported.
func (c *Case) checkClosed(r *Report, rings []*ring) {
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
