package rules_test

import (
	"context"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// shelfTree is a store in which the connectors of one job were counted twice.
func shelfTree(waivers string) memory {
	return memory{files: map[string]string{
		"driploop.toml":       "shelf.shop.kind = \"shop\"\n",
		"plans/lane.toml":     "job = { stage = \"review\" }\nextra = [{ part = \"GEN-NM-CX10-CRIMP\", qty = 4 }]\n" + waivers,
		"plans/pier.toml":     "job = { stage = \"review\" }\nextra = [{ part = \"GEN-NM-CX10-CLAMP\", qty = 4 }]\n",
		"stock/counts/a.toml": "sheet = { on = 2026-11-20, where = \"shop\" }\ncount = [{ part = \"GEN-NM-CX10-CRIMP\", qty = 26 }]\n",
		"stock/counts/b.toml": "sheet = { on = 2026-11-20, where = \"shop\" }\ncount = [{ part = \"GEN-NM-CX10-CRIMP\", qty = 24 }]\n",
		"stock/counts/c.toml": "sheet = { on = 2026-08-01, where = \"shop\" }\ncount = [{ part = \"GEN-NM-CX10-CLAMP\", qty = 9 }]\n",
	}}
}

func inspectShelf(t *testing.T, tree memory, o rules.Options, plans []string, changed ...string) *rules.Result {
	t.Helper()
	o.Today = today(t, "")
	firm, err := rules.Load(tree, o)
	if err != nil {
		t.Fatal(err)
	}
	var entries []source.Entry
	for _, p := range plans {
		entries = append(entries, source.Entry{Path: p})
	}
	res, err := firm.Inspect(context.Background(), entries, changed...)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// stood lists the findings of rules of scope firm and of waivers: file, line, rule,
// weight, and the waiver's mark.
func stood(res *rules.Result) []string {
	var out []string
	list := res.Workspace
	for _, p := range res.Plans {
		list = append(list, p.Findings...)
	}
	for _, f := range list {
		if !f.Rule.Firm() && f.Rule.Name != "paper/waiver" {
			continue
		}
		line := f.At.Path() + ":" + string('0'+rune(f.At.Line())) + " " + f.Rule.Name + " " + f.Weight.String()
		if f.Waived != nil {
			line += " waived"
		}
		out = append(out, line)
	}
	return out
}

func wantStood(t *testing.T, res *rules.Result, want ...string) {
	t.Helper()
	if got := stood(res); !slices.Equal(got, want) {
		t.Errorf("there stand\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
}

func TestShelfFindingsOfThePlansAtHand(t *testing.T) {
	const (
		twice     = "stock/counts/b.toml:2 stock/counted-twice punch"
		onLane    = "plans/lane.toml:2 stock/counted-twice punch"
		old       = "stock/counts/c.toml:2 stock/old note"
		oldOnPier = "plans/pier.toml:2 stock/old note"
	)
	tree := shelfTree("")
	wantStood(t, inspectShelf(t, tree, rules.Options{}, nil), twice, old, onLane, oldOnPier)
	wantStood(t, inspectShelf(t, tree, rules.Options{}, []string{"plans/lane.toml"}), twice, onLane)
	wantStood(t, inspectShelf(t, tree, rules.Options{}, []string{"plans/pier.toml"}), old, oldOnPier)
	wantStood(t, inspectShelf(t, tree, rules.Options{}, []string{"plans/pier.toml"}, "stock/counts/b.toml"), twice, old, oldOnPier)
	res := inspectShelf(t, tree, rules.Options{}, []string{"plans/lane.toml"})
	if res.Punch != res.Plans[0].Punch+1 || res.Plans[0].Punch == 0 {
		t.Errorf("%d punch in all, %d of them on the plan", res.Punch, res.Plans[0].Punch)
	}
}

func TestShelfLeftOut(t *testing.T) {
	res := inspectShelf(t, shelfTree("[[waive]]\nrule = \"stock/counted-twice\"\nbecause = \"kit counts again\"\n"), rules.Options{NoShelf: true}, nil)
	wantStood(t, res) // nor is the waiver said to cover nothing
	if len(res.Notices) != 1 || !strings.Contains(res.Notices[0], "stock/counted-twice") {
		t.Errorf("notices %q", res.Notices)
	}
}

func TestWaiversOfShelfRules(t *testing.T) {
	const twice, old = "stock/counts/b.toml:2 stock/counted-twice punch", "stock/counts/c.toml:2 stock/old note"
	for _, c := range []struct {
		name, waive string
		want        []string
	}{
		{"covers", "rule = \"stock/counted-twice\"\nbecause = \"kit counts again\"",
			[]string{"plans/lane.toml:2 stock/counted-twice punch waived"}},
		{"expired", "rule = \"stock/counted-twice\"\nbecause = \"kit counts again\"\nuntil = 2026-11-30",
			[]string{"plans/lane.toml:2 stock/counted-twice punch", "plans/lane.toml:4 paper/waiver punch"}},
		{"covers nothing", "rule = \"stock/over\"\nbecause = \"kit counts again\"",
			[]string{"plans/lane.toml:2 stock/counted-twice punch", "plans/lane.toml:4 paper/waiver punch"}},
		{"another part", "rule = \"stock/counted-twice\"\non = \"part.GEN-BAR-6\"\nbecause = \"kit counts again\"",
			[]string{"plans/lane.toml:2 stock/counted-twice punch", "plans/lane.toml:4 paper/waiver punch"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			res := inspectShelf(t, shelfTree("[[waive]]\n"+c.waive+"\n"), rules.Options{}, nil)
			want := append([]string{twice, old}, c.want...)
			wantStood(t, res, append(want, "plans/pier.toml:2 stock/old note")...)
		})
	}
}

// A figure that a waiver accepts holds on the plan, at the place that is kept of it.
func TestWaiverUpToOfShelfRule(t *testing.T) {
	tree := shelfTree("")
	tree.files["plans/pier.toml"] += "[[waive]]\nrule = \"stock/old\"\nbecause = \"a slow part\"\nup_to = 100\n"
	res := inspectShelf(t, tree, rules.Options{}, []string{"plans/pier.toml"})
	wantStood(t, res, "stock/counts/c.toml:2 stock/old note", "plans/pier.toml:2 stock/old note", "plans/pier.toml:6 paper/waiver punch")
}

// A stock file touches the plans that name one of its parts, also those it names only
// by a tag, in a box, or by leaving them out of a complete count.
func TestTouchedByStock(t *testing.T) {
	tree := shelfTree("")
	tree.files["plans/reel.toml"] = "job = { stage = \"review\" }\nextra = [{ part = \"GEN-CX-10\", qty = \"4 m\" }]\n"
	tree.files["stock/counts/r.toml"] = "sheet = { on = 2026-11-01, where = \"shop\" }\nreel = [{ tag = \"R-1\", part = \"GEN-CX-10\", left = \"40 m\" }]\n"
	for _, c := range []struct{ name, text, want string }{
		{"a part", "sheet = { on = 2026-11-21, where = \"shop\" }\ncount = [{ part = \"GEN-NM-CX10-CRIMP\", qty = 2 }]\n", "plans/lane.toml"},
		{"a tag", "sheet = { on = 2026-11-21 }\ncut = [{ tag = \"R-1\", length = \"1 m\", because = \"kinked\" }]\n", "plans/reel.toml"},
		{"a box", "order = { vendor = \"tern\" }\nline = [{ brings = { GEN-NM-CX10-CLAMP = 1, GEN-NM-CX7-CRIMP = 1 }, packs = 1 }]\n", "plans/pier.toml"},
		{"a complete count", "sheet = { on = 2026-11-21, where = \"shop\", complete = true }\n", "plans/lane.toml plans/pier.toml plans/reel.toml"},
		{"another part", "sheet = { on = 2026-11-21, where = \"shop\" }\ncount = [{ part = \"GEN-NM-CX7-CRIMP\", qty = 2 }]\n", ""},
	} {
		t.Run(c.name, func(t *testing.T) {
			tree.files["stock/x.toml"] = c.text
			firm, err := rules.Load(tree, rules.Options{Today: today(t, "")})
			if err != nil {
				t.Fatal(err)
			}
			var got []string
			for _, e := range firm.Touched([]string{"stock/x.toml"}, nil) {
				got = append(got, e.Path)
			}
			if s := strings.Join(got, " "); s != c.want {
				t.Errorf("touches %q, want %q", s, c.want)
			}
		})
	}
}
