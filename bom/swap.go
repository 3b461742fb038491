package bom

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
)

// Swap is a substitute that a plan could take: one step of a part's instead, for all
// pieces of the part in the plan.
type Swap struct{ Job, From, To string }

// Put puts the substitute into a plan wherever it takes the other part. The graph is
// of the same plan as it stood: where a cable end is given as a face, it says which
// connector that came to.
func (s Swap) Put(p *Plan, g *Graph) {
	at := func(v *source.Val[string]) {
		if v.Set && v.V == s.From {
			v.V = s.To
		}
	}
	for i := range p.Devices {
		at(&p.Devices[i].Part)
	}
	for i := range p.Cables {
		at(&p.Cables[i].Part)
		for j := range p.Cables[i].Through.V {
			at(&p.Cables[i].Through.V[j])
		}
		s.ends(&p.Cables[i], g)
	}
	for i := range p.Data {
		at(&p.Data[i].Part)
	}
	for i := range p.Wires {
		at(&p.Wires[i].Part)
		at(&p.Wires[i].Fuse)
	}
	for i := range p.Bonds {
		at(&p.Bonds[i].Part)
	}
	for i := range p.Extras {
		at(&p.Extras[i].Part)
	}
}

// ends names the substitute at the ends of a cable that are made with the other part.
func (s Swap) ends(row *CableRow, g *Graph) {
	i := slices.IndexFunc(g.Cables, func(x *Cable) bool { return x.ID == row.ID })
	if i < 0 {
		return
	}
	x := g.Cables[i]
	for k, e := range x.Ends {
		if e.Fit == nil || e.Fit.ID != s.From {
			continue
		}
		if !row.Ends.Set {
			row.Ends = source.Val[[]source.Val[EndRow]]{V: make([]source.Val[EndRow], 2), At: row.At, Set: true}
			if x.Row.Ends.Set {
				copy(row.Ends.V, x.Row.Ends.V)
			}
		}
		if k < len(row.Ends.V) {
			row.Ends.V[k] = source.Val[EndRow]{V: EndRow{Part: s.To}, At: row.At, Set: true}
		}
	}
}

// Choice is a purchase that may go by substitutes.
type Choice struct {
	Demands []*Demand
	Swaps   []Swap // in the order in which they are tried
	// Replan is what a job takes with some of its swaps, all at once, or nil where its
	// plan does not stand up to the rules with them.
	Replan func(job string, swaps []Swap) *Demand
	Share  func([]*Demand) *Allocation
	Buy    func(*Allocation) *Purchase
}

// mostPurchases bounds how many purchases are made to compare substitutes.
const mostPurchases = 40

// Best buys with the plans as they stand, then takes substitutes one by one: each that
// makes no job later and either some job less late or the purchase cheaper, the best
// first. Total and Bound are for the plans with the substitutes that were taken.
func (c Choice) Best() (*Purchase, *Allocation) {
	a := c.Share(c.Demands)
	best := c.Buy(a)
	demands, left := c.Demands, mostPurchases
	var taken []Swap
	for {
		var better *Purchase
		var with []*Demand
		var swap Swap
		for _, s := range c.Swaps {
			if slices.Contains(taken, s) || !lacking(a, s) {
				continue
			}
			if left--; left < 0 {
				break
			}
			d := c.Replan(s.Job, append(of(s.Job, taken), s))
			if d == nil {
				continue
			}
			changed := replaced(demands, d)
			p := c.Buy(c.Share(changed))
			if gains(p, best) && (better == nil || gains(p, better)) {
				better, with, swap = p, changed, s
			}
		}
		if better == nil {
			best.Swaps = taken
			return best, a
		}
		best, demands, taken = better, with, append(taken, swap)
		a = c.Share(demands)
	}
}

// lacking reports a swap of something that its job is short of.
func lacking(a *Allocation, s Swap) bool {
	return slices.ContainsFunc(a.ClaimsOf(s.Job), func(c *Claim) bool { return c.Part().ID == s.From && c.IsShort() })
}

func of(job string, swaps []Swap) []Swap {
	var out []Swap
	for _, s := range swaps {
		if s.Job == job {
			out = append(out, s)
		}
	}
	return out
}

func replaced(demands []*Demand, d *Demand) []*Demand {
	out := slices.Clone(demands)
	for i := range out {
		if out[i].Job == d.Job {
			out[i] = d
		}
	}
	return out
}

// gains reports a purchase that makes no job later than another does and some job less
// late, or that costs less.
func gains(p, q *Purchase) bool {
	pl, ql := p.lateness(), q.lateness()
	less := false
	for job, n := range pl {
		if n > ql[job] {
			return false
		}
	}
	for job, n := range ql {
		less = less || pl[job] < n
	}
	return less || p.Total < q.Total
}

// lateness is how many parts each job gets too late, or not at all.
func (p *Purchase) lateness() map[string]int {
	out := map[string]int{}
	for _, r := range p.Rows {
		for _, l := range r.Late {
			out[l.Job] += len(r.Parts)
		}
	}
	for _, w := range p.Waiting {
		out[w.Job]++
	}
	for _, u := range p.Unsourced {
		for _, s := range u.Jobs {
			out[s.Job]++
		}
	}
	return out
}

// SwapsOf lists the substitutes, one step each, for what claims are short of. suits
// says whether the job could do with a part: its crew has the tools for it.
func SwapsOf(a *Allocation, look func(string) *catalog.Part, suits func(*Demand, *catalog.Part) bool) []Swap {
	var out []Swap
	for _, c := range a.Claims {
		if !c.IsShort() {
			continue
		}
		for _, id := range c.Part().Instead.V {
			if to := look(id.V); to != nil && to.ID != c.Part().ID && suits(c.Demand, to) {
				out = append(out, Swap{c.Job(), c.Part().ID, to.ID})
			}
		}
	}
	return out
}
