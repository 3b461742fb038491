package bom_test

import (
	"maps"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
)

const renamePlan = `
[device.donor]
part = "ANT"
on = "mast"
[device.mast]
part = "MT"
[device.amp]
part = "AMP"
[device.dome-a]
part = "DOME"
[device.dome-b]
part = "DOME"
[cable.C1]
part = "CX"
length = "9 m"
from = "donor.rf"
to = "amp.in"
[cable.L1]
part = "CX"
length = "5 m"
from = "amp.server1"
to = "dome-a"
[cable.L2]
part = "CX"
length = "5 m"
from = "amp.server2"
to = "dome-b"
[bond.G1]
direct = true
from = "mast"
to = "amp"
[[area]]
name = "hall"
served_by = ["dome-a"]
[[reading]]
what = "isolation"
from = "amp.server1"
to = "donor.rf"
value_db = 80
[[reserve]]
part = "CX"
cable = "C1"
until = 2026-12-05
[[waive]]
rule = "loss/feed"
on = "cable.C1"
`

func renamed(t *testing.T, text string) *bom.Plan {
	t.Helper()
	file, _ := source.NewFile("plans/lane.toml", []byte(text))
	doc, problems := source.Parse(file)
	plan, more := bom.ReadPlan(doc)
	if all := append(problems, more...); len(all) > 0 {
		t.Fatalf("%v", all)
	}
	return plan
}

// A thing is followed by its part, its keys and its neighbours, through several
// renames at once; the plan under the new names is the new plan.
func TestFollowRenames(t *testing.T) {
	for _, c := range []struct {
		name string
		new  []string // old, new, …
		want string
	}{
		{"nothing", nil, ""},
		{"a device", []string{"donor", "north"}, "donor=north"},
		{"a cable", []string{"C1", "F1"}, "C1=F1"},
		{"neighbours at once", []string{"donor", "north", "C1", "F1", "mast", "pole"}, "C1=F1 donor=north mast=pole"},
		{"two of a kind, by what they are tied to", []string{"dome-a", "hall-1", "dome-b", "hall-2"}, "dome-a=hall-1 dome-b=hall-2"},
		{"a leg with its antenna", []string{"dome-a", "hall-1", "L1", "leg-1"}, "L1=leg-1 dome-a=hall-1"},
	} {
		text := strings.NewReplacer(c.new...).Replace(renamePlan)
		was, now := renamed(t, renamePlan), renamed(t, text)
		r := bom.FollowRenames(was, now)
		var got []string
		for _, old := range slices.Sorted(maps.Keys(r)) {
			got = append(got, old+"="+r[old])
		}
		if strings.Join(got, " ") != c.want {
			t.Errorf("%s: followed %v, want %s", c.name, got, c.want)
			continue
		}
		if !bom.SameMeaning(was.Renamed(r), now) {
			t.Errorf("%s: the plan under the new names is not the new plan", c.name)
		}
	}
}

// What is another part, or longer, or ambiguous, is not taken for the same.
func TestFollowRenamesNot(t *testing.T) {
	for _, c := range []struct{ name, old, new string }{
		{"another length", "[cable.C1]\npart = \"CX\"\nlength = \"9 m\"", "[cable.F1]\npart = \"CX\"\nlength = \"10 m\""},
		{"another part", "[device.dome-a]\npart = \"DOME\"", "[device.hall]\npart = \"PANEL\""},
		{"another sort", "[cable.L2]\npart = \"CX\"\nlength = \"5 m\"\nfrom = \"amp.server2\"", "[data.L3]\npart = \"CX\"\nlength = \"5 m\"\nfrom = \"amp.server2\""},
	} {
		if r := bom.FollowRenames(renamed(t, renamePlan), renamed(t, strings.Replace(renamePlan, c.old, c.new, 1))); len(r) > 0 {
			t.Errorf("%s: followed %v", c.name, r)
		}
	}
	loose := "[device.a]\npart = \"LOAD\"\n[device.b]\npart = \"LOAD\"\n"
	if r := bom.FollowRenames(renamed(t, loose), renamed(t, strings.NewReplacer(".a]", ".x]", ".b]", ".y]").Replace(loose))); len(r) > 0 {
		t.Errorf("two that nothing tells apart: followed %v", r)
	}
}

// Compose of one plan thrice is that plan.
func TestComposeOfOne(t *testing.T) {
	p := renamed(t, renamePlan)
	if !bom.SameMeaning(bom.Compose(p, p, p), p) {
		t.Error("another plan comes of it")
	}
}
