package rules

import (
	"cmp"
	"slices"
	"strings"
)

// foundKey is what makes a finding the same one in two states.
type foundKey struct{ rule, on, band string }

func keyOf(f *Finding, on func(string) string) foundKey {
	return foundKey{f.Rule.Name, on(f.On), f.Band}
}

// foundIn indexes findings by what makes them the same ones.
func foundIn(list []*Finding, on func(string) string) map[foundKey][]*Finding {
	out := map[foundKey][]*Finding{}
	for _, f := range list {
		k := keyOf(f, on)
		out[k] = append(out[k], f)
	}
	return out
}

// asItStands is what a finding weighs, with a word for what goes with it: "hold",
// "punch, not assessed", "hold, accepted by waiver".
func asItStands(f *Finding) string {
	s := f.Weight.String()
	if f.Outcome == Unknown {
		s += ", not assessed"
	}
	if f.Outcome == AtWorst {
		s += ", at worst"
	}
	if f.Waived != nil {
		s += ", accepted by waiver"
	}
	return s
}

// press is how much a finding presses: what a waiver covers presses nothing.
func press(f *Finding) int {
	if f.Waived != nil {
		return 0
	}
	return int(f.Weight)
}

// found compares findings of two states and charges each move to a step. at lists the
// findings step by step, nil where a step has none of its own; had says whether the
// thing that a finding stands on was there before.
type found struct {
	at  [4][]*Finding
	on  func(step int, on string) string // names of a step, in those of the head; nil: as they are
	had func(on string) bool
}

// compare lists what moved and counts what stands as it did.
func (x *found) compare() (moved []MovedFound, stands Counts) {
	named := func(step int) func(string) string {
		return func(on string) string {
			if x.on == nil || step == 3 {
				return on
			}
			return x.on(step, on)
		}
	}
	var in [4]map[foundKey][]*Finding
	for s := range x.at {
		in[s] = foundIn(x.at[s], named(s))
	}
	partner := x.partners(in)
	for _, f := range x.at[3] {
		m, as := x.movedTo(f, partner[f])
		if as {
			stands.Count(f)
			continue
		}
		m.Charge = charged(keyOf(f, named(3)), in)
		moved = append(moved, m)
	}
	for _, f := range x.at[0] {
		if partner[f] != nil {
			continue
		}
		how := Cleared
		if f.Outcome == Unknown {
			how = Assessed
		}
		moved = append(moved, MovedFound{Finding: f, How: how, Was: asItStands(f), Charge: charged(keyOf(f, named(0)), in)})
	}
	slices.SortStableFunc(moved, func(a, b MovedFound) int {
		return cmp.Or(cmp.Compare(a.turn(), b.turn()), cmp.Compare(press(b.Finding), press(a.Finding)))
	})
	return moved, stands
}

// partners ties findings of base and head together: of one key, those that stand in
// the same state first, then in their order.
func (x *found) partners(in [4]map[foundKey][]*Finding) map[*Finding]*Finding {
	out := map[*Finding]*Finding{}
	for k, now := range in[3] {
		was := in[0][k]
		for _, fit := range []func(f, g *Finding) bool{
			func(f, g *Finding) bool { return sameState(f, g) && f.Says == g.Says }, sameState, func(f, g *Finding) bool { return true }} {
			for _, f := range now {
				for _, g := range was {
					if out[f] == nil && out[g] == nil && fit(f, g) {
						out[f], out[g] = g, f
					}
				}
			}
		}
	}
	return out
}

func sameState(f, g *Finding) bool {
	return f.Outcome == g.Outcome && f.Weight == g.Weight && (f.Waived != nil) == (g.Waived != nil)
}

func (m *MovedFound) turn() int {
	if m.How == Lost { // a loss, listed with what is new
		return int(Arisen)
	}
	return int(m.How)
}

// movedTo says how a finding of the head came about; same is true where it stood
// there before.
func (x *found) movedTo(f, was *Finding) (m MovedFound, same bool) {
	m = MovedFound{Finding: f, How: Arisen, Now: asItStands(f)}
	switch {
	case was == nil:
		if f.Outcome == Unknown && x.had != nil && x.had(f.On) {
			m.How = Lost
		}
		return m, false
	case sameState(f, was):
		return m, true
	}
	m.Was = asItStands(was)
	switch {
	case f.Outcome == Unknown && was.Outcome != Unknown:
		m.How = Lost
	case press(f) > press(was):
		m.How = Heavier
	case press(f) < press(was):
		m.How = Lighter
	case f.Weight > was.Weight || f.Outcome == Fails && was.Outcome != Fails:
		m.How = Heavier
	default:
		m.How = Lighter
	}
	return m, false
}

// charged is the step in which the findings of a key came to stand as they do in the
// head.
func charged(k foundKey, in [4]map[foundKey][]*Finding) Charge {
	state := func(s int) (out [3]int) {
		for _, f := range in[s][k] {
			out[0]++
			out[1] += 8*press(f) + int(f.Weight)
			out[2] += int(f.Outcome)
		}
		return out
	}
	for s := 3; s > 0; s-- {
		if state(s-1) != state(3) {
			return Charge(s)
		}
	}
	return Uncharged
}

// compareFound compares what rules of scope plan say of a plan.
func (c *comparison) compareFound(p *pair) {
	x := &found{on: func(step int, on string) string {
		if now, moved := p.numbers[on]; moved && steps[step].mix.facts == atBase {
			return now
		}
		return on
	}}
	for s, st := range steps {
		if at := c.at(p, st.mix); at != nil {
			x.at[s] = at.findings
		}
	}
	x.had = func(on string) bool { return p.hadBefore(on) }
	p.job.Findings, p.job.Standing = x.compare()
	if p.broken[atHead] {
		for i := range p.job.Findings {
			if m := &p.job.Findings[i]; m.How == Cleared || m.How == Assessed {
				m.How = Lost // nobody looked
			}
		}
	}
	if p.isNew() || p.isGone() {
		for i := range p.job.Findings {
			p.job.Findings[i].Charge = ToWork
		}
	}
}

// hadBefore reports whether what a finding stands on was in the base's plan, under its
// name in the head's.
func (p *pair) hadBefore(on string) bool {
	plan := p.plan[atBase]
	if plan == nil || p.broken[atBase] {
		return false
	}
	for _, d := range plan.Devices {
		if on == "device."+d.ID {
			return true
		}
		for _, copied := range d.Copies {
			if on == "device."+copied.Name {
				return true
			}
		}
	}
	for _, x := range plan.Cables {
		if on == "cable."+x.ID {
			return true
		}
	}
	for _, x := range plan.Areas {
		if on == "area."+x.Name.V {
			return true
		}
	}
	for _, x := range plan.Data {
		if on == "data."+x.ID {
			return true
		}
	}
	for _, x := range plan.Wires {
		if on == "wire."+x.ID {
			return true
		}
	}
	for _, x := range plan.Bonds {
		if on == "bond."+x.ID {
			return true
		}
	}
	return on == "job" || on == "site" || strings.HasPrefix(on, "operator.") || strings.HasPrefix(on, "signal.")
}
