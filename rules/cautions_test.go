package rules_test

import (
	"context"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules"
)

// inspected inspects one plan over the workspace of the rule cases.
func inspected(t *testing.T, plan string) *rules.PlanResult {
	t.Helper()
	tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
	tree.files["plans/yard.toml"] = plan
	firm, err := rules.Load(tree, rules.Options{Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res.Plans[0]
}

// topics are the cautions of a result by their first words, without the one that
// every plan gets.
func topics(t *testing.T, res *rules.PlanResult) []string {
	t.Helper()
	var out []string
	for i, text := range res.Cautions {
		topic, _, _ := strings.Cut(text, ":")
		if words := strings.Fields(topic); len(words) > 3 {
			topic = strings.Join(words[:3], " ")
		}
		if topic == "The figures are" {
			if i != len(res.Cautions)-1 {
				t.Error("what every plan gets comes last")
			}
			continue
		}
		out = append(out, topic)
	}
	if len(out) == len(res.Cautions) {
		t.Error("the local code is not deferred to")
	}
	return out
}

func TestWhichPlanPrintsWhichCautions(t *testing.T) {
	const (
		high, ladder, line = "Work at height", "Ladder", "Power lines"
		ground, scope      = "Grounding and bonding", "Article 810 does"
		holes, radio       = "Holes through walls", "Radio"
		supply, structure  = "Supply", "Wind, masts and"
		vehicle, nation    = "Vehicle", "Whether and how"
		permission         = "The operators' permission"
	)
	for name, c := range map[string]struct {
		plan string
		want []string
	}{
		"nothing yet": {"[job]\ntitle = \"Nothing yet\"\n", nil},
		"a router on a desk": {`[place]
desk = { kind = "indoor", at = [0, 0, 9] }
[device]
radio = { part = "GEN-RTR-5G-4", place = "desk" }
`, []string{radio}},
		"a mast just below 6 ft": {`[site]
lightning_system = "none"
[place]
yard = { kind = "outdoor", at = [0, 0, 1.79] }
[device]
mast = { part = "GEN-MAST-42-3", place = "yard", free = "1 m" }
rod  = { existing = true, kind = "electrode", place = "yard" }
[bond]
G1 = { from = "mast", to = "rod", part = "GEN-BC-6-CU", length = "1 m" }
`, []string{line, ground, scope, structure}},
		"a mast at 1.8 m": {`[place]
yard = { kind = "outdoor", at = [0, 0, 1.8] }
[device]
mast = { part = "GEN-MAST-42-3", place = "yard", free = "1 m" }
`, []string{high, ladder, line, ground, scope, structure}},
		"a mast at a height that nobody gives": {`[place]
yard = { kind = "outdoor" }
[device]
mast = { part = "GEN-MAST-42-3", place = "yard", free = "1 m" }
`, []string{high, ladder, line, ground, scope, structure}},
		"an antenna 1 m above a mast's foot at 1 m": {`[place]
yard = { kind = "outdoor", at = [0, 0, 1] }
[device]
mast  = { part = "GEN-MAST-42-3", place = "yard", free = "1 m" }
donor = { part = "GEN-ANT-LP-10", on = "mast", up = "1 m" }
`, []string{high, ladder, line, ground, scope, structure}},
		"a new cable from a mast that is there": {`[place]
roof = { kind = "outdoor", at = [0, 0, 7] }
hall = { kind = "indoor" }
[device]
donor = { existing = true, part = "GEN-ANT-LP-10", place = "roof" }
arr   = { existing = true, part = "GEN-ARR-GT90-NFF", place = "hall" }
[cable]
C1 = { part = "GEN-CX-10", length = "9 m", from = "donor", to = "arr.line" }
`, []string{high, ladder, line, ground, scope, holes}},
		"what is there already is no work": {`[place]
roof = { kind = "outdoor", at = [0, 0, 7] }
[device]
rod = { existing = true, kind = "electrode", place = "roof" }
`, nil},
		"an Ethernet line that comes in": {`[place]
wall = { kind = "outdoor", at = [0, 0, 1] }
hall = { kind = "indoor" }
[device]
radio = { part = "GEN-RTR-5G-4", place = "wall" }
desk  = { part = "GEN-INJ-AT", place = "hall" }
[data]
E1 = { part = "GEN-CAT6A-OUT-S", length = "9 m", from = "radio", to = "desk" }
`, []string{line, ground, scope, holes, radio}},
		"a bar at an entry that a ladder leads to": {`[place]
entry = { kind = "entry", at = [0, 0, 2.4] }
[device]
bar = { part = "GEN-BAR-6", place = "entry" }
rod = { existing = true, kind = "electrode", place = "entry" }
[bond]
G1 = { from = "bar", to = "rod", part = "GEN-BC-6-CU", length = "3 m" }
`, []string{ladder, ground, scope}},
		"a riser": {`[place]
shaft = { kind = "riser" }
hall  = { kind = "indoor" }
[device]
amp  = { part = "GEN-AMP-W5-FIX", place = "hall" }
dome = { part = "GEN-ANT-DOME-3", place = "hall" }
[cable]
L1 = { part = "GEN-CX-10", length = "9 m", from = "amp.server", to = "dome", way = ["shaft"] }
`, []string{holes, radio}},
		"a supply": {`[place]
hall = { kind = "indoor" }
[device]
psu = { part = "GEN-PS-12-5", place = "hall" }
amp = { part = "GEN-AMP-W5-FIX", place = "hall" }
[wire]
P1 = { part = "GEN-W-14-2", length = "1 m", from = "psu", to = "amp.power" }
`, []string{radio, supply}},
		"a van": {`[job]
setting = "vehicle"
[place]
roof  = { kind = "vehicle-skin", at = [0, 0, 2.3] }
cabin = { kind = "vehicle-cabin", at = [0, 0, 1.2] }
[device]
whip = { part = "GEN-ANT-MAG-2", place = "roof" }
amp  = { part = "GEN-AMP-W5-MOB50", place = "cabin" }
`, []string{ladder, radio, vehicle}},
		"a car under a line": {`[job]
setting = "vehicle"
[[power_line]]
at = [0, 0, 6]
kv = 11
[place]
roof = { kind = "vehicle-skin", at = [0, 0, 1.4] }
[device]
whip = { part = "GEN-ANT-MAG-2", place = "roof" }
`, []string{line, vehicle}},
		"a profile without figures": {`[job]
profile = "eu-permission"
code    = "iec-60728-11"
`, []string{nation, permission}},
	} {
		t.Run(name, func(t *testing.T) {
			res := inspected(t, c.plan)
			for _, f := range res.Findings {
				if f.Rule.Area() == "file" || f.Rule.Name == "part/unknown" {
					t.Fatalf("the plan is not what it means to be: %s", f.Says)
				}
			}
			got := topics(t, res)
			got = slices.DeleteFunc(got, func(topic string) bool { return !slices.Contains(everyTopic, topic) })
			if !slices.Equal(got, c.want) {
				t.Errorf("prints %q, want %q", got, c.want)
			}
		})
	}
}

// everyTopic are the cautions by work, code and profile; those that only findings
// bring are the matter of another test.
var everyTopic = []string{"Work at height", "Ladder", "Power lines", "Grounding and bonding", "Article 810 does", "Holes through walls",
	"Radio", "Supply", "Wind, masts and", "Vehicle", "Whether and how", "The operators' permission"}

// Findings bring the cautions of their rules, each once, unless one of the work
// already says it; a waiver takes none away, and advice brings none.
func TestCautionsOfFindings(t *testing.T) {
	const operator = "An amplifier works under the network operator's licence"
	starts := func(res *rules.PlanResult, text string) int {
		n := 0
		for _, c := range res.Cautions {
			if strings.HasPrefix(c, text) {
				n++
			}
		}
		return n
	}
	const industrial = `[job]
stage = "review"
bands = ["B5"]
[place]
hall = { kind = "indoor" }
[device]
amp = { part = "GEN-AMP-IND-85", place = "hall" }
`
	has := func(res *rules.PlanResult, rule string, waived bool) {
		t.Helper()
		for _, f := range res.Findings {
			if f.Rule.Name == rule && f.Outcome != rules.Advice && (f.Waived != nil) == waived {
				return
			}
		}
		t.Errorf("the plan has no finding of %s that is waived: %v", rule, waived)
	}
	res := inspected(t, industrial)
	has(res, "gain/mobility", false)
	if n := starts(res, operator); n != 1 {
		t.Errorf("several findings of gain print their caution %d times", n)
	}

	unbonded := `[job]
stage = "construction"
[device]
mast = { part = "GEN-MAST-42-3" }
`
	res = inspected(t, unbonded)
	has(res, "ground/bond", false)
	if starts(res, "Grounding and bonding") != 1 || starts(res, "Bonding lowers risk") != 0 {
		t.Errorf("a finding of ground brings the caution of the work: %q", res.Cautions)
	}

	waived := industrial
	for _, rule := range []string{"gain/mobility", "gain/profile"} {
		waived += "[[waive]]\nrule = \"" + rule + "\"\non = \"device.amp\"\nbecause = \"on loan\"\nby = \"site lead\"\nuntil = 2027-06-30\n"
	}
	res = inspected(t, waived)
	has(res, "gain/mobility", true)
	has(res, "gain/profile", true)
	for _, f := range res.Findings {
		if f.Rule.Area() == "gain" && f.Waived == nil {
			t.Errorf("%s is not waived", f.Rule.Name)
		}
	}
	if starts(res, operator) != 1 {
		t.Errorf("a waiver takes a caution away: %q", res.Cautions)
	}
}
