package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var stockUnknown = &Rule{
	Name:    "stock/unknown",
	Title:   "Every part, shelf, order, tag and job of a stock row exists",
	Why:     "goods on a shelf that nobody knows, or given to a job that is not there, are lost to all plans",
	Basis:   []Basis{ledger},
	Weight:  Hold,
	Lighter: "a plan that seems to be a job under a new name is a punch",
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the other row", catalog.NoteUnknown) {
			s.stand(n.row, func(at source.Place, on string) *Finding {
				return r.Fails(at, on, "%s", leadsNowhere(n.What, n.Name)).Then("%s", s.leadsTo(n.What, n.Name))
			})
		}
		s.unknownJobs(r)
		s.renamedJobs(r)
	},
}

func leadsNowhere(what, name string) string {
	switch what {
	case "part":
		return "no catalog has the part " + source.Quote(name)
	case "tag":
		return "no reading says what is on the tag " + source.Quote(name)
	case "job":
		return "no plan is the job " + source.Quote(name)
	}
	return "there is no " + what + " " + source.Quote(name)
}

// leadsTo says what to do about a name that leads nowhere: the nearest of its sort.
func (s *Shelf) leadsTo(what, name string) string {
	var known []string
	otherwise := "correct the name"
	switch what {
	case "part":
		return s.suggest(name, "add it to the catalog, or correct the name")
	case "shelf":
		known, otherwise = s.Workspace.Premises.ShelfNames(), "describe it in driploop.toml as [shelf."+name+"], or correct the name"
	case "order":
		for _, o := range s.Stock.Open {
			known = append(known, o.Order.ID)
		}
		otherwise = "add its file to the orders, or correct the name"
	case "tag":
		for _, t := range s.Stock.Tags {
			known = append(known, t.ID)
		}
		otherwise = "write down what is on it as a reading, or correct the name"
	case "job":
		for _, e := range s.PlanFiles {
			known = append(known, bom.JobOf(e.Path))
		}
		otherwise = "the file's name is the job's ID: where the plan was renamed, void the sheet and write it again for the new job"
	}
	if near := source.Nearest(name, known); near != "" {
		return "did you mean " + near + "?"
	}
	return otherwise
}

// unknownJobs reports goods that went to, or came from, a job that has no plan, one
// finding for each sheet and job. What a newer count has settled is old news.
func (s *Shelf) unknownJobs(r *Report) {
	plans := map[string]bool{}
	for _, e := range s.PlanFiles {
		plans[bom.JobOf(e.Path)] = true
	}
	type once struct{ path, job string }
	rows, order := map[once]*stockRow{}, []once{}
	note := func(job, part string, at source.Place) {
		if plans[job] {
			return
		}
		key := once{at.Path(), job}
		w := rows[key]
		if w == nil {
			w = &stockRow{at: at, beside: "another row for the job"}
			rows[key], order = w, append(order, key)
		}
		w.add(at, part)
	}
	for _, is := range s.Stock.Issues {
		for _, row := range is.Rows {
			if !row.Settled {
				note(is.Job, is.Part, row.At)
			}
		}
	}
	for _, o := range s.Stock.Open {
		for _, j := range o.Line.Jobs.V {
			if !o.Complete {
				note(j.V, o.Part, j.At)
			}
		}
	}
	for _, key := range order {
		s.stand(*rows[key], func(at source.Place, on string) *Finding {
			return r.Fails(at, on, "%s", leadsNowhere("job", key.job)).Then("%s", s.leadsTo("job", key.job))
		})
	}
}

// add adds a row of the same file; the first of them is the one reported at.
func (w *stockRow) add(at source.Place, part string) {
	w.parts = append(w.parts, part)
	switch {
	case at == w.at:
	case at.Before(w.at):
		w.also = append(w.also, w.at)
		w.at = at
	default:
		w.also = append(w.also, at)
	}
}
