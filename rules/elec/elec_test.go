package elec

import (
	"math"
	"math/rand/v2"
	"testing"

	"driploop/catalog/unit"
)

// drawn calls a property with many draws; draw gives a number between two.
func drawn(t *testing.T, property func(t *testing.T, draw func(lo, hi float64) float64)) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 500 {
		property(t, func(lo, hi float64) float64 { return lo + (hi-lo)*r.Float64() })
	}
}

func TestResistanceGrowsWithHeatAndShrinksWithMetal(t *testing.T) {
	drawn(t, func(t *testing.T, draw func(lo, hi float64) float64) {
		mm2, cold := draw(0.05, 100), draw(-60, 100)
		more, hot := mm2*draw(1.01, 10), cold+draw(0.1, 100)
		thin, _ := Solid(mm2, cold)
		thick, _ := Solid(more, cold)
		warm, _ := Solid(mm2, hot)
		if !(thick < thin && thin < warm) {
			t.Fatalf("%v mm² %v Ω/km cold, %v hot; %v mm² %v", mm2, thin, warm, more, thick)
		}
		if s, _ := Stranded(mm2, cold); !(s > thin) {
			t.Fatalf("stranded %v, solid %v", s, thin)
		}
	})
}

// A metric conductor may not be better than solid copper of its area.
func TestMetricClassIsNoBetterThanItsArea(t *testing.T) {
	for _, f := range flexible {
		solid, _ := Solid(f.mm2, 20)
		if ratio := f.ohm / solid; ratio < 1.05 || ratio > 1.2 {
			t.Errorf("%v mm²: %v Ω/km is %.3f of solid copper", f.mm2, f.ohm, ratio)
		}
	}
}

// The load takes its power, and Ohm's law holds on the lead; found anew by walking
// down from the source until the load gets what it asks for.
func TestFeedBalances(t *testing.T) {
	drawn(t, func(t *testing.T, draw func(lo, hi float64) float64) {
		l := Lead{Volts: draw(3, 60), Ohm: draw(0.01, 20)}
		l.Watt = l.Volts * l.Volts / 4 / l.Ohm * draw(0, 0.99)
		f, ok := l.Feed()
		if !ok {
			t.Fatalf("%+v: nothing gets through", l)
		}
		near := func(a, b float64) bool { return math.Abs(a-b) <= 1e-9*(1+math.Abs(a)) }
		if !near(f.Volts*f.Amps, l.Watt) || !near(l.Volts-f.Volts, f.Drop) || !near(f.Watt, l.Watt+f.Amps*f.Drop) {
			t.Fatalf("%+v: %+v does not balance", l, f)
		}
		v := l.Volts
		for range 2000 {
			v = l.Volts - l.Ohm*l.Watt/v
		}
		if math.Abs(v-f.Volts) > 1e-6 {
			t.Fatalf("%+v: %v V at the load, %v by steps", l, f.Volts, v)
		}
	})
}

func TestNothingGetsThroughTooMuchLead(t *testing.T) {
	edge := Lead{Volts: 12, Ohm: 10, Watt: 3.6} // 144 = 4·10·3.6
	if f, ok := edge.Feed(); !ok || f.Volts != 6 {
		t.Errorf("at the edge: %+v %v, expected half the voltage", f, ok)
	}
	edge.Watt = 3.61
	if f, ok := edge.Feed(); ok {
		t.Errorf("beyond the edge: %+v", f)
	}
}

func TestWhatMakesNoSenseGivesNoFigure(t *testing.T) {
	nan, inf := math.NaN(), math.Inf(1)
	for _, bad := range []float64{0, -1, nan, inf} {
		if _, ok := Solid(bad, 20); ok {
			t.Errorf("Solid of %v mm²", bad)
		}
		if _, ok := Stranded(bad, 20); ok {
			t.Errorf("Stranded of %v mm²", bad)
		}
		if _, ok := FuseAmps(bad); ok {
			t.Errorf("FuseAmps of %v mm²", bad)
		}
		if _, ok := (Lead{Volts: bad, Ohm: 1, Watt: 1}).Feed(); ok {
			t.Errorf("Feed from %v V", bad)
		}
		if _, ok := Loop(1, bad); ok {
			t.Errorf("Loop at %v Ω/km", bad)
		}
	}
	for _, bad := range []float64{-1, nan, inf} {
		if _, ok := (Lead{Volts: 12, Ohm: bad, Watt: 1}).Feed(); ok {
			t.Errorf("Feed over %v Ω", bad)
		}
		if _, ok := (Lead{Volts: 12, Ohm: 1, Watt: bad}).Feed(); ok {
			t.Errorf("Feed of %v W", bad)
		}
		if _, ok := Drop(bad, 1, 1); ok {
			t.Errorf("Drop over %v m", bad)
		}
		if _, ok := Drop(1, 1, bad); ok {
			t.Errorf("Drop at %v A", bad)
		}
	}
	if _, ok := Solid(1, -300); ok {
		t.Error("a resistance below absolute zero")
	}
	if _, ok := Pairs(1, 1, 0); ok {
		t.Error("a loop over no pair set")
	}
	for _, class := range []int{-1, 9} {
		if _, _, ok := ClassWatt(class); ok {
			t.Errorf("class %d is known", class)
		}
	}
	if _, ok := kinds["af"].Left(nan); ok {
		t.Error("something is left of no number")
	}
	if _, ok := kinds["af"].Left(1000); ok {
		t.Error("something gets through 1000 ohm")
	}
}

// Each kind gives its highest class what that class draws, and each does what those
// before it do.
func TestKindsAndClassesAgree(t *testing.T) {
	last := 0.0
	for _, name := range []string{"af", "at", "bt3", "bt4"} {
		k, ok := Kind(name)
		source, device, okClass := ClassWatt(k.Class)
		if !ok || !okClass || source != k.Watt || k.DeviceWatt() != device || k.Watt <= last {
			t.Errorf("%s: %+v, its class %v W and %v W", name, k, source, device)
		}
		last = k.Watt
	}
}

// The channel that a kind counts with is longer than good cable is: 100 m of 24 AWG
// hot must stay below it.
func TestHotCableStaysWithinTheChannel(t *testing.T) {
	r, _ := Solid(unit.AWGArea(24), 60)
	loop, _ := Pairs(Reach, r, 1)
	for name, k := range kinds {
		if loop >= k.LoopOhm {
			t.Errorf("%s counts with %v ohm, 24 AWG at 60 °C has %v", name, k.LoopOhm, loop)
		}
	}
}

func TestFuseFiguresRunWithTheMetal(t *testing.T) {
	last := 0.0
	for n := 18; n >= 4; n -= 2 {
		amps, ok := FuseAmps(unit.AWGArea(n))
		if !ok || amps <= last {
			t.Errorf("%d AWG: %v A after %v A", n, amps, last)
		}
		less, _ := FuseAmps(unit.AWGArea(n) * 0.999)
		if less != last {
			t.Errorf("a little less than %d AWG: %v A, expected that of the thinner one, %v A", n, less, last)
		}
		last = amps
	}
}
