package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/mech"
	"driploop/rules/rf"
)

var buildClearance = &Rule{
	Name:    "build/clearance",
	Title:   "Nothing that is put up comes near a power line, not even when it falls",
	Why:     "whoever holds a mast that touches a line is dead; most such deaths happen while a mast goes up or comes down",
	Caution: cautionLine,
	Basis: []Basis{
		{"29 CFR 1910.333(c)(3)(i), approach to overhead lines", "current text", "code", "memory"},
		{"NFPA 70 (NEC) 810.13, 810.18(A)", "2020", "code", "read"},
		practice("when mast and antenna fall, no part comes within 10 ft of a power line"),
		house("line_clearance (what the code asks, else 10 ft)")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if !c.Vehicle() {
			c.checkClearance(r)
		}
	},
}

func (c *Case) checkClearance(r *Report) {
	var up, placeless []*bom.Device
	for _, d := range c.Graph.Devices {
		if !falls(d) || unresolved(d) || !c.ours(d) {
			continue
		}
		if d.Place == nil {
			placeless = append(placeless, unplaced(d))
		} else if d.Place.Outdoors() {
			up = append(up, d)
		}
	}
	reportUnplaced(r, placeless, c.codeRow("fall-zone"), "whether it could fall onto a power line")
	if len(up) == 0 {
		return
	}
	if len(c.Plan.PowerLines) == 0 {
		c.checkUnlisted(r, up)
		return
	}
	near := map[*bom.PowerLine]bool{}
	for _, d := range up {
		c.checkFall(r, d, near)
	}
	c.checkLeadIns(r, up, near)
}

// falls reports what could come down by itself: a mount, or an antenna that stands
// on nothing of the plan.
func falls(d *bom.Device) bool {
	return d.Stands == nil && !d.Row.On.Set && (d.Kind() == "mount" || radiates(d))
}

// fall is how far something reaches when it falls, about its foot.
type fall struct {
	foot   bom.Point
	radius span // m
	lacks  []Lack
}

// fallOf is the reach of a mast with all that stands on it, or of an antenna alone,
// from its foot to its highest end.
func (c *Case) fallOf(d *bom.Device) fall {
	low, high, lacks := extent(d)
	on, more := c.perches(d)
	lacks = append(lacks, more...)
	for _, p := range on {
		l, h, more := extent(p.dev)
		lacks = append(lacks, more...)
		if p.dev.Kind() == "mount" {
			low = min(low, p.up.least+l)
		}
		high = span{max(high.least, p.up.least+h.least), max(high.most, p.up.most+h.most+belowFixing(p.dev, d))}
	}
	f := fall{radius: span{high.least - low, high.most - low}, lacks: lacks}
	if !d.Point.Set {
		f.lacks = append(f.lacks, Lack{"the point of " + d.Place.ID + " (at)", d.Place.At})
		f.radius.most = math.Inf(1)
	}
	f.foot = d.Point.V
	f.foot.Up += low
	return f
}

// belowFixing is how much further from its foot than from its fixings something may
// be, on tubes of which the free length is not given: each may end where the thing
// sits and reach as far below its fixing as the rest of it is long.
func belowFixing(thing, foot *bom.Device) float64 {
	more := 0.0
	for d := thing; d != foot && d.Stands != nil; d = d.Stands {
		m := d.Stands
		if mt := mountOf(m); mt != nil && tubeOf(m) == ownTube && mt.Length.Set && !m.Row.Free.Set {
			up, _ := upOn(d)
			more += math.Max(0, mt.Length.V.Metres()-up.most)
		}
	}
	return more
}

// extent is how far a thing reaches below and above where it is fixed, in metres. A
// mast whose free end is not given is taken to stand wholly above its foot, which is
// as far as it can reach. Gear of unknown size is left out beside mast and antenna.
func extent(d *bom.Device) (low float64, high span, lacks []Lack) {
	switch {
	case d.Kind() == "mount" && tubeOf(d) == noTube:
		return 0, exactly(0), nil
	case d.Kind() == "mount":
		return mastExtent(d)
	case radiates(d) && d.Part == nil:
		return 0, span{0, math.Inf(1)}, []Lack{{"the part of " + d.ID + ", with its size", d.At}}
	case d.Part == nil:
		return 0, exactly(0), nil
	}
	_, side := d.Part.InWind()
	if radiates(d) && !side.Set {
		return 0, span{0, math.Inf(1)}, []Lack{{"size_mm of " + d.Part.ID, d.Part.At}}
	}
	half := side.V / 2000
	return -half, exactly(half), nil
}

func mastExtent(d *bom.Device) (low float64, high span, lacks []Lack) {
	free, lacks := freeOf(d)
	mt := mountOf(d)
	switch {
	case mt == nil:
		return 0, span{free.least, math.Inf(1)}, append(lacks, Lack{"the part of " + d.ID + ", with its length", d.At})
	case !mt.Length.Set:
		return 0, span{free.least, math.Inf(1)}, append(lacks, Lack{"the length of " + d.Part.ID, d.Part.At})
	case !d.Row.Free.Set:
		return 0, exactly(mt.Length.V.Metres()), lacks
	}
	return math.Min(0, free.least-mt.Length.V.Metres()), free, nil
}

// checkFall holds one fall against every line. Lines that it comes near are noted.
func (c *Case) checkFall(r *Report, d *bom.Device, near map[*bom.PowerLine]bool) {
	f := c.fallOf(d)
	var open bool
	for i := range c.Plan.PowerLines {
		line := &c.Plan.PowerLines[i]
		if !line.Point.Set || !line.KV.Set {
			continue // its table has a finding
		}
		keep, row := c.lineClearance(line.KV.V)
		if d.Point.Set && rf.Below(f.gap(line.Point.V, f.radius.least), keep) {
			near[line] = true
			c.reportFall(r, d, f, line, keep, row)
			continue
		}
		open = open || f.radius.open() || rf.Below(f.gap(line.Point.V, f.radius.most), keep)
	}
	if open {
		r.Lacking(d.At, d.On(), f.lacks, "whether %s could fall onto a power line", d.ID).onRow(c.codeRow("fall-zone"))
	}
}

// gap is how near the fall comes to a point; NaN, which is below every limit, where
// there is no radius to speak of.
func (f fall) gap(p bom.Point, radius float64) float64 {
	if radius == 0 {
		radius = math.SmallestNonzeroFloat64
	}
	gap, ok := mech.FallGap(p.East-f.foot.East, p.North-f.foot.North, p.Up-f.foot.Up, radius)
	if !ok {
		return math.NaN()
	}
	return gap
}

func (c *Case) reportFall(r *Report, d *bom.Device, f fall, line *bom.PowerLine, keep float64, row *limits.CodeRow) {
	gap := f.gap(line.Point.V, f.radius.least)
	how := fmt.Sprintf("comes within %s m of", unit.Fixed(gap, 2))
	if gap <= 0 {
		how = "reaches"
	}
	r.Fails(d.At, d.On(), "%s, %s m from its foot to its top, %s the line of %s kV when it falls (%s m to the line − %s m); %s m is expected",
		d.ID, plainFigure(Round(f.radius.least)), how, plainFigure(line.KV.V), unit.Fixed(gap+f.radius.least, 2), unit.Fixed(f.radius.least, 2), plainFigure(Round(keep))).
		Under("gap_m", gap, "limit_m", keep).onRow(row).Beside(placeOr(line.Point.At, line.At), "the line").
		Then("set it at least %s m from the line, or ask the utility to take the line off or cover it; until then nothing is raised there", unit.Fixed(math.Ceil((keep+f.radius.least)*10)/10, 1))
}

// lineClearance is what is kept from a line beyond the reach of a fall, in metres,
// with the row that asks for it; a house that asks for more goes first.
func (c *Case) lineClearance(kv float64) (float64, *limits.CodeRow) {
	zone := c.codeRow("fall-zone")
	keep, row := c.House().LineClearance.Or(0).Metres(), zone
	if zone != nil && zone.Length.V.Metres() > keep {
		keep = zone.Length.V.Metres()
	}
	approach := c.codeRow("line-approach")
	if approach != nil {
		if k, missing := constants(approach, "up_to_kv", "inches_per_step", "kv_per_step"); missing == "" {
			m, ok := mech.ApproachSteps(kv, approach.Length.V.Metres(), k[0], k[1]*0.0254, k[2])
			if ok && m > keep {
				keep, row = m, approach
			}
		}
	}
	if keep == 0 {
		keep = defaultLineClearance.Metres()
	}
	return keep, row
}

// highestKV is the voltage of the highest lines there are in most of the world; it
// stands for one that a plan does not give.
const highestKV = 765

// checkUnlisted looks at a plan without a line. One that says how far its mast is
// from the nearest, by a reading of a length, needs no point where that is far.
func (c *Case) checkUnlisted(r *Report, up []*bom.Device) {
	keep, _ := c.lineClearance(highestKV)
	var silent []*bom.Device
	for _, d := range up {
		to := c.measuredTo(d, "power line")
		if !to.Set {
			silent = append(silent, d)
			continue
		}
		if f := c.fallOf(d); rf.Below(to.V.Metres()-f.radius.most, keep) {
			r.Unknown(to.At, d.On(), "the nearest power line is %s from %s; without its voltage and point, whether %s could fall onto it is not assessed", to.V, d.ID, d.ID).
				Then("add it as [[power_line]] with at and kv").onRow(c.codeRow("fall-zone"))
		}
	}
	if len(silent) == 0 {
		return
	}
	r.Unknown(silent[0].At, silent[0].On(), "the plan names no power line; whether %s could fall onto one is not assessed", list(ids(silent))).
		Then("add the nearest as [[power_line]] with at and kv, the service drop included; where none is near, a [[reading]] of a length from %s with at = \"power line\" says how far was looked", silent[0].ID).
		onRow(c.codeRow("fall-zone"))
}
