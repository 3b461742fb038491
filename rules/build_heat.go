package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var buildHeat = &Rule{
	Name:  "build/heat",
	Title: "Gear stays inside its ambient temperatures where it stands",
	Why:   "a booster in a hot attic turns itself down or off on the day when the shop is full",
	Basis: []Basis{
		practice("ambient temperatures of the maker's data sheet against those of the place"),
		house("closed_rise_c (15 K where it says nothing): what the sun adds in an attic or a vehicle that has no hottest of its own")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		seen := map[heatKey]bool{}
		var silent []*bom.Device
		var lacks []Lack
		for _, d := range c.Graph.Devices {
			key := heatKey{d.Row, d.Place}
			if d.Part == nil || d.Place == nil || seen[key] {
				continue // said by others, or once for copies in the same place
			}
			seen[key] = true
			if l := c.checkHeat(r, d); len(l) > 0 {
				silent, lacks = append(silent, d), append(lacks, l...)
			}
		}
		if len(silent) > 0 {
			r.Lacking(silent[0].At, silent[0].On(), lacks, "whether %s can stand where planned for heat and cold", list(ids(silent)))
		}
	},
}

type heatKey struct {
	row   *bom.DeviceRow
	place *bom.Place
}

// weathered reports a place that is as hot and cold as it is outdoors, or more so.
func weathered(p *bom.Place) bool {
	switch p.Kind.V {
	case "outdoor", "attic", "vehicle-skin", "vehicle-cabin":
		return true
	}
	return false
}

// powered reports gear with electronics in it, which minds the heat.
func powered(d *bom.Device) bool {
	switch d.Kind() {
	case "amplifier", "router", "supply", "injector", "switch", "battery":
		return true
	}
	return false
}

// checkHeat holds one device against its place, and returns what the place lacks.
func (c *Case) checkHeat(r *Report, d *bom.Device) []Lack {
	p, ambient := d.Place, d.Part.AmbientC
	s := &c.Plan.Site
	hot, cold := p.Hottest, p.Coldest
	if weathered(p) {
		hot, cold = or(hot, s.Hottest), or(cold, s.Coldest)
	}
	if !ambient.Set {
		if powered(d) && !d.Row.Existing.V && (weathered(p) || p.Hottest.Set || p.Coldest.Set) {
			r.Unknown(partAt(d), d.On(), "whether %s (%s) bears the temperatures in %s is not assessed: its part gives no ambient_c", d.ID, d.Part.ID, p.ID).
				Then("complete the part").Beside(d.Part.At, "the part")
		}
		return nil
	}
	low, high := ambient.V[0], ambient.V[1]
	if hot.Set && rf.Exceeds(float64(hot.V), high) {
		c.reportHeat(r, d, Fails, float64(hot.V), high, p.ID+" reaches "+hot.V.String(), hot.At)
	} else if rise := c.House().ClosedRiseC.Or(defaultClosedRiseC); hot.Set && !p.Hottest.Set && closed(p) && rf.Exceeds(float64(hot.V)+rise, high) {
		c.reportHeat(r, d, AtWorst, float64(hot.V)+rise, high, "it is "+hot.V.String()+" outdoors, and in "+p.ID+" the sun can add "+plainFigure(rise)+" K", hot.At)
	}
	if cold.Set && rf.Below(float64(cold.V), low) {
		f := r.Fails(placeOr(d.Row.Place.At, d.At), d.On(), "%s (%s) is made for %s and more; %s gets as cold as %s", d.ID, d.Part.ID, unit.Celsius(low), p.ID, cold.V)
		f.Under("coldest_c", float64(cold.V), "limit_c", low).Beside(cold.At, "how cold").Beside(ambient.At, "what it is made for").Then("move it where it is warmer")
	}
	var lacks []Lack
	if !hot.Set && weathered(p) {
		lacks = append(lacks, Lack{"how hot " + p.ID + " gets (hottest)", p.At})
	}
	if !cold.Set && weathered(p) {
		lacks = append(lacks, Lack{"how cold " + p.ID + " gets (coldest)", p.At})
	}
	return lacks
}

// closed reports a place that the sun heats beyond the air outdoors.
func closed(p *bom.Place) bool { return p.Kind.V == "attic" || p.Kind.V == "vehicle-cabin" }

func or[T any](a, b source.Val[T]) source.Val[T] {
	if a.Set {
		return a
	}
	return b
}

func (c *Case) reportHeat(r *Report, d *bom.Device, o Outcome, hot, high float64, says string, at source.Place) {
	f := r.add(o, placeOr(d.Row.Place.At, d.At), d.On(), "%s (%s) is made for up to %s; %s", []any{d.ID, d.Part.ID, unit.Celsius(high), says})
	f.Over("hottest_c", hot, "limit_c", high).Beside(at, "how hot").Beside(d.Part.AmbientC.At, "what it is made for").
		Then("move it where it is cooler, or give the place its own hottest once measured")
}
