package rules

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
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
	Basis:   []Basis{{Document: "reference levels of the profile; S = EIRP/(4πR²), FCC OET Bulletin 65, section 2", Edition: "97-01", Kind: "standard", Proof: "memory"}, practice("rated output and least loss; the shares of all bands of one antenna add up")},
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

func checkDensity(c *Case, r *Report, e *emitter) {
	d, at, on := e.device, partAt(e.device), e.device.On()
	level, lacks := c.referenceLevel()
	if lacks = slices.Concat(lacks, needPeople(d), needSize(d)); len(lacks) > 0 {
		r.Lacking(at, on, append(lacks, e.lacks...), "the power density at %s", d.ID)
		return
	}
	s := e.shares(level)
	basis := func() string {
		return limits.Origin(level.Clause.V, level.Edition.Or(c.Profile.Edition.V), level.Proof.V)
	}
	says := func() string {
		return fmt.Sprintf("%s at %s from people comes to %s %% of the reference level: %s", d.ID, d.Row.People.V, unit.Fixed(s.total, 2), s.words())
	}
	lacks = slices.Concat(e.lacks, s.lacks)
	reflected := s.total * rf.GroundReflection
	if rf.Exceeds(reflected, 100) && d.Place == nil {
		lacks = append(lacks, Lack{"the place of " + d.ID, d.At})
	}
	switch {
	case rf.Exceeds(s.total, 100):
		r.Fails(d.Row.People.At, on, "%s", says()).Then("keep people further away, or take less gain or power").
			Over("share_percent", s.total, "limit_percent", 100).By(basis()).Beside(at, "the antenna")
	case len(lacks) > 0:
		r.Lacking(at, on, dedupe(lacks), "the power density at %s", d.ID)
	case d.Place.Outdoors() && rf.Exceeds(reflected, 100):
		r.Fails(d.Row.People.At, on, "%s, and to %s %% with the reflection from a roof (× 2.56)", says(), unit.Fixed(reflected, 2)).Lighter(Punch).
			Then("keep people further away, or mark the place").Over("share_percent", reflected, "limit_percent", 100).By(basis()).Beside(at, "the antenna")
	}
}

// needSize is what is missing where the part does not say how large the antenna is.
func needSize(d *bom.Device) []Lack {
	if d.Part.Antenna.SizeMM.Set {
		return nil
	}
	return []Lack{{"size_mm of " + d.Part.ID + ", which tells where its far field begins", d.Part.At}}
}

// referenceLevel is the profile's level for the general public.
func (c *Case) referenceLevel() (*limits.Level, []Lack) {
	if c.Profile == nil {
		return nil, []Lack{c.lackProfile()}
	}
	if l := c.Profile.Level("general"); l != nil {
		return l, nil
	}
	return nil, []Lack{{"a reference level of profile " + c.Profile.ID, placeOr(c.Plan.Job.Profile.At, c.JobAt())}}
}

// density is what the known bands of an antenna come to, in per cent of the level.
type density struct {
	total float64
	each  []bandShare
	lacks []Lack
}

type bandShare struct {
	band string
	share
}

// words lists the shares as addends.
func (s *density) words() string {
	var out []string
	for _, b := range s.each {
		out = append(out, fmt.Sprintf("%s %s %% (%s of %s W/m²)", b.band, unit.Fixed(b.percent, 2), unit.Fixed(b.density, 2), unit.Fixed(b.limit, 2)))
	}
	return strings.Join(out, " + ")
}

// shares adds up what each band takes of the reference level in free space, at the
// edge or middle of the band where that is most.
func (e *emitter) shares(level *limits.Level) density {
	var s density
	begins := 0.0
	for _, p := range e.parts {
		var worst share
		for _, r := range p.at {
			at := e.share(level, r)
			if at.lack != "" {
				s.lacks = append(s.lacks, Lack{at.lack, e.device.At})
			}
			if begins = max(begins, at.far); at.percent > worst.percent {
				worst = at
			}
		}
		if worst.limit == 0 {
			continue
		}
		s.total += worst.percent
		s.each = append(s.each, bandShare{p.band, worst})
	}
	if begins > 0 {
		people := e.device.Row.People
		s.lacks = append(s.lacks, Lack{fmt.Sprintf("a far field at %s, for it begins at %s m", people.V, unit.Fixed(begins, 2)), people.At})
	}
	s.lacks = dedupe(s.lacks)
	return s
}

// share is what one frequency takes of the level. Where people stay in the near
// field, far is the distance at which that ends, and there is no figure.
type share struct {
	percent, density, limit float64
	far                     float64
	lack                    string
}

func (e *emitter) share(level *limits.Level, r Radiation) share {
	far, ok := rf.FarFieldFrom(r.MHz, e.device.Part.Antenna.SizeMM.V/1000)
	limit, stated := level.DensityAt(r.MHz)
	if !ok || !stated {
		return share{lack: "a reference level at " + r.MHz.String()}
	}
	v, ok := rf.PowerDensity(r.EIRP.Most, rf.FreeField, e.device.Row.People.V.Metres(), far)
	if !ok {
		return share{far: far}
	}
	return share{percent: 100 * v / limit, density: v, limit: limit}
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
		for _, e := range c.emitters() {
			checkDistance(c, r, e.device)
		}
	},
}

func checkDistance(c *Case, r *Report, d *bom.Device) {
	people := d.Row.People
	lacks := needPeople(d)
	if c.Profile == nil {
		lacks = append([]Lack{c.lackProfile()}, lacks...)
	} else if c.Profile.Separation == nil {
		return // it asks for no distance
	}
	if len(lacks) > 0 {
		r.Lacking(partAt(d), d.On(), lacks, "the distance of people from %s", d.ID)
		return
	}
	if s := c.Profile.Separation; people.V < s.Least.V {
		r.Fails(people.At, d.On(), "%s is %s from people; at least %s is asked for", d.ID, people.V, s.Least.V).
			Then("mount it further away").Under("distance_m", people.V.Metres(), "least_m", s.Least.V.Metres()).
			By(limits.Origin(s.Clause.V, s.Edition.Or(c.Profile.Edition.V), s.Proof.V))
	}
}
