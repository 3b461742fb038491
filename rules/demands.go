package rules

import (
	"context"

	"driploop/bom"
	"driploop/catalog/source"
)

// Demands is what all plans of a workspace take.
type Demands struct {
	All    []*bom.Demand  // in the order of the files
	Gaps   []DemandGap    // what could not be counted
	Broken []source.Entry // plan files that cannot be read whole; nothing of them is counted
}

// DemandGap is something that a claiming job implies and that could not be counted.
type DemandGap struct {
	Job string
	bom.Gap
}

// Demands reads every plan and keeps what it takes, and no more of it.
func (f *Firm) Demands(ctx context.Context) (*Demands, error) {
	demands := make([]*bom.Demand, len(f.PlanFiles))
	gaps := make([][]bom.Gap, len(f.PlanFiles))
	err := eachSideBySide(ctx, len(f.PlanFiles), func(i int) {
		c, broken := f.Case(f.PlanFiles[i])
		if broken {
			return
		}
		t := c.Graph.Takeoff(&f.Workspace.House.House)
		demands[i] = bom.DemandOf(c.Plan, t)
		if demands[i].Claims() {
			gaps[i] = t.Gaps
		}
		moveOff(c.Plan.File, gapPlaces(gaps[i], demands[i].Places()))
	})
	if err != nil {
		return nil, err
	}
	out := &Demands{}
	for i, d := range demands {
		if d == nil {
			out.Broken = append(out.Broken, f.PlanFiles[i])
			continue
		}
		out.All = append(out.All, d)
		for _, x := range gaps[i] {
			out.Gaps = append(out.Gaps, DemandGap{d.Job, x})
		}
	}
	return out, nil
}

func gapPlaces(gaps []bom.Gap, places []*source.Place) []*source.Place {
	for i := range gaps {
		places = append(places, &gaps[i].At)
	}
	return places
}

// Allocate shares the stock out over the demands.
func (f *Firm) Allocate(d *Demands) *bom.Allocation {
	return bom.Allocate(d.All, f.Stock, &f.Workspace.Premises, &f.Workspace.House.House)
}

// Find is the demand of a job, or nil.
func (d *Demands) Find(job string) *bom.Demand {
	for _, x := range d.All {
		if x.Job == job {
			return x
		}
	}
	return nil
}
