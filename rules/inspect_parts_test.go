package rules_test

import (
	"context"
	"slices"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// A fault of a cable in the catalog stands on a plan that has it only inside a jumper
// or as a captive lead; a fault of a part that the plan does not use is left out.
func TestAPlanStandsOnTheCablesInsideItsParts(t *testing.T) {
	tree := memory{map[string]string{
		rules.WorkspaceFile: "[workspace]\nname = \"x\"\n",
		"catalog/own.toml": bent("CX-J") + bent("CX-L") + bent("CX-OTHER") + plug("NC-USED", "GEN-CX-10", "CX-NONE") + plug("NC-OTHER", "CX-NONE") + jumper("J-NOW", "CX-J", "1 m", "N male", "N male") +
			part("DOME", "antenna", "port.rf = { connector = \"N female\", impedance_ohm = 50, lead = { cable = \"CX-L\", length = \"1 m\" } }"),
		"plans/a.toml": "[device.dome]\npart = \"DOME\"\n[cable.C1]\npart = \"J-NOW\"\nto = \"dome\"\n" +
			"[cable.C2]\npart = \"GEN-CX-10\"\nends = [\"NC-USED\", \"N male\"]\n",
	}}
	firm, err := rules.Load(tree, rules.Options{Today: today(t, "")})
	if err != nil {
		t.Fatal(err)
	}
	res, err := firm.Inspect(context.Background(), []source.Entry{{Path: "plans/a.toml"}})
	if err != nil {
		t.Fatal(err)
	}
	var parts []string
	for _, f := range res.Workspace {
		parts = append(parts, f.Part)
	}
	if want := []string{"CX-J", "CX-L", "NC-USED"}; !slices.Equal(parts, want) {
		t.Errorf("findings stand on %q, not %q", parts, want)
	}
	if len(res.Notices) != 1 {
		t.Errorf("what is left out is not said: %q", res.Notices)
	}
}

// bent is a cable whose points lie on no curve.
func bent(id string) string {
	return part(id, "cable", "impedance_ohm = 50", "loss_db_per_100m = [[100, 5.0], [400, 30.0], [900, 15.0], [1600, 20.0]]")
}
