package bom

import (
	"cmp"
	"iter"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Allocation says which goods are kept for which job, and what is short: the shelf
// as it is now and what was ordered, shared out over all open jobs. What could be
// bought is not in it.
type Allocation struct {
	Today    unit.Date
	Demands  []*Demand // all jobs, in their turn
	Claims   []*Claim  // in the turn of their jobs, then by part
	Broken   []Broken  // reserves that keep nothing
	premises *catalog.Premises
	stock    *catalog.Stock
	house    *House

	crews   map[string][]string // shelves of a crew, in its order
	byPart  map[string][]*Supply
	claimed map[string][]*Claim // by part, in turn
	ofJob   map[string][]*Claim
}

// Broken is a reserve of a plan that does not keep what it names.
type Broken struct {
	Demand  *Demand
	Reserve *Reserve
	Why     string // "its day has passed"
	Expired bool
}

// Allocate shares the stock out over the demands of all jobs. Who goes first: what
// was issued; what a plan reserves; what an order line was bought for; then jobs
// under construction, by date, by name. No job is short for the sake of one that
// comes after it, and none that could be served without taking from those before.
func Allocate(demands []*Demand, stock *catalog.Stock, premises *catalog.Premises, house *House) *Allocation {
	a := &allocator{
		Allocation: &Allocation{Today: stock.Today, premises: premises, stock: stock, house: house,
			crews: map[string][]string{}, byPart: map[string][]*Supply{}, claimed: map[string][]*Claim{}, ofJob: map[string][]*Claim{}},
		today: stock.Today,
	}
	a.Demands = slices.Clone(demands)
	slices.SortStableFunc(a.Demands, a.turn)
	a.Claims = a.claims()
	a.supplies()
	var parts []string
	for _, c := range a.Claims {
		id := c.Part().ID
		if a.claimed[id] == nil {
			parts = append(parts, id)
		}
		a.claimed[id] = append(a.claimed[id], c)
		a.ofJob[c.Job()] = append(a.ofJob[c.Job()], c)
	}
	slices.Sort(parts)
	reserves := a.reserves()
	for _, id := range parts {
		claims := a.claimed[id]
		if claims[0].Part().CutStock() {
			a.cutStock(claims, a.byPart[id], reserves[id])
		} else {
			a.counted(claims, a.byPart[id], reserves[id])
		}
	}
	a.breakUnkept(reserves)
	return a.Allocation
}

// allocator is an allocation while it is being made.
type allocator struct {
	*Allocation
	today unit.Date
}

func (a *allocator) calendar() *catalog.Calendar { return &a.premises.Calendar }

// Supplies lists where a part comes from, what is here first.
func (a *Allocation) Supplies(part string) []*Supply { return a.byPart[part] }

// Parts lists, by ID, all parts that are on hand, on order or claimed.
func (a *Allocation) Parts() []string {
	var out []string
	for id := range a.byPart {
		out = append(out, id)
	}
	for id := range a.claimed {
		if a.byPart[id] == nil {
			out = append(out, id)
		}
	}
	slices.Sort(out)
	return out
}

// ClaimsOn lists the claims on a part in their turn.
func (a *Allocation) ClaimsOn(part string) []*Claim { return a.claimed[part] }

// ClaimsOf lists the claims of a job by part.
func (a *Allocation) ClaimsOf(job string) []*Claim { return a.ofJob[job] }

// Stock is what was shared out.
func (a *Allocation) Stock() *catalog.Stock { return a.stock }

// HeldBy lists, in their turn, the claims of other jobs that hold goods which would
// suit a claim.
func (a *Allocation) HeldBy(c *Claim) iter.Seq[*Claim] {
	return func(yield func(*Claim) bool) {
		for _, other := range a.claimed[c.Part().ID] {
			suits := func(h Hold) bool { return a.reach(h.Supply, c.Demand, c.Needed) > 0 }
			if other.Job() != c.Job() && slices.ContainsFunc(other.Held, suits) && !yield(other) {
				return
			}
		}
	}
}

// kept is a reserve that still holds, with the claim it is for.
type kept struct {
	*Reserve
	demand *Demand
	claim  *Claim // nil where the job claims nothing of the part
	used   bool
}

// reserves lists the reserves by part, in the turn of their jobs. Those that can
// hold nothing are noted at once.
func (a *allocator) reserves() map[string][]*kept {
	out := map[string][]*kept{}
	for _, d := range a.Demands {
		if !d.Claims() {
			continue
		}
		for i := range d.Reserves {
			r := &d.Reserves[i]
			part, why := a.reserved(r)
			expired := r.Until.Set && r.Until.V.Before(a.today)
			if expired {
				why = "its day, " + r.Until.V.String() + ", has passed"
			}
			if why != "" {
				a.Broken = append(a.Broken, Broken{d, r, why, expired})
				continue
			}
			k := &kept{Reserve: r, demand: d}
			for _, c := range a.ofJob[d.Job] {
				if c.Part().ID == part {
					k.claim = c
				}
			}
			out[part] = append(out[part], k)
		}
	}
	return out
}

// reserved is the part that a reserve is about, or why it can keep nothing.
func (a *allocator) reserved(r *Reserve) (part, why string) {
	if !r.Tag.Set {
		return r.Part.V, ""
	}
	switch t := a.stock.Tag(r.Tag.V); {
	case t == nil:
		return "", "no sheet has read a piece with the tag " + r.Tag.V
	case t.Where == "":
		return "", "the piece " + t.ID + " lies on no shelf any more"
	case t.Kind == "quarantine" || t.Kind == "":
		return "", "the piece " + t.ID + " lies at " + t.Where + ", from where nothing is given to a job"
	default:
		return t.Part, ""
	}
}

// breakUnkept notes the reserves that kept nothing. One whose job has all it needs
// of the part was kept until then and is no fault.
func (a *allocator) breakUnkept(byPart map[string][]*kept) {
	for _, list := range byPart {
		for _, k := range list {
			switch {
			case k.used || k.claim == nil && a.served(k):
			case k.claim == nil:
				a.Broken = append(a.Broken, Broken{k.demand, k.Reserve, "the job takes nothing of it", false})
			default:
				a.Broken = append(a.Broken, Broken{k.demand, k.Reserve, "what it names is not there for this job", false})
			}
		}
	}
	slices.SortFunc(a.Broken, func(x, y Broken) int {
		return cmp.Or(strings.Compare(x.Demand.Path, y.Demand.Path), cmp.Compare(x.Reserve.At.From, y.Reserve.At.From))
	})
}

// served reports a reserve on a part that the job takes and was given already.
func (a *allocator) served(k *kept) bool {
	part := k.Reserve.Part.V
	if t := a.stock.Tag(k.Tag.V); k.Tag.Set && t != nil {
		part = t.Part
	}
	return k.demand.Need(part) != nil
}
