package rules_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"driploop/rules"
	"driploop/rules/rf"
)

// runsBench is a chain in B5 with round figures: 10 dBi and 2 dB ahead of the
// amplifier, one LTE channel of 10 MHz at −85 dBm, so −49.2185 dBm at the donor
// port, and MSCL 36.9177 + 3 − (3 − 2) = 38.9177 dB.
const runsBench = `
[job]
bands = ["B5"]
[device]
donor = { part = "ANT-10" }
dome  = { part = "DOME-3" }
[device.amp]
part = "AMP"
set  = { B5 = { back_off_db = BACKOFF } }
[cable]
F1 = { part = "J2", from = "donor", to = "amp.donor" }
L1 = { part = "J2", from = "amp.server", to = "dome" }
[[signal]]
operator  = "north"
band      = "B5"
WIDTH
rsrp_dbm  = -85
`

// runsOf works the bench out: with a gain of 70 dB up and down, a rated output of 10
// dBm down, an amplifier that may have more keys, and readings.
func runsOf(t *testing.T, pairs ...string) *rules.BandChain {
	t.Helper()
	parts := bench[strings.Index(bench, "[part.ANT-10]"):strings.Index(bench, "-- plans/")]
	parts = strings.NewReplacer("GAIN", "70", "OUT", "20", "KIT", "", "gain_db = 60", "gain_db = 70").Replace(parts)
	plan := runsBench
	for i := 0; i < len(pairs); i += 2 {
		switch pairs[i] {
		case "plan":
			plan += pairs[i+1]
		case "amp":
			parts = strings.Replace(parts, "step_db  = 1\n", pairs[i+1]+"\n", 1)
		default:
			plan, parts = strings.ReplaceAll(plan, pairs[i], pairs[i+1]), strings.ReplaceAll(parts, pairs[i], pairs[i+1])
		}
	}
	plan = strings.NewReplacer("BACKOFF", "0", "WIDTH", "width_mhz = 10").Replace(plan)
	firm := loadFirm(t, memory{files: map[string]string{
		"driploop.toml": "[workspace]\nname = \"Bench\"\nprofile = \"us-fixed-wideband\"\ncurrency = \"USD\"\n", "catalog/bench.toml": parts, "plans/bench.toml": plan,
	}})
	for _, p := range firm.Problems {
		t.Fatalf("the bench has a problem: %s", p.Says)
	}
	c, _ := firm.Case(firm.PlanFiles[0])
	if len(c.Problems) > 0 || len(c.Chain().Bands) != 1 {
		t.Fatalf("the bench has problems: %v", c.Problems)
	}
	return c.Chain().Bands[0]
}

func isolated(db float64, more string) string {
	return fmt.Sprintf("[[reading]]\nwhat = \"isolation\"\nvalue_db = %g\n%s\n", db, more)
}

func TestWhatBindsTheGain(t *testing.T) {
	const protected = "network_protection = true"
	for _, c := range []struct {
		name     string
		pairs    []string
		up, down float64
		byUp, by rf.Bound
	}{
		// 10 + 49.2185 = 59.2185 dB down; the uplink has no input to be short of.
		{"output", []string{"plan", isolated(100, "")}, 70, 59.2185, rf.BySet, rf.ByOutput},
		{"set", []string{"plan", isolated(100, ""), "BACKOFF", "12"}, 58, 58, rf.BySet, rf.BySet},
		// 65 − 15 = 50 dB, though nothing says that the amplifier sees to it itself.
		{"isolation", []string{"plan", isolated(65, "")}, 50, 50, rf.ByIsolation, rf.ByIsolation},
		// −34 + 49.2185 + 38.9177 = 54.1362 dB, uplink only.
		{"protection", []string{"plan", isolated(100, ""), "amp", protected}, 54.1362, 59.2185, rf.ByProtection, rf.ByOutput},
		// A back-off of 15.8638 dB in steps of 2 is 16.
		{"steps", []string{"plan", isolated(100, ""), "amp", protected + "\nstep_db = 2"}, 54, 58, rf.ByProtection, rf.ByOutput},
	} {
		t.Run(c.name, func(t *testing.T) {
			pairs := c.pairs
			if !strings.Contains(strings.Join(pairs, " "), "step_db") && !strings.Contains(strings.Join(pairs, " "), "protection") {
				pairs = append(pairs, "amp", "")
			}
			x := runsOf(t, pairs...)
			for _, d := range []struct {
				rules.Direction
				gain float64
				by   rf.Bound
			}{{x.Up, c.up, c.byUp}, {x.Down, c.down, c.by}} {
				if !d.Runs.OK || !d.Runs.V.On || math.Abs(float64(d.Runs.V.Gain)-d.gain) > 1e-3 || d.Runs.V.By != d.by {
					t.Errorf("%s runs at %v by %s (known %v, lacks %v), expected %v by %s", d.Name, d.Runs.V.Gain, d.Runs.V.By, d.Runs.OK, d.Runs.Lacks, d.gain, d.by)
				}
			}
		})
	}
}

func TestBandThatIsOff(t *testing.T) {
	for name, pairs := range map[string][]string{
		"isolation below its margin":   {"plan", isolated(10, "")},
		"set back by more than it has": {"plan", isolated(100, ""), "BACKOFF", "75"},
	} {
		x := runsOf(t, pairs...)
		for _, d := range []rules.Direction{x.Up, x.Down} {
			if !d.Runs.OK || d.Runs.V.On {
				t.Errorf("%s: %s runs at %v (known %v), expected off", name, d.Name, d.Runs.V.Gain, d.Runs.OK)
			}
		}
	}
}

// What is missing leaves the gain that runs open; it is not the set gain then.
func TestWhatRunsNeedsEveryCeiling(t *testing.T) {
	for _, c := range []struct {
		name     string
		pairs    []string
		lacks    string
		up, down bool // known
	}{
		{"no survey width", []string{"plan", isolated(100, ""), "WIDTH", ""}, "width_mhz of the signal of north in B5", true, false},
		{"no output", []string{"plan", isolated(100, ""), ", max_out_dbm = 10", ""}, "max_out_dbm of AMP", true, false},
		{"no isolation", nil, "a position (at) of donor or of its place", false, false},
		{"a profile of another class", []string{"plan", isolated(100, ""), "amp", "network_protection = true", `"wideband"`, `"industrial"`}, "a limit profile that is made for amp", false, false},
		{"no downlink gain", []string{"plan", isolated(100, ""), "downlink = { gain_db = 70, ", "downlink = { "}, "gain_db of AMP", true, false},
	} {
		t.Run(c.name, func(t *testing.T) {
			x := runsOf(t, c.pairs...)
			if x.Up.Runs.OK != c.up || x.Down.Runs.OK != c.down {
				t.Errorf("uplink known %v, downlink %v", x.Up.Runs.OK, x.Down.Runs.OK)
			}
			found := false
			for _, l := range x.Down.Runs.Lacks {
				found = found || l.What == c.lacks
			}
			if !found {
				t.Errorf("it lacks %v, expected %s", x.Down.Runs.Lacks, c.lacks)
			}
		})
	}
}

// The newest reading of the latest stage, the band's own before one for all.
func TestWhichIsolationCounts(t *testing.T) {
	const survey, built = `stage = "survey"`, `stage = "as-built"`
	for _, c := range []struct {
		name     string
		readings string
		expect   float64
	}{
		{"newest", isolated(70, survey+"\non = 2026-10-01") + isolated(80, survey+"\non = 2026-11-01") + isolated(90, survey+"\non = 2026-09-01"), 80},
		{"as built before newer survey", isolated(70, built+"\non = 2026-10-01") + isolated(80, survey+"\non = 2026-11-01"), 70},
		{"of the band before all", isolated(70, "band = \"B5\"\non = 2026-10-01") + isolated(80, "on = 2026-10-01"), 70},
		{"not of another band", isolated(70, "band = \"B2\"\non = 2026-11-01") + isolated(80, "on = 2026-10-01"), 80},
		{"not of another amplifier", isolated(70, "from = \"other.server\"\nto = \"other.donor\"\non = 2026-11-01") + isolated(80, "on = 2026-10-01"), 80},
	} {
		x := runsOf(t, "plan", c.readings)
		if !x.Apart.OK || float64(x.Apart.V) != c.expect || x.Apart.Reading == nil {
			t.Errorf("%s: %v (known %v), expected %v", c.name, x.Apart.V, x.Apart.OK, c.expect)
		}
	}
}
