package bom

import (
	"cmp"
	"math/bits"
	"slices"

	"driploop/catalog/unit"
)

// floor is an amount of goods that a case asks of a vendor.
type floor struct {
	vendor int
	goods  unit.Money
}

// cases goes through the cases of the gates from at on.
func (s *search) cases(at int, closed uint64, floors []floor, fee unit.Money) {
	picks, least := s.all(closed)
	if picks == nil && s.gaveUp {
		_, least = s.all(0)
		s.open = min(s.open, fee+least)
	}
	if picks == nil || fee+least >= s.cost {
		return
	}
	if s.nodes--; s.nodes <= 0 {
		s.open = min(s.open, fee+least)
		return
	}
	if at == len(s.gates) {
		s.decide(closed, picks, floors, fee, least)
		return
	}
	i := s.gates[at]
	v := s.b.vendors[i]
	s.cases(at+1, closed|1<<at, floors, fee)
	if v.Freight.V > 0 && v.FreeOver.Set {
		s.cases(at+1, closed, append(slices.Clip(floors), floor{i, max(v.FreeOver.V, v.LeastOrder.V)}), fee)
	}
	s.cases(at+1, closed, append(slices.Clip(floors), floor{i, v.LeastOrder.V}), fee+v.Freight.V)
}

// decide finds the best purchase of one case, or notes what it may cost at least.
func (s *search) decide(closed uint64, picks []*pick, floors []floor, fee, least unit.Money) {
	goods, total := s.goods(picks)
	proved := total == least
	var below []floor
	for _, f := range floors {
		if goods[f.vendor] < f.goods {
			below = append(below, f)
			least = max(least, s.leastWith(closed, f))
		}
	}
	switch {
	case fee+least >= s.cost:
		return
	case len(below) == 0:
		s.offer(picks)
	case s.limits != nil:
		s.limit(closed, floors, fee)
		return
	default:
		s.lift(closed, picks, floors, fee+total)
	}
	// What is left of the case: ways that the lists lack, and lots whose cheapest way is not proved.
	undecided := nothing
	if !proved {
		undecided = fee + least
	}
	for i, l := range s.b.lots {
		if len(below) > 0 && s.reaches(l, floors) {
			_, sum := s.all(closed)
			undecided = min(undecided, fee+max(least, sum+s.whole[i]-s.cheapest(l, closed).least))
		}
	}
	if undecided < s.cost {
		s.open = min(s.open, undecided)
	}
}

// limit notes, for a case that dearer ways have to be tried for, up to which price
// ways to buy its lots matter.
func (s *search) limit(closed uint64, floors []floor, fee unit.Money) {
	_, least := s.all(closed)
	for i, l := range s.b.lots {
		if s.reaches(l, floors) {
			s.limits[i] = max(s.limits[i], s.cheapest(l, closed).least+s.cost-fee-least)
		}
	}
}

// leastWith is what goods cost at least where a vendor sells for so much: that, and
// the lots that it does not sell.
func (s *search) leastWith(closed uint64, f floor) unit.Money {
	least := f.goods
	for _, l := range s.b.lots {
		if !s.reaches(l, []floor{f}) {
			least += s.cheapest(l, closed).least
		}
	}
	return least
}

// reaches reports a lot that can add to goods of which a case asks for some amount.
func (s *search) reaches(l *lot, floors []floor) bool {
	return slices.ContainsFunc(l.goods, func(g *good) bool {
		return slices.ContainsFunc(floors, func(f floor) bool { return f.goods > 0 && f.vendor == g.vendor })
	})
}

// lifting tries dearer ways to buy lots until every vendor has the goods that a case
// asks of it.
type lifting struct {
	s      *search
	lots   []int
	ways   [][]*pick // by place in lots, cheapest first
	rates  [][]rate  // by floor, the cheapest gain first
	floors []floor
	now    []*pick
	goods  []unit.Money
	spent  unit.Money // with all freight of the case
	nodes  int        // left for the case
}

func (s *search) lift(closed uint64, picks []*pick, floors []floor, spent unit.Money) {
	f := &lifting{s: s, floors: floors, now: slices.Clone(picks), spent: spent}
	f.goods, _ = s.goods(picks)
	for i, l := range s.b.lots {
		if !s.reaches(l, floors) {
			continue // dearer for nothing
		}
		f.lots = append(f.lots, i)
		f.ways = append(f.ways, s.allowed(s.lists[i], closed, picks[i], picks[i].cost+s.cost-spent))
	}
	f.sumRates(picks)
	f.nodes = min(s.nodes, max(1, s.most/8))
	s.nodes -= f.nodes
	done := f.from(0)
	s.nodes += max(0, f.nodes)
	if !done {
		s.open = min(s.open, spent)
	}
}

// allowed lists the ways that buy nothing from closed vendors and cost less than a
// limit, and the given one, cheapest first.
func (s *search) allowed(list []*pick, closed uint64, base *pick, limit unit.Money) []*pick {
	out := []*pick{base}
	for _, p := range list {
		shut := false
		for i, v := range s.gates {
			shut = shut || closed>>i&1 == 1 && p.goods[v] > 0
		}
		if !shut && p.cost < limit && !slices.Equal(p.goods, base.goods) {
			out = append(out, p)
		}
	}
	slices.SortStableFunc(out, func(p, q *pick) int { return cmp.Compare(p.cost, q.cost) })
	return out
}

// rate is what a lot can add at most to the goods of a vendor, and at which price: so
// much more cost for so much more goods, or worse.
type rate struct {
	at         int // place in lots
	most       unit.Money
	dearer, on unit.Money
}

func (f *lifting) sumRates(picks []*pick) {
	for _, fl := range f.floors {
		var rates []rate
		for i, ways := range f.ways {
			base := picks[f.lots[i]]
			r := rate{at: i}
			for _, p := range ways {
				gain, dearer := p.goods[fl.vendor]-base.goods[fl.vendor], max(0, p.cost-base.cost)
				if gain <= 0 {
					continue
				}
				if r.most = max(r.most, gain); r.on == 0 || ratio(dearer, gain, r.dearer, r.on) < 0 {
					r.dearer, r.on = dearer, gain
				}
			}
			if r.most > 0 {
				rates = append(rates, r)
			}
		}
		slices.SortStableFunc(rates, func(x, y rate) int { return ratio(x.dearer, x.on, y.dearer, y.on) })
		f.rates = append(f.rates, rates)
	}
}

// ratio compares a/b with c/d.
func ratio(a, b, c, d unit.Money) int {
	xhi, xlo := bits.Mul64(uint64(a), uint64(d))
	yhi, ylo := bits.Mul64(uint64(c), uint64(b))
	return cmp.Or(cmp.Compare(xhi, yhi), cmp.Compare(xlo, ylo))
}

// dearer is what the lots from a place on cost more at least where they add an amount
// to the goods of a floor; false where they cannot.
func (f *lifting) dearer(floor, at int, missing unit.Money) (unit.Money, bool) {
	var cost unit.Money
	for _, r := range f.rates[floor] {
		if missing <= 0 {
			break
		}
		if r.at < at {
			continue
		}
		hi, lo := bits.Mul64(uint64(min(missing, r.most)), uint64(r.dearer))
		if hi < uint64(r.on) {
			q, _ := bits.Div64(hi, lo, uint64(r.on))
			cost += unit.Money(min(q, uint64(dearestLine)))
		}
		missing -= r.most
	}
	return cost, missing <= 0
}

// from tries the ways of the lots from a place on; false where the nodes ran out.
func (f *lifting) from(at int) bool {
	if f.nodes--; f.nodes <= 0 {
		return false
	}
	reached := true
	for i, fl := range f.floors {
		missing := fl.goods - f.goods[fl.vendor]
		if missing > 0 {
			if more, ok := f.dearer(i, at, missing); !ok || f.spent+more >= f.s.cost {
				return true
			}
		}
		reached = reached && missing <= 0
	}
	if reached {
		f.s.offer(f.now)
		return true
	}
	if at == len(f.lots) {
		return true
	}
	lot := f.lots[at]
	base := f.now[lot]
	for _, p := range f.ways[at] {
		if f.spent+p.cost-base.cost >= f.s.cost {
			break
		}
		f.put(lot, p)
		if !f.from(at + 1) {
			return false
		}
		f.put(lot, base)
	}
	return true
}

func (f *lifting) put(lot int, p *pick) {
	was := f.now[lot]
	for v := range f.goods {
		f.goods[v] += p.goods[v] - was.goods[v]
	}
	f.spent += p.cost - was.cost
	f.now[lot] = p
}
