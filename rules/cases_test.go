package rules_test

import (
	"context"
	"os"
	"path/filepath"
	"regexp"
	"sort"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// Every rule has a folder testdata/rules/<area>-<name> with cases. A case is a
// text archive: the files in it lie over those of testdata/rules/base. What the
// rule must say stands in the files, at the end of the line at fault:
//
//	from = "donor" # want ground/arrestor fails "no arrestor"
//
// The outcome is one of fails, at-worst, unknown, advice; the text is a part of
// what the finding says. Findings of the rule that no line wants, and wants that
// no finding meets, fail the case. Lines before the first file may set "today:
// 2026-12-01". A file that opens with "nothing can be missing:" may stand in for
// the missing case of a rule that has no inputs.
const casesDir = "../testdata/rules"

var wantComment = regexp.MustCompile(`# want ([a-z-]+/[a-z-]+) (fails|at-worst|unknown|advice) "([^"]*)"`)

type want struct {
	path          string
	line          int
	rule, outcome string
	text          string
	met           bool
}

func TestRuleCases(t *testing.T) {
	base := files(t, filepath.Join(casesDir, "base"))
	for _, r := range rules.Rules {
		dir := filepath.Join(casesDir, strings.ReplaceAll(r.Name, "/", "-"))
		kinds := map[string]bool{}
		names, _ := filepath.Glob(filepath.Join(dir, "*.txtar"))
		for _, name := range names {
			kind, _, _ := strings.Cut(strings.TrimSuffix(filepath.Base(name), ".txtar"), "-")
			kinds[kind] = true
			t.Run(r.Name+"/"+filepath.Base(name), func(t *testing.T) { runCase(t, r, name, kind, base) })
		}
		for _, kind := range []string{"bad", "good", "boundary", "missing"} {
			if !kinds[kind] && (kind != "boundary" || measured(r)) {
				t.Errorf("rule %s has no %s case in %s", r.Name, kind, dir)
			}
		}
	}
}

// unmeasured lists the rules that compare no figure with a limit and so have no
// boundary.
var unmeasured = map[string]bool{}

func measured(r *rules.Rule) bool { return !unmeasured[r.Name] }

func runCase(t *testing.T, r *rules.Rule, name, kind string, base map[string]string) {
	archive, err := txtar.ParseFile(name)
	if err != nil {
		t.Fatal(err)
	}
	head := string(archive.Comment)
	if kind == "missing" && strings.HasPrefix(head, "nothing can be missing:") {
		return
	}
	tree := memory{files: map[string]string{}}
	for path, text := range base {
		tree.files[path] = text
	}
	for _, f := range archive.Files {
		tree.files[f.Name] = string(f.Data)
	}
	wants := wantsIn(t, tree)
	met := map[string]int{}
	for _, f := range findings(t, tree, today(t, head)) {
		if f.Rule != r {
			continue
		}
		met[f.Outcome.String()]++
		if !meet(wants, f) {
			t.Errorf("surplus finding, %s line %d: %s %s %q", f.At.Path(), f.At.Line(), f.Rule.Name, f.Outcome, f.Says)
		}
	}
	for _, w := range wants {
		if w.rule == r.Name && !w.met {
			t.Errorf("missing finding, %s line %d: %s %s %q", w.path, w.line, w.rule, w.outcome, w.text)
		}
	}
	switch {
	case kind == "bad" && met["fails"] == 0:
		t.Error("a bad case has a finding that fails")
	case kind == "good" && met["fails"]+met["at-worst"]+met["unknown"] > 0:
		t.Error("a good case has nothing but advice")
	case kind == "missing" && met["unknown"] == 0:
		t.Error("a missing case has a finding that is unknown")
	}
}

func meet(wants []*want, f *rules.Finding) bool {
	for _, w := range wants {
		if !w.met && w.rule == f.Rule.Name && w.outcome == f.Outcome.String() && w.path == f.At.Path() && w.line == f.At.Line() && strings.Contains(f.Says, w.text) {
			w.met = true
			return true
		}
	}
	return false
}

func wantsIn(t *testing.T, tree memory) []*want {
	var out []*want
	for path, text := range tree.files {
		for i, line := range strings.Split(text, "\n") {
			for _, m := range wantComment.FindAllStringSubmatch(line, -1) {
				out = append(out, &want{path: path, line: i + 1, rule: m[1], outcome: m[2], text: m[3]})
			}
			if strings.Contains(line, "# want") && !wantComment.MatchString(line) {
				t.Errorf("%s line %d: a want that cannot be read: %s", path, i+1, line)
			}
		}
	}
	return out
}

func findings(t *testing.T, tree source.Tree, today unit.Date) []*rules.Finding {
	firm, err := rules.Load(tree, rules.Options{Today: today})
	if err != nil {
		t.Fatal(err)
	}
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	out := res.Workspace
	for _, p := range res.Plans {
		out = append(out, p.Findings...)
	}
	return out
}

func today(t testing.TB, head string) unit.Date {
	day := "2026-12-01"
	for _, line := range strings.Split(head, "\n") {
		if d, ok := strings.CutPrefix(line, "today: "); ok {
			day = strings.TrimSpace(d)
		}
	}
	d, err := unit.ParseDate(day)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// memory is a tree in memory.
type memory struct{ files map[string]string }

func (m memory) Name() string { return "worktree" }

func (m memory) Files() ([]source.Entry, error) {
	var out []source.Entry
	for path := range m.files {
		out = append(out, source.Entry{Path: path})
	}
	sort.Slice(out, func(i, j int) bool { return out[i].Path < out[j].Path })
	return out, nil
}

func (m memory) Read(e source.Entry) ([]byte, error) { return []byte(m.files[e.Path]), nil }

func files(t *testing.T, dir string) map[string]string {
	out := map[string]string{}
	err := filepath.WalkDir(dir, func(path string, d os.DirEntry, err error) error {
		if err != nil || d.IsDir() {
			return err
		}
		text, err := os.ReadFile(path)
		rel, _ := filepath.Rel(dir, path)
		out[filepath.ToSlash(rel)] = string(text)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return out
}
