package bom

import (
	"cmp"
	"slices"
)

// counted shares out a part that is counted. Claims take in their turn what suits
// them best; where one would go short although goods are left that only others can
// use, those before it move over as far as they lose nothing.
func (a *allocator) counted(claims []*Claim, supplies []*Supply, reserves []*kept) {
	s := newShare(a, claims, supplies)
	for _, k := range reserves {
		s.reserve(k)
	}
	s.pegs()
	for i, c := range claims {
		s.take(i, int64(c.Each)-s.total[i])
		for s.total[i] < int64(c.Each) && s.moveOver(i) {
		}
	}
	for i, c := range claims {
		c.Short = c.Each - int(s.total[i])
	}
	s.write()
	a.late(claims, supplies)
}

// share is one part on its way to its claims. Claims of one crew and day are of one
// class: what suits one suits all of them.
type share struct {
	a        *allocator
	claims   []*Claim
	supplies []*Supply
	class    []int     // of each claim
	reach    [][]int   // by class and supply
	best     [][]int   // by class: supplies that suit it, the best first
	held     [][]int64 // by claim and supply
	pinned   [][]int64 // of held, what a reserve or an order line pins
	total    []int64   // by claim
}

func newShare(a *allocator, claims []*Claim, supplies []*Supply) *share {
	s := &share{a: a, claims: claims, supplies: supplies, class: make([]int, len(claims)), total: make([]int64, len(claims)),
		held: make([][]int64, len(claims)), pinned: make([][]int64, len(claims))}
	type key struct {
		crew string
		day  [3]int
	}
	known := map[key]int{}
	for i, c := range claims {
		s.held[i], s.pinned[i] = make([]int64, len(supplies)), make([]int64, len(supplies))
		k := key{c.Demand.Crew, [3]int{c.Needed.Year, c.Needed.Month, c.Needed.Day}}
		class, seen := known[k]
		if !seen {
			class = len(s.reach)
			known[k] = class
			s.addClass(c)
		}
		s.class[i] = class
	}
	return s
}

func (s *share) addClass(c *Claim) {
	reach := make([]int, len(s.supplies))
	var best []int
	for j, p := range s.supplies {
		if reach[j] = s.a.reach(p, c.Demand, c.Needed); reach[j] > 0 {
			best = append(best, j)
		}
	}
	slices.SortStableFunc(best, func(x, y int) int { return cmp.Compare(reach[x], reach[y]) })
	s.reach, s.best = append(s.reach, reach), append(s.best, best)
}

// hold keeps as much of a supply as is free, at most n, for a claim.
func (s *share) hold(claim, supply int, n int64) int64 {
	p := s.supplies[supply]
	n = min(n, p.Free.Each)
	if n <= 0 {
		return 0
	}
	p.Free.Each -= n
	s.held[claim][supply] += n
	s.total[claim] += n
	return n
}

// take keeps up to n for a claim from what suits it, the best first.
func (s *share) take(claim int, n int64) {
	for _, j := range s.best[s.class[claim]] {
		if n <= 0 {
			return
		}
		n -= s.hold(claim, j, n)
	}
}

// pin is hold for goods that no other claim may move.
func (s *share) pin(claim, supply int, n int64) int64 {
	got := s.hold(claim, supply, n)
	s.pinned[claim][supply] += got
	return got
}

// reserve pins what a plan reserves, from the shelf it names or from those of its
// crew.
func (s *share) reserve(k *kept) {
	i := slices.Index(s.claims, k.claim)
	if i < 0 {
		return
	}
	want := min(int64(k.Qty.Or(s.claims[i].Each)), int64(s.claims[i].Each)-s.total[i])
	k.used = want <= 0 // another reserve of the job has it all
	for _, j := range s.best[s.class[i]] {
		p := s.supplies[j]
		if !p.Here() || k.Where.Set && p.Where != k.Where.V {
			continue
		}
		got := s.pin(i, j, want)
		want -= got
		k.used = k.used || got > 0
	}
}

// pegs pins what order lines were bought for, where it comes in time.
func (s *share) pegs() {
	for j, p := range s.supplies {
		if p.Open == nil {
			continue
		}
		for _, job := range p.Open.Line.Jobs.V {
			for i, c := range s.claims {
				if c.Job() == job.V && s.reach[s.class[i]][j] > 0 {
					s.pin(i, j, int64(c.Each)-s.total[i])
				}
			}
		}
	}
}

// step is one link of a chain along which claims move over: claims of a class leave
// one supply for another.
type step struct{ from, class, to int }

// moveOver frees goods that suit a claim by moving those of others to what is free.
// It reports whether it could.
func (s *share) moveOver(claim int) bool {
	chain := s.chain(s.class[claim])
	if chain == nil {
		return false
	}
	n := min(int64(s.claims[claim].Each)-s.total[claim], s.supplies[chain[len(chain)-1].to].Free.Each)
	for _, st := range chain {
		n = min(n, s.loose(st.class, st.from))
	}
	for i := len(chain) - 1; i >= 0; i-- {
		s.shift(chain[i], n)
	}
	return s.hold(claim, chain[0].from, n) > 0
}

// chain is the shortest way from a supply that suits the class to one with goods
// left, or nil.
func (s *share) chain(class int) []step {
	if !slices.ContainsFunc(s.supplies, func(p *Supply) bool { return p.Free.Each > 0 }) {
		return nil
	}
	came := make([]*step, len(s.supplies)) // how each supply was reached
	seen := make([]bool, len(s.supplies))
	queue := slices.Clone(s.best[class])
	for _, j := range queue {
		seen[j] = true
	}
	for len(queue) > 0 {
		from := queue[0]
		queue = queue[1:]
		for k := range s.reach {
			if s.loose(k, from) == 0 {
				continue
			}
			for _, to := range s.best[k] {
				if seen[to] {
					continue
				}
				seen[to], came[to] = true, &step{from, k, to}
				if s.supplies[to].Free.Each > 0 {
					return trace(came, to)
				}
				queue = append(queue, to)
			}
		}
	}
	return nil
}

func trace(came []*step, at int) []step {
	var out []step
	for came[at] != nil {
		out = append(out, *came[at])
		at = came[at].from
	}
	slices.Reverse(out)
	return out
}

// loose is what claims of a class hold of a supply and may move.
func (s *share) loose(class, supply int) int64 {
	var sum int64
	for i := range s.claims {
		if s.class[i] == class {
			sum += s.held[i][supply] - s.pinned[i][supply]
		}
	}
	return sum
}

// shift moves n of what claims of a class hold from one supply to another, those of
// the last first.
func (s *share) shift(st step, n int64) {
	for i := len(s.claims) - 1; i >= 0 && n > 0; i-- {
		if s.class[i] != st.class {
			continue
		}
		m := min(n, s.held[i][st.from]-s.pinned[i][st.from])
		s.held[i][st.from] -= m
		s.held[i][st.to] += m
		s.supplies[st.from].Free.Each += m
		s.supplies[st.to].Free.Each -= m
		n -= m
	}
}

// write gives each claim what is held for it, in the order in which it is taken.
func (s *share) write() {
	for i, c := range s.claims {
		for _, j := range s.best[s.class[i]] {
			if n := s.held[i][j]; n > 0 {
				c.Held = append(c.Held, Hold{Supply: s.supplies[j], Each: int(n)})
			}
		}
	}
}

// late covers what is short with what sent orders bring too late, so that it is
// known and not bought twice.
func (a *allocator) late(claims []*Claim, supplies []*Supply) {
	free := make([]int64, len(supplies))
	for j, p := range supplies {
		free[j] = p.Free.Each
	}
	cover := func(c *Claim, j int) {
		p := supplies[j]
		if p.Here() || c.Needed.IsZero() || !p.Day.After(c.Needed) || a.reach(p, c.Demand, p.Day) == 0 {
			return
		}
		n := min(free[j], int64(c.Short-c.lateEach()))
		if n > 0 {
			free[j] -= n
			c.Late = append(c.Late, Hold{Supply: p, Each: int(n)})
		}
	}
	for j, p := range supplies {
		if p.Open == nil {
			continue
		}
		for _, job := range p.Open.Line.Jobs.V {
			for _, c := range claims {
				if c.Job() == job.V {
					cover(c, j)
				}
			}
		}
	}
	for _, c := range claims {
		for j := range supplies {
			cover(c, j)
		}
	}
}

func (c *Claim) lateEach() int {
	n := 0
	for _, h := range c.Late {
		n += h.Each
	}
	return n
}
