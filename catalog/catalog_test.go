package catalog_test

import (
	"slices"
	"testing"

	"driploop/catalog"
	"driploop/catalog/unit"
)

func unitMHz(v float64) unit.MHz { return unit.MHz(v) }

func TestOwnPartsComeFirst(t *testing.T) {
	generic := catalog.Generic()
	if len(generic) == 0 {
		t.Fatal("there is no generic part")
	}
	id := generic[0].ID
	own, problems := parts(t, "[part."+id+"]\nkind = \"electrode\"\n[part.MINE]\nkind = \"electrode\"\n")
	again, more := parts(t, "[part.MINE]\nkind = \"mount\"\n[part."+generic[3].ID+"]\nkind = \"mount\"\n[part."+generic[2].ID+"]\nkind = \"mount\"\n")
	if len(problems)+len(more) > 0 {
		t.Fatal(problems, more)
	}
	c := catalog.New(append(own, again...))
	if p := c.Look(id); p != own[0] || p.Generic {
		t.Errorf("%s is %+v, want the workspace's", id, p)
	}
	if p := c.Look("MINE"); p != own[1] {
		t.Errorf("MINE is %+v, want the first of two", p)
	}
	if p := c.Look(generic[1].ID); p != generic[1] || !p.Generic {
		t.Errorf("%s is %+v, want the generic one", generic[1].ID, p)
	}
	if c.Look("NOWHERE") != nil || c.Look("mine") != nil {
		t.Error("a part is found that is not there")
	}
	if len(c.Twice) != 1 || c.Twice[0].Kept != own[1] || c.Twice[0].Other != again[0] {
		t.Errorf("twice are %+v", c.Twice)
	}
	if got := c.Overridden(); !slices.Equal(got, sorted(id, generic[2].ID, generic[3].ID)) {
		t.Errorf("overridden are %v", got)
	}
	if got := c.Own(); !slices.Equal(ids(got), sorted(id, "MINE", generic[2].ID, generic[3].ID)) {
		t.Errorf("own are %v", ids(got))
	}
	all := ids(c.All())
	if len(all) != len(generic)+1 || !slices.IsSorted(all) {
		t.Errorf("%d parts in all, want %d in order", len(all), len(generic)+1)
	}
	if got := c.Nearest("MIEN"); got != "MINE" {
		t.Errorf("the nearest to MIEN is %q", got)
	}
}

func ids(parts []*catalog.Part) []string {
	var out []string
	for _, p := range parts {
		out = append(out, p.ID)
	}
	return out
}

func sorted(s ...string) []string {
	slices.Sort(s)
	return s
}

func TestConnectorsOfACable(t *testing.T) {
	connector := func(id, fits string) string {
		return "[part." + id + "]\nkind = \"connector\"\nconnector = \"N male\"\nimpedance_ohm = 50\nfits = [" + fits + "]\n"
	}
	own, problems := parts(t, connector("B", `"K-1", "K-2"`)+connector("A", `"K-1"`)+"[part.K-1]\nkind = \"electrode\"\n")
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	c := catalog.New(own)
	for cable, want := range map[string][]string{"K-1": {"A", "B"}, "K-2": {"B"}, "K-3": nil} {
		if got := ids(c.Connectors(cable)); !slices.Equal(got, want) {
			t.Errorf("%s takes %v, want %v", cable, got, want)
		}
	}
}

// Two catalogs do not share what they learn.
func TestCatalogsAreApart(t *testing.T) {
	own, _ := parts(t, "[part.MINE]\nkind = \"electrode\"\n")
	if catalog.New(own).Look("MINE") == nil || catalog.New(nil).Look("MINE") != nil {
		t.Error("a part of one workspace is found in another")
	}
}
