package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// Chain is the radio chain of a plan: for each amplifier and each of its planned
// bands what it receives, what it makes of it, and what it radiates.
type Chain struct {
	Bands  []*BandChain // by device in the plan's order, then by band
	Radios []*RadioChain
	lines  map[*bom.Line]*recipe
	reach  []*AreaReach
}

// BandChain is one amplifier in one planned band.
type BandChain struct {
	Amp    *bom.Device
	Band   catalog.Band     // as planned
	Row    *catalog.AmpBand // of the amplifier
	Own    catalog.Band     // of that row
	Feeds  []*bom.Line      // donor antennas
	Legs   []*bom.Line      // server antennas
	Up     Direction
	Down   Direction
	RSSI   Known[unit.DBm] // composite at the donor port over the amplifier's band
	Loud   Known[unit.DBm] // the strongest channel of it
	MSCL   Known[unit.DB]
	BSCL   limits.Input
	BSCLBy string
	Apart  Isolated
}

// Direction is one direction of an amplifier in one band.
type Direction struct {
	Name     string // uplink, downlink
	Span     unit.Span
	Spec     *catalog.Gain // nil: the part does not say
	Set      Known[unit.DB]
	Input    Known[unit.DBm]
	Runs     Known[rf.Running]
	Antennas []Antenna // that it radiates from
}

// Antenna is one antenna that a direction radiates from, at the frequency of the
// band where its EIRP is greatest.
type Antenna struct {
	Line  *bom.Line
	Node  *bom.Node // the antenna's port
	Worst Radiation
	Mid   Radiation
	Lacks []Lack

	at []Radiation // at the low edge, the middle and the high edge
}

// Radiation is the rated output behind a line and an antenna at one frequency.
type Radiation struct {
	MHz  unit.MHz
	Out  unit.DBm
	Gain unit.DB
	Line LineSum
	EIRP rf.Radiated
}

// Known is a figure, or what it lacks.
type Known[T any] struct {
	V     T
	OK    bool
	Lacks []Lack
}

func known[T any](v T) Known[T] { return Known[T]{V: v, OK: true} }

func unknown[T any](at source.Place, what string) Known[T] {
	return Known[T]{Lacks: []Lack{{what, at}}}
}

// newChain computes the chain of a case.
func newChain(c *Case) *Chain {
	ch := &Chain{lines: map[*bom.Line]*recipe{}}
	c.chain = ch
	for _, d := range c.Graph.Devices {
		if d.Part == nil || d.Part.Amplifier == nil {
			continue
		}
		for _, b := range c.bands {
			if row, own := ampRow(d.Part.Amplifier, b); row != nil {
				ch.Bands = append(ch.Bands, c.bandChain(d, b, row, own))
			}
		}
	}
	ch.Radios = c.radioChains()
	return ch
}

// ampRow is the amplifier's row for a planned band: the one of that name, else one
// whose band holds all of it.
func ampRow(a *catalog.Amplifier, b catalog.Band) (*catalog.AmpBand, catalog.Band) {
	if row := a.Band(b.Name); row != nil {
		return row, b
	}
	for i := range a.Bands {
		own, ok := catalog.LookBand(a.Bands[i].Band.V)
		if ok && own.Uplink.Covers(b.Uplink) && own.Downlink.Covers(b.Downlink) {
			return &a.Bands[i], own
		}
	}
	return nil, catalog.Band{}
}

// Sum is the loss of a line at a frequency, added up once.
func (c *Case) Sum(l *bom.Line, f unit.MHz) LineSum {
	ch := c.Chain()
	r := ch.lines[l]
	if r == nil {
		r = c.recipeOf(l)
		ch.lines[l] = r
	}
	return r.sum(f)
}

func (c *Case) bandChain(d *bom.Device, b catalog.Band, row *catalog.AmpBand, own catalog.Band) *BandChain {
	x := &BandChain{Amp: d, Band: b, Row: row, Own: own}
	for _, l := range c.Lines().All {
		switch {
		case l.Kind == bom.Feed && l.To.Device == d:
			x.Feeds = append(x.Feeds, l)
		case l.Kind == bom.Leg && l.From.Device == d:
			x.Legs = append(x.Legs, l)
		}
	}
	x.Up = c.direction(x, "uplink", b.Uplink, row.Uplink, x.Feeds)
	x.Down = c.direction(x, "downlink", b.Downlink, row.Downlink, x.Legs)
	x.RSSI, x.Loud = c.received(x)
	x.MSCL = c.mscl(x)
	x.BSCL, x.BSCLBy = c.bscl(x)
	x.Apart = c.isolation(x)
	x.Down.Input = x.RSSI
	x.Up.Runs = c.gainRuns(x, &x.Up)
	x.Down.Runs = c.gainRuns(x, &x.Down)
	return x
}

func (c *Case) direction(x *BandChain, name string, span unit.Span, spec *catalog.Gain, lines []*bom.Line) Direction {
	dir := Direction{Name: name, Span: span, Spec: spec}
	dir.Set = setGain(x, spec)
	dir.Antennas = make([]Antenna, 0, len(lines))
	for _, l := range lines {
		a := c.radiates(l, span, spec, x.Row.At)
		if !dir.rated() {
			a.Lacks = []Lack{x.noOutput()}
		}
		dir.Antennas = append(dir.Antennas, a)
	}
	return dir
}

// setGain is the greatest gain less the installer's back-off.
func setGain(x *BandChain, spec *catalog.Gain) Known[unit.DB] {
	if spec == nil || !spec.GainDB.Set {
		return unknown[unit.DB](x.Row.At, "gain_db of "+x.Amp.Part.ID)
	}
	g := unit.DB(spec.GainDB.V)
	if s := x.setting(); s != nil {
		g -= unit.DB(s.Val.V.BackOff.V)
	}
	return known(g)
}

// setting is how the plan sets the amplifier in the band: by the planned band's
// name, else by that of the amplifier's own row, or nil.
func (x *BandChain) setting() *source.Pick[bom.Setting] {
	for _, name := range []string{x.Band.Name, x.Own.Name} {
		for i := range x.Amp.Row.Set {
			if s := &x.Amp.Row.Set[i]; s.Name == name {
				return s
			}
		}
	}
	return nil
}

// rated reports whether the amplifier's part states its output in this direction.
func (d *Direction) rated() bool { return d.Spec != nil && d.Spec.MaxOut.Set }

// noOutput is what is missing where the amplifier's part does not state its output.
func (x *BandChain) noOutput() Lack { return Lack{"max_out_dbm of " + x.Amp.Part.ID, x.Row.At} }

// radiates is what an antenna radiates at the rated output, at the low edge, the
// middle and the high edge of a band.
func (c *Case) radiates(l *bom.Line, span unit.Span, spec *catalog.Gain, rowAt source.Place) Antenna {
	node := l.From
	if l.Kind == bom.Leg {
		node = l.To
	}
	a := Antenna{Line: l, Node: node}
	if span.Empty() {
		return a
	}
	if spec == nil || !spec.MaxOut.Set {
		a.Lacks = append(a.Lacks, Lack{"max_out_dbm of the amplifier", rowAt})
		return a
	}
	a.at = make([]Radiation, 0, 3)
	for i, f := range points(span) {
		r, lacks := c.radiation(l, node, unit.DBmOf(spec.MaxOut.V), f)
		if len(lacks) > 0 {
			a.Lacks = lacks
			return a
		}
		a.at = append(a.at, r)
		if i == 0 || a.Worst.EIRP.Most.Below(r.EIRP.Most) {
			a.Worst = r
		}
		if i == 1 {
			a.Mid = r
		}
	}
	return a
}

func (c *Case) radiation(l *bom.Line, node *bom.Node, out unit.DBm, f unit.MHz) (Radiation, []Lack) {
	r := Radiation{MHz: f, Out: out, Line: c.Sum(l, f)}
	lacks := append([]Lack(nil), r.Line.Missing...)
	rng := antennaAt(node, f)
	if rng == nil {
		return r, append(lacks, noGain(node))
	}
	r.Gain = unit.DB(rng.Gain.V)
	if len(lacks) > 0 {
		return r, lacks
	}
	var ok bool
	if r.EIRP, ok = rf.EIRP(out, r.Line.Loss, r.Gain); !ok {
		lacks = append(lacks, Lack{"figures that add up", node.At()})
	}
	return r, lacks
}

// antennaAt is the range of an antenna's port that holds a frequency and states a
// gain, or nil.
func antennaAt(n *bom.Node, f unit.MHz) *catalog.Range {
	if n.Device == nil || n.Device.Part == nil || n.Device.Part.Antenna == nil {
		return nil
	}
	if rng := n.Device.Part.Antenna.RangeAt(n.Port.Name, f); rng != nil && rng.Gain.Set {
		return rng
	}
	return nil
}

// noGain is what is missing where an antenna has no range. It does not say the
// frequency, so that what several bands lack is one thing.
func noGain(n *bom.Node) Lack { return Lack{"a gain of " + n.Name() + " all over the band", n.At()} }

// mscl is the mobile station coupling loss, least over the server antennas; that
// of a cradle or a wire is the part's own figure, because the formula is for what
// radiates.
func (c *Case) mscl(x *BandChain) Known[unit.DB] {
	if x.coupling() != "antenna" {
		own := x.Amp.Part.Amplifier.CouplingDB
		if !own.Set {
			return unknown[unit.DB](x.Amp.Part.At, "coupling_db of "+x.Amp.Part.ID)
		}
		return known(unit.DB(own.V))
	}
	if len(x.Legs) == 0 {
		return unknown[unit.DB](x.Amp.At, "a leg to a server antenna")
	}
	metres := rf.BuildingPhoneMetres
	if c.Vehicle() {
		metres = rf.VehiclePhoneMetres
	}
	f := x.Own.Uplink.Mid()
	var each []unit.DB
	for _, l := range x.Legs {
		sum, rng := c.Sum(l, f), antennaAt(l.To, f)
		if !sum.Known() {
			return Known[unit.DB]{Lacks: sum.Missing}
		}
		if rng == nil {
			return Known[unit.DB]{Lacks: []Lack{noGain(l.To)}}
		}
		v, ok := rf.MSCL(f, metres, unit.DB(rng.Gain.V), sum.Loss.Least)
		if !ok {
			return unknown[unit.DB](l.To.At(), "a coupling loss to "+l.To.Name())
		}
		each = append(each, v)
	}
	v, ok := rf.LeastCoupling(each...)
	return Known[unit.DB]{V: v, OK: ok}
}

// coupling is how phones are coupled.
func (x *BandChain) coupling() string { return couplingOf(x.Amp) }

// couplingOf is how phones are coupled to an amplifier: as the plan says, else the
// only way that the part knows, else by antenna.
func couplingOf(d *bom.Device) string {
	if can := d.Part.Amplifier.Coupling; !d.Row.Coupling.Set && len(can.V) == 1 && can.V[0].Set {
		return can.V[0].V
	}
	return d.Row.Coupling.Or("antenna")
}

// bscl is the coupling loss to the base station as the profile has it found: from
// the strongest channel, which is the base station that comes closest. Only where
// nobody surveyed anything is it what the profile assumes; a survey that cannot be
// added up leaves it open.
func (c *Case) bscl(x *BandChain) (limits.Input, string) {
	surveyed := !x.Loud.OK && !slices.ContainsFunc(x.Loud.Lacks, func(l Lack) bool { return l.What == noSurvey })
	if c.Profile == nil || surveyed {
		return limits.Input{}, ""
	}
	return c.Profile.BSCLFrom(limits.Input{}, limits.Figure(x.Loud.V.Value(), x.Loud.OK))
}

// inputs are what limit formulas take in this band.
func (x *BandChain) inputs() limits.Inputs {
	in := limits.For(x.Own.Name)
	in.RSSI = limits.Figure(x.RSSI.V.Value(), x.RSSI.OK)
	in.MSCL = limits.Figure(float64(x.MSCL.V), x.MSCL.OK)
	in.BSCL = x.BSCL
	return in
}

// query asks for the limits of a kind in one direction of this band.
func (x *BandChain) query(kind, direction string) limits.Query {
	amp := x.Amp.Part.Amplifier
	return limits.Query{Kind: kind, Direction: direction, Class: amp.Class.V, Mobility: amp.Mobility.V,
		Coupling: x.coupling(), Source: x.BSCLBy, IsolationControl: amp.IsolationControl, Band: x.Own.Name}
}
