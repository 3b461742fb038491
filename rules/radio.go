package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

// RadioChain is one router in one planned band.
type RadioChain struct {
	Router   *bom.Device
	Band     catalog.Band
	Feeds    []*bom.Line // to its antennas; none where it has its own
	Antennas []Antenna   // what each radiates with all of the power on its port
	Own      bool        // the router has its own antenna
}

// radioChains lists the routers that are not fed by an amplifier alone, in each
// planned band of their modem.
func (c *Case) radioChains() []*RadioChain {
	var out []*RadioChain
	for _, d := range c.Graph.Devices {
		if d.Part == nil || d.Part.Router == nil {
			continue
		}
		for _, b := range c.bands {
			if !catalog.Has(d.Part.Router.Bands, b.Name) || b.Uplink.Empty() {
				continue
			}
			out = append(out, c.radioChain(d, b))
		}
	}
	return out
}

func (c *Case) radioChain(d *bom.Device, b catalog.Band) *RadioChain {
	x := &RadioChain{Router: d, Band: b, Own: d.Part.Antenna != nil}
	for _, l := range c.Lines().Of(bom.Feed) {
		if l.To.Device == d {
			x.Feeds = append(x.Feeds, l)
			x.Antennas = append(x.Antennas, c.radioAntenna(l, d, b))
		}
	}
	return x
}

// radioAntenna is what one antenna of a router radiates. The transmit power is the
// total over the ports; it may all stand on one of them.
func (c *Case) radioAntenna(l *bom.Line, d *bom.Device, b catalog.Band) Antenna {
	spec := &catalog.Gain{MaxOut: d.Part.Router.TxDBm}
	a := c.radiates(l, b.Uplink, spec, d.Part.At)
	if !spec.MaxOut.Set {
		a.Lacks = []Lack{{"tx_dbm of " + d.Part.ID, d.Part.At}}
	}
	return a
}

// strongest is the antenna with the highest EIRP of those that are known, or nil.
func (x *RadioChain) strongest() *Antenna {
	d := Direction{Antennas: x.Antennas}
	return d.strongest()
}

// query asks for the limits of the radio service in this band.
func (x *RadioChain) query() limits.Query {
	return limits.Query{Kind: "eirp", Direction: "uplink", Class: limits.Radio, Band: x.Band.Name}
}

// radioBudget lays a router's uplink open.
func (c *Case) radioBudget(x *RadioChain) *BudgetBand {
	f := x.Band.Uplink.Mid()
	out := &BudgetBand{Device: x.Router, Band: x.Band.Name, Direction: "uplink", MHz: f, Worst: x.strongest()}
	for _, l := range x.Feeds {
		out.Lines = append(out.Lines, BudgetLine{l, c.Sum(l, f)})
	}
	if s := out.Worst; s != nil {
		out.EIRP = known(s.Mid.EIRP.Most)
	}
	if c.Profile == nil {
		return out
	}
	q := x.query()
	a := c.Profile.Assess(q, limits.For(x.Band.Name))
	if a.None() {
		return out
	}
	l := LimitCheck{Rule: "gain/radio-eirp", Outcome: "unknown"}
	if a.Row != nil {
		l.Limit, l.Unit, l.Formula, l.Basis = known(a.Value), a.Row.Unit(), a.Row.Formula(), c.citation(a.Row)
	}
	if out.Worst != nil {
		l.Value, l.Tolerance = known(out.Worst.Worst.EIRP.Most.Value()), c.eirpTolerance(out.Worst)
	}
	switch {
	case !l.Value.OK || a.Row == nil:
	case a.Exceeded(l.Value.V):
		l.Outcome = "fails"
	case !a.Whole():
	case a.Exceeded(l.Value.V + l.Tolerance):
		l.Outcome = "at-worst"
	default:
		l.Outcome = "holds"
	}
	out.Limits = append(out.Limits, l)
	return out
}

// dBi net of the line's least loss, as grants of modules count antenna gain.
func netGain(r Radiation) unit.DB { return r.Gain - r.Line.Loss.Least }
