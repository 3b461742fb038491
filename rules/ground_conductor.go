package rules

import (
	"math"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

var groundConductor = &Rule{
	Name:    "ground/conductor",
	Title:   "Each bonding conductor has the material and the size that the code asks for",
	Why:     "a thin conductor burns off at the strike that it is there for; aluminium near earth is gone before the strike comes",
	Caution: cautionElectrician + " " + cautionStrike,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.21(A), (D), (H), (J)", "2020", "code", "read"},
		{"IEC/EN 60728-11, earthing conductor", "as DIN VDE 0855-1:2011-06", "standard", "read"}},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		b := c.bonding()
		j := &judge{c: c, r: r, said: map[*bom.Bond]bool{}}
		if !j.canCompare(b) {
			return
		}
		for _, w := range b.wanted {
			j.path(w)
		}
		j.gear()
		j.ties()
		j.lightning(b)
	},
}

// grade is how a bond stands to the size that the code gives.
type grade int

const (
	enough grade = iota
	unsure
	short
)

// judge compares bonds with the rows of the plan's code; each bond has one finding
// at most.
type judge struct {
	c    *Case
	r    *Report
	said map[*bom.Bond]bool
}

// canCompare reports whether there is a code with sizes; where there is none and
// something to compare, that is said once.
func (j *judge) canCompare(b *bonding) bool {
	switch {
	case j.c.codeRow("bond-conductor") != nil:
		return true
	case len(b.wanted) == 0 || len(j.c.Graph.Bonds) == 0:
	case j.c.CodeName() == "":
		j.r.Unknown(j.c.JobAt(), "job", "neither the plan nor the workspace names a grounding code; no conductor is assessed").
			Then("name one: code = %q", "us-nec-2020")
	case j.c.Code != nil:
		j.r.Unknown(j.c.JobAt(), "job", "the code %s has no row bond-conductor; no conductor is assessed", j.c.CodeName()).
			Then("add the row to the code, with its sizes by material")
	}
	return false
}

// path judges the way from a device to its electrode: the best there is, so that a
// thin wire beside a stout one does no harm.
func (j *judge) path(w wanted) {
	isElectrode := func(d *bom.Device) bool { return d.Kind() == "electrode" }
	row := j.c.codeRow(w.size)
	bonds, end := j.best(w.dev, isElectrode, row)
	for _, b := range bonds {
		if !j.said[b] {
			j.said[b] = j.size(b, row, w.dev.ID+" to "+end.ID) || j.nearEarth(b) || j.raceway(b)
		}
	}
}

// gear judges the bonds of gear indoors, where the code has a size for joining
// equipment.
func (j *judge) gear() {
	if j.c.codeRow("shield-bond") == nil {
		return
	}
	for _, d := range j.c.Graph.Devices {
		if d.Active() && !d.Place.Outdoors() {
			j.path(wanted{dev: d, size: "shield-bond"})
		}
	}
}

// ties judges what joins the electrodes of a plan to each other.
func (j *judge) ties() {
	row := j.c.codeRow("electrode-tie")
	first := electrodes(j.c.Graph)
	if row == nil || len(first) < 2 {
		return
	}
	for _, other := range first[1:] {
		bonds, _ := j.best(first[0], func(d *bom.Device) bool { return d == other }, row)
		for _, b := range bonds {
			if !j.said[b] {
				j.said[b] = j.size(b, row, "electrode "+first[0].ID+" to electrode "+other.ID)
			}
		}
	}
}

// lightning judges what joins masts outdoors to a lightning protection system, where
// the code has a size for that.
func (j *judge) lightning(b *bonding) {
	row := j.c.codeRow("lightning-conductor")
	if row == nil {
		return
	}
	isLightning := func(d *bom.Device) bool { return d.Row.Lightning.V }
	for _, w := range b.wanted {
		if !j.c.bondedToLightning(w.dev) {
			continue
		}
		bonds, end := j.best(w.dev, isLightning, row)
		for _, x := range bonds {
			if !j.said[x] {
				j.said[x] = j.size(x, row, w.dev.ID+" to "+end.ID+", part of the lightning protection system")
			}
		}
	}
}

func electrodes(g *bom.Graph) []*bom.Device {
	var out []*bom.Device
	for _, d := range g.Devices {
		if d.Kind() == "electrode" {
			out = append(out, d)
		}
	}
	return out
}

// best is the way over bonds from a device to a goal whose worst bond is best, and
// of those the shortest; nil where there is none.
func (j *judge) best(from *bom.Device, goal func(*bom.Device) bool, row *limits.CodeRow) ([]*bom.Bond, *bom.Device) {
	for _, worst := range []grade{enough, unsure, short} {
		if bonds, end := way(j.c.Graph, from, goal, func(b *bom.Bond) bool { return j.grade(b, row) <= worst }); end != nil {
			return bonds, end
		}
	}
	return nil, nil
}

// way is the shortest way over bonds that may be used from a device to a goal.
func way(g *bom.Graph, from *bom.Device, goal func(*bom.Device) bool, use func(*bom.Bond) bool) ([]*bom.Bond, *bom.Device) {
	type reach struct {
		at   *bom.Device
		path []*bom.Bond
	}
	seen := map[*bom.Device]bool{from: true}
	for queue := []reach{{at: from}}; len(queue) > 0; queue = queue[1:] {
		q := queue[0]
		if q.at != from && goal(q.at) {
			return q.path, q.at
		}
		for _, b := range g.BondsAt(q.at) {
			if next := b.Other(q.at); !seen[next] && use(b) {
				seen[next] = true
				queue = append(queue, reach{next, append(append([]*bom.Bond(nil), q.path...), b)})
			}
		}
	}
	return nil, nil
}

// grade compares a bond with a row. A part that did not resolve has a finding of
// its own and passes here.
func (j *judge) grade(b *bom.Bond, row *limits.CodeRow) grade {
	switch {
	case b.Row.Direct.V, b.Part == nil && b.Row.Part.Set:
		return enough
	case b.Part == nil || b.Part.Bond == nil || !b.Part.Bond.Material.Set:
		return unsure
	case j.forbidden(b):
		return short
	case !b.Part.Bond.Size.Set:
		return unsure
	}
	ok, known := row.AllowsSize(b.Part.Bond.Material.V, b.Part.Bond.Size.V)
	switch {
	case !known:
		return unsure
	case !ok:
		return short
	}
	return enough
}

// forbidden reports a bond of a material that the code does not name.
func (j *judge) forbidden(b *bom.Bond) bool {
	row := j.c.codeRow("bond-material")
	if row == nil {
		return false
	}
	ok, known := row.Permits(b.Part.Bond.Material.V)
	return known && !ok
}

// size reports what a bond lacks in size or material on its way, if anything.
func (j *judge) size(b *bom.Bond, row *limits.CodeRow, on string) bool {
	g := j.grade(b, row)
	switch {
	case g == enough:
		return false
	case g == unsure:
		j.unknown(b, row, on)
	case j.forbidden(b):
		m := b.Part.Bond.Material
		j.r.Fails(placeOr(b.Row.Part.At, b.Row.At), b.On(), "%s, on the way from %s, is %s; the code names %s", b.Row.ID, on, m.V, j.c.codeRow("bond-material").Figure()).
			Then("%s", j.better(row)).onRow(j.c.codeRow("bond-material")).Beside(m.At, "the part's material")
	default:
		k := b.Part.Bond
		least, _ := row.SizeFor(k.Material.V)
		j.r.Fails(placeOr(b.Row.Part.At, b.Row.At), b.On(), "%s, on the way from %s, is %s %s; the code asks for at least %s in %s",
			b.Row.ID, on, k.Material.V, area(k.Size.V), area(least), k.Material.V).
			Then("%s", j.better(row)).onRow(row).Under("size_mm2", k.Size.V.MM2, "limit_mm2", least.MM2)
	}
	return true
}

// area prints a size with its section, because gauge numbers run backwards.
func area(g unit.Gauge) string {
	mm2 := unit.Fixed(g.MM2, 1) + " mm²"
	if g.Written == "" || g.Written[len(g.Written)-1] != 'G' {
		return mm2
	}
	return g.Written + " (" + mm2 + ")"
}

func (j *judge) better(row *limits.CodeRow) string {
	if p := j.c.conductorFor(row); p != nil {
		return "use " + j.c.Firm.OnHand(p)
	}
	return "use a conductor of that size; the catalog has none"
}

func (j *judge) unknown(b *bom.Bond, row *limits.CodeRow, on string) {
	at, says := placeOr(b.Row.Part.At, b.Row.At), ""
	switch {
	case b.Part == nil:
		says = "it is there already and its material and size are not known"
	case b.Part.Bond == nil || !b.Part.Bond.Material.Set:
		says = "the part " + b.Part.ID + " gives no material"
	case !b.Part.Bond.Size.Set:
		says = "the part " + b.Part.ID + " gives no size"
	default:
		says = "the code gives no size for " + b.Part.Bond.Material.V
	}
	f := j.r.Unknown(at, b.On(), "%s, on the way from %s, is not assessed: %s", b.Row.ID, on, says).
		Then("give material and size by a part of the catalog").onRow(row)
	if b.Part != nil {
		f.Beside(b.Part.At, "the part")
	}
}

// nearEarth reports aluminium that comes too near to earth outdoors: at an
// electrode, or at a device whose own height the plan gives.
func (j *judge) nearEarth(b *bom.Bond) bool {
	row := j.c.codeRow("aluminium-near-earth")
	if row == nil || b.Part == nil || b.Part.Bond == nil || b.Part.Bond.Material.V != "aluminium" {
		return false
	}
	for _, d := range []*bom.Device{b.From, b.To} {
		switch {
		case d.Place.Indoors(), !d.Row.Point.Set && d.Kind() != "electrode":
			continue
		case !d.Row.Point.Set:
			j.r.Fails(placeOr(b.Row.Part.At, b.Row.At), b.On(), "%s is aluminium and goes down to the electrode %s; outdoors it keeps %s from earth",
				b.Row.ID, d.ID, row.Figure()).Then("%s", j.copper(d)).onRow(row).Beside(d.At, "the electrode")
			return true
		}
		up := unit.MM(math.Round(d.Row.Point.V.Up * 1000))
		if ok, _ := row.AllowsLength(up); !ok {
			j.r.Fails(placeOr(b.Row.Part.At, b.Row.At), b.On(), "%s is aluminium and comes down to %s above ground at %s; outdoors it keeps %s from earth",
				b.Row.ID, up, d.ID, row.Figure()).Then("%s", j.copper(d)).onRow(row).
				Under("height_m", up.Metres(), "limit_m", row.Length.V.Metres()).Beside(d.Row.Point.At, "the height")
			return true
		}
	}
	return false
}

func (j *judge) copper(d *bom.Device) string {
	return "take copper for the last stretch; if " + d.ID + " is higher up, give its own height (at)"
}

// raceway reports a metal raceway that is not bonded to its conductor at both ends.
func (j *judge) raceway(b *bom.Bond) bool {
	row := j.c.codeRow("bond-raceway")
	ends := map[string]string{"metal": "neither end is said to be bonded to it", "metal-bonded-one-end": "one end is bonded to it"}[b.Row.Raceway.V]
	if row == nil || ends == "" {
		return false
	}
	j.r.Fails(b.Row.Raceway.At, b.On(), "%s runs in a metal raceway and %s; both ends are expected to be", b.Row.ID, ends).
		Then("bond both ends of the raceway to the conductor, or use plastic").onRow(row)
	return true
}

// conductorFor is a catalog conductor of a size that a code row allows: on hand
// first, the firm's own before generic ones, copper before other metals because
// every clamp takes it, the thinnest that will do. Nil where there is none.
func (c *Case) conductorFor(row *limits.CodeRow) *catalog.Part {
	if row == nil {
		return nil
	}
	var best *catalog.Part
	for _, p := range c.Firm.Catalog.All() {
		if p.Kind.V != "bond-conductor" || p.Status.Or("active") != "active" {
			continue
		}
		if ok, known := row.AllowsSize(p.Bond.Material.V, p.Bond.Size.V); !ok || !known {
			continue
		}
		if best == nil || c.Firm.handier(p, best) {
			best = p
		}
	}
	return best
}

func (f *Firm) handier(a, b *catalog.Part) bool {
	if x, y := f.held(a), f.held(b); x != y {
		return x
	}
	if a.Generic != b.Generic {
		return b.Generic
	}
	if x, y := a.Bond.Material.V == "copper", b.Bond.Material.V == "copper"; x != y {
		return x
	}
	if x, y := a.Bond.Size.V.MM2, b.Bond.Size.V.MM2; x != y {
		return x < y
	}
	return a.ID < b.ID
}
