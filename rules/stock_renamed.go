package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
)

// renamedJobs reports a plan that was given nothing and takes all that is out on a job
// without a plan. A newer count makes the rows of that job old news for the shelf, and
// not for the plan: under its new name it claims, and has bought, everything again. A
// job of one part, or whose last goods went out long ago, is too little of a sign.
func (s *Shelf) renamedJobs(r *Report) {
	var jobs []string
	for i := range s.Stock.Issues {
		if job := s.Stock.Issues[i].Job; len(s.plansOf(job)) == 0 && !slices.Contains(jobs, job) {
			jobs = append(jobs, job)
		}
	}
	for _, job := range jobs {
		out := s.outOn(job)
		if len(out) < 2 {
			continue
		}
		for _, d := range s.Demands {
			if !d.Claims() || len(s.Stock.IssuesOf(d.Job)) > 0 || !takesAll(d, out) {
				continue
			}
			f := r.Fails(d.At, "job", "all that is out on %s, a job without a plan, %d parts of it, is what this plan takes and was not given: it claims them a second time", job, len(out)).
				Then("where the plan was renamed, write %s in its sheets as %s", job, d.Job).Lighter(Punch)
			for _, is := range out {
				f.Beside(is.Rows[0].At, "the row of %s", is.Part)
			}
		}
	}
}

// outOn lists what a job has, of which something moved not longer ago than a count is
// good for.
func (s *Shelf) outOn(job string) []catalog.Issue {
	var out []catalog.Issue
	recent := false
	for _, is := range s.Stock.IssuesOf(job) {
		if is.Net.Each <= 0 && is.Net.Length <= 0 {
			continue
		}
		out = append(out, is)
		for i := range is.Rows {
			recent = recent || is.Rows[i].Day().DaysUntil(s.Today) <= s.Workspace.House.CountDays.Or(defaultCountDays)
		}
	}
	if !recent {
		return nil
	}
	return out
}

// takesAll reports a job that takes at least so much of every part. Of cut stock the
// part is enough: what was cut is seldom to the millimetre what was planned.
func takesAll(d *bom.Demand, out []catalog.Issue) bool {
	for _, is := range out {
		at := slices.IndexFunc(d.Needs, func(n bom.Need) bool { return n.Part.ID == is.Part })
		if at < 0 || int64(d.Needs[at].Each) < is.Net.Each {
			return false
		}
	}
	return true
}
