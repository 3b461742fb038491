package rules_test

import (
	"strings"
	"testing"

	"driploop/rules"
)

// only is the one finding of a rule on a text archive.
func only(t *testing.T, rule, text string) *rules.Finding {
	t.Helper()
	found := inspectText(t, rule, text)
	if len(found) != 1 {
		t.Fatalf("%s has %d findings, one is expected: %v", rule, len(found), found)
	}
	return found[0]
}

// bench is a plan on round figures, with some of them left open.
const bench = `
-- catalog/bench.toml --
[part.ANT-10]
kind   = "antenna"
fixing = "mast"
port   = { rf = { connector = "N female", impedance_ohm = 50 } }
range  = [{ mhz = [600, 2700], gain_dbi = 10 }]
[part.ANT-8]
kind   = "antenna"
fixing = "mast"
port   = { rf = { connector = "N female", impedance_ohm = 50 } }
range  = [{ mhz = [600, 2700], gain_dbi = 8 }]
[part.ANT-7]
kind   = "antenna"
fixing = "mast"
port   = { rf = { connector = "N female", impedance_ohm = 50 } }
range  = [{ mhz = [600, 2700], gain_dbi = 7 }]
[part.DOME-3]
kind   = "antenna"
fixing = "ceiling"
port   = { rf = { connector = "N female", impedance_ohm = 50 } }
range  = [{ mhz = [600, 2700], gain_dbi = 3 }]
[part.J2]
kind    = "jumper"
length  = "5 m"
ends    = ["N male", "N male"]
loss_db = 2
[part.AMP]
kind     = "amplifier"
class    = "wideband"
mobility = "fixed"
step_db  = 1
port     = { donor = { connector = "N female", impedance_ohm = 50, side = "donor" }, server = { connector = "N female", impedance_ohm = 50, side = "server" } }
band     = [{ band = "B5", uplink = { gain_db = GAIN, max_out_dbm = OUT }, downlink = { gain_db = 60, max_out_dbm = 10 } }]
KIT
-- plans/bench.toml --
[job]
stage = "STAGE"
bands = ["B5"]
[device]
donor = { part = "ANT-10" }
amp   = { part = "AMP" }
dome  = { part = "DOME-3" }
[cable]
F1 = { part = "J2", from = "donor", to = "amp.donor" }
L1 = { part = "J2", from = "amp.server", to = "dome" }
`

// benchOf fills the bench in; what is not named is harmless.
func benchOf(pairs ...string) string {
	text := strings.NewReplacer(pairs...).Replace(bench)
	return strings.NewReplacer("GAIN", "60", "OUT", "20", "KIT", "", "STAGE", "review").Replace(text)
}

func TestWeightsOfGain(t *testing.T) {
	for _, c := range []struct {
		name, rule, text string
		weight           rules.Weight
	}{
		{"beyond", "gain/uplink-eirp", benchOf("OUT", "24"), rules.Hold},
		{"beyond within tolerance", "gain/uplink-eirp", benchOf("OUT", "22"), rules.Punch},
		{"beyond within tolerance, construction", "gain/uplink-eirp", benchOf("OUT", "22", "STAGE", "construction"), rules.Punch},
		{"unknown", "gain/uplink-power", benchOf(", max_out_dbm = OUT", ""), rules.Punch},
		{"unknown, construction", "gain/uplink-power", benchOf(", max_out_dbm = OUT", "", "STAGE", "construction"), rules.Hold},
		{"unknown, as built", "gain/uplink-power", benchOf(", max_out_dbm = OUT", "", "STAGE", "as-built"), rules.Hold},
		{"too much gain, draft", "gain/amplifier", benchOf("GAIN", "70", "STAGE", "draft"), rules.Hold},
		{"lossy feed", "loss/cable", strings.ReplaceAll(benchOf(), `part = "J2", from = "donor"`, `part = "GEN-CX-5", length = "60 m", from = "donor"`), rules.Punch},
		{"no length, construction", "loss/cable", strings.ReplaceAll(benchOf("STAGE", "construction"), `part = "J2", from = "donor"`, `part = "GEN-CX-5", from = "donor"`), rules.Note},
	} {
		t.Run(c.name, func(t *testing.T) {
			if f := only(t, c.rule, c.text); f.Weight != c.weight {
				t.Errorf("it weighs %s, expected %s: %s", f.Weight, c.weight, f.Says)
			}
		})
	}
}

// What a finding proposes must do: the figures are those of the finding.
func TestGainFindingsProposeWhatWouldDo(t *testing.T) {
	for _, c := range []struct{ name, rule, text, do string }{
		// 24 + 10 − 2 = 32: 2 dB too much, and 8 dBi would just do.
		{"smaller antenna", "gain/uplink-eirp", benchOf("OUT", "24"), "take an antenna with less gain such as ANT-8 (none on hand), or put 2.0 dB more loss into the line"},
		// 24.01 + 10 − 2 = 32.01: 8 dBi would not do.
		{"a smaller one", "gain/uplink-eirp", benchOf("OUT", "24.01"), "such as ANT-7 (none on hand), or put 2.1 dB more loss into the line"},
		{"one of the kit", "gain/uplink-eirp", benchOf("OUT", "24", "KIT", `kit = [{ side = "donor", antenna = "ANT-10" }, { side = "donor", antenna = "ANT-7" }]`), "such as ANT-7 (none on hand)"},
		{"in the weather", "gain/uplink-eirp", strings.NewReplacer("[part.ANT-10]\n", "[part.ANT-10]\nrated  = [\"outdoor\"]\n", "[part.ANT-7]\n", "[part.ANT-7]\nrated  = [\"outdoor\"]\n").Replace(benchOf("OUT", "24")), "such as ANT-7 (none on hand)"},
		{"none held alike", "gain/uplink-eirp", strings.Replace(benchOf("OUT", "24"), `fixing = "mast"`, "", 1), "take an antenna with 2.0 dB less gain"},
		{"none", "gain/uplink-eirp", benchOf("OUT", "30"), "take an antenna with 8.0 dB less gain, or put 8.0 dB more loss into the line"},
		// 70 − 64.95 = 5.05 dB, in steps of 1 dB.
		{"back-off in steps", "gain/amplifier", benchOf("GAIN", "70"), "set it back: set = { B5 = { back_off_db = 6 } }"},
	} {
		t.Run(c.name, func(t *testing.T) {
			if f := only(t, c.rule, c.text); !strings.Contains(f.Do, c.do) {
				t.Errorf("it proposes %q, expected %q", f.Do, c.do)
			}
		})
	}
}

// A waiver accepts the first figure of a finding, up to a value.
func TestGainFindingsAreAcceptedByTheirFigure(t *testing.T) {
	waive := `
[[waive]]
rule    = "RULE"
up_to   = LIMIT
because = "measured with the operator"
by      = "site lead"
until   = 2027-06-30
`
	for _, c := range []struct {
		rule, text, limit string
		waived            bool
	}{
		{"gain/uplink-eirp", benchOf("OUT", "24"), "32", true},
		{"gain/uplink-eirp", benchOf("OUT", "24"), "31.99", false},
		{"gain/uplink-power", benchOf("OUT", "31"), "31", true},
		{"gain/amplifier", benchOf("GAIN", "70"), "70", true},
		{"gain/amplifier", benchOf("GAIN", "70"), "69.9", false},
		{"gain/kit", benchOf("KIT", `kit = [{ side = "donor", antenna = "ANT-10", least_loss_db = 3 }, { side = "server", max_gain_dbi = 3 }]`), "2", true},
		{"gain/kit", benchOf("KIT", `kit = [{ side = "donor", antenna = "ANT-10", least_loss_db = 3 }, { side = "server", max_gain_dbi = 3 }]`), "2.1", false},
		{"gain/kit", benchOf("KIT", `kit = [{ side = "donor", max_gain_dbi = 9 }, { side = "server", max_gain_dbi = 3 }]`), "10", true},
		{"gain/kit", benchOf("KIT", `kit = [{ side = "donor", max_gain_dbi = 9 }, { side = "server", max_gain_dbi = 3 }]`), "9.5", false},
	} {
		f := only(t, c.rule, c.text+strings.NewReplacer("RULE", c.rule, "LIMIT", c.limit).Replace(waive))
		if (f.Waived != nil) != c.waived {
			t.Errorf("%s up to %s: waived %v, expected %v: %s", c.rule, c.limit, f.Waived != nil, c.waived, f.Says)
		}
	}
}
