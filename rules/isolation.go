package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Isolated is the isolation between an amplifier's ports in one band: measured, or
// computed from the plan's geometry. Where phones lie in a cradle or hang on a wire
// there is no server antenna, and without a reading it has neither a figure nor a
// lack.
type Isolated struct {
	Known[unit.DB]
	Reading *bom.Reading // where it was measured
	Edge    unit.MHz     // where it was computed: the edge of the band where it is least
	Pairs   []Pair       // and the pairs of antennas that it is the sum of
}

// Pair is one server antenna and one donor antenna, port to port.
type Pair struct {
	Donor, Server *bom.Node
	rf.Coupling
	Isolation unit.DB
}

// isolation is the newest reading of the latest stage, or the least over the edges
// of the amplifier's band of what the plan's geometry gives.
func (c *Case) isolation(x *BandChain) Isolated {
	if r := c.isolationReading(x); r != nil {
		return Isolated{Known: known(unit.DB(r.DB.V)), Reading: r}
	}
	if x.coupling() != "antenna" {
		return Isolated{}
	}
	var least Isolated
	for _, f := range edges(x.Own) {
		at := c.isolationAt(x, f)
		if !at.OK {
			return at
		}
		if !least.OK || at.V < least.V {
			least = at
		}
	}
	return least
}

// edges are the low and high edge of a band's uplink and downlink.
func edges(b catalog.Band) []unit.MHz {
	var out []unit.MHz
	for _, s := range []unit.Span{b.Uplink, b.Downlink} {
		if !s.Empty() {
			out = append(out, s.Lo, s.Hi)
		}
	}
	return out
}

// isolationReading finds the measured isolation that counts, or nil.
func (c *Case) isolationReading(x *BandChain) *bom.Reading {
	var best *bom.Reading
	for i := range c.Plan.Readings {
		r := &c.Plan.Readings[i]
		if r.What.V == "isolation" && r.DB.Set && x.isMeasuredBy(r) && (best == nil || goesBefore(r, best)) {
			best = r
		}
	}
	return best
}

// isMeasuredBy reports whether a reading is about this amplifier and this band. One
// without a band is for all, one without ends for any amplifier.
func (x *BandChain) isMeasuredBy(r *bom.Reading) bool {
	if r.Band.Set && r.Band.V != x.Band.Name && r.Band.V != x.Own.Name {
		return false
	}
	return !r.From.Set && !r.To.Set || r.From.V.Name == x.Amp.ID || r.To.V.Name == x.Amp.ID
}

// goesBefore reports whether a reading counts before another: as-built before
// survey, then the newer, then the band's own before one for all, then the lower.
func goesBefore(a, b *bom.Reading) bool {
	built := func(r *bom.Reading) bool { return r.Stage.V == "as-built" }
	switch {
	case built(a) != built(b):
		return built(a)
	case a.On.V != b.On.V:
		return a.On.V.After(b.On.V)
	case a.Band.Set != b.Band.Set:
		return a.Band.Set
	}
	return a.DB.V < b.DB.V
}

// isolationAt is the isolation at a frequency: of all server antennas together into
// all donor antennas of a port, the least over the ports.
func (c *Case) isolationAt(x *BandChain, f unit.MHz) Isolated {
	if x.cutOff() {
		return Isolated{Known: unknown[unit.DB](x.Amp.At, "a feed and a leg")}
	}
	var least Isolated
	for _, n := range x.Amp.Nodes {
		pairs, lacks := c.pairsInto(n, x, f)
		if len(lacks) > 0 {
			return Isolated{Known: Known[unit.DB]{Lacks: dedupe(lacks)}}
		}
		if v, ok := together(pairs); ok && (!least.OK || v < least.V) {
			least = Isolated{Known: known(v), Edge: f, Pairs: pairs}
		}
	}
	return least
}

// pairsInto are all server antennas with each donor antenna of a port.
func (c *Case) pairsInto(port *bom.Node, x *BandChain, f unit.MHz) (pairs []Pair, lacks []Lack) {
	for _, feed := range x.Feeds {
		if feed.To != port {
			continue
		}
		for _, leg := range x.Legs {
			p, missing := c.pair(feed, leg, f)
			pairs, lacks = append(pairs, p), append(lacks, missing...)
		}
	}
	return pairs, lacks
}

// together is what pairs let through as a sum; of none there is none.
func together(pairs []Pair) (unit.DB, bool) {
	var each []unit.DB
	for _, p := range pairs {
		each = append(each, p.Isolation)
	}
	return rf.TotalIsolation(each...)
}

// pair is the isolation from one server antenna to one donor antenna, port to port.
func (c *Case) pair(feed, leg *bom.Line, f unit.MHz) (Pair, []Lack) {
	p := Pair{Donor: feed.From, Server: leg.To}
	donor, server := p.Donor.Device, p.Server.Device
	way, lacks := between(donor, server)
	dr, sr := antennaAt(p.Donor, f), antennaAt(p.Server, f)
	fs, ls, shell := c.Sum(feed, f), c.Sum(leg, f), c.shell(donor.Place, server.Place, f)
	lacks = slices.Concat(lacks, needGain(p.Donor, dr), needGain(p.Server, sr), fs.Missing, ls.Missing, shell.Lacks)
	if len(lacks) > 0 {
		return p, lacks
	}
	path, ok := rf.AirGap(f, way.Metres)
	if !ok {
		return p, []Lack{{"more than a wavelength between " + donor.ID + " and " + server.ID, p.Server.At()}}
	}
	p.Coupling = rf.Coupling{Path: path, Shell: shell.V, Feed: fs.Loss.Least, Leg: ls.Loss.Least,
		Donor: unit.DB(dr.Gain.V) - facing(donor, dr, way), Server: unit.DB(sr.Gain.V) - facing(server, sr, back(way))}
	if p.Isolation, ok = p.Coupling.Isolation(); !ok {
		return p, []Lack{{"an isolation between " + donor.ID + " and " + server.ID + " that is above zero", p.Server.At()}}
	}
	return p, nil
}

// needGain is what is missing where an antenna has no range.
func needGain(n *bom.Node, rng *catalog.Range) []Lack {
	if rng != nil {
		return nil
	}
	return []Lack{noGain(n)}
}

// facing is the discrimination of an antenna toward a direction; one without an
// aim is taken to look straight at it.
func facing(d *bom.Device, r *catalog.Range, to rf.Direction) unit.DB {
	if !d.Row.AimDeg.Set {
		return 0
	}
	off, _ := pattern(r).OffBoresight(d.Row.AimDeg.V, to)
	return off
}

func back(d rf.Direction) rf.Direction {
	return rf.Direction{Metres: d.Metres, Bearing: d.Bearing + 180, Elevation: -d.Elevation}
}

// between is the way from one device to another, or what is missing to know it.
func between(a, b *bom.Device) (rf.Direction, []Lack) {
	var lacks []Lack
	for _, d := range []*bom.Device{a, b} {
		if !d.Point.Set {
			lacks = append(lacks, Lack{"a position (at) of " + d.ID + " or of its place", d.At})
		}
	}
	if len(lacks) > 0 {
		return rf.Direction{}, lacks
	}
	to, ok := position(a).Toward(position(b))
	if !ok {
		return rf.Direction{}, []Lack{{"two positions for " + a.ID + " and " + b.ID, b.At}}
	}
	return to, nil
}

func position(d *bom.Device) rf.Position {
	p := d.Point.V
	return rf.Position{East: p.East, North: p.North, Up: p.Up}
}

// shell is the loss between two places: as [[between]] says, else nothing within
// one place or on one side, else the site's shell.
func (c *Case) shell(a, b *bom.Place, f unit.MHz) Known[unit.DB] {
	if a == nil || b == nil {
		return unknown[unit.DB](c.JobAt(), "the places of both antennas")
	}
	for i := range c.Plan.Betweens {
		w := &c.Plan.Betweens[i]
		if w.A.V == a.ID && w.B.V == b.ID || w.A.V == b.ID && w.B.V == a.ID {
			if d, ok := rf.Lookup(rfPoints(w.LossDB.V), unit.Span{}, f); ok {
				return known(d)
			}
			return unknown[unit.DB](w.At, "a loss between "+a.ID+" and "+b.ID)
		}
	}
	switch {
	case a == b || a.Outdoors() == b.Outdoors():
		return known(unit.DB(0))
	case c.Plan.Site.ShellDB.Set:
		return known(unit.DB(c.Plan.Site.ShellDB.V))
	}
	return unknown[unit.DB](placeOr(c.Plan.Site.At, c.JobAt()), "shell_db of the site, or the loss between "+a.ID+" and "+b.ID)
}
