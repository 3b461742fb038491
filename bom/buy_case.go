package bom

import (
	"cmp"
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
	ways   [][]*pick      // by place in lots, cheapest first
	gains  [][]unit.Money // by floor: the most that the lots from a place on add
	floors []floor
	now    []*pick
	goods  []unit.Money
	spent  unit.Money // with all freight of the case
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
	f.sumGains(picks)
	if !f.from(0) {
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

func (f *lifting) sumGains(picks []*pick) {
	for _, fl := range f.floors {
		gains := make([]unit.Money, len(f.lots)+1)
		for i := len(f.lots) - 1; i >= 0; i-- {
			var most unit.Money
			for _, p := range f.ways[i] {
				most = max(most, p.goods[fl.vendor]-picks[f.lots[i]].goods[fl.vendor])
			}
			gains[i] = gains[i+1] + most
		}
		f.gains = append(f.gains, gains)
	}
}

// from tries the ways of the lots from a place on; false where the nodes ran out.
func (f *lifting) from(at int) bool {
	if f.s.nodes--; f.s.nodes <= 0 {
		return false
	}
	reached := true
	for i, fl := range f.floors {
		missing := fl.goods - f.goods[fl.vendor]
		if missing > f.gains[i][at] {
			return true
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
