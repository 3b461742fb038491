package rf_test

import (
	"math"
	"math/rand/v2"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// draws is how often each property is tried; the generator is seeded, so a failure
// comes back.
const draws = 2000

func dice() *rand.Rand { return rand.New(rand.NewPCG(7, 11)) }

func between(r *rand.Rand, lo, hi float64) float64 { return lo + r.Float64()*(hi-lo) }

// TestLossesAreNeverNegative tries every loss over the frequencies, distances and
// parts of the trade, and a good way beyond.
func TestLossesAreNeverNegative(t *testing.T) {
	r := dice()
	for range draws {
		f := unit.MHz(between(r, 50, 8000))
		d := between(r, 0.001, 2000)
		v1, v2 := between(r, 1, 5), between(r, 1, 5)
		mm := between(r, 0.5, 400)
		m := rf.P2040Materials[r.IntN(len(rf.P2040Materials))]
		run, okRun := rf.MismatchRun(v1, v2, between(r, 1, 2))
		losses := map[string]func() (unit.DB, bool){
			"free space": func() (unit.DB, bool) { return rf.FreeSpaceLoss(f, d) },
			"pair":       func() (unit.DB, bool) { return rf.PairLoss(f) },
			"mismatch":   func() (unit.DB, bool) { return rf.MismatchLoss(v1) },
			"run least":  func() (unit.DB, bool) { return run.Least, okRun },
			"indoor":     func() (unit.DB, bool) { return rf.IndoorLoss(rf.Building(r.IntN(3)), f, d, r.IntN(3)) },
			"slab":       func() (unit.DB, bool) { return m.Slab(f, mm) },
			"entry":      func() (unit.DB, bool) { return rf.EntryLoss(rf.Efficient, f, 0, between(r, 0.01, 0.99)) },
			"tap":        func() (unit.DB, bool) { return rf.TapThroughLoss(unit.DB(between(r, 1, 40))) },
			"combine":    func() (unit.DB, bool) { return rf.CombineLoss(unit.DB(between(r, -30, 30)), between(r, -180, 180)) },
			"polarization": func() (unit.DB, bool) {
				return rf.PolarizationLoss(between(r, -360, 360), unit.DB(between(r, 0, 40)))
			},
			"air gap": func() (unit.DB, bool) { return rf.AirGap(f, d) },
		}
		for name, loss := range losses {
			if v, ok := loss(); v < 0 || math.IsNaN(float64(v)) || (!ok && v != 0) {
				t.Fatalf("%s: %v (known %v) at %v, %g m", name, v, ok, f, d)
			}
		}
		if !okRun || run.Least > run.Nominal+1e-9 || run.Nominal > run.Greatest+1e-9 {
			t.Fatalf("a run loses %+v at VSWR %g and %g", run, v1, v2)
		}
	}
}

// TestLongerCableNeverLosesLess holds for any fit, any two lengths, temperatures
// and frequencies: more of each is never less loss.
func TestLongerCableNeverLosesLess(t *testing.T) {
	r := dice()
	for range draws {
		points := make([]rf.Point, 2+r.IntN(6))
		for i := range points { // tables that no cable has, too: the fit must stay sane
			points[i] = rf.Point{MHz: unit.MHz(between(r, 30, 3000)), DB: unit.DB(between(r, 0.1, 90))}
		}
		c, err := rf.FitCable(points, 6000)
		if err != nil {
			continue // two points at one frequency, or nearly
		}
		f := unit.MHz(between(r, 30, 5000))
		short := unit.MM(r.Int64N(100000))
		long := short + unit.MM(r.Int64N(100000))
		cold := unit.Celsius(between(r, -60, 90))
		base, ok := c.Loss(f, short, cold)
		longer, ok1 := c.Loss(f, long, cold)
		hotter, ok2 := c.Loss(f, short, cold+10)
		higher, ok3 := c.Loss(f+500, short, cold)
		if !ok || !ok1 || !ok2 || !ok3 {
			t.Fatalf("no loss at %v from %+v", f, c)
		}
		if base < 0 || longer < base || hotter < base || higher < base {
			t.Fatalf("%+v: %v, longer %v, hotter %v, higher %v", c, base, longer, hotter, higher)
		}
	}
}

// TestLegLossCancelsInPortNoise is why a lossy leg does not quiet an amplifier: it
// adds to the noise figure what it takes off the gain.
func TestLegLossCancelsInPortNoise(t *testing.T) {
	r := dice()
	for range draws {
		amp := rf.Stage{Gain: unit.DB(between(r, 0, 100)), NF: unit.DB(between(r, 0, 15))}
		leg := unit.DB(between(r, 0, 30))
		chain, ok := rf.Cascade(rf.Attenuator(leg), amp)
		if !ok {
			t.Fatal("no cascade")
		}
		with, ok1 := rf.PortNoise(chain)
		without, ok2 := rf.PortNoise(amp)
		if !ok1 || !ok2 || math.Abs(float64(with.Minus(without))) > 1e-6 {
			t.Fatalf("leg of %v: %v, without it %v", leg, with, without)
		}
	}
}

// TestOrderOfPassives: however passive parts are shuffled, their chain loses the
// same and has its loss for a noise figure.
func TestOrderOfPassives(t *testing.T) {
	r := dice()
	for range draws {
		stages := make([]rf.Stage, 1+r.IntN(8))
		for i := range stages {
			stages[i] = rf.Attenuator(unit.DB(between(r, 0, 12)))
		}
		a, ok1 := rf.Cascade(stages...)
		r.Shuffle(len(stages), func(i, j int) { stages[i], stages[j] = stages[j], stages[i] })
		b, ok2 := rf.Cascade(stages...)
		if !ok1 || !ok2 || !near(float64(a.Gain), float64(b.Gain), 1e-9) || !near(float64(b.NF), -float64(b.Gain), 1e-6) {
			t.Fatalf("%+v in one order, %+v in another", a, b)
		}
	}
}

// TestRunCombinesLikeAPolygon compares the bounds of a mismatched run with lines
// between the steps: no line lengths reach beyond them.
func TestRunCombinesLikeAPolygon(t *testing.T) {
	r := dice()
	for range draws {
		steps := []float64{between(r, 1, 3), between(r, 1, 3), between(r, 1, 3)}
		best, worst, ok := rf.CompositeVSWR(steps...)
		if !ok {
			t.Fatal("no composite")
		}
		got := throughLines(r, steps)
		if got < best*(1-1e-9) || got > worst*(1+1e-9) {
			t.Fatalf("steps %v add up to %g, outside %g to %g", steps, got, best, worst)
		}
	}
}

// throughLines is the VSWR of impedance steps in a row with lossless lines of
// random length between them, by multiplying wave matrices [[1,Γ],[Γ,1]]/√(1−Γ²).
func throughLines(r *rand.Rand, steps []float64) float64 {
	a, b := complex(1, 0), complex(0, 0) // first row of a unitary-like matrix [[a,b],[b*,a*]]
	for _, v := range steps {
		gamma := (v - 1) / (v + 1)
		scale := complex(1/math.Sqrt(1-gamma*gamma), 0)
		g := complex(gamma, 0)
		a, b = scale*(a+b*g), scale*(a*g+b)
		sin, cos := math.Sincos(between(r, 0, 2*math.Pi))
		turn := complex(cos, sin)
		a, b = a*turn, b/turn
	}
	gamma := math.Hypot(real(b), imag(b)) / math.Hypot(real(a), imag(a))
	return (1 + gamma) / (1 - gamma)
}

// TestThickSlabFollowsLossPerMetre holds one formula against the other: a slab so
// thick that its echoes die grows by the material's loss per metre.
func TestThickSlabFollowsLossPerMetre(t *testing.T) {
	concrete, _ := rf.MaterialNamed("concrete")
	for f := unit.MHz(1000); f <= 4000; f += 100 {
		thin, ok1 := concrete.Slab(f, 600)
		thick, ok2 := concrete.Slab(f, 800)
		rate, ok3 := concrete.LossPerMetre(f)
		if !ok1 || !ok2 || !ok3 {
			t.Fatalf("nothing at %v", f)
		}
		if got := float64(thick-thin) / 0.2; !near(got, float64(rate), 0.02*float64(rate)) {
			t.Errorf("%v: a slab grows by %.2f dB a metre, the material loses %v", f, got, rate)
		}
	}
}

func near(a, b, tolerance float64) bool { return math.Abs(a-b) <= tolerance }
