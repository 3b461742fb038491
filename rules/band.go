package rules

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

var bandRules = []*Rule{bandAntenna, bandPart, bandAmplifier, bandProfile}

// leftOut is what of a planned band something does not cover.
type leftOut struct {
	Band     catalog.Band
	Up, Down []unit.Span
}

// leavesOut compares a band with what is covered in each direction.
func leavesOut(b catalog.Band, up, down []unit.Span) leftOut {
	l := leftOut{Band: b, Down: b.Downlink.Minus(down...)}
	if !b.Uplink.Empty() {
		l.Up = b.Uplink.Minus(up...)
	}
	return l
}

// Nothing reports that the whole band is covered.
func (l leftOut) Nothing() bool { return len(l.Up) == 0 && len(l.Down) == 0 }

// All reports that nothing of the band is covered.
func (l leftOut) All() bool {
	return slices.Equal(l.Down, []unit.Span{l.Band.Downlink}) && (l.Band.Uplink.Empty() || slices.Equal(l.Up, []unit.Span{l.Band.Uplink}))
}

// oneWay reports a band that has one stretch of spectrum: both directions in turn,
// or only a downlink.
func (l leftOut) oneWay() bool { return l.Band.Uplink.Empty() || l.Band.Uplink == l.Band.Downlink }

// Width is how many MHz are left out; what both directions share counts once.
func (l leftOut) Width() float64 {
	var w unit.MHz
	for _, s := range l.Down {
		w += s.Width()
	}
	if !l.oneWay() {
		for _, s := range l.Up {
			w += s.Width()
		}
	}
	return float64(w)
}

// String names the band and what of it is left out.
func (l leftOut) String() string {
	name := l.Band.Name
	switch {
	case l.oneWay() && l.All():
		return fmt.Sprintf("all of %s, %s", name, l.Band.Downlink)
	case l.oneWay():
		return stretches(l.Down) + " of " + name
	case l.All():
		return fmt.Sprintf("all of %s, %s", name, stretches([]unit.Span{l.Band.Uplink, l.Band.Downlink}))
	}
	var out []string
	if len(l.Up) > 0 {
		out = append(out, stretches(l.Up)+" of the uplink of "+name)
	}
	if len(l.Down) > 0 {
		out = append(out, stretches(l.Down)+" of the downlink of "+name)
	}
	return list(out)
}

// stretches prints stretches of spectrum as part of a sentence: "600–900 and
// 1710–2700 MHz".
func stretches(spans []unit.Span) string {
	var out []string
	for i, s := range spans {
		word := s.String()
		if i < len(spans)-1 {
			word = strings.TrimSuffix(word, " MHz")
		}
		out = append(out, word)
	}
	return list(out)
}

// joined puts stretches that touch or overlap together, from low to high.
func joined(spans []unit.Span) []unit.Span {
	sorted := slices.Clone(spans)
	slices.SortFunc(sorted, func(a, b unit.Span) int {
		if a.Lo < b.Lo {
			return -1
		}
		return 1
	})
	var out []unit.Span
	for _, s := range sorted {
		if n := len(out); n > 0 && s.Lo <= out[n-1].Hi {
			out[n-1].Hi = max(out[n-1].Hi, s.Hi)
			continue
		}
		out = append(out, s)
	}
	return out
}

// bandSpans are the directions of the bands that a list names.
func bandSpans(names catalog.Words) (up, down []unit.Span) {
	up, down = make([]unit.Span, 0, len(names)), make([]unit.Span, 0, len(names))
	for _, n := range names {
		if b, ok := catalog.LookBand(n.V); ok {
			down = append(down, b.Downlink)
			if !b.Uplink.Empty() {
				up = append(up, b.Uplink)
			}
		}
	}
	return up, down
}

// listLeavesOut compares a band with a list of bands.
func listLeavesOut(b catalog.Band, names catalog.Words) leftOut {
	for _, n := range names {
		if n.V == b.Name {
			return leftOut{Band: b} // named as it is planned
		}
	}
	up, down := bandSpans(names)
	return leavesOut(b, up, down)
}

// bandAt is where the plan names a band.
func (c *Case) bandAt(b catalog.Band) source.Place {
	for _, v := range c.Plan.Job.Bands.V {
		if v.V == b.Name {
			return v.At
		}
	}
	return c.JobAt()
}

// runsWithout is what of a band an amplifier or router does not work in; false
// where its part does not say in which bands it works.
func runsWithout(d *bom.Device, b catalog.Band) (leftOut, bool) {
	switch p := d.Part; {
	case p.Amplifier != nil && len(p.Amplifier.Bands) > 0:
		return listLeavesOut(b, ampBands(p.Amplifier)), true
	case p.Router != nil && p.Router.Bands.Set:
		return listLeavesOut(b, p.Router.Bands.V), true
	}
	return leftOut{Band: b}, false
}

func ampBands(a *catalog.Amplifier) catalog.Words { return a.BandNames() }

// runners lists the amplifiers and routers of the plan whose part is known.
func (c *Case) runners() []*bom.Device {
	var out []*bom.Device
	for _, d := range c.Graph.Devices {
		if d.Part != nil && d.Active() {
			out = append(out, d)
		}
	}
	return out
}

// division knows which amplifiers and routers of a plan work in all of a band. What
// one of them leaves to another is a division of work rather than a gap.
type division map[string][]*bom.Device // by band; two at most

func (c *Case) division() division {
	by := division{}
	for _, b := range c.Bands() {
		for _, d := range c.runners() {
			if left, known := runsWithout(d, b); known && left.Nothing() && len(by[b.Name]) < 2 {
				by[b.Name] = append(by[b.Name], d)
			}
		}
	}
	return by
}

// elsewhere names a device other than d that works in all of a band, or "".
func (by division) elsewhere(d *bom.Device, b catalog.Band) string {
	for _, o := range by[b.Name] {
		if o != d {
			return o.ID
		}
	}
	return ""
}

// deviceAt is where the plan names the device's part; a copy has a place of its own.
func deviceAt(d *bom.Device) source.Place {
	if d.ID == d.Row.ID {
		return placeOr(d.Row.Part.At, d.At)
	}
	return d.At
}
