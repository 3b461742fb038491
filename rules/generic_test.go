package rules_test

import (
	"testing"

	"driploop/rules"
)

// The generic catalog is held to the same rules as a firm's own: its files are read
// as the catalog of a workspace.
func TestGenericCatalogIsInOrder(t *testing.T) {
	tree := memory{map[string]string{rules.WorkspaceFile: "[workspace]\nname = \"generic catalog\"\n"}}
	for name, text := range files(t, "../catalog/generic") {
		tree.files["catalog/"+name] = text
	}
	if len(tree.files) < 10 {
		t.Fatalf("only %d files were found", len(tree.files))
	}
	for _, f := range findings(t, tree, today(t, "")) {
		switch f.Rule.Area() {
		case "file", "part", "catalog":
			t.Errorf("%s line %d: %s %s %s", f.At.Path(), f.At.Line(), f.Rule.Name, f.Outcome, f.Says)
		}
	}
}
