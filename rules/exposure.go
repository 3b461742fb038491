package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var exposureRules = []*Rule{exposureDensity, exposureDistance}

const mindFields = "Power off before work at an antenna. The figures compare a far field with reference levels; they do not replace an assessment where the authority or the operator asks for one."

var exposureDensity = &Rule{
	Name:    "exposure/density",
	Title:   "At the nearest person the power density of each antenna is inside the reference level",
	Why:     "people stand closer to an antenna than anybody planned",
	Basis:   []Basis{{Document: "reference levels of the profile; S = EIRP/(4πR²), FCC OET Bulletin 65, section 2", Edition: "97-01", Kind: "standard", Proof: "memory"}},
	Caution: mindFields,
	Weight:  Hold,
	Lighter: "a punch where only the reflection from a roof (power × 2.56) carries it over",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, e := range c.emitters() {
			checkDensity(c, r, e)
		}
	},
}

// emitter is one antenna with what it radiates in each band.
type emitter struct {
	node  *bom.Node
	parts []emission
	lacks []Lack
}

// emission is what an antenna radiates in one band at its worst edge.
type emission struct {
	band string
	rad  Radiation
}

// emitters lists the antennas that amplifiers and routers transmit from.
func (c *Case) emitters() []*emitter {
	byNode := map[*bom.Node]*emitter{}
	var out []*emitter
	add := func(band catalog.Band, a *Antenna) {
		if !reaches(a.Line, band) {
			return // band/antenna says so
		}
		e := byNode[a.Node]
		if e == nil {
			e = &emitter{node: a.Node}
			byNode[a.Node] = e
			out = append(out, e)
		}
		if len(a.Lacks) > 0 {
			e.lacks = append(e.lacks, a.Lacks...)
			return
		}
		if a.Worst.MHz > 0 {
			e.parts = append(e.parts, emission{band.Name, a.Worst})
		}
	}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			for i := range d.Antennas {
				add(x.Band, &d.Antennas[i])
			}
		}
	}
	for _, x := range c.Chain().Radios {
		for i := range x.Antennas {
			add(x.Band, &x.Antennas[i])
		}
	}
	return out
}

func checkDensity(c *Case, r *Report, e *emitter) {
	d, at := e.node.Device, partAt(e.node.Device)
	level, lacks := c.referenceLevel()
	switch {
	case len(e.parts) == 0 && len(e.lacks) == 0:
		return
	case !d.Row.People.Set:
		lacks = append(lacks, Lack{"people of " + d.ID + ", the nearest that a person stays", d.At})
	case !d.Part.Antenna.SizeMM.Set:
		lacks = append(lacks, Lack{"size_mm of " + d.Part.ID + ", which tells where its far field begins", d.Part.At})
	}
	lacks = append(lacks, e.lacks...)
	var free, reflected float64
	if len(lacks) == 0 {
		free, reflected, lacks = shares(e, level)
	}
	if len(lacks) > 0 {
		r.Lacking(at, e.node.On(), lacks, "the power density at %s", e.node.Name())
		return
	}
	metres := d.Row.People.V
	basis := limits.Origin(level.Clause.V, level.Edition.Or(c.Profile.Edition.V), level.Proof.V)
	says := fmt.Sprintf("%s at %s from people comes to %s %% of the reference level over %s", d.ID, metres, unit.Fixed(100*free, 0), count(len(e.parts), "band", "bands"))
	switch {
	case rf.Exceeds(free, 1):
		r.Fails(at, e.node.On(), "%s", says).Then("keep people further away, or take less gain or power").Over("share", free, "limit", 1).By(basis).Beside(d.Row.People.At, "the distance of people")
	case d.Place.Outdoors() && rf.Exceeds(reflected, 1):
		r.Fails(at, e.node.On(), "%s, and to %s %% with the reflection from a roof (× 2.56)", says, unit.Fixed(100*reflected, 0)).Lighter(Punch).
			Then("keep people further away, or mark the place").Over("share", reflected, "limit", 1).By(basis).Beside(d.Row.People.At, "the distance of people")
	}
}

// referenceLevel is the profile's level for the general public.
func (c *Case) referenceLevel() (*limits.Level, []Lack) {
	if c.Profile == nil {
		return nil, []Lack{{"a limit profile", c.JobAt()}}
	}
	if l := c.Profile.Level("general"); l != nil {
		return l, nil
	}
	return nil, []Lack{{"a reference level of profile " + c.Profile.ID, c.Plan.Job.Profile.At}}
}

// shares adds up the shares of the reference level that each band takes, in free
// space and with a reflection.
func shares(e *emitter, level *limits.Level) (free, reflected float64, lacks []Lack) {
	d := e.node.Device
	metres, side := d.Row.People.V.Metres(), d.Part.Antenna.SizeMM.V/1000
	for _, p := range e.parts {
		far, ok := rf.FarFieldFrom(p.rad.MHz, side)
		limit, known := level.DensityAt(p.rad.MHz)
		if !ok || !known {
			return 0, 0, []Lack{{"a reference level at " + p.rad.MHz.String(), d.At}}
		}
		s, ok := rf.PowerDensity(p.rad.EIRP.Most, rf.FreeField, metres, far)
		if !ok {
			return 0, 0, []Lack{{fmt.Sprintf("a far field at %s: in %s it begins at %s m", d.Row.People.V, p.band, unit.Fixed(far, 2)), d.Row.People.At}}
		}
		free += s / limit
		reflected += s * rf.GroundReflection / limit
	}
	return free, reflected, nil
}

var exposureDistance = &Rule{
	Name:    "exposure/distance",
	Title:   "No person stays closer to an antenna than the profile asks",
	Why:     "the certificate of an amplifier or a router stands on that distance",
	Basis:   []Basis{byProfile},
	Caution: mindFields,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Profile == nil || c.Profile.Separation == nil {
			return
		}
		s := c.Profile.Separation
		basis := limits.Origin(s.Clause.V, s.Edition.Or(c.Profile.Edition.V), s.Proof.V)
		seen := map[*bom.Device]bool{}
		for _, e := range c.emitters() {
			d := e.node.Device
			if seen[d] {
				continue
			}
			seen[d] = true
			people := d.Row.People
			switch {
			case !people.Set:
				r.Unknown(partAt(d), d.On(), "%s says nothing of people; whether they stay %s away is not assessed", d.ID, s.Least.V).
					Then("add people = …, the nearest that a person stays").By(basis)
			case people.V < s.Least.V:
				r.Fails(people.At, d.On(), "%s is %s from people; at least %s is asked for", d.ID, people.V, s.Least.V).
					Then("mount it further away").Under("distance_m", people.V.Metres(), "least_m", s.Least.V.Metres()).By(basis)
			}
		}
	},
}
