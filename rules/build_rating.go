package rules

import (
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var buildRating = &Rule{
	Name:    "build/rating",
	Title:   "What lies outdoors, in the ground, in a riser or an air space is made for it",
	Why:     "an indoor jacket cracks in two summers, and a jacket that a riser or air space forbids carries fire and smoke from floor to floor",
	Caution: cautionFirestop,
	Basis: []Basis{
		{"NFPA 70 (NEC) table 820.154, 820.48, table 800.154", "2014 with TIA 14-3, and 2020", "code", "read"},
		practice("the data sheet's rating for weather and burial; none stated is not known, and not indoor")},
	Weight:  Hold,
	Lighter: "a punch for weather, burial and gear in an air space; a hold where the code forbids a jacket's fire type in a space",
	Check: func(c *Case, r *Report) {
		var open unrated
		c.rateDevices(r, &open)
		c.rateLines(r, &open)
		open.report(r)
		if !c.Vehicle() {
			c.checkFire(r)
		}
	},
}

// unrated gathers what stands where a rating is needed and has none stated.
type unrated struct {
	names []string
	at    source.Place
	on    string
	parts []*catalog.Part
}

func (u *unrated) add(name string, p *catalog.Part, at source.Place, on, need string) {
	if u.names == nil {
		u.at, u.on = at, on
	}
	u.names = append(u.names, name+" ("+p.ID+", "+need+")")
	u.parts = append(u.parts, p)
}

func (u *unrated) report(r *Report) {
	if u.names == nil {
		return
	}
	f := r.Unknown(u.at, u.on, "whether %s can be where planned is not assessed: no rating is stated (rated)", list(u.names)).Then("look at the data sheets, and complete the parts")
	seen := map[*catalog.Part]bool{}
	for _, p := range u.parts {
		if !seen[p] {
			seen[p] = true
			f.Beside(p.At, "part %s", p.ID)
		}
	}
}

// needs is the rating that a place asks of what lies in it, and in what words; ""
// for none. What is outdoors and below ground is buried.
func needs(p *bom.Place) (rating, words string) {
	switch {
	case p == nil:
		return "", ""
	case p.Kind.V == "outdoor" && p.Point.Set && p.Point.V.Up < 0:
		return "burial", "in the ground"
	case p.Outdoors():
		return "outdoor", "outdoors"
	case p.Kind.V == "plenum":
		return "plenum", "in an air space"
	}
	return "", ""
}

// rated reports whether a part has a rating; what may be buried may be outdoors.
func rated(p *catalog.Part, rating string) bool {
	return catalog.Has(p.Rated, rating) || rating == "outdoor" && catalog.Has(p.Rated, "burial")
}

// minds reports a device whose rating counts: all but what is metal through and
// through.
func minds(d *bom.Device) bool {
	switch d.Kind() {
	case "electrode", "bond-point", "fuse":
		return false
	}
	return d.Part != nil
}

func (c *Case) rateDevices(r *Report, open *unrated) {
	seen := map[heatKey]bool{}
	for _, d := range c.Graph.Devices {
		need, words := needs(d.Place)
		key := heatKey{d.Row, d.Place}
		if need == "" || !minds(d) || seen[key] {
			continue
		}
		seen[key] = true
		if need == "burial" {
			need = "outdoor" // a box in the ground is a chamber; its cable is what is buried
		}
		switch {
		case !d.Part.Rated.Set && d.Row.Existing.V:
		case !d.Part.Rated.Set:
			open.add(d.ID, d.Part, partAt(d), d.On(), words)
		case !rated(d.Part, need):
			r.Fails(partAt(d), d.On(), "%s (%s) stands %s (%s); its part is rated %s", d.ID, d.Part.ID, words, d.Place.ID, ratings(d.Part)).
				Lighter(Punch).Beside(d.Part.Rated.At, "its rating").Beside(d.Place.At, "the place").Then("%s", c.ratedDevice(d, need))
		}
	}
}

func ratings(p *catalog.Part) string {
	var out []string
	for _, w := range p.Rated.V {
		out = append(out, w.V)
	}
	if len(out) == 0 {
		return "for nothing"
	}
	return strings.Join(out, ", ")
}

// ratedDevice names a catalog part like a device's that has the rating.
func (c *Case) ratedDevice(d *bom.Device, need string) string {
	const or = "move it, or put it into an enclosure that is made for the place"
	p := c.Firm.pick(func(p *catalog.Part) bool {
		like := likePassive(d.Part)(p)
		if d.Part.Antenna != nil {
			like = p.Kind.V == d.Part.Kind.V && countRadioPorts(p) == countRadioPorts(d.Part) && c.coversPlan(p)
		}
		return like && rated(p, need)
	})
	if p == nil {
		return or
	}
	return or + ", or take " + c.Firm.OnHand(p)
}

// rateLines holds the jackets of lines against the weather. Fire has its own words.
func (c *Case) rateLines(r *Report, open *unrated) {
	for _, s := range c.spread() {
		var place *bom.Place
		need, words := "", ""
		for _, p := range s.places() {
			if n, w := needs(p); n == "burial" || n == "outdoor" && need == "" {
				place, need, words = p, n, w
			}
		}
		p := s.part
		if !p.Rated.Set && s.jacket != nil {
			p = s.jacket
		}
		switch {
		case need == "", !p.Rated.Set && s.existing:
		case !p.Rated.Set:
			open.add(s.id, p, s.at, s.on, words)
		case !rated(p, need):
			r.Fails(s.at, s.on, "%s (%s) runs %s (%s); its part is rated %s", s.id, s.part.ID, words, place.ID, ratings(p)).
				Lighter(Punch).Beside(p.Rated.At, "its rating").Beside(place.At, "the place").
				Then("%s", c.jacketFor(s, func(q *catalog.Part) bool { return rated(q, need) }))
		}
	}
}
