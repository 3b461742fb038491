package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var matchVSWR = &Rule{
	Name:  "match/vswr",
	Title: "Antennas are as well matched in the planned bands as the house asks",
	Why: "what an antenna sends back heats the amplifier, lowers the power that goes out, and shakes the level from channel to channel; " +
		"on a sweep a bad antenna hides a wet connector",
	Basis:   []Basis{house("vswr (2.0 where it says nothing)"), practice("mismatches on one line multiply at worst, less what the line between them takes")},
	Weight:  Punch,
	Lighter: "Where the antenna alone is within the figure and an impedance step on its line can bring the two beyond it, the finding is at-worst.",
	Check: func(c *Case, r *Report) {
		limit := c.House().VSWR.Or(2)
		order, users := c.matchedAntennas()
		for _, p := range order {
			c.checkMatch(r, p, users[p], limit)
		}
	},
}

// used is an antenna's port with the line that reaches it.
type used struct {
	node *bom.Node
	line *bom.Line
}

// matchedAntennas lists the antenna parts that feeds and legs reach, each with its
// ports in use.
func (c *Case) matchedAntennas() ([]*catalog.Part, map[*catalog.Part][]used) {
	var order []*catalog.Part
	users := map[*catalog.Part][]used{}
	for _, l := range c.Lines().All {
		n := l.To
		switch l.Kind {
		case bom.Feed:
			n = l.From
		case bom.Leg:
		default:
			continue
		}
		p := n.Device.Part
		if p == nil || p.Antenna == nil {
			continue
		}
		if users[p] == nil {
			order = append(order, p)
		}
		users[p] = append(users[p], used{n, l})
	}
	return order, users
}

// checkMatch holds an antenna part against the house figure, once for all devices
// of that part.
func (c *Case) checkMatch(r *Report, p *catalog.Part, users []used, limit float64) {
	worst, band, at, lacks := c.worstVSWR(users)
	first := users[0].node
	names := deviceNames(users)
	switch {
	case rf.Exceeds(worst, limit):
		f := r.Fails(first.Device.At, first.Device.On(), "%s (%s): VSWR %s in %s, %s at most is expected (vswr)", names, p.ID,
			plainFigure(worst), band, plainFigure(limit)).Over("vswr", worst, "limit_vswr", limit).InBand(band)
		back, _ := rf.ReturnLoss(worst)
		f.With("return_loss_db", float64(back)).besidePart(p, at.VSWR.At, "the antenna's figure")
		f.Then("%s", c.betterAntenna(p, users, limit))
	case len(lacks) > 0:
		r.Unknown(first.Device.At, first.Device.On(), "%s (%s) is not assessed in %s: the part gives no vswr there", names, p.ID, list(lacks)).
			Then("add vswr to its ranges from the data sheet")
	default:
		c.checkComposite(r, users, limit)
	}
}

// worstVSWR is the greatest VSWR that the ranges give for the planned bands, and
// the bands for which a range gives none. Where no range covers a band, band/antenna
// says so.
func (c *Case) worstVSWR(users []used) (worst float64, band string, at *catalog.Range, lacks []string) {
	for _, b := range c.bands {
		lacking := false
		for _, u := range users {
			for _, f := range bandPoints(b) {
				switch g := antennaAt(u.node, f); {
				case g == nil:
				case !g.VSWR.Set:
					lacking = true
				case g.VSWR.V > worst:
					worst, band, at = g.VSWR.V, b.Name, g
				}
			}
		}
		if lacking {
			lacks = append(lacks, b.Name)
		}
	}
	return worst, band, at, lacks
}

// checkComposite holds the antenna with the impedance steps of its line against the
// figure, as the radio sees them at worst. The line's own loss is passed twice by
// what comes back, and is taken off. Where match/impedance holds, the parts at the
// step change, and there is nothing to add up yet.
func (c *Case) checkComposite(r *Report, users []used, limit float64) {
	for _, u := range users {
		steps := c.stepVSWRs(u.line)
		for _, b := range c.bands {
			if len(steps) == 0 {
				break
			}
			if v, alone, f := c.composite(u, b, steps); rf.Exceeds(v, limit) {
				r.AtWorst(u.node.Device.At, u.node.Device.On(), "%s: VSWR %s in %s, and with %s on its line up to %s at %s; %s at most is expected (vswr)",
					u.node.Name(), plainFigure(alone), b.Name, count(len(steps), "impedance step", "impedance steps"), unit.Fixed(v, 2), f, plainFigure(limit)).
					Over("vswr", v, "limit_vswr", limit).InBand(b.Name).Then("see the impedance steps of the line; without them the antenna is within the figure")
				break
			}
		}
	}
}

// stepVSWRs are the VSWRs of a line's impedance steps; none where one of them holds.
func (c *Case) stepVSWRs(l *bom.Line) []float64 {
	found, _ := ohmSteps(l)
	if outside, _ := c.outsideKit(l, found); outside != 0 {
		return nil
	}
	var out []float64
	for _, s := range found {
		if s.elsewhere {
			return nil
		}
		v, _ := rf.StepVSWR(s.a, s.b)
		out = append(out, v)
	}
	return out
}

// composite is the worst VSWR of an antenna, seen through the least loss of its line,
// together with steps near the radio; with the antenna's own.
func (c *Case) composite(u used, b catalog.Band, steps []float64) (worst, alone float64, at unit.MHz) {
	for _, f := range bandPoints(b) {
		g := antennaAt(u.node, f)
		if g == nil || !g.VSWR.Set {
			continue
		}
		sum := c.Sum(u.line, f)
		seen, ok := throughLine(g.VSWR.V, sum)
		if !ok {
			continue
		}
		if _, w, ok := rf.CompositeVSWR(append([]float64{seen}, steps...)...); ok && w > worst {
			worst, alone, at = w, g.VSWR.V, f
		}
	}
	return worst, alone, at
}

// throughLine is the VSWR of an antenna seen through its line; false where the
// line's loss is not known.
func throughLine(vswr float64, sum LineSum) (float64, bool) {
	if !sum.Known() {
		return 0, false
	}
	back, ok := rf.ReturnLoss(vswr)
	if !ok {
		return 1, vswr == 1
	}
	back, ok = rf.ReturnLossThrough(back, max(0, sum.Loss.Least))
	if !ok {
		return 0, false
	}
	return rf.VSWR(back)
}

// betterAntenna names an antenna of the same fixing and face that is within the
// figure in all planned bands.
func (c *Case) betterAntenna(p *catalog.Part, users []used, limit float64) string {
	now := users[0].node
	better := c.best(c.Firm.Catalog.All(), func(q *catalog.Part) bool {
		if q == p || q.Kind.V != "antenna" || q.Antenna == nil || q.Antenna.Fixing.V != p.Antenna.Fixing.V || rfPortCount(q) != rfPortCount(p) {
			return false
		}
		for i := range q.Ports {
			port := &q.Ports[i]
			if port.RF() && (port.Impedance.V != now.Ohm.V || !sameHalf(port.Connector.V, now.Face.V) || !c.within(q, port, limit)) {
				return false
			}
		}
		return true
	})
	if better == nil {
		return "take an antenna that is better matched in these bands, or measure this one and write down what it has"
	}
	return fmt.Sprintf("take %s, or measure this one and write down what it has", c.Firm.OnHand(better))
}

// within reports whether a port of an antenna part is within a VSWR at every planned
// frequency.
func (c *Case) within(q *catalog.Part, port *catalog.Port, limit float64) bool {
	for _, b := range c.bands {
		for _, f := range bandPoints(b) {
			g := q.Antenna.RangeAt(port.Name, f)
			if g == nil || !g.VSWR.Set || rf.Exceeds(g.VSWR.V, limit) {
				return false
			}
		}
	}
	return true
}

func deviceNames(users []used) string {
	var out []string
	seen := map[*bom.Device]bool{}
	for _, u := range users {
		if d := u.node.Device; !seen[d] {
			seen[d] = true
			out = append(out, d.ID)
		}
	}
	return list(out)
}
