package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// The mate rules say whether what the plan joins can be joined: that a reference
// leads to a port (here), that the two faces fit (mate_face.go, and mate_remedy.go
// what would), that an end can be made (mate_fit.go, mate_choice.go) and goes
// somewhere (mate_loose.go), that nothing is left open (mate_open.go), that adapters
// do not pile up (mate_adapters.go), and that there is one way between two ports
// (mate_loop.go, mate_closed.go).
var mateRules = []*Rule{matePort, mateShared, mateSeries, mateGender, matePolarity, mateFit,
	mateLoop, mateLoose, mateOpen, mateChoice, mateAdapters}

var matePort = &Rule{
	Name:   "mate/port",
	Title:  "Every end goes to a port that is there",
	Why:    "a line to a port that the device does not have cannot be made, and nobody knows what was meant",
	Basis:  []Basis{practice("the ports of the part, as the catalog lists them")},
	Weight: Hold,
	Check: func(c *Case, r *Report) {
		for _, h := range c.Graph.Holes {
			reportHole(r, h, bom.NoPort)
		}
		c.checkPortless(r)
	},
}

// checkPortless reports each thing without a part that a cable or joint goes to and
// that has no radio port whatever its part is. What may have one is said to be
// unknown by part/unknown.
func (c *Case) checkPortless(r *Report) {
	said := map[*bom.Device]bool{}
	for _, ref := range c.references() {
		d := c.Graph.Device(ref.to.V.Name)
		if d == nil || d.Row.Part.Set || !d.Row.Kind.Set || said[d] || slices.Contains(radioKinds, d.Row.Kind.V) {
			continue
		}
		said[d] = true
		r.Fails(ref.to.At, ref.on, "%s goes to %s, %s, which has no port for it", ref.name, d.ID, withArticle(d.Row.Kind.V)).
			Then("name the device that it goes to").Beside(d.At, "the device")
	}
}

var mateShared = &Rule{
	Name:   "mate/shared",
	Title:  "A port takes one line",
	Why:    "two plugs do not go on one socket; where somebody makes it work with a tee, both lines are mismatched",
	Basis:  []Basis{practice("one connector, one mate")},
	Weight: Hold,
	Check: func(c *Case, r *Report) {
		for _, h := range c.Graph.Holes {
			reportHole(r, h, bom.SharedPort)
		}
	},
}

// reference is one place where a cable or joint names what it goes to.
type reference struct {
	to       source.Val[bom.Ref]
	on, name string
}

// references lists what the cables and joints of the plan name, found once.
func (c *Case) references() []reference {
	if c.refs == nil {
		c.refs = c.findReferences()
	}
	return c.refs
}

func (c *Case) findReferences() []reference {
	out := []reference{}
	add := func(to source.Val[bom.Ref], on, name string) {
		if to.Set {
			out = append(out, reference{to, on, name})
		}
	}
	for _, x := range c.Graph.Cables {
		add(x.Row.From, x.On(), x.ID)
		add(x.Row.To, x.On(), x.ID)
	}
	for i := range c.Plan.Joints {
		j := &c.Plan.Joints[i]
		on := j.On()
		add(j.A, on, "the joint of "+j.B.V.String())
		add(j.B, on, "the joint of "+j.A.V.String())
	}
	return out
}

// unfinished reports whether something of the plan refers to a device and is not
// joined to it, because a part or port did not resolve. What is wrong is said
// there, and the device is not called unconnected as well.
func (c *Case) unfinished(d *bom.Device) bool {
	for _, ref := range c.references() {
		if ref.to.V.Name == d.ID && !c.joined(ref.to.At) {
			return true
		}
	}
	return false
}

// joined reports whether the reference at a place has led to a mate.
func (c *Case) joined(at source.Place) bool {
	for _, m := range c.Graph.Mates {
		if m.At == at || m.Joint != nil && m.Joint.A.At == at {
			return true
		}
	}
	return false
}

// matedPorts lists the ports of a device that are mated, and how many of them are.
func matedPorts(d *bom.Device) (ports []*bom.Node, mated int) {
	for _, n := range d.Nodes {
		if !n.Port.RF() {
			continue
		}
		ports = append(ports, n)
		if len(n.Mates) > 0 {
			mated++
		}
	}
	return ports, mated
}

// besidePart points a finding to a part of the workspace; the generic catalog is
// not among its files.
func (f *Finding) besidePart(p *catalog.Part, at source.Place, says string) *Finding {
	if p == nil || p.Generic {
		return f
	}
	return f.Beside(at, "%s", says)
}
