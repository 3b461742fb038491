package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// apart is how far two ways between the same ports must lie apart in loss to be
// one way and a leak, in dB. At 20 dB the weaker one moves the level by 0.9 dB at
// most, 20·log10(1 − 0.1) (calculated).
const apart = 20

var mateLoop = &Rule{
	Name:  "mate/loop",
	Title: "In no planned band do two ways of like loss lead from one port to another",
	Why:   "a signal that comes over two ways cancels itself here and doubles itself there, by frequency; no level in the budget is then worth anything",
	Basis: []Basis{practice("two paths less than 20 dB apart, band by band: branches split by band and joined again are one way in each band")},

	Weight: Hold,
	Check: func(c *Case, r *Report) {
		if !c.Lines().Whole {
			r.Fails(c.JobAt(), "job", "the lines of this plan are a tangle: there are more ways through its passive parts than can be followed").
				Then("look for splitters whose outputs are joined to each other")
			return
		}
		rings := c.rings()
		for _, g := range rings {
			c.checkRing(r, g)
		}
		c.checkClosed(r, rings)
	},
}

// ring is a set of ways from one port to another that have nothing in common in
// between.
type ring struct {
	part, meet string // "split.in": where the ways part, and where they meet again
	ways       []branch
	passed     []*bom.Device
}

// branch is one way of a ring, with a line that takes it.
type branch struct {
	line *bom.Line
	via  string // its first cable
	on   string // what findings about it stand on
	at   source.Place
}

// rings finds where lines between the same two ports part and meet. Each line is
// held against the first of its kind; the legs behind a ring share it, and count it
// once.
func (c *Case) rings() []*ring {
	type ends struct{ from, to *bom.Node }
	var out []*ring
	first := map[ends]*bom.Line{}
	known := map[string]*ring{}
	for _, l := range c.Lines().All {
		base := first[ends{l.From, l.To}]
		if base == nil {
			first[ends{l.From, l.To}] = l
			continue
		}
		a, b, ok := branches(base, l)
		if !ok {
			continue
		}
		key := a.from + " " + a.to
		g := known[key]
		if g == nil {
			g = &ring{part: a.from, meet: a.to}
			g.add(a)
			known[key] = g
			out = append(out, g)
		}
		g.add(b)
	}
	return out
}

// stretch is the part of a line between two ports.
type stretch struct {
	line     *bom.Line
	from, to string
	steps    []bom.Step
}

// branches cuts off what two lines have in common at their ends; false where the
// rest has something in common still, and so is more than one ring.
func branches(la, lb *bom.Line) (a, b stretch, ok bool) {
	a = stretch{la, la.From.Name(), la.To.Name(), la.Steps}
	b = stretch{lb, a.from, a.to, lb.Steps}
	for len(a.steps) > 0 && len(b.steps) > 0 && sameStep(a.steps[0], b.steps[0]) {
		a.steps, b.steps = a.steps[1:], b.steps[1:]
	}
	for len(a.steps) > 0 && len(b.steps) > 0 && sameStep(a.steps[len(a.steps)-1], b.steps[len(b.steps)-1]) {
		a.steps, b.steps = a.steps[:len(a.steps)-1], b.steps[:len(b.steps)-1]
	}
	if len(a.steps) == 0 || len(b.steps) == 0 || sharesMate(a.steps, b.steps) {
		return a, b, false
	}
	if p := a.steps[0].Pass; p != nil && p.Device != nil {
		a.from = p.Device.ID + "." + p.In.Name
	}
	if p := a.steps[len(a.steps)-1].Pass; p != nil && p.Device != nil {
		a.to = p.Device.ID + "." + p.Out.Name
	}
	return a, b, true
}

func sharesMate(a, b []bom.Step) bool {
	seen := map[*bom.Mate]bool{}
	for _, s := range a {
		if s.Mate != nil {
			seen[s.Mate] = true
		}
	}
	for _, s := range b {
		if s.Mate != nil && seen[s.Mate] {
			return true
		}
	}
	return false
}

// add puts a branch into the ring, unless a line before has taken it.
func (g *ring) add(b stretch) {
	w := branch{line: b.line, via: "a direct joint", on: b.line.On(), at: b.line.At()}
	for i := len(b.steps) - 1; i >= 0; i-- {
		switch s := b.steps[i]; {
		case s.Cable != nil:
			w.via, w.on, w.at = s.Cable.ID, s.Cable.On(), s.Cable.At
		case s.Pass != nil && s.Pass.Device != nil:
			g.passed = append(g.passed, s.Pass.Device)
		}
	}
	for _, have := range g.ways {
		if have.via == w.via {
			return
		}
	}
	g.ways = append(g.ways, w)
}

func sameStep(a, b bom.Step) bool {
	switch {
	case a.Pass != nil && b.Pass != nil:
		return a.Pass.Device == b.Pass.Device && a.Pass.Part == b.Pass.Part && a.Pass.In == b.Pass.In && a.Pass.Out == b.Pass.Out
	case a.Contact != nil && b.Contact != nil:
		return a.Mate == b.Mate && *a.Contact == *b.Contact
	}
	return a.Cable == b.Cable && a.Lead == b.Lead && a.Pass == b.Pass && a.Contact == b.Contact
}

// checkRing compares the ways of a ring band by band.
func (c *Case) checkRing(r *Report, g *ring) {
	var worst nearPair
	var lacks []Lack
	var bands []string
	for _, b := range c.bands {
		n, missing := c.nearest(g, b)
		lacks = append(lacks, missing...)
		if n.found && rf.Below(n.apart, apart) {
			bands = append(bands, b.Name)
			if !worst.found || n.apart < worst.apart {
				worst = n
			}
		}
	}
	if len(c.bands) == 0 {
		lacks = []Lack{{"the planned bands", c.JobAt()}}
	}
	last := g.ways[len(g.ways)-1]
	switch {
	case worst.found:
		r.Fails(worst.b.at, worst.b.on, "%s ways lead from %s to %s: in %s those over %s and %s are %s dB apart (at %s), %d dB or more is expected",
			howMany(len(g.ways)), g.part, g.meet, list(bands), worst.a.via, worst.b.via, unit.Fixed(worst.apart, 2), worst.at, apart).
			Then("leave one way, or keep them apart by band with a diplexer at each end").
			Under("apart_db", worst.apart, "limit_db", apart)
	case len(lacks) > 0:
		r.Unknown(last.at, last.on, "%s ways lead from %s to %s, the last over %s; how far apart they are is not assessed: it lacks %s",
			howMany(len(g.ways)), g.part, g.meet, last.via, lackWords(lacks)).
			Then("add what is missing, or leave one way").Beside(lacks[0].At, "what it lacks")
	}
}

func howMany(n int) string {
	if n == 2 {
		return "two"
	}
	return fmt.Sprint(n)
}

// nearPair is the pair of ways of a ring that lie closest to each other in a band.
type nearPair struct {
	found bool
	apart float64 // dB
	at    unit.MHz
	a, b  branch
}

// nearest looks for that pair over the edges and middles of a band. A way that some
// part on it stops is none at that frequency.
func (c *Case) nearest(g *ring, b catalog.Band) (nearPair, []Lack) {
	var best nearPair
	var lacks []Lack
	for _, f := range bandPoints(b) {
		var open []branch
		for _, w := range g.ways {
			if !stops(w.line, f) {
				open = append(open, w)
			}
		}
		for i, y := range open {
			for _, x := range open[:i] {
				sx, sy := c.Sum(x.line, f), c.Sum(y.line, f)
				if lacks = append(append(lacks, sx.Missing...), sy.Missing...); !sx.Known() || !sy.Known() {
					continue
				}
				if d := math.Abs(float64(sx.Loss.Nominal - sy.Loss.Nominal)); !best.found || d < best.apart {
					best = nearPair{true, d, f, x, y}
				}
			}
		}
	}
	return best, lacks
}

// stops reports whether some part on a line has no way through at a frequency.
func stops(l *bom.Line, f unit.MHz) bool {
	for _, s := range l.Steps {
		if s.Pass != nil && len(s.Pass.Rows) > 0 && rowAt(s.Pass.Rows, f) == nil {
			return true
		}
	}
	return false
}

// rowAt is the row that holds at a frequency, or nil.
func rowAt(rows []*catalog.Path, f unit.MHz) *catalog.Path {
	for _, row := range rows {
		if !row.MHz.Set || row.MHz.V.Contains(f) {
			return row
		}
	}
	return nil
}
