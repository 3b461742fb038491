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

var bandAntenna = &Rule{
	Name:   "band/antenna",
	Title:  "Each antenna covers the planned bands that reach it",
	Why:    "outside its range an antenna has no gain that anybody stated: the band is planned, and on site it is not there",
	Basis:  []Basis{practice("an antenna is planned by the ranges on its data sheet, over uplink and downlink"), bandEdges},
	Weight: Hold,
	Grave:  true, // what it radiates is computed from its ranges
	Check: func(c *Case, r *Report) {
		if len(c.Plan.Job.Bands.V) == 0 {
			if !c.refused("bands") {
				c.noBands(r)
			}
			return
		}
		for _, row := range c.antennasInUse() {
			c.checkAntenna(row, r)
		}
	},
}

// bandEdges is where the edges of bands come from.
var bandEdges = Basis{Document: "TS 36.104 table 5.5-1, TS 38.104 table 5.2-1", Edition: "V19.2.0, V18.13.0", Kind: "standard", Proof: "copy"}

// refused reports a key of the plan whose value could not be read: it is not
// missing, and the file has its finding.
func (c *Case) refused(key string) bool {
	for _, p := range c.Problems {
		if p.Kind == source.Value && strings.HasPrefix(p.Says, key+": ") {
			return true
		}
	}
	return false
}

// noBands says once that a plan without bands leaves everything by band open.
func (c *Case) noBands(r *Report) {
	for _, d := range c.Graph.Devices {
		if d.Active() || d.Kind() == "antenna" {
			r.Unknown(c.JobAt(), "job", "the plan names no bands: coverage, losses, levels and limits, all of which go by band, are not assessed").
				Then("add bands to [job], by their 3GPP names").Beside(d.At, "%s works in some", d.ID)
			return
		}
	}
}

// antennaInUse is a row of antennas with the ports of it that signals reach, each
// with the bands that are meant for it. A router's own antenna has no ports.
type antennaInUse struct {
	row   *bom.DeviceRow
	part  *catalog.Part
	ports []antennaPort
}

type antennaPort struct {
	device *bom.Device
	node   *bom.Node // nil: a router's own antenna
	bands  []catalog.Band
}

// antennasInUse lists the antennas that a feed or leg reaches, and routers that
// serve with their own; the copies of a row are one.
func (c *Case) antennasInUse() []*antennaInUse {
	var out []*antennaInUse
	ways := c.bandWays()
	for _, d := range c.Graph.Devices {
		if d.Part == nil || d.Part.Antenna == nil {
			continue
		}
		var of *antennaInUse
		if i := slices.IndexFunc(out, func(a *antennaInUse) bool { return a.row == d.Row }); i >= 0 {
			of = out[i]
		} else {
			of = &antennaInUse{row: d.Row, part: d.Part}
			out = append(out, of)
		}
		if d.Part.Router != nil {
			of.ports = append(of.ports, antennaPort{device: d, bands: ways.ownAntenna(d)})
			continue
		}
		for _, n := range d.Nodes {
			if bands := ways.bandsAt(n); len(bands) > 0 {
				of.ports = append(of.ports, antennaPort{d, n, bands})
			}
		}
	}
	return out
}

// bandsAt lists the planned bands that are meant for an antenna's port.
func (w *bandWays) bandsAt(n *bom.Node) []catalog.Band {
	out := make([]catalog.Band, 0, len(w.c.bands))
	for _, b := range w.c.Bands() {
		for _, l := range w.at[n] {
			if (l.Kind == bom.Feed || l.Kind == bom.Leg) && w.meant(l, b) {
				out = append(out, b)
				break
			}
		}
	}
	return out
}

// ownAntenna lists the planned bands that a router receives by its own antenna:
// all that it works in, unless a feed brings them.
func (w *bandWays) ownAntenna(d *bom.Device) []catalog.Band {
	var out []catalog.Band
	for _, b := range w.c.Bands() {
		fed := false
		for _, n := range d.Nodes {
			for _, l := range w.at[n] {
				fed = fed || l.Kind == bom.Feed && w.meant(l, b)
			}
		}
		if left, known := runsWithout(d, b); !fed && !(known && left.All()) {
			out = append(out, b)
		}
	}
	return out
}

// covers is what an antenna covers at a port, and false where its part states no
// range for it. Bands that the port is limited to narrow it down.
func (p antennaPort) covers() ([]unit.Span, bool) {
	var out []unit.Span
	a := p.device.Part.Antenna
	ranges := a.Ranges
	for i := range ranges {
		r := &ranges[i]
		if p.node != nil && !r.Serves(p.node.Port.Name) {
			continue
		}
		if !r.MHz.Set {
			return nil, false // the catalog file has a finding already
		}
		out = append(out, r.MHz.V)
	}
	return joined(out), len(out) > 0
}

// leavesOut is what of a band the port does not cover.
func (p antennaPort) leavesOut(b catalog.Band, covers []unit.Span) leftOut {
	up, down := covers, covers
	if p.node != nil && p.node.Port.Bands.Set {
		bandsUp, bandsDown := bandSpans(p.node.Port.Bands.V)
		up, down = common(covers, bandsUp), common(covers, bandsDown)
	}
	return leavesOut(b, up, down)
}

// common is what two sets of stretches share.
func common(a, b []unit.Span) []unit.Span {
	var out []unit.Span
	for _, x := range a {
		for _, y := range b {
			if o := x.Overlap(y); !o.Empty() {
				out = append(out, o)
			}
		}
	}
	return out
}

// name is the port's antenna, with the port where it is one of several.
func (p antennaPort) name() string {
	if p.node == nil || countRadioPorts(p.device.Part) == 1 {
		return p.device.ID
	}
	return p.node.Name()
}

func countRadioPorts(p *catalog.Part) int {
	n := 0
	for i := range p.Ports {
		if p.Ports[i].RF() {
			n++
		}
	}
	return n
}

// checkAntenna reports, for each band, the ports of one row of antennas that leave
// the same out as one finding.
func (c *Case) checkAntenna(a *antennaInUse, r *Report) {
	rangeless := map[*bom.Device]bool{}
	for _, b := range c.Bands() {
		var lefts []leftOut
		var ports [][]antennaPort
		for _, p := range a.ports {
			if !slices.ContainsFunc(p.bands, func(x catalog.Band) bool { return x.Name == b.Name }) {
				continue
			}
			covers, known := p.covers()
			if !known {
				if !rangeless[p.device] {
					rangeless[p.device] = true
					c.noRange(p, r)
				}
				continue
			}
			left := p.leavesOut(b, covers)
			if left.Nothing() {
				continue
			}
			i := slices.IndexFunc(lefts, func(x leftOut) bool { return x.String() == left.String() })
			if i < 0 {
				i = len(lefts)
				lefts, ports = append(lefts, left), append(ports, nil)
			}
			ports[i] = append(ports[i], p)
		}
		for i, left := range lefts {
			c.antennaLeaves(left, a, ports[i], r)
		}
	}
}

func (c *Case) noRange(p antennaPort, r *Report) {
	part := p.device.Part
	r.Unknown(deviceAt(p.device), p.device.On(), "what %s covers is not assessed: %s states no range for it", p.name(), part.ID).
		Then("copy the ranges from its data sheet into the part").Beside(part.At, "the part")
}

func (c *Case) antennaLeaves(left leftOut, a *antennaInUse, ports []antennaPort, r *Report) {
	first := ports[0]
	part := first.device.Part
	names := a.names(ports)
	verb := "leaves"
	if len(names) > 1 {
		verb = "leave"
	}
	covers, _ := first.covers()
	r.Fails(deviceAt(first.device), first.device.On(), "%s (%s) %s out %s; %s", list(names), part.ID, verb, left, first.bound(covers, left)).
		Over("left_out_mhz", left.Width(), "allowed_mhz", 0).InBand(left.Band.Name).
		Then("%s", c.coveringAntenna(part, left.Band)).
		Beside(c.bandAt(left.Band), "%s is planned here", left.Band.Name).Beside(part.Antenna.Ranges[0].At, "its ranges")
}

// bound says what a port covers: the ranges, or the bands that it is limited to
// where those are what leaves something out.
func (p antennaPort) bound(covers []unit.Span, left leftOut) string {
	if leavesOut(left.Band, covers, covers).Nothing() {
		return "its port " + p.node.Port.Name + " is for " + wordList(p.node.Port.Bands.V) + " only"
	}
	return "its ranges cover " + stretches(covers)
}

// names lists the ports; an antenna all of whose ports are among them stands for
// itself.
func (a *antennaInUse) names(ports []antennaPort) []string {
	var out []string
	for _, p := range ports {
		name := p.name()
		if portsOn(ports, p.device) == portsOn(a.ports, p.device) {
			name = p.device.ID
		}
		if !slices.Contains(out, name) {
			out = append(out, name)
		}
	}
	return out
}

func portsOn(ports []antennaPort, d *bom.Device) int {
	n := 0
	for _, p := range ports {
		if p.device == d {
			n++
		}
	}
	return n
}

// coveringAntenna names an antenna of the catalog that is fixed in the same way,
// has as many ports, and covers every planned band on each of them.
func (c *Case) coveringAntenna(now *catalog.Part, b catalog.Band) string {
	drop := fmt.Sprintf("take %s out of bands", b.Name)
	p := c.Firm.pick(func(p *catalog.Part) bool {
		return p.Antenna != nil && p.Router == nil && now.Router == nil && p.Antenna.Fixing.V == now.Antenna.Fixing.V &&
			countRadioPorts(p) == countRadioPorts(now) && c.coversPlan(p)
	})
	if p == nil {
		return "no antenna like it in the catalog covers all planned bands; find one, or " + drop
	}
	return "take " + c.Firm.OnHand(p) + ", which covers all planned bands, or " + drop
}

func (c *Case) coversPlan(p *catalog.Part) bool {
	for i := range p.Ports {
		if !p.Ports[i].RF() {
			continue
		}
		port := antennaPort{&bom.Device{Part: p}, &bom.Node{Port: &p.Ports[i]}, nil}
		covers, known := port.covers()
		for _, b := range c.Bands() {
			if !known || !port.leavesOut(b, covers).Nothing() {
				return false
			}
		}
	}
	return true
}

// pick is the catalog part that would do: one on hand if there is one, else the
// first by ID; nil where none would. Parts that are withdrawn are passed over.
func (f *Firm) pick(would func(*catalog.Part) bool) *catalog.Part {
	var first *catalog.Part
	for _, p := range f.Catalog.All() {
		if p.Status.V == "withdrawn" || !would(p) {
			continue
		}
		if f.held(p) {
			return p
		}
		if first == nil {
			first = p
		}
	}
	return first
}
