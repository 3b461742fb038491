package rules

import (
	"fmt"
	"slices"
	"strings"
	"testing"
	"time"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// filedTree is a tree of files in memory.
type filedTree struct {
	name  string
	files map[string]string
}

func (t filedTree) Name() string { return t.name }

func (t filedTree) Files() ([]source.Entry, error) {
	var out []source.Entry
	for path := range t.files {
		out = append(out, source.Entry{Path: path})
	}
	slices.SortFunc(out, func(a, b source.Entry) int { return strings.Compare(a.Path, b.Path) })
	return out, nil
}

func (t filedTree) Read(e source.Entry) ([]byte, error) { return []byte(t.files[e.Path]), nil }

// with is the tree with some files in place of its own.
func (t filedTree) with(name string, files map[string]string) filedTree {
	out := filedTree{name, map[string]string{}}
	for path, text := range t.files {
		out.files[path] = text
	}
	for path, text := range files {
		out.files[path] = text
	}
	return out
}

var ruled = filedTree{"worktree", map[string]string{
	WorkspaceFile:               "[workspace]\nprofile = \"own\"\n[house]\nvswr = 2.0\nfeed_loss_db = 6\n[rule.\"loss/feed\"]\nweight = \"hold\"\nbecause = \"ours\"\n",
	"profiles/own.toml":         "[profile.own]\ntitle = \"own\"\ninstrument = \"house\"\nedition = \"2026\"\nchecked = 2026-11-01\n",
	"stock/counts/a.toml":       "[sheet]\non = 2026-11-20\nby = \"jo\"\n",
	"plans/a.toml":              "[job]\n",
	"profiles/of-both/two.toml": "",
}}

// What differs is named by key or file; how a figure is written, and in which order,
// is no difference.
func TestRulersDiffer(t *testing.T) {
	many := map[string]string{}
	for i := range 12 {
		many[fmt.Sprintf("profiles/p%02d.toml", i)] = ""
	}
	for _, c := range []struct {
		name, want string
		change     map[string]string
	}{
		{"nothing", "", nil},
		{"other words for the same", "", map[string]string{WorkspaceFile: "[rule.\"loss/feed\"]\nbecause = \"ours\"\nweight = \"hold\"\n[house]\nfeed_loss_db = 6\nvswr = 2.00\n[workspace]\nprofile = 'own'\n"}},
		{"a house figure", "the limits of base are used; here [house] vswr differs",
			map[string]string{WorkspaceFile: strings.Replace(ruled.files[WorkspaceFile], "2.0", "3.0", 1)}},
		{"a figure that is gone, a weight, the profile", "the limits of base are used; here [workspace] profile, [house] vswr and [rule] loss/feed differ",
			map[string]string{WorkspaceFile: "[house]\nfeed_loss_db = 6\n[rule.\"loss/feed\"]\nweight = \"note\"\nbecause = \"ours\"\n"}},
		{"a profile", "the limits of base are used; here profiles/own.toml differs",
			map[string]string{"profiles/own.toml": strings.Replace(ruled.files["profiles/own.toml"], "own\"", "mine\"", 1)}},
		{"many files", "the limits of base are used; here profiles/p00.toml, profiles/p01.toml, profiles/p02.toml, profiles/p03.toml, profiles/p04.toml, profiles/p05.toml, profiles/p06.toml, profiles/p07.toml and 4 more differ", many},
		{"a plan is no ruler", "", map[string]string{"plans/a.toml": "[job]\ntitle = \"other\"\n"}},
	} {
		firm, err := Load(ruled.with("worktree", c.change), Options{LimitsFrom: ruled.with("base", nil)})
		if err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		o := firm.Origin()
		if got := strings.Join(o.Differs, "; "); got != c.want || o.LimitsFrom != "base" || o.StockFrom != "worktree" {
			t.Errorf("%s: %q, want %q (%+v)", c.name, got, c.want, o)
		}
		if firm.Workspace.House.VSWR.V != 2 || firm.Override("loss/feed").Weight.V != "hold" || firm.Workspace.Profile.V != "own" || firm.Limits.Profile("own").Title.V != "own" {
			t.Errorf("%s: the rulers in use are not the base's", c.name)
		}
	}
}

// A profile that only the change brings is unknown to it by the base's rulers, and so
// is one that only the base's driploop.toml names.
func TestRulersUnknown(t *testing.T) {
	base := ruled.with("base", map[string]string{"profiles/own.toml": "", WorkspaceFile: strings.Replace(ruled.files[WorkspaceFile], "own", "gone", 1)})
	firm, err := Load(ruled.with("worktree", map[string]string{"plans/a.toml": "[job]\nprofile = \"own\"\n"}), Options{LimitsFrom: base})
	if err != nil {
		t.Fatal(err)
	}
	var says []string
	for _, p := range firm.Problems {
		says = append(says, p.Says)
	}
	if want := `there is no profile "gone" (at base)`; !slices.Contains(says, want) {
		t.Errorf("%q lacks %q", says, want)
	}
	c, _ := firm.Case(firm.PlanFiles[0])
	if len(c.Problems) != 1 || c.Problems[0].Says != `there is no profile "own"` {
		t.Errorf("%+v", c.Problems)
	}
}

// A sheet that only here is new says nothing of the base's shelf; a fault in it is
// found all the same.
func TestStockElsewhere(t *testing.T) {
	count := func(qty int) string {
		return fmt.Sprintf("[sheet]\non = 2026-11-20\nby = \"jo\"\n[[count]]\npart = \"GEN-J-N-N-1\"\nwhere = \"shop\"\nqty = %d\n", qty)
	}
	shelf := ruled.with("base", map[string]string{WorkspaceFile: "[shelf.shop]\nkind = \"shop\"\n", "stock/counts/a.toml": count(7)})
	here := shelf.with("worktree", map[string]string{"stock/counts/a.toml": count(2), "stock/counts/b.toml": "[sheet]\nonn = 1\n"})
	firm, err := Load(here, Options{StockFrom: shelf, Today: unit.DateOf(time.Date(2026, 12, 1, 0, 0, 0, 0, time.UTC))})
	if err != nil {
		t.Fatal(err)
	}
	if qty, _ := firm.Stock.OnHand("GEN-J-N-N-1"); qty.String() != "7" {
		t.Errorf("%s on hand, want the 7 of base", qty)
	}
	if want := "the stock of base is used; here stock/counts/a.toml and stock/counts/b.toml differ"; !slices.Equal(firm.Origin().Differs, []string{want}) {
		t.Errorf("%q", firm.Origin().Differs)
	}
	if !slices.ContainsFunc(firm.Problems, func(p FileProblem) bool { return p.At.Path() == "stock/counts/b.toml" }) {
		t.Error("the fault of the new sheet is not said")
	}
}
