package rules_test

import (
	"slices"
	"strings"
	"testing"

	"driploop/rules"
)

// partFindings runs the rules over one catalog and one plan, with two DOME on hand.
func partFindings(t *testing.T, rule, catalog, plan string) []*rules.Finding {
	t.Helper()
	return houseFindings(t, rule, "", catalog, plan)
}

// houseFindings are those of a workspace whose house has something to say.
func houseFindings(t *testing.T, rule, house, catalog, plan string) []*rules.Finding {
	t.Helper()
	tree := memory{map[string]string{
		rules.WorkspaceFile:   "[workspace]\nname = \"x\"\n[shelf.shop]\nkind = \"shop\"\n" + house,
		"catalog/own.toml":    part("DOME", "antenna", port("rf", "N female", "")) + catalog,
		"plans/a.toml":        plan,
		"stock/counts/a.toml": "[[count]]\npart = \"DOME\"\nwhere = \"shop\"\nqty = 2\non = 2026-11-20\n",
	}}
	var out []*rules.Finding
	for _, f := range findings(t, tree, today(t, "")) {
		if f.Rule.Name == rule {
			out = append(out, f)
		}
	}
	return out
}

func TestAPartThatIsMissingIsSaidOnceWithAllItsPlaces(t *testing.T) {
	got := partFindings(t, "part/unknown", "", "[device]\na = { part = \"DOOM\" }\nb = { part = \"DOOM\" }\nc = { part = \"DOOM\" }\n")
	if len(got) != 1 || got[0].On != "device.a" || got[0].Weight != rules.Hold {
		t.Fatalf("got %d findings", len(got))
	}
	var lines []int
	for _, r := range got[0].Related {
		lines = append(lines, r.At.Line())
	}
	if !slices.Equal(lines, []int{3, 4}) {
		t.Errorf("the other places are on the lines %v", lines)
	}
	if got[0].Do != "did you mean DOME (2 on hand)?" {
		t.Errorf("it says to do %q", got[0].Do)
	}
}

func TestAPlaceThatALikeCableSharesIsNamedOnce(t *testing.T) {
	got := partFindings(t, "part/unknown", "", "[cable]\nC1 = { part = \"WX-400\" }\nC2 = { like = \"C1\" }\nC3 = { part = \"WX-400\" }\nC4 = { like = \"C3\" }\n")
	if len(got) != 1 || len(got[0].Related) != 1 {
		t.Fatalf("got %+v", got)
	}
	if got[0].Do != "add it to the catalog, or correct the ID" {
		t.Errorf("it says to do %q", got[0].Do)
	}
}

func TestStatusNamesWhatCanBeHadInstead(t *testing.T) {
	gone := func(status, instead string) string {
		return part("GONE", "antenna", port("rf", "N female", ""), "status = \""+status+"\"", "instead = ["+instead+"]") +
			part("OTHER", "antenna", port("rf", "N female", "")) + part("GONE-TOO", "antenna", "status = \"withdrawn\"")
	}
	for _, c := range []struct {
		status, instead, do string
		weight              rules.Weight
	}{
		{"withdrawn", `"GONE-TOO", "DOME", "OTHER"`, "take DOME (2 on hand) or OTHER (none on hand) instead", rules.Punch},
		{"withdrawn", `"GONE-TOO"`, "look for a substitute", rules.Punch},
		{"withdrawn", `"DOME", "OTHER", "GEN-ANT-DOME-3"`, "take DOME (2 on hand), OTHER (none on hand) or GEN-ANT-DOME-3 (none on hand) instead", rules.Punch},
		{"last-buy", `"DOME"`, "order what later jobs need as well; take DOME (2 on hand) instead", rules.Note},
	} {
		got := partFindings(t, "part/status", gone(c.status, c.instead), "[device.a]\npart = \"GONE\"\n")
		if len(got) != 1 || !strings.HasPrefix(got[0].Do, c.do) || got[0].Weight != c.weight || got[0].On != "device.a" {
			t.Errorf("%s, instead %s: %+v", c.status, c.instead, got)
		}
	}
}

func TestWhatWorkCanGoOnWithoutWeighsLess(t *testing.T) {
	catalog := part("CX-Q", "cable", "impedance_ohm = 50", "loss_db_per_100m = [[100, 5.0], [400, 10.0], [900, 15.0]]", "instead = [\"NONE\", \"DOME\"]") +
		jumper("J-1", "NONE", "1 m", "N male", "N male") + strings.Replace(jumper("J-2", "NONE", "1 m", "N male", "N male"), "length", "loss_db = 0.5\nlength", 1) +
		jumper("J-3", "DOME", "1 m", "N male", "N male") + plug("NC", "NONE") +
		part("LEAD", "antenna", "port.rf = { connector = \"N female\", impedance_ohm = 50, lead = { cable = \"NONE\", length = \"1 m\" } }") +
		part("AMP", "amplifier", port("donor", "N female", ", side = \"donor\""), "kit = [{ side = \"donor\", antenna = \"NONE\" }]")
	weights := map[string]rules.Weight{}
	for _, rule := range []string{"part/unknown", "part/kind"} {
		for _, f := range houseFindings(t, rule, "[house]\nsealing = \"NONE\"\n", catalog, "") {
			weights[rule+" "+f.Part] = f.Weight
		}
	}
	for name, want := range map[string]rules.Weight{
		"part/unknown CX-Q": rules.Punch, "part/unknown J-1": rules.Hold, "part/unknown J-2": rules.Punch,
		"part/kind CX-Q": rules.Punch, "part/kind J-3": rules.Hold,
		"part/unknown NC": rules.Punch, "part/unknown LEAD": rules.Hold, "part/unknown AMP": rules.Punch, "part/unknown ": rules.Hold,
	} {
		if weights[name] != want {
			t.Errorf("%s weighs %s, not %s", name, weights[name], want)
		}
	}
}
