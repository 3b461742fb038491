package rules_test

import (
	"fmt"
	"os"
	"strings"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules"

	"github.com/google/go-cmp/cmp"
)

// What the stock rules say of the story of testdata/story, on the stock files and on
// the plans.
func TestStoryFindings(t *testing.T) {
	const dir = "../testdata/story"
	tree := memory{files: files(t, dir)}
	for path := range tree.files {
		if !strings.HasSuffix(path, ".toml") {
			delete(tree.files, path)
		}
	}
	var b strings.Builder
	for _, f := range findings(t, tree, unit.Date{Year: 2026, Month: 12, Day: 1}) {
		switch f.Rule.Area() {
		case "file":
			t.Errorf("%s:%d %s", f.At.Path(), f.At.Line(), f.Says)
		case "stock":
			if ofTheLedger(f.Rule) {
				fmt.Fprintf(&b, "%s:%d %s %s: %s\n", strings.TrimSuffix(f.At.Path(), ".toml"), f.At.Line(), f.Rule.Name, f.Weight, f.Says)
			}
		}
	}
	want, err := os.ReadFile(dir + "/findings.txt")
	if err != nil {
		t.Fatal(err)
	}
	if diff := cmp.Diff(string(want), b.String()); diff != "" {
		t.Errorf("the findings differ (− wanted, + got):\n%s", diff)
	}
}

// ofTheLedger reports a rule on what the ledger itself says; what plans claim of it
// is another matter.
func ofTheLedger(r *rules.Rule) bool {
	switch _, name, _ := strings.Cut(r.Name, "/"); name {
	case "below", "tag", "counted-twice", "unknown", "over", "overdue", "jump", "same-day", "old", "future":
		return true
	}
	return false
}
