package limits

import (
	"math"
	"slices"
	"testing"

	"driploop/catalog/source"
)

// amp is a question about a fixed wideband amplifier.
func amp(kind, direction, band string) Query {
	return Query{Kind: kind, Direction: direction, Band: band, Class: "wideband", Mobility: "fixed"}
}

func near(a, b float64) bool { return math.Abs(a-b) < 0.005 }

// everything is a full set of inputs.
func everything(band string) Inputs {
	in := For(band)
	in.RSSI, in.MSCL, in.BSCL = Figure(-60, true), Figure(30, true), Figure(80, true)
	return in
}

// each runs over every limit row of every embedded profile.
func each(t *testing.T, run func(p *Profile, r *Row)) {
	t.Helper()
	n := 0
	for _, id := range Builtin().ProfileIDs() {
		p := Builtin().Profile(id)
		for _, r := range slices.Concat(p.Limits, p.Radio) {
			run(p, r)
			n++
		}
	}
	if n < 100 {
		t.Errorf("only %d rows were looked at", n)
	}
}

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

func TestEveryLimitHoldsAtItsBoundaryAndNotBeyond(t *testing.T) {
	each(t, func(p *Profile, r *Row) {
		v, missing := r.Value(everything("B5"))
		if len(missing) > 0 {
			t.Errorf("%s %s: with every input known it lacks %v", p.ID, r.Clause.V, missing)
			return
		}
		a := Assessment{Row: r, Value: v}
		slack := map[bool]float64{true: 0.05, false: 0}[slices.Contains([]string{"conducted", "eirp", "erp"}, r.Kind.V)]
		if a.Exceeded(v) || a.Exceeded(v+slack) {
			t.Errorf("%s %s: a figure at the limit %v with slack %v is refused", p.ID, r.Clause.V, v, slack)
		}
		if !a.Exceeded(v + slack + 1e-6) {
			t.Errorf("%s %s: a figure beyond the limit %v passes", p.ID, r.Clause.V, v)
		}
		if !a.Exceeded(math.NaN()) {
			t.Errorf("%s %s: no number passes", p.ID, r.Clause.V)
		}
	})
}

func TestEveryMissingInputLeavesItsRowsOpen(t *testing.T) {
	takeOut := map[string]func(*Inputs){
		"f":    func(in *Inputs) { in.UplinkMid = Input{} },
		"RSSI": func(in *Inputs) { in.RSSI = Input{} },
		"MSCL": func(in *Inputs) { in.MSCL = Input{} },
		"BSCL": func(in *Inputs) { in.BSCL = Input{} },
	}
	seen := map[string]bool{}
	each(t, func(p *Profile, r *Row) {
		for name, k := range map[string]float64{"f": r.KF.V, "RSSI": r.KR.V, "MSCL": r.KM.V, "BSCL": r.KB.V} {
			in := everything("B5")
			takeOut[name](&in)
			_, missing := r.Value(in)
			switch {
			case k == 0 && len(missing) > 0:
				t.Errorf("%s %s does not take %s, yet lacks %v", p.ID, r.Clause.V, name, missing)
			case k != 0 && !slices.Equal(missing, []string{name}):
				t.Errorf("%s %s without %s lacks %v", p.ID, r.Clause.V, name, missing)
			case k != 0:
				seen[name] = true
			}
		}
	})
	if len(seen) != 4 {
		t.Errorf("only %v were tried", seen)
	}
}

func TestWhatIsNoNumberIsUnknown(t *testing.T) {
	r := Builtin().Profile("us-fixed-wideband").Limits[0]
	for _, v := range []float64{math.NaN(), math.Inf(1), math.Inf(-1)} {
		if Figure(v, true).Known {
			t.Errorf("%v became an input", v)
		}
		if _, missing := r.Value(Inputs{RSSI: Input{v, true}, MSCL: Figure(30, true)}); !slices.Equal(missing, []string{"RSSI"}) {
			t.Errorf("with RSSI %v the row lacks %v", v, missing)
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
	if !a.Exceeded(71.28) || a.Exceeded(71.27) {
		t.Error("what breaks the row that could be computed is broken whatever the open row comes to")
	}
}

func TestUnansweredSelectorLeavesItsRowsOpen(t *testing.T) {
	p := Builtin().Profile("us-mobile-provider")
	q := Query{Kind: "gain", Direction: "uplink", Band: "B5"}
	a := p.Assess(q, everything("B5"))
	open := map[string]bool{}
	for _, o := range a.Open {
		for _, m := range o.Missing {
			open[m] = true
		}
	}
	if a.Whole() || !open["coupling"] || !open["isolation_control"] {
		t.Errorf("open: %v; expected coupling and isolation_control", open)
	}
	q.Coupling = "cradle"
	if a = p.Assess(q, everything("B5")); !a.Whole() || a.Value != 23 {
		t.Errorf("in a cradle the limit is %v, whole %v; expected 23", a.Value, a.Whole())
	}
}

func TestLeastOfTheRowsBindsAndTheFirstOfEqualOnes(t *testing.T) {
	row := func(c0 float64, clause string) *Row {
		r := &Row{}
		r.Kind, r.C0, r.Clause = source.Val[string]{V: "gain", Set: true}, source.Val[float64]{V: c0, Set: true}, source.Val[string]{V: clause, Set: true}
		return r
	}
	q := Query{Kind: "gain"}
	a := Least(q, Inputs{}, row(50, "a"), row(23, "b"), row(23, "c"), row(65, "d"))
	if a.Row.Clause.V != "b" || a.Value != 23 {
		t.Errorf("row %s with %v binds, expected b with 23", a.Row.Clause.V, a.Value)
	}
}

func TestBandOnBothSidesOfASelectorTakesBothRows(t *testing.T) {
	p := Builtin().Profile("us-router")
	q := Query{Kind: "eirp", Class: Radio, Band: "B66"}
	if rows := p.Match(q); len(rows) != 2 {
		t.Errorf("%d rows match 1710–1780 MHz, expected those of 1710–1755 and 1755–1780", len(rows))
	}
	// 814-824 MHz has no row: what is inside the others is not inside every limit.
	q.Band = "B26"
	a := p.Assess(q, For("B26"))
	if a.Whole() || len(a.Left) != 1 || a.Left[0].Lo != 814 || a.Left[0].Hi != 824 {
		t.Errorf("B26 leaves out %v, whole %v", a.Left, a.Whole())
	}
	if !a.Exceeded(41) {
		t.Error("41 dBm EIRP breaks the 7 W of 824–849 MHz, and passes")
	}
}

func TestFiguresCountedInSomethingAreQuestionsOfTheirOwn(t *testing.T) {
	p := Builtin().Profile("us-fixed-provider")
	q := Query{Kind: "eirp", Direction: "downlink", Class: "provider-specific", Band: "B5"}
	if got := p.Pers(q); !slices.Equal(got, []string{"", "channel"}) {
		t.Errorf("counted in %q, expected composite and channel", got)
	}
	if a := p.Assess(q, For("B5")); a.Value != 17 {
		t.Errorf("composite %v, expected 17", a.Value)
	}
	q.Per = "channel"
	if a := p.Assess(q, For("B5")); a.Value != 10 {
		t.Errorf("per channel %v, expected 10", a.Value)
	}
	uk := Query{Kind: "eirp", Direction: "uplink", Band: "B1"}
	if got := Builtin().Profile("uk-indoor-multi").Pers(uk); !slices.Equal(got, []string{"5MHz"}) {
		t.Errorf("counted in %q, expected 5MHz alone", got)
	}
}

func TestIndustrialDonorIsHeldToTheRadioService(t *testing.T) {
	p := Builtin().Profile("us-industrial")
	q := Query{Kind: "eirp", Direction: "uplink", Class: "industrial", Band: "B12"}
	if a := p.Assess(q, For("B12")); !a.Whole() || !near(a.Value, 36.92) {
		t.Errorf("uplink limit %v, whole %v; expected 3 W ERP = 36.92 dBm EIRP", a.Value, a.Whole())
	}
	// No base station row was read for 700 MHz: not assessed, not unlimited.
	q.Direction = "downlink"
	if a := p.Assess(q, For("B12")); a.None() || a.Whole() || len(a.Left) != 1 {
		t.Errorf("downlink of B12: %+v; expected the whole band left out", a)
	}
	wideband := Builtin().Profile("us-fixed-wideband")
	if a := wideband.Assess(amp("eirp", "uplink", "B12"), For("B12")); a.Value != 30 {
		t.Errorf("a consumer amplifier's uplink limit is %v, expected its own 30", a.Value)
	}
}

func TestSilenceIsToldFromAnOpenRow(t *testing.T) {
	for _, id := range []string{"eu-permission", "au-permission"} {
		p := Builtin().Profile(id)
		a := p.Assess(amp("gain", "uplink", "B3"), everything("B3"))
		if !a.None() || a.Whole() || a.Exceeded(200) {
			t.Errorf("%s has no figures, yet answers %+v", id, a)
		}
		if !p.NeedsOperatorPermission() || len(p.PapersFor("B3")) != 1 {
			t.Errorf("%s asks for the operator's permission as a paper", id)
		}
	}
}

func TestSplitPartsWhatDependsOnTheSite(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	byBand, bySite := Split(p.Match(amp("gain", "uplink", "B5")))
	if len(byBand) != 1 || byBand[0].KF.V != 20 || len(bySite) != 1 || bySite[0].KR.V != -1 {
		t.Errorf("%d rows by band, %d by site; expected 6.5 + 20·log10 f and −34 − RSSI + MSCL", len(byBand), len(bySite))
	}
}

func TestPowerOffRowsDoNotBindInNormalOperation(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	in := everything("B5")
	in.RSSI, in.MSCL = Figure(-80, true), Figure(20, true)
	if a := p.Assess(amp("gain", "uplink", "B5"), in); !near(a.Value, 64.95) {
		t.Errorf("normal operation allows %v, expected 64.95", a.Value)
	}
	off := amp("gain", "uplink", "B5")
	off.State = "power-off"
	if a := p.Assess(off, in); a.Value != 20 {
		t.Errorf("switched off it allows %v, expected the MSCL of 20", a.Value)
	}
}
