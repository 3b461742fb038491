package rules

import (
	"fmt"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

var bandPart = &Rule{
	Name:  "band/part",
	Title: "Everything on a line is made for the planned bands that pass it",
	Why: "above its highest frequency a cable or connector has losses that nobody stated, and outside its range a splitter or " +
		"arrestor may pass next to nothing",
	Basis:   []Basis{practice("a part is used inside the frequencies on its data sheet")},
	Weight:  Hold,
	Lighter: "A router without a planned band that another amplifier or router of the plan works in is a punch.",
	Check: func(c *Case, r *Report) {
		by := c.division()
		for _, d := range c.runners() {
			if d.Part.Router != nil {
				c.checkRouter(d, by, r)
			}
		}
		w := &bandWalk{c: c, ways: c.bandWays(), by: map[met]*bounded{}}
		for _, l := range c.Lines().All {
			if bands := w.ways.over(l); len(bands) > 0 {
				w.walk(l, bands)
			}
		}
		for _, x := range w.list {
			x.report(c, r)
		}
	},
}

// runOver reports whether a band runs over a line: it is meant to, and the
// amplifiers and routers at its ends work in some of it. Where one does not at all,
// that is said of that one.
func (w *bandWays) runOver(l *bom.Line, b catalog.Band) bool {
	if l.Kind == bom.Stub || !w.meant(l, b) {
		return false
	}
	for _, n := range activeEnds(l) {
		if left, known := runsWithout(n.Device, b); known && left.All() {
			return false
		}
	}
	return true
}

// over lists the planned bands that run over a line.
func (w *bandWays) over(l *bom.Line) []catalog.Band {
	out := make([]catalog.Band, 0, len(w.c.bands))
	for _, b := range w.c.Bands() {
		if w.runOver(l, b) {
			out = append(out, b)
		}
	}
	return out
}

// checkRouter holds a router against the planned bands.
func (c *Case) checkRouter(d *bom.Device, by division, r *Report) {
	listed := d.Part.Router.Bands
	if !listed.Set && len(c.Bands()) > 0 {
		r.Unknown(deviceAt(d), d.On(), "which bands %s works in is not assessed: %s lists none", d.ID, d.Part.ID).
			Then("copy the bands of its modem into the part").Beside(d.Part.At, "the part")
		return
	}
	for _, b := range c.Bands() {
		left, _ := runsWithout(d, b)
		if left.Nothing() {
			continue
		}
		f := r.Fails(deviceAt(d), d.On(), "%s (%s) does not work in %s; its bands are %s", d.ID, d.Part.ID, left, wordList(listed.V)).
			Over("left_out_mhz", left.Width(), "allowed_mhz", 0).InBand(b.Name).
			Then("%s", c.runsPlan(d.Part, b)).
			Beside(c.bandAt(b), "%s is planned here", b.Name).Beside(listed.At, "its bands")
		if other := by.elsewhere(d, b); other != "" {
			f.Lighter(Punch).Says += "; " + b.Name + " runs over " + other + " only"
		}
	}
}

func wordList(words catalog.Words) string {
	var out []string
	for _, w := range words {
		out = append(out, w.V)
	}
	return list(out)
}

// runsPlan names a part of the catalog of the same kind that works in every
// planned band.
func (c *Case) runsPlan(now *catalog.Part, b catalog.Band) string {
	drop := fmt.Sprintf("take %s out of bands", b.Name)
	p := c.Firm.pick(func(p *catalog.Part) bool {
		return p.Kind.V == now.Kind.V && countRadioPorts(p) == countRadioPorts(now) && sameClass(p, now) && c.runsAll(p)
	})
	if p == nil {
		return "no " + now.Kind.V + " like it in the catalog works in all planned bands; find one, or " + drop
	}
	return "take " + c.Firm.OnHand(p) + ", which works in all planned bands, or " + drop
}

func sameClass(a, b *catalog.Part) bool {
	if a.Amplifier == nil || b.Amplifier == nil {
		return a.Amplifier == nil && b.Amplifier == nil
	}
	return a.Amplifier.Class.V == b.Amplifier.Class.V && a.Amplifier.Mobility.V == b.Amplifier.Mobility.V
}

func (c *Case) runsAll(p *catalog.Part) bool {
	for _, b := range c.Bands() {
		if left, known := runsWithout(&bom.Device{Part: p}, b); !known || !left.Nothing() {
			return false
		}
	}
	return true
}

// bounded is one thing on the lines of a plan with the stretch of spectrum that it
// is made for, and what that leaves out of the bands that pass it.
type bounded struct {
	name   string // "C1 (GEN-RG-58)"
	on     string
	at     source.Place
	stated source.Place // of the bound, in the catalog
	covers []unit.Span
	known  bool
	lacks  string // what would have to be known
	origin string // of a bound that is not the part's own
	lefts  []leftOut

	would func(*catalog.Part) bool // a part that could take its place, but for the bands
}

// bandWalk collects the bounds that bands meet on their way.
type bandWalk struct {
	c    *Case
	ways *bandWays
	by   map[met]*bounded
	list []*bounded
}

// met tells the things that bands meet apart: a cable, a port with a lead, a device
// or a mate; of a part the way through it, of a joint the connector.
type met struct {
	thing  any
	part   *catalog.Part
	way    string
	row    source.Place
	series *catalog.Series
	ohm    float64
}

// meet notes that bands pass a thing, which is made the first time.
func (w *bandWalk) meet(key met, bands []catalog.Band, thing func() bounded) {
	x := w.by[key]
	if x == nil {
		made := thing()
		x = &made
		w.by[key] = x
		w.list = append(w.list, x)
	}
	for _, b := range bands {
		left := leavesOut(b, x.covers, x.covers)
		if !left.Nothing() && !slices.ContainsFunc(x.lefts, func(l leftOut) bool { return l.Band.Name == b.Name }) {
			x.lefts = append(x.lefts, left)
		}
	}
}

func (w *bandWalk) walk(l *bom.Line, bands []catalog.Band) {
	var mate *bom.Mate
	for _, s := range l.Steps {
		switch {
		case s.Contact != nil:
			mate = s.Mate
			w.contact(s.Contact, mate, bands)
		case s.Cable != nil:
			w.cable(s.Cable, bands)
		case s.Lead != nil:
			w.lead(s.Lead, bands)
		case s.Pass != nil:
			w.pass(s.Pass, mate, bands)
		}
	}
}

func (w *bandWalk) cable(x *bom.Cable, bands []catalog.Band) {
	part := x.Part
	if part == nil {
		return
	}
	of := part
	if part.Jumper != nil {
		of = w.c.Firm.Catalog.Look(part.Jumper.Cable.V)
	}
	if of == nil || of.Cable == nil {
		return // a jumper that states its own loss, or whose cable is not known
	}
	w.meet(met{thing: x}, bands, func() bounded {
		out := bounded{name: fmt.Sprintf("%s (%s)", x.ID, part.ID), on: x.On(), at: placeOr(x.Row.Part.At, x.At), would: w.c.likeCable(part)}
		w.c.boundCable(&out, of)
		return out
	})
}

func (w *bandWalk) lead(n *bom.Node, bands []catalog.Band) {
	of := w.c.Firm.Catalog.Look(n.Port.Lead.Cable.V)
	if of == nil || of.Cable == nil {
		return
	}
	w.meet(met{thing: n}, bands, func() bounded {
		out := bounded{name: fmt.Sprintf("the lead of %s (%s)", n.Name(), of.ID), on: n.On(), at: deviceAt(n.Device)}
		w.c.boundCable(&out, of)
		return out
	})
}

// boundCable is the stretch that a cable is made for: to the frequency it states,
// else to the end of its loss table.
func (c *Case) boundCable(x *bounded, p *catalog.Part) {
	max, at := unit.MHz(p.Cable.MaxMHz.V), p.Cable.MaxMHz.At
	if !p.Cable.MaxMHz.Set {
		fit, err := c.Firm.fit(p)
		if err != nil {
			x.stated, x.lacks = p.At, "a highest frequency of "+p.ID
			return
		}
		max, at = fit.Max, p.Cable.Loss.At
	}
	x.covers, x.known, x.stated = []unit.Span{{Lo: 0, Hi: max}}, true, at
}

// pass meets a passive device, or an adapter of the mate it belongs to.
func (w *bandWalk) pass(p *bom.Pass, mate *bom.Mate, bands []catalog.Band) {
	key := met{thing: p.Device, part: p.Part}
	switch {
	case p.Device != nil:
	case mate != nil:
		key.thing = ownerOf(mate)
	default:
		return
	}
	if key.way = p.In.Name + p.Out.Name; len(p.Rows) > 0 { // outputs that share a row are one
		key.way, key.row = "", p.Rows[0].At
	}
	w.meet(key, bands, func() bounded {
		x := bounded{name: "adapter " + p.Part.ID}
		if p.Device != nil {
			x = bounded{name: fmt.Sprintf("%s (%s)", p.Device.ID, p.Part.ID), on: p.Device.On(), at: deviceAt(p.Device)}
		} else {
			x.on, x.at = mate.On(), adapterNamedAt(mate, p.Part)
		}
		x.covers, x.known = passCovers(p)
		x.covers = joined(x.covers)
		x.would = likePassive(p.Part)
		x.lacks = fmt.Sprintf("a path of %s from %s to %s", p.Part.ID, p.In.Name, p.Out.Name)
		x.stated = p.Part.At
		if x.known {
			x.stated = p.Rows[0].At
		}
		return x
	})
}

// ownerOf is what a mate is made by: its joint, else its cable, else its port.
func ownerOf(m *bom.Mate) any {
	switch {
	case m.Joint != nil:
		return m.Joint
	case m.A.Cable != nil:
		return m.A.Cable
	case m.B.Cable != nil:
		return m.B.Cable
	}
	return m.A
}

func adapterNamedAt(m *bom.Mate, p *catalog.Part) source.Place {
	for _, a := range m.Adapters {
		if a.Part == p {
			return a.At
		}
	}
	return m.At
}

// contact meets the connector series of both halves, each once for a cable or joint.
func (w *bandWalk) contact(k *bom.Contact, m *bom.Mate, bands []catalog.Band) {
	for _, h := range [2]*bom.Half{&k.A, &k.B} {
		if !h.Face.Set || !h.Ohm.Set {
			continue
		}
		series, ok := catalog.LookSeries(h.Face.V.Series)
		if !ok {
			continue
		}
		max, known := series.LimitMHz(h.Ohm.V)
		key := met{series: series, ohm: h.Ohm.V} // one gap in the table, however many joints
		if known {
			key.thing = ownerOf(m)
		}
		w.meet(key, bands, func() bounded {
			name := fmt.Sprintf("%s of %s ohm", series.Name, plainFigure(h.Ohm.V))
			x := bounded{name: fmt.Sprintf("the joint of %s and %s (%s)", k.A.Name, k.B.Name, name), on: m.On(), at: m.At, known: known,
				lacks: "a highest frequency of " + name, origin: series.Source + ", " + limits.ProofText(series.Proof)}
			if known {
				x.covers = []unit.Span{{Lo: 0, Hi: max}}
			}
			return x
		})
	}
}

func (x *bounded) report(c *Case, r *Report) {
	switch {
	case !x.known:
		r.Unknown(x.at, x.on, "whether %s suits the planned bands is not assessed: it lacks %s", x.name, x.lacks).
			Then("%s", x.ask()).Beside(x.stated, "the part")
	case len(x.lefts) > 0:
		width := 0.0
		var out []string
		for _, l := range x.lefts {
			width += l.Width()
			out = append(out, l.String())
		}
		f := r.Fails(x.at, x.on, "%s is stated %s; that leaves out %s", x.name, x.bound(), joinClauses(out)).
			Over("left_out_mhz", width, "allowed_mhz", 0).
			Then("%s", c.insteadOf(x)).Beside(x.stated, "where that is stated")
		if x.origin != "" {
			f.By(x.origin)
		}
		if len(x.lefts) == 1 {
			f.InBand(x.lefts[0].Band.Name)
		}
	}
}

// bound is the stretch in words.
func (x *bounded) bound() string {
	if len(x.covers) == 1 && x.covers[0].Lo == 0 {
		return "up to " + x.covers[0].Hi.String()
	}
	return "for " + stretches(x.covers)
}

// joinClauses joins clauses that hold commas and "and" of their own.
func joinClauses(clauses []string) string {
	out := ""
	for i, c := range clauses {
		if i > 0 {
			out += "; "
		}
		out += c
	}
	return out
}

func bandNames(lefts []leftOut) string {
	var out []string
	for _, l := range lefts {
		out = append(out, l.Band.Name)
	}
	return list(out)
}

// ask says where the bound that is missing can be had.
func (x *bounded) ask() string {
	if x.origin != "" {
		return "ask the maker of the connector; no table of the series has it"
	}
	return "copy it from the data sheet into the part"
}
