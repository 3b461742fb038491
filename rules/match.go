package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var matchRules = []*Rule{matchImpedance, matchVSWR}

var matchImpedance = &Rule{
	Name:  "match/impedance",
	Title: "A line has one impedance from end to end",
	Why: "a step sends part of the signal back; two of them make ripple across the band, and a 50 ohm pin in a 75 ohm socket of the same " +
		"series breaks it for good",
	Basis: []Basis{
		{Document: "definition of the reflection coefficient: Γ = (VSWR − 1)/(VSWR + 1), return loss −20·log10 Γ, mismatch loss −10·log10(1 − Γ²)", Kind: "calculated"},
		practice("50 and 75 ohm halves of N harm each other; other series of two impedances join without harm"),
	},
	Weight: Hold,
	Lighter: "A step that harms no contact is a punch, unless it lies on a line of an amplifier whose certified kit has no such impedance: " +
		"the kit's are those of the amplifier's port and of the antennas that it lists on that side.",
	Check: func(c *Case, r *Report) {
		c.checkHarm(r)
		c.checkSteps(r)
	},
}

// checkHarm reports the contacts that two impedances of one series harm, those at
// one device together.
func (c *Case) checkHarm(r *Report) {
	first := map[*bom.Device]*Finding{}
	for _, t := range c.touchings() {
		if t.meets.Fit != catalog.ThinSocket && t.meets.Fit != catalog.LoosePin {
			continue
		}
		d := t.mate.B.Device
		if f := first[d]; f != nil && d != nil {
			f.Beside(t.at(), "the same at %s and %s", t.A.Name, t.B.Name)
			continue
		}
		f := r.Fails(t.at(), t.mate.On(), "%s is %s of %s ohm and %s is %s of %s ohm: %s", t.A.Name, t.A.Face.V, plainFigure(t.A.Ohm.V),
			t.B.Name, t.B.Face.V, plainFigure(t.B.Ohm.V), t.meets.Text).Then("%s", c.sameOhm(t))
		f.By(Basis{Document: "mating table: " + t.meets.Source, Proof: t.meets.Proof}.String())
		withStep(f, t.A.Ohm.V, t.B.Ohm.V)
		first[d] = f
	}
}

// sameOhm says what to put in place of the part of the other impedance.
func (c *Case) sameOhm(t touching) string {
	for _, n := range []*bom.Node{t.mate.B, t.mate.A} {
		if n.Device == nil || n.Device.Part == nil {
			continue
		}
		want := neighbour(t.mate, n)
		p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
			return p.Kind.V == n.Device.Kind() && p.ID != n.Device.Part.ID && rfPortCount(p) == rfPortCount(n.Device.Part) && allMeet(p, want)
		})
		if p != nil {
			return fmt.Sprintf("take %s in place of %s", c.Firm.OnHand(p), n.Device.Part.ID)
		}
	}
	return "take a part whose interface has the line's impedance; do not screw the two together"
}

func rfPortCount(p *catalog.Part) int {
	n := 0
	for i := range p.Ports {
		if p.Ports[i].RF() {
			n++
		}
	}
	return n
}

// allMeet reports whether every radio port of a part joins a half at its impedance.
func allMeet(p *catalog.Part, h bom.Half) bool {
	for i := range p.Ports {
		if q := &p.Ports[i]; q.RF() && !(q.Impedance.V == h.Ohm.V && portMeets(q, h)) {
			return false
		}
	}
	return true
}

// withStep adds what a single step does.
func withStep(f *Finding, a, b float64) {
	vswr, ok := rf.StepVSWR(a, b)
	if !ok {
		return
	}
	back, _ := rf.ReturnLoss(vswr)
	lost, _ := rf.MismatchLoss(vswr)
	f.With("vswr", vswr).With("return_loss_db", float64(back)).With("mismatch_loss_db", float64(lost))
}

// checkSteps reports the steps of each line that no earlier line has had, as one
// finding with all steps of the line.
func (c *Case) checkSteps(r *Report) {
	said := map[stepKey]bool{}
	lacking := map[source.Place]bool{}
	for _, l := range c.Lines().All {
		steps, lacks := ohmSteps(l)
		for _, x := range lacks {
			if !lacking[x.At] {
				lacking[x.At] = true
				r.Unknown(x.At, x.What, "the impedance of %s is not known; whether it matches %s is not assessed", nameOf(x.What), l.Name()).
					Then("name the cable that it is made of in the catalog")
			}
		}
		var fresh *ohmStep
		for i := range steps {
			s := &steps[i]
			if !said[s.key] && !s.elsewhere && fresh == nil {
				fresh = s
			}
			said[s.key] = true
		}
		if fresh != nil {
			c.failSteps(r, l, steps, fresh)
		}
	}
}

func (c *Case) failSteps(r *Report, l *bom.Line, steps []ohmStep, first *ohmStep) {
	vswr, _ := rf.StepVSWR(first.a, first.b)
	back, _ := rf.ReturnLoss(vswr)
	lost, _ := rf.MismatchLoss(vswr)
	says := fmt.Sprintf("%s: VSWR %s, return loss %s dB, %s dB lost", first.says(),
		unit.Fixed(vswr, 2), unit.Fixed(float64(back), 1), unit.Fixed(float64(lost), 2))
	var vswrs []float64
	for _, s := range steps {
		v, _ := rf.StepVSWR(s.a, s.b)
		vswrs = append(vswrs, v)
	}
	_, worst, ok := rf.CompositeVSWR(vswrs...)
	run, ok2 := rf.MismatchRun(vswrs...)
	if ok && ok2 && len(steps) > 1 {
		says += fmt.Sprintf("; with the %s of %s together up to VSWR %s and %s dB", count(len(steps), "step", "steps"), l.Name(),
			unit.Fixed(worst, 2), unit.Fixed(float64(run.Greatest), 2))
	}
	f := r.Fails(first.at, first.on, "%s", says).With("vswr", vswr).With("return_loss_db", float64(back)).With("mismatch_loss_db", float64(lost)).
		With("worst_vswr", worst).With("worst_db", float64(run.Greatest))
	for _, s := range steps {
		if s.key != first.key {
			f.Beside(s.at, "%s", s.says())
		}
	}
	f.Then("use parts of one impedance along the line, or a matching pad at the step and its loss in the budget")
	outside, amp := c.outsideKit(l, steps)
	if outside == 0 {
		f.Lighter(Punch)
		return
	}
	f.Says += fmt.Sprintf("; the certified kit of %s has no part of %s ohm", amp.Part.ID, plainFigure(outside))
	f.besidePart(amp.Part, amp.Part.Amplifier.Kits[0].At, "the kit")
}

// outsideKit is an impedance on a line that the certified kit of the line's
// amplifier does not have; 0 where there is none, or no kit that anybody knows.
func (c *Case) outsideKit(l *bom.Line, steps []ohmStep) (float64, *bom.Device) {
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device == nil || n.Device.Part == nil || n.Device.Part.Amplifier == nil {
			continue
		}
		kit := c.kitOhms(n)
		if len(kit) == 0 {
			continue
		}
		for _, s := range steps {
			for _, v := range []float64{s.a, s.b} {
				if !kit[v] {
					return v, n.Device
				}
			}
		}
	}
	return 0, nil
}

// kitOhms are the impedances of an amplifier's kit at a port: the port's own, and
// those of the antennas that the kit lists on its side. Nothing where the kit has
// no row for the side.
func (c *Case) kitOhms(n *bom.Node) map[float64]bool {
	var out map[float64]bool
	for _, row := range n.Device.Part.Amplifier.Kits {
		if row.Side.V != n.Port.Side.V {
			continue
		}
		if out == nil {
			out = map[float64]bool{n.Ohm.V: true}
		}
		if p := c.Firm.Catalog.Look(row.Antenna.V); p != nil {
			for i := range p.Ports {
				if p.Ports[i].RF() {
					out[p.Ports[i].Impedance.V] = true
				}
			}
		}
	}
	return out
}
