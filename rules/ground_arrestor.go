package rules

import (
	"slices"
	"sort"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

var groundArrestor = &Rule{
	Name:    "ground/arrestor",
	Title:   "Every RF line from outdoors meets a surge arrestor before the first gear indoors",
	Why:     "a strike nearby puts thousands of volts on the line; without an arrestor they end in the radio, or in whoever touches it",
	Caution: cautionThunder + " " + cautionStrike,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.20(A)", "2020", "code", "read"},
		{"IEC/EN 60728-11, earthing of antennas and the exempt zone", "as DIN VDE 0855-1:2011-06", "standard", "read"},
		practice("an arrestor with a path for the centre conductor even where a bonded shield block does for the code")},
	Weight: Hold,
	Lighter: "a shield block alone is a punch: for coax the NEC lets it do, once bonded, and the trade does not. In the exempt zone of IEC/EN 60728-11 " +
		"a missing arrestor is a note; the zone is shown by below_roof_edge and off_wall of the antenna or its mast",
	Grave: true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		said := map[string]bool{}
		var unclear []*bom.Device
		for _, l := range c.leadIns() {
			all, xs := protectors(l), crossingsOf(l)
			for i, x := range xs {
				if !said[x.On] {
					said[x.On] = c.checkCrossing(r, x, guarding(all, xs, i))
				}
			}
			if len(xs) == 0 && !slices.ContainsFunc(all, protector.full) {
				unclear = append(unclear, unplaced(l.From.Device), unplaced(l.To.Device))
			}
		}
		reportUnplaced(r, unclear, c.codeRow("discharge-unit"), "whether a line comes in from outdoors")
	},
}

// checkCrossing holds one crossing against what protects it, and reports whether
// it had something to say.
func (c *Case) checkCrossing(r *Report, x bom.Crossing, by []protector) bool {
	var block, unsure *bom.Device
	for _, p := range by {
		switch {
		case p.dev.Part == nil:
			unsure = p.dev
		case p.block():
			block = p.dev
		default:
			return false
		}
	}
	name, row := lineWord(x), c.codeRow("discharge-unit")
	switch {
	case unsure != nil:
		r.Unknown(unsure.At, unsure.On(), "%s is there already and its part is not known; whether it protects more of %s than the shield is not assessed", unsure.ID, name).
			Then("look at it on site and give its part").onRow(row).Beside(x.At, "the line that comes in")
	case block != nil:
		r.Fails(block.At, block.On(), "%s is a shield block and the only protection of %s: the centre conductor comes in from %s to %s without an arrestor",
			block.ID, name, x.Out.ID, innerEnd(x).ID).Then("%s", c.arrestorFor(x.Line, "in its place")).
			onRow(c.firstRow("shield-block", "discharge-unit")).Lighter(Punch).Beside(x.At, "the line that comes in")
	default:
		c.reportUnprotected(r, x, name, row)
	}
	return true
}

func (c *Case) reportUnprotected(r *Report, x bom.Crossing, name string, row *limits.CodeRow) {
	outer, inner := outerEnd(x), innerEnd(x)
	zone := c.exempt(outer)
	if zone.holds {
		r.Advice(x.At, x.On, "%s comes in from %s to %s without an arrestor; %s lies in the exempt zone, %s below the roof's edge and %s from the wall",
			name, x.Out.ID, inner.ID, outer.ID, zone.below, zone.off).
			Then("join the shield for equal potential all the same").onRow(zone.row)
		return
	}
	f := r.Fails(x.At, x.On, "%s comes in from %s to %s without an arrestor; one is expected between outdoors and %s",
		name, x.Out.ID, x.In.ID, inner.ID).Then("%s", c.arrestorFor(x.Line, "at the entry")).onRow(row).Beside(inner.At, "the gear that it reaches")
	if zone.says != "" {
		f.Says += "; " + zone.says
	}
}

// lineWord is the name of a line that comes in: of its cable, or where no cable of
// the plan crosses, of what it comes from.
func lineWord(x bom.Crossing) string {
	if id, ok := strings.CutPrefix(x.On, "cable."); ok {
		return id
	}
	return "the line from " + outerEnd(x).ID
}

// zone is what is known of an antenna and the zone in which a standard asks for no
// lightning earthing.
type zone struct {
	holds      bool
	below, off unit.MM
	row        *limits.CodeRow
	says       string // why it does not hold, where the code has such a zone
}

// exempt compares the distances of an antenna or a mast with the exempt zone of the
// plan's code. Both must hold, and both are strict: at the very figure it is outside.
// What is bonded to a lightning protection system is outside wherever it is.
func (c *Case) exempt(d *bom.Device) zone {
	low, near := c.codeRow("exempt-below-edge"), c.codeRow("exempt-off-wall")
	if low == nil || near == nil || d.Kind() != "antenna" && d.Kind() != "mount" {
		return zone{}
	}
	below, off := roofDistances(d)
	z := zone{below: below.V, off: off.V, row: low}
	okLow, _ := low.AllowsLength(below.V)
	okNear, _ := near.AllowsLength(off.V)
	var out []string
	if below.Set && !okLow {
		out = append(out, below.V.String()+" below the roof's edge ("+low.Figure()+")")
	}
	if off.Set && !okNear {
		out = append(out, off.V.String()+" from the wall ("+near.Figure()+")")
	}
	switch {
	case len(out) > 0:
		z.says = d.ID + " is outside the exempt zone: " + list(out)
	case !below.Set || !off.Set:
		z.says = "the exempt zone (" + low.Figure() + " below the roof's edge and " + near.Figure() + " from the wall) is not shown: " + d.ID + " gives no " + zoneKeys(below.Set, off.Set)
	case c.onLightning(d):
		z.says = d.ID + " lies in the exempt zone and is bonded to the lightning protection system, whose current comes in on the line"
	default:
		z.holds = true
	}
	return z
}

// roofDistances are how far a device lies below the roof's edge and off the wall: by
// its own keys, or where it has none by those of the mast that carries it.
func roofDistances(d *bom.Device) (below, off source.Val[unit.MM]) {
	for ; d != nil; d = d.Stands {
		if !below.Set {
			below = d.Row.BelowEdge
		}
		if !off.Set {
			off = d.Row.OffWall
		}
	}
	return below, off
}

func zoneKeys(below, off bool) string {
	switch {
	case below:
		return "off_wall"
	case off:
		return "below_roof_edge"
	}
	return "below_roof_edge or off_wall"
}

// arrestorFor names a catalog arrestor for a line that comes in: of its impedance,
// for as many of the planned bands as there is one for, and passing direct current
// where the line carries it; what is on hand first, then the firm's own parts.
func (c *Case) arrestorFor(l *bom.Line, where string) string {
	dc := len(feeders(l)) > 0
	type choice struct {
		part *catalog.Part
		left []string // planned bands that it does not cover
	}
	var would []choice
	for _, p := range c.Firm.Catalog.All() {
		a := p.Arrestor
		if a == nil || a.Principle.V == "shield-block" || p.Status.Or("active") != "active" || dc && a.DC.V != "pass" || !ofImpedance(p, lineOhm(l)) {
			continue
		}
		if left := c.leavesOut(p); len(left) == 0 || len(left) < len(c.Bands()) {
			would = append(would, choice{p, left})
		}
	}
	sort.SliceStable(would, func(i, j int) bool {
		if a, b := len(would[i].left), len(would[j].left); a != b {
			return a < b
		}
		return c.Firm.nearerThan(would[i].part, would[j].part)
	})
	if len(would) == 0 {
		return "fit an arrestor " + where + " and bond it; the catalog has none for these bands at this impedance"
	}
	out := "fit " + c.Firm.OnHand(would[0].part) + " " + where + ", its line side toward the antenna, and bond it"
	if left := would[0].left; len(left) > 0 {
		out += "; it leaves out " + list(left) + ", and the catalog has none that does not"
	}
	return out
}

// nearerThan puts what is on hand first, then the firm's own parts, then by ID.
func (f *Firm) nearerThan(a, b *catalog.Part) bool {
	if x, y := f.held(a), f.held(b); x != y {
		return x
	}
	if a.Generic != b.Generic {
		return b.Generic
	}
	return a.ID < b.ID
}

// ofImpedance reports an arrestor of an impedance; 0 asks for none.
func ofImpedance(p *catalog.Part, ohm float64) bool {
	line := p.Port("line")
	return line != nil && (ohm == 0 || line.Impedance.V == ohm)
}

// leavesOut lists the planned bands that an arrestor has no path for at some point.
func (c *Case) leavesOut(p *catalog.Part) []string {
	rows := p.Between("line", "gear")
	var out []string
	for _, b := range c.Bands() {
		for _, f := range bandPoints(b) {
			if !covers(rows, f) {
				out = append(out, b.Name)
				break
			}
		}
	}
	return out
}

func covers(rows []*catalog.Path, f unit.MHz) bool {
	for _, row := range rows {
		if !row.MHz.Set || row.MHz.V.Contains(f) {
			return true
		}
	}
	return false
}

// lineOhm is the impedance of a line's first cable, else of the port it starts
// from, or 0.
func lineOhm(l *bom.Line) float64 {
	for _, x := range l.Cables() {
		if x.Part != nil && x.Part.Cable != nil {
			return x.Part.Cable.Impedance.V
		}
	}
	return l.From.Ohm.V
}
