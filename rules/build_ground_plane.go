package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var buildGroundPlane = &Rule{
	Name:    "build/ground-plane",
	Title:   "A magnet holds on steel, and an antenna that needs a metal surface stands on one",
	Why:     "a magnet on plastic or aluminium comes off at the first gust, and a whip without metal under it hears and sends next to nothing",
	Caution: cautionVehicleBody,
	Basis: []Basis{
		practice("magnets hold on steel skins only; a quarter-wave antenna needs metal around it"),
		{Document: "quarter wave c/(4f) at the lowest planned band", Kind: "calculated"},
		house("plane_wavelengths (0.25 where it says nothing)")},
	Weight:  Hold,
	Lighter: "a punch where the antenna stands on metal, but nearer to its edge than the house asks",
	Check: func(c *Case, r *Report) {
		for _, d := range c.Graph.Devices {
			if d.Part != nil && d.Part.Antenna != nil && (byMagnet(d) || d.Part.Antenna.GroundPlane.V) {
				c.checkSurface(r, d)
			}
		}
	},
}

func byMagnet(d *bom.Device) bool { return d.Part.Antenna.Fixing.V == "magnet" }

// checkSurface holds one antenna against what it stands on: a plate of its own, or
// the skin of the vehicle.
func (c *Case) checkSurface(r *Report, d *bom.Device) {
	skin := c.Plan.Site.Skin
	switch {
	case d.Stands != nil && d.Stands.Kind() == "mount":
		c.checkEdge(r, d) // a plate is chosen for it
		return
	case d.Row.On.Set:
		return // it stands on something else of the plan, or on what did not resolve
	case d.Place == nil:
		reportUnplaced(r, []*bom.Device{unplaced(d)}, nil, "whether it has metal under it")
		return
	case d.Place.Kind.V != "vehicle-skin":
		c.reportSurface(r, d, "what its place "+d.Place.ID+" is made of", d.Place.At)
		return
	case !skin.Set:
		c.reportSurface(r, d, "site.skin", c.siteAt())
		return
	}
	says := ""
	switch {
	case skin.V == "plastic" && byMagnet(d):
		says = "is held by a magnet, and the skin is plastic: it falls off"
	case skin.V == "plastic":
		says = "needs metal under it, and the skin is plastic"
	case skin.V == "aluminium" && byMagnet(d):
		says = "is held by a magnet, and the skin is aluminium: it falls off"
	}
	if says == "" {
		c.checkEdge(r, d)
		return
	}
	r.Fails(partAt(d), d.On(), "%s (%s) %s", d.ID, d.Part.ID, says).Then("%s", c.otherFixing(d.Part, skin.V)).
		Beside(skin.At, "the skin").Beside(d.Part.At, "how it is held")
}

func (c *Case) reportSurface(r *Report, d *bom.Device, lacks string, at source.Place) {
	r.Unknown(d.At, d.On(), "whether %s (%s) stands on metal that holds and serves it is not assessed: it is not known %s", d.ID, d.Part.ID, lacks).
		Then("give it, or set the antenna on a plate of the plan").Beside(at, "see here")
}

// checkEdge compares the measured distance to the edge of the metal with the share of
// the longest planned wave that the house asks.
func (c *Case) checkEdge(r *Report, d *bom.Device) {
	if !d.Part.Antenna.GroundPlane.V {
		return
	}
	f := c.lowestOf(d)
	wave, ok := rf.Wavelength(f)
	if !ok {
		r.Unknown(d.At, d.On(), "how much metal %s needs around it is not assessed: no band is planned", d.ID).Then("add bands under [job]")
		return
	}
	waves := c.House().PlaneWaves.Or(defaultPlaneWaves)
	need := wave * waves
	edge := c.measuredTo(d, "edge")
	if !edge.Set {
		r.Unknown(d.At, d.On(), "how far %s stands from the edge of its metal is not assessed; %s m, %s of the wave at %s, is expected", d.ID, unit.Fixed(need, 3), plainFigure(waves), f).
			Then("add a [[reading]] of a length from %s with at = \"edge\"", d.ID)
		return
	}
	if !rf.Below(edge.V.Metres(), need) {
		return
	}
	r.Fails(edge.At, d.On(), "%s stands %s from the edge of its metal; %s m, %s of the wave at %s, is expected", d.ID, edge.V, unit.Fixed(need, 3), plainFigure(waves), f).
		Under("edge_m", edge.V.Metres(), "limit_m", need).Lighter(Punch).Then("move it toward the middle, or set it on a larger plate")
}

// lowestOf is the lowest planned frequency that an antenna covers, else the lowest
// planned one, else 0.
func (c *Case) lowestOf(d *bom.Device) unit.MHz {
	var all, covered []unit.MHz
	for _, b := range c.Bands() {
		for _, f := range bandPoints(b) {
			all = append(all, f)
			for i := range d.Part.Antenna.Ranges {
				if x := &d.Part.Antenna.Ranges[i]; x.MHz.Set && x.MHz.V.Contains(f) {
					covered = append(covered, f)
				}
			}
		}
	}
	switch {
	case len(covered) > 0:
		return slices.Min(covered)
	case len(all) > 0:
		return slices.Min(all)
	}
	return 0
}

// otherFixing names what would hold: on aluminium an antenna that is bolted, on plastic
// one that needs no metal either, else a plate.
func (c *Case) otherFixing(now *catalog.Part, skin string) string {
	const or = "bond a steel plate to the skin and let it stand on that"
	p := c.Firm.pick(func(p *catalog.Part) bool {
		a := p.Antenna
		if a == nil || p.Router != nil || !rated(p, "outdoor") || countRadioPorts(p) != countRadioPorts(now) || !c.coversPlan(p) {
			return false
		}
		return a.Fixing.V == "bolt" && (skin == "aluminium" || !a.GroundPlane.V) || a.Fixing.V == "adhesive" && !a.GroundPlane.V
	})
	if p == nil {
		return or
	}
	return or + ", or take " + c.Firm.OnHand(p)
}
