package bom

import (
	"sort"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// PlanTakeoff is the takeoff of one job.
type PlanTakeoff struct {
	Job string
	*Takeoff
}

// Total is what several jobs take of one part together.
type Total struct {
	Part   *catalog.Part
	Each   int     // of what is counted; consumables rounded over all jobs
	Length unit.MM // of cut stock, allowances included
	Bare   unit.MM // as installed
	Jobs   []Share
}

// Share is what one job takes of a part. Shares of a consumable are rounded job by
// job and may add up to more than the total.
type Share struct {
	Job    string
	Each   int
	Length unit.MM
	Pieces []Piece
}

// Totals adds up takeoffs, by part ID; consumables are rounded up to packages
// once, over all of them.
func Totals(plans []PlanTakeoff) []*Total {
	byID := map[string]*Total{}
	uses := map[string]float64{}
	for _, p := range plans {
		for _, q := range p.Rows {
			t := byID[q.Part.ID]
			if t == nil {
				t = &Total{Part: q.Part}
				byID[q.Part.ID] = t
			}
			t.Each += q.Each - q.packed()
			t.Length += q.Length
			t.Bare += q.Bare
			uses[q.Part.ID] += q.Uses
			t.Jobs = append(t.Jobs, Share{p.Job, q.Each, q.Length, q.Pieces})
		}
	}
	out := make([]*Total, 0, len(byID))
	for id, t := range byID {
		if uses[id] > 0 {
			t.Each += Packages(t.Part, uses[id])
		}
		out = append(out, t)
	}
	sort.Slice(out, func(i, j int) bool { return out[i].Part.ID < out[j].Part.ID })
	return out
}

// packed is how many of the packages come from uses.
func (q *Quantity) packed() int {
	if q.Uses == 0 {
		return 0
	}
	return Packages(q.Part, q.Uses)
}
