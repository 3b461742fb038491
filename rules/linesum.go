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

// LineSum is the loss of a line at one frequency with its addends. Where Missing
// names something, the sum is not known and Loss holds only what is.
type LineSum struct {
	Loss    rf.Loss
	Terms   []Term
	Missing []Lack
}

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
	OfCable TermKind = iota + 1
	OfPair
	OfPass  // through a passive part
	OfSteps // impedance steps, all together
)

// Lack is something that a figure needs and the plan or catalog does not give.
type Lack struct {
	What string
	At   source.Place
}

// Sum is the loss of the kinds of addend that are named.
func (s LineSum) Sum(kinds ...TermKind) rf.Loss { return s.Only(kinds...).Loss }

// Only is the sum of the kinds of addend that are named, with these alone.
func (s LineSum) Only(kinds ...TermKind) LineSum {
	out := LineSum{Missing: s.Missing}
	for _, t := range s.Terms {
		if slices.Contains(kinds, t.Kind) {
			out.Terms = append(out.Terms, t)
			out.Loss = out.Loss.Plus(t.Loss)
		}
	}
	return out
}

// adder walks a line at one frequency.
type adder struct {
	c     *Case
	f     unit.MHz
	sum   LineSum
	ohms  []float64 // impedances in the order of the line
	vswrs []float64
	whole map[*bom.Cable]bool // jumpers whose loss holds their pairs
}

// lineSum adds up a line at a frequency.
func (c *Case) lineSum(l *bom.Line, f unit.MHz) LineSum {
	a := adder{c: c, f: f, whole: map[*bom.Cable]bool{}}
	for _, s := range l.Steps {
		if s.Cable != nil && s.Cable.Part != nil && s.Cable.Part.Jumper != nil && s.Cable.Part.Jumper.Loss.Set {
			a.whole[s.Cable] = true
		}
	}
	for _, s := range l.Steps {
		switch {
		case s.Contact != nil:
			a.contact(s)
		case s.Cable != nil:
			a.cable(s.Cable)
		case s.Lead != nil:
			a.lead(s.Lead)
		case s.Pass != nil:
			a.pass(s.Pass)
		}
	}
	a.steps()
	return a.sum
}

func (a *adder) term(kind TermKind, loss rf.Loss, what string, args ...any) {
	a.sum.Terms = append(a.sum.Terms, Term{kind, fmt.Sprintf(what, args...), loss})
	a.sum.Loss = a.sum.Loss.Plus(loss)
}

func (a *adder) lack(at source.Place, what string, args ...any) {
	a.sum.Missing = append(a.sum.Missing, Lack{fmt.Sprintf(what, args...), at})
}

// meets notes the next impedance on the line; where it differs from the one
// before, there is a step.
func (a *adder) meets(ohm source.Val[float64]) {
	if !ohm.Set {
		return
	}
	if n := len(a.ohms); n > 0 && a.ohms[n-1] != ohm.V {
		if v, ok := rf.StepVSWR(a.ohms[n-1], ohm.V); ok {
			a.vswrs = append(a.vswrs, v)
		}
	}
	a.ohms = append(a.ohms, ohm.V)
}

// resumes notes an impedance that a part has matched to by itself.
func (a *adder) resumes(ohm source.Val[float64]) {
	if ohm.Set {
		a.ohms = append(a.ohms, ohm.V)
	}
}

func (a *adder) contact(s bom.Step) {
	first, second := s.Contact.A, s.Contact.B
	if s.Reverse {
		first, second = second, first
	}
	a.meets(first.Ohm)
	a.meets(second.Ohm)
	for _, n := range []*bom.Node{s.Mate.A, s.Mate.B} {
		if n.Cable != nil && a.whole[n.Cable] && (first.Name == n.Name() || second.Name == n.Name()) {
			return // the jumper's loss holds this pair
		}
	}
	var stated []unit.DB
	for _, h := range []bom.Half{first, second} {
		if h.Loss.Set {
			stated = append(stated, unit.DB(h.Loss.V))
		}
	}
	if d, ok := rf.PairLoss(a.f, stated...); ok {
		a.term(OfPair, rf.Exactly(d), "pair %s to %s", first.Name, second.Name)
	}
}

func (a *adder) cable(x *bom.Cable) {
	switch {
	case x.Part == nil:
		a.lack(x.At, "the part of %s", x.ID)
	case a.whole[x]:
		a.table(x.Part.Jumper.Loss.V, unit.Span{}, OfCable, x.At, fmt.Sprintf("jumper %s with its pairs", x.ID))
	case x.Part.Jumper != nil:
		a.meets(x.Ends[0].Ohm)
		a.run(x.Part.Jumper.Cable.V, x.Length, x.Way, x.At, fmt.Sprintf("jumper %s", x.ID), a.c.endsOf(x))
	default:
		a.meets(x.Part.Cable.Impedance)
		a.run(x.Part.ID, x.Length, x.Way, x.At, x.ID, a.c.endsOf(x))
	}
}

// run adds a length of cable at the temperatures of its way.
func (a *adder) run(part string, length source.Val[unit.MM], way []bom.Section, at source.Place, name string, ends []*bom.Place) {
	p := a.c.Firm.Catalog.Look(part)
	switch {
	case p == nil || p.Cable == nil:
		a.lack(at, "the cable of %s", name)
		return
	case !length.Set:
		a.lack(at, "the length of %s", name)
		return
	}
	fit, err := a.c.Firm.fit(p)
	if err != nil {
		a.lack(p.At, "a loss table of %s that can be used: %s", p.ID, err)
		return
	}
	cold, hot := a.c.temperatures(way, ends)
	loss, ok := fit.LossBetween(a.f, length.V, cold, hot)
	if !ok {
		a.lack(p.At, "a loss of %s beyond %s, where its table ends", p.ID, fit.Max)
		return
	}
	a.term(OfCable, loss, "%s, %s of %s", name, length.V, p.ID)
}

func (a *adder) lead(n *bom.Node) {
	l := n.Port.Lead
	if !l.InGain.V {
		var ends []*bom.Place
		if n.Device.Place != nil {
			ends = []*bom.Place{n.Device.Place}
		}
		a.run(l.Cable.V, l.Length, nil, n.Device.At, "lead of "+n.Name(), ends)
	}
}

func (a *adder) pass(p *bom.Pass) {
	name := p.Part.ID
	if p.Device != nil {
		name = p.Device.ID
	}
	a.rows(p, name)
	if p.Part.Kind.V == "adapter" {
		a.meets(p.Out.Impedance)
	} else {
		a.resumes(p.Out.Impedance)
	}
}

// rows adds the row of a passive part that holds at the frequency.
func (a *adder) rows(p *bom.Pass, name string) {
	what := fmt.Sprintf("%s, %s to %s", name, p.In.Name, p.Out.Name)
	if len(p.Rows) == 0 {
		a.lack(p.Part.At, "a path through %s from %s to %s", name, p.In.Name, p.Out.Name)
		return
	}
	for _, row := range p.Rows {
		if !row.MHz.Set || row.MHz.V.Contains(a.f) {
			a.table(row.Loss.V, row.MHz.V, OfPass, row.At, what)
			return
		}
	}
	a.lack(p.Rows[0].At, "a loss of %s outside %s", what, p.Rows[0].MHz.V)
}

func (a *adder) table(points catalog.Points, valid unit.Span, kind TermKind, at source.Place, what string) {
	d, ok := rf.Lookup(rfPoints(points), valid, a.f)
	if !ok {
		a.lack(at, "a loss of %s at %s", what, a.f)
		return
	}
	a.term(kind, rf.Exactly(d), "%s", what)
}

// steps adds what all impedance steps of the line take together.
func (a *adder) steps() {
	if len(a.vswrs) == 0 {
		return
	}
	if loss, ok := rf.MismatchRun(a.vswrs...); ok {
		a.term(OfSteps, loss, "%s", count(len(a.vswrs), "impedance step", "impedance steps"))
	}
}

func rfPoints(points catalog.Points) []rf.Point {
	out := make([]rf.Point, len(points))
	for i, p := range points {
		out[i] = rf.Point{MHz: p.MHz, DB: unit.DB(p.V)}
	}
	return out
}

// endsOf lists the places of what a cable's ends go to, for a cable whose way the
// plan leaves out.
func (c *Case) endsOf(x *bom.Cable) []*bom.Place {
	var out []*bom.Place
	for _, e := range x.Ends {
		for _, m := range e.Mates {
			if o := m.Other(e); o.Device != nil && o.Device.Place != nil {
				out = append(out, o.Device.Place)
			}
		}
	}
	return out
}

// temperatures are the coldest and the hottest that a cable meets on its way; in
// the weather, an attic and a vehicle those of the site, elsewhere 20 °C.
func (c *Case) temperatures(way []bom.Section, ends []*bom.Place) (cold, hot unit.Celsius) {
	places := ends
	if len(way) > 0 {
		places = nil
		for _, s := range way {
			places = append(places, s.Place)
		}
	}
	cold, hot = 20, 20
	for i, p := range places {
		lo, hi := c.placeTemperatures(p)
		if i == 0 {
			cold, hot = lo, hi
			continue
		}
		cold, hot = min(cold, lo), max(hot, hi)
	}
	return cold, hot
}

func (c *Case) placeTemperatures(p *bom.Place) (cold, hot unit.Celsius) {
	cold, hot = 20, 20
	switch p.Kind.V {
	case "outdoor", "attic", "vehicle-skin", "vehicle-cabin":
		cold, hot = c.Plan.Site.Coldest.Or(20), c.Plan.Site.Hottest.Or(20)
	}
	return p.Coldest.Or(cold), p.Hottest.Or(hot)
}

// fit is the attenuation curve of a cable part, fitted once.
func (f *Firm) fit(p *catalog.Part) (rf.Cable, error) {
	type fitted struct {
		cable rf.Cable
		err   error
	}
	if v, ok := f.fits.Load(p); ok {
		return v.(fitted).cable, v.(fitted).err
	}
	c, err := rf.FitCable(rfPoints(p.Cable.Loss.V), unit.MHz(p.Cable.MaxMHz.V))
	f.fits.Store(p, fitted{c, err})
	return c, err
}
