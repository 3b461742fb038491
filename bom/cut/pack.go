package cut

import (
	"math/rand/v2"
	"slices"
)

// load is one opened stock and the kinds of the pieces on it, longest first.
type load struct {
	stock int
	room  int64
	items []int
}

// outcome of an exact search. The zero value is the one that claims nothing.
type outcome int

const (
	limit outcome = iota // the steps ran out
	feasible
	infeasible
)

// tries is how many packing passes are made before the exact search.
const tries = 300

// pack puts the pieces on the bins (stocks, with repetition): a few hundred quick
// passes, then the exact search.
func (p *problem) pack(counts []int, bins []int) ([]load, outcome) {
	bins = slices.Clone(bins)
	slices.Sort(bins)
	slack, pieces := p.slack(counts, bins)
	if slack < 0 {
		return nil, infeasible
	}
	rng := rand.New(rand.NewPCG(1, uint64(len(bins))))
	for try := range tries {
		if p.nodes -= 1 + pieces*len(bins)/16; p.nodes <= 0 && try > 1 {
			break
		}
		loads := p.pass(counts, bins, try, rng)
		if loads == nil && try%4 == 3 {
			loads = p.snug(counts, bins, rng)
		}
		if loads != nil {
			p.tidy(loads)
			return loads, feasible
		}
	}
	return p.complete(counts, bins)
}

// slack is the length of the bins less that of the pieces, and how many those are.
func (p *problem) slack(counts, bins []int) (slack int64, pieces int) {
	for _, s := range bins {
		slack += p.stocks[s].Length
	}
	for k, n := range counts {
		slack -= int64(n) * p.kinds[k].need
		pieces += n
	}
	return slack, pieces
}

// pass packs longest first, each piece on the first (even try) or fullest (odd)
// bin that holds it; later tries disturb the order.
func (p *problem) pass(counts, bins []int, try int, rng *rand.Rand) []load {
	type item struct {
		kind int
		rank float64
	}
	var items []item
	for k, n := range counts {
		for range n {
			rank := float64(p.kinds[k].need)
			if try > 1 {
				rank *= 1 + 0.4*(rng.Float64()-0.5)
			}
			items = append(items, item{k, rank})
		}
	}
	if try > 1 {
		slices.SortStableFunc(items, func(a, b item) int {
			switch {
			case a.rank > b.rank:
				return -1
			case a.rank < b.rank:
				return 1
			}
			return a.kind - b.kind
		})
	}
	loads := p.empty(bins)
	for _, it := range items {
		at := p.place(loads, it.kind, try%2 == 1)
		if at < 0 {
			return nil
		}
		loads[at].add(it.kind, p.kinds[it.kind].need)
	}
	return loads
}

// tidy sorts the pieces of every load, longest first.
func (p *problem) tidy(loads []load) {
	for i := range loads {
		slices.Sort(loads[i].items)
	}
}

func (p *problem) empty(bins []int) []load {
	loads := make([]load, len(bins))
	for i, s := range bins {
		loads[i] = load{stock: s, room: p.stocks[s].Length}
	}
	return loads
}

func (l *load) add(kind int, need int64) {
	l.items = append(l.items, kind)
	l.room -= need
}

// place is the first load that holds one more of the kind, or the fullest; -1 where
// none does.
func (p *problem) place(loads []load, k int, best bool) int {
	at := -1
	for i := range loads {
		if !p.kinds[k].fits[loads[i].stock] || loads[i].room < p.kinds[k].need {
			continue
		}
		if !best {
			return i
		}
		if at < 0 || loads[i].room < loads[at].room {
			at = i
		}
	}
	return at
}

// completion is the exact search: bins are filled one after another, shortest
// first. Only maximal fills are tried, since a piece from a later bin can always
// move into room left here, and what stays empty comes out of the slack: the
// length of all bins less that of all pieces.
type completion struct {
	p      *problem
	bins   []int
	left   []int // of each kind
	pieces int
	fills  [][]int // of each bin, the number of each kind
	last   []int   // of each kind, the last bin that fits it
	failed map[string]bool
	steps  int
}

func (p *problem) complete(counts, bins []int) ([]load, outcome) {
	c := &completion{p: p, bins: bins, left: slices.Clone(counts), failed: map[string]bool{}, last: make([]int, len(counts))}
	for b, s := range bins {
		c.fills = append(c.fills, make([]int, len(counts)))
		for k := range counts {
			if p.kinds[k].fits[s] {
				c.last[k] = b
			}
		}
	}
	slack, pieces := p.slack(counts, bins)
	if slack < 0 {
		return nil, infeasible
	}
	c.pieces = pieces
	c.steps = max(0, min(p.each, p.nodes))
	start := c.steps
	done := c.bin(0, slack)
	p.nodes -= start - max(c.steps, 0)
	switch {
	case done:
		return c.loads(), feasible
	case c.steps <= 0:
		return nil, limit
	}
	return nil, infeasible
}

func (c *completion) loads() []load {
	loads := c.p.empty(c.bins)
	for b, fill := range c.fills {
		for k, n := range fill {
			for range n {
				loads[b].add(k, c.p.kinds[k].need)
			}
		}
	}
	return loads
}

// bin fills bin b and those after it.
func (c *completion) bin(b int, slack int64) bool {
	if c.pieces == 0 {
		return true
	}
	if b == len(c.bins) {
		return false
	}
	for k, n := range c.left {
		if n > 0 && c.last[k] < b {
			return false
		}
	}
	// Bins alike are filled in descending order, so what failed depends on the
	// bin before where it is alike.
	same := b > 0 && c.bins[b] == c.bins[b-1]
	key := c.state(b, same)
	if c.failed[key] {
		return false
	}
	var rest int64 // length of what may still go on this bin
	for k, n := range c.left {
		if c.p.kinds[k].fits[c.bins[b]] {
			rest += int64(n) * c.p.kinds[k].need
		}
	}
	if c.fill(b, 0, c.p.stocks[c.bins[b]].Length, rest, slack, same) {
		return true
	}
	if c.steps > 0 {
		c.failed[key] = true
	}
	return false
}

func (c *completion) state(b int, same bool) string {
	key := []byte{byte(b), byte(b >> 8)}
	for _, n := range c.left {
		key = append(key, byte(n), byte(n>>8))
	}
	if same {
		for _, n := range c.fills[b-1] {
			key = append(key, byte(n), byte(n>>8))
		}
	}
	return string(key)
}

// fill chooses how many of kind k and the shorter ones go on bin b. below is true
// while the fill is so far equal to that of the bin before, which is alike.
func (c *completion) fill(b, k int, room, rest, slack int64, below bool) bool {
	if c.steps--; c.steps <= 0 {
		return false
	}
	if room-rest > slack {
		return false
	}
	if k == len(c.left) {
		return c.maximal(b, room) && c.bin(b+1, slack-room)
	}
	kd := &c.p.kinds[k]
	if c.left[k] == 0 || !kd.fits[c.bins[b]] {
		return c.fill(b, k+1, room, rest, slack, below && c.fills[b-1][k] == 0)
	}
	had := c.left[k]
	most := int(min(int64(had), room/kd.need))
	if below {
		most = min(most, c.fills[b-1][k])
	}
	rest -= int64(had) * kd.need
	for n := most; n >= 0; n-- {
		c.left[k], c.fills[b][k] = had-n, n
		c.pieces -= n
		if c.fill(b, k+1, room-int64(n)*kd.need, rest, slack, below && n == c.fills[b-1][k]) {
			return true
		}
		c.pieces += n
	}
	c.left[k], c.fills[b][k] = had, 0
	return false
}

func (c *completion) maximal(b int, room int64) bool {
	for k, n := range c.left {
		if n > 0 && c.p.kinds[k].need <= room && c.p.kinds[k].fits[c.bins[b]] {
			return false
		}
	}
	return true
}
