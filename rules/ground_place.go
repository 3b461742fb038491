package rules

import (
	"math"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// What the house asks where it says nothing: the figures that codes give for
// neighbours of these cases, a cable operator's drop and a water pipe.
const (
	defaultBondLength unit.MM = 6096 // 20 ft
	defaultEntryReach unit.MM = 1524 // 5 ft
)

// figureOf prints a length of the house as its file writes it, or the default.
func figureOf(v source.Val[unit.MM], otherwise string) string {
	if !v.Set {
		return otherwise
	}
	return strings.Trim(v.At.Text(), `"`)
}

var groundLength = &Rule{
	Name:    "ground/length",
	Title:   "The way over bonds from an arrestor to its electrode is short",
	Why:     "each metre of wire adds about a microhenry, and a microhenry is a thousand volts at a thousand amperes a microsecond",
	Caution: cautionElectrician,
	Basis: []Basis{house("bond_length (20 ft where it says nothing)"),
		practice("as short and straight as can be. Article 810 of the NEC sets no length; the 20 ft of 800.100 are for a cable operator's drop in a dwelling and are borrowed here")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		if !c.Vehicle() {
			c.checkLengths(r)
		}
	},
}

// checkLengths holds the way of each arrestor; of several that share a stretch the
// longest is reported.
func (c *Case) checkLengths(r *Report) {
	limit := c.House().BondLength.Or(defaultBondLength)
	isElectrode := func(d *bom.Device) bool { return d.Kind() == "electrode" }
	last := map[*bom.Bond]*longWay{}
	var order []*bom.Bond
	lacking := map[*bom.Bond]bool{}
	for _, w := range c.bonding().wanted {
		if k := w.dev.Kind(); k != "arrestor" && k != "data-arrestor" {
			continue
		}
		bonds, end := way(c.Graph, w.dev, isElectrode, func(*bom.Bond) bool { return true })
		if end == nil {
			continue // ground/bond says so
		}
		l := measure(w.dev, end, bonds)
		if l.lacks != nil {
			if !lacking[l.lacks] {
				lacking[l.lacks] = true
				r.Unknown(l.lacks.Row.At, l.lacks.On(), "%s has no length; how long the way from %s to %s is, is not assessed", l.lacks.Row.ID, w.dev.ID, end.ID).
					Then("add length")
			}
			continue
		}
		if l.sum <= limit {
			continue
		}
		tail := bonds[len(bonds)-1]
		if last[tail] == nil {
			order = append(order, tail)
		}
		if last[tail] == nil || l.sum > last[tail].sum {
			last[tail] = l
		}
	}
	for _, b := range order {
		c.reportLong(r, last[b], limit)
	}
}

// longWay is a way over bonds with its length.
type longWay struct {
	from, end *bom.Device
	bonds     []*bom.Bond
	sum       unit.MM
	bends     int
	lacks     *bom.Bond // the first without a length
}

func measure(from, end *bom.Device, bonds []*bom.Bond) *longWay {
	l := &longWay{from: from, end: end, bonds: bonds}
	for _, b := range bonds {
		l.bends += b.Row.Bends.V
		switch {
		case b.Row.Direct.V:
		case !b.Row.Length.Set && l.lacks == nil:
			l.lacks = b
		default:
			l.sum += b.Row.Length.V
		}
	}
	return l
}

func (c *Case) reportLong(r *Report, l *longWay, limit unit.MM) {
	longest := l.bonds[0]
	var terms string
	for i, b := range l.bonds {
		if b.Row.Length.V > longest.Row.Length.V {
			longest = b
		}
		if i > 0 {
			terms += " + "
		}
		terms += b.Row.ID + " " + b.Row.Length.V.String()
	}
	f := r.Fails(placeOr(longest.Row.Length.At, longest.Row.At), longest.On(), "%s comes to %s over %s (%s); the house allows %s (bond_length)",
		l.from.ID, l.end.ID, l.sum, terms, figureOf(c.House().BondLength, "20 ft")).Over("length_m", l.sum.Metres(), "limit_m", limit.Metres()).
		Then("move %s nearer to its electrode, or bring an electrode to it and tie the two", l.from.ID)
	if l.bends > 0 {
		f.Says += ", with " + count(l.bends, "bend", "bends")
	}
	f.besides(c.codeRow("bond-straight"))
}

var groundEntry = &Rule{
	Name:    "ground/entry",
	Title:   "An arrestor sits at the entry, not somewhere inside",
	Why:     "from the entry to the arrestor the line brings the strike past whatever lies beside it",
	Caution: cautionStrike,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.20(B)", "2020", "code", "read"},
		house("entry_reach (5 ft where it says nothing, the reach that 810.21(F) gives a water pipe)"),
		practice("arrestor on a grounded panel at the entry")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		said := map[*bom.Device]bool{}
		for _, l := range c.leadIns() {
			all, xs := protectors(l), crossingsOf(l)
			for i, x := range xs {
				if by := guarding(all, xs, i); len(by) > 0 {
					c.checkInside(r, x, first(by, x), said)
				}
			}
		}
	},
}

// first is the protector that a line meets first as it comes in.
func first(by []protector, x bom.Crossing) protector {
	if x.In1st {
		return by[len(by)-1]
	}
	return by[0]
}

// checkInside holds how far behind the entry an arrestor sits.
func (c *Case) checkInside(r *Report, x bom.Crossing, p protector, said map[*bom.Device]bool) {
	d, row := p.dev, c.codeRow("discharge-place")
	if said[d] {
		return
	}
	said[d] = true
	if !d.Place.Indoors() {
		reportUnplaced(r, []*bom.Device{unplaced(d)}, row, "whether it sits at the entry")
		return
	}
	limit := c.House().EntryReach.Or(defaultEntryReach)
	at := placeOr(d.Row.Place.At, d.At)
	in, how, known := inside(x, p)
	if !known {
		r.Unknown(at, d.On(), "%s sits in %s; how far that is behind the entry is not assessed", d.ID, d.Place.ID).
			Then("give the length that lies there in way, such as %q, or the points of %s and of the entry", d.Place.ID+" 1 m", d.Place.ID).onRow(row)
		return
	}
	if in <= limit {
		return
	}
	r.Fails(at, d.On(), "%s sits in %s, %s behind the entry (%s); the house allows %s (entry_reach)", d.ID, d.Place.ID, in, how, figureOf(c.House().EntryReach, "5 ft")).
		Over("inside_m", in.Metres(), "limit_m", limit.Metres()).
		Then("move %s to the entry", d.ID).besides(row)
}

// inside is how much of a line lies indoors before a protector: by the lengths on
// its way, else at least the straight line from the entry.
func inside(x bom.Crossing, p protector) (in unit.MM, how string, known bool) {
	sum, entry, whole := indoorWay(x, p)
	if whole {
		return sum, "by its way", true
	}
	if entry == nil || !entry.Point.Set || !p.dev.Point.Set {
		return 0, "", false
	}
	return straight(entry.Point, p.dev.Point), "straight from " + entry.ID, true
}

func straight(a, b source.Val[bom.Point]) unit.MM {
	e, n, u := a.V.East-b.V.East, a.V.North-b.V.North, a.V.Up-b.V.Up
	return unit.MM(math.Round(math.Sqrt(e*e+n*n+u*u) * 1000))
}

// indoorWay adds up the stretches indoors between the outdoors of a crossing and a
// protector; whole says that there are some and each has its length. entry is the
// entry on the way, if the plan names it.
func indoorWay(x bom.Crossing, p protector) (sum unit.MM, entry *bom.Place, whole bool) {
	lo, hi := x.Outer, p.step
	if x.In1st {
		lo, hi = p.step, x.Outer
	}
	some, lacks := false, false
	add := func(l source.Val[unit.MM]) {
		some, lacks, sum = true, lacks || !l.Set, sum+l.V
	}
	for i := lo; i <= hi && i < len(x.Line.Steps); i++ {
		s := x.Line.Steps[i]
		var stretches []bom.Section
		switch {
		case s.Cable != nil && len(s.Cable.Way) == 0 && behind(x, i):
			add(s.Cable.Length)
		case s.Cable != nil && len(s.Cable.Way) == 0:
			lacks = true // nobody knows where it comes in
		case s.Cable != nil:
			stretches = s.Cable.Way
		case s.Contact != nil && s.Mate.Joint != nil:
			stretches = s.Mate.Way
		}
		for _, w := range stretches {
			if w.Place.Kind.V == "entry" {
				entry = w.Place
			} else if w.Place.Indoors() {
				add(w.Length)
			}
		}
	}
	return sum, entry, some && !lacks
}

// behind reports a step of a line that lies wholly on the indoor side of a crossing.
func behind(x bom.Crossing, step int) bool {
	if x.In1st {
		return step < x.Inner
	}
	return step > x.Inner
}
