package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

// The ground rules look at lines that come in from outdoors and at what hangs
// there. They ask the plan's code for its rows by name, so that a rule reads the
// same under either code; what a code is silent on is not asked for. In a vehicle
// they have nothing to say.
var groundRules = []*Rule{groundArrestor, groundBond, groundConductor, groundElectrodes,
	groundSeparation, groundDC, groundData, groundReversed, groundLength, groundEntry, groundSpark, groundMains}

// Cautions of the ground rules, in the order in which a crew needs them.
const (
	cautionStrike = "Bonding lowers risk; it does not protect from a direct strike, and a mast is no lightning protection system. " +
		"The edition adopted where the building stands, its amendments and the authority having jurisdiction decide."
	cautionElectrician = "Grounding and bonding belong to a licensed electrician wherever the law says so. " +
		"Never take a building's grounding conductor apart to make a joint."
	cautionListed  = "Use listed clamps, lugs and arrestors where the code asks for listed ones; solder alone does not hold."
	cautionThunder = "No work on masts, roofs or lines from outdoors with thunder about; a line that comes in unprotected is not touched then either."
	cautionMains   = "Work on mains outlets and panels belongs to a licensed electrician wherever the law says so."
)

// codeRow is a row of the plan's grounding code, or nil.
func (c *Case) codeRow(id string) *limits.CodeRow {
	if c.Code == nil {
		return nil
	}
	return c.Code.Row(id)
}

// firstRow is the first of the rows that the plan's code has, or nil.
func (c *Case) firstRow(ids ...string) *limits.CodeRow {
	for _, id := range ids {
		if r := c.codeRow(id); r != nil {
			return r
		}
	}
	return nil
}

// onRow lets a finding stand on a row of the plan's code in place of all the
// documents that the rule knows, and prints the row's own caution.
func (f *Finding) onRow(row *limits.CodeRow) *Finding {
	if row == nil {
		return f
	}
	basis := []string{row.Explain()}
	if row.Caution.Set {
		basis = append(basis, row.Caution.V)
	}
	return f.Replacing(basis...)
}

// besides names a row of the plan's code before the rule's own documents.
func (f *Finding) besides(row *limits.CodeRow) *Finding {
	if row == nil {
		return f
	}
	return f.By(row.Explain())
}

// leadIns lists the RF lines as grounding sees them: those that end somewhere. A
// cable that goes to something existing whose ports nobody knows is taken to
// reach it; one that goes nowhere, or to what did not resolve, has a finding of
// its own and is left out.
func (c *Case) leadIns() []*bom.Line {
	var out []*bom.Line
	for _, l := range c.Lines().All {
		if !l.Open || l.To.Device != nil {
			out = append(out, l)
			continue
		}
		ref := l.To.Cable.Row.From
		if l.To.End == 2 {
			ref = l.To.Cable.Row.To
		}
		d := c.Graph.Device(ref.V.Name)
		if !ref.Set || d == nil || d.Part != nil || d.Row.Part.Set {
			continue
		}
		reached := *l
		reached.To = &bom.Node{Device: d, Port: &catalog.Port{Name: ref.V.Port}}
		out = append(out, &reached)
	}
	return out
}

// crossingsOf lists where a line comes in. Gear that stands at the entry itself is
// reached by the line from outdoors like gear further in.
func crossingsOf(l *bom.Line) []bom.Crossing {
	xs := l.Crossings()
	if len(xs) > 0 {
		return xs
	}
	from, to := l.From.Device, l.To.Device
	switch {
	case from.Place.Outdoors() && atEntry(to):
		x := bom.Crossing{Line: l, On: l.On(), At: l.At(), Out: from.Place, In: to.Place, Inner: len(l.Steps)}
		if cables := l.Cables(); len(cables) > 0 {
			last := cables[len(cables)-1]
			x.On, x.At = last.On(), last.At
		}
		return []bom.Crossing{x}
	case to.Place.Outdoors() && atEntry(from):
		return []bom.Crossing{{Line: l, On: l.On(), At: l.At(), Out: to.Place, In: from.Place, Outer: len(l.Steps), In1st: true}}
	}
	return nil
}

func atEntry(d *bom.Device) bool {
	return d.Active() && d.Place != nil && d.Place.Kind.V == "entry"
}

// outerEnd is the device at the outdoor end of a line that crosses.
func outerEnd(x bom.Crossing) *bom.Device {
	if x.In1st {
		return x.Line.To.Device
	}
	return x.Line.From.Device
}

// innerEnd is the device at the indoor end of a line that crosses.
func innerEnd(x bom.Crossing) *bom.Device {
	if x.In1st {
		return x.Line.From.Device
	}
	return x.Line.To.Device
}

// protector is an arrestor or shield block on a line.
type protector struct {
	dev  *bom.Device
	step int
	pass *bom.Pass // nil where the line ends on it, because nobody knows its ports
}

func (p protector) block() bool {
	a := p.dev.Part
	return a != nil && a.Arrestor != nil && a.Arrestor.Principle.V == "shield-block"
}

// full reports an arrestor that is known to have a way for the centre conductor.
func (p protector) full() bool { return p.dev.Part != nil && !p.block() }

// protectors lists the arrestors of a line in its direction.
func protectors(l *bom.Line) []protector {
	var out []protector
	if l.From.Device.Kind() == "arrestor" {
		out = append(out, protector{dev: l.From.Device})
	}
	for i, s := range l.Steps {
		if s.Pass != nil && s.Pass.Device != nil && s.Pass.Device.Kind() == "arrestor" {
			out = append(out, protector{s.Pass.Device, i, s.Pass})
		}
	}
	if d := l.To.Device; d != nil && d.Kind() == "arrestor" && !l.Passes(d) {
		out = append(out, protector{dev: d, step: len(l.Steps)})
	}
	return out
}

// guarding lists the protectors that belong to one crossing of a line: those
// between the crossings next to it.
func guarding(all []protector, xs []bom.Crossing, i int) []protector {
	lo, hi := 0, len(xs[i].Line.Steps)
	if i > 0 {
		lo = max(xs[i-1].Outer, xs[i-1].Inner)
	}
	if i+1 < len(xs) {
		hi = min(xs[i+1].Outer, xs[i+1].Inner)
	}
	var out []protector
	for _, p := range all {
		if lo <= p.step && p.step <= hi {
			out = append(out, p)
		}
	}
	return out
}

// unplaced is the device whose place is missing, where that leaves d without one;
// nil where d has a place, or names one that has a finding of its own.
func unplaced(d *bom.Device) *bom.Device {
	if d == nil || d.Place != nil || d.Row.Place.Set {
		return nil
	}
	if d.Row.On.Set {
		return unplaced(d.Stands)
	}
	return d
}

// reportUnplaced says once for all of some devices that their place is missing.
func reportUnplaced(r *Report, devices []*bom.Device, row *limits.CodeRow, what string) {
	var names []string
	var first []*bom.Device
	seen := map[*bom.Device]bool{}
	for _, d := range devices {
		if d != nil && !seen[d] {
			seen[d] = true
			first = append(first, d)
			names = append(names, d.ID)
		}
	}
	if len(first) == 0 {
		return
	}
	has := "has"
	if len(names) > 1 {
		has = "have"
	}
	f := r.Unknown(first[0].At, first[0].On(), "%s %s no place; %s is not assessed", list(names), has, what).
		Then("give each a place").onRow(row)
	for _, d := range first[1:] {
		f.Beside(d.At, "%s has no place either", d.ID)
	}
}

// measuredTo is a length that was measured from a device to something that has no
// table of its own, such as the nearest power line: a [[reading]] of a length. Of
// several the newest of the latest stage goes.
func (c *Case) measuredTo(d *bom.Device, what string) source.Val[unit.MM] {
	var best *bom.Reading
	for i := range c.Plan.Readings {
		x := &c.Plan.Readings[i]
		if x.What.V != "length" || x.From.V.Name != d.ID || x.Where.V != what || !x.Length.Set {
			continue
		}
		if best == nil || newer(x, best) {
			best = x
		}
	}
	if best == nil {
		return source.Val[unit.MM]{}
	}
	return best.Length
}

func newer(a, b *bom.Reading) bool {
	if built := a.Stage.V == "as-built"; built != (b.Stage.V == "as-built") {
		return built
	}
	return !a.On.V.Before(b.On.V)
}
