package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
)

// supplies is all that brings power in one plan, found once.
type supplies struct {
	leads  []lead
	runs   []dataRun
	coax   []coaxFeed
	toward map[*bom.Device]bool  // some port on its lines feeds current its way
	draws  map[*bom.Device]*draw // nil while it is being added up
}

// supplies is what brings power in the plan, found on first use.
func (c *Case) supplies() *supplies {
	if c.power == nil {
		c.power = &supplies{toward: map[*bom.Device]bool{}, draws: map[*bom.Device]*draw{}}
		c.power.leads = c.findLeads()
		c.power.runs = c.dataRuns()
		c.findCoaxFeeds(c.power)
	}
	return c.power
}

// lead is a wire with what it comes from and what it feeds. Either is nil where the
// plan does not say, or where what it names did not resolve.
type lead struct {
	*bom.WireLine
	source, load *bom.Device
}

// findLeads lists the wires of the plan. Which end is the source is told by what
// stands there; only where that leaves it open by which end is written first.
func (c *Case) findLeads() []lead {
	var out []lead
	for _, w := range c.Graph.Wires {
		from, to := c.resolved(w.Row.From), c.resolved(w.Row.To)
		if rankOfSource(to) > rankOfSource(from) {
			from, to = to, from
		}
		out = append(out, lead{w, from, to})
	}
	return out
}

// coaxFeed is direct current that gets over coax to something that lives on it.
type coaxFeed struct {
	line *bom.Line
	feeder
	to *bom.Node
}

// deviceOf is the device whose port feeds a line.
func (c *Case) deviceOf(f feeder) *bom.Device {
	id, _, _ := strings.Cut(f.name, ".")
	return c.Graph.Device(id)
}

// findCoaxFeeds follows the direct current of the lines: toward which devices some
// of it goes, and where it gets to what lives on it, each pair of ends once.
func (c *Case) findCoaxFeeds(all *supplies) {
	seen := map[string]bool{}
	for _, l := range c.Lines().All {
		for _, f := range feeders(l) {
			_, end := fed(l, f)
			node := l.To
			if !f.on {
				node = l.From
			}
			if node.Device != nil {
				all.toward[node.Device] = true
			}
			key := f.name + " " + node.Name()
			if l.Open && f.on || end == nil || seen[key] || c.lives(node) != yes || node.Port.DCOut != nil {
				continue
			}
			seen[key] = true
			all.coax = append(all.coax, coaxFeed{l, f, node})
		}
	}
}

// draw is the power that something takes, with its addends, or what that lacks.
type draw struct {
	watt  float64
	terms []string
	lacks []Lack
}

func (a *draw) add(b draw) {
	a.watt += b.watt
	a.terms = append(a.terms, b.terms...)
	a.lacks = append(a.lacks, b.lacks...)
}

// String prints the power with its addends: "42 W: 30 W (amp) + 12 W (radio)".
func (a draw) String() string {
	if len(a.terms) == 1 {
		return a.terms[0]
	}
	return watts(a.watt) + ": " + strings.Join(a.terms, " + ")
}

// drawOf is the greatest power that a device takes. What only passes power on takes
// what hangs on it; a converter takes more than it gives.
func (c *Case) drawOf(d *bom.Device) draw {
	all := c.supplies()
	if have, begun := all.draws[d]; have != nil {
		return *have
	} else if begun {
		return draw{lacks: []Lack{{"an end of the ring of supplies at " + d.ID, d.At}}}
	}
	all.draws[d] = nil
	out := c.addUp(d)
	all.draws[d] = &out
	return out
}

func (c *Case) addUp(d *bom.Device) draw {
	switch l := loadOf(d); {
	case l != nil && l.W.Set:
		return draw{watt: l.W.V, terms: []string{watts(l.W.V) + " (" + d.ID + ")"}}
	case d.Kind() == "supply":
		return c.hangsOn(d).through(c.House().ConverterPercent.Or(85), d.ID)
	case d.Kind() == "injector" || d.Kind() == "switch":
		return c.hangsOn(d)
	case d.Kind() == "bias-tee":
		return c.overTee(d)
	}
	return draw{lacks: []Lack{{"load.w of " + partName(d), partOrDevice(d)}}}
}

// through is a draw ahead of a converter that keeps some of the power for itself.
func (a draw) through(percent float64, id string) draw {
	if len(a.terms) == 0 {
		return a
	}
	a.watt *= 100 / percent
	a.terms = []string{fmt.Sprintf("%s (%s, of which it gives %s %%)", watts(a.watt), id, plainFigure(percent))}
	return a
}

// hangsOn is the power that a source has to give: over wires and over data lines,
// each device once. What gets a voltage or a kind of power that it does not take is
// left out: that has a finding of its own.
func (c *Case) hangsOn(d *bom.Device) draw {
	var all draw
	seen := map[*bom.Device]bool{nil: true}
	add := func(to *bom.Device) {
		if !seen[to] {
			seen[to] = true
			all.add(c.drawOf(to))
		}
	}
	for _, w := range c.supplies().leads {
		if w.source == d && w.load != nil && !c.wrongVolts(w) {
			add(w.load)
		}
	}
	for _, run := range c.supplies().runs {
		if to := run.fedBy(d); loadOf(to) != nil {
			add(to)
		}
	}
	return all
}

// overTee is the power that goes over a bias tee: what lives on its line, else what
// its port gives at most.
func (c *Case) overTee(d *bom.Device) draw {
	for _, x := range c.supplies().coax {
		if l := loadOf(x.to.Device); l != nil && l.W.Set && c.deviceOf(x.feeder) == d {
			return draw{watt: l.W.V, terms: []string{watts(l.W.V) + " (" + x.to.Device.ID + " over " + d.ID + ")"}}
		}
	}
	if d.Part != nil {
		for i := range d.Part.Ports {
			if dc := d.Part.Ports[i].DCOut; dc != nil && dc.MA.Set {
				w := dc.Volts.V * dc.MA.V / 1000
				return draw{watt: w, terms: []string{watts(w) + " (" + d.ID + ")"}}
			}
		}
	}
	return draw{lacks: []Lack{{"dc_out.ma of " + partName(d), partOrDevice(d)}}}
}
