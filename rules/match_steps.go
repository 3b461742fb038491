package rules

import (
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// ohmStep is one place on a line where the impedance changes.
type ohmStep struct {
	from, to string // what meets
	a, b     float64
	at       source.Place
	on       string
	key      string // the same from either side
	harms    bool   // a contact
}

// tracer follows the impedance along a line. It takes what meets in the order of
// the line, as the line's sum does.
type tracer struct {
	steps []ohmStep
	lacks []Lack // What is the thing that findings stand on

	name string // what the line has come through last
	ohm  float64
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
func (t *tracer) meets(name string, ohm source.Val[float64], at source.Place, on string, m *bom.Mate) {
	if !ohm.Set {
		return
	}
	if t.ohm != 0 && t.ohm != ohm.V {
		key := []string{t.name, name}
		if key[1] < key[0] {
			key[0], key[1] = key[1], key[0]
		}
		t.steps = append(t.steps, ohmStep{t.name, name, t.ohm, ohm.V, at, on, strings.Join(key, " "), m != nil && harms(m)})
	}
	t.name, t.ohm = name, ohm.V
}

// harms reports a mate in which two impedances of one series harm a contact.
func harms(m *bom.Mate) bool {
	for _, x := range m.Contacts() {
		if x.A.Face.Set && x.B.Face.Set {
			if fit := catalog.Meet(x.A.Face.V, x.B.Face.V, x.A.Ohm.V, x.B.Ohm.V).Fit; fit == catalog.ThinSocket || fit == catalog.LoosePin {
				return true
			}
		}
	}
	return false
}

func (t *tracer) contact(s bom.Step) {
	first, second := s.Contact.A, s.Contact.B
	if s.Reverse {
		first, second = second, first
	}
	at := touching{mate: s.Mate, index: contactIndex(s)}.at()
	t.meets(first.Name, first.Ohm, at, s.Mate.On(), s.Mate)
	t.meets(second.Name, second.Ohm, at, s.Mate.On(), s.Mate)
}

// contactIndex is the number of a contact within its mate.
func contactIndex(s bom.Step) int {
	for i, x := range s.Mate.Contacts() {
		if x == *s.Contact {
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
	t.meets(x.ID, ohm, x.At, x.On(), nil)
}

func (t *tracer) pass(p *bom.Pass) {
	name, at, on := p.Part.ID, p.Part.At, "part."+p.Part.ID
	if p.Device != nil {
		name, at, on = p.Device.ID, p.Device.At, p.Device.On()
	}
	t.meets(name+"."+p.In.Name, p.In.Impedance, at, on, nil)
	if p.Part.Kind.V == "adapter" {
		t.meets(name+"."+p.Out.Name, p.Out.Impedance, at, on, nil)
	} else if p.Out.Impedance.Set {
		t.name, t.ohm = name+"."+p.Out.Name, p.Out.Impedance.V // it matches the two by itself
	}
}

// nameOf is the thing's name without its sort: "C1" of "cable.C1".
func nameOf(on string) string {
	_, name, _ := strings.Cut(on, ".")
	return name
}
