package limits

import (
	"math"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Row is one limit. Its selectors (Direction to FBelow) are unset where they do
// not matter, except that State unset means normal operation and Per unset means
// the composite figure.
type Row struct {
	At source.Place

	Kind source.Val[string] // what is limited, one of Kinds

	Direction        source.Val[string]  // uplink, downlink
	Class            source.Val[string]  // wideband, provider-specific, industrial, radio
	Mobility         source.Val[string]  // fixed, mobile
	Coupling         source.Val[string]  // antenna, cradle, wired
	Source           source.Val[string]  // how BSCL was come by: measured, received, assumed
	State            source.Val[string]  // on, power-off, idle; absent: on
	Per              source.Val[string]  // channel, 5MHz, 10MHz, 10kHz; absent: composite
	IsolationControl source.Val[bool]    // the amplifier sets its gain by measured isolation
	FFrom, FBelow    source.Val[float64] // MHz; from inside, below outside

	C0, KF, KR, KM, KB source.Val[float64]
	FAt                source.Val[string] // uplink-mid, downlink-mid; absent: uplink-mid

	Clause  source.Val[string] // instrument and paragraph
	Edition source.Val[string] // of the instrument; the profile's where the row has none
	Proof   source.Val[string]
	Note    source.Val[string]
}

// Input is a figure that may be unknown. The zero Input is unknown.
type Input struct {
	V     float64
	Known bool
}

// Figure makes an input of a computed figure; what is no number is unknown.
func Figure(v float64, known bool) Input {
	if !known || math.IsNaN(v) || math.IsInf(v, 0) {
		return Input{}
	}
	return Input{v, true}
}

// Inputs are the figures that limit formulas take.
type Inputs struct {
	UplinkMid   Input // MHz, middle of the uplink of the amplifier's own band row
	DownlinkMid Input // MHz, the same of the downlink
	RSSI        Input // dBm, composite downlink power at the donor port over the band
	MSCL        Input // dB, least coupling loss from phone to server port
	BSCL        Input // dB, coupling loss from base station to donor port
}

// Value computes the limit. Where an input is unknown it returns no figure but
// the names of what is missing, in the words of the formula.
func (r *Row) Value(in Inputs) (float64, []string) {
	f := in.UplinkMid
	if r.FAt.V == "downlink-mid" {
		f = in.DownlinkMid
	}
	if f.Known && f.V > 0 {
		f.V = math.Log10(f.V)
	} else {
		f.Known = false
	}
	v := r.C0.V
	var missing []string
	for _, t := range []struct {
		k    float64
		in   Input
		name string
	}{{r.KF.V, f, "f"}, {r.KR.V, in.RSSI, "RSSI"}, {r.KM.V, in.MSCL, "MSCL"}, {r.KB.V, in.BSCL, "BSCL"}} {
		switch {
		case t.k == 0:
		case !t.in.Known || math.IsNaN(t.in.V) || math.IsInf(t.in.V, 0):
			missing = append(missing, t.name)
		default:
			v += t.k * t.in.V
		}
	}
	if len(missing) > 0 {
		return 0, missing
	}
	return v, nil
}

// BySite reports whether the limit depends on what the site is like (received
// level or coupling losses) and not on the band alone.
func (r *Row) BySite() bool { return r.KR.V != 0 || r.KM.V != 0 || r.KB.V != 0 }

// Span is the spectrum on which the row holds; without selectors it is all.
func (r *Row) Span() unit.Span {
	return unit.Span{Lo: unit.MHz(r.FFrom.V), Hi: unit.MHz(r.FBelow.Or(math.MaxFloat64))}
}

// power lists the kinds that instruments print in rounded dBm for a power in
// watts (17 dBm for 0.05 W).
var power = map[string]bool{"conducted": true, "eirp": true, "erp": true}

// Slack is what a figure may stand above the row's value and still be inside, in
// dB: 0.05 for powers, whose printed dBm are rounded, else nothing.
func (r *Row) Slack() float64 {
	if power[r.Kind.V] {
		return 0.05
	}
	return 0
}

// proof says how a figure was come by.
var proof = source.OneOf("read", "copy", "memory", "calculated", "common practice")

func (r *Row) keys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.Kind, "kind", source.OneOf(kindNames()...), "what is limited")
	source.Opt(k, &r.Direction, "direction", source.OneOf("uplink", "downlink"), "absent: both")
	source.Opt(k, &r.Class, "class", source.OneOf("wideband", "provider-specific", "industrial"), "class of the amplifier; absent: any")
	r.rest(k)
}

// radioKeys reads a row for routers and other radios without an amplifier; the
// spectrum it holds for must be given.
func (r *Row) radioKeys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.Kind, "kind", source.OneOf("conducted", "eirp", "erp"), "what is limited")
	r.Direction = source.Val[string]{V: "uplink", Set: true}
	r.Class = source.Val[string]{V: Radio, Set: true}
	r.rest(k)
	k.Demand(source.Needs("f_from"), source.Needs("f_below"))
	if !k.Recording() && !(r.FFrom.Set && r.FBelow.Set) {
		k.Missing("f_from and f_below", "a power limit of a radio service holds for a stretch of spectrum")
	}
}

func (r *Row) rest(k *source.Keys) {
	source.Opt(k, &r.Mobility, "mobility", source.OneOf("fixed", "mobile"), "absent: both")
	source.Opt(k, &r.Coupling, "coupling", source.OneOf("antenna", "cradle", "wired"), "how the phone is coupled; absent: any")
	source.Opt(k, &r.Source, "source", source.OneOf("measured", "received", "assumed"), "how BSCL was come by; absent: any")
	source.Opt(k, &r.State, "state", source.OneOf("on", "power-off", "idle"), "absent: on")
	source.Opt(k, &r.Per, "per", source.OneOf("channel", "5MHz", "10MHz", "10kHz"), "what the figure is counted in; absent: composite")
	source.Opt(k, &r.IsolationControl, "isolation_control", source.Flag, "the amplifier sets its gain by measured isolation; absent: any")
	source.Opt(k, &r.FFrom, "f_from", source.AtLeast(0, "MHz"), "spectrum from here on, inside")
	source.Opt(k, &r.FBelow, "f_below", source.AtLeast(0, "MHz"), "and below this, outside")
	r.coefficients(k)
	source.Need(k, &r.Clause, "clause", source.Text, "instrument and paragraph")
	source.Opt(k, &r.Edition, "edition", source.Text, "of the instrument; absent: as the profile")
	source.Need(k, &r.Proof, "proof", proof, "how sure the figure is")
	source.Opt(k, &r.Note, "note", source.Text, "what a reader should know about it")
	if r.FFrom.Set && r.FBelow.Set && r.FFrom.V >= r.FBelow.V {
		k.Fault(r.FBelow.At, "the row holds on no spectrum: f_below does not lie above f_from", "swap them or check the figures", r.FFrom.At)
	}
}

func (r *Row) coefficients(k *source.Keys) {
	number := source.Between(-1000, 1000, "")
	source.Opt(k, &r.C0, "c0", number, "constant; value = c0 + kf·log10(f/MHz) + kr·RSSI + km·MSCL + kb·BSCL")
	source.Opt(k, &r.KF, "kf", number, "times log10 of the frequency in MHz")
	source.Opt(k, &r.KR, "kr", number, "times RSSI in dBm")
	source.Opt(k, &r.KM, "km", number, "times MSCL in dB")
	source.Opt(k, &r.KB, "kb", number, "times BSCL in dB")
	source.Opt(k, &r.FAt, "f_at", source.OneOf("uplink-mid", "downlink-mid"), "which frequency; absent: uplink-mid, for both directions")
	k.Demand(source.Needs("c0", "kf", "kr", "km", "kb"))
	for _, name := range []string{"c0", "kf", "kr", "km", "kb"} {
		if k.Recording() || k.Has(name) {
			return
		}
	}
	k.Missing("c0", "or another coefficient: without one the row is no limit")
}
