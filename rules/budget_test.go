package rules_test

import (
	"math"
	"strings"
	"testing"

	"driploop/rules"
)

// band finds one direction of a band in a budget.
func band(t *testing.T, b *rules.Budget, name, direction string) *rules.BudgetBand {
	t.Helper()
	for _, x := range b.Bands {
		if x.Band == name && x.Direction == direction {
			return x
		}
	}
	t.Fatalf("there is no %s %s", name, direction)
	return nil
}

// Stage by stage from the first antenna's port, with losses of 2 dB on each side of
// 60 dB and a noise figure of 5.
func TestStagesOfABudget(t *testing.T) {
	b := planCase(t, chainPlan(fixedWideband, heard("-99")+apart("90")), "shop").Budget()
	type stage struct {
		at                     string
		gain, total, nf, level float64
		held                   bool
	}
	for direction, want := range map[string][]stage{
		// −99 dBm + 27.78 + 10 dBi at the donor antenna's port.
		"downlink": {{"feed", -2, -2, 2, -63.218, false}, {"amp", 60, 58, 7, -3.218, false}, {"leg", -2, 56, 7, -5.218, false}},
		// 23 dBm − 36.92 − 3 + 3 dBi at the dome's port; 20 dBm are rated.
		"uplink": {{"leg", -2, -2, 2, -15.918, false}, {"amp", 60, 58, 7, 20, true}, {"feed", -2, 56, 7, 18, false}},
	} {
		x := band(t, b, "B5", direction)
		if len(x.Chains) != 1 || len(x.Chains[0].Stages) != len(want) {
			t.Fatalf("%s: chains %+v", direction, x.Chains)
		}
		for i, s := range x.Chains[0].Stages {
			w := want[i]
			got := stage{s.At, float64(s.Gain), float64(s.Total), float64(s.NF), s.Level.Value(), s.Held}
			if got.at != w.at || got.held != w.held || !nearly(got.gain, w.gain, 1e-9) || !nearly(got.total, w.total, 1e-9) || !nearly(got.nf, w.nf, 0.001) || !nearly(got.level, w.level, 0.001) {
				t.Errorf("%s stage %d: %+v, want %+v", direction, i, got, w)
			}
		}
	}
	// Downlink EIRP is what runs, −3.22 − 2 + 3; uplink EIRP the rated 20 − 2 + 10.
	for direction, want := range map[string]float64{"downlink": -2.218, "uplink": 28} {
		if x := band(t, b, "B5", direction); !x.EIRP.OK || !nearly(x.EIRP.V.Value(), want, 0.001) {
			t.Errorf("%s EIRP %+v, want %v dBm", direction, x.EIRP, want)
		}
	}
}

// What is radiated meets the least loss of the line, levels stage by stage the
// greatest: 20 m of cable that lose 2 dB per 20 m at 20 °C, and 10 % less or more in a
// loft, at 881.5 MHz with two pairs of 0.047 dB.
func TestBudgetNamesTwoSums(t *testing.T) {
	text := strings.NewReplacer(`L = { part = "J-2", from = "amp.server", to = "dome" }`,
		`L = { part = "CX", length = "20 m", from = "amp.server", to = "dome", ends = ["N male", "N male"], way = ["loft"] }`,
		"[device]\n", "loft = { kind = \"attic\", coldest = \"-30 C\", hottest = \"70 C\" }\n[device]\n").
		Replace(chainPlan(fixedWideband, heard("-99")+apart("90"))) + `
-- catalog/cx.toml --
[part.CX]
kind             = "cable"
impedance_ohm    = 50
loss_db_per_100m = [[881, 10], [881.5, 10], [882, 10]]
max_mhz          = 6000
`
	x := band(t, planCase(t, text, "shop").Budget(), "B5", "downlink")
	pairs := 2 * 0.05 * math.Sqrt(0.8815)
	if want := -99 + 27.7815 + 8 + 60 + 3 - 1.8 - pairs; !nearly(x.EIRP.V.Value(), want, 0.002) {
		t.Errorf("EIRP that runs %.4f dBm, want %.4f", x.EIRP.V.Value(), want)
	}
	if want := 12 + 3 - 1.8 - pairs; !nearly(x.Worst.Mid.EIRP.Most.Value(), want, 0.002) {
		t.Errorf("EIRP at rated output %.4f dBm, want %.4f", x.Worst.Mid.EIRP.Most.Value(), want)
	}
	if last := x.Chains[0].Stages[2]; !nearly(float64(last.Gain), -2.2-pairs, 0.002) {
		t.Errorf("the leg stands with %.4f dB among the stages", float64(last.Gain))
	}
}

// The strongest server's EIRP counts, not the sum over the servers.
func TestEIRPIsTheStrongestServers(t *testing.T) {
	x := band(t, loadCase(t, memory{files: files(t, "../testdata/saltmarsh")}, "quay-lane").Budget(), "B12", "downlink")
	if len(x.Chains) != 3 || x.Worst == nil || x.Worst.Node.Name() != "dome.rf" {
		t.Errorf("%d chains, worst %+v", len(x.Chains), x.Worst)
	}
}

// A router transmits its total power over both ports of an antenna: the EIRP is that
// of one port with all of it.
func TestRouterTotalOverItsPorts(t *testing.T) {
	x := band(t, loadCase(t, memory{files: files(t, "../testdata/saltmarsh")}, "fenmoor-farm").Budget(), "B4", "uplink")
	if len(x.Lines) != 2 || !x.EIRP.OK || x.EIRP.V.Value() > 21+9 {
		t.Errorf("%d lines, EIRP %+v", len(x.Lines), x.EIRP)
	}
}

// What a budget does not know it gives a reason for.
func TestBudgetSaysWhatItLacks(t *testing.T) {
	eachCase(t, "gain-*", func(name string, c *rules.Case) {
		for _, x := range c.Budget().Bands {
			amplifier := x.Device.Part.Amplifier != nil
			if amplifier && !x.Runs.OK && len(x.Runs.Lacks) == 0 {
				t.Errorf("%s: %s %s does not know its gain and lacks nothing", name, x.Band, x.Direction)
			}
			if amplifier && !x.EIRP.OK && len(x.EIRP.Lacks) == 0 {
				t.Errorf("%s: %s %s does not know its EIRP and lacks nothing", name, x.Band, x.Direction)
			}
			for _, ch := range x.Chains {
				if len(ch.Stages) == 0 == (len(ch.Lacks) == 0) {
					t.Errorf("%s: %s %s from %s has %d stages and lacks %v", name, x.Band, x.Direction, ch.From, len(ch.Stages), ch.Lacks)
				}
			}
			for _, l := range x.Limits {
				known := l.Value.OK && l.Limit.OK && len(l.Limit.Lacks) == 0
				if l.Outcome == "holds" && !known {
					t.Errorf("%s: %s of %s %s holds and is not known whole", name, l.Rule, x.Band, x.Direction)
				}
			}
		}
	})
}
