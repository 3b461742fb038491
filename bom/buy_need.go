package bom

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// want is a number of pieces that is wanted for a job or a reorder level.
type want struct {
	claim *Claim        // or
	keep  *catalog.Keep // one of the two
	part  *catalog.Part
	each  int
	// By when it is to come: as needed or, where no offer comes by then, when the
	// fastest does. Zero is any day.
	latest unit.Date
}

func (w *want) needed() unit.Date {
	if w.claim == nil {
		return unit.Date{}
	}
	return w.claim.Needed
}

// gather lists what is to be bought: what jobs are short of, then what reorder
// levels lack.
func (b *buyer) gather() {
	for _, c := range b.a.Claims {
		switch {
		case c.Part().CutStock():
			// by part, see cutting
		case !b.bought(c):
			b.later(c, c.ShortBy())
		default:
			b.wantShort(c)
		}
	}
	b.gatherCuts()
	if b.terms.Jobs == nil {
		for i := range b.a.premises.Keeps {
			b.wantLevel(&b.a.premises.Keeps[i])
		}
	}
}

// wantShort wants what a claim is short of. What a sent order brings, if too late,
// is bought again only where an offer comes in time, or sooner than that order.
func (b *buyer) wantShort(c *Claim) {
	goods := b.market[c.Part().ID]
	in := slices.ContainsFunc(goods, func(g *good) bool { return g.inTime(c.Needed) })
	first, known := fastest(goods)
	short := c.Short
	for _, h := range c.Late {
		if in || known && first.Before(h.Supply.Day) {
			continue
		}
		short -= h.Each
		b.wait(c, h, catalog.Quantity{Each: int64(h.Each)})
	}
	if short > 0 {
		b.want(&want{claim: c, part: c.Part(), each: short})
	}
}

func (b *buyer) wait(c *Claim, h Hold, qty catalog.Quantity) {
	b.out.Waiting = append(b.out.Waiting, Waiting{c.Job(), c.Part(), qty, c.Needed, h.Supply.Name(), h.Supply.Day})
}

// want adds a want and says by when it is to come; what nobody sells is unsourced.
func (b *buyer) want(w *want) {
	goods := b.market[w.part.ID]
	if len(goods) == 0 || w.each > mostWanted {
		b.lacks(w.part.ID, b.unsourced(w.part.ID), catalog.Quantity{Each: int64(w.each)}, w.claim)
		return
	}
	w.latest = w.needed()
	if !slices.ContainsFunc(goods, func(g *good) bool { return g.inTime(w.latest) }) {
		w.latest, _ = fastest(goods)
	}
	b.wants[w.part.ID] = append(b.wants[w.part.ID], w)
}

// lacks notes what nobody sells; without a claim it is a reorder level that lacks it.
func (b *buyer) lacks(part, why string, qty catalog.Quantity, c *Claim) {
	at := slices.IndexFunc(b.out.Unsourced, func(u Unsourced) bool { return u.Part == part && u.Why == why })
	if at < 0 {
		at = len(b.out.Unsourced)
		b.out.Unsourced = append(b.out.Unsourced, Unsourced{Part: part, Why: why})
	}
	u := &b.out.Unsourced[at]
	u.Qty = u.Qty.Plus(qty)
	if c == nil {
		u.Keep = true
		return
	}
	u.Jobs = addServes(u.Jobs, c, qty)
}

// addServes adds to what a job gets.
func addServes(list []Serves, c *Claim, qty catalog.Quantity) []Serves {
	for i := range list {
		if list[i].Job == c.Job() {
			list[i].Qty = list[i].Qty.Plus(qty)
			return list
		}
	}
	return append(list, Serves{c.Job(), qty, c.Needed})
}

// split makes lots of the wants: what boxes bring together is bought together, all
// else part by part.
func (b *buyer) split() {
	ids := make([]string, 0, len(b.wants))
	for id := range b.wants {
		ids = append(ids, id)
	}
	slices.Sort(ids)
	joined := map[string]bool{}
	for _, id := range ids {
		if !joined[id] {
			b.lots = append(b.lots, b.lotOf(id, joined))
		}
	}
	var cut []string
	for id := range b.cuts {
		cut = append(cut, id)
	}
	slices.Sort(cut)
	for _, id := range cut {
		b.lots = append(b.lots, &lot{parts: []string{id}, goods: b.market[id], cut: b.cuts[id]})
	}
	b.listVendors()
}

// lotOf gathers a part and all that boxes join to it.
func (b *buyer) lotOf(id string, joined map[string]bool) *lot {
	l := &lot{parts: []string{id}}
	joined[id] = true
	for i := 0; i < len(l.parts); i++ {
		for _, g := range b.market[l.parts[i]] {
			if slices.Contains(l.goods, g) {
				continue
			}
			l.goods = append(l.goods, g)
			for _, other := range soldBy(g.Offer) {
				if b.wants[other] != nil && !joined[other] {
					joined[other] = true
					l.parts = append(l.parts, other)
				}
			}
		}
	}
	slices.Sort(l.parts)
	for _, p := range l.parts {
		l.wants = append(l.wants, b.wants[p]...)
	}
	l.steps()
	return l
}

// listVendors numbers the vendors that lots can be bought from.
func (b *buyer) listVendors() {
	for _, l := range b.lots {
		for _, g := range l.goods {
			if !slices.Contains(b.vendors, g.seller) {
				b.vendors = append(b.vendors, g.seller)
			}
		}
	}
	slices.SortFunc(b.vendors, func(v, w *catalog.Vendor) int { return strings.Compare(v.ID, w.ID) })
	for _, l := range b.lots {
		for _, g := range l.goods {
			g.vendor = slices.Index(b.vendors, g.seller)
		}
	}
}
