package rules_test

import (
	"fmt"
	"strconv"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// catalogQuantities are what the tables of bands and of connectors may ask for.
var catalogQuantities = map[string]quantity{
	"band uplink":         func(in *inputs) string { return edges(in.band("band").Uplink) },
	"band downlink":       func(in *inputs) string { return edges(in.band("band").Downlink) },
	"band duplex":         func(in *inputs) string { return in.band("band").Duplex },
	"band nr":             (*inputs).twin,
	"earfcn downlink mhz": func(in *inputs) string { return figure(ofMHz(in.band("band").EARFCN(in.count("earfcn")))) },
	"nr-arfcn mhz":        func(in *inputs) string { return figure(ofMHz(catalog.NRARFCN(in.count("arfcn")))) },
	"contains":            (*inputs).contains,
	"mates":               (*inputs).meets,
}

func (in *inputs) band(key string) catalog.Band {
	b, ok := catalog.LookBand(in.text(key))
	if !ok {
		in.fail(fmt.Errorf("there is no band %q", in.text(key)))
	}
	return b
}

// ohms is an impedance, or 0 where the row gives none.
func (in *inputs) ohms(key string) float64 {
	if !in.has(key) {
		return 0
	}
	return float64(in.count(key))
}

func (in *inputs) face(key string) catalog.Face {
	f, err := catalog.ParseFace(in.text(key))
	in.fail(err)
	return f
}

func edges(s unit.Span) string {
	if s.Empty() {
		return "none"
	}
	return fmt.Sprintf("%v-%v", float64(s.Lo), float64(s.Hi))
}

// twin is the duplex mode of a band's NR twin; a name that 3GPP does not define
// for NR has none.
func (in *inputs) twin() string {
	b, ok := catalog.LookBand(in.text("band"))
	if !ok {
		return "none"
	}
	return b.NR
}

func (in *inputs) contains() string {
	outer, inner := in.band("outer"), in.band("inner")
	return strconv.FormatBool(outer.Uplink.Covers(inner.Uplink) && outer.Downlink.Covers(inner.Downlink))
}

func (in *inputs) meets() string {
	m := catalog.Meet(in.face("a"), in.face("b"), in.ohms("a_ohm"), in.ohms("b_ohm"))
	switch m.Fit {
	case catalog.Mates:
		return "ok"
	case catalog.OtherMake:
		return "series"
	case catalog.SameShell:
		return "gender"
	case catalog.WrongCore:
		return "polarity"
	}
	return "impedance"
}
