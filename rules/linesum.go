package rules

import (
	"fmt"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// LineSum is the loss of a line at one frequency. Where Missing names something,
// the sum is not known and Loss holds only what is.
type LineSum struct {
	Loss    rf.Loss
	Missing []Lack

	kinds []TermKind // that count; nil: all
	*added
}

// added is a line as it was added up at one frequency.
type added struct {
	of      *recipe
	at      unit.MHz
	all     rf.Loss
	missing []Lack
	by      [kindsOfTerm]rf.Loss // by kind of addend
}

func (a *added) sum() LineSum { return LineSum{Loss: a.all, Missing: a.missing, added: a} }

// Known reports whether every addend is known.
func (s LineSum) Known() bool { return len(s.Missing) == 0 }

// Term is one addend of a sum.
type Term struct {
	Kind TermKind
	What string // "C1, 18.5 m of CX-10"
	Loss rf.Loss
}

// TermKind sorts the addends of a line.
type TermKind int

const (
	OfCable TermKind = iota
	OfPair
	OfPass  // through a passive part
	OfSteps // impedance steps, all together

	kindsOfTerm
)

// Lack is something that a figure needs and the plan or catalog does not give.
type Lack struct {
	What string
	At   source.Place
}

// Sum is the loss of the kinds of addend that are named.
func (s LineSum) Sum(kinds ...TermKind) rf.Loss {
	var out rf.Loss
	if s.added == nil {
		return out
	}
	for _, k := range kinds {
		out = out.Plus(s.by[k])
	}
	return out
}

// Only is the sum of the kinds of addend that are named, with these alone.
func (s LineSum) Only(kinds ...TermKind) LineSum {
	s.Loss, s.kinds = s.Sum(kinds...), kinds
	return s
}

// Terms are the addends of the sum in the order of the line. They are put into
// words here, because most sums are never shown.
func (s LineSum) Terms() []Term {
	if s.added == nil {
		return nil
	}
	var out []Term
	for _, a := range s.of.addends {
		loss, ok := a.loss(s.at)
		if ok && (s.kinds == nil || slices.Contains(s.kinds, a.kind)) {
			out = append(out, Term{a.kind, a.what(), loss})
		}
	}
	return out
}

// addend is one thing on a line that takes something. lack says what is missing
// where loss has no figure at a frequency.
type addend struct {
	kind TermKind
	what func() string
	loss func(unit.MHz) (rf.Loss, bool)
	lack func(unit.MHz) Lack
}

// recipe is what a line is made of, as far as it does not depend on frequency. It
// is written once for a line and added up for each frequency.
type recipe struct {
	c       *Case
	addends []addend
	lacks   []Lack // at every frequency

	mhz  []unit.MHz // at which it has been added up
	sums []added    // at each of them

	ohms  []float64 // impedances in the order of the line
	vswrs []float64
	whole map[*bom.Cable]bool // jumpers whose loss holds their pairs
}

// recipeOf writes down what a line is made of.
func (c *Case) recipeOf(l *bom.Line) *recipe {
	most := 6 * len(c.bands) // by bandPoints; what else is asked for makes room by itself
	r := &recipe{c: c, mhz: make([]unit.MHz, 0, most), sums: make([]added, 0, most), whole: map[*bom.Cable]bool{}}
	for _, s := range l.Steps {
		if s.Cable != nil && s.Cable.Part != nil && s.Cable.Part.Jumper != nil && s.Cable.Part.Jumper.Loss.Set {
			r.whole[s.Cable] = true
		}
	}
	for _, s := range l.Steps {
		switch {
		case s.Contact != nil:
			r.contact(s)
		case s.Cable != nil:
			r.cable(s.Cable)
		case s.Lead != nil:
			r.lead(s.Lead)
		case s.Pass != nil:
			r.pass(s.Pass)
		}
	}
	r.steps()
	return r
}

// sum adds the line up at a frequency, once for each.
func (r *recipe) sum(f unit.MHz) LineSum {
	if i := slices.Index(r.mhz, f); i >= 0 {
		return r.sums[i].sum()
	}
	s := added{of: r, at: f, missing: slices.Clip(r.lacks)}
	for i := range r.addends {
		a := &r.addends[i]
		loss, ok := a.loss(f)
		if !ok {
			s.missing = append(s.missing, a.lack(f))
			continue
		}
		s.by[a.kind] = s.by[a.kind].Plus(loss)
		s.all = s.all.Plus(loss)
	}
	r.mhz, r.sums = append(r.mhz, f), append(r.sums, s)
	return r.sums[len(r.sums)-1].sum()
}

func (r *recipe) add(a addend) { r.addends = append(r.addends, a) }

func (r *recipe) lack(at source.Place, what string, args ...any) {
	r.lacks = append(r.lacks, Lack{fmt.Sprintf(what, args...), at})
}

// meets notes the next impedance on the line; where it differs from the one
// before, there is a step.
func (r *recipe) meets(ohm source.Val[float64]) {
	if !ohm.Set {
		return
	}
	if n := len(r.ohms); n > 0 && r.ohms[n-1] != ohm.V {
		if v, ok := rf.StepVSWR(r.ohms[n-1], ohm.V); ok {
			r.vswrs = append(r.vswrs, v)
		}
	}
	r.ohms = append(r.ohms, ohm.V)
}

// resumes notes an impedance that a part has matched to by itself.
func (r *recipe) resumes(ohm source.Val[float64]) {
	if ohm.Set {
		r.ohms = append(r.ohms, ohm.V)
	}
}

func (r *recipe) contact(s bom.Step) {
	first, second := s.Contact.A, s.Contact.B
	if s.Reverse {
		first, second = second, first
	}
	r.meets(first.Ohm)
	r.meets(second.Ohm)
	for _, n := range []*bom.Node{s.Mate.A, s.Mate.B} {
		if n.Cable != nil && r.whole[n.Cable] && (first.Name == n.Name() || second.Name == n.Name()) {
			return // the jumper's loss holds this pair
		}
	}
	var stated []unit.DB
	for _, h := range []bom.Half{first, second} {
		if h.Loss.Set {
			stated = append(stated, unit.DB(h.Loss.V))
		}
	}
	what := func() string { return "pair " + first.Name + " to " + second.Name }
	r.add(addend{kind: OfPair, what: what,
		loss: func(f unit.MHz) (rf.Loss, bool) {
			d, ok := rf.PairLoss(f, stated...)
			return rf.Exactly(d), ok
		},
		lack: func(f unit.MHz) Lack { return Lack{fmt.Sprintf("a loss of %s at %s", what(), f), s.Mate.At} }})
}

func (r *recipe) cable(x *bom.Cable) {
	switch {
	case x.Part == nil:
		r.lack(x.At, "the part of %s", x.ID)
	case r.whole[x]:
		r.table(x.Part.Jumper.Loss.V, unit.Span{}, OfCable, x.At, func() string { return "jumper " + x.ID + " with its pairs" })
	case x.Part.Jumper != nil:
		r.meets(x.Ends[0].Ohm)
		r.run(x.Part.Jumper.Cable.V, x.Length, x.Way, x.At, "jumper "+x.ID, r.c.endsOf(x))
	default:
		r.meets(x.Part.Cable.Impedance)
		r.run(x.Part.ID, x.Length, x.Way, x.At, x.ID, r.c.endsOf(x))
	}
}

// run adds a length of cable at the temperatures of its way.
func (r *recipe) run(part string, length source.Val[unit.MM], way []bom.Section, at source.Place, name string, ends []*bom.Place) {
	p := r.c.Firm.Catalog.Look(part)
	switch {
	case p == nil || p.Cable == nil:
		r.lack(at, "the cable of %s", name)
		return
	case !length.Set:
		r.lack(at, "the length of %s", name)
		return
	}
	fit, err := r.c.Firm.fit(p)
	if err != nil {
		r.lack(p.At, "a loss table of %s that can be used: %s", p.ID, err)
		return
	}
	cold, hot := r.c.temperatures(way, ends)
	r.add(addend{kind: OfCable,
		what: func() string { return fmt.Sprintf("%s, %s of %s", name, length.V, p.ID) },
		loss: func(f unit.MHz) (rf.Loss, bool) { return fit.LossBetween(f, length.V, cold, hot) },
		lack: func(unit.MHz) Lack {
			return Lack{fmt.Sprintf("a loss of %s beyond %s, where its table ends", p.ID, fit.Max), p.At}
		}})
}

func (r *recipe) lead(n *bom.Node) {
	l := n.Port.Lead
	if !l.InGain.V {
		var ends []*bom.Place
		if n.Device.Place != nil {
			ends = []*bom.Place{n.Device.Place}
		}
		r.run(l.Cable.V, l.Length, nil, n.Device.At, "lead of "+n.Name(), ends)
	}
}

func (r *recipe) pass(p *bom.Pass) {
	name := p.Part.ID
	if p.Device != nil {
		name = p.Device.ID
	}
	r.rows(p, name)
	if p.Part.Kind.V == "adapter" {
		r.meets(p.Out.Impedance)
	} else {
		r.resumes(p.Out.Impedance)
	}
}

// rows adds a passive part by the row that holds at the frequency.
func (r *recipe) rows(p *bom.Pass, name string) {
	what := func() string { return name + ", " + p.In.Name + " to " + p.Out.Name }
	switch len(p.Rows) {
	case 0:
		r.lack(p.Part.At, "a path through %s from %s to %s", name, p.In.Name, p.Out.Name)
		return
	case 1:
		if !p.Rows[0].MHz.Set {
			r.table(p.Rows[0].Loss.V, unit.Span{}, OfPass, p.Rows[0].At, what)
			return
		}
	}
	points := make([][]rf.Point, len(p.Rows))
	for i, row := range p.Rows {
		points[i] = rfPoints(row.Loss.V)
	}
	holds := func(f unit.MHz) int {
		return slices.IndexFunc(p.Rows, func(row *catalog.Path) bool { return !row.MHz.Set || row.MHz.V.Contains(f) })
	}
	r.add(addend{kind: OfPass, what: what,
		loss: func(f unit.MHz) (rf.Loss, bool) {
			i := holds(f)
			if i < 0 {
				return rf.Loss{}, false
			}
			d, ok := rf.Lookup(points[i], p.Rows[i].MHz.V, f)
			return rf.Exactly(d), ok
		},
		lack: func(f unit.MHz) Lack {
			if i := holds(f); i >= 0 {
				return Lack{fmt.Sprintf("a loss of %s at %s", what(), f), p.Rows[i].At}
			}
			return Lack{fmt.Sprintf("a loss of %s outside %s", what(), p.Rows[0].MHz.V), p.Rows[0].At}
		}})
}

func (r *recipe) table(points catalog.Points, valid unit.Span, kind TermKind, at source.Place, what func() string) {
	table := rfPoints(points)
	r.add(addend{kind: kind, what: what,
		loss: func(f unit.MHz) (rf.Loss, bool) {
			d, ok := rf.Lookup(table, valid, f)
			return rf.Exactly(d), ok
		},
		lack: func(f unit.MHz) Lack { return Lack{fmt.Sprintf("a loss of %s at %s", what(), f), at} }})
}

// steps adds what all impedance steps of the line take together.
func (r *recipe) steps() {
	if len(r.vswrs) == 0 {
		return
	}
	loss, ok := rf.MismatchRun(r.vswrs...)
	if !ok {
		return
	}
	r.add(addend{kind: OfSteps,
		what: func() string { return count(len(r.vswrs), "impedance step", "impedance steps") },
		loss: func(unit.MHz) (rf.Loss, bool) { return loss, true }})
}

func rfPoints(points catalog.Points) []rf.Point {
	out := make([]rf.Point, len(points))
	for i, p := range points {
		out[i] = rf.Point{MHz: p.MHz, DB: unit.DB(p.V)}
	}
	return out
}
