package rules

import (
	"math"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/mech"
	"driploop/rules/rf"
)

var buildWind = &Rule{
	Name:    "build/wind",
	Title:   "Masts and ballasted mounts withstand the wind of the site",
	Why:     "a mast that bends takes the antenna off its aim; one that breaks or turns over comes down on whoever is below",
	Caution: cautionStructure,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.16(B), strength for ice and wind", "2020", "code", "read"},
		{"ASCE 7 chapters 26 and 29, velocity pressure", "7-16", "standard", "read"},
		{"IEC/EN 60728-11 clause 12, fixed pressures, 1650 N·m and one sixth", "as DIN VDE 0855-1:2011-06", "standard", "read"},
		{Document: "bending stress M/S of a round tube", Kind: "calculated"},
		house("ballast_factor (1.5 where it says nothing), roof_friction (0.4)")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if !c.Vehicle() {
			c.checkWind(r)
		}
	},
}

func (c *Case) checkWind(r *Report) {
	var masts, placeless []*bom.Device
	for _, d := range c.Graph.Devices {
		switch {
		case d.Kind() == "mount" && c.inTheWind(d) && c.ours(d):
			if d.Place == nil {
				placeless = append(placeless, unplaced(d))
			} else if d.Place.Outdoors() && !c.carriesUnresolved(d) {
				masts = append(masts, d)
			}
		case unheld(d):
			r.Unknown(d.At, d.On(), "%s stands in %s and the plan has no mount for it; what the wind does to it is not assessed", d.ID, d.Place.ID).
				Then("add the mast or bracket, one that is there already as existing, and let %s stand on it", d.ID)
		}
	}
	reportUnplaced(r, placeless, c.codeRow("wind-strength"), "what the wind does there")
	if len(masts) == 0 {
		return
	}
	if lacks := c.windLacks(); len(lacks) > 0 {
		r.Lacking(masts[0].At, masts[0].On(), lacks, "what the wind does to %s", list(ids(masts))).onRow(c.codeRow("wind-pressure")).
			Then("add under [site] the wind of the local map, in wind_basis what the map means (asce7-strength in editions from 7-10 on, asce7-service before, or en-60728-11 under the European code), and the terrain (B built-up, C open, D at the water)")
		return
	}
	for _, m := range masts {
		c.checkMast(r, m)
	}
}

// inTheWind reports a mount that carries an antenna or gear.
func (c *Case) inTheWind(m *bom.Device) bool {
	on, _ := c.perches(m)
	return slices.ContainsFunc(on, func(p perch) bool { return catches(p.dev) })
}

// ours reports something that this job puts up, or puts something onto.
func (c *Case) ours(d *bom.Device) bool {
	on, _ := c.perches(d)
	return !d.Row.Existing.V || slices.ContainsFunc(on, func(p perch) bool { return !p.dev.Row.Existing.V })
}

// carriesUnresolved reports a mount that is, or carries, a part which nobody has.
func (c *Case) carriesUnresolved(m *bom.Device) bool {
	on, _ := c.perches(m)
	for _, p := range on {
		if unresolved(p.dev) {
			return true
		}
	}
	return unresolved(m)
}

// unheld reports an antenna outdoors that hangs on nothing of the plan, though it is
// made for a mast or nobody knows what for.
func unheld(d *bom.Device) bool {
	if !radiates(d) || d.Part == nil || d.Part.Antenna == nil || d.Row.Existing.V || d.Row.On.Set || !d.Place.Outdoors() {
		return false
	}
	return d.Part.Antenna.Fixing.Or("mast") == "mast"
}

func ids(devices []*bom.Device) []string {
	var out []string
	for _, d := range devices {
		out = append(out, d.ID)
	}
	return out
}

// checkMast holds one mount against the wind on all that it carries.
func (c *Case) checkMast(r *Report, m *bom.Device) {
	if !m.Point.Set {
		r.Lacking(m.At, m.On(), []Lack{{"the height of " + m.Place.ID + " (at)", m.Place.At}}, "what the wind does to %s", m.ID).onRow(c.codeRow("wind-pressure"))
		return
	}
	w, lacks := c.windAt(m.Point.V.Up + c.topOf(m))
	if len(lacks) > 0 {
		r.Lacking(m.At, m.On(), lacks, "what the wind does to %s", m.ID).onRow(c.codeRow("wind-pressure"))
		return
	}
	l := c.loadOn(m, w)
	lacks = append(lacks, c.checkStress(r, &l)...)
	lacks = append(lacks, c.checkMoment(r, &l)...)
	lacks = append(lacks, c.checkClamped(r, m)...)
	lacks = append(lacks, c.checkBallast(r, &l)...)
	if len(lacks) > 0 {
		r.Lacking(m.At, m.On(), lacks, "what the wind does to %s", m.ID).onRow(w.row)
	}
}

// topOf is the highest that a mount and what it carries reach above its top fixing,
// in metres; what is not known is left to the moment.
func (c *Case) topOf(m *bom.Device) float64 {
	free, _ := freeOf(m)
	top := free.most
	on, _ := c.perches(m)
	for _, p := range on {
		top = max(top, p.up.most)
		if p.dev.Kind() == "mount" {
			free, _ := freeOf(p.dev)
			top = max(top, p.up.most+free.most)
		}
	}
	if math.IsInf(top, 1) {
		return free.least
	}
	return top
}

// checkStress compares the bending stress at the top fixing with the share of the
// yield strength that the code's row allows. It returns what it lacks.
func (c *Case) checkStress(r *Report, l *loaded) []Lack {
	m, row := l.mount, c.codeRow("mast-stress")
	if row == nil || tubeOf(m) == noTube {
		return nil
	}
	share, ok := row.Constant("share_of_yield")
	if !ok {
		return []Lack{{"the figure share_of_yield of the row mast-stress", row.At}}
	}
	mt := mountOf(m)
	if lacks := tubeLacks(m); len(lacks) > 0 {
		return lacks
	}
	tube := mech.Tube{OD: mt.MastMM.V[1], Wall: mt.WallMM.V}
	moment, limit := l.moment(0), share*mt.YieldMPa.V
	least, ok := tube.Stress(moment.least * l.wind.service)
	if !ok {
		return []Lack{{"a wall of " + m.Part.ID + " that its tube can have", m.Part.At}}
	}
	if rf.Exceeds(least, limit) {
		r.Fails(placeOr(m.Row.Free.At, partAt(m)), m.On(), "%s (%s) bends under %s N·m at its top fixing%s: %s; that is %s MPa in %s × %s mm, and %s MPa is the most, %s %% of its yield of %s MPa. The wind: %s",
			m.ID, m.Part.ID, unit.Fixed(moment.least*l.wind.service, 0), serviceWords(l.wind), l.terms(), unit.Fixed(least, 1), plainFigure(tube.OD), plainFigure(tube.Wall),
			unit.Fixed(limit, 1), plainFigure(Round(share*100)), plainFigure(mt.YieldMPa.V), l.wind.words).
			Over("stress_mpa", least, "limit_mpa", limit).Then("%s", c.strongerMast(l, share)).onRow(row).Beside(m.Part.At, "the tube")
		return nil
	}
	if most, ok := tube.Stress(moment.most * l.wind.service); !ok || rf.Exceeds(most, limit) {
		return l.lacks
	}
	return nil
}

func serviceWords(w wind) string {
	if w.service == 1 {
		return ""
	}
	return ", " + plainFigure(w.service) + " of the strength-level wind"
}

// tubeLacks is what the strength of a mount's tube needs and its part leaves out.
func tubeLacks(m *bom.Device) []Lack {
	mt := mountOf(m)
	if mt == nil {
		return []Lack{mastLack(m)}
	}
	var out []Lack
	for _, k := range []struct {
		set  bool
		name string
	}{{mt.MastMM.Set, "mast_mm"}, {mt.WallMM.Set, "wall_mm"}, {mt.YieldMPa.Set, "yield_mpa"}} {
		if !k.set {
			out = append(out, Lack{k.name + " of " + m.Part.ID, m.Part.At})
		}
	}
	return out
}

// checkMoment compares the moment at the top fixing with the one up to which a code
// lets its simple method do.
func (c *Case) checkMoment(r *Report, l *loaded) []Lack {
	m, row := l.mount, c.codeRow("mast-moment")
	if row == nil || tubeOf(m) == noTube {
		return nil
	}
	moment := l.moment(0)
	if ok, known := row.Allows(moment.least); known && !ok {
		r.Fails(placeOr(m.Row.Free.At, partAt(m)), m.On(), "the wind makes %s N·m at the top fixing of %s: %s; above %s N·m a structural proof is needed. The wind: %s",
			unit.Fixed(moment.least, 1), m.ID, l.terms(), plainFigure(row.Value.V), l.wind.words).
			Over("moment_nm", moment.least, "limit_nm", row.Value.V).
			Then("set the antennas lower, take smaller ones, or have a structural engineer prove the mast and its fixings").onRow(row)
		return nil
	}
	if ok, known := row.Allows(moment.most); known && !ok {
		return l.lacks
	}
	return nil
}

// checkClamped holds how much of a mast lies between its fixings, and how long its
// free end is, where the code speaks of that.
func (c *Case) checkClamped(r *Report, m *bom.Device) []Lack {
	mt := mountOf(m)
	if tubeOf(m) != ownTube || mt.Ballast != nil {
		return nil
	}
	sixth, most := c.codeRow("mast-clamped"), c.codeRow("mast-free")
	if sixth == nil && most == nil {
		return nil
	}
	if !m.Row.Free.Set {
		return []Lack{{"free of " + m.ID, m.At}}
	}
	free := m.Row.Free.V
	if ok, known := allowsLength(most, free); known && !ok {
		r.Unknown(m.Row.Free.At, m.On(), "%s of %s are free; the code's simple method holds up to %s, and beyond it this is not assessed", free, m.ID, most.Length.V).
			Then("shorten its free end, or have a structural engineer prove it").onRow(most)
		return nil
	}
	if sixth == nil {
		return nil
	}
	if !mt.Length.Set || mt.Length.V <= 0 {
		return []Lack{{"the length of " + m.Part.ID, m.Part.At}}
	}
	share := float64(mt.Length.V-free) / float64(mt.Length.V)
	if ok, known := sixth.Allows(share); known && !ok {
		r.Fails(m.Row.Free.At, m.On(), "%s of %s lies between its fixings, %s of its length of %s; more than a sixth is expected",
			max(0, mt.Length.V-free), m.ID, plainFigure(Round(max(0, share))), mt.Length.V).Under("clamped_share", share, "limit", sixth.Value.V).
			Then("set its top fixing higher, so that less than %s is free, or take a longer mast", unit.MM(math.Ceil(float64(mt.Length.V)*5/6))).onRow(sixth)
	}
	return nil
}

func allowsLength(row *limits.CodeRow, l unit.MM) (ok, known bool) {
	if row == nil {
		return false, false
	}
	return row.AllowsLength(l)
}

// strongerMast names catalog masts that would carry the load.
func (c *Case) strongerMast(l *loaded, share float64) string {
	const or = "shorten its free end, set the antennas lower, or take smaller ones"
	p := c.Firm.pick(func(p *catalog.Part) bool { return c.wouldCarry(l, p.Mount, share) })
	if p == nil {
		return or + "; no mast of the catalog would carry this"
	}
	return "take a stronger mast such as " + c.Firm.OnHand(p) + ", or " + or
}

// wouldCarry reports a tube that carries the load of another: as long, taken by the
// antennas' clamps, and below the allowed stress with its own wind in place of the
// old tube's.
func (c *Case) wouldCarry(l *loaded, mt *catalog.Mount, share float64) bool {
	m := l.mount
	if !isTube(mt) || !mt.WallMM.Set || !mt.YieldMPa.Set || mt.Length.V < m.Part.Mount.Length.V || (mt.Ballast == nil) != (m.Part.Mount.Ballast == nil) {
		return false
	}
	for _, d := range c.standing(m) {
		if d.Part != nil && d.Part.Antenna != nil && d.Part.Antenna.MastMM.Set {
			if takes := d.Part.Antenna.MastMM.V; mt.MastMM.V[1] < takes[0] || mt.MastMM.V[1] > takes[1] {
				return false
			}
		}
	}
	other := *l
	other.burdens = append([]burden(nil), l.burdens...)
	if free, _ := freeOf(m); len(other.burdens) > 0 && !free.open() {
		other.burdens[0].most, _ = l.tubeLoad(mt.MastMM.V[1], 0, free.most)
	}
	stress, ok := mech.Tube{OD: mt.MastMM.V[1], Wall: mt.WallMM.V}.Stress(other.moment(0).most * l.wind.service)
	return ok && !rf.Exceeds(stress, share*mt.YieldMPa.V)
}
