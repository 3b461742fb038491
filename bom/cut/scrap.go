package cut

import (
	"cmp"
	"math/rand/v2"
	"slices"
)

// Limits of the work on what is left over, at the least price.
const (
	exactPieces = 14     // up to here every way is looked at
	exactSteps  = 4e6    // unless it takes more than this
	purchases   = 8      // looked at beyond, or all that there are
	otherSteps  = 20_000 // to pack another purchase of the price
	restarts    = 8      // packings of each that are improved
	moves       = 3000   // tried on each
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
	}
	return best
}

// improve moves and swaps pieces between two loads where that is no worse, and keeps
// the best it saw.
func (p *problem) improve(loads []load, rng *rand.Rand) {
	if len(loads) < 2 {
		return
	}
	for i := range moves {
		// At first a little more scrap is let pass, to get out of a corner.
		slip := int64(moves-i) * p.usable / (2 * moves)
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

// change moves a piece from a to b, or swaps it for one or two of b, and takes that back
// where it is worse.
func (p *problem) change(a, b *load, slip int64, rng *rand.Rand) {
	oldA, oldB := *a, *b
	before := p.pair(a, b)
	newA, newB := slices.Clone(a.items), slices.Clone(b.items)
	k := rng.IntN(len(newA))
	newB = append(newB, newA[k])
	newA = slices.Delete(newA, k, k+1)
	for back := rng.IntN(3); back > 0 && len(newB) > 1; back-- {
		k := rng.IntN(len(newB) - 1)
		newA = append(newA, newB[k])
		newB = slices.Delete(newB, k, k+1)
	}
	before.scrap += slip
	if !p.refill(a, newA) || !p.refill(b, newB) || p.compare(p.pair(a, b), before) > 0 {
		*a, *b = oldA, oldB
	}
}

// pair is the score of two loads.
func (p *problem) pair(a, b *load) score {
	return p.score([]load{*a, *b})
}

// refill gives a load other pieces; false where they do not fit.
func (p *problem) refill(l *load, items []int) bool {
	l.items, l.room = items, p.stocks[l.stock].Length
	for _, k := range items {
		l.room -= p.kinds[k].need
		if !p.kinds[k].fits[l.stock] {
			return false
		}
	}
	return l.room >= 0
}
