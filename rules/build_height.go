package rules

import (
	"fmt"
	"math"

	"driploop/catalog/unit"
	"driploop/rules/mech"
)

// What the cautions on heights and power lines say of the plan at hand, so that they
// are read.

// heightFigures says how high the work goes; "" where the plan gives no height.
func (c *Case) heightFigures() string {
	if work := c.highest(func(w workplace) float64 { return w.point.V.Up }); work > 0 {
		return fmt.Sprintf(" Here the work goes up to %s m.", unit.Fixed(work, 1))
	}
	return ""
}

// ladderFigures says how a ladder to the work stands where the plan's code speaks of
// ladders.
func (c *Case) ladderFigures() string {
	foot, top := c.codeRow("ladder-foot"), c.codeRow("ladder-top")
	landing := c.highest(func(w workplace) float64 { return w.place.Point.V.Up })
	if foot == nil || top == nil || landing == 0 {
		return ""
	}
	share, _ := foot.Constant("share_of_length")
	off, ok := mech.LadderFoot(landing, share)
	if !ok {
		return ""
	}
	return fmt.Sprintf(" A ladder up %s m stands %s m out at its foot, and its rails reach %s m above where it lands (%s).",
		unit.Fixed(landing, 1), unit.Fixed(off, 1), unit.Fixed(top.Length.V.Metres(), 1), foot.Instrument.V)
}

// highest is the greatest figure of the places where someone can fall, 0 where the
// plan gives none.
func (c *Case) highest(of func(workplace) float64) float64 {
	out := 0.0
	for _, w := range c.workplaces() {
		if w.fallsFar() {
			out = max(out, of(w))
		}
	}
	return out
}

// fallFigures says how far each thing reaches that could fall, with what is kept
// beyond it from lines of ordinary voltage.
func (c *Case) fallFigures() string {
	keep, _ := c.lineClearance(0)
	var out []string
	for _, d := range c.Graph.Devices {
		if !falls(d) || unresolved(d) || !d.Place.Outdoors() || !c.ours(d) {
			continue
		}
		if f := c.fallOf(d); !math.IsInf(f.radius.most, 1) {
			out = append(out, fmt.Sprintf("%s m around %s", unit.Fixed(math.Ceil((f.radius.most+keep)*10-1e-9)/10, 1), d.ID))
		}
	}
	if out == nil {
		return ""
	}
	return " Here that is " + list(out) + "; high voltage needs more."
}
