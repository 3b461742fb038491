package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var mateAdapters = &Rule{
	Name:   "mate/adapters",
	Title:  "No two adapters follow each other",
	Why:    "each one is another pair to lose signal, to let water in and to work loose, and a stack of them levers on the port",
	Basis:  []Basis{practice("one adapter at most between a cable and a port")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		said := map[source.Place]bool{}
		for _, l := range c.Lines().All {
			for _, s := range stacks(l) {
				if !said[s.at] {
					said[s.at] = true
					c.failStack(r, s)
				}
			}
		}
	},
}

// stack is a run of adapters that follow each other on a line, with the faces
// before and after it.
type stack struct {
	ids           []string
	before, after bom.Half
	broken        bool // something in it does not mate, and has a finding of its own
	at            source.Place
	on            string
}

// stacks lists the runs of more than one adapter on a line. Attenuators and the like
// are there for their own sake and end a run.
func stacks(l *bom.Line) []stack {
	var out []stack
	var run stack
	var last bom.Half
	closeRun := func() {
		if len(run.ids) > 1 && !run.broken {
			out = append(out, run)
		}
		run = stack{}
	}
	for i, s := range l.Steps {
		switch {
		case s.Contact != nil:
			first, second := s.Contact.A, s.Contact.B
			if s.Reverse {
				first, second = second, first
			}
			last, run.after = first, second
			if len(run.ids) == 0 {
				run = stack{at: stackAt(l, i), on: s.Mate.On(), after: second}
			}
			if first.Face.Set && second.Face.Set && catalog.Meet(first.Face.V, second.Face.V, 0, 0).Fit != catalog.Mates {
				run.broken = true
			}
		case s.Pass != nil && s.Pass.Part.Kind.V == "adapter":
			if len(run.ids) == 0 {
				run.before = last
			}
			run.ids = append(run.ids, s.Pass.Part.ID)
		default:
			closeRun()
		}
	}
	closeRun()
	return out
}

// stackAt is the place of the adapter after a contact: where a cable names it, or
// the device that it is.
func stackAt(l *bom.Line, contact int) source.Place {
	if contact+1 < len(l.Steps) {
		if p := l.Steps[contact+1].Pass; p != nil && p.Device != nil {
			return p.Device.At
		}
	}
	if m := l.Steps[contact].Mate; len(m.Adapters) > 0 {
		return m.Adapters[0].At
	}
	return l.Steps[contact].Mate.At
}

func (c *Case) failStack(r *Report, s stack) {
	f := r.Fails(s.at, s.on, "%s follow each other between %s and %s", list(s.ids), s.before.Name, s.after.Name).
		With("adapters", float64(len(s.ids)))
	if p := c.oneAdapter(s.before, s.after); p != nil {
		f.Then("put %s in their place", c.Firm.OnHand(p))
		return
	}
	f.Then("make the end so that one adapter does, or none: no single adapter of the catalog joins %s to %s", face(s.before), face(s.after))
}

func face(h bom.Half) catalog.Face { return h.Face.V }
