package rules

import (
	"fmt"

	"driploop/bom"
)

var stockStranded = &Rule{
	Name:   "stock/stranded",
	Title:  "Nothing stays out on a job that is not built",
	Why:    "the goods lie in a van or at the client's, and the books have them with a job that will not use them",
	Basis:  []Basis{ledger},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, d := range s.Demands {
			if d.Stage != "cancelled" && d.Stage != "draft" {
				continue
			}
			for _, is := range s.Stock.IssuesOf(d.Job) {
				if is.Net.Each <= 0 && is.Net.Length <= 0 {
					continue
				}
				f := r.Fails(d.At, "part."+is.Part, "the job is %s, and still out on it: %s", stageWords(d.Stage), amountOf(is.Net, is.Part)).
					Then("bring them back; what was opened or registered goes to a quarantine shelf").With(stockFigure("out", is.Net, is.Net.Length > 0))
				f.Part = is.Part
				for _, row := range is.Rows {
					f.Beside(row.At, "the row")
				}
			}
		}
	},
}

func stageWords(stage string) string {
	if stage == "draft" {
		return "a draft"
	}
	return stage
}

var stockClaimed = &Rule{
	Name:    "stock/claimed",
	Title:   "What a plan keeps for itself is kept",
	Why:     "a printed pick list is no longer true, or a job that nobody works on keeps goods from those that do",
	Basis:   []Basis{practice("a reserve holds until its day and for what lies there; a job whose date is long past goes last"), house("claim_days")},
	Weight:  Punch,
	Lighter: "a reserve that keeps nothing is a note before its day has passed",
	CheckShelf: func(s *Shelf, r *Report) {
		for _, b := range s.Allocation.Broken {
			f := r.Fails(b.Reserve.At, "job", "the reserve of %s keeps nothing: %s", reserved(b.Reserve), b.Why)
			if b.Expired {
				f.Then("take the reserve out, or give it a new day").Over("days_past", float64(b.Reserve.Until.V.DaysUntil(s.Today)), "limit_days", 0)
			} else {
				f.Then("take the reserve out, or name what is there").Lighter(Note)
			}
		}
		for _, d := range s.Demands {
			if !d.Claims() || !d.Lapsed(&s.Workspace.House.House, s.Today) {
				continue
			}
			past, limit := d.On.DaysUntil(s.Today), s.Workspace.House.ClaimDays.Or(30)
			r.Fails(d.At, "job", "the install was to be on %s, %s ago; its claims now go after those of all other jobs", d.On, days(past)).
				Then("give the job a new date, close it as built, or cancel it").Over("days_past", float64(past), "claim_days", float64(limit))
		}
	},
}

// reserved names what a reserve is about.
func reserved(r *bom.Reserve) string {
	if r.Tag.Set {
		if r.Cable.Set {
			return fmt.Sprintf("%s for %s", r.Tag.V, r.Cable.V)
		}
		return r.Tag.V
	}
	if r.Qty.Set {
		return fmt.Sprintf("%d %s", r.Qty.V, r.Part.V)
	}
	return r.Part.V
}
