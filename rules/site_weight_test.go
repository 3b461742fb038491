package rules_test

import (
	"path/filepath"
	"strings"
	"testing"
)

// The cases say what the rules about amplifiers, areas and people report; this says
// what it weighs, above all where a false hold would make a crew switch the tool off.
func TestWeightsOfGainReachAndExposure(t *testing.T) {
	for _, c := range []struct{ rule, file, plan, outcome, weight string }{
		// What an amplifier keeps by itself is no hold.
		{"gain/input", "bad", "near", "fails", "hold"},
		{"gain/input", "bad-turns-itself-down", "near", "fails", "punch"},
		{"gain/input", "boundary-nr", "doubtful", "at-worst", "punch"},
		{"gain/input", "missing", "no-survey", "unknown", "punch"},
		{"gain/isolation", "bad", "computed", "fails", "hold"},
		{"gain/isolation", "bad-turns-itself-down", "computed", "fails", "punch"},
		{"gain/isolation", "boundary-computed", "doubtful", "at-worst", "punch"},
		{"gain/noise", "bad", "five", "fails", "punch"},
		{"gain/noise", "bad-received-level", "keeps", "advice", "note"},
		{"gain/noise", "bad-near-site", "near", "fails", "punch"},
		{"gain/system", "bad", "near", "fails", "hold"},
		// What only turns reception down is put right before handover, what burns
		// the amplifier holds.
		{"gain/overload", "bad", "strong", "fails", "punch"},
		{"gain/overload", "bad", "damage", "fails", "hold"},
		{"gain/overload", "boundary", "outside", "fails", "punch"},
		{"gain/overload", "missing", "no-figure", "unknown", "note"},
		{"gain/phone-close", "bad", "counter", "fails", "punch"},
		{"gain/phone-close", "bad", "damage", "fails", "hold"},
		{"gain/radio-eirp", "bad", "farm", "fails", "hold"},
		{"gain/radio-eirp", "missing", "no-grant", "unknown", "punch"},
		// Every certified kit would break the level with the reflection of a roof.
		{"exposure/density", "bad", "desk", "fails", "hold"},
		{"exposure/density", "bad-reflected", "roof", "fails", "punch"},
		{"exposure/density", "missing", "near-field", "unknown", "punch"},
		{"exposure/distance", "bad", "panel", "fails", "hold"},
		{"reach/downlink", "bad", "shop", "fails", "punch"},
		{"reach/downlink", "missing", "no-survey", "unknown", "note"},
		{"reach/uplink", "bad", "shop", "fails", "punch"},
		{"reach/benefit", "bad", "short", "fails", "punch"},
		{"reach/near-far", "bad", "shop", "fails", "punch"},
		{"reach/quality", "bad", "survey", "fails", "punch"},
		{"reach/dominance", "bad", "window", "fails", "note"},
	} {
		t.Run(c.rule+"/"+c.file+"/"+c.plan, func(t *testing.T) {
			found := false
			for _, f := range caseFindings(t, c.rule, c.file) {
				if strings.TrimSuffix(filepath.Base(f.At.Path()), ".toml") != c.plan {
					continue
				}
				found = true
				if f.Outcome.String() != c.outcome || f.Weight.String() != c.weight {
					t.Errorf("%s weighs %s, want %s %s: %s", f.Outcome, f.Weight, c.outcome, c.weight, f.Says)
				}
			}
			if !found {
				t.Error("nothing is said")
			}
		})
	}
}

// Grave figures that are not assessed hold work up from construction on.
func TestUnassessedLimitsHoldConstruction(t *testing.T) {
	text := `
-- plans/roof.toml --
[job]
bands   = ["B12"]
stage   = "construction"
profile = "us-fixed-wideband"
[place]
roof = { kind = "outdoor", at = [0, 0, 6] }
room = { kind = "indoor", at = [0, 9, 2] }
[device]
donor = { part = "GEN-ANT-LP-10", place = "roof" }
amp   = { part = "GEN-AMP-W5-FIX", place = "room" }
dome  = { part = "GEN-ANT-DOME-3", place = "room" }
[cable]
C1 = { part = "GEN-CX-10", length = "9 m", from = "donor", to = "amp.donor" }
C2 = { part = "GEN-CX-10", length = "9 m", from = "amp.server", to = "dome" }
`
	for rule, want := range map[string]string{
		"gain/input": "hold", "gain/isolation": "hold", "gain/noise": "hold", "exposure/density": "hold", "exposure/distance": "hold",
		"gain/overload": "note", "gain/phone-close": "note",
	} {
		fs := inspectText(t, rule, text)
		if len(fs) == 0 {
			t.Errorf("%s says nothing of a plan without survey, people and shell", rule)
		}
		for _, f := range fs {
			if f.Outcome.String() != "unknown" || f.Weight.String() != want {
				t.Errorf("%s: %s weighs %s, want %s: %s", rule, f.Outcome, f.Weight, want, f.Says)
			}
		}
	}
}

// One thing that is missing is one matter: all that lacks the survey lacks it in the
// same words, so that outputs can show it together.
func TestOneMissingThingIsLackedInOneWord(t *testing.T) {
	words := map[string]bool{}
	for _, rule := range []string{"gain/input", "gain/overload", "gain/noise", "reach/downlink"} {
		for _, f := range inspectText(t, rule, `
-- plans/shop.toml --
[job]
bands   = ["B12", "B5"]
profile = "us-fixed-wideband"
[place]
roof = { kind = "outdoor", at = [0, 0, 6] }
room = { kind = "indoor", at = [0, 9, 2] }
[device]
donor = { part = "GEN-ANT-LP-10", place = "roof", people = "3 m" }
amp   = { part = "GEN-AMP-W5-FIX", place = "room" }
dome  = { part = "GEN-ANT-DOME-3", place = "room", people = "2 m" }
[cable]
C1 = { part = "GEN-CX-10", length = "9 m", from = "donor", to = "amp.donor" }
C2 = { part = "GEN-CX-10", length = "9 m", from = "amp.server", to = "dome" }
[[area]]
name            = "counter"
distance        = "7 m"
target_rsrp_dbm = -95
[[reading]]
what     = "isolation"
value_db = 90
`) {
			if f.Lacks == "" || f.Of == "" {
				t.Errorf("%s does not say in a word what it lacks: %s", rule, f.Says)
			}
			words[f.Lacks] = true
		}
	}
	if len(words) != 1 || !words["a survey ([[signal]])"] {
		t.Errorf("one missing survey is lacked as %v", words)
	}
}
