package rf_test

import (
	"errors"
	"math"
	"slices"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// wantDB fails unless a known figure is as expected, or an unknown one is unknown.
func wantDB(t *testing.T, what string, got unit.DB, ok bool, want, tolerance float64) {
	t.Helper()
	if !ok || !near(float64(got), want, tolerance) {
		t.Errorf("%s: %v (known %v), want %g", what, float64(got), ok, want)
	}
}

func wantUnknown[T comparable](t *testing.T, what string, got T, ok bool) {
	t.Helper()
	var zero T
	if ok || got != zero {
		t.Errorf("%s: %v, where nothing is known", what, got)
	}
}

func TestLimitComparison(t *testing.T) {
	for _, c := range []struct {
		v, limit       float64
		exceeds, below bool
	}{
		{30, 30, false, false},
		{0.1 + 0.2, 0.3, false, false}, // 4e-17 apart
		{30 + rf.Slack, 30, false, false},
		{30 - rf.Slack, 30, false, false},
		{30 + 2e-9, 30, true, false},
		{30 - 2e-9, 30, false, true},
		{math.NaN(), 30, true, true},
		{30, math.NaN(), true, true},
		{math.Inf(1), 30, true, false},
		{math.Inf(-1), 30, false, true},
	} {
		if got := rf.Exceeds(c.v, c.limit); got != c.exceeds {
			t.Errorf("Exceeds(%g, %g) is %v", c.v, c.limit, got)
		}
		if got := rf.Below(c.v, c.limit); got != c.below {
			t.Errorf("Below(%g, %g) is %v", c.v, c.limit, got)
		}
	}
}

func TestFitRefusesBadPoints(t *testing.T) {
	for _, c := range []struct {
		points []rf.Point
		want   error
	}{
		{nil, rf.ErrTooFewPoints},
		{[]rf.Point{{850, 24.7}}, rf.ErrTooFewPoints},
		{[]rf.Point{{850, 24.7}, {850, 25.1}}, rf.ErrTooFewPoints},
		{[]rf.Point{{850, 24.7}, {0, 1}}, rf.ErrBadPoint},
		{[]rf.Point{{850, 24.7}, {450, -1}}, rf.ErrBadPoint},
		{[]rf.Point{{850, 24.7}, {450, unit.DB(math.NaN())}}, rf.ErrBadPoint},
		{[]rf.Point{{unit.MHz(math.Inf(1)), 24.7}, {450, 16}}, rf.ErrBadPoint},
	} {
		if _, err := rf.FitCable(c.points, 0); !errors.Is(err, c.want) {
			t.Errorf("%v: %v, want %v", c.points, err, c.want)
		}
	}
}

// TestFitKeepsCoefficientsAboveZero takes a table that rises faster than its
// frequency and one that falls: neither may bring a coefficient below zero.
func TestFitKeepsCoefficientsAboveZero(t *testing.T) {
	steep, err := rf.FitCable([]rf.Point{{100, 1}, {1000, 20}}, 0)
	if err != nil || steep.K1 != 0 || !(steep.K2 > 0) {
		t.Errorf("steep table: %+v, %v", steep, err)
	}
	falling, err := rf.FitCable([]rf.Point{{100, 20}, {1000, 10}}, 0)
	if err != nil || falling.K2 != 0 || !(falling.K1 > 0) || falling.Miss < 50 {
		t.Errorf("falling table: %+v, %v", falling, err)
	}
	// the best of all k1 with k2 = 0, by trying: no neighbour has less squared relative error
	residual := func(k1 float64) float64 {
		e1, e2 := k1*10/20-1, k1*math.Sqrt(1000)/10-1
		return e1*e1 + e2*e2
	}
	if r := residual(falling.K1); residual(falling.K1*1.001) < r || residual(falling.K1*0.999) < r {
		t.Errorf("k1 = %g is not the best", falling.K1)
	}
}

func TestCableEndsAtItsMaximum(t *testing.T) {
	c, err := rf.FitCable([]rf.Point{{100, 6}, {1000, 20}}, 3000)
	if err != nil {
		t.Fatal(err)
	}
	if _, ok := c.AttenuationPer100m(3000); !ok {
		t.Error("nothing at the maximum itself")
	}
	for _, f := range []float64{3000.001, 0, -5, math.NaN(), math.Inf(1)} {
		v, ok := c.AttenuationPer100m(unit.MHz(f))
		wantUnknown(t, "beyond the maximum", v, ok)
	}
	v, ok := c.Loss(1000, -1, 20)
	wantUnknown(t, "a negative length", v, ok)
	v, ok = c.Loss(1000, 1000, 400)
	wantUnknown(t, "a temperature no site has", v, ok)
}

func TestLossBetweenTemperatures(t *testing.T) {
	c, err := rf.FitCable([]rf.Point{{100, 6}, {1000, 20}}, 0)
	if err != nil {
		t.Fatal(err)
	}
	l, ok := c.LossBetween(1000, 50000, 45, -15)
	back, ok2 := c.LossBetween(1000, 50000, -15, 45)
	if !ok || !ok2 || l != back {
		t.Fatalf("%+v and %+v", l, back)
	}
	wantDB(t, "least", l.Least, ok, 10*0.93, 0.001)
	wantDB(t, "nominal", l.Nominal, ok, 10, 0.001)
	wantDB(t, "greatest", l.Greatest, ok, 10*1.05, 0.001)
	line := l.Plus(rf.Exactly(0.5))
	wantDB(t, "least of the line", line.Least, true, 9.8, 0.001)
	wantDB(t, "nominal of the line", line.Nominal, true, 10.5, 0.001)
	wantDB(t, "greatest of the line", line.Greatest, true, 11, 0.001)
	for _, temperatures := range [][2]unit.Celsius{{-100, 20}, {20, 200}} {
		l, ok = c.LossBetween(1000, 50000, temperatures[0], temperatures[1])
		wantUnknown(t, "a temperature no site has", l, ok)
	}
	l, ok = c.LossBetween(1001, 50000, 20, 20)
	wantUnknown(t, "beyond the table", l, ok)
	l, ok = c.LossBetween(1000, 0, 20, 20)
	if !ok || l != (rf.Loss{}) {
		t.Errorf("no cable loses %+v", l)
	}
}

// TestGeometryAgreesWithTable holds the RG-213 table against its cross-section. A
// braid of plain wire and a stranded centre lose more than smooth tubes, never less,
// and not three times as much.
func TestGeometryAgreesWithTable(t *testing.T) {
	table, err := rf.FitCable([]rf.Point{{50, 4.9}, {150, 8.9}, {450, 16.3}, {850, 24.7}}, 0)
	if err != nil {
		t.Fatal(err)
	}
	smooth := rf.Coax{Outer: 7.24, Inner: 2.26, Permittivity: 2.25}
	loss, ok := smooth.ConductorLoss(50, 5.8e7)
	skin := table.K1 * math.Sqrt(50) / 100
	if !ok || skin < float64(loss) || skin > 3*float64(loss) {
		t.Errorf("the table's skin effect is %.4f dB/m at 50 MHz, smooth copper %v", skin, float64(loss))
	}
}

// TestInfinityIsNoFigure: what a division by zero upstream leaves behind stops here.
func TestInfinityIsNoFigure(t *testing.T) {
	inf := math.Inf(1)
	if v, ok := rf.Gamma(inf); ok {
		t.Errorf("VSWR without end reflects %g", v)
	}
	if v, ok := rf.StepVSWR(50, inf); ok {
		t.Errorf("a step to infinity is %g", v)
	}
	if best, worst, ok := rf.CompositeVSWR(1e200, 1e200); ok {
		t.Errorf("%g, %g", best, worst)
	}
	v, ok := rf.FreeSpaceLoss(700, inf)
	wantUnknown(t, "an endless path", v, ok)
	level, ok := rf.RSSI(unit.DBmOf(inf), 50)
	wantUnknown(t, "endless power", level, ok)
	tol, ok := rf.Together(rf.Either(unit.DB(inf)))
	if ok {
		t.Errorf("%+v", tol)
	}
}

func TestPairLoss(t *testing.T) {
	v, ok := rf.PairLoss(850, 0.1)
	wantDB(t, "one stated", v, ok, 0.1, 0)
	v, ok = rf.PairLoss(850, 0.1, 0.25)
	wantDB(t, "two stated: the greater", v, ok, 0.25, 0)
	v, ok = rf.PairLoss(850, 0)
	wantDB(t, "stated as nothing", v, ok, 0, 0)
	v, ok = rf.PairLoss(850, unit.DB(math.NaN()))
	wantUnknown(t, "NaN", v, ok)
	v, ok = rf.PairLoss(850, -0.1)
	wantUnknown(t, "a pair that gains", v, ok)
}

func TestLookup(t *testing.T) {
	points := []rf.Point{{700, 4}, {2100, 7}}
	span := unit.Span{Lo: 600, Hi: 2700}
	for f, want := range map[unit.MHz]float64{600: 4, 700: 4, 1400: 5.5, 2100: 7, 2700: 7} {
		v, ok := rf.Lookup(points, span, f)
		wantDB(t, f.String(), v, ok, want, 1e-9)
	}
	for _, f := range []unit.MHz{599.9, 2700.1, unit.MHz(math.NaN())} {
		v, ok := rf.Lookup(points, span, f)
		wantUnknown(t, f.String(), v, ok)
	}
	v, ok := rf.Lookup(points, unit.Span{}, 6000)
	wantDB(t, "no bounds", v, ok, 7, 0)
	v, ok = rf.Lookup([]rf.Point{{0, 14}}, unit.Span{}, 6000)
	wantDB(t, "a constant", v, ok, 14, 0)
	v, ok = rf.Lookup(nil, span, 700)
	wantUnknown(t, "no points", v, ok)
	v, ok = rf.Lookup([]rf.Point{{2100, 7}, {700, 4}}, span, 700)
	wantUnknown(t, "points that fall", v, ok)
}

func TestStagesRunFromTheFirst(t *testing.T) {
	totals, ok := rf.Cumulate(rf.Attenuator(3), rf.Stage{Gain: 60, NF: 5}, rf.Attenuator(8))
	if !ok || len(totals) != 3 {
		t.Fatalf("%v, %v", totals, ok)
	}
	for i, want := range []struct{ gain, nf float64 }{{-3, 3}, {57, 8}, {49, 8}} {
		wantDB(t, "gain", totals[i].Gain, true, want.gain, 1e-9)
		wantDB(t, "noise figure", totals[i].NF, true, want.nf, 0.001)
	}
	s, ok := rf.Cascade()
	wantUnknown(t, "a chain of nothing", s, ok)
}

func TestCompositeInput(t *testing.T) {
	passband := unit.Span{Lo: 869, Hi: 894}
	inside := rf.Signal{RSRP: unit.DBmOf(-100), Channel: unit.Span{Lo: 870, Hi: 880}, Blocks: 50, Gain: 11, Feed: 2.5}
	outside := rf.Signal{RSRP: unit.DBmOf(-60), Channel: unit.Span{Lo: 894, Hi: 904}}
	alone := -100 + 27.782 + 11 - 2.5

	v, ok := rf.CompositeInput(passband, []rf.Signal{inside, outside})
	wantDB(t, "one signal", unit.DB(v.Value()), ok, alone, 0.001)

	v, ok = rf.CompositeInput(passband, []rf.Signal{inside, inside})
	wantDB(t, "two alike", unit.DB(v.Value()), ok, alone+3.0103, 0.001)

	half := inside
	half.Channel = unit.Span{Lo: 889, Hi: 899}
	v, ok = rf.CompositeInput(passband, []rf.Signal{half})
	wantDB(t, "half of it inside", unit.DB(v.Value()), ok, alone-3.0103, 0.001)

	bare := inside
	bare.Blocks = 0
	v, ok = rf.CompositeInput(passband, []rf.Signal{inside, bare})
	wantUnknown(t, "a width without blocks", v, ok)
	v, ok = rf.CompositeInput(passband, []rf.Signal{outside})
	wantUnknown(t, "nothing surveyed inside", v, ok)
	v, ok = rf.CompositeInput(passband, []rf.Signal{{RSRP: unit.DBmOf(-90), Blocks: 50}})
	wantUnknown(t, "no channel", v, ok)

	at, ok := rf.AtIsotropic(unit.DBmOf(-91), 12, 2)
	wantDB(t, "survey antenna taken out", unit.DB(at.Value()), ok, -101, 1e-9)
}

func TestGainRuns(t *testing.T) {
	out := rf.OutputCeiling(unit.DBmOf(12), unit.DBmOf(-40)) // 52 dB
	iso := rf.IsolationCeiling(75, 15)                       // 60 dB
	prot := rf.ProtectionCeiling(55.9)
	none := rf.IsolationCeiling(unit.DB(math.NaN()), 15)
	for _, c := range []struct {
		name      string
		set, step unit.DB
		ceilings  []rf.Ceiling
		gain      float64
		by        rf.Bound
		on, ok    bool
	}{
		{"set to nothing", 0, 1, nil, 0, rf.BySet, true, true},
		{"nothing else", 63, 1, nil, 63, rf.BySet, true, true},
		{"output binds", 63, 0, []rf.Ceiling{out, prot, iso}, 52, rf.ByOutput, true, true},
		{"protection binds", 64.9, 1, []rf.Ceiling{prot, iso}, 55.9, rf.ByProtection, true, true},
		{"back-off rounded up", 63, 2, []rf.Ceiling{prot}, 55, rf.ByProtection, true, true},
		{"a step hit exactly", 63, 0.1, []rf.Ceiling{rf.IsolationCeiling(77.7, 15)}, 62.7, rf.ByIsolation, true, true},
		{"equal: the first", 52, 1, []rf.Ceiling{out}, 52, rf.BySet, true, true},
		{"off", 63, 1, []rf.Ceiling{rf.IsolationCeiling(14, 15)}, 0, rf.ByIsolation, false, true},
		{"at 0 dB still on", 63, 1, []rf.Ceiling{rf.IsolationCeiling(15, 15)}, 0, rf.ByIsolation, true, true},
		{"rounding turns it off", 63, 2, []rf.Ceiling{rf.IsolationCeiling(15.5, 15)}, 0, rf.ByIsolation, false, true},
		{"isolation missing", 63, 1, []rf.Ceiling{out, none}, 52, rf.ByOutput, true, false},
		{"NaN said to be known", 63, 1, []rf.Ceiling{{By: rf.ByOutput, Gain: unit.DB(math.NaN()), Known: true}}, 63, rf.BySet, true, false},
	} {
		run, ok := rf.GainRuns(c.set, c.step, c.ceilings...)
		if ok != c.ok || run.On != c.on || run.By != c.by || !near(float64(run.Gain), c.gain, 1e-9) {
			t.Errorf("%s: %+v, %v", c.name, run, ok)
		}
	}
	run, _ := rf.GainRuns(63, 1, out, none)
	if !slices.Equal(run.Missing, []rf.Bound{rf.ByIsolation}) {
		t.Errorf("missing %v", run.Missing)
	}
	for _, bad := range []unit.DB{unit.DB(math.NaN()), -1, unit.DB(math.Inf(1))} {
		if _, ok := rf.GainRuns(bad, 1); ok {
			t.Errorf("a set gain of %v runs", float64(bad))
		}
	}
}
