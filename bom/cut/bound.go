package cut

import (
	"math/bits"
	"slices"
)

// class is a set of stocks and the pieces that can be cut from these only. The length
// limit is part of fits, so classes cover the long pieces as well as the tied ones.
type class struct {
	in    []bool
	kinds []int
	need  int64
}

// classes are the sets of stocks that occur, and all stocks.
func (p *problem) classes() []class {
	seen := map[string]bool{}
	var all []class
	add := func(in []bool) {
		key := kind{fits: in}.key()
		if seen[key] || len(all) == maxClasses {
			return
		}
		seen[key] = true
		c := class{in: in}
		for k, kd := range p.kinds {
			if within(kd.fits, in) && len(kd.pieces) > 0 {
				c.kinds = append(c.kinds, k)
				c.need += int64(len(kd.pieces)) * kd.need
			}
		}
		all = append(all, c)
	}
	every := make([]bool, len(p.stocks))
	for i := range every {
		every[i] = true
	}
	add(every)
	for _, k := range p.kinds {
		add(k.fits)
	}
	return all
}

func within(a, b []bool) bool {
	for i := range a {
		if a[i] && !b[i] {
			return false
		}
	}
	return true
}

// refuted says that the bins cannot hold the pieces: in some class the pieces are
// longer than the bins, or those of some length and above are more than the bins hold.
func (p *problem) refuted(classes []class, copies []int) bool {
	for _, c := range classes {
		var length int64
		for s, n := range copies {
			if c.in[s] {
				length += int64(n) * p.stocks[s].Length
			}
		}
		if length < c.need || p.outnumbered(c, copies) {
			return true
		}
	}
	return false
}

func (p *problem) outnumbered(c class, copies []int) bool {
	var pieces int64
	for _, k := range c.kinds { // longest first
		pieces += int64(len(p.kinds[k].pieces))
		var holds int64
		for s, n := range copies {
			if c.in[s] {
				holds += int64(n) * (p.stocks[s].Length / p.kinds[k].need)
			}
		}
		if pieces > holds {
			return true
		}
	}
	return false
}

// dearest is above every price of a plan, and twice it does not overflow.
const dearest = 1 << 61

// atLeast is the price of so many millimetres at the price of a stock, rounded up.
func atLeast(length int64, s supply) int64 {
	if length <= 0 {
		return 0
	}
	hi, lo := bits.Mul64(uint64(length), uint64(s.Price))
	if hi >= uint64(s.Length) {
		return dearest
	}
	q, rem := bits.Div64(hi, lo, uint64(s.Length))
	if rem > 0 {
		q++
	}
	return int64(min(q, dearest))
}

// purchase is how many copies of each stock there are, and what they cost.
type purchase struct {
	copies []int
	price  int64
}

// shop lists purchases within a window of prices.
type shop struct {
	p       *problem
	classes []class
	choices []int // stocks that cost something, dearest per millimetre last
	cheap   [][]int
	least   []int64 // millimetres each class still needs
	now     purchase
	lo, hi  int64
	found   []purchase
	steps   int
	tests   int // steps that it takes to test a purchase
}

func (p *problem) newShop() *shop {
	s := &shop{p: p, classes: p.classes(), now: purchase{copies: make([]int, len(p.stocks))}}
	for i, st := range p.stocks {
		switch {
		case st.Price > 0 && !p.dominated(i):
			s.choices = append(s.choices, i)
		case st.Price == 0:
			s.now.copies[i] = p.copies(i)
		}
	}
	for _, c := range s.classes {
		s.tests += (1 + len(c.kinds)) * len(p.stocks)
	}
	s.tests /= 256
	// Long stocks first: fewer of them, so the tree is narrow at the top.
	slices.Reverse(s.choices)
	for _, c := range s.classes {
		need := c.need
		for i, n := range s.now.copies {
			if c.in[i] {
				need -= int64(n) * p.stocks[i].Length
			}
		}
		s.least = append(s.least, need)
		s.cheap = append(s.cheap, s.cheapest(c))
	}
	return s
}

// copies is how many of a stock can be of use.
func (p *problem) copies(i int) int {
	n := 0
	for _, k := range p.kinds {
		if k.fits[i] {
			n += len(k.pieces)
		}
	}
	if !p.stocks[i].Many {
		n = min(n, 1)
	}
	return n
}

// dominated stocks can be replaced by a cheaper one of at least their length
// that takes the same pieces; where the price is equal the scrap may not be.
func (p *problem) dominated(i int) bool {
	a := p.stocks[i]
	for j, b := range p.stocks {
		if !b.Many || b.Length < a.Length || b.Price >= a.Price || b.Least > max(a.Least, 1) {
			continue
		}
		if !slices.ContainsFunc(p.kinds, func(k kind) bool { return k.fits[i] && !k.fits[j] }) {
			return true
		}
	}
	return false
}

// cheapest is for each place in choices the stock of the class, from there on, with
// the least price per millimetre; -1 where there is none.
func (s *shop) cheapest(c class) []int {
	best := make([]int, len(s.choices)+1)
	best[len(s.choices)] = -1
	for at := len(s.choices) - 1; at >= 0; at-- {
		i, b := s.choices[at], best[at+1]
		best[at] = b
		if c.in[i] && (b < 0 || cheaper(s.p.stocks[i], s.p.stocks[b])) {
			best[at] = i
		}
	}
	return best
}

func cheaper(a, b supply) bool {
	ahi, alo := bits.Mul64(uint64(a.Price), uint64(b.Length))
	bhi, blo := bits.Mul64(uint64(b.Price), uint64(a.Length))
	return ahi < bhi || ahi == bhi && alo < blo
}

// rest is the least that what is missing costs from choice at on; false where it
// cannot be had.
func (s *shop) rest(at int) (int64, bool) {
	var most int64
	for c := range s.classes {
		if s.least[c] <= 0 {
			continue
		}
		i := s.cheap[c][at]
		if i < 0 {
			return 0, false
		}
		most = max(most, atLeast(s.least[c], s.p.stocks[i]))
	}
	return most, true
}

// window lists the purchases from lo to hi that no test refutes, cheapest first,
// then the longest; false where there are too many.
func (s *shop) window(lo, hi int64) ([]purchase, bool) {
	s.lo, s.hi, s.found, s.steps = lo, hi, nil, maxWalk
	ok := s.walk(0)
	s.p.nodes -= maxWalk - s.steps
	if !ok {
		return nil, false
	}
	slices.SortStableFunc(s.found, s.p.order)
	return s.found, true
}

const (
	maxClasses = 64 // leaving some out weakens the bound and keeps it true
	maxWalk    = 400_000
	maxFound   = 20_000
	maxCopies  = 4 << 20 // numbers of copies in all that is found
)

func (s *shop) walk(at int) bool {
	if s.steps--; s.steps < 0 || len(s.found) > min(maxFound, maxCopies/max(1, len(s.now.copies))) {
		return false
	}
	rest, ok := s.rest(at)
	if !ok || s.now.price+rest > s.hi {
		return true
	}
	if at == len(s.choices) {
		s.steps -= s.tests
		if s.now.price >= s.lo && !s.p.refuted(s.classes, s.now.copies) {
			s.found = append(s.found, purchase{slices.Clone(s.now.copies), s.now.price})
		}
		return true
	}
	i := s.choices[at]
	most := s.p.copies(i)
	before := s.now.price
	defer func() { s.take(i, -s.now.copies[i]); s.now.price = before }()
	for n := 0; n <= most; n++ {
		if n > 0 && n < min(s.p.stocks[i].Least, most) {
			continue // paid all the same
		}
		s.take(i, n-s.now.copies[i])
		s.now.price = before + s.p.stocks[i].price(n)
		if s.now.price > s.hi {
			break
		}
		if !s.walk(at + 1) {
			return false
		}
	}
	return true
}

func (s *shop) take(i, n int) {
	s.now.copies[i] += n
	for c := range s.classes {
		if s.classes[c].in[i] {
			s.least[c] -= int64(n) * s.p.stocks[i].Length
		}
	}
}
