package bom

import (
	"cmp"
	"slices"
	"sort"

	"driploop/bom/cut"
	"driploop/catalog/unit"
)

// DefaultUsableRemnant is the length from which a leftover is kept where the house
// says nothing.
const DefaultUsableRemnant unit.MM = 3000

// shelfTries is how hard the allocation tries to open few reels and to leave little
// scrap. It runs with every inspection, over all open jobs; what is bought and cut in
// the end is planned with more.
const shelfTries = 300

// run is one piece that is to be cut, on its way to a reel.
type run struct {
	claim *Claim
	piece Piece
	on    []int // supplies it may be cut from
	all   []int // supplies it could be cut from, whatever is reserved
	near  []int // of on, those that are here, where the piece can do with them
	rank  int   // 0: pinned by a reserve, 1: by an order line, 2: any
}

// cutStock shares out a part that is kept by length. It is short by piece, not by
// metre.
func (a *allocator) cutStock(claims []*Claim, supplies []*Supply, reserves []*kept) {
	runs := a.runs(claims, supplies)
	a.reserveTags(runs, supplies, reserves)
	a.pegReels(runs, supplies)
	slices.SortStableFunc(runs, func(x, y *run) int { return cmp.Compare(x.rank, y.rank) })
	plan := a.nearest(runs, supplies)
	for i, at := range plan {
		r := runs[i]
		if at < 0 {
			r.claim.ShortLines = append(r.claim.ShortLines, r.piece)
			continue
		}
		if r.claim.Held == nil {
			r.claim.Held = make([]Hold, 0, len(r.claim.Pieces)) // most get all
		}
		r.claim.Held = append(r.claim.Held, Hold{Supply: supplies[at], Piece: r.piece})
		supplies[at].Free.Length -= r.piece.Length
	}
	for _, c := range claims {
		c.inPlanOrder()
	}
	a.lateReels(claims, supplies)
}

// nearest plans the runs so that as many as possible, the first in turn before the
// others, are cut from what is here and do not wait for a delivery. None goes short
// for it that would not be short otherwise.
func (a *allocator) nearest(runs []*run, supplies []*Supply) []int {
	best := a.planRuns(runs, supplies)
	waits := func(at int) bool { return at >= 0 && !supplies[at].Here() }
	if !slices.ContainsFunc(best, waits) {
		for i, r := range runs {
			if r.rank == 2 && best[i] >= 0 {
				r.near = slices.DeleteFunc(slices.Clone(r.on), waits)
			}
		}
		return best
	}
	for _, r := range runs {
		if r.rank == 2 {
			r.near = slices.DeleteFunc(slices.Clone(r.on), waits)
		}
	}
	var served []*run
	for i, at := range a.planRuns(runs, supplies) {
		if at >= 0 && runs[i].near != nil {
			served = append(served, runs[i])
		}
	}
	nears := make([][]int, len(served))
	for i, r := range served {
		nears[i] = r.near
	}
	// try lets the first n of those that can do with what is here do with it.
	try := func(n int) []int {
		for _, r := range runs {
			r.near = nil
		}
		for i := range n {
			served[i].near = nears[i]
		}
		return a.planRuns(runs, supplies)
	}
	n := sort.Search(len(served), func(n int) bool { return !sameShort(try(n+1), best) })
	if plan := try(n); sameShort(plan, best) {
		return plan
	}
	return try(0)
}

// sameShort reports two plans that leave the same runs short.
func sameShort(a, b []int) bool {
	for i := range a {
		if (a[i] < 0) != (b[i] < 0) {
			return false
		}
	}
	return true
}

// inPlanOrder puts the lines of a claim back into the order of its plan.
func (c *Claim) inPlanOrder() {
	at := func(p Piece) int {
		return slices.IndexFunc(c.Pieces, func(q Piece) bool { return q.Line == p.Line && q.At == p.At })
	}
	slices.SortStableFunc(c.Held, func(x, y Hold) int { return cmp.Compare(at(x.Piece), at(y.Piece)) })
	slices.SortStableFunc(c.ShortLines, func(x, y Piece) int { return cmp.Compare(at(x), at(y)) })
}

func (a *allocator) runs(claims []*Claim, supplies []*Supply) []*run {
	var out []*run
	for _, c := range claims {
		var on []int
		for j, s := range supplies {
			if a.reach(s, c.Demand, c.Needed) > 0 {
				on = append(on, j)
			}
		}
		for _, p := range c.Pieces {
			out = append(out, &run{claim: c, piece: p, on: on, all: on, rank: 2})
		}
	}
	return out
}

// reserveTags pins pieces to the reels that plans reserve for them. A reel that is
// reserved for a whole job is closed to all others.
func (a *allocator) reserveTags(runs []*run, supplies []*Supply, reserves []*kept) {
	whole := map[int]*kept{}
	for _, k := range reserves {
		at := slices.IndexFunc(supplies, func(s *Supply) bool { return s.Tag != nil && s.Tag.ID == k.Tag.V })
		if at < 0 || k.claim == nil || whole[at] != nil {
			continue
		}
		if !k.Cable.Set {
			whole[at], k.used = k, true
			continue
		}
		for _, r := range runs {
			if r.claim == k.claim && r.piece.Line == k.Cable.V && slices.Contains(r.on, at) && r.piece.Length <= supplies[at].Qty.Length {
				r.on, r.rank, k.used = []int{at}, 0, true
			}
		}
	}
	a.unpin(runs, supplies, reserves)
	for at, k := range whole {
		for _, r := range runs {
			if r.claim != k.claim && r.rank == 2 {
				r.on = without(r.on, at)
			}
		}
	}
}

// unpin lets go of the pieces for which their reel is too short once the others that
// are pinned to it are cut.
func (a *allocator) unpin(runs []*run, supplies []*Supply, reserves []*kept) {
	var pinned []*run
	for _, r := range runs {
		if r.rank == 0 {
			pinned = append(pinned, r)
		}
	}
	for i, at := range a.planRuns(pinned, supplies) {
		if r := pinned[i]; at < 0 {
			r.on, r.rank = r.all, 2
			for _, k := range reserves {
				if k.claim == r.claim && k.Cable.V == r.piece.Line {
					k.used = false
				}
			}
		}
	}
}

func without(list []int, at int) []int {
	return slices.DeleteFunc(slices.Clone(list), func(i int) bool { return i == at })
}

// pegReels pins pieces to the reels of order lines that were bought for their jobs,
// as many as fit on them.
func (a *allocator) pegReels(runs []*run, supplies []*Supply) {
	for j := 0; j < len(supplies); j++ {
		o := supplies[j].Open
		if o == nil || !o.Line.Jobs.Set || supplies[j].Pack != 1 {
			continue
		}
		var packs []int
		for k, s := range supplies {
			if s.Open == o {
				packs = append(packs, k)
			}
		}
		var first []*run
		for _, job := range o.Line.Jobs.V {
			for _, r := range runs {
				if r.claim.Job() == job.V && r.rank == 2 && slices.Contains(r.on, j) {
					first = append(first, &run{claim: r.claim, piece: r.piece, on: packs})
				}
			}
		}
		for i, at := range a.planRuns(first, supplies) {
			if at < 0 {
				continue
			}
			for _, r := range runs {
				if r.claim == first[i].claim && r.piece == first[i].piece {
					r.on, r.rank = packs, 1
				}
			}
		}
	}
}

// planRuns says for each run which supply it is cut from, or -1. What comes first
// goes first.
func (a *allocator) planRuns(runs []*run, supplies []*Supply) []int {
	out := make([]int, len(runs))
	task := cut.Task{Usable: int64(a.house.UsableRemnant.Or(DefaultUsableRemnant)), Tries: shelfTries}
	for j, s := range supplies {
		task.Stocks = append(task.Stocks, cut.Stock{ID: s.Name(), Length: int64(supplies[j].Qty.Length)})
	}
	for i, r := range runs {
		out[i] = -1
		on := r.on
		if r.near != nil {
			on = r.near
		}
		if on == nil {
			on = []int{}
		}
		task.Pieces = append(task.Pieces, cut.Piece{ID: r.claim.Job() + "/" + r.piece.Line, Length: int64(r.piece.Length), On: on})
	}
	if len(runs) == 0 || len(supplies) == 0 {
		return out
	}
	plan := task.Plan()
	for _, c := range plan.Cuts {
		out[c.Piece] = plan.Opened[c.Opened].Stock
	}
	return out
}

// lateReels covers what is short with reels that sent orders bring too late.
func (a *allocator) lateReels(claims []*Claim, supplies []*Supply) {
	var runs []*run
	for _, c := range claims {
		if c.Needed.IsZero() {
			continue
		}
		var on []int
		for j, s := range supplies {
			if !s.Here() && s.Day.After(c.Needed) && a.reach(s, c.Demand, s.Day) > 0 {
				on = append(on, j)
			}
		}
		for _, p := range c.ShortLines {
			runs = append(runs, &run{claim: c, piece: p, on: on})
		}
	}
	rest := make([]*Supply, len(supplies))
	for j, s := range supplies {
		left := *s
		left.Qty = s.Free
		rest[j] = &left
	}
	for i, at := range a.planRuns(runs, rest) {
		if at >= 0 {
			runs[i].claim.Late = append(runs[i].claim.Late, Hold{Supply: supplies[at], Piece: runs[i].piece})
		}
	}
}
