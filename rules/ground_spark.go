package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var groundSpark = &Rule{
	Name:    "ground/spark",
	Title:   "A gas tube does not fire on what the radio itself sends",
	Why:     "a tube that fires on every call is a short on the line and worn out in a week",
	Caution: cautionThunder,
	Basis: []Basis{
		practice("the spark-over voltage at the low end of its tolerance (20 %, from memory) is at least 1.5 times the peak voltage of all carriers in phase, with mismatch, plus direct voltage; Vpk = √(2·P·Z)·(1+Γ). Crest of the modulation is not in it")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		row := c.codeRow("spark")
		if c.Vehicle() || row == nil {
			return
		}
		said := map[*bom.Device]bool{}
		for _, l := range c.leadIns() {
			for _, p := range protectors(l) {
				if a := p.dev.Part; p.pass != nil && a.Arrestor.Principle.V == "gas-tube" && !said[p.dev] {
					said[p.dev] = c.checkSpark(r, l, p, row)
				}
			}
		}
	},
}

// spark is what a tube stands and what its line puts on it, in volts.
type spark struct {
	low         float64 // the tube's voltage at the low end of its tolerance
	least, most float64 // needed; they differ where the antenna's mismatch is not known
	peak        float64 // of all carriers in phase, without mismatch
	carriers    int
	dc          float64
	lacks       []Lack
}

func (c *Case) checkSpark(r *Report, l *bom.Line, p protector, row *limits.CodeRow) bool {
	s := c.sparkOf(l, p, row)
	if s.carriers == 0 && len(s.lacks) == 0 {
		return false
	}
	d, at := p.dev, placeOr(p.dev.Row.Part.At, p.dev.At)
	c.adviseArc(r, p, s, row)
	switch {
	case len(s.lacks) > 0:
		r.Unknown(at, d.On(), "whether %s fires on its own line is not assessed: it lacks %s", d.ID, lackWords(s.lacks)).
			Then("complete the part").onRow(row).Beside(s.lacks[0].At, "what it lacks")
	case rf.Below(s.low, s.least):
		f := r.Fails(at, d.On(), "%s (%s, %s V) can fire from %s V on; its line needs %s V: %s", d.ID, d.Part.ID,
			plainFigure(d.Part.Arrestor.SparkV.V), unit.Fixed(s.low, 1), unit.Fixed(s.least, 1), s.terms(row)).onRow(row).
			Under("low_v", s.low, "needed_v", s.least)
		f.Then("%s", c.tubeFor(l, s))
	case rf.Below(s.low, s.most):
		r.Unknown(at, d.On(), "%s (%s, %s V) can fire from %s V on; its line needs between %s and %s V, because no VSWR of its antenna is known: %s", d.ID, d.Part.ID,
			plainFigure(d.Part.Arrestor.SparkV.V), unit.Fixed(s.low, 1), unit.Fixed(s.least, 1), unit.Fixed(s.most, 1), s.terms(row)).
			Then("add vswr to the ranges of the antenna").onRow(row)
	default:
		return false
	}
	return true
}

// terms prints the sum: "1.5 × 18.8 V peak of 5 carriers in phase + 12 V direct".
func (s spark) terms(row *limits.CodeRow) string {
	factor, _ := row.Constant("factor")
	out := fmt.Sprintf("%s × the %s V peak of %s in phase, with mismatch", plainFigure(factor), unit.Fixed(s.peak, 1), count(s.carriers, "carrier", "carriers"))
	if s.dc > 0 {
		out += " + " + plainFigure(s.dc) + " V direct"
	}
	return out
}

// adviseArc points at the hold-over of a tube on a line with direct current.
func (c *Case) adviseArc(r *Report, p protector, s spark, row *limits.CodeRow) {
	least, ok1 := row.Constant("arc_least_v")
	most, ok2 := row.Constant("arc_most_v")
	if !ok1 || !ok2 || s.dc <= least {
		return
	}
	r.Advice(placeOr(p.dev.Row.Part.At, p.dev.At), p.dev.On(), "%s is a gas tube on a line with %s V direct current; an arc burns on from %s to %s V once it is struck",
		p.dev.ID, plainFigure(s.dc), plainFigure(least), plainFigure(most)).
		Then("see that the supply limits its current, or take an arrestor that is made for the voltage").onRow(row)
}

// sparkOf adds up what a tube has to stand on a line.
func (c *Case) sparkOf(l *bom.Line, p protector, row *limits.CodeRow) spark {
	var s spark
	factor, ok1 := row.Constant("factor")
	tolerance, ok2 := row.Constant("tolerance")
	if !ok1 || !ok2 {
		s.lack(row.ID.V+" figures factor and tolerance of the code", row.At)
		return s
	}
	if v := p.dev.Part.Arrestor.SparkV; v.Set {
		s.low = v.V * (1 - tolerance)
	} else {
		s.lack("the spark-over voltage (spark_v) of "+p.dev.Part.ID, p.dev.Part.At)
	}
	outs := c.carriers(l, &s)
	ohm := lineOhm(l)
	if ohm == 0 {
		s.lack("the impedance of the line", l.At())
		return s
	}
	vswr, known := antennaVSWR(l)
	mismatched := 0.0
	for _, out := range outs {
		v, _ := rf.PeakVoltage(out, ohm, 1)
		w, _ := rf.PeakVoltage(out, ohm, vswr)
		s.peak, mismatched = s.peak+v, mismatched+w
	}
	s.carriers, s.dc = len(outs), directVolts(l, p)
	s.least = factor*mismatched + s.dc
	s.most = s.least
	if !known {
		s.most = factor*s.peak*rf.OpenEnd + s.dc
	}
	return s
}

func (s *spark) lack(what string, at source.Place) { s.lacks = append(s.lacks, Lack{what, at}) }

// carriers lists the rated outputs that meet on a line: each band of an amplifier,
// the whole of a router.
func (c *Case) carriers(l *bom.Line, s *spark) []unit.DBm {
	var out []unit.DBm
	for _, n := range []*bom.Node{l.From, l.To} {
		d := n.Device
		switch {
		case d == nil || !d.Active():
		case d.Part == nil:
			s.lack("the transmit power of "+d.ID+", whose part is not known", d.At)
		case d.Part.Router != nil && n.Port.Use.Or("cellular") != "cellular":
		case d.Part.Router != nil && !d.Part.Router.TxDBm.Set:
			s.lack("the transmit power (tx_dbm) of "+d.Part.ID, d.Part.At)
		case d.Part.Router != nil:
			out = append(out, unit.DBmOf(d.Part.Router.TxDBm.V))
		case d.Part.Amplifier != nil:
			for i := range d.Part.Amplifier.Bands {
				b := &d.Part.Amplifier.Bands[i]
				g := b.Uplink
				if n.Port.Side.V == "server" {
					g = b.Downlink
				}
				if g == nil || !g.MaxOut.Set {
					s.lack("the rated output of "+d.Part.ID+" in "+b.Band.V, b.At)
					continue
				}
				out = append(out, unit.DBmOf(g.MaxOut.V))
			}
		}
	}
	return out
}

// antennaVSWR is the worst standing wave ratio that the antenna of a line states;
// known is false where it states none for some range, and the figure is then 1.
func antennaVSWR(l *bom.Line) (vswr float64, known bool) {
	vswr = 1
	for _, n := range []*bom.Node{l.From, l.To} {
		if n.Device == nil || n.Device.Part == nil || n.Device.Part.Antenna == nil {
			continue
		}
		for _, x := range n.Device.Part.Antenna.RangesOf(n.Port.Name) {
			if !x.VSWR.Set {
				return 1, false
			}
			vswr, known = max(vswr, x.VSWR.V), true
		}
	}
	return vswr, known
}

// directVolts is the direct voltage that gets to an arrestor on a line.
func directVolts(l *bom.Line, p protector) float64 {
	most := 0.0
	for _, f := range feeders(l) {
		met, _ := fed(l, f)
		for _, m := range met {
			if m.Device == p.dev {
				most = max(most, f.port.DCOut.Volts.V)
			}
		}
	}
	return most
}

// tubeFor names a catalog arrestor that stands what a line puts on it.
func (c *Case) tubeFor(l *bom.Line, s spark) string {
	tolerance, _ := c.codeRow("spark").Constant("tolerance")
	var best *catalog.Part
	for _, p := range c.Firm.Catalog.All() {
		a := p.Arrestor
		if a == nil || a.Principle.V != "gas-tube" || p.Status.Or("active") != "active" || !ofImpedance(p, lineOhm(l)) ||
			rf.Below(a.SparkV.V*(1-tolerance), s.most) || len(c.leavesOut(p)) > 0 {
			continue
		}
		if best == nil || a.SparkV.V < best.Arrestor.SparkV.V || a.SparkV.V == best.Arrestor.SparkV.V && c.Firm.nearerThan(p, best) {
			best = p
		}
	}
	if best == nil {
		return "take a tube of a higher voltage, or an arrestor of another principle; the catalog has no such tube"
	}
	return "take " + c.Firm.OnHand(best) + " with " + plainFigure(best.Arrestor.SparkV.V) + " V"
}
