package rules_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/unit"
)

// One item of a list that cannot be read is one finding, and the rest of the list is
// what the plan says: no rule speaks as if nothing of it were there.
func TestOneBadItemLeavesTheOthers(t *testing.T) {
	const target = "target_rsrp_dbm = -100\n"
	for _, c := range []struct{ name, from, sound, to string }{
		{"bands", `bands      = ["B12", `, `bands      = ["B12", `, `bands      = ["B12", "B99", `},
		{"bands, no text", `bands      = [`, `bands      = [`, `bands      = [12, `},
		{"way", `way = ["roof", "entry"]`, `way = ["roof", "entry"]`, `way = ["roof", "entry", "entry 2 parsecs"]`},
		{"served_by", `served_by       = ["dome", `, `served_by       = ["dome", `, `served_by       = ["dome", "do me", `},
		{"before", target, target + "before = [{ operator = \"northbank\", band = \"B12\", rsrp_dbm = -90 }]\n",
			target + "before = [{ operator = \"northbank\" }, { operator = \"northbank\", band = \"B12\", rsrp_dbm = -90 }]\n"},
		{"operators", target, target + "operators = [\"northbank\"]\n", target + "operators = [\"northbank\", 7]\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			sound := partialFindings(t, c.from, c.sound)
			var others []string
			faults := 0
			for _, f := range partialFindings(t, c.from, c.to) {
				if strings.HasPrefix(f, "file/") {
					faults++
				} else {
					others = append(others, f)
				}
			}
			if faults == 0 {
				t.Error("nothing is said of the item")
			}
			if !slices.Equal(others, sound) {
				t.Errorf("there stand\n%s\nwithout the item\n%s", strings.Join(others, "\n"), strings.Join(sound, "\n"))
			}
		})
	}
}

// A wall that cannot be read is not left out: what depends on it is not assessed.
func TestBadWallIsNotLeftOut(t *testing.T) {
	found := partialFindings(t, `walls           = ["plasterboard 12.5 mm"]`, `walls           = ["plasterboard 12.5 mm", 7]`)
	want := "reach/downlink unknown area.counter"
	if !slices.ContainsFunc(found, func(f string) bool { return strings.HasPrefix(f, want) }) {
		t.Errorf("no %s in\n%s", want, strings.Join(found, "\n"))
	}
}

// partialFindings lists what is found on the demo's bakery after the first place of a
// text was changed.
func partialFindings(t *testing.T, from, to string) []string {
	t.Helper()
	const plan = "plans/quay-lane.toml"
	tree := memory{files: files(t, demo)}
	text := tree.files[plan]
	if !strings.Contains(text, from) {
		t.Fatalf("the bakery has no %s", from)
	}
	tree.files[plan] = strings.Replace(text, from, to, 1)
	var out []string
	for _, f := range findings(t, tree, unit.Date{Year: 2026, Month: 12, Day: 1}) {
		if f.At.Path() == plan {
			out = append(out, fmt.Sprintf("%s %s %s %s", f.Rule.Name, f.Outcome, f.On, f.Says))
		}
	}
	slices.Sort(out)
	return out
}
