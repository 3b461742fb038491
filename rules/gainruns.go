package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// Isolated is the isolation between an amplifier's ports in one band.
type Isolated struct {
	Known[unit.DB]
	Reading *bom.Reading // where it was measured
	Edge    unit.MHz     // the edge of the band where it is least, where it was computed
}

// isolation is the newest reading of the latest stage, or the least over the edges
// of the band of what the plan's geometry gives.
func (c *Case) isolation(x *BandChain) Isolated {
	if r := c.isolationReading(x); r != nil {
		return Isolated{Known: known(unit.DB(r.DB.V)), Reading: r}
	}
	var least Isolated
	for i, f := range edges(x.Own) {
		k := c.isolationAt(x, f)
		if !k.OK {
			return Isolated{Known: k}
		}
		if i == 0 || k.V < least.V {
			least = Isolated{Known: k, Edge: f}
		}
	}
	return least
}

func edges(b catalog.Band) []unit.MHz {
	return []unit.MHz{b.Uplink.Lo, b.Uplink.Hi, b.Downlink.Lo, b.Downlink.Hi}
}

// isolationReading finds the measured isolation that counts: as-built before
// survey, newer before older, the band's own before one for all.
func (c *Case) isolationReading(x *BandChain) *bom.Reading {
	var best *bom.Reading
	for i := range c.Plan.Readings {
		r := &c.Plan.Readings[i]
		if r.What.V != "isolation" || !r.DB.Set || r.Band.Set && r.Band.V != x.Band.Name && r.Band.V != x.Own.Name {
			continue
		}
		if r.From.Set && r.From.V.Name != x.Amp.ID && r.To.V.Name != x.Amp.ID {
			continue
		}
		if best == nil || later(r, best) {
			best = r
		}
	}
	return best
}

func later(a, b *bom.Reading) bool {
	built := func(r *bom.Reading) bool { return r.Stage.V == "as-built" }
	switch {
	case built(a) != built(b):
		return built(a)
	case a.On.V != b.On.V:
		return a.On.V.After(b.On.V)
	}
	return a.Band.Set && !b.Band.Set
}

// isolationAt is the isolation of all server antennas together at a frequency, the
// least over the donor antennas.
func (c *Case) isolationAt(x *BandChain, f unit.MHz) Known[unit.DB] {
	if len(x.Feeds) == 0 || len(x.Legs) == 0 {
		return unknown[unit.DB](x.Amp.At, "a feed and a leg")
	}
	var worst Known[unit.DB]
	for i, feed := range x.Feeds {
		var each []unit.DB
		for _, leg := range x.Legs {
			k := c.coupling(feed, leg, f)
			if !k.OK {
				return k
			}
			each = append(each, k.V)
		}
		total, ok := rf.TotalIsolation(each...)
		if !ok {
			return unknown[unit.DB](x.Amp.At, "an isolation that can be computed")
		}
		if i == 0 || total < worst.V {
			worst = known(total)
		}
	}
	return worst
}

// coupling is the isolation from one server antenna to one donor antenna, port to
// port.
func (c *Case) coupling(feed, leg *bom.Line, f unit.MHz) Known[unit.DB] {
	donor, server := feed.From, leg.To
	toward, lacks := between(donor.Device, server.Device)
	dr, sr := antennaAt(donor, f), antennaAt(server, f)
	fs, ls := c.Sum(feed, f), c.Sum(leg, f)
	switch {
	case lacks != nil:
		return Known[unit.DB]{Lacks: lacks}
	case dr == nil:
		return Known[unit.DB]{Lacks: []Lack{noGain(donor)}}
	case sr == nil:
		return Known[unit.DB]{Lacks: []Lack{noGain(server)}}
	case !fs.Known() || !ls.Known():
		return Known[unit.DB]{Lacks: append(fs.Missing, ls.Missing...)}
	}
	shell := c.shell(donor.Device.Place, server.Device.Place, f)
	path, ok := rf.AirGap(f, toward.Metres)
	if !shell.OK || !ok {
		if shell.OK {
			return unknown[unit.DB](server.At(), "more than a wavelength between "+donor.Device.ID+" and "+server.Device.ID)
		}
		return shell
	}
	k := rf.Coupling{Path: path, Shell: shell.V, Feed: fs.Loss.Least, Leg: ls.Loss.Least,
		Donor:  unit.DB(dr.Gain.V) - facing(donor.Device, dr, toward),
		Server: unit.DB(sr.Gain.V) - facing(server.Device, sr, back(toward))}
	v, ok := k.Isolation()
	if !ok {
		return unknown[unit.DB](server.At(), "an isolation between "+donor.Device.ID+" and "+server.Device.ID+" that is above zero")
	}
	return known(v)
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
	for _, d := range []*bom.Device{a, b} {
		if !d.Point.Set {
			return rf.Direction{}, []Lack{{"a position (at) of " + d.ID + " or of its place", d.At}}
		}
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
			d, ok := rf.Lookup(rfPoints(w.LossDB.V), unit.Span{}, f)
			return Known[unit.DB]{V: d, OK: ok, Lacks: []Lack{{"a loss between " + a.ID + " and " + b.ID, w.At}}}
		}
	}
	switch {
	case a == b || a.Outdoors() == b.Outdoors():
		return known(unit.DB(0))
	case c.Plan.Site.ShellDB.Set:
		return known(unit.DB(c.Plan.Site.ShellDB.V))
	}
	at := c.Plan.Site.At
	if at.IsZero() {
		at = c.JobAt()
	}
	return unknown[unit.DB](at, "shell_db of the site, or the loss between "+a.ID+" and "+b.ID)
}

// isolationMargin is what the firm asks for above the gain.
func (c *Case) isolationMargin() unit.DB { return unit.DB(c.House().IsolationMarginDB.Or(15)) }

// gainRuns is the gain that one direction will run at, and what binds it.
func (c *Case) gainRuns(x *BandChain, dir *Direction) Known[rf.Running] {
	if !dir.Set.OK {
		return Known[rf.Running]{Lacks: dir.Set.Lacks}
	}
	if dir.Set.V < 0 {
		return known(rf.Running{By: rf.BySet}) // set back by more than it has: the band is off
	}
	var ceilings []rf.Ceiling
	var lacks []Lack
	if dir.Name == "downlink" {
		o, missing := x.outputCeiling(dir)
		ceilings, lacks = append(ceilings, o), append(lacks, missing...)
	}
	if x.Amp.Part.Amplifier.NetworkProtection.V && c.Profile != nil {
		p, missing := c.protection(x, dir.Name)
		ceilings, lacks = append(ceilings, p...), append(lacks, missing...)
	}
	if x.Apart.OK {
		ceilings = append(ceilings, rf.IsolationCeiling(x.Apart.V, c.isolationMargin()))
	} else {
		ceilings, lacks = append(ceilings, rf.Ceiling{By: rf.ByIsolation}), append(lacks, x.Apart.Lacks...)
	}
	run, ok := rf.GainRuns(dir.Set.V, unit.DB(x.Amp.Part.Amplifier.StepDB.V), ceilings...)
	return Known[rf.Running]{V: run, OK: ok, Lacks: lacks}
}

// outputCeiling is the gain at which what comes in reaches the rated output.
func (x *BandChain) outputCeiling(dir *Direction) (rf.Ceiling, []Lack) {
	lacks := dir.Input.Lacks
	if !dir.rated() {
		lacks = append([]Lack{x.noOutput()}, lacks...)
	}
	if len(lacks) > 0 || !dir.Input.OK {
		return rf.Ceiling{By: rf.ByOutput}, lacks
	}
	return rf.OutputCeiling(unit.DBmOf(dir.Spec.MaxOut.V), dir.Input.V), nil
}

// protection is the least gain row that depends on the site, which an amplifier
// with network protection keeps by itself.
func (c *Case) protection(x *BandChain, direction string) ([]rf.Ceiling, []Lack) {
	q := x.query("gain", direction)
	_, bySite := limits.Split(c.Profile.Match(q))
	if len(bySite) == 0 {
		return nil, nil
	}
	a := limits.Least(q, x.inputs(), bySite...)
	if a.Row == nil {
		return []rf.Ceiling{{By: rf.ByProtection}}, x.lacking(a.Open)
	}
	return []rf.Ceiling{rf.ProtectionCeiling(unit.DB(a.Value))}, nil
}

// lacking names what the rows that stay open lack, in the words of the plan and
// the catalog.
func (x *BandChain) lacking(open []limits.Open) []Lack {
	var out []Lack
	for _, o := range open {
		for _, m := range o.Missing {
			out = append(out, x.lack(m)...)
		}
	}
	return dedupe(out)
}

// lack says what stands behind one input or selector of a row.
func (x *BandChain) lack(name string) []Lack {
	behind := map[string][]Lack{"RSSI": x.RSSI.Lacks, "MSCL": x.MSCL.Lacks}[name]
	if len(behind) > 0 {
		return behind
	}
	switch name {
	case "class", "mobility", "isolation_control":
		return []Lack{{name + " of " + x.Amp.Part.ID, x.Amp.Part.At}}
	}
	return []Lack{{name, x.Amp.At}}
}

func dedupe(lacks []Lack) []Lack {
	seen := map[string]bool{}
	var out []Lack
	for _, l := range lacks {
		if !seen[l.What] {
			seen[l.What] = true
			out = append(out, l)
		}
	}
	return out
}

// runs lists the gain that runs in each band, for the top of a report.
func (c *Case) runs() []Runs {
	var out []Runs
	for _, x := range c.Chain().Bands {
		r := Runs{Device: x.Amp.ID, Band: x.Band.Name}
		r.Up, r.BoundBy = running(x.Up.Runs, r.BoundBy)
		r.Down, r.BoundBy = running(x.Down.Runs, r.BoundBy)
		out = append(out, r)
	}
	return out
}

func running(k Known[rf.Running], by string) (*float64, string) {
	if !k.OK || !k.V.On {
		return nil, by
	}
	v := float64(k.V.Gain)
	return &v, string(k.V.By)
}
