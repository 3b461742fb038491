package bom

import (
	"fmt"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Site is the building or vehicle and its surroundings.
type Site struct {
	At        source.Place
	ShellDB   source.Val[float64]
	Coldest   source.Val[unit.Celsius]
	Hottest   source.Val[unit.Celsius]
	Wind      source.Val[unit.Speed]
	WindBasis source.Val[string]
	Terrain   source.Val[string]
	Electrode source.Val[string]
	Lightning source.Val[string]
	Strike    Strike
	Mains     source.Val[string]
	Volts     source.Val[float64]
	Skin      source.Val[string]
}

// Strike is what is known of the building's lightning protection system beside its
// class: what the distance that metal keeps from it depends on.
type Strike struct {
	Conductors   source.Val[int]     // down conductors that share the current
	Length       source.Val[unit.MM] // along them, from the nearest point to the next equipotential bond
	Gap          source.Val[unit.MM] // what goes up keeps this distance
	Medium       source.Val[string]  // what lies in the gap
	EarthsDiffer source.Val[bool]    // in resistance, by more than a factor of 2
}

// PowerLine is an overhead line near the site.
type PowerLine struct {
	At    source.Place
	Point source.Val[Point]
	KV    source.Val[float64]
}

// Point is a position in metres: east, north, height above ground at the building.
type Point struct{ East, North, Up float64 }

// Place is a place of the site.
type Place struct {
	ID      string
	At      source.Place
	Kind    source.Val[string]
	Point   source.Val[Point]
	Hottest source.Val[unit.Celsius]
	Coldest source.Val[unit.Celsius]
	Access  source.Val[string]
	Airbag  source.Val[bool]
}

// Between is the loss between two places over frequency.
type Between struct {
	At     source.Place
	A, B   source.Val[string]
	LossDB source.Val[catalog.Points]
}

// Outdoors reports a place in the weather; false for an entry, which is the
// boundary itself.
func (p *Place) Outdoors() bool {
	return p != nil && (p.Kind.V == "outdoor" || p.Kind.V == "vehicle-skin")
}

// Indoors reports a place under the roof or inside the vehicle.
func (p *Place) Indoors() bool {
	if p == nil {
		return false
	}
	switch p.Kind.V {
	case "indoor", "attic", "riser", "plenum", "vehicle-cabin":
		return true
	}
	return false
}

var (
	point = source.Map(source.Exactly(3, source.ListOf(source.Between(-10000, 10000, "m"))), func(v []source.Val[float64]) (Point, error) {
		if len(v) != 3 {
			return Point{}, fmt.Errorf("%d numbers were read, three are expected: east, north, height", len(v))
		}
		return Point{v[0].V, v[1].V, v[2].V}, nil
	})
	decibels = source.Between(-300, 300, "dB")
	degrees  = source.Between(-360, 360, "degrees")
)

// What the words of these rows may be, put together once for all of them.
var (
	shellLoss         = source.Between(0, 100, "dB")
	windBases         = source.OneOf("asce7-strength", "asce7-service", "en-60728-11")
	terrains          = source.OneOf("B", "C", "D")
	electrodes        = source.OneOf("building", "separate-tied", "separate-untied", "none")
	protectionClasses = source.OneOf("none", "I", "II", "III", "IV")
	mainsKinds        = source.OneOf("plain", "protected", "none")
	skins             = source.OneOf("steel", "aluminium", "plastic")
	downConductors    = source.Count(1, 1000)
	media             = source.OneOf("air", "concrete", "brick", "wood")
	placeKinds        = source.OneOf("outdoor", "entry", "indoor", "attic", "riser", "plenum", "vehicle-skin", "vehicle-cabin")
	accesses          = source.OneOf("public", "crew", "none")
)

func (s *Site) keys(k *source.Keys) {
	s.At = k.At()
	source.Opt(k, &s.ShellDB, "shell_db", shellLoss, "loss between outside and inside where no [[between]] says better")
	source.Opt(k, &s.Coldest, "coldest", source.Temperature, "coldest outdoor temperature")
	source.Opt(k, &s.Hottest, "hottest", source.Temperature, "hottest outdoor temperature")
	source.Opt(k, &s.Wind, "wind", source.Speed, "wind speed to design for")
	source.Opt(k, &s.WindBasis, "wind_basis", windBases, "what the speed means")
	source.Opt(k, &s.Terrain, "terrain", terrains, "exposure category of ASCE 7")
	source.Opt(k, &s.Electrode, "electrode", electrodes, "ground electrode")
	source.Opt(k, &s.Lightning, "lightning_system", protectionClasses, "lightning protection system of the building, by class")
	s.Strike.keys(k)
	source.Opt(k, &s.Mains, "mains", mainsKinds, "mains supply of the gear")
	source.Opt(k, &s.Volts, "volts", voltage, "nominal voltage of the vehicle")
	source.Opt(k, &s.Skin, "skin", skins, "skin of the vehicle")
}

func (s *Strike) keys(k *source.Keys) {
	source.Opt(k, &s.Conductors, "lightning_down_conductors", downConductors, "down conductors of the lightning protection system")
	source.Opt(k, &s.Length, "lightning_length", source.Length, "along its conductors, from the point nearest to the antenna or mast to the next equipotential bond")
	source.Opt(k, &s.Gap, "lightning_gap", source.Length, "distance of the antenna or mast from it, where they come closest")
	source.Opt(k, &s.Medium, "lightning_medium", media, "what lies in that distance; air only where nothing else does")
	source.Opt(k, &s.EarthsDiffer, "lightning_earths_differ", source.Flag, "its earth electrodes differ in resistance by more than a factor of 2")
}

func (l *PowerLine) keys(k *source.Keys) {
	l.At = k.At()
	source.Need(k, &l.Point, "at", point, "nearest point of the line")
	source.Need(k, &l.KV, "kv", source.Between(0, 1500, "kV"), "voltage")
}

func (p *Place) keys(k *source.Keys) {
	p.ID, p.At = k.ID(), k.At()
	source.Need(k, &p.Kind, "kind", placeKinds, "what sort of space it is")
	source.Opt(k, &p.Point, "at", point, "east, north, height above ground at the building, metres")
	source.Opt(k, &p.Hottest, "hottest", source.Temperature, "of this place; absent: as its kind")
	source.Opt(k, &p.Coldest, "coldest", source.Temperature, "of this place; absent: as its kind")
	source.Opt(k, &p.Access, "access", accesses, "who comes there")
	source.Opt(k, &p.Airbag, "airbag", source.Flag, "an air bag unfolds there")
}

func (b *Between) keys(k *source.Keys) {
	b.At = k.At()
	source.Need(k, &b.A, "a", source.Name, "a place")
	source.Need(k, &b.B, "b", source.Name, "another")
	source.Need(k, &b.LossDB, "loss_db", catalog.LossTable, "loss, one number or [MHz, dB] pairs")
}

// Ref names a device, a port of a device, or an end of a cable.
type Ref struct {
	Name string
	Port string // "" where the name stands alone
}

// String writes the reference as files do.
func (r Ref) String() string {
	if r.Port == "" {
		return r.Name
	}
	return r.Name + "." + r.Port
}

var ref = source.Shaped(source.Checked("reference", `"donor.rf"`, func(s string) (Ref, error) {
	name, port, dot := strings.Cut(s, ".")
	if !source.ValidID(name) || dot && !source.ValidID(port) {
		return Ref{}, fmt.Errorf("%s is no reference; write device, device.port or cable.1", source.Quote(s))
	}
	return Ref{name, port}, nil
}), source.Form{Pattern: `^[A-Za-z0-9][A-Za-z0-9_-]{0,63}(\.[A-Za-z0-9][A-Za-z0-9_-]{0,63})?$`})

// Stretch is one place on a cable's way, with the length that lies in it where
// the plan says so.
type Stretch struct {
	Place  string
	Length source.Val[unit.MM]
}

var stretch = source.Spelled(source.Shaped(source.Checked("place, or place and length", `"entry 0.5 m"`, readStretch),
	source.Form{Pattern: `^[A-Za-z0-9][A-Za-z0-9_-]{0,63}( ` + unit.LengthPattern[1:len(unit.LengthPattern)-1] + `)?$`}), spellStretch,
	func(a, b Stretch) bool {
		return a.Place == b.Place && a.Length.Set == b.Length.Set && a.Length.V == b.Length.V
	})

func readStretch(s string) (Stretch, error) {
	name, length, more := strings.Cut(s, " ")
	if !source.ValidID(name) {
		return Stretch{}, fmt.Errorf("%s names no place", source.Quote(s))
	}
	w := Stretch{Place: name}
	if more {
		l, err := unit.ParseLength(length)
		if err != nil {
			return Stretch{}, err
		}
		w.Length = source.Val[unit.MM]{V: l, Set: true}
	}
	return w, nil
}

// spellStretch is the usual spelling of a stretch.
func spellStretch(s string) string {
	name, length, more := strings.Cut(s, " ")
	if !more {
		return s
	}
	return name + " " + unit.Spell(length)
}
