package rules_test

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"
)

// The cases say what a rule reports; this says what it weighs where the weight
// depends on more than the rule.
func TestWeightsOfGroundAndPaper(t *testing.T) {
	for _, c := range []struct{ file, rule, stage, outcome, weight string }{
		{"ground-arrestor/bad", "ground/arrestor", "review", "fails", "hold"},
		{"ground-arrestor/bad-block", "ground/arrestor", "construction", "fails", "punch"},
		{"ground-arrestor/boundary-exempt-inside", "ground/arrestor", "construction", "advice", "note"},
		{"ground-arrestor/missing", "ground/arrestor", "review", "unknown", "punch"},
		{"ground-arrestor/missing", "ground/arrestor", "construction", "unknown", "hold"},
		{"ground-bond/bad-bar", "ground/bond", "draft", "fails", "hold"},
		{"ground-bond/good-exempt", "ground/bond", "construction", "advice", "note"},
		{"ground-conductor/bad-raceway", "ground/conductor", "review", "fails", "hold"},
		{"ground-length/bad", "ground/length", "construction", "fails", "punch"},
		{"ground-length/missing", "ground/length", "construction", "unknown", "note"},
		{"paper-consent/bad-missing", "paper/consent", "draft", "fails", "punch"},
		{"paper-consent/bad-missing", "paper/consent", "review", "fails", "punch"},
		{"paper-consent/bad-missing", "paper/consent", "construction", "fails", "hold"},
		{"paper-consent/bad-missing", "paper/consent", "as-built", "fails", "hold"},
		{"paper-consent/missing", "paper/consent", "review", "unknown", "punch"},
		{"paper-consent/missing", "paper/consent", "construction", "unknown", "hold"},
		{"paper-registration/bad-missing", "paper/registration", "construction", "fails", "hold"},
		{"paper-permit/bad", "paper/permit", "review", "fails", "punch"},
		{"paper-permit/bad-refused", "paper/permit", "construction", "fails", "hold"},
		{"paper-personal/bad", "paper/personal", "review", "fails", "punch"},
		{"paper-personal/bad", "paper/personal", "construction", "fails", "hold"},
		{"paper-height/bad", "paper/height", "draft", "fails", "hold"},
		{"paper-waiver/bad-expired", "paper/waiver", "construction", "fails", "punch"},
	} {
		t.Run(c.file+"/"+c.stage, func(t *testing.T) {
			archive, err := txtar.ParseFile(filepath.Join(casesDir, c.file+".txtar"))
			if err != nil {
				t.Fatal(err)
			}
			tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
			for _, f := range archive.Files {
				text := string(f.Data)
				for _, was := range []string{"review", "construction"} {
					text = strings.Replace(text, `"`+was+`"`, `"`+c.stage+`"`, 1)
				}
				tree.files[f.Name] = text
			}
			found := false
			for _, f := range findings(t, tree, today(t, string(archive.Comment))) {
				if f.Rule.Name != c.rule {
					continue
				}
				found = true
				if f.Outcome.String() != c.outcome || f.Weight.String() != c.weight {
					t.Errorf("%s %s weighs %s, want %s %s: %s", c.rule, f.Outcome, f.Weight, c.outcome, c.weight, f.Says)
				}
			}
			if !found {
				t.Errorf("%s says nothing", c.rule)
			}
		})
	}
}
