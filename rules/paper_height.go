package rules

import (
	"math"

	"driploop/bom"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var paperHeight = &Rule{
	Name:  "paper/height",
	Title: "A fixed antenna that transmits stands no higher than its band allows",
	Why:   "some spectrum is shared on the condition that fixed antennas stay low; a high one is heard where nobody planned for it",
	Basis: []Basis{
		{"47 CFR 27.50(d)(4)", "current text", "code", "memory"}},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if c.Profile == nil {
			return
		}
		for _, d := range c.transmitters() {
			for _, h := range c.heights() {
				c.checkHeight(r, d, h)
			}
		}
	},
}

// heightFor is a height limit with the planned bands that it concerns.
type heightFor struct {
	limit *limits.Height
	bands []string
}

// heights lists the height limits of the planned bands, each once.
func (c *Case) heights() []heightFor {
	var out []heightFor
	for _, b := range c.Bands() {
	next:
		for _, h := range c.Profile.HeightsFor(b.Name, !c.Vehicle()) {
			for i := range out {
				if out[i].limit == h {
					out[i].bands = append(out[i].bands, b.Name)
					continue next
				}
			}
			out = append(out, heightFor{h, []string{b.Name}})
		}
	}
	return out
}

// transmitters lists the antennas that send toward the network from a fixed
// station: donors of an amplifier wherever they are, those of a router outdoors,
// and routers outdoors with an antenna of their own.
func (c *Case) transmitters() []*bom.Device {
	var out []*bom.Device
	seen := map[*bom.Device]bool{}
	add := func(d *bom.Device) {
		if !seen[d] {
			seen[d] = true
			out = append(out, d)
		}
	}
	for _, l := range c.leadIns() {
		ant, radio := l.From, l.To
		if ant.Device.Active() {
			ant, radio = l.To, l.From
		}
		if ant.Device == nil || radio.Device == nil || ant.Device.Kind() != "antenna" || !radio.Device.Active() || radio.Port.Side.V == "server" || radio.Port.Use.Or("cellular") != "cellular" {
			continue
		}
		if radio.Device.Kind() == "amplifier" || !ant.Device.Place.Indoors() {
			add(ant.Device)
		}
	}
	for _, d := range c.Graph.Devices {
		if d.Part != nil && d.Part.Router != nil && d.Part.Antenna != nil && len(d.Part.Antenna.Ranges) > 0 && d.Place.Outdoors() {
			add(d)
		}
	}
	return out
}

// checkHeight holds one antenna against one limit.
func (c *Case) checkHeight(r *Report, d *bom.Device, h heightFor) {
	most := h.limit.Most.V.Metres()
	low, high, lacks := heightOf(d)
	at := placeOr(d.Point.At, d.At)
	if onBase(d) {
		at = placeOr(d.Row.Up.At, at)
	}
	switch {
	case lacks == "the height":
		r.Unknown(d.At, d.On(), "how high %s stands above ground is not known; in %s it may stand %s at most, so this is not assessed", d.ID, list(h.bands), h.limit.Most.V).
			Then("give its place a point (at), height last").Replacing(h.limit.Explain())
	case rf.Exceeds(low, most):
		r.Fails(at, d.On(), "%s stands %s m above ground and transmits in %s; %s is the most on %s", d.ID, plainFigure(Round(low)), list(h.bands), h.limit.Most.V, h.limit.MHz.V).
			Over("height_m", low, "limit_m", most).Then("set it lower, or leave %s out", list(h.bands)).Replacing(h.limit.Explain())
	case lacks != "" && !(high <= most):
		r.Unknown(d.At, d.On(), "%s stands %s m above ground or more; %s is missing, and in %s it may stand %s at most", d.ID, plainFigure(Round(low)), lacks, list(h.bands), h.limit.Most.V).
			Then("add up to %s", d.ID).Replacing(h.limit.Explain())
	}
}

// onBase reports a device whose point is that of what it stands on, plus up.
func onBase(d *bom.Device) bool { return d.Stands != nil && d.Point.At == d.Stands.Point.At }

// heightOf is the height of a device above ground in metres. Where it stands on a
// mast and up is missing, it lies between the mast's foot and its free end; high is
// then that end, or infinite where the mast gives no free length.
func heightOf(d *bom.Device) (low, high float64, lacks string) {
	if !d.Point.Set {
		return 0, 0, "the height"
	}
	low = d.Point.V.Up
	high = low
	for s := d; onBase(s); s = s.Stands {
		if s.Row.Up.Set {
			continue
		}
		lacks = "up of " + s.ID
		if !s.Stands.Row.Free.Set {
			return low, math.Inf(1), lacks
		}
		high += s.Stands.Row.Free.V.Metres()
	}
	return low, high, lacks
}
