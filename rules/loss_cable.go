package rules

import (
	"fmt"
	"slices"
	"sort"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var lossCable = &Rule{
	Name:   "loss/cable",
	Title:  "No single cable loses more than the house allows",
	Why:    "one long run of thin cable eats the gain of the antenna in front of it; at the highest band it does so first",
	Basis:  []Basis{house("cable_loss_db (5 dB where it says nothing)")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		limit := c.House().CableLossDB.Or(5)
		for _, x := range c.Graph.Cables {
			if x.Part == nil || x.Part.Cable == nil {
				continue // part/unknown says so; a made-up jumper is what it is
			}
			if bands := c.bandsOver(x); len(bands) > 0 {
				checkCable(c, r, x, bands, limit)
			}
		}
	},
}

// bandsOver lists the planned bands that run over a cable; all of them where the
// cable leads to no antenna.
func (c *Case) bandsOver(x *bom.Cable) []catalog.Band {
	var lines []*bom.Line
	for _, l := range c.Lines().All {
		if (l.Kind == bom.Feed || l.Kind == bom.Leg) && l.Holds(x) {
			lines = append(lines, l)
		}
	}
	if len(lines) == 0 {
		return c.bands
	}
	out := make([]catalog.Band, 0, len(c.bands))
	for _, b := range c.bands {
		if slices.ContainsFunc(lines, func(l *bom.Line) bool { return carries(l, b) }) {
			out = append(out, b)
		}
	}
	return out
}

func checkCable(c *Case, r *Report, x *bom.Cable, bands []catalog.Band, limit float64) {
	if !x.Length.Set {
		r.Unknown(x.At, x.On(), "%s has no length; its loss is not assessed", x.ID).Then("add length")
		return
	}
	fit, err := c.Firm.fit(x.Part)
	if err != nil {
		r.Unknown(x.At, x.On(), "%s of %s is not assessed: %s", x.ID, x.Part.ID, err).
			Then("complete the part's loss table").Beside(x.Part.At, "the part")
		return
	}
	band, f := highest(bands, fit.Max)
	if f == 0 {
		return // every band lies beyond the cable's table: band/part says so
	}
	cold, hot := c.temperatures(x.Way, c.endsOf(x))
	loss, ok := fit.LossBetween(f, x.Length.V, cold, hot)
	if !ok || !rf.Exceeds(float64(loss.Greatest), limit) {
		return
	}
	v := float64(loss.Greatest)
	r.Fails(placeOr(x.Row.Length.At, x.At), x.On(), "%s, %s of %s, loses %s dB in %s at %s and %s; the house allows %s dB (cable_loss_db)",
		x.ID, x.Length.V, x.Part.ID, unit.Fixed(v, 2), band, f, hot, plainFigure(limit)).
		InBand(band).Over("loss_db", v, "limit_db", limit).Then("%s", c.betterCable(x, f, v-limit))
}

// highest is the highest frequency of some bands that a cable's table reaches, with
// its band.
func highest(bands []catalog.Band, max unit.MHz) (string, unit.MHz) {
	name, top := "", unit.MHz(0)
	for _, b := range bands {
		for _, f := range bandPoints(b) {
			if f <= max && f > top {
				name, top = b.Name, f
			}
		}
	}
	return name, top
}

// lowerLoss says how a line could lose less by an amount: a cable that loses less
// in place of its longest one.
func (c *Case) lowerLoss(l *bom.Line, f unit.MHz, by float64) string {
	var longest *bom.Cable
	for _, x := range l.Cables() {
		if x.Part != nil && x.Part.Cable != nil && (longest == nil || x.Length.V > longest.Length.V) {
			longest = x
		}
	}
	if longest == nil {
		return "shorten the line, or take parts that lose less"
	}
	return c.betterCable(longest, f, by)
}

// betterCable names catalog cables of the same impedance that would lose enough
// less at a frequency, the thickest that is needed first, with what is on hand.
func (c *Case) betterCable(x *bom.Cable, f unit.MHz, by float64) string {
	now, err := c.Firm.fit(x.Part)
	if err != nil {
		return "shorten it, or take a cable that loses less"
	}
	before, _ := now.Loss(f, x.Length.V, 20)
	type choice struct {
		part *catalog.Part
		loss unit.DB
	}
	var would []choice
	for _, p := range c.Firm.Catalog.All() {
		if p.Cable == nil || p.ID == x.Part.ID || p.Cable.Impedance.V != x.Part.Cable.Impedance.V || len(c.Firm.Catalog.Connectors(p.ID)) == 0 {
			continue
		}
		fit, err := c.Firm.fit(p)
		if err != nil {
			continue
		}
		if loss, ok := fit.Loss(f, x.Length.V, 20); ok && float64(before-loss) >= by {
			would = append(would, choice{p, loss})
		}
	}
	sort.SliceStable(would, func(i, j int) bool {
		a, b := c.Firm.held(would[i].part), c.Firm.held(would[j].part)
		if a != b {
			return a
		}
		return would[i].loss > would[j].loss
	})
	if len(would) == 0 {
		return fmt.Sprintf("shorten %s; no cable of the catalog would lose enough less", x.ID)
	}
	out := fmt.Sprintf("shorten %s, or make it of %s", x.ID, c.Firm.OnHand(would[0].part))
	if len(would) > 1 {
		out += " or " + c.Firm.OnHand(would[1].part)
	}
	return out
}

// held reports whether any of a part is on hand.
func (f *Firm) held(p *catalog.Part) bool {
	qty, _ := f.Stock.OnHand(p.ID)
	return !qty.IsZero()
}

// lineAt is the place of a line in the plan: the part key of its first cable.
func lineAt(l *bom.Line) source.Place {
	for _, x := range l.Cables() {
		return x.At
	}
	return l.At()
}

func placeOr(p, or source.Place) source.Place {
	if p.IsZero() {
		return or
	}
	return p
}
