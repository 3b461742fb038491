package cut

import (
	"cmp"
	"slices"
)

// order of purchases: cheapest, then longest in all, then by stock.
func (p *problem) order(a, b purchase) int {
	return cmp.Or(cmp.Compare(a.price, b.price), cmp.Compare(p.length(b), p.length(a)), slices.Compare(a.copies, b.copies))
}

func (p *problem) length(b purchase) int64 {
	var sum int64
	for i, n := range b.copies {
		sum += int64(n) * p.stocks[i].Length
	}
	return sum
}

func (b purchase) bins() []int {
	var bins []int
	for i, n := range b.copies {
		for range n {
			bins = append(bins, i)
		}
	}
	return bins
}

// shortages takes out, the first in priority kept where possible, the pieces that what
// is there once cannot hold; what can be bought any number of times never runs
// short. It is not sure where the exact search ran out of steps; where the quick passes
// have taken as many again, a piece that finds no room as things lie is short.
func (p *problem) shortages() (short []int, sure bool) {
	type tied struct{ piece, kind int }
	var all []tied
	for k, kd := range p.kinds {
		if !p.buyable(kd) {
			for _, i := range kd.pieces {
				all = append(all, tied{i, k})
			}
		}
	}
	slices.SortFunc(all, func(a, b tied) int { return a.piece - b.piece })
	counts := make([]int, len(p.kinds))
	bins := p.once()
	for _, x := range all {
		counts[x.kind]++
	}
	loads, how := p.pack(counts, bins)
	if how == feasible {
		p.base = loads
		return nil, true
	}
	clear(counts)
	p.base = p.empty(bins)
	sure = true
	for _, x := range all {
		counts[x.kind]++
		if at := p.place(p.base, x.kind, true); at >= 0 {
			p.base[at].add(x.kind, p.kinds[x.kind].need)
			continue
		}
		var loads []load
		how := limit
		if p.nodes > -p.all {
			loads, how = p.pack(counts, bins)
		}
		if how == feasible {
			p.base = loads
			continue
		}
		counts[x.kind]--
		sure = sure && how == infeasible
		short = append(short, x.piece)
		kept := &p.kinds[x.kind].pieces
		*kept = slices.DeleteFunc(*kept, func(i int) bool { return i == x.piece })
	}
	return short, sure
}

func (p *problem) buyable(k kind) bool {
	for i, s := range p.stocks {
		if k.fits[i] && s.Many {
			return true
		}
	}
	return false
}

func (p *problem) once() []int {
	var bins []int
	for i, s := range p.stocks {
		if !s.Many {
			bins = append(bins, i)
		}
	}
	return bins
}

// search finds the loads of the least price, the price no plan can go below, and
// whether they are the same.
func (p *problem) search() (loads []load, bound int64, proved bool) {
	loads = p.greedy()
	s := p.newShop()
	lo, _ := s.rest(0)
	best := p.price(loads)
	bound = -1 // the price of the first purchase that was not decided
	width := max(1, (best-lo)/16)
	for lo <= best {
		if p.nodes <= 0 {
			if bound < 0 {
				bound = lo
			}
			return loads, bound, bound == best
		}
		hi := min(best, lo+width)
		found, ok := s.window(lo, hi)
		if !ok && width > 1 {
			width = max(1, width/4)
			continue
		}
		if !ok {
			if bound < 0 {
				bound = lo
			}
			return loads, bound, bound == best
		}
		for i, b := range found {
			if p.nodes <= 0 {
				if bound < 0 {
					bound = b.price
				}
				return loads, bound, bound == best
			}
			got, how := p.pack(p.counts(), b.bins())
			if how == limit && bound < 0 && b.price < best {
				bound = b.price
			}
			if how != feasible {
				continue
			}
			if bound < 0 {
				bound = b.price
			}
			return p.finest(got, found[i:]), bound, bound == b.price
		}
		lo = hi + 1
	}
	if bound < 0 {
		bound = best
	}
	return loads, bound, bound == best
}

// pieces is how many pieces there are to cut.
func (p *problem) pieces() int {
	n := 0
	for _, k := range p.kinds {
		n += len(k.pieces)
	}
	return n
}

func (p *problem) price(loads []load) int64 {
	n := make([]int, len(p.stocks))
	var sum int64
	for _, l := range loads {
		if len(l.items) > 0 {
			n[l.stock]++
		}
	}
	for i, s := range p.stocks {
		sum += s.price(n[i])
	}
	return sum
}

// greedy is the cheapest of a plan for each size that can be bought: what is on hand
// first, then that size wherever it fits. Of very many sizes for very many pieces only
// the first are tried.
func (p *problem) greedy() []load {
	var best []load
	left := p.all
	for prefer := -1; prefer < len(p.stocks) && left > 0; prefer++ {
		if prefer >= 0 && !p.stocks[prefer].Many {
			continue
		}
		loads := p.fill(prefer)
		left -= 1 + p.pieces()*len(loads)/16
		if best == nil || p.price(loads) < p.price(best) {
			best = loads
		}
	}
	return best
}

// fill places what only comes from stocks that are there once, then the rest longest
// first, and opens the preferred size or else the cheapest that holds the piece.
func (p *problem) fill(prefer int) []load {
	counts := p.counts()
	loads := slices.Clone(p.base)
	for i := range loads {
		loads[i].items = slices.Clone(loads[i].items)
		for _, k := range loads[i].items {
			counts[k]--
		}
	}
	for k, n := range counts {
		for range n {
			at := p.place(loads, k, true)
			if at >= 0 && len(loads[at].items) == 0 && p.stocks[loads[at].stock].Price > 0 {
				at = p.placeOpen(loads, k)
			}
			if at < 0 {
				s := p.opens(k, prefer)
				loads = append(loads, load{stock: s, room: p.stocks[s].Length})
				at = len(loads) - 1
			}
			loads[at].add(k, p.kinds[k].need)
		}
	}
	for i := range loads {
		p.shrink(&loads[i])
	}
	return loads
}

// placeOpen is the fullest load that is cut already or free.
func (p *problem) placeOpen(loads []load, k int) int {
	at := -1
	for i, l := range loads {
		if len(l.items) == 0 && p.stocks[l.stock].Price > 0 || !p.kinds[k].fits[l.stock] || l.room < p.kinds[k].need {
			continue
		}
		if at < 0 || l.room < loads[at].room {
			at = i
		}
	}
	return at
}

func (p *problem) opens(k, prefer int) int {
	if prefer >= 0 && p.kinds[k].fits[prefer] {
		return prefer
	}
	best := -1
	for i, s := range p.stocks {
		if s.Many && p.kinds[k].fits[i] && (best < 0 || s.price(1) < p.stocks[best].price(1)) {
			best = i
		}
	}
	return best
}

// shrink puts a load that is bought on the cheapest size that holds it.
func (p *problem) shrink(l *load) {
	used := p.stocks[l.stock].Length - l.room
	if !p.stocks[l.stock].Many || p.stocks[l.stock].Least > 1 {
		return
	}
	for i, s := range p.stocks {
		if !s.Many || s.Least > 1 || s.Length < used || s.Price >= p.stocks[l.stock].Price {
			continue
		}
		if !slices.ContainsFunc(l.items, func(k int) bool { return !p.kinds[k].fits[i] }) {
			l.stock, l.room = i, s.Length-used
		}
	}
}
