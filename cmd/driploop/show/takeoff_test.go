package show

import (
	"strings"
	"testing"

	"driploop/bom"
)

// The quantities of the whole demo fit a page, wide or narrow, and no job is lost.
func TestTakeoffFits(t *testing.T) {
	firm := demo(t)
	var all []bom.PlanTakeoff
	for _, e := range firm.PlanFiles {
		cs, _ := firm.Case(e)
		all = append(all, bom.PlanTakeoff{Job: bom.JobOf(e.Path), Takeoff: cs.Graph.Takeoff(&firm.Workspace.House.House)})
	}
	out := &Takeoff{Rows: bom.Totals(all)}
	for _, width := range []int{40, 60, 80, 100} {
		b, err := out.Text(Page{Width: width})
		if err != nil {
			t.Fatal(err)
		}
		if wide := tooWide(string(b), width); wide != "" {
			t.Errorf("at %d columns: %q", width, wide)
		}
		for _, p := range all {
			if !strings.Contains(string(b), p.Job) {
				t.Errorf("at %d columns %s is missing", width, p.Job)
			}
		}
	}
}
