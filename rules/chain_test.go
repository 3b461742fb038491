package rules_test

import (
	"fmt"
	"math"
	"math/rand/v2"
	"strings"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules"
)

// What must hold of every radio chain, whatever its figures are. Each property is
// tried on chains drawn at random from a fixed seed; a failure prints its chain.

const draws = 60

// rig is a chain in B5 whose figures are drawn: donor, feed, amplifier, leg, server.
type rig struct {
	k1, k2      float64 // of the cable, dB per 100 m
	feed, leg   int     // mm
	cold, hot   int     // °C
	low, high   float64 // gain of the donor at the low and at the high half of the band, dBi
	server      float64 // dBi
	gain, out   float64
	backOff     float64
	steps       int // 75 ohm jumpers on the feed
	servers     int
	signals     []float64 // RSRP, dBm
	isolation   float64
	protected   bool
	fromTheGear bool // the feed is written from the amplifier to the antenna
}

func draw(r *rand.Rand) rig {
	in := func(lo, hi float64) float64 { return math.Round((lo+(hi-lo)*r.Float64())*100) / 100 }
	g := rig{
		k1: in(0.1, 1.2), k2: in(0, 0.02), feed: 500 + r.IntN(60000), leg: 500 + r.IntN(60000),
		cold: -40 + r.IntN(50), hot: 20 + r.IntN(40), low: in(-2, 14), high: in(-2, 14), server: in(0, 9),
		gain: in(30, 90), out: in(0, 30), backOff: in(0, 20), steps: r.IntN(4), servers: 1 + r.IntN(3),
		isolation: in(40, 110), protected: r.IntN(2) == 0,
	}
	for range 1 + r.IntN(4) {
		g.signals = append(g.signals, in(-120, -50))
	}
	return g
}

func (g rig) catalog() string {
	loss := func(f float64) string { return fmt.Sprintf("[%g, %.9f]", f, g.k1*math.Sqrt(f)+g.k2*f) }
	return fmt.Sprintf(`
[part.CX]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [%s, %s, %s]
[part.NC]
kind          = "connector"
connector     = "N male"
impedance_ohm = 50
fits          = ["CX"]
[part.J75]
kind    = "jumper"
cable   = "CX-75"
length  = "0.5 m"
ends    = ["N male", "N female"]
[part.CX-75]
kind             = "cable"
impedance_ohm    = 75
loss_db_per_100m = [[400, 10], [900, 16]]
[part.DONOR]
kind  = "antenna"
port  = { rf = { connector = "N female", impedance_ohm = 50 } }
range = [{ mhz = [800, 836.4], gain_dbi = %g }, { mhz = [836.5, 900], gain_dbi = %g }]
[part.SERVER]
kind  = "antenna"
port  = { rf = { connector = "N female", impedance_ohm = 50 } }
range = [{ mhz = [800, 900], gain_dbi = %g }]
[part.SPLIT]
kind = "splitter"
port = { in = { connector = "N female", impedance_ohm = 50 }, out1 = { connector = "N female", impedance_ohm = 50 }, out2 = { connector = "N female", impedance_ohm = 50 }, out3 = { connector = "N female", impedance_ohm = 50 } }
path = [{ from = "in", to = ["out1", "out2", "out3"], loss_db = 5.2 }]
[part.AMP]
kind               = "amplifier"
class              = "wideband"
mobility           = "fixed"
network_protection = %t
port               = { donor = { connector = "N female", impedance_ohm = 50, side = "donor" }, server = { connector = "N female", impedance_ohm = 50, side = "server" } }
band               = [{ band = "B5", uplink = { gain_db = %g, max_out_dbm = %g }, downlink = { gain_db = %g, max_out_dbm = %g } }]
`, loss(100), loss(400), loss(900), g.low, g.high, g.server, g.protected, g.gain, g.out, g.gain, g.out)
}

func (g rig) plan() string {
	var b strings.Builder
	fmt.Fprintf(&b, `[job]
bands = ["B5"]
[site]
coldest = "%d C"
hottest = "%d C"
[place]
roof = { kind = "outdoor" }
[device]
donor = { part = "DONOR", place = "roof" }
split = { part = "SPLIT", place = "roof" }
[device.amp]
part  = "AMP"
place = "roof"
set   = { B5 = { back_off_db = %g } }
[cable]
`, g.cold, g.hot, g.backOff)
	antenna := "donor"
	for i := range g.steps {
		fmt.Fprintf(&b, "J%d = { part = \"J75\", from = %q }\n", i, antenna)
		antenna = fmt.Sprintf("J%d.2", i)
	}
	from, to := antenna, "amp.donor"
	if g.fromTheGear {
		from, to = to, from
	}
	fmt.Fprintf(&b, "F1 = { part = \"CX\", length = \"%d mm\", from = %q, to = %q, ends = [\"NC\", \"NC\"] }\n", g.feed, from, to)
	fmt.Fprintf(&b, "L0 = { part = \"CX\", length = \"%d mm\", from = \"amp.server\", to = \"split.in\", ends = [\"NC\", \"NC\"] }\n", g.leg)
	for i := range g.servers {
		fmt.Fprintf(&b, "L%d = { part = \"CX\", length = \"%d mm\", from = \"split.out%d\", to = \"server%d\", ends = [\"NC\", \"NC\"] }\n", i+1, 1000*(i+1), i+1, i+1)
	}
	for i := range g.servers {
		fmt.Fprintf(&b, "[device.server%d]\npart = \"SERVER\"\nplace = \"roof\"\n", i+1)
	}
	for i, rsrp := range g.signals {
		fmt.Fprintf(&b, "[[signal]]\noperator = \"north\"\nband = \"B5\"\nmhz = %d\nwidth_mhz = 5\nrsrp_dbm = %g\n", 872+5*i, rsrp)
	}
	fmt.Fprintf(&b, "[[reading]]\nwhat = \"isolation\"\nvalue_db = %g\n", g.isolation)
	return b.String()
}

// chain works the rig out. Nothing of it may lack anything.
func (g rig) chain(t *testing.T) *rules.BandChain {
	t.Helper()
	tree := memory{files: map[string]string{
		"driploop.toml":    "[workspace]\nname = \"Rig\"\nprofile = \"us-fixed-wideband\"\ncurrency = \"USD\"\n",
		"catalog/rig.toml": g.catalog(), "plans/rig.toml": g.plan(),
	}}
	firm := loadFirm(t, tree)
	c, broken := firm.Case(firm.PlanFiles[0])
	if broken || len(c.Problems) > 0 || len(c.Graph.Holes) > 0 {
		t.Fatalf("%+v: problems %v, holes %v", g, c.Problems, c.Graph.Holes)
	}
	bands := c.Chain().Bands
	if len(bands) != 1 || !bands[0].Up.Runs.OK || !bands[0].Down.Runs.OK || len(bands[0].Up.Antennas) != 1 || len(bands[0].Down.Antennas) != g.servers {
		t.Fatalf("%+v: the chain is not whole", g)
	}
	return bands[0]
}

// tryEach draws rigs and looks at each beside one that is changed.
func tryEach(t *testing.T, change func(*rig), look func(t *testing.T, g rig, before, after *rules.BandChain)) {
	r := rand.New(rand.NewPCG(3, 1))
	for range draws {
		g := draw(r)
		before := g.chain(t)
		changed := g
		changed.signals = append([]float64(nil), g.signals...)
		change(&changed)
		look(t, g, before, changed.chain(t))
		if t.Failed() {
			return
		}
	}
}

func above(a, b float64) bool { return a > b+1e-9 }

func TestLongerFeedNeverRaisesEIRP(t *testing.T) {
	tryEach(t, func(g *rig) { g.feed += 1000 }, func(t *testing.T, g rig, before, after *rules.BandChain) {
		a, b := before.Up.Antennas[0].Worst.EIRP, after.Up.Antennas[0].Worst.EIRP
		if !above(a.Most.Value(), b.Most.Value()) || !above(a.Least.Value(), b.Least.Value()) {
			t.Errorf("%+v: %v became %v with 1 m more", g, a, b)
		}
		if above(after.RSSI.V.Value(), before.RSSI.V.Value()) {
			t.Errorf("%+v: RSSI rose from %v to %v", g, before.RSSI.V, after.RSSI.V)
		}
	})
}

func TestWorstEdgeIsNeverBetterThanTheMiddle(t *testing.T) {
	tryEach(t, func(*rig) {}, func(t *testing.T, g rig, x, _ *rules.BandChain) {
		for _, a := range append(x.Up.Antennas, x.Down.Antennas...) {
			if above(a.Mid.EIRP.Most.Value(), a.Worst.EIRP.Most.Value()) {
				t.Errorf("%+v: %v at the middle, %v at the worst, %v", g, a.Mid.EIRP.Most, a.Worst.EIRP.Most, a.Worst.MHz)
			}
		}
	})
}

func TestAnotherSignalNeverRaisesWhatRuns(t *testing.T) {
	tryEach(t, func(g *rig) { g.signals = append(g.signals, -60) }, func(t *testing.T, g rig, before, after *rules.BandChain) {
		if !above(after.RSSI.V.Value(), before.RSSI.V.Value()) {
			t.Errorf("%+v: RSSI %v is no more than %v before", g, after.RSSI.V, before.RSSI.V)
		}
		for i, d := range []rules.Direction{after.Up, after.Down} {
			was := []rules.Direction{before.Up, before.Down}[i]
			if above(float64(d.Runs.V.Gain), float64(was.Runs.V.Gain)) {
				t.Errorf("%+v: %s ran at %v and runs at %v", g, d.Name, was.Runs.V.Gain, d.Runs.V.Gain)
			}
		}
	})
}

func TestAnotherServerNeverLoosensALimit(t *testing.T) {
	tryEach(t, func(g *rig) { g.servers = min(3, g.servers+1) }, func(t *testing.T, g rig, before, after *rules.BandChain) {
		if above(float64(after.MSCL.V), float64(before.MSCL.V)) {
			t.Errorf("%+v: MSCL rose from %v to %v", g, before.MSCL.V, after.MSCL.V)
		}
	})
}

func TestBackOffNeverRaisesWhatRuns(t *testing.T) {
	tryEach(t, func(g *rig) { g.backOff += 1.5 }, func(t *testing.T, g rig, before, after *rules.BandChain) {
		if above(float64(after.Up.Runs.V.Gain), float64(before.Up.Runs.V.Gain)) || above(float64(after.Down.Runs.V.Gain), float64(before.Down.Runs.V.Gain)) {
			t.Errorf("%+v: set back by more, and it runs at more", g)
		}
	})
}

// A feed is the same line whichever end the plan writes first.
func TestDirectionOfWritingDoesNotMatter(t *testing.T) {
	tryEach(t, func(g *rig) { g.fromTheGear = true }, func(t *testing.T, g rig, before, after *rules.BandChain) {
		a, b := before.Up.Antennas[0].Worst, after.Up.Antennas[0].Worst
		if math.Abs(float64(a.Line.Loss.Greatest-b.Line.Loss.Greatest)) > 1e-9 || math.Abs(a.EIRP.Most.Value()-b.EIRP.Most.Value()) > 1e-9 {
			t.Errorf("%+v: %v and %v", g, a.Line.Loss, b.Line.Loss)
		}
	})
}

func TestSumsAreTheSumOfTheirTerms(t *testing.T) {
	tryEach(t, func(*rig) {}, func(t *testing.T, g rig, x, _ *rules.BandChain) {
		for _, a := range append(x.Up.Antennas, x.Down.Antennas...) {
			s := a.Worst.Line
			var least, nominal, greatest unit.DB
			for _, term := range s.Terms() {
				least, nominal, greatest = least+term.Loss.Least, nominal+term.Loss.Nominal, greatest+term.Loss.Greatest
			}
			if math.Abs(float64(least-s.Loss.Least))+math.Abs(float64(nominal-s.Loss.Nominal))+math.Abs(float64(greatest-s.Loss.Greatest)) > 1e-9 {
				t.Errorf("%+v: terms come to %v, %v, %v; the sum is %v", g, least, nominal, greatest, s.Loss)
			}
			if !(s.Loss.Least <= s.Loss.Nominal+1e-9 && s.Loss.Nominal <= s.Loss.Greatest+1e-9) {
				t.Errorf("%+v: %v is out of order", g, s.Loss)
			}
		}
	})
}

// The composite level by powers in milliwatts, the coupling loss by the constant of
// metres and MHz, and the EIRP by hand, all from the figures of the rig.
func TestChainAgainstASecondSum(t *testing.T) {
	const pairs = 2
	tryEach(t, func(g *rig) { g.steps = 0 }, func(t *testing.T, g rig, _, x *rules.BandChain) {
		cable := func(f, metres, celsius float64) float64 {
			return (g.k1*math.Sqrt(f) + g.k2*f) * metres / 100 * (1 + 0.002*(celsius-20))
		}
		pair := func(f float64) float64 { return 0.05 * math.Sqrt(f/1000) }
		feed := func(f float64) float64 {
			return cable(f, float64(g.feed)/1000, float64(g.cold)) + pairs*pair(f)
		}
		mw := 0.0
		for i, rsrp := range g.signals {
			f := float64(872 + 5*i)
			mw += math.Pow(10, (rsrp+g.high-feed(f))/10) * 12 * 25 * g.share(i)
		}
		near(t, g, "RSSI", x.RSSI.V.Value(), 10*math.Log10(mw))
		leg := cable(836.5, float64(g.leg)/1000+1, float64(g.cold)) + 5.2 + 2*pairs*pair(836.5)
		near(t, g, "MSCL", float64(x.MSCL.V), 20*math.Log10(836.5)+20*math.Log10(2)-27.552216+3-g.server+leg)
		most := math.Inf(-1)
		for _, p := range []struct{ f, gain float64 }{{824, g.low}, {836.5, g.high}, {849, g.high}} {
			most = max(most, g.out+p.gain-feed(p.f))
		}
		near(t, g, "EIRP", x.Up.Antennas[0].Worst.EIRP.Most.Value(), most)
	})
}

// share is how much of a signal lies in the downlink of B5, which begins at 869 MHz.
func (g rig) share(i int) float64 { return min(1, (float64(872+5*i)+2.5-869)/5) }

func near(t *testing.T, g rig, what string, got, expected float64) {
	t.Helper()
	if !(math.Abs(got-expected) < 1e-4) {
		t.Errorf("%+v: %s is %.6f, by the second sum %.6f", g, what, got, expected)
	}
}
