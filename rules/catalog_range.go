package rules

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var catalogRange = &Rule{
	Name:   "catalog/range",
	Title:  "The figures of a part agree with each other",
	Why:    "a range that runs backwards covers nothing, and of two rows for one frequency nobody knows which is meant",
	Basis:  []Basis{{Document: "the project's file formats", Kind: "house"}},
	Weight: Hold,
	Grave:  true, // limits are computed from these figures
	CheckFiles: func(f *Firm, r *Report) {
		for _, p := range f.Catalog.Own() {
			for _, check := range []func(*catalog.Part, *Report){checkCommon, checkTables, checkPaths, checkAntennaRanges, checkAmplifierRows, checkArrestorPorts} {
				check(p, r)
			}
		}
	},
}

// checkCommon holds the pairs of numbers that any kind of part may have.
func checkCommon(p *catalog.Part, r *Report) {
	pair := func(v source.Val[[2]float64], what, unitName string, equalDoes bool) {
		if !v.Set || v.V[0] < v.V[1] || equalDoes && v.V[0] == v.V[1] {
			return
		}
		partFails(r, p, v.At, "%s: %s runs from %s to %s %s; the lower figure comes first", p.ID, what, plainFigure(v.V[0]), plainFigure(v.V[1]), unitName).
			Then("put the lower figure first")
	}
	pair(p.AmbientC, "ambient_c", "°C", false)
	for _, l := range []*catalog.Load{ampLoad(p), routerLoad(p)} {
		if l != nil {
			pair(l.Volts, "volts", "V", true)
		}
	}
	if p.Antenna != nil {
		pair(p.Antenna.MastMM, "mast_mm", "mm", true)
	}
	if p.Mount != nil {
		pair(p.Mount.MastMM, "mast_mm", "mm", true)
	}
}

func ampLoad(p *catalog.Part) *catalog.Load {
	if p.Amplifier == nil {
		return nil
	}
	return p.Amplifier.Load
}

func routerLoad(p *catalog.Part) *catalog.Load {
	if p.Router == nil {
		return nil
	}
	return p.Router.Load
}

// checkTables holds the loss tables of cables, jumpers and paths.
func checkTables(p *catalog.Part, r *Report) {
	if c := p.Cable; c != nil && c.Loss.Set {
		checkPoints(p, c.Loss, r)
		top := c.Loss.V[len(c.Loss.V)-1].MHz
		switch {
		case rising(c.Loss.V) && !above(c.Loss.V) && !single(c.Loss.V):
			partFails(r, p, c.Loss.At, "the loss table of %s has a point at 0 MHz or of 0 dB; no cable has one", p.ID).Then("compare it with the data sheet")
		case c.MaxMHz.Set && rf.Exceeds(float64(top), c.MaxMHz.V):
			partFails(r, p, c.MaxMHz.At, "%s: max_mhz is %s, the loss table goes on to %s", p.ID, plainFigure(c.MaxMHz.V), top).
				Over("table_mhz", float64(top), "max_mhz", c.MaxMHz.V).Beside(c.Loss.At, "the table").Then("compare both with the data sheet")
		}
	}
	if j := p.Jumper; j != nil && j.Loss.Set {
		checkPoints(p, j.Loss, r)
	}
	for i := range p.Paths {
		if p.Paths[i].Loss.Set {
			checkPoints(p, p.Paths[i].Loss, r)
		}
	}
}

func checkPoints(p *catalog.Part, t source.Val[catalog.Points], r *Report) {
	for i := 1; i < len(t.V); i++ {
		if a, b := t.V[i-1].MHz, t.V[i].MHz; !(a < b) {
			partFails(r, p, t.At, "a loss table of %s has %s after %s; frequencies rise from point to point", p.ID, b, a).
				Then("put the points in order, each frequency once")
			return
		}
	}
}

func rising(points catalog.Points) bool {
	for i := 1; i < len(points); i++ {
		if !(points[i-1].MHz < points[i].MHz) {
			return false
		}
	}
	return true
}

// above reports that every point is above 0 MHz and above 0 dB. One number for
// every frequency is a point at 0 MHz.
func above(points catalog.Points) bool {
	return single(points) || !slices.ContainsFunc(points, func(p catalog.Point) bool { return !(p.MHz > 0 && p.V > 0) })
}

func single(points catalog.Points) bool { return len(points) == 1 && points[0].MHz == 0 }

// checkPaths holds that the ways through a part lead from port to port, each
// frequency by one row.
func checkPaths(p *catalog.Part, r *Report) {
	for i := range p.Paths {
		w := &p.Paths[i]
		checkSpan(p, w.MHz, r)
		checkPort(p, w.From, r)
		for _, to := range w.To.V {
			to.At = placeOr(to.At, w.To.At) // a single port has the place of its key's value
			checkPort(p, to, r)
			if to.Set && to.V == w.From.V {
				partFails(r, p, to.At, "a path of %s leads from %s to itself", p.ID, to.V).Then("name the port at the other end")
			}
			checkOneRow(p, w, to.V, p.Paths[:i], r)
		}
	}
}

// checkOneRow holds that no earlier row gives another loss for the same way and
// frequency.
func checkOneRow(p *catalog.Part, w *catalog.Path, to string, before []catalog.Path, r *Report) {
	for i := range before {
		b := &before[i]
		joins := b.From.V == w.From.V && catalog.Has(b.To, to) || b.From.V == to && catalog.Has(b.To, w.From.V)
		common := pathSpan(b).Overlap(pathSpan(w))
		if !joins || common.Empty() || slices.Equal(b.Loss.V, w.Loss.V) {
			continue
		}
		partFails(r, p, placeOr(w.MHz.At, w.At), "%s has two losses from %s to %s over %s", p.ID, w.From.V, to, common).
			Then("keep one row for each stretch").Beside(b.At, "the other row")
		return
	}
}

func pathSpan(w *catalog.Path) unit.Span {
	if w.MHz.Set {
		return w.MHz.V
	}
	return everything
}

func checkPort(p *catalog.Part, name source.Val[string], r *Report) {
	if !name.Set || p.Port(name.V) != nil {
		return
	}
	names := p.PortNames()
	do := "its ports are " + strings.Join(names, ", ")
	switch near := source.Nearest(name.V, names); {
	case near != "":
		do = "did you mean " + near + "?"
	case len(names) == 0:
		do = "describe its ports"
	}
	partFails(r, p, name.At, "%s has no port %s", p.ID, source.Quote(name.V)).Then("%s", do)
}

func checkSpan(p *catalog.Part, s source.Val[unit.Span], r *Report) {
	if !s.Set || !s.V.Empty() {
		return
	}
	partFails(r, p, s.At, "%s: mhz runs from %s to %s; the lower frequency comes first, and a stretch has a width", p.ID, plainFigure(float64(s.V.Lo)), s.V.Hi).
		Then("put the lower frequency first")
}

// checkAntennaRanges holds that a port has one gain at each frequency.
func checkAntennaRanges(p *catalog.Part, r *Report) {
	if p.Antenna == nil {
		return
	}
	ranges := p.Antenna.Ranges
	for i := range ranges {
		x := &ranges[i]
		checkSpan(p, x.MHz, r)
		for _, port := range x.Ports.V {
			checkPort(p, port, r)
		}
		for j := range ranges[:i] {
			y := &ranges[j]
			common := x.MHz.V.Overlap(y.MHz.V)
			if common.Empty() || x.Gain.V == y.Gain.V || !sharePort(x, y) {
				continue
			}
			partFails(r, p, x.MHz.At, "two ranges of %s give %s dBi and %s dBi over %s", p.ID, plainFigure(y.Gain.V), plainFigure(x.Gain.V), common).
				Then("let each range end where the next begins, or name the ports that it belongs to").Beside(y.MHz.At, "the other range")
			break
		}
	}
}

func sharePort(a, b *catalog.Range) bool {
	if !a.Ports.Set || !b.Ports.Set {
		return true
	}
	return slices.ContainsFunc(a.Ports.V, func(v source.Val[string]) bool { return catalog.Has(b.Ports, v.V) })
}

// checkAmplifierRows holds the rows of an amplifier against its ports and each
// other.
func checkAmplifierRows(p *catalog.Part, r *Report) {
	a := p.Amplifier
	if a == nil {
		return
	}
	if a.MaxIn.Set && a.DamageIn.Set && rf.Exceeds(a.MaxIn.V, a.DamageIn.V) {
		partFails(r, p, a.MaxIn.At, "%s takes %s dBm without overload and is damaged by %s dBm", p.ID, plainFigure(a.MaxIn.V), plainFigure(a.DamageIn.V)).
			Over("max_in_dbm", a.MaxIn.V, "damage_in_dbm", a.DamageIn.V).Beside(a.DamageIn.At, "damage_in_dbm").Then("compare both with the data sheet")
	}
	for i := range a.Bands {
		for j := range a.Bands[:i] {
			if a.Bands[i].Band.V == a.Bands[j].Band.V && a.Bands[i].Band.Set {
				partFails(r, p, a.Bands[i].Band.At, "%s has two rows for %s", p.ID, a.Bands[i].Band.V).Then("keep one").Beside(a.Bands[j].Band.At, "the other row")
			}
		}
	}
	checkSides(p, r)
	for i := range a.Kits {
		checkKitRow(p, &a.Kits[i], r)
	}
}

// checkSides asks which side each radio port of an amplifier is on: without it
// nobody can tell a feed from a leg.
func checkSides(p *catalog.Part, r *Report) {
	for i := range p.Ports {
		q := &p.Ports[i]
		if q.Use.Or("cellular") == "cellular" && !q.Side.Set {
			partUnknowable(r, p, q.At, "what is radiated from %s of %s is not assessed: the port has no side", q.Name, p.ID).
				Then("add side, donor or server")
		}
	}
}

func checkKitRow(p *catalog.Part, kit *catalog.Kit, r *Report) {
	if kit.Side.Set && !slices.ContainsFunc(p.Ports, func(q catalog.Port) bool { return q.Side.V == kit.Side.V || q.RF() && !q.Side.Set }) {
		partFails(r, p, kit.Side.At, "a kit row of %s is for its %s side, and no port is on it", p.ID, kit.Side.V).Then("add side to the ports, or correct the row")
	}
	if !kit.Antenna.Set && !kit.MaxGain.Set {
		partFails(r, p, kit.At, "a kit row of %s names no antenna and no max_gain_dbi", p.ID).Then("say what it is certified with")
	}
	for _, b := range kit.Bands.V {
		if band, ok := catalog.LookBand(b.V); ok && len(p.Amplifier.Bands) > 0 && listLeavesOut(band, ampBands(p.Amplifier)).All() {
			partFails(r, p, b.At, "a kit row of %s is for %s, and the amplifier has no row for it", p.ID, b.V).Then("correct the row, or add the band")
		}
	}
}

// checkArrestorPorts holds that an arrestor has the two ports that the format
// gives it: which of them faces the antenna must be known.
func checkArrestorPorts(p *catalog.Part, r *Report) {
	if p.Arrestor == nil {
		return
	}
	for _, name := range []string{"line", "gear"} {
		if p.Port(name) == nil {
			partFails(r, p, p.At, "the arrestor %s has no port %s; its ports are called line, toward the antenna, and gear", p.ID, name).
				Then("rename the port, or add %s", name)
		}
	}
}
