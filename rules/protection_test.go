package rules_test

import (
	"slices"
	"strings"
	"testing"

	"driploop/rules/rf"
)

// A ceiling that is not known leaves the gain not known, however low the others are:
// it could be lower.
func TestGainThatIsNotKnown(t *testing.T) {
	protects := fixedWideband + "network_protection = true\n"
	rows := `
-- profiles/rows.toml --
[profile.two-rows]
title      = "One row that is known, one that needs a class"
instrument = "house"
edition    = "1"
[[profile.two-rows.limit]]
kind   = "gain"
c0     = 40
kr     = 0
km     = 0.1
clause = "1"
proof  = "read"
[[profile.two-rows.limit]]
kind   = "gain"
class  = "wideband"
c0     = 10
kr     = -1
clause = "2"
proof  = "read"
`
	withProfile := func(name string) string {
		return strings.Replace(chainPlan(protects, heard("-99")+apart("90")), "[job]\n", "[job]\nprofile = \""+name+"\"\n", 1)
	}
	for _, c := range []struct{ name, text, lacks string }{
		{"no reading and no shell", chainPlan(fixedWideband, heard("-99")), "shell_db of the site, or the loss between roof and room"},
		{"no survey", chainPlan(fixedWideband, apart("30")), "a survey ([[signal]])"},
		{"no profile to protect by", "-- driploop.toml --\n[workspace]\nname = \"Case Workshop\"\n" + chainPlan(protects, heard("-99")+apart("90")), "a limit profile (profile = …)"},
		{"a profile for another class", withProfile("us-fixed-provider"), "a limit profile that is made for amp"},
		{"a row that may be lower", strings.Replace(withProfile("two-rows")+rows, "class = \"wideband\"\n", "", 1), "class of AMP-A"},
	} {
		t.Run(c.name, func(t *testing.T) {
			k := planCase(t, c.text, "shop").Chain().Bands[0].Down.Runs
			var lacks []string
			for _, l := range k.Lacks {
				lacks = append(lacks, l.What)
			}
			if k.OK || !slices.Contains(lacks, c.lacks) {
				t.Errorf("runs %+v, lacks %q, want it to lack %q", k.V, lacks, c.lacks)
			}
		})
	}
}

// Phones in a cradle have no antenna that the donor antenna could hear: nothing is
// lacking, and isolation binds nothing.
func TestCradleNeedsNoIsolation(t *testing.T) {
	text := strings.NewReplacer("L = { part = \"J-2\", from = \"amp.server\", to = \"dome\" }\n", "", "dome  = { part = \"ANT-S\", place = \"room\" }\n", "").
		Replace(chainPlan(fixedWideband+"coupling = [\"cradle\"]\ncoupling_db = 20\n", heard("-99")))
	k := planCase(t, text, "shop").Chain().Bands[0].Up.Runs
	if !k.OK || k.V.By != rf.BySet || k.V.Gain != 60 {
		t.Errorf("runs %+v, lacks %v", k.V, k.Lacks)
	}
}
