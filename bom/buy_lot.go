package bom

import (
	"cmp"
	"math/bits"
	"slices"

	"driploop/catalog/unit"
)

// lot is what has to be bought together: one part, or several that boxes join.
type lot struct {
	parts []string
	goods []*good
	wants []*want  // of what is counted, or
	cut   *cutting // of cut stock
	needs []stair

	known map[uint64]chosen // the cheapest, by the vendors that are closed
}

// stair is a number of pieces of one part that must have come by some day.
type stair struct {
	need  int64
	gives []int64 // by good: what one pack adds, 0 where it comes too late
}

// pick is one way to buy a lot.
type pick struct {
	lot   *lot
	packs []int // by good
	plan  *cutPick
	goods []unit.Money // by vendor
	cost  unit.Money
}

// chosen is the cheapest pick, and what none costs less than. Without one the lot
// cannot be had.
type chosen struct {
	*pick
	least unit.Money
}

// byDayOrNone compares days of which none is the last.
func byDayOrNone(d, e unit.Date) int {
	return cmp.Or(cmp.Compare(rankNone(d), rankNone(e)), byDay(d, e))
}

func rankNone(d unit.Date) int {
	if d.IsZero() {
		return 1
	}
	return 0
}

// steps lists what must have come by each day: as early goods serve late wants too,
// the sums up to each day are all there is to hold.
func (l *lot) steps() {
	for _, part := range l.parts {
		var of []*want
		for _, w := range l.wants {
			if w.part.ID == part {
				of = append(of, w)
			}
		}
		slices.SortStableFunc(of, func(v, w *want) int { return byDayOrNone(v.latest, w.latest) })
		var sum int64
		for i, w := range of {
			sum += int64(w.each)
			if i+1 < len(of) && of[i+1].latest == w.latest {
				continue
			}
			s := stair{need: min(sum, mostWanted), gives: make([]int64, len(l.goods))}
			for j, g := range l.goods {
				if g.inTime(w.latest) {
					s.gives[j] = int64(g.brings(part))
				}
			}
			l.needs = append(l.needs, s)
		}
	}
}

// walk goes through the ways to buy a counted lot, good by good.
type walk struct {
	l      *lot
	closed []bool // by good
	cheap  [][]int
	left   []int64 // by step
	packs  []int
	limit  unit.Money // dearer ways are of no interest
	steps  int        // that may still be made
	found  func(packs []int, cost unit.Money)
}

func (l *lot) walk(closed []bool, limit unit.Money, steps int, found func([]int, unit.Money)) *walk {
	w := &walk{l: l, closed: closed, packs: make([]int, len(l.goods)), limit: limit, steps: steps, found: found}
	for _, s := range l.needs {
		w.left = append(w.left, s.need)
		w.cheap = append(w.cheap, w.cheapest(s))
	}
	return w
}

// cheapest is, from each good on, the one that serves a step at the least price for
// a piece; -1 where none does.
func (w *walk) cheapest(s stair) []int {
	n := len(w.l.goods)
	best := make([]int, n+1)
	best[n] = -1
	for i := n - 1; i >= 0; i-- {
		b := best[i+1]
		best[i] = b
		if w.closed[i] || s.gives[i] == 0 {
			continue
		}
		if b < 0 || perPiece(w.l.goods[i], s.gives[i], w.l.goods[b], s.gives[b]) < 0 {
			best[i] = i
		}
	}
	return best
}

// lowest is the lowest price of a pack.
func (g *good) lowest() unit.Money {
	price := g.Price.V
	for _, b := range g.Breaks.V {
		price = min(price, b.V.Price)
	}
	return price
}

func perPiece(g *good, gives int64, h *good, hGives int64) int {
	ahi, alo := bits.Mul64(uint64(g.lowest()), uint64(hGives))
	bhi, blo := bits.Mul64(uint64(h.lowest()), uint64(gives))
	return cmp.Or(cmp.Compare(ahi, bhi), cmp.Compare(alo, blo))
}

// rest is what the rest costs at least from good at on; false where it cannot be had.
func (w *walk) rest(at int) (unit.Money, bool) {
	var most unit.Money
	for i, left := range w.left {
		if left <= 0 {
			continue
		}
		j := w.cheap[i][at]
		if j < 0 {
			return 0, false
		}
		hi, lo := bits.Mul64(uint64(left), uint64(w.l.goods[j].lowest()))
		if hi >= uint64(w.l.needs[i].gives[j]) {
			return dearestLine, true
		}
		q, _ := bits.Div64(hi, lo, uint64(w.l.needs[i].gives[j]))
		most = max(most, unit.Money(min(q, uint64(dearestLine))))
	}
	// Each line may be rounded down by less than half a cent.
	return max(0, most-unit.Money(50*(len(w.l.goods)-at))), true
}

// from goes on at a good with what was spent so far; false where the steps ran out.
func (w *walk) from(at int, spent unit.Money) bool {
	if w.steps--; w.steps < 0 {
		return false
	}
	rest, ok := w.rest(at)
	if !ok || spent+rest > w.limit {
		return true
	}
	if at == len(w.l.goods) {
		w.found(w.packs, spent)
		return true
	}
	if w.closed[at] {
		return w.from(at+1, spent)
	}
	g := w.l.goods[at]
	defer w.take(at, 0)
	for n := w.fewest(at); ; n++ {
		if n > 0 && n < g.least {
			n = g.least
		}
		cost := g.cost(n)
		if spent+cost > w.limit {
			if n = w.cheaperAbove(g, n, spent); n == 0 {
				return true
			}
			cost = g.cost(n)
		}
		w.take(at, n)
		if !w.from(at+1, spent+cost) {
			return false
		}
		if w.steps <= 0 {
			return false
		}
	}
}

// cheaperAbove is the first break above n packs at which the line is within the
// limit again, or 0.
func (w *walk) cheaperAbove(g *good, n int, spent unit.Money) int {
	for _, b := range g.Breaks.V {
		if b.V.Packs > n && spent+g.cost(b.V.Packs) <= w.limit {
			return b.V.Packs
		}
	}
	return 0
}

// fewest is how many packs of a good are needed because nothing after it serves.
func (w *walk) fewest(at int) int {
	var most int64
	for i, left := range w.left {
		gives := w.l.needs[i].gives[at]
		if left > 0 && gives > 0 && w.cheap[i][at+1] < 0 {
			most = max(most, (left+gives-1)/gives)
		}
	}
	return int(most)
}

func (w *walk) take(at, n int) {
	for i := range w.left {
		w.left[i] -= int64(n-w.packs[at]) * w.l.needs[i].gives[at]
	}
	w.packs[at] = n
}

// Limits of the search, as counts: the same workspace gives the same purchase.
const (
	lotSteps    = 200_000 // for the ways to buy one lot
	mostPicks   = 1500    // of one lot
	searchNodes = 4_000_000
)

// cheapestCounted finds the cheapest way to buy a counted lot; of those the one of
// fewest packs, then the first.
func (b *buyer) cheapestCounted(l *lot, closed []bool) chosen {
	var best *pick
	least := dearestLine
	if packs := l.single(closed); packs != nil {
		best = b.pickOf(l, packs)
		least = best.cost
	}
	w := l.walk(closed, least, lotSteps, nil)
	w.found = func(packs []int, cost unit.Money) {
		if best == nil || cmp.Or(cmp.Compare(cost, best.cost), cmp.Compare(sum(packs), sum(best.packs))) < 0 {
			best = b.pickOf(l, packs)
			w.limit = cost
		}
	}
	root, ok := w.rest(0)
	if !ok {
		return chosen{}
	}
	if !w.from(0, 0) {
		return chosen{best, root}
	}
	if best == nil {
		return chosen{}
	}
	return chosen{best, best.cost}
}

func sum(packs []int) int {
	n := 0
	for _, p := range packs {
		n += p
	}
	return n
}

// single is a first way: step by step the good that serves it at the least price.
func (l *lot) single(closed []bool) []int {
	w := l.walk(closed, dearestLine, 0, nil)
	for i := range l.needs {
		if w.left[i] <= 0 {
			continue
		}
		j := w.cheap[i][0]
		if j < 0 {
			return nil
		}
		gives := l.needs[i].gives[j]
		w.take(j, max(w.packs[j]+int((w.left[i]+gives-1)/gives), l.goods[j].least))
	}
	return w.packs
}

// pickOf prices a way to buy a counted lot.
func (b *buyer) pickOf(l *lot, packs []int) *pick {
	p := &pick{lot: l, packs: slices.Clone(packs), goods: make([]unit.Money, len(b.vendors))}
	b.price(p)
	return p
}

// picks lists the ways to buy a counted lot for up to some price, cheapest first,
// and the price below which all are listed. Of ways that cost the same at every
// vendor one is enough.
func (b *buyer) picks(l *lot, from, limit unit.Money) ([]*pick, unit.Money) {
	for width := limit - from; ; width /= 4 {
		seen := map[string]bool{}
		var out []*pick
		w := l.walk(make([]bool, len(l.goods)), from+width, lotSteps, nil)
		w.found = func(packs []int, _ unit.Money) {
			p := b.pickOf(l, packs)
			if key := p.key(); !seen[key] {
				seen[key] = true
				out = append(out, p)
			}
		}
		if w.from(0, 0) && len(out) <= mostPicks {
			slices.SortStableFunc(out, func(p, q *pick) int { return cmp.Compare(p.cost, q.cost) })
			return out, from + width + 1
		}
		if width <= 0 {
			return nil, from
		}
	}
}

// key tells apart what picks cost at each vendor.
func (p *pick) key() string {
	b := make([]byte, 0, 8*len(p.goods))
	for _, m := range p.goods {
		for shift := 56; shift >= 0; shift -= 8 {
			b = append(b, byte(m>>shift))
		}
	}
	return string(b)
}
