package rules_test

import (
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// touchedFirm has a plan on each of two cables and one on a profile of its own.
func touchedFirm() map[string]string {
	return map[string]string{
		rules.WorkspaceFile:       "[workspace]\nname = \"x\"\n[shelf.shop]\nkind = \"shop\"\n",
		"catalog/one.toml":        part("CX-1", "cable", "impedance_ohm = 50"),
		"catalog/two.toml":        part("CX-2", "cable", "impedance_ohm = 50"),
		"offers/tern.toml":        "[vendor.tern]\nname = \"Tern\"\n[[offer]]\npart = \"CX-1\"\nvendor = \"tern\"\npack = \"100 m\"\nprice = \"3.00\"\n",
		"stock/counts/a.toml":     "[sheet]\non = 2026-11-20\nby = \"jo\"\n[[reel]]\nhow = \"tape\"\ntag = \"R-1\"\npart = \"CX-2\"\nwhere = \"shop\"\nleft = \"60 m\"\n",
		"stock/issue/one-1.toml":  "[sheet]\non = 2026-11-21\nby = \"jo\"\n[[cut]]\ntag = \"R-1\"\nlength = \"2 m\"\njob = \"one\"\n",
		"profiles/own.toml":       "[profile.own]\ntitle = \"x\"\n",
		"plans/one.toml":          "[cable.C1]\npart = \"CX-1\"\n",
		"plans/two.toml":          "[cable.C1]\npart = \"CX-2\"\n",
		"plans/under-limits.toml": "[job]\nprofile = \"own\"\n",
	}
}

func TestTouched(t *testing.T) {
	const gone = "-"
	for _, c := range []struct {
		name    string
		now     map[string]string // beside what there was; gone takes a file away
		changed string
		known   string // the plans where the state before is known
		unknown string // and where it is not
	}{
		{"a plan", nil, "plans/one.toml", "one", "one"},
		{"a plan that is gone", map[string]string{"plans/one.toml": gone}, "plans/one.toml", "", ""},
		{"what is no file of the workspace", nil, "notes.txt", "", ""},
		{"the workspace", nil, rules.WorkspaceFile, "one two under-limits", "one two under-limits"},
		{"a part", nil, "catalog/one.toml", "one", "one"},
		{"another part", nil, "catalog/two.toml", "two", "two"},
		{"a profile", nil, "profiles/own.toml", "under-limits", "under-limits"},
		{"an offer", nil, "offers/tern.toml", "one", "one"},
		{"a reel", nil, "stock/counts/a.toml", "two", "two"},
		{"a cut from a reel", nil, "stock/issue/one-1.toml", "two", "two"},

		// of what is gone only the state before tells whom it touched
		{"a catalog file gone", map[string]string{"catalog/one.toml": gone}, "catalog/one.toml", "one", "one two under-limits"},
		{"a catalog file renamed", map[string]string{"catalog/one.toml": gone, "catalog/1.toml": part("CX-1", "cable", "impedance_ohm = 50")},
			"catalog/one.toml catalog/1.toml", "one", "one two under-limits"},
		{"a stock file gone", map[string]string{"stock/counts/a.toml": gone}, "stock/counts/a.toml", "two", "one two under-limits"},
		{"an offer gone", map[string]string{"offers/tern.toml": gone}, "offers/tern.toml", "one", "one two under-limits"},
		{"a profile gone", map[string]string{"profiles/own.toml": gone}, "profiles/own.toml", "under-limits", "one two under-limits"},
		{"a part taken out of its file", map[string]string{"catalog/one.toml": part("CX-9", "cable", "impedance_ohm = 50")}, "catalog/one.toml", "one", ""},
		{"a row taken out of its file", map[string]string{"offers/tern.toml": "[vendor.tern]\nname = \"Tern\"\n"}, "offers/tern.toml", "one", ""},

		{"a catalog file torn", map[string]string{"catalog/one.toml": "[part"}, "catalog/one.toml", "one two under-limits", "one two under-limits"},
		{"a file that never was", nil, "catalog/never.toml", "one two under-limits", "one two under-limits"},
	} {
		t.Run(c.name, func(t *testing.T) {
			before, now := memory{touchedFirm()}, memory{touchedFirm()}
			for name, text := range c.now {
				if now.files[name] = text; text == gone {
					delete(now.files, name)
				}
			}
			firm, err := rules.Load(now, rules.Options{Today: today(t, "")})
			if err != nil {
				t.Fatal(err)
			}
			changed := strings.Fields(c.changed)
			if got := jobs(firm.Touched(changed, before)); got != c.known {
				t.Errorf("with the state before: %q, want %q", got, c.known)
			}
			if got := jobs(firm.Touched(changed, nil)); got != c.unknown {
				t.Errorf("without it: %q, want %q", got, c.unknown)
			}
		})
	}
}

// A file that was torn before touches what it says now and no more: no plan stood on
// what could not be read.
func TestTouchedByAFileThatWasTorn(t *testing.T) {
	before, now := memory{touchedFirm()}, memory{touchedFirm()}
	before.files["catalog/one.toml"] = "[part"
	firm, err := rules.Load(now, rules.Options{Today: today(t, "")})
	if err != nil {
		t.Fatal(err)
	}
	if got := jobs(firm.Touched([]string{"catalog/one.toml"}, before)); got != "one" {
		t.Errorf("got %q", got)
	}
}

func jobs(plans []source.Entry) string {
	var out []string
	for _, e := range plans {
		out = append(out, strings.TrimSuffix(strings.TrimPrefix(e.Path, "plans/"), ".toml"))
	}
	slices.Sort(out)
	return strings.Join(out, " ")
}
