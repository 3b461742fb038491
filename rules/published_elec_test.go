package rules_test

import (
	"driploop/catalog/unit"
	"driploop/rules/elec"
)

// elecQuantities are what the table of direct current may ask for.
var elecQuantities = map[string]func(*inputs) (float64, bool){
	"ohm per 1000 ft solid": func(in *inputs) (float64, bool) {
		r, ok := elec.Solid(in.mm2(), in.num("celsius"))
		return r * 0.3048, ok
	},
	"ohm per 1000 ft stranded": func(in *inputs) (float64, bool) {
		r, ok := elec.Stranded(in.mm2(), in.num("celsius"))
		return r * 0.3048, ok
	},
	"ohm per km stranded": func(in *inputs) (float64, bool) { return elec.Stranded(in.mm2(), in.num("celsius")) },
	"ohm solid": func(in *inputs) (float64, bool) {
		r, ok := elec.Solid(in.mm2(), in.num("celsius"))
		return r * in.num("metres") / 1000, ok
	},
	"resistance ratio": func(in *inputs) (float64, bool) {
		from, okFrom := elec.Solid(1, in.num("celsius"))
		to, okTo := elec.Solid(1, in.num("to"))
		return ratio(to, from, okFrom && okTo)
	},
	"area mm2":  func(in *inputs) (float64, bool) { return in.mm2(), true },
	"fuse amps": func(in *inputs) (float64, bool) { return elec.FuseAmps(in.mm2()) },
	"class loss": func(in *inputs) (float64, bool) {
		return elec.PoE{Watt: in.num("watt"), Volts: in.num("volts"), PairSets: in.count("pairsets")}.Left(in.num("loop"))
	},
	"poe device watt": func(in *inputs) (float64, bool) {
		k, ok := elec.Kind(in.text("kind"))
		if !ok {
			return 0, false
		}
		return k.DeviceWatt(), true
	},
	"poe device volts": func(in *inputs) (float64, bool) {
		k, ok := elec.Kind(in.text("kind"))
		if !ok {
			return 0, false
		}
		return k.DeviceVolts(), true
	},
	"poe left": func(in *inputs) (float64, bool) {
		k, _ := elec.Kind(in.text("kind"))
		return k.Left(in.num("loop"))
	},
	"pair loop": func(in *inputs) (float64, bool) {
		r, _ := elec.Solid(in.mm2(), in.num("celsius"))
		return elec.Pairs(in.num("metres"), r, in.count("pairsets"))
	},
	"drop": func(in *inputs) (float64, bool) {
		return elec.Drop(in.num("metres"), in.num("ohmperkm"), in.num("amps"))
	},
	"volts at the load": func(in *inputs) (float64, bool) {
		f, ok := elec.Lead{Volts: in.num("volts"), Ohm: in.num("ohm"), Watt: in.num("watt")}.Feed()
		return f.Volts, ok
	},
}

// mm2 is the area of a row's conductor, by gauge or metric.
func (in *inputs) mm2() float64 {
	if in.has("awg") {
		return unit.AWGArea(in.count("awg"))
	}
	return in.num("mm2")
}
