package catalog

import (
	"fmt"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Point is one figure of a table over frequency.
type Point struct {
	MHz unit.MHz
	V   float64
}

// Points is a table over frequency in the order of the file. A single point at
// 0 MHz stands for a figure that holds at every frequency.
type Points []Point

// Value types that several kinds of part share.
var (
	ohm      = source.Between(1, 1000, "ohm")
	level    = source.Between(-200, 100, "dBm")
	face     = source.Spelled(source.Shaped(source.Checked("connector", `"N male"`, ParseFace), source.Form{Among: FaceNames}), SpellFace, SameFace)
	bandName = source.Shaped(source.Checked("band", `"B12"`, readBandName), source.Form{Among: BandNames})
	poe      = source.OneOf("af", "at", "bt3", "bt4", "passive 12 V", "passive 24 V", "passive 48 V")
	span     = source.Map(source.Pair(source.Between(0, 300000, "MHz"), "[699, 716]"), toSpan)
	volts    = source.Between(0, 1000, "V")
)

func toSpan(p [2]float64) (unit.Span, error) {
	return unit.Span{Lo: unit.MHz(p[0]), Hi: unit.MHz(p[1])}, nil
}

// points reads one number, or a list of [MHz, value] pairs.
func points(name string) source.Type[Points] {
	list := source.Map(source.Filled(source.ListOf(source.Pair(source.Between(0, 300000, "MHz, then "+name), "[850, 24.7]"))), toPoints)
	one := source.Map(source.Between(0, 1000, name), func(v float64) (Points, error) { return Points{{0, v}}, nil })
	t := source.Either(source.IsArray, list, one, name+", one number or [MHz, "+name+"] pairs")
	return t
}

func toPoints(pairs []source.Val[[2]float64]) (Points, error) {
	if len(pairs) == 0 {
		return nil, fmt.Errorf("the table is empty")
	}
	var out Points
	for _, p := range pairs {
		out = append(out, Point{unit.MHz(p.V[0]), p.V[1]})
	}
	return out, nil
}

// oneOrMore reads one word or a list of words.
func oneOrMore(t source.Type[string]) source.Type[Words] {
	one := source.Map(t, func(s string) (Words, error) { return Words{{V: s, Set: true}}, nil })
	return source.Either(source.IsArray, source.ListOf(t), one, "one or a list")
}

// Value types for other packages' formats.
var (
	BandName  = bandName
	KindName  = source.Shaped(source.Checked("kind", `"electrode"`, readKindName), source.Form{Among: KindNames})
	FaceType  = face
	LossTable = points("dB")
)

func readKindName(s string) (string, error) {
	for _, n := range KindNames() {
		if n == s {
			return s, nil
		}
	}
	return "", fmt.Errorf("%s is no kind of part", source.Quote(s))
}

// IsBand refuses a name that is no 3GPP band.
func IsBand(name string) error { return isBand(name) }

// ByBand is the naming of tables whose keys are bands.
var ByBand = source.Naming{Check: IsBand, Form: &source.Form{Among: BandNames}}
