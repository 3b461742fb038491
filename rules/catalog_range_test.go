package rules_test

import (
	"testing"

	"driploop/rules"
)

func TestAPortThatIsNotThereIsSuggested(t *testing.T) {
	for _, c := range []struct{ ports, to, do string }{
		{port("in", "N female", "") + "\n" + port("out1", "N female", ""), "out2", "did you mean out1?"},
		{port("in", "N female", "") + "\n" + port("out1", "N female", ""), "antenna", "its ports are in, out1"},
		{"", "antenna", "describe its ports"},
	} {
		var said []string
		tree := memory{map[string]string{
			rules.WorkspaceFile: "[workspace]\nname = \"x\"\n",
			"catalog/own.toml":  part("S", "splitter", c.ports, "path = [{ from = \"in\", to = \""+c.to+"\", loss_db = 3.4 }]"),
		}}
		for _, f := range findings(t, tree, today(t, "")) {
			if f.Rule.Name != "catalog/range" {
				continue
			}
			if f.Outcome != rules.Fails || f.Part != "S" || f.Weight != rules.Hold {
				t.Errorf("%s: %s %s on part %q", f.Says, f.Outcome, f.Weight, f.Part)
			}
			said = append(said, f.Do)
		}
		if len(said) == 0 || said[len(said)-1] != c.do {
			t.Errorf("for %s it says %q, not %q", c.to, said, c.do)
		}
	}
}
