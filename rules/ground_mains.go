package rules

import (
	"driploop/bom"
	"driploop/rules/limits"
)

var groundMains = &Rule{
	Name:    "ground/mains",
	Title:   "Gear with a line from outdoors has a protected mains feed and is bonded where its arrestor is",
	Why:     "between two grounds the surge runs through the gear: in on the coax, out on the mains",
	Caution: cautionMains + " " + cautionElectrician,
	Basis:   []Basis{practice("one bonding point for the arrestor, the gear and the mains' surge protector")},
	Weight:  Punch,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		gear := c.fedGear()
		if len(gear) == 0 {
			return
		}
		row := c.codeRow("mains")
		c.checkMains(r, gear, row)
		if c.Plan.Site.Mains.V == "none" {
			return
		}
		for _, g := range gear {
			c.checkOnePoint(r, g, row)
		}
	},
}

// fedGear is gear indoors that a line from outdoors reaches, with the arrestors of
// those lines.
type fedGear struct {
	dev  *bom.Device
	from *bom.Device // the outdoor end of the first of its lines
	by   []*bom.Device
}

// fedGear lists the amplifiers and routers that a coaxial line from outdoors
// reaches, leaving out those that run from a battery.
func (c *Case) fedGear() []*fedGear {
	var out []*fedGear
	seen := map[*bom.Device]*fedGear{}
	for _, l := range c.leadIns() {
		all, xs := protectors(l), crossingsOf(l)
		for i, x := range xs {
			d := innerEnd(x)
			if !d.Active() || c.onBattery(d) {
				continue
			}
			g := seen[d]
			if g == nil {
				g = &fedGear{dev: d, from: outerEnd(x)}
				seen[d] = g
				out = append(out, g)
			}
			for _, p := range guarding(all, xs, i) {
				g.by = append(g.by, p.dev)
			}
		}
	}
	return out
}

// onBattery reports a device whose wire comes from a battery.
func (c *Case) onBattery(d *bom.Device) bool {
	for _, w := range c.Graph.Wires {
		if w.To != nil && w.To.Device == d {
			from := c.Graph.Device(w.Row.From.V.Name)
			return from != nil && from.Kind() == "battery"
		}
	}
	return false
}

func (c *Case) checkMains(r *Report, gear []*fedGear, row *limits.CodeRow) {
	mains := c.Plan.Site.Mains
	switch {
	case !mains.Set:
		at := placeOr(c.Plan.Site.At, c.JobAt())
		r.Unknown(at, "site", "whether the mains feed of %s has a surge protector is not assessed: site.mains is missing", gearNames(gear)).
			Then("say under [site]: mains = %q, %q or %q", "protected", "plain", "none").onRow(row)
	case mains.V == "plain":
		r.Fails(mains.At, "site", "the mains feed of %s has no surge protector, and a line from outdoors comes to it", gearNames(gear)).
			Then("have one fitted at the outlet or the panel, bonded where the arrestor is").onRow(row)
	}
}

func gearNames(gear []*fedGear) string {
	var names []string
	for _, g := range gear {
		names = append(names, g.dev.ID)
	}
	return list(names)
}

// checkOnePoint holds that gear is bonded to the point where an arrestor of its
// lines is.
func (c *Case) checkOnePoint(r *Report, g *fedGear, row *limits.CodeRow) {
	for _, a := range g.by {
		if tied(c.Graph, g.dev, a) {
			return
		}
	}
	_, bonded := c.Graph.PathToElectrode(g.dev)
	if bonded && len(g.by) == 0 || c.looseBond() {
		return
	}
	says := g.dev.ID + " has no bond, and a line from " + g.from.ID + " outdoors comes to it"
	to := "the bar"
	if len(g.by) > 0 {
		to = "the point where " + g.by[0].ID + " is bonded"
		says += "; it is expected to be bonded where " + g.by[0].ID + " is"
		if bonded {
			says = g.dev.ID + " is bonded to another point than " + g.by[0].ID + ", the arrestor of its line from " + g.from.ID
		}
	}
	r.Fails(g.dev.At, g.dev.On(), "%s", says).Then("bond the body of %s to %s", g.dev.ID, to).onRow(row)
}
