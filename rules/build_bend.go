package rules

import (
	"math"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

var buildBend = &Rule{
	Name:  "build/bend",
	Title: "No cable is bent more tightly than its part allows",
	Why:   "a kink moves the centre conductor: the mismatch stays, and the cable wears out there",
	Basis: []Basis{
		practice("the maker's least radius of a fixed bend; while it is pulled a cable needs about twice that"),
		house("bend_per_od (5 diameters of the cable where its part gives no radius)")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		var silent []*bom.Cable
		for _, x := range c.Graph.Cables {
			if x.Part == nil {
				continue // part/unknown says so
			}
			if !x.Row.LeastBend.Set {
				if x.Part.Cable != nil && !x.Row.Existing.V {
					silent = append(silent, x)
				}
				continue
			}
			c.checkBend(r, x)
		}
		c.reportSilentBends(r, silent)
	},
}

// bendOf is the least radius of a cable part, or of the cable a jumper is made of,
// and where it comes from.
func (c *Case) bendOf(p *catalog.Part) (radius unit.MM, how string, at source.Place) {
	if p.Jumper != nil {
		if p = c.Firm.Catalog.Look(p.Jumper.Cable.V); p == nil {
			return 0, "", source.Place{}
		}
	}
	if p.Cable == nil {
		return 0, "", source.Place{}
	}
	if p.Cable.Bend.Set {
		return p.Cable.Bend.V, p.ID, p.Cable.Bend.At
	}
	if p.Cable.ODmm.Set {
		per := c.House().BendPerOD.Or(defaultBendPerOD)
		return unit.MM(math.Ceil(per*p.Cable.ODmm.V - 1e-9)), plainFigure(per) + " diameters of " + p.ID, p.Cable.ODmm.At
	}
	return 0, "", p.At
}

func (c *Case) checkBend(r *Report, x *bom.Cable) {
	bend := x.Row.LeastBend
	least, how, at := c.bendOf(x.Part)
	switch {
	case how == "":
		r.Unknown(bend.At, x.On(), "%s is bent to %s; whether %s takes that is not assessed: neither bend_radius nor od_mm of its cable is known", x.ID, radius(bend.V), x.Part.ID).
			Then("complete the part").Beside(at, "the part")
	case bend.V < least:
		r.Fails(bend.At, x.On(), "%s is bent to %s; %s is the least (%s)", x.ID, radius(bend.V), radius(least), how).
			Under("bend_m", bend.V.Metres(), "limit_m", least.Metres()).Beside(at, "where that is stated").
			Then("give the bend more room; while it is pulled in, twice that")
	}
}

// radius prints a radius in millimetres, as data sheets do.
func radius(r unit.MM) string { return plainFigure(float64(r)) + " mm" }

// reportSilentBends says once for all cables whose bends the plan leaves out, and
// what each may be bent to.
func (c *Case) reportSilentBends(r *Report, cables []*bom.Cable) {
	if len(cables) == 0 {
		return
	}
	var names, parts []string
	seen := map[string]bool{}
	for _, x := range cables {
		names = append(names, x.ID)
		if least, how, _ := c.bendOf(x.Part); how != "" && !seen[x.Part.ID] {
			seen[x.Part.ID] = true
			parts = append(parts, x.Part.ID+" "+radius(least))
		}
	}
	says := "the tightest bend of " + list(names) + " is not given and not assessed"
	if len(parts) > 0 {
		says += "; least is " + strings.Join(parts, ", ")
	}
	r.Unknown(cables[0].At, cables[0].On(), "%s", says).Then("add least_bend where the way turns")
}
