package bom

import (
	"cmp"
	"slices"

	"driploop/bom/cut"
	"driploop/catalog/unit"
)

// cutPicks lists ways to buy cut stock for up to some price, and the price below
// which all are listed: the cheapest for each set of vendors, then every number of reels
// of each offer that holds the pieces. Beyond some numbers, and where lengths are
// sold, the list is not complete.
func (s *search) cutPicks(at int, first chosen, limit unit.Money) ([]*pick, unit.Money) {
	l := s.b.lots[at]
	w := &cutWays{s: s, l: l, limit: limit, packs: make([]int, len(l.goods)), whole: limit + 1}
	for _, closed := range s.someClosed(l) {
		if c := s.cheapest(l, closed); c.pick != nil && c.cost <= limit {
			w.out = append(w.out, c.pick)
		}
	}
	if slices.ContainsFunc(l.goods, func(g *good) bool { return g.ToLength() }) {
		w.whole = first.least
	}
	if len(l.cut.pieces) > mostCutPieces || !w.list(0, 0) {
		w.whole, w.found = first.least, nil
		w.spares()
	}
	w.try()
	return w.out, max(w.whole, first.least)
}

const (
	mostCutPieces = 60   // for which all ways to buy are looked at
	mostCutWays   = 1500 // numbers of reels
	mostCutTries  = 60   // of which so many are planned, the cheapest first
	cutWayNodes   = 100_000
)

// someClosed lists sets of closed vendors: all of the first few that sell the lot.
func (s *search) someClosed(l *lot) []uint64 {
	out := []uint64{0}
	for i, v := range s.gates {
		if slices.ContainsFunc(l.goods, func(g *good) bool { return g.vendor == v }) && len(out) < 16 {
			for _, set := range out {
				out = append(out, set|1<<i)
			}
		}
	}
	return out
}

// cutWays is the list while it is made.
type cutWays struct {
	s     *search
	l     *lot
	limit unit.Money
	packs []int
	whole unit.Money
	found []*pick // numbers of reels, not yet known to hold the pieces
	out   []*pick
	never []*pick // that do not hold them
}

// list lists all numbers of reels of the goods from one on; false where they are too many.
func (w *cutWays) list(at int, spent unit.Money) bool {
	if at == len(w.l.goods) {
		p := &pick{lot: w.l, packs: slices.Clone(w.packs), goods: make([]unit.Money, len(w.s.b.vendors))}
		w.s.b.price(p)
		w.found = append(w.found, p)
		return len(w.found) <= mostCutWays
	}
	g := w.l.goods[at]
	if g.ToLength() {
		return w.list(at+1, spent)
	}
	defer func() { w.packs[at] = 0 }()
	lowest := max(1, g.lowest())
	for n := 0; spent+lowest*unit.Money(n) <= w.limit+50; n++ {
		if n > 0 && n < g.least {
			continue
		}
		if spent+g.cost(n) > w.limit {
			continue // a break may make more packs cheaper
		}
		w.packs[at] = n
		if !w.list(at+1, spent+g.cost(n)) {
			return false
		}
	}
	return true
}

// spares are the ways found so far with spare packs.
func (w *cutWays) spares() {
	for i := 0; i < len(w.out) && len(w.out) < mostPicks; i++ {
		for j, g := range w.l.goods {
			if g.ToLength() {
				continue
			}
			p := w.s.with(w.l, w.out[i], j, max(g.least, w.out[i].packs[j]+1))
			if p.cost <= w.limit && !w.listed(p) {
				w.out = append(w.out, p)
			}
		}
	}
}

func (w *cutWays) listed(p *pick) bool {
	return slices.ContainsFunc(w.out, func(q *pick) bool { return slices.Equal(p.goods, q.goods) })
}

// try keeps the numbers of reels that hold the pieces.
func (w *cutWays) try() {
	slices.SortStableFunc(w.found, func(p, q *pick) int { return cmp.Or(cmp.Compare(p.cost, q.cost), slices.Compare(p.packs, q.packs)) })
	tries := mostCutTries
	for _, p := range w.found {
		switch {
		case w.listed(p):
		case w.within(p):
			w.out = append(w.out, p)
		case slices.ContainsFunc(w.never, func(q *pick) bool { return atMost(p.packs, q.packs) }):
		case tries == 0:
			w.whole = min(w.whole, p.cost)
			return
		default:
			tries--
			w.tryOne(p)
		}
	}
}

// within takes the plan over of a way that needs no more reels.
func (w *cutWays) within(p *pick) bool {
	for _, q := range w.out {
		if len(q.plan.lengths) == 0 && atMost(q.packs, p.packs) {
			p.plan = q.plan
			return true
		}
	}
	return false
}

func atMost(a, b []int) bool {
	for i := range a {
		if a[i] > b[i] {
			return false
		}
	}
	return true
}

// tryOne plans the cuts on so many reels, each there once.
func (w *cutWays) tryOne(p *pick) {
	how := &cutPick{}
	add := func(length int64, s cutStock) {
		how.task.Stocks = append(how.task.Stocks, cut.Stock{Length: length})
		how.stocks = append(how.stocks, s)
	}
	for i, s := range w.l.cut.supplies {
		add(int64(s.Qty.Length), cutStock{supply: i})
	}
	for i, n := range p.packs {
		for range min(n, len(w.l.cut.pieces)) {
			add(int64(w.l.goods[i].Holds().Length), cutStock{supply: -1, good: w.l.goods[i]})
		}
	}
	for _, x := range w.l.cut.pieces {
		how.task.Pieces = append(how.task.Pieces, cut.Piece{ID: x.name(), Length: int64(x.length()), On: x.stocks(how.stocks)})
	}
	how.task.Usable = int64(w.s.b.a.house.UsableRemnant.Or(DefaultUsableRemnant))
	how.task.Nodes = cutWayNodes
	how.plan = how.task.Plan()
	switch {
	case len(how.plan.Short) == 0:
		p.plan = how
		w.out = append(w.out, p)
	case how.plan.Proved:
		w.never = append(w.never, p)
	default:
		w.whole = min(w.whole, p.cost)
	}
}
