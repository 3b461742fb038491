package starter_test

import (
	"regexp"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/starter"
	"driploop/rules"
)

// commentedOut is a line that a plan's author takes the # away from.
var commentedOut = regexp.MustCompile(`(?m)^# (\[|[a-z][a-z0-9_]* = )`)

// everything is a new workspace with a plan of each shape; live takes the # away from
// every table and key that is commented out.
func everything(t *testing.T, live bool) memory {
	t.Helper()
	files, err := starter.Workspace()
	if err != nil {
		t.Fatal(err)
	}
	tree := memory{}
	for _, f := range files {
		tree[f.Path] = string(f.Text)
	}
	for _, like := range starter.Likes() {
		text, err := starter.Plan(like, "new-"+like)
		if err != nil {
			t.Fatal(err)
		}
		tree["plans/new-"+like+".toml"] = string(text)
	}
	for path, text := range tree {
		if live && path != ".gitattributes" {
			tree[path] = commentedOut.ReplaceAllString(text, "$1")
		}
	}
	return tree
}

// Untouched, nothing is wrong with the files, no part is unknown and everything mates.
// What the installer has to fill in is said not to be assessed.
func TestUntouched(t *testing.T) {
	res := inspect(t, everything(t, false))
	for _, f := range res.Workspace {
		t.Errorf("%s line %d: %s %s", f.At.Path(), f.At.Line(), f.Rule.Name, f.Says)
	}
	if len(res.Plans) != len(starter.Likes()) {
		t.Fatalf("%d plans were looked at", len(res.Plans))
	}
	for _, p := range res.Plans {
		unknown := 0
		for _, f := range p.Findings {
			area, _, _ := strings.Cut(f.Rule.Name, "/")
			if f.Outcome == rules.Unknown {
				unknown++
			}
			held := f.Weight == rules.Hold && f.Rule.Name != "ground/bond" // no electrode is made up
			if held || area == "file" || area == "part" || f.Outcome == rules.Fails && area == "mate" {
				t.Errorf("%s line %d: %s %s %s", f.At.Path(), f.At.Line(), f.Rule.Name, f.Outcome, f.Says)
			}
		}
		if unknown < 5 {
			t.Errorf("%s: only %d matters are not assessed", p.Path, unknown)
		}
	}
}

// With every example live, the files can still be read: what they teach is right. What
// the examples say of a job is another matter.
func TestExamplesCanBeRead(t *testing.T) {
	res := inspect(t, everything(t, true))
	all := res.Workspace
	for _, p := range res.Plans {
		all = append(all, p.Findings...)
	}
	for _, f := range all {
		if area, _, _ := strings.Cut(f.Rule.Name, "/"); area == "file" || area == "part" || area == "catalog" || f.Rule.Name == "stock/unknown" {
			t.Errorf("%s line %d: %s %s %s", f.At.Path(), f.At.Line(), f.Rule.Name, f.Outcome, f.Says)
		}
	}
}

// Every key has what the function that reads it says of it.
func TestCommentsAreTheFormats(t *testing.T) {
	tree := everything(t, false)
	plan := bom.DescribePlan()
	for _, c := range []struct{ file, table, key string }{
		{"plans/new-building.toml", "job", "stage"},
		{"plans/new-building.toml", "cable", "least_bend"},
		{"plans/new-van.toml", "place", "airbag"},
		{"plans/new-router.toml", "data", "way"},
	} {
		doc := plan.Key(c.table).Sub.Key(c.key)
		if want := "  # " + doc.Doc; !strings.Contains(tree[c.file], want) {
			t.Errorf("%s does not say %q", c.file, want)
		}
	}
	loss := catalog.DescribePart("cable").Key("loss_db_per_100m").Doc
	if !strings.Contains(tree["catalog/own.toml"], "# "+loss) {
		t.Errorf("the example of a part does not say %q", loss)
	}
	for path, text := range tree {
		if strings.Contains(text, "#:") {
			t.Errorf("%s has a line whose key was not spoken of", path)
		}
	}
}

func TestUnknownShape(t *testing.T) {
	if _, err := starter.Plan("boat", "x"); err == nil || !strings.Contains(err.Error(), "boat") {
		t.Errorf("a plan like a boat: %v", err)
	}
}

func inspect(t *testing.T, tree memory) *rules.Result {
	t.Helper()
	firm, err := rules.Load(tree, rules.Options{Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	res, err := firm.Inspect(t.Context(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// memory is a tree in memory.
type memory map[string]string

func (m memory) Name() string { return "worktree" }

func (m memory) Files() ([]source.Entry, error) {
	var out []source.Entry
	for path := range m {
		out = append(out, source.Entry{Path: path})
	}
	return out, nil
}

func (m memory) Read(e source.Entry) ([]byte, error) { return []byte(m[e.Path]), nil }
