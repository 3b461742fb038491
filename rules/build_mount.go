package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var buildMount = &Rule{
	Name:  "build/mount",
	Title: "Clamps take the tube that they are put on, and masts are long enough for what is planned",
	Why:   "a clamp that is too wide turns in the wind, one that is too tight does not go on, and either is found out on the roof",
	Basis: []Basis{
		practice("a clamp's range and a tube's outer diameter, by their data sheets; a clamp sits on the tube, not beyond its end")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, d := range c.Graph.Devices {
			if d.Kind() == "mount" {
				c.checkLength(r, d)
			}
			if d.Stands == nil || d.Stands.Kind() != "mount" || unresolved(d) || unresolved(d.Stands) {
				continue
			}
			c.checkUp(r, d)
			switch {
			case d.Kind() == "mount":
				c.checkTubes(r, d)
			case d.Part != nil && d.Part.Antenna != nil:
				c.checkClamp(r, d)
			}
		}
	},
}

// checkLength holds that no more of a mast is free than there is of it.
func (c *Case) checkLength(r *Report, m *bom.Device) {
	mt := mountOf(m)
	if mt == nil || !mt.Length.Set || !m.Row.Free.Set || m.Row.Free.V <= mt.Length.V {
		return
	}
	r.Fails(m.Row.Free.At, m.On(), "%s (%s) is %s long; %s of it cannot be free", m.ID, m.Part.ID, mt.Length.V, m.Row.Free.V).
		Over("free_m", m.Row.Free.V.Metres(), "limit_m", mt.Length.V.Metres()).Beside(mt.Length.At, "its length").
		Then("correct free, or take a longer mast")
}

// checkUp holds that what is clamped to a mast sits below its free end.
func (c *Case) checkUp(r *Report, d *bom.Device) {
	up, free := d.Row.Up, d.Stands.Row.Free
	if d.ID != d.Row.ID || !up.Set || !free.Set || up.V <= free.V {
		return
	}
	r.Fails(up.At, d.On(), "%s is fixed %s above the top fixing of %s, which ends at %s", d.ID, up.V, d.Stands.ID, free.V).
		Over("up_m", up.V.Metres(), "limit_m", free.V.Metres()).Beside(free.At, "its free end").
		Then("set it lower, or take a longer mast")
}

// tubeRange is the outer diameter of a tube, or the tubes that a clamp takes.
type tubeRange = source.Val[[2]float64]

// checkClamp holds the clamp of an antenna against the tube of its mast.
func (c *Case) checkClamp(r *Report, d *bom.Device) {
	a := d.Part.Antenna
	if tubeOf(d.Stands) == noTube || d.Stands.Place != nil && d.Stands.Place.Kind.V == "vehicle-skin" {
		return // a bracket or plate, and no tube to clamp
	}
	if !a.MastMM.Set && a.Fixing.Set && a.Fixing.V != "mast" {
		r.Fails(partAt(d), d.On(), "%s (%s) is %s; %s is a mast", d.ID, d.Part.ID, fixings[a.Fixing.V], d.Stands.ID).
			Beside(a.Fixing.At, "how it is held").Then("take an antenna with a mast clamp, or fix it elsewhere")
		return
	}
	c.compareTube(r, d, a.MastMM, tubeDiameter(d.Stands), d.Stands)
}

// fixings say what an antenna without a mast clamp is made for.
var fixings = map[string]string{"wall": "made for a wall", "ceiling": "made for a ceiling", "bolt": "bolted through a skin",
	"magnet": "held by a magnet", "adhesive": "glued on"}

// checkTubes holds a mast against the bracket it stands in.
func (c *Case) checkTubes(r *Report, m *bom.Device) {
	if tubeOf(m) == ownTube && tubeOf(m.Stands) == noTube {
		c.compareTube(r, m, mountOf(m.Stands).MastMM, tubeDiameter(m), m.Stands)
	}
}

func tubeDiameter(m *bom.Device) tubeRange {
	if mt := mountOf(m); mt != nil {
		return mt.MastMM
	}
	return tubeRange{}
}

// compareTube compares what a clamp takes with a tube. d stands on base; one of the
// two has the clamp.
func (c *Case) compareTube(r *Report, d *bom.Device, takes, tube tubeRange, base *bom.Device) {
	if !takes.Set || !tube.Set {
		var lacks []Lack
		for _, x := range []*bom.Device{d, base} {
			switch {
			case x.Part == nil:
				lacks = append(lacks, Lack{"the part of " + x.ID, x.At})
			case x == d && d.Part.Antenna != nil && !takes.Set, x.Part.Mount != nil && !x.Part.Mount.MastMM.Set:
				lacks = append(lacks, Lack{"mast_mm of " + x.Part.ID, x.Part.At})
			}
		}
		r.Lacking(d.At, d.On(), lacks, "whether %s fits %s", d.ID, base.ID)
		return
	}
	od := tube.V[1]
	switch {
	case od < takes.V[0]:
		c.reportTube(r, d, base, takes, od, -1)
	case od > takes.V[1]:
		c.reportTube(r, d, base, takes, od, +1)
	}
}

func (c *Case) reportTube(r *Report, d, base *bom.Device, takes tubeRange, od float64, side int) {
	word := "thinner"
	if side > 0 {
		word = "thicker"
	}
	f := r.Fails(partAt(d), d.On(), "%s (%s) on %s (%s): the tube of %s mm is %s than the clamp takes, %s to %s mm", d.ID, d.Part.ID, base.ID, base.Part.ID,
		plainFigure(od), word, plainFigure(takes.V[0]), plainFigure(takes.V[1])).Beside(takes.At, "what the clamp takes").Then("%s", c.fittingMast(d, base, takes))
	if side > 0 {
		f.Over("tube_mm", od, "limit_mm", takes.V[1])
	} else {
		f.Under("tube_mm", od, "limit_mm", takes.V[0])
	}
}

// fittingMast names catalog masts that a clamp takes.
func (c *Case) fittingMast(d, base *bom.Device, takes tubeRange) string {
	mast := base
	if d.Kind() == "mount" {
		mast = d
	}
	as := mountOf(mast)
	p := c.Firm.pick(func(p *catalog.Part) bool {
		return isTube(p.Mount) && p.Mount.MastMM.V[1] >= takes.V[0] && p.Mount.MastMM.V[1] <= takes.V[1] &&
			p.Mount.Length.V >= as.Length.V && (p.Mount.Ballast == nil) == (as.Ballast == nil)
	})
	if p == nil {
		return "take a clamp for this tube; no mast of the catalog fits the one there is"
	}
	return "take a clamp for this tube, or a mast such as " + c.Firm.OnHand(p)
}

// isTube reports a mast of which diameter and length are known.
func isTube(m *catalog.Mount) bool {
	return m != nil && m.MastMM.Set && m.MastMM.V[0] == m.MastMM.V[1] && m.Length.Set
}
