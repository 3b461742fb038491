package bom

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// good is an offer that can be used.
type good struct {
	*catalog.Offer
	seller  *catalog.Vendor
	vendor  int       // index in buyer.vendors
	arrives unit.Date // when ordered today; zero: nobody knows
	least   int       // packs
}

// brings is how many pieces of a part one pack holds.
func (g *good) brings(part string) int {
	if g.Part.Set {
		if g.Part.V == part {
			return g.Holds().Count
		}
		return 0
	}
	n := 0
	for _, p := range g.Brings {
		if p.Name == part {
			n += p.Val.V * max(1, g.Holds().Count)
		}
	}
	return n
}

// inTime reports whether the good surely comes by a day; no day is any day.
func (g *good) inTime(day unit.Date) bool {
	return day.IsZero() || !g.arrives.IsZero() && !g.arrives.After(day)
}

// holds reports whether a piece of cut stock can be cut from one pack.
func (g *good) holds(length unit.MM) bool {
	if g.ToLength() {
		return !g.CutTo.Set || length <= g.CutTo.V
	}
	return length <= g.Holds().Length
}

// Amounts beyond these are refused so that no sum can overflow.
const (
	dearestPack = unit.Money(1) << 36
	mostPacks   = 1 << 12 // as a least number
	mostWanted  = 1 << 24 // of one part
	dearestLine = unit.Money(1) << 50
)

// cost is the line for n packs: the price for that many, rounded half up to the cent.
func (g *good) cost(n int) unit.Money {
	if n == 0 {
		return 0
	}
	price := g.PriceOf(n)
	if price > 0 && unit.Money(n) > dearestLine/price {
		return dearestLine
	}
	return (price * unit.Money(n)).Cents()
}

// lengthCost is the line for a piece that is cut to length.
func (g *good) lengthCost(length unit.MM) unit.Money {
	return g.Price.V.Times(length).Cents()
}

// readMarket lists the offers that can be used by the part they bring. An offer that
// something else is wrong with is left out.
func (b *buyer) readMarket() {
	b.market, b.refused = map[string][]*good{}, map[string]string{}
	for i := range b.offers.Offers {
		o := &b.offers.Offers[i]
		seller := b.offers.Vendor(o.Vendor.V)
		if seller == nil || !b.sound(o) {
			continue
		}
		g := &good{Offer: o, seller: seller, least: max(1, o.Least.V)}
		if why := b.refuse(g); why != "" {
			for _, id := range soldBy(o) {
				b.refused[id] = why
			}
			continue
		}
		if o.LeadDays.Set {
			g.arrives = b.a.premises.Calendar.AddWorkdays(b.a.Today, o.LeadDays.V)
		}
		for _, id := range soldBy(o) {
			b.market[id] = append(b.market[id], g)
		}
	}
	for _, list := range b.market {
		slices.SortStableFunc(list, func(x, y *good) int {
			return cmp.Or(strings.Compare(x.seller.ID, y.seller.ID), strings.Compare(x.Code.V, y.Code.V))
		})
	}
}

// soldBy lists the parts that an offer brings, each once.
func soldBy(o *catalog.Offer) []string {
	if o.Part.Set {
		return []string{o.Part.V}
	}
	var out []string
	for _, p := range o.Brings {
		if !slices.Contains(out, p.Name) {
			out = append(out, p.Name)
		}
	}
	return out
}

// sound reports an offer whose parts exist and whose pack suits them.
func (b *buyer) sound(o *catalog.Offer) bool {
	if !o.Price.Set || o.Part.Set == (len(o.Brings) > 0) {
		return false
	}
	for _, id := range soldBy(o) {
		p := b.parts(id)
		switch {
		case p == nil, o.ToLength() && !p.CutStock():
			return false
		case !o.Part.Set:
			if p.CutStock() {
				return false // of what length?
			}
		case !o.ToLength() && p.CutStock() != (o.Holds().Length > 0):
			return false
		}
	}
	return true
}

// refuse is why a sound offer is not used, or "".
func (b *buyer) refuse(g *good) string {
	switch {
	case b.shut[g.seller.ID]:
		return "the goods do not come up to the least order of " + g.seller.ID
	case !g.ValidOn(b.a.Today):
		return "the offer " + named(g.Offer) + " held until " + g.Until.V.String()
	case g.Price.V > dearestPack || g.least > mostPacks:
		return "the offer " + named(g.Offer) + " is beyond what is reckoned with"
	case g.ToLength() && g.least > 1:
		return "the offer " + named(g.Offer) + " is cut to length and has a least number of packs"
	case !g.ToLength() && g.cost(g.least) == 0:
		return "the offer " + named(g.Offer) + " names no price"
	}
	return ""
}

func named(o *catalog.Offer) string {
	return strings.TrimSpace(o.Code.V + " of " + o.Vendor.V)
}

// fastest is the first day on which one of the goods comes; false where nobody knows
// of any.
func fastest(goods []*good) (unit.Date, bool) {
	var day unit.Date
	for _, g := range goods {
		if !g.arrives.IsZero() && (day.IsZero() || g.arrives.Before(day)) {
			day = g.arrives
		}
	}
	return day, !day.IsZero()
}

// unsourced says why nobody sells a part.
func (b *buyer) unsourced(part string) string {
	if why := b.refused[part]; why != "" {
		return why
	}
	return "nobody offers it"
}
