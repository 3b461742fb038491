package cut

import (
	"cmp"
	"math/rand/v2"
	"slices"
)

// Limits of the work on what is left over, at the least price.
const (
	exactPieces  = 14     // up to here every way is looked at
	exactSteps   = 4e6    // unless it takes more than this
	purchases    = 8      // looked at beyond, or all that there are
	otherSteps   = 20_000 // to pack another purchase of the price
	restarts     = 8      // packings of each that are improved
	defaultMoves = 3000   // tried on each
)

// score is what plans of one price are compared by.
type score struct {
	opened int
	scrap  int64
}

func (p *problem) compare(a, b score) int {
	opened, scrap := cmp.Compare(a.opened, b.opened), cmp.Compare(a.scrap, b.scrap)
	if p.scrapFirst {
		return cmp.Or(scrap, opened)
	}
	return cmp.Or(opened, scrap)
}

func (p *problem) score(loads []load) score {
	var s score
	for _, l := range loads {
		if len(l.items) > 0 {
			s.opened++
			s.scrap += p.scrap(l.room)
		}
	}
	return s
}

// scrap is what is lost of a leftover.
func (p *problem) scrap(room int64) int64 {
	if room >= p.usable {
		return 0
	}
	return room
}

// finest looks among the purchases of one price for the loads that open the fewest
// stocks and leave the least scrap. found begins with the purchase of the loads.
func (p *problem) finest(loads []load, found []purchase) []load {
	p.each = min(p.each, otherSteps)
	n := 0
	for _, k := range p.counts() {
		n += k
	}
	steps := int(exactSteps)
	best := loads
	for i, b := range found {
		if b.price != found[0].price {
			break
		}
		var got []load
		if n <= exactPieces && steps > 0 {
			got = p.everyWay(b.bins(), &steps)
		}
		if got == nil && i < purchases {
			start := loads
			if i > 0 {
				if other, how := p.complete(p.counts(), b.bins()); how == feasible {
					start = other
				}
			}
			got = p.improved(b.bins(), start)
		}
		if got != nil && p.compare(p.score(got), p.score(best)) < 0 {
			best = got
		}
	}
	p.tidy(best)
	return best
}

// improved is the best of a number of packings of the bins, each after small changes.
// Where none is found the changes start from known loads.
func (p *problem) improved(bins []int, known []load) []load {
	rng := rand.New(rand.NewPCG(2, uint64(len(bins))))
	var best []load
	for try := range restarts {
		loads := p.pass(p.counts(), bins, try, rng)
		if loads == nil {
			loads = p.snug(p.counts(), bins, rng)
		}
		if loads == nil {
			loads = slices.Clone(known)
		}
		p.improve(loads, rng)
		if best == nil || p.compare(p.score(loads), p.score(best)) < 0 {
			best = loads
		}
		if p.perfect(p.score(best), bins) {
			break
		}
	}
	return best
}

// improve moves and swaps pieces between two loads where that is no worse, and keeps
// the best it saw.
func (p *problem) improve(loads []load, rng *rand.Rand) {
	if len(loads) < 2 {
		return
	}
	for i := range p.moves {
		// At first a little more scrap is let pass, to get out of a corner.
		slip := int64(p.moves-i) * p.usable / int64(2*p.moves)
		if i%4 > 0 {
			slip = 0
		}
		a, b := rng.IntN(len(loads)), rng.IntN(len(loads))
		if a == b || len(loads[a].items) == 0 {
			continue
		}
		p.change(&loads[a], &loads[b], slip, rng)
	}
}

// change moves a piece from a to b, or swaps it for one or two of b, unless that is
// worse.
func (p *problem) change(a, b *load, slip int64, rng *rand.Rand) {
	newA, newB := append(p.tryA[:0], a.items...), append(p.tryB[:0], b.items...)
	k := rng.IntN(len(newA))
	newB = append(newB, newA[k])
	newA = slices.Delete(newA, k, k+1)
	for back := rng.IntN(3); back > 0 && len(newB) > 1; back-- {
		k := rng.IntN(len(newB) - 1)
		newA = append(newA, newB[k])
		newB = slices.Delete(newB, k, k+1)
	}
	p.tryA, p.tryB = newA, newB // their room is used again
	before := p.pair(*a, *b)
	before.scrap += slip
	triedA, fitsA := p.refilled(*a, newA)
	triedB, fitsB := p.refilled(*b, newB)
	if fitsA && fitsB && p.compare(p.pair(triedA, triedB), before) <= 0 {
		triedA.items, triedB.items = slices.Clone(newA), slices.Clone(newB)
		*a, *b = triedA, triedB
	}
}

// pair is the score of two loads.
func (p *problem) pair(a, b load) score {
	var s score
	for _, l := range [...]load{a, b} {
		if len(l.items) > 0 {
			s.opened++
			s.scrap += p.scrap(l.room)
		}
	}
	return s
}

// refilled is a load with other pieces; false where they do not fit.
func (p *problem) refilled(l load, items []int) (load, bool) {
	l.items, l.room = items, p.stocks[l.stock].Length
	for _, k := range items {
		l.room -= p.kinds[k].need
		if !p.kinds[k].fits[l.stock] {
			return l, false
		}
	}
	return l, l.room >= 0
}

// perfect reports a score that no packing of the bins can better.
func (p *problem) perfect(s score, bins []int) bool {
	if s.scrap > 0 {
		return false
	}
	var need int64
	for _, k := range p.kinds {
		need += k.need * int64(len(k.pieces))
	}
	lengths := make([]int64, len(bins))
	for i, b := range bins {
		lengths[i] = p.stocks[b].Length
	}
	slices.Sort(lengths)
	least := 0
	for i := len(lengths) - 1; i >= 0 && need > 0; i-- {
		need -= lengths[i]
		least++
	}
	return s.opened <= least
}
