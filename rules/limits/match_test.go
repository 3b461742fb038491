package limits

import (
	"math"
	"slices"
	"testing"
)

// amp is a question about a fixed wideband amplifier.
func amp(kind, direction, band string) Query {
	return Query{Kind: kind, Direction: direction, Band: band, Class: "wideband", Mobility: "fixed"}
}

func near(a, b float64) bool { return math.Abs(a-b) < 0.005 }

func TestFixedGainTakesTheUplinkMiddleInBothDirections(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	// 6.5 + 20·log10(1732.5) = 71.27; at the downlink's middle it would be 73.08.
	for _, direction := range []string{"uplink", "downlink"} {
		in := For("B4")
		in.RSSI, in.MSCL = Figure(-90, true), Figure(40, true)
		a := p.Assess(amp("gain", direction, "B4"), in)
		if !a.Whole() || !near(a.Value, 71.27) {
			t.Errorf("%s: limit %v, whole %v; expected 71.27 and whole", direction, a.Value, a.Whole())
		}
	}
}

func TestUnknownInputLeavesTheRowOpen(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	a := p.Assess(amp("gain", "uplink", "B4"), For("B4"))
	if a.Whole() {
		t.Error("the row on RSSI and MSCL was not assessed, yet the answer is whole")
	}
	if len(a.Open) != 1 || !slices.Equal(a.Open[0].Missing, []string{"RSSI", "MSCL"}) {
		t.Errorf("open rows: %+v; expected one that lacks RSSI and MSCL", a.Open)
	}
	if a.Row == nil || !near(a.Value, 71.27) {
		t.Errorf("the row that could be computed gives %v, expected 71.27", a.Value)
	}
}
