package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
)

var mateLoose = &Rule{
	Name:   "mate/loose",
	Title:  "Every device and every cable end is connected to something",
	Why:    "what hangs loose was forgotten: in the plan, and soon in the van",
	Basis:  []Basis{practice("a line has two ends")},
	Weight: Hold,
	Check: func(c *Case, r *Report) {
		for _, d := range c.Graph.Devices {
			c.checkLooseDevice(r, d)
		}
		for _, x := range c.Graph.Cables {
			checkLooseCable(r, x)
		}
	},
}

func (c *Case) checkLooseDevice(r *Report, d *bom.Device) {
	switch {
	case !c.loose(d) || c.unfinished(d):
	case d.Row.Existing.V:
		r.Unknown(d.At, d.On(), "%s (%s) is there already, and the plan connects nothing to it; whether it is in use is not assessed", d.ID, d.Part.ID).
			Then("write down what it is connected to, or leave it out")
	default:
		ports, _ := matedPorts(d)
		r.Fails(d.At, d.On(), "%s (%s) has nothing connected to %s", d.ID, d.Part.ID, list(portNames(ports))).
			Then("connect it, or take it out of the plan")
	}
}

// loose reports a device for radio lines that no line reaches. A router does without
// where it has an antenna of its own, or where its maker lets its ports be.
func (c *Case) loose(d *bom.Device) bool {
	ports, mated := matedPorts(d)
	if len(ports) == 0 || mated > 0 {
		return false
	}
	if d.Kind() != "router" {
		return true
	}
	for _, n := range ports {
		if n.Port.Use.Or("cellular") == "cellular" && n.Port.Unused.V != "leave" && d.Part.Antenna == nil {
			return true
		}
	}
	return false
}

func checkLooseCable(r *Report, x *bom.Cable) {
	var loose []string
	for i, to := range []source.Val[bom.Ref]{x.Row.From, x.Row.To} {
		if !to.Set && len(x.Ends[i].Mates) == 0 {
			loose = append(loose, []string{"from", "to"}[i])
		}
	}
	switch {
	case len(loose) == 0:
	case x.Row.Existing.V:
		r.Unknown(x.At, x.On(), "%s is there already, and the plan gives no %s; what it goes to is not assessed", x.ID, list(loose)).
			Then("follow it and write it down")
	case len(loose) == 2:
		r.Fails(x.At, x.On(), "%s goes from nowhere to nowhere: the plan gives neither from nor to", x.ID).
			Then("say what it joins, or take it out")
	default:
		r.Fails(x.At, x.On(), "%s goes nowhere at its %s end: the plan gives no %s, and no other cable is joined to it", x.ID, loose[0], loose[0]).
			Then("say where it goes")
	}
}

func portNames(ports []*bom.Node) []string {
	var out []string
	for _, n := range ports {
		out = append(out, n.Port.Name)
	}
	return out
}
