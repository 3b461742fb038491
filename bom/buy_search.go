package bom

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// search chooses how each lot is bought, so that goods and freight together cost
// least.
//
// Without freight and least orders each lot would be bought the cheapest way on its
// own. These depend on a vendor's goods only through three cases: there is no order,
// freight is paid, or there are goods enough for free carriage. The search goes
// through the cases of all vendors. Within one the cheapest ways are a lower bound,
// and the best where they reach the amounts that the case asks for; else dearer ways
// are tried as far as the best purchase so far leaves room.
type search struct {
	b      *buyer
	gates  []int // vendors with freight or a least order
	best   []*pick
	cost   unit.Money
	open   unit.Money   // the least that what was not decided may cost
	most   int          // nodes in all; one case has a part of them
	nodes  int          // left; to buy a lot with other vendors takes some for each offer
	limits []unit.Money // by lot, while they are looked for: up to which price its ways matter
	lists  [][]*pick    // by lot: dearer ways to buy it
	whole  []unit.Money // by lot: below this price its list is complete

	planned int  // of cuts, with vendors left out
	gaveUp  bool // some were not planned for it
}

// nothing is above every cost of a purchase.
const nothing = unit.Money(1) << 62

// search returns the picks by lot, or the vendor whose least order cannot be reached.
func (b *buyer) search() (picks []*pick, refuses string) {
	s := &search{b: b, cost: nothing, open: nothing, nodes: b.terms.Nodes}
	if s.nodes <= 0 {
		s.nodes = searchNodes
	}
	s.most = s.nodes
	for i, v := range b.vendors {
		if (v.Freight.V > 0 || v.LeastOrder.V > 0) && len(s.gates) < 60 {
			s.gates = append(s.gates, i)
		}
	}
	if refuses := s.first(); s.best == nil {
		return nil, refuses
	}
	s.listPicks()
	s.cases(0, 0, nil, 0)
	b.out.Total, b.out.Bound = s.cost, min(s.cost, s.open)
	b.out.Proved = b.out.Total == b.out.Bound
	return s.best, ""
}

// cheapest is the cheapest way to buy a lot where the vendors of a mask of gates are
// closed.
func (s *search) cheapest(l *lot, closed uint64) chosen {
	var matters uint64
	for i, v := range s.gates {
		if slices.ContainsFunc(l.goods, func(g *good) bool { return g.vendor == v }) {
			matters |= 1 << i
		}
	}
	closed &= matters
	if c, ok := l.known[closed]; ok {
		return c
	}
	shut := func(g *good) bool {
		i := slices.Index(s.gates, g.vendor)
		return i >= 0 && closed>>i&1 == 1
	}
	s.nodes -= 4 * len(l.goods)
	var c chosen
	switch {
	case l.cut != nil && closed != 0 && s.tired(l.cut):
	case l.cut != nil:
		c = s.b.cheapestCut(l.cut, l, shut)
	default:
		byGood := make([]bool, len(l.goods))
		for i, g := range l.goods {
			byGood[i] = shut(g)
		}
		c = s.b.cheapestCounted(l, byGood)
	}
	if l.known == nil {
		l.known = map[uint64]chosen{}
	}
	l.known[closed] = c
	return c
}

// mostCutWork is how much is planned to cut with vendors left out, in pieces times what
// they may be cut from.
const mostCutWork = 1 << 24

// tired reports that too much was planned already for one more plan of the cuts. The
// vendors are then taken as not to be left out, and the purchase is not proved.
func (s *search) tired(c *cutting) bool {
	s.planned += len(c.pieces) * (len(c.supplies) + len(c.goods))
	s.gaveUp = s.gaveUp || s.planned > mostCutWork
	return s.planned > mostCutWork
}

// all is the cheapest way to buy each lot, and what they cost at least; nil where
// one cannot be had.
func (s *search) all(closed uint64) ([]*pick, unit.Money) {
	out := []*pick{}
	var least unit.Money
	for _, l := range s.b.lots {
		c := s.cheapest(l, closed)
		if c.pick == nil {
			return nil, 0
		}
		out = append(out, c.pick)
		least += c.least
	}
	return out, least
}

// first finds purchases to begin with: with all vendors, without each one, and with
// each one alone as far as it goes. With all of them it may find a vendor whose least
// order cannot be reached.
func (s *search) first() (refuses string) {
	every := uint64(1)<<len(s.gates) - 1
	masks := []uint64{0}
	for i := range s.gates {
		masks = append(masks, 1<<i, every&^(1<<i))
	}
	for _, closed := range masks {
		picks, _ := s.all(closed)
		if picks == nil {
			continue
		}
		s.offer(picks)
		for _, all := range []bool{false, true} {
			raised, below := s.raised(picks, all)
			s.offer(raised)
			if closed == 0 && below != "" {
				refuses = below
			}
		}
	}
	return refuses
}

// offer keeps a purchase where it is the cheapest so far.
func (s *search) offer(picks []*pick) {
	if picks == nil {
		return
	}
	if cost, ok := s.price(picks); ok && cost < s.cost {
		s.best, s.cost = slices.Clone(picks), cost
	}
}

// price is what a purchase costs with freight; false where a vendor would not take
// the order.
func (s *search) price(picks []*pick) (unit.Money, bool) {
	goods, total := s.goods(picks)
	for i, v := range s.b.vendors {
		if goods[i] > 0 && goods[i] < v.LeastOrder.V {
			return 0, false
		}
		total += freight(v, goods[i])
	}
	return total, true
}

func (s *search) goods(picks []*pick) (byVendor []unit.Money, total unit.Money) {
	byVendor = make([]unit.Money, len(s.b.vendors))
	for _, p := range picks {
		for i, m := range p.goods {
			byVendor[i] += m
		}
		total += p.cost
	}
	return byVendor, total
}

// freight is what carriage of an order costs.
func freight(v *catalog.Vendor, goods unit.Money) unit.Money {
	if goods == 0 || v.FreeOver.Set && goods >= v.FreeOver.V {
		return 0
	}
	return v.Freight.V
}

// raised adds spare packs of one line where a vendor's least order, or also its free
// carriage, is not reached. Where no line can, it says which vendor refuses.
func (s *search) raised(picks []*pick, free bool) (out []*pick, refuses string) {
	out = slices.Clone(picks)
	for v, vendor := range s.b.vendors {
		goods, _ := s.goods(out)
		want := vendor.LeastOrder.V
		if free && vendor.FreeOver.Set && freight(vendor, goods[v]) > 0 {
			want = max(want, vendor.FreeOver.V)
		}
		if goods[v] == 0 || goods[v] >= want {
			continue
		}
		at, better := -1, (*pick)(nil)
		for i, p := range out {
			if q := s.spare(i, p, v, want-goods[v]); q != nil && (better == nil || q.cost-p.cost < better.cost-out[at].cost) {
				at, better = i, q
			}
		}
		if at >= 0 {
			out[at] = better
		} else if goods[v] < vendor.LeastOrder.V {
			return nil, vendor.ID
		}
	}
	return out, ""
}

// spare is the pick with so many more packs of one good of a vendor that its goods
// rise by an amount at least.
func (s *search) spare(at int, p *pick, vendor int, by unit.Money) *pick {
	l := s.b.lots[at]
	var best *pick
	for i, g := range l.goods {
		if g.vendor != vendor || g.ToLength() || g.lowest() <= 0 {
			continue
		}
		n := max(g.least, p.packs[i]+1, int((p.goods[vendor]+by)/g.lowest())/2)
		for before := g.cost(p.packs[i]); n > p.packs[i]+1 && g.cost(n-1) >= before+by; n-- {
		}
		for before := g.cost(p.packs[i]); g.cost(n) < before+by && n < mostWanted; n++ {
		}
		q := s.with(l, p, i, n)
		if q.goods[vendor] < p.goods[vendor]+by {
			continue
		}
		if best == nil || q.cost < best.cost {
			best = q
		}
	}
	if q := s.longer(p, vendor, by); q != nil && (best == nil || q.cost < best.cost) {
		best = q
	}
	return best
}

// longer is the pick with one length that is bought from a vendor made so much longer
// that its goods rise by an amount at least, or nil.
func (s *search) longer(p *pick, vendor int, by unit.Money) *pick {
	if p.plan == nil {
		return nil
	}
	for i, x := range p.plan.lengths {
		if x.good.vendor != vendor || x.good.Price.V == 0 {
			continue
		}
		cost := x.good.lengthCost(x.length) + by
		if cost > dearestPack {
			continue
		}
		length := unit.MM((cost*1000 + x.good.Price.V - 1) / x.good.Price.V)
		if length >= longestPiece || !x.good.holds(length) {
			continue
		}
		plan := *p.plan
		plan.lengths = slices.Clone(plan.lengths)
		plan.lengths[i].length = length
		q := &pick{lot: p.lot, packs: p.packs, plan: &plan, goods: make([]unit.Money, len(p.goods))}
		s.b.price(q)
		return q
	}
	return nil
}

// with is the pick with another number of packs of one good.
func (s *search) with(l *lot, p *pick, good, n int) *pick {
	q := &pick{lot: l, packs: slices.Clone(p.packs), plan: p.plan, goods: make([]unit.Money, len(s.b.vendors))}
	q.packs[good] = n
	s.b.price(q)
	return q
}

// listPicks lists, for each lot, the ways that matter: in some case they are dearer
// than the cheapest by no more than that case leaves to the best purchase so far.
func (s *search) listPicks() {
	limits, nodes := make([]unit.Money, len(s.b.lots)), s.nodes
	s.limits = limits
	s.cases(0, 0, nil, 0)
	s.limits, s.nodes, s.open = nil, nodes, nothing
	for i, l := range s.b.lots {
		c := s.cheapest(l, 0)
		var list []*pick
		var whole unit.Money
		switch {
		case limits[i] < c.least:
			whole = nothing
		case l.cut != nil:
			list, whole = s.cutPicks(i, c, limits[i])
		default:
			list, whole = s.b.picks(l, c.least, limits[i])
		}
		s.lists, s.whole = append(s.lists, list), append(s.whole, whole)
	}
}
