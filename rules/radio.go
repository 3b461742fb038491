package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
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
// total over the ports: what each of them sends adds up to it, so the antenna with
// the highest gain behind all of it is the most that the router can radiate, and
// with equal antennas just what it does.
func (c *Case) radioAntenna(l *bom.Line, d *bom.Device, b catalog.Band) Antenna {
	spec := &catalog.Gain{MaxOut: d.Part.Router.TxDBm}
	a := c.radiates(l, b.Uplink, spec, d.Part.At)
	if !spec.MaxOut.Set {
		a.Lacks = []Lack{(&RadioChain{Router: d}).noPower()}
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

// assess asks the profile for the limits of a router in its band: for the composite
// figure, and for whatever else rows are counted in. Where the profile has none at
// all there is no answer.
func (c *Case) assessRadio(x *RadioChain) []limits.Assessment {
	var out []limits.Assessment
	for _, q := range eachPer(c.Profile, x.query()) {
		if a := c.Profile.Assess(q, limits.For(x.Band.Name)); !a.None() {
			out = append(out, a)
		}
	}
	return out
}

// rowsLack names what keeps rows from being assessed, and spectrum for which there
// is none.
func (x *RadioChain) rowsLack(c *Case, a limits.Assessment) []Lack {
	var lacks []Lack
	for _, o := range a.Open {
		for _, m := range o.Missing {
			lacks = append(lacks, Lack{m, partAt(x.Router)})
		}
	}
	if len(a.Left) > 0 {
		lacks = append(lacks, Lack{"a row of profile " + c.Profile.ID + " for " + spans(a.Left), placeOr(c.Plan.Job.Profile.At, partAt(x.Router))})
	}
	return dedupe(lacks)
}

// ownRadiation is what a router radiates from its own antenna at the edges and in
// the middle of its band.
func (x *RadioChain) ownRadiation() ([]Radiation, []Lack) {
	part := x.Router.Part
	if !part.Router.TxDBm.Set {
		return nil, []Lack{x.noPower()}
	}
	var out []Radiation
	for _, f := range points(x.Band.Uplink) {
		rng := part.Antenna.RangeAt("", f)
		if rng == nil || !rng.Gain.Set {
			return nil, []Lack{{"a gain of " + x.Router.ID + " all over the band", x.Router.At}}
		}
		r := Radiation{MHz: f, Out: unit.DBmOf(part.Router.TxDBm.V), Gain: unit.DB(rng.Gain.V)}
		r.EIRP, _ = rf.EIRP(r.Out, rf.Loss{}, r.Gain)
		out = append(out, r)
	}
	return out, nil
}

// noPower is what is missing where a router's part does not state its power.
func (x *RadioChain) noPower() Lack {
	return Lack{"tx_dbm of " + x.Router.Part.ID, x.Router.Part.At}
}

// netGain is an antenna in dBi net of the line's least loss, as grants of modules count antenna gain.
func netGain(r Radiation) unit.DB { return r.Gain - r.Line.Loss.Least }
