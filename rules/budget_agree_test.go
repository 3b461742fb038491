package rules_test

import (
	"context"
	"maps"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/source"
	"driploop/rules"
)

// A budget and an inspection read the same plans and must say the same of each
// limit: over all cases of all rules, and over the demo. What only the budget leaves
// unassessed is said by another rule there: that the amplifier is not connected, or
// that an antenna does not cover the band.
func TestBudgetAgreesWithInspection(t *testing.T) {
	base := files(t, filepath.Join(casesDir, "base"))
	names, err := filepath.Glob(filepath.Join(casesDir, "*", "*.txtar"))
	if err != nil {
		t.Fatal(err)
	}
	held := 0
	for _, name := range names {
		archive, err := txtar.ParseFile(name)
		if err != nil {
			t.Fatal(err)
		}
		tree := memory{files: maps.Clone(base)}
		for _, f := range archive.Files {
			tree.files[f.Name] = string(f.Data)
		}
		held += agree(t, strings.TrimPrefix(name, casesDir+"/"), tree, string(archive.Comment))
	}
	demo, err := source.Disk("../testdata/saltmarsh")
	if err != nil {
		t.Fatal(err)
	}
	held += agree(t, "saltmarsh", demo, "")
	t.Logf("%d limits of budgets agree with findings, or their absence", held)
	if held < 500 {
		t.Errorf("that is too few to say that both agree")
	}
}

// budgetRules are the rules whose limits a budget shows.
var budgetRules = []string{"gain/amplifier", "gain/profile", "gain/uplink-power", "gain/downlink-power",
	"gain/uplink-eirp", "gain/downlink-eirp", "gain/system", "gain/noise", "gain/radio-eirp"}

// agree compares all plans of a tree, and counts the limits that were held.
func agree(t *testing.T, name string, tree source.Tree, head string) (held int) {
	firm, err := rules.Load(tree, rules.Options{Today: today(t, head)})
	if err != nil {
		return 0 // a case of a workspace that cannot be read
	}
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	for i, p := range res.Plans {
		c, broken := firm.Case(firm.PlanFiles[i])
		if broken || c.Stage() == "cancelled" {
			continue
		}
		b := c.Budget()
		shown, open := limitsShown(b)
		found, unknown := limitsFound(p.Findings)
		if !maps.Equal(shown, found) {
			t.Errorf("%s, %s: the budget shows %v, the findings are %v", name, p.Job, slices.Sorted(maps.Keys(shown)), slices.Sorted(maps.Keys(found)))
		}
		for rule := range unknown {
			if !open[rule] && len(b.Notices()) == 0 {
				t.Errorf("%s, %s: %s is not assessed, and the budget does not say so", name, p.Job, rule)
			}
		}
		for rule := range open {
			if !unknown[rule] && !slices.ContainsFunc(p.Findings, stands) {
				t.Errorf("%s, %s: %s is not assessed in the budget, and no finding says why", name, p.Job, rule)
			}
		}
		for _, x := range b.Bands {
			held += len(x.Limits)
		}
	}
	return held
}

// stands reports a finding that says that something is wrong or missing.
func stands(f *rules.Finding) bool { return f.Outcome == rules.Fails || f.Outcome == rules.Unknown }

// limitsShown are the limits of a budget that do not hold, by rule, outcome and band,
// and the rules of those that are not assessed.
func limitsShown(b *rules.Budget) (shown, open map[string]bool) {
	shown, open = map[string]bool{}, map[string]bool{}
	for _, x := range b.Bands {
		for _, l := range x.Limits {
			switch l.Outcome {
			case "holds":
			case "unknown":
				open[l.Rule] = true
			default:
				shown[l.Rule+" "+l.Outcome+" "+x.Band] = true
			}
		}
	}
	return shown, open
}

func limitsFound(all []*rules.Finding) (found, unknown map[string]bool) {
	found, unknown = map[string]bool{}, map[string]bool{}
	for _, f := range all {
		switch {
		case !slices.Contains(budgetRules, f.Rule.Name) || f.Outcome == rules.Advice && f.Band == "":
			// not about a limit in a band
		case f.Outcome == rules.Unknown:
			unknown[f.Rule.Name] = true
		default:
			found[f.Rule.Name+" "+f.Outcome.String()+" "+f.Band] = true
		}
	}
	return found, unknown
}
