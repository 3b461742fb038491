package bom

import (
	"fmt"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// DeviceRow is one thing that is put up, with the copies of it.
type DeviceRow struct {
	ID         string
	At         source.Place
	Part       source.Val[string]
	Kind       source.Val[string] // of something existing whose part nobody knows
	Existing   source.Val[bool]
	SuppliedBy source.Val[string]
	Place      source.Val[string]
	On         source.Val[string]  // the device that it stands on
	Up         source.Val[unit.MM] // above that device's top fixing
	Free       source.Val[unit.MM] // of a mast: above its top fixing
	BelowEdge  source.Val[unit.MM] // of an antenna or mast: its highest part below the roof's edge
	OffWall    source.Val[unit.MM] // and its farthest part from the wall
	Lightning  source.Val[bool]    // it belongs to the building's lightning protection system
	Point      source.Val[Point]
	AimDeg     source.Val[float64] // from true north
	People     source.Val[unit.MM] // nearest that a person stays
	Coupling   source.Val[string]
	Serial     source.Val[string]
	Set        []source.Pick[Setting] // by band
	Copies     []source.Pick[Copy]
}

// Setting is how an amplifier is set in one band.
type Setting struct{ BackOff source.Val[float64] }

// Copy is another device of the same part.
type Copy struct {
	Place source.Val[string]
	Point source.Val[Point]
}

// CableRow is one coaxial cable or jumper.
type CableRow struct {
	ID         string
	At         source.Place
	Part       source.Val[string]
	Like       source.Val[string]
	Length     source.Val[unit.MM] // installed
	From, To   source.Val[Ref]
	Ends       source.Val[[]source.Val[EndRow]]
	Through    source.Val[catalog.Words] // adapters at the to end, from cable to port
	Way        source.Val[[]source.Val[Stretch]]
	LeastBend  source.Val[unit.MM]
	Existing   source.Val[bool]
	SuppliedBy source.Val[string]
}

// EndRow is a cable end as written: a face, or a connector part.
type EndRow struct {
	Face source.Val[catalog.Face]
	Part string
}

// JointRow is two ports that mate directly.
type JointRow struct {
	At   source.Place
	A, B source.Val[Ref]
	Way  source.Val[[]source.Val[Stretch]]
}

// DataRow is one Ethernet line.
type DataRow struct {
	ID         string
	At         source.Place
	Part       source.Val[string]
	Length     source.Val[unit.MM]
	From, To   source.Val[Ref]
	Way        source.Val[[]source.Val[Stretch]]
	Existing   source.Val[bool]
	SuppliedBy source.Val[string]
}

// WireRow is one direct current line; its length is one way.
type WireRow struct {
	ID             string
	At             source.Place
	Part           source.Val[string]
	Length         source.Val[unit.MM]
	From, To       source.Val[Ref]
	Fuse           source.Val[string]
	FuseFromSource source.Val[unit.MM]
	Switched       source.Val[string]
	Way            source.Val[[]source.Val[Stretch]]
	Existing       source.Val[bool]
	SuppliedBy     source.Val[string]
}

// BondRow is one bonding conductor, or a direct metal contact.
type BondRow struct {
	ID         string
	At         source.Place
	From, To   source.Val[Ref]
	Part       source.Val[string]
	Direct     source.Val[bool]
	Length     source.Val[unit.MM]
	Bends      source.Val[int]
	Raceway    source.Val[string]
	Existing   source.Val[bool]
	SuppliedBy source.Val[string]
}

var end = source.Spelled(eitherEnd(source.Checked("cable end", `"N male"`, readEnd)), catalog.SpellFace, sameEnd)

func readEnd(s string) (EndRow, error) {
	f, err := catalog.ParseFace(s)
	switch {
	case err == nil:
		return EndRow{Face: source.Val[catalog.Face]{V: f, Set: true}}, nil
	case source.ValidID(s):
		return EndRow{Part: s}, nil
	}
	return EndRow{}, err
}

func sameEnd(a, b EndRow) bool {
	return a.Part == b.Part && a.Face.Set == b.Face.Set && catalog.SameFace(a.Face.V, b.Face.V)
}

// eitherEnd adds what a machine may know of a cable's end.
func eitherEnd(t source.Type[EndRow]) source.Type[EndRow] {
	t.Shape.Choice = func() []source.TypeDoc { return []source.TypeDoc{catalog.FaceType.Shape, source.Name.Shape} }
	return t
}

var bothEnds = source.Map(source.Exactly(2, source.ListOf(end)), func(v []source.Val[EndRow]) ([]source.Val[EndRow], error) {
	if len(v) != 2 {
		return nil, fmt.Errorf("%d ends were read, two are expected: from end, to end", len(v))
	}
	return v, nil
})

// mostPlaces bounds a way, which every line through it passes.
const mostPlaces = 100

var way = source.AtMost(mostPlaces, source.ListOf(stretch), "places")

var copyAt = source.Map(point, func(p Point) (Copy, error) {
	return Copy{Point: source.Val[Point]{V: p, Set: true}}, nil
})

// What the values of these rows may be, put together once for all of them.
var (
	bandSetting = source.Inline((*Setting).keys)
	copies      = source.Either(source.IsArray, copyAt, source.Inline((*Copy).keys), "position or table")
	couplings   = source.OneOf("antenna", "cradle", "wired")
	raceways    = source.OneOf("none", "plastic", "metal", "metal-bonded-one-end", "metal-bonded-both-ends")
)

// What the keys of these rows ask of each other, likewise.
var (
	ofDevice = []source.Condition{{Any: []source.State{source.Given("part"), source.Holds("existing", true)}}, source.Needs("part", "kind")}
	ofCable  = source.Needs("part", "like")
	ofBond   = source.Condition{Any: []source.State{source.Given("part"), source.Holds("direct", true), source.Holds("existing", true)}}
)

func (d *DeviceRow) keys(k *source.Keys) {
	d.ID, d.At = k.ID(), k.At()
	source.Opt(k, &d.Part, "part", source.Name, "part of the catalog")
	source.Opt(k, &d.Kind, "kind", catalog.KindName, "kind of something existing whose part nobody knows")
	source.Opt(k, &d.Existing, "existing", source.Flag, "already there: counts in checks, not in quantities")
	source.Opt(k, &d.SuppliedBy, "supplied_by", source.Text, "who brings it, if not the firm")
	source.Opt(k, &d.Place, "place", source.Name, "where it is")
	source.Opt(k, &d.On, "on", source.Name, "the device it stands on; its place comes with it")
	source.Opt(k, &d.Up, "up", source.Length, "above the top fixing of what it stands on")
	source.Opt(k, &d.Free, "free", source.Length, "length of a mast above its top fixing")
	source.Opt(k, &d.BelowEdge, "below_roof_edge", source.Length, "of an antenna, or a mast with all it carries: from the roof's edge down to its highest part")
	source.Opt(k, &d.OffWall, "off_wall", source.Length, "of an antenna, or a mast with all it carries: from the wall to its farthest part")
	source.Opt(k, &d.Lightning, "lightning", source.Flag, "it belongs to the building's lightning protection system")
	source.Opt(k, &d.Point, "at", point, "east, north, height in metres; in place of the place's")
	source.Opt(k, &d.AimDeg, "aim_deg", degrees, "direction of an antenna, from true north")
	source.Opt(k, &d.People, "people", source.Length, "nearest that a person stays")
	source.Opt(k, &d.Coupling, "coupling", couplings, "how phones are coupled to an amplifier; absent: antenna")
	source.Opt(k, &d.Serial, "serial", source.Text, "serial number once built")
	source.Each(k, &d.Set, "set", catalog.ByBand, bandSetting, "how an amplifier is set, by band")
	source.Each(k, &d.Copies, "copies", source.Names, copies, "more devices of the same part")
	k.Demand(ofDevice...)
	if !k.Recording() && !k.Has("part") && !(maybe(k, d.Existing, "existing") && k.Has("kind")) {
		k.Missing("part", "only what exists already may give its kind instead")
	}
}

func (s *Setting) keys(k *source.Keys) {
	source.Need(k, &s.BackOff, "back_off_db", source.Between(0, 100, "dB"), "below the greatest gain")
}

func (c *Copy) keys(k *source.Keys) {
	source.Opt(k, &c.Place, "place", source.Name, "where it is, if elsewhere")
	source.Opt(k, &c.Point, "at", point, "east, north, height in metres")
}

func (c *CableRow) keys(k *source.Keys) {
	c.ID, c.At = k.ID(), k.At()
	source.Opt(k, &c.Part, "part", source.Name, "cable or jumper")
	source.Opt(k, &c.Like, "like", source.Name, "same part, ends, length and way as that cable; own keys win")
	source.Opt(k, &c.Length, "length", source.Length, "installed length")
	source.Opt(k, &c.From, "from", ref, "where end 1 goes")
	source.Opt(k, &c.To, "to", ref, "where end 2 goes")
	source.Opt(k, &c.Ends, "ends", bothEnds, "from end, to end: a face or the connector part")
	source.Some(k, &c.Through, "through", nameList, "adapters at the to end, from cable to port")
	source.Some(k, &c.Way, "way", way, "places it passes; absent: straight from place to place")
	source.Opt(k, &c.LeastBend, "least_bend", source.Length, "tightest bend on its way")
	source.Opt(k, &c.Existing, "existing", source.Flag, "already there")
	source.Opt(k, &c.SuppliedBy, "supplied_by", source.Text, "who brings it, if not the firm")
	k.Demand(ofCable)
	if !k.Recording() && !k.Has("part") && !k.Has("like") {
		k.Missing("part", "or like: which cable it is")
	}
}

func (j *JointRow) keys(k *source.Keys) {
	j.At = k.At()
	source.Need(k, &j.A, "a", ref, "one port")
	source.Need(k, &j.B, "b", ref, "the other")
	source.Some(k, &j.Way, "way", way, "places, where it crosses")
}

func (d *DataRow) keys(k *source.Keys) {
	d.ID, d.At = k.ID(), k.At()
	source.Need(k, &d.Part, "part", source.Name, "data cable")
	source.Opt(k, &d.Length, "length", source.Length, "installed length")
	source.Opt(k, &d.From, "from", ref, "one port")
	source.Opt(k, &d.To, "to", ref, "the other")
	source.Some(k, &d.Way, "way", way, "places it passes")
	source.Opt(k, &d.Existing, "existing", source.Flag, "already there")
	source.Opt(k, &d.SuppliedBy, "supplied_by", source.Text, "who brings it, if not the firm")
}

func (w *WireRow) keys(k *source.Keys) {
	w.ID, w.At = k.ID(), k.At()
	source.Need(k, &w.Part, "part", source.Name, "wire")
	source.Opt(k, &w.Length, "length", source.Length, "length one way")
	source.Opt(k, &w.From, "from", ref, "the source")
	source.Opt(k, &w.To, "to", ref, "the load")
	source.Opt(k, &w.Fuse, "fuse", source.Name, "fuse in it")
	source.Opt(k, &w.FuseFromSource, "fuse_from_source", source.Length, "distance of the fuse from the source")
	source.Opt(k, &w.Switched, "switched", source.Text, "what switches it")
	source.Some(k, &w.Way, "way", way, "places it passes")
	source.Opt(k, &w.Existing, "existing", source.Flag, "already there")
	source.Opt(k, &w.SuppliedBy, "supplied_by", source.Text, "who brings it, if not the firm")
}

func (b *BondRow) keys(k *source.Keys) {
	b.ID, b.At = k.ID(), k.At()
	source.Need(k, &b.From, "from", ref, "one device")
	source.Need(k, &b.To, "to", ref, "the other")
	source.Opt(k, &b.Part, "part", source.Name, "conductor")
	source.Opt(k, &b.Direct, "direct", source.Flag, "metal on metal, without a conductor")
	source.Opt(k, &b.Length, "length", source.Length, "length of the conductor")
	source.Opt(k, &b.Bends, "bends", source.Count(0, 100), "number of bends")
	source.Opt(k, &b.Raceway, "raceway", raceways, "what it runs in")
	source.Opt(k, &b.Existing, "existing", source.Flag, "already there")
	source.Opt(k, &b.SuppliedBy, "supplied_by", source.Text, "who brings it, if not the firm")
	k.Demand(ofBond)
	if !k.Recording() && !k.Has("part") && !maybe(k, b.Direct, "direct") && !maybe(k, b.Existing, "existing") {
		k.Missing("part", "or direct = true: what makes the bond")
	}
}

// maybe reports a flag that is true, or that could not be read, which has been said.
func maybe(k *source.Keys, flag source.Val[bool], name string) bool {
	return flag.V || !flag.Set && k.Has(name)
}
