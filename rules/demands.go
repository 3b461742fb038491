package rules

import (
	"context"
	"slices"

	"driploop/bom"
	"driploop/catalog/source"
)

// Demands is what all plans of a workspace take.
type Demands struct {
	All    []*bom.Demand  // in the order of the files
	Broken []source.Entry // plan files that cannot be read whole; nothing of them is counted
}

// Demands reads every plan and keeps what it takes, and no more of it.
func (f *Firm) Demands(ctx context.Context) (*Demands, error) {
	kept, err := f.demandsOf(ctx, f.PlanFiles)
	if err != nil {
		return nil, err
	}
	out := &Demands{}
	for i, k := range kept {
		if k.demand == nil {
			out.Broken = append(out.Broken, f.PlanFiles[i])
			continue
		}
		out.All = append(out.All, k.demand)
	}
	return out, nil
}

// demandsOf reads plans for what they take; of one that cannot be read whole there
// is no demand.
func (f *Firm) demandsOf(ctx context.Context, plans []source.Entry) ([]shelfPlan, error) {
	kept := make([]shelfPlan, len(plans))
	err := f.eachPlan(ctx, len(plans), func(i int) {
		if c, broken := f.Case(plans[i]); !broken {
			kept[i] = c.forShelf()
			moveOff(c.Plan.File, kept[i].places())
		}
	})
	return kept, err
}

// otherDemands is what the plans that are not being inspected take: the shelf is
// shared out over all. Of those that cannot be read whole nobody knows what they take.
func (f *Firm) otherDemands(ctx context.Context, plans []source.Entry) (kept []shelfPlan, unread []string, err error) {
	if f.noShelf || len(plans) == len(f.PlanFiles) {
		return nil, nil, nil
	}
	at := map[string]bool{}
	for _, e := range plans {
		at[e.Path] = true
	}
	rest := slices.DeleteFunc(slices.Clone(f.PlanFiles), func(e source.Entry) bool { return at[e.Path] })
	if kept, err = f.demandsOf(ctx, rest); err != nil {
		return nil, nil, err
	}
	for i, k := range kept {
		if k.demand == nil {
			unread = append(unread, rest[i].Path)
		}
	}
	return kept, unread, nil
}

// Allocate shares the stock out over the demands.
func (f *Firm) Allocate(d *Demands) *bom.Allocation {
	f.doing(sharingOut)
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
