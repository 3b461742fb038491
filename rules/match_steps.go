package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// ohmStep is one place on a line where the impedance changes.
type ohmStep struct {
	from, to  string // what meets
	a, b      float64
	at        source.Place
	on        string
	key       stepKey
	inside    string // the adapter that it lies inside, if any
	elsewhere bool   // another finding says what is wrong there
}

// says names the two sides of the step.
func (s ohmStep) says() string {
	if s.inside != "" {
		return fmt.Sprintf("adapter %s goes from %s to %s ohm", s.inside, plainFigure(s.a), plainFigure(s.b))
	}
	return fmt.Sprintf("%s is %s ohm and %s is %s ohm", s.from, plainFigure(s.a), s.to, plainFigure(s.b))
}

// stepKey is the same for a step from whichever side a line comes to it.
type stepKey struct {
	low, high string
	at        source.Place
}

// tracer follows the impedance along a line. It takes what meets in the order of
// the line, as the line's sum does.
type tracer struct {
	steps []ohmStep
	lacks []Lack // What is the thing that findings stand on

	name string // what the line has come through last
	ohm  float64
	mate *bom.Mate // the last one, whose adapters may come next
}

// ohmSteps lists where the impedance changes along a line, and the cables whose
// impedance nobody knows.
func ohmSteps(l *bom.Line) ([]ohmStep, []Lack) {
	t := &tracer{}
	for _, s := range l.Steps {
		switch {
		case s.Contact != nil:
			t.contact(s)
		case s.Cable != nil:
			t.cable(s.Cable)
		case s.Pass != nil:
			t.pass(s.Pass)
		}
	}
	return t.steps, t.lacks
}

// meets notes the next impedance; where it differs from the one before there is a
// step. One that is not known is passed over.
func (t *tracer) meets(name string, ohm source.Val[float64], at source.Place, on, inside string) {
	if !ohm.Set {
		return
	}
	if t.ohm != 0 && t.ohm != ohm.V {
		key := stepKey{min(t.name, name), max(t.name, name), at}
		t.steps = append(t.steps, ohmStep{from: t.name, to: name, a: t.ohm, b: ohm.V, at: at, on: on, key: key, inside: inside})
	}
	t.name, t.ohm = name, ohm.V
}

// harms reports a pair in which two impedances of one series harm a contact.
func harms(x bom.Contact) bool {
	if !x.A.Face.Set || !x.B.Face.Set {
		return false
	}
	fit := catalog.Meet(x.A.Face.V, x.B.Face.V, x.A.Ohm.V, x.B.Ohm.V).Fit
	return fit == catalog.ThinSocket || fit == catalog.LoosePin
}

// lacking reports a mate one of whose ends no connector can be found for.
func lacking(m *bom.Mate) bool {
	for _, n := range []*bom.Node{m.A, m.B} {
		if n.Cable != nil && n.Cable.Part != nil && n.Cable.Part.Cable != nil && n.Fit == nil && lacksConnector(n) {
			return true
		}
	}
	return false
}

func (t *tracer) contact(s bom.Step) {
	first, second := s.Contact.A, s.Contact.B
	if s.Reverse {
		first, second = second, first
	}
	t.mate = s.Mate
	at := touching{mate: s.Mate, index: contactIndex(s)}.at()
	n := len(t.steps)
	t.meets(first.Name, first.Ohm, at, s.Mate.On(), "")
	t.meets(second.Name, second.Ohm, at, s.Mate.On(), "")
	for i := range t.steps[n:] {
		t.steps[n+i].elsewhere = harms(*s.Contact) || lacking(s.Mate)
	}
}

// contactIndex is the number of a contact within its mate.
func contactIndex(s bom.Step) int {
	contacts := s.Mate.Contacts()
	for i := range contacts {
		if &contacts[i] == s.Contact {
			return i
		}
	}
	return 0
}

func (t *tracer) cable(x *bom.Cable) {
	ohm := x.Ends[0].Ohm
	if x.Part != nil && x.Part.Cable != nil {
		ohm = x.Part.Cable.Impedance
	}
	if x.Part != nil && !ohm.Set {
		t.lacks = append(t.lacks, Lack{x.On(), x.At})
	}
	t.meets(x.ID, ohm, x.At, x.On(), "")
}

func (t *tracer) pass(p *bom.Pass) {
	name, at, on := p.Part.ID, source.Place{}, ""
	if p.Device != nil {
		name, at, on = p.Device.ID, p.Device.At, p.Device.On()
	} else {
		at, on = t.adapter(p), t.mate.On()
	}
	t.meets(name+"."+p.In.Name, p.In.Impedance, at, on, "")
	if p.Part.Kind.V == "adapter" {
		t.meets(name+"."+p.Out.Name, p.Out.Impedance, at, on, name)
	} else if p.Out.Impedance.Set {
		t.name, t.ohm = name+"."+p.Out.Name, p.Out.Impedance.V // it matches the two by itself
	}
}

// adapter is where the plan names an adapter of the mate at hand.
func (t *tracer) adapter(p *bom.Pass) source.Place {
	for _, a := range t.mate.Adapters {
		if a.Part == p.Part {
			return a.At
		}
	}
	return t.mate.At
}

// nameOf is the thing's name without its sort: "C1" of "cable.C1".
func nameOf(on string) string {
	_, name, _ := strings.Cut(on, ".")
	return name
}
