package bom

import (
	"fmt"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

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
// the node itself. Where two lines share the end nobody can say.
func (n *Node) target() Half {
	if len(n.Mates) != 1 {
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
