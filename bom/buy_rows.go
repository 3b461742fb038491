package bom

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// write puts down what was chosen for each lot.
func (b *buyer) write(chosen []*pick) {
	for i, l := range b.lots {
		var rows []*BuyRow
		if l.cut != nil {
			rows = b.writeCut(l.cut, chosen[i])
		} else {
			rows = b.writeCounted(l, chosen[i])
		}
		b.out.Rows = append(b.out.Rows, rows...)
	}
	for _, r := range b.out.Rows {
		b.sums(r)
	}
	slices.SortStableFunc(b.out.Rows, func(x, y *BuyRow) int {
		return cmp.Or(strings.Compare(x.Vendor.ID, y.Vendor.ID), strings.Compare(x.Parts[0].Part.ID, y.Parts[0].Part.ID))
	})
	b.writeFreight()
	slices.SortStableFunc(b.out.Cuts, func(x, y *CutPlan) int { return strings.Compare(x.Part.ID, y.Part.ID) })
	slices.SortStableFunc(b.out.Unsourced, func(x, y Unsourced) int { return strings.Compare(x.Part, y.Part) })
}

func (b *buyer) writeFreight() {
	for _, v := range b.vendors {
		var goods unit.Money
		ordered := false
		for _, r := range b.out.Rows {
			if r.Vendor == v {
				goods += r.Cost
				ordered = true
			}
		}
		if ordered {
			b.out.Freight = append(b.out.Freight, Freight{v, goods, freight(v, goods)})
		}
	}
}

func (b *buyer) row(g *good, packs int) *BuyRow {
	return &BuyRow{Offer: g.Offer, Vendor: g.seller, Packs: packs, Pack: g.Holds(), Price: g.PriceOf(packs), Cost: g.cost(packs), Arrives: g.arrives}
}

// brought finds what a row brings of a part.
func (r *BuyRow) brought(p *catalog.Part) *Bought {
	for i := range r.Parts {
		if r.Parts[i].Part == p {
			return &r.Parts[i]
		}
	}
	r.Parts = append(r.Parts, Bought{Part: p})
	return &r.Parts[len(r.Parts)-1]
}

// serve notes what a row brings for a claim, or for a reorder level.
func (r *BuyRow) serve(p *catalog.Part, c *Claim, qty catalog.Quantity) {
	of := r.brought(p)
	if c == nil {
		of.Keep = of.Keep.Plus(qty)
		return
	}
	of.For = addServes(of.For, c, qty)
	if !c.Needed.IsZero() && (r.Needed.IsZero() || c.Needed.Before(r.Needed)) {
		r.Needed = c.Needed
	}
	late := !c.Needed.IsZero() && (r.Arrives.IsZero() || r.Arrives.After(c.Needed))
	if late && !slices.ContainsFunc(r.Late, func(l LateJob) bool { return l.Job == c.Job() }) {
		r.Late = append(r.Late, LateJob{c.Job(), c.Needed, r.Arrives})
	}
}

// sums completes a row whose goods are shared out.
func (b *buyer) sums(r *BuyRow) {
	if !r.Needed.IsZero() && r.Offer.LeadDays.Set {
		r.OrderBy = b.a.premises.Calendar.AddWorkdays(r.Needed, -r.Offer.LeadDays.V)
	}
	for i := range r.Parts {
		of := &r.Parts[i]
		for _, x := range b.wants[of.Part.ID] {
			if x.keep != nil {
				of.Need.Each += int64(x.each)
			}
		}
		if c := b.cuts[of.Part.ID]; c != nil {
			for _, w := range c.pieces {
				of.Need.Length += w.keep
			}
		}
		for _, c := range b.a.claimed[of.Part.ID] {
			if b.bought(c) {
				of.Need = of.Need.Plus(c.Quantity())
				b.covered(of, c)
			}
		}
	}
}

// covered adds what a claim gets without buying.
func (b *buyer) covered(of *Bought, c *Claim) {
	add := func(s *Supply, qty catalog.Quantity) {
		if s.Here() {
			of.Shelf = of.Shelf.Plus(qty)
		} else {
			of.Inbound = of.Inbound.Plus(qty)
		}
	}
	if !of.Part.CutStock() {
		for _, h := range c.Held {
			add(h.Supply, catalog.Quantity{Each: int64(h.Each)})
		}
		return
	}
	for _, plan := range b.out.Cuts {
		for _, p := range plan.Pieces {
			if s := plan.Opened[p.From].Supply; plan.Part == of.Part && p.Job == c.Job() && s != nil {
				add(s, catalog.Quantity{Length: p.Piece.Length})
			}
		}
	}
}

// writeCounted shares what is bought of a counted lot out: early wants take first,
// from what comes first.
func (b *buyer) writeCounted(l *lot, p *pick) []*BuyRow {
	var rows []*BuyRow
	order := make([]int, len(l.goods))
	for i := range order {
		order[i] = i
	}
	slices.SortStableFunc(order, func(i, j int) int { return byDayOrNone(l.goods[i].arrives, l.goods[j].arrives) })
	left := map[*BuyRow]map[string]int{}
	var goods []*good
	for _, i := range order {
		if p.packs[i] == 0 {
			continue
		}
		r := b.row(l.goods[i], p.packs[i])
		left[r] = map[string]int{}
		for _, part := range l.parts {
			if n := l.goods[i].brings(part) * p.packs[i]; n > 0 {
				left[r][part] = n
				r.brought(b.parts(part)).Qty.Each = int64(n)
			}
		}
		rows, goods = append(rows, r), append(goods, l.goods[i])
	}
	wants := slices.Clone(l.wants)
	slices.SortStableFunc(wants, func(v, w *want) int { return byDayOrNone(v.latest, w.latest) })
	for _, w := range wants {
		missing := w.each
		for i, r := range rows {
			n := min(missing, left[r][w.part.ID])
			if n == 0 || !goods[i].inTime(w.latest) {
				continue
			}
			left[r][w.part.ID] -= n
			missing -= n
			r.serve(w.part, w.claim, catalog.Quantity{Each: int64(n)})
		}
	}
	return rows
}

// writeCut puts down the cuts of a part and what is bought for them.
func (b *buyer) writeCut(c *cutting, p *pick) []*BuyRow {
	plan := &CutPlan{Part: c.part, Cost: p.cost, Bound: min(p.cost, p.lot.known[0].least)}
	plan.Proved = plan.Cost == plan.Bound
	rows, of := b.cutRows(c, p)
	fresh := 0
	for i, o := range p.plan.plan.Opened {
		from := p.plan.stocks[o.Stock]
		x := CutFrom{Length: unit.MM(p.plan.task.Stocks[o.Stock].Length), Left: unit.MM(o.Left), Usable: o.Usable}
		if from.supply >= 0 {
			x.Supply = c.supplies[from.supply]
			x.ID = c.supplyID(from.supply)
		} else {
			fresh++
			x.ID, x.Offer = fmt.Sprintf("new:%d", fresh), from.good.Offer
			if from.good.ToLength() {
				x.Length = of[i].Pack.Length
			}
			x.Left += x.Length - unit.MM(p.plan.task.Stocks[o.Stock].Length)
		}
		plan.Opened = append(plan.Opened, x)
	}
	for _, cut := range p.plan.plan.Cuts {
		w := c.pieces[cut.Piece]
		x := &plan.Opened[cut.Opened]
		if w.run == nil {
			x.Keep += w.keep
			x.Left += w.keep
		} else {
			plan.Pieces = append(plan.Pieces, CutPiece{w.claim.Job(), w.piece, cut.Opened, w.claim.Needed})
		}
		if r := of[cut.Opened]; r != nil {
			r.serve(c.part, w.ofClaim(), catalog.Quantity{Length: w.length()})
		}
	}
	usable := b.a.house.UsableRemnant.Or(DefaultUsableRemnant)
	for i := range plan.Opened {
		plan.Opened[i].Usable = plan.Opened[i].Left >= usable
	}
	b.out.Cuts = append(b.out.Cuts, plan)
	return rows
}

func (w *cutWant) ofClaim() *Claim {
	if w.run == nil {
		return nil
	}
	return w.claim
}

// supplyID tells the reels of an order apart.
func (c *cutting) supplyID(at int) string {
	s := c.supplies[at]
	if s.Open == nil {
		return s.Name()
	}
	n := 1
	for _, t := range c.supplies[:at] {
		if t.Open != nil && t.Open.Order == s.Open.Order {
			n++
		}
	}
	return fmt.Sprintf("%s:%d", s.Name(), n)
}

// cutRows are the order lines for what is bought of a part: one for each offer, and
// one for each length that is cut. of tells the row of what is opened.
func (b *buyer) cutRows(c *cutting, p *pick) (rows []*BuyRow, of map[int]*BuyRow) {
	of = map[int]*BuyRow{}
	byGood := map[*good]*BuyRow{}
	for i, n := range p.packs {
		if g := p.lot.goods[i]; n > 0 {
			r := b.row(g, n)
			r.brought(c.part).Qty.Length = g.Holds().Length * unit.MM(n)
			byGood[g] = r
			rows = append(rows, r)
		}
	}
	for _, x := range p.plan.lengths {
		r := &BuyRow{Offer: x.good.Offer, Vendor: x.good.seller, Packs: 1, Pack: catalog.Pack{Length: x.length}, Price: x.good.Price.V,
			Cost: x.good.lengthCost(x.length), Arrives: x.good.arrives}
		r.brought(c.part).Qty.Length = x.length
		of[x.opened] = r
		rows = append(rows, r)
	}
	for i, o := range p.plan.plan.Opened {
		if g := p.plan.stocks[o.Stock].good; g != nil && !g.ToLength() {
			of[i] = byGood[g]
		}
	}
	return rows, of
}
