package rules_test

import (
	"math"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/source"
	"driploop/rules"
)

// planCase is the case of one plan of a text archive.
func planCase(t *testing.T, text, plan string) *rules.Case {
	t.Helper()
	archive := txtar.Parse([]byte(text))
	tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
	for _, f := range archive.Files {
		tree.files[f.Name] = string(f.Data)
	}
	return loadCase(t, tree, plan)
}

// loadCase is the case of one plan of a tree.
func loadCase(t *testing.T, tree source.Tree, plan string) *rules.Case {
	t.Helper()
	firm, err := rules.Load(tree, rules.Options{Today: today(t, "")})
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range firm.PlanFiles {
		if strings.TrimSuffix(filepath.Base(e.Path), ".toml") != plan {
			continue
		}
		c, broken := firm.Case(e)
		if broken || len(c.Problems) > 0 {
			t.Fatalf("%s cannot be read: %v", e.Path, c.Problems)
		}
		return c
	}
	t.Fatalf("there is no plan %s", plan)
	return nil
}

// chainPlan is an amplifier of 60 dB and 20 dBm up, 12 dBm down, with 10 dBi behind
// 2 dB toward the network and 3 dBi behind 2 dB toward the phones; more keys of the
// amplifier's part, and more of the plan.
func chainPlan(part, plan string) string {
	return `
-- catalog/parts.toml --
[part.AMP-A]
kind  = "amplifier"
` + part + `
port  = { donor = { connector = "N female", impedance_ohm = 50, side = "donor" }, server = { connector = "N female", impedance_ohm = 50, side = "server" } }
band  = [{ band = "B5", uplink = { gain_db = 60, max_out_dbm = 20, nf_db = 5 }, downlink = { gain_db = 60, max_out_dbm = 12, nf_db = 5 } }]
[part.ANT-D]
kind    = "antenna"
size_mm = 200
port.rf = { connector = "N female", impedance_ohm = 50 }
range   = [{ mhz = [600, 2700], gain_dbi = 10 }]
[part.ANT-S]
kind    = "antenna"
size_mm = 200
port.rf = { connector = "N female", impedance_ohm = 50 }
range   = [{ mhz = [600, 2700], gain_dbi = 3 }]
[part.J-2]
kind    = "jumper"
cable   = "GEN-CX-10"
length  = "1 m"
ends    = ["N male", "N male"]
loss_db = 2
-- plans/shop.toml --
[job]
bands = ["B5"]
[place]
roof = { kind = "outdoor", at = [0, 0, 6] }
room = { kind = "indoor", at = [0, 10, 2] }
[device]
donor = { part = "ANT-D", place = "roof" }
amp   = { part = "AMP-A", place = "room" }
dome  = { part = "ANT-S", place = "room" }
[cable]
F = { part = "J-2", from = "donor", to = "amp.donor" }
L = { part = "J-2", from = "amp.server", to = "dome" }
` + plan
}

const fixedWideband = "class = \"wideband\"\nmobility = \"fixed\"\n"

// heard is a 10 MHz channel in the middle of B5 that brings level + 35.78 dB to the
// donor port: 10·log10 600 + 10 dBi − 2 dB.
func heard(rsrp string) string {
	return "[[signal]]\noperator = \"north\"\nband = \"B5\"\nwidth_mhz = 10\nrsrp_dbm = " + rsrp + "\n"
}

func apart(db string) string {
	return "[[reading]]\nwhat = \"isolation\"\nvalue_db = " + db + "\n"
}

func nearly(a, b, tolerance float64) bool { return math.Abs(a-b) <= tolerance }
