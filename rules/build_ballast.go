package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/mech"
	"driploop/rules/rf"
)

// checkBallast holds a mount that stands by its weight against overturning and
// sliding, and says what it puts on the roof. It returns what it lacks.
func (c *Case) checkBallast(r *Report, l *loaded) []Lack {
	m := l.mount
	mt := mountOf(m)
	if mt == nil || mt.Ballast == nil {
		return nil
	}
	b := mt.Ballast
	if !b.MassKg.Set || !b.Base.Set {
		return nil // the part's file has a finding
	}
	c.reportRoofLoad(r, m)
	foot, lacks := c.footBelow(m)
	if len(lacks) > 0 {
		return append(lacks, l.lacks...)
	}
	moment, force := l.moment(foot), l.force()
	if tubeOf(m) == ownTube && foot > 0 {
		stub, _ := l.tubeLoad(mt.MastMM.V[1], 0, foot) // what the mast has below its top fixing
		moment = moment.plus(exactly(stub.Force * stub.Lever))
		force = force.plus(exactly(stub.Force))
	}
	least := c.ballastRatios(m, moment.least*l.wind.service, force.least*l.wind.service)
	factor := c.ballastFactor()
	if rf.Below(least.worst(), factor) {
		c.reportBallast(r, l, least, factor, moment.least, force.least)
		return nil
	}
	if most := c.ballastRatios(m, moment.most*l.wind.service, force.most*l.wind.service); rf.Below(most.worst(), factor) {
		return l.lacks
	}
	return nil
}

// footBelow is how far the foot of a ballasted mount lies below the top fixing that
// its levers are counted from. A frame that only clamps a mast has that mast's foot.
func (c *Case) footBelow(m *bom.Device) (float64, []Lack) {
	if tubeOf(m) != noTube {
		return tubeBelow(m)
	}
	below := 0.0
	for _, d := range c.standing(m) {
		if d.Kind() != "mount" {
			continue
		}
		b, lacks := tubeBelow(d)
		if len(lacks) > 0 {
			return 0, lacks
		}
		below = max(below, b)
	}
	return below, nil
}

// tubeBelow is how much of a mast lies below its top fixing.
func tubeBelow(m *bom.Device) (float64, []Lack) {
	mt := mountOf(m)
	switch {
	case mt == nil:
		return 0, []Lack{mastLack(m)}
	case !mt.Length.Set:
		return 0, []Lack{{"the length of " + m.Part.ID, m.Part.At}}
	case !m.Row.Free.Set:
		return 0, []Lack{{"free of " + m.ID, m.At}}
	}
	return math.Max(0, (mt.Length.V - m.Row.Free.V).Metres()), nil
}

// ballastRatios are how many times a mount holds what turns it over and what pushes
// it; infinite where nothing does.
type ballastRatios struct{ overturning, sliding float64 }

func (b ballastRatios) worst() float64 { return math.Min(b.overturning, b.sliding) }

func (c *Case) ballastRatios(m *bom.Device, moment, force float64) ballastRatios {
	b := mountOf(m).Ballast
	weight := b.MassKg.V * mech.Gravity
	if math.IsInf(moment, 1) || math.IsInf(force, 1) {
		return ballastRatios{0, 0}
	}
	out := ballastRatios{math.Inf(1), math.Inf(1)}
	if moment > 0 {
		out.overturning, _ = mech.Overturning(weight, b.Base.V.Metres(), moment)
	}
	if force > 0 {
		out.sliding, _ = mech.Sliding(weight, c.friction(m), force)
	}
	return out
}

// friction is that of the part, else the house's.
func (c *Case) friction(m *bom.Device) float64 {
	return mountOf(m).Ballast.Friction.Or(c.House().RoofFriction.Or(defaultRoofFriction))
}

// ballastFactor is what the house asks, and at least what the code's row does.
func (c *Case) ballastFactor() float64 {
	factor := c.House().BallastFactor.Or(defaultBallastFactor)
	if row := c.codeRow("ballast"); row != nil && row.Value.Set {
		factor = max(factor, row.Value.V)
	}
	return factor
}

func (c *Case) reportBallast(r *Report, l *loaded, got ballastRatios, factor, moment, force float64) {
	m, service := l.mount, l.wind.service
	b := mountOf(m).Ballast
	how := fmt.Sprintf("turned over by %s N·m about the edge of its base of %s", unit.Fixed(moment*service, 0), b.Base.V)
	name := "overturning"
	if got.sliding < got.overturning {
		how = fmt.Sprintf("pushed by %s N over a friction of %s", unit.Fixed(force*service, 0), plainFigure(c.friction(m)))
		name = "sliding"
	}
	f := r.Fails(partAt(m), m.On(), "%s (%s) weighs %s kg and is %s%s; that holds %s times, and %s times is expected. The wind: %s",
		m.ID, m.Part.ID, plainFigure(Round(b.MassKg.V)), how, serviceWords(l.wind), unit.Fixed(got.worst(), 2), plainFigure(factor), l.wind.words).
		Under(name+"_times", got.worst(), "limit_times", factor).onRow(c.codeRow("ballast")).Beside(m.Part.At, "its ballast")
	need, ok := mech.BallastFor(factor, b.Base.V.Metres(), c.friction(m), moment*service, force*service)
	if !ok {
		f.Then("add ballast, or tie it to the building")
		return
	}
	f.Then("bring its weight to %s kg, if an engineer finds that the roof carries it, or set the antennas lower, or tie it to the building", unit.Fixed(math.Ceil(need), 0))
}

// reportRoofLoad says what a ballasted mount puts on the roof, for whoever decides
// what the roof carries.
func (c *Case) reportRoofLoad(r *Report, m *bom.Device) {
	b := mountOf(m).Ballast
	side := b.Base.V.Metres()
	pressure, ok := mech.Bearing(b.MassKg.V, side*side)
	if !ok {
		return
	}
	f := r.Advice(partAt(m), m.On(), "%s (%s) puts %s kg on at least %s × %s m of the roof, up to %s kPa", m.ID, m.Part.ID,
		plainFigure(Round(b.MassKg.V)), plainFigure(side), plainFigure(side), unit.Fixed(pressure/1000, 2)).
		Then("let a structural engineer say what this roof carries").With("roof_kpa", pressure/1000)
	row := c.codeRow("roof-load")
	if row == nil {
		return
	}
	if flat, ok := row.Constant("flat_roof_kpa"); ok {
		f.Says += "; an ordinary flat roof is planned for about " + plainFigure(flat) + " kPa"
	}
	f.onRow(row)
}
