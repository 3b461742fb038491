package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
)

var buildAirbag = &Rule{
	Name:    "build/airbag",
	Title:   "No cable and no gear lies where an air bag unfolds",
	Why:     "an air bag throws what lies on it at the head that it is there to catch, and a cable across it keeps it from opening",
	Caution: cautionVehicleBody,
	Basis:   []Basis{practice("pillars, roof edges and seat sides with air bags stay free, by the vehicle maker's body guide")},
	Weight:  Punch,
	Check: func(c *Case, r *Report) {
		said := map[*bom.Place]bool{}
		for _, x := range c.laid() {
			for _, p := range x.places {
				c.checkAirbag(r, x, p, said)
			}
		}
	},
}

// laidThing is a device or line with the places it takes up.
type laidThing struct {
	name, on string
	does     string // lies in, goes through
	at       source.Place
	places   []*bom.Place
}

// laid lists everything that this job puts somewhere.
func (c *Case) laid() []laidThing {
	var out []laidThing
	add := func(existing bool, name, on string, at source.Place, places ...*bom.Place) {
		if !existing {
			out = append(out, laidThing{name, on, "goes through", at, places})
		}
	}
	g := c.Graph
	for _, d := range g.Devices {
		if !d.Row.Existing.V {
			out = append(out, laidThing{d.ID, d.On(), "lies in", d.At, []*bom.Place{d.Place}})
		}
	}
	for _, x := range g.Cables {
		add(x.Row.Existing.V, x.ID, x.On(), x.At, placesOf(x.Way)...)
	}
	for _, m := range g.Mates {
		if m.Joint != nil {
			add(false, "the line of "+m.A.Name(), m.On(), m.At, placesOf(m.Way)...)
		}
	}
	for _, d := range g.Data {
		add(d.Row.Existing.V, d.Row.ID, d.On(), d.Row.At, placesOf(d.Way)...)
	}
	for _, w := range g.Wires {
		add(w.Row.Existing.V, w.Row.ID, w.On(), w.Row.At, placesOf(w.Way)...)
	}
	return out
}

func placesOf(way []bom.Section) []*bom.Place {
	var out []*bom.Place
	for _, s := range way {
		out = append(out, s.Place)
	}
	return out
}

// checkAirbag looks at one thing in one place. A place in a vehicle that does not
// say whether an air bag unfolds there is named once.
func (c *Case) checkAirbag(r *Report, x laidThing, p *bom.Place, said map[*bom.Place]bool) {
	switch {
	case p == nil:
	case p.Airbag.V:
		r.Fails(x.at, x.on, "%s %s %s, where an air bag unfolds", x.name, x.does, p.ID).
			Then("lead it another way; the vehicle maker's body guide shows which").Beside(p.Airbag.At, "the place")
	case !p.Airbag.Set && p.Kind.V == "vehicle-cabin" && !said[p]:
		said[p] = true
		r.Unknown(p.At, x.on, "whether an air bag unfolds at %s is not known, so %s there is not assessed", p.ID, x.name).
			Then("look it up in the vehicle maker's body guide and say airbag = true or false")
	}
}
