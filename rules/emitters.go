package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// emitter is one antenna with what it radiates in each band.
type emitter struct {
	device *bom.Device
	parts  []emission
	lacks  []Lack
}

// emission is what an antenna radiates at the edges and in the middle of a band.
type emission struct {
	band string
	at   []Radiation
}

// emitters lists the antennas that amplifiers and routers transmit from, those that
// routers have of their own among them.
func (c *Case) emitters() []*emitter {
	if c.emit == nil {
		c.emit = c.findEmitters()
	}
	return c.emit
}

func (c *Case) findEmitters() []*emitter {
	all := emitters{list: []*emitter{}}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			for i := range d.Antennas {
				all.add(x.Band, d.Span, &d.Antennas[i])
			}
		}
	}
	for _, x := range c.Chain().Radios {
		if len(x.Feeds) == 0 && x.Own {
			all.addOwn(x)
		} else {
			all.addRadio(x)
		}
	}
	return all.list
}

type emitters struct{ list []*emitter }

// of is the emitter of a device.
func (all *emitters) of(d *bom.Device) *emitter {
	for _, e := range all.list {
		if e.device == d {
			return e
		}
	}
	e := &emitter{device: d}
	all.list = append(all.list, e)
	return e
}

// add adds what an antenna radiates in a band. Where it does not work in the band,
// band/antenna says so.
func (all *emitters) add(band catalog.Band, span unit.Span, a *Antenna) {
	if !reaches(a.Line, band) || span.Empty() {
		return
	}
	e := all.of(a.Node.Device)
	if len(a.Lacks) > 0 {
		e.lacks = append(e.lacks, a.Lacks...)
		return
	}
	e.parts = append(e.parts, emission{band.Name, a.at})
}

// addOwn adds what a router radiates from its own antenna.
func (all *emitters) addOwn(x *RadioChain) {
	e := all.of(x.Router)
	at, lacks := x.ownRadiation()
	if e.lacks = append(e.lacks, lacks...); len(lacks) == 0 {
		e.parts = append(e.parts, emission{x.Band.Name, at})
	}
}

// addRadio adds what a router radiates in its band. Its power is the total over its
// ports, so of several ports of one antenna the strongest stands for all.
func (all *emitters) addRadio(x *RadioChain) {
	strongest := map[*bom.Device]*Antenna{}
	for i := range x.Antennas {
		a := &x.Antennas[i]
		if d := a.Node.Device; len(a.Lacks) == 0 && (strongest[d] == nil || strongest[d].Worst.EIRP.Most.Below(a.Worst.EIRP.Most)) {
			strongest[d] = a
		}
	}
	for i := range x.Antennas {
		if a := &x.Antennas[i]; len(a.Lacks) > 0 || strongest[a.Node.Device] == a {
			all.add(x.Band, x.Band.Uplink, a)
		}
	}
}
