package rules_test

import (
	"context"
	"os"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

const demo = "../testdata/saltmarsh"

// demoPlans inspects the demo workspace on its day.
func demoPlans(t *testing.T) map[string]*rules.PlanResult {
	t.Helper()
	tree, err := source.Disk(demo)
	if err != nil {
		t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: unit.Date{Year: 2026, Month: 12, Day: 1}})
	if err != nil {
		t.Fatal(err)
	}
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]*rules.PlanResult{}
	for _, p := range res.Plans {
		out[p.Job] = p
	}
	return out
}

// told is a row of the demo's README: what a job is told by which rule.
type told struct{ job, rule, on string }

// readTold reads the tables under the README's headings; the table of faults has no
// column for the job.
func readTold(t *testing.T) (jobs map[string]string, rows []told) {
	t.Helper()
	text, err := os.ReadFile(demo + "/README.md")
	if err != nil {
		t.Fatal(err)
	}
	jobs = map[string]string{}
	heading := ""
	for _, line := range strings.Split(string(text), "\n") {
		if h, ok := strings.CutPrefix(line, "## "); ok {
			heading = h
		}
		if !strings.HasPrefix(line, "| `") {
			continue
		}
		var cells []string
		for _, c := range strings.Split(strings.Trim(line, "| "), " | ") {
			cells = append(cells, strings.Trim(c, "` "))
		}
		switch {
		case heading == "Jobs":
			jobs[cells[0]] = cells[2]
		case strings.HasPrefix(heading, "Left open"):
			rows = append(rows, told{cells[0], cells[1], cells[2]})
		case strings.HasPrefix(heading, "Seeded faults"):
			rows = append(rows, told{"heron-clinic", cells[0], cells[1]})
		}
	}
	return jobs, rows
}

// The demo's README lists its jobs and what each is told; the clinic has faults, no
// other job is held up, and a plan that is held up has each of its holds explained.
func TestDemoIsToldWhatItsReadmeSays(t *testing.T) {
	jobs, rows := readTold(t)
	plans := demoPlans(t)
	if len(jobs) != len(plans) || len(rows) < 40 {
		t.Errorf("the README lists %d jobs and %d findings; there are %d plans", len(jobs), len(rows), len(plans))
	}
	explained := map[told]bool{}
	for _, r := range rows {
		explained[r] = true
		if plans[r.job] == nil || !says(plans[r.job], r) {
			t.Errorf("%s: the README tells of %s on %s, the tool does not", r.job, r.rule, r.on)
		}
	}
	for job, p := range plans {
		if jobs[job] != p.Stage {
			t.Errorf("%s is at stage %s, the README says %q", job, p.Stage, jobs[job])
		}
		for _, f := range p.Findings {
			if f.Weight == rules.Hold && f.Waived == nil && (job != "heron-clinic" || !explained[told{job, f.Rule.Name, f.On}]) {
				t.Errorf("%s is held up by %s on %s: %s", job, f.Rule.Name, f.On, f.Says)
			}
		}
	}
}

func says(p *rules.PlanResult, r told) bool {
	for _, f := range p.Findings {
		if f.Rule.Name == r.rule && f.On == r.on {
			return true
		}
	}
	return false
}
