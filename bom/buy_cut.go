package bom

import (
	"cmp"
	"slices"

	"driploop/bom/cut"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// cutting is what is cut of one part, for all jobs together.
type cutting struct {
	part     *catalog.Part
	supplies []*Supply
	goods    []*good
	pieces   []*cutWant
	whole    *cutPick // with all offers, where it was planned already
}

// cutWant is one piece that is cut.
type cutWant struct {
	*run         // of a job, or
	keep unit.MM // a length for a reorder level, which is not cut
	buy  bool    // offers may be bought for it
	on   []int   // supplies
	from []*good // offers
	late *Hold   // the order that brings it too late
}

func (w *cutWant) length() unit.MM {
	if w.run == nil {
		return w.keep
	}
	return w.piece.Length
}

// cutStock is where a stock of the task comes from.
type cutStock struct {
	supply int // or, where it is -1,
	good   *good
	exact  unit.MM // of what is cut to length
}

// cutPick is a way to cut and buy a part.
type cutPick struct {
	task    cut.Task
	plan    cut.Plan
	stocks  []cutStock
	lengths []cutLength // bought to length, in the order of the plan
}

type cutLength struct {
	good   *good
	length unit.MM
	opened int // in the plan
}

func (b *buyer) cutting(p *catalog.Part) *cutting {
	c := b.cuts[p.ID]
	if c == nil {
		c = &cutting{part: p, supplies: b.a.byPart[p.ID], goods: b.market[p.ID]}
		b.cuts[p.ID] = c
	}
	return c
}

// gatherCuts lists the pieces of all claims on cut stock, in their turn, as the
// allocation saw them: with the reels that plans and orders keep for them.
func (b *buyer) gatherCuts() {
	again := *b.a
	again.Broken = nil
	r := &allocator{Allocation: &again, today: b.a.Today}
	reserves := r.reserves()
	ids := make([]string, 0, len(b.a.claimed))
	for id, claims := range b.a.claimed {
		if claims[0].Part().CutStock() {
			ids = append(ids, id)
		}
	}
	slices.Sort(ids)
	for _, id := range ids {
		c := b.cutting(b.a.claimed[id][0].Part())
		runs := r.runs(b.a.claimed[id], c.supplies)
		r.reserveTags(runs, c.supplies, reserves[id])
		r.pegReels(runs, c.supplies)
		slices.SortStableFunc(runs, func(x, y *run) int { return cmp.Compare(x.rank, y.rank) })
		r.nearest(runs, c.supplies)
		for _, run := range runs {
			b.piece(c, run)
		}
		c.settle(b)
	}
}

// piece takes a piece up. What is not bought for now keeps what the allocation gives
// it; what it does not give comes later.
func (b *buyer) piece(c *cutting, r *run) {
	w := &cutWant{run: r, on: r.on, buy: b.bought(r.claim)}
	if !w.buy && slices.Contains(r.claim.ShortLines, r.piece) {
		b.later(r.claim, catalog.Quantity{Length: r.piece.Length})
		return
	}
	for i := range r.claim.Late {
		if r.claim.Late[i].Piece == r.piece {
			w.late = &r.claim.Late[i]
		}
	}
	if w.buy {
		w.from = c.holding(w, func(g *good) bool { return g.inTime(r.claim.Needed) })
	}
	c.pieces = append(c.pieces, w)
}

// longestPiece is beyond every reel, and money for it does not overflow.
const longestPiece = 1 << 24

// holding lists the offers a piece can be cut from, of those that suit.
func (c *cutting) holding(w *cutWant, suits func(*good) bool) []*good {
	var out []*good
	for _, g := range c.goods {
		if w.length() < longestPiece && g.holds(w.length()) && suits(g) {
			out = append(out, g)
		}
	}
	return out
}

// settle finds the pieces that nothing brings in time and says what they wait for:
// the order that brings them, or the offer that comes soonest.
func (c *cutting) settle(b *buyer) {
	for {
		p := b.planCut(c, nil)
		short := p.plan.Short
		if len(short) == 0 {
			c.whole = p
			return
		}
		var gone []*cutWant
		for _, i := range short {
			if w := c.pieces[i]; !c.putOff(b, w) {
				gone = append(gone, w)
			}
		}
		c.pieces = slices.DeleteFunc(c.pieces, func(w *cutWant) bool { return slices.Contains(gone, w) })
	}
}

// putOff lets a piece come late; false where it does not come at all.
func (c *cutting) putOff(b *buyer, w *cutWant) bool {
	length := catalog.Quantity{Length: w.length()}
	if !w.buy {
		b.later(w.claim, length)
		return false
	}
	holding := c.holding(w, func(*good) bool { return true })
	first, known := fastest(holding)
	h := w.late
	w.late = nil
	switch {
	case h != nil && !(known && first.Before(h.Supply.Day)):
		b.wait(w.claim, *h, length)
		w.on, w.from, w.near = []int{slices.Index(c.supplies, h.Supply)}, nil, nil
		return true
	case len(holding) == 0 || len(w.from) > 0:
		b.lacks(c.part.ID, c.tooLong(b, w), length, w.claim)
		return false
	}
	w.on, w.from = nil, c.holding(w, func(g *good) bool { return g.arrives == first })
	return true
}

func (c *cutting) tooLong(b *buyer, w *cutWant) string {
	if len(c.goods) == 0 {
		return b.unsourced(c.part.ID)
	}
	return "no offer holds a piece of " + w.length().String()
}

// keep wants a length for a reorder level: in one piece where a reel is that long.
func (c *cutting) keep(b *buyer, length unit.MM) {
	var longest unit.MM
	for _, g := range c.goods {
		if g.ToLength() {
			longest = max(longest, g.CutTo.Or(longestPiece-1))
		} else {
			longest = max(longest, g.Holds().Length)
		}
	}
	longest = min(longest, longestPiece-1)
	if longest <= 0 || length/longest > 1000 {
		b.lacks(c.part.ID, b.unsourced(c.part.ID), catalog.Quantity{Length: length}, nil)
		return
	}
	for c.whole = nil; length > 0; length -= min(length, longest) {
		w := &cutWant{keep: min(length, longest), buy: true}
		w.from = c.holding(w, func(*good) bool { return true })
		c.pieces = append(c.pieces, w)
	}
}

// task is the cut planner's task with the offers of some vendors left out. What is
// on hand and what was ordered is free, and there once; a price break is a stock of
// its own with a least number; what is cut to length comes as long as each piece.
func (c *cutting) task(closed func(*good) bool) (cut.Task, []cutStock) {
	var t cut.Task
	var from []cutStock
	for i, s := range c.supplies {
		t.Stocks = append(t.Stocks, cut.Stock{ID: s.Name(), Length: int64(s.Qty.Length)})
		from = append(from, cutStock{supply: i})
	}
	for _, g := range c.goods {
		if closed != nil && closed(g) {
			continue
		}
		add := func(length unit.MM, price unit.Money, least int) {
			t.Stocks = append(t.Stocks, cut.Stock{ID: g.seller.ID + "/" + g.Code.V, Length: int64(length), Price: int64(price), Many: true, Least: least})
			from = append(from, cutStock{supply: -1, good: g, exact: length})
		}
		if g.ToLength() {
			for _, length := range c.lengths(g) {
				add(length, g.lengthCost(length), g.least)
			}
			continue
		}
		add(g.Holds().Length, g.PriceOf(g.least), g.least)
		for _, br := range g.Breaks.V {
			if br.V.Packs > g.least && br.V.Packs <= mostPacks {
				add(g.Holds().Length, br.V.Price, br.V.Packs)
			}
		}
	}
	for _, w := range c.pieces {
		t.Pieces = append(t.Pieces, cut.Piece{ID: w.name(), Length: int64(w.length()), On: w.stocks(from)})
	}
	return t, from
}

func (w *cutWant) name() string {
	if w.run == nil {
		return "level"
	}
	return w.claim.Job() + "/" + w.piece.Line
}

// stocks lists the stocks that a piece may be cut from.
func (w *cutWant) stocks(from []cutStock) []int {
	here, sold := map[int]bool{}, map[*good]bool{}
	for _, at := range w.on {
		here[at] = true
	}
	for _, g := range w.from {
		sold[g] = true
	}
	on := []int{}
	for i, s := range from {
		if s.supply >= 0 && here[s.supply] || s.supply < 0 && sold[s.good] {
			on = append(on, i)
		}
	}
	return on
}

// lengths lists what is cut to length for the pieces, each once: as long as the piece, but not
// below the least that is sold.
func (c *cutting) lengths(g *good) []unit.MM {
	var out []unit.MM
	for _, w := range c.pieces {
		if slices.Contains(w.from, g) {
			out = append(out, max(w.length(), g.CutFrom.V))
		}
	}
	slices.Sort(out)
	return slices.Compact(out)
}

// cheapestCut finds the cheapest way to cut and buy a part.
func (b *buyer) cheapestCut(c *cutting, l *lot, closed func(*good) bool) chosen {
	how := c.whole
	if how == nil || slices.ContainsFunc(c.goods, closed) {
		how = b.planCut(c, closed)
	}
	if len(how.plan.Short) > 0 {
		return chosen{}
	}
	p := &pick{lot: l, packs: make([]int, len(l.goods)), goods: make([]unit.Money, len(b.vendors)), plan: how}
	for i, o := range how.plan.Opened {
		s := how.stocks[o.Stock]
		switch {
		case s.supply >= 0:
		case s.good.ToLength():
			p.plan.lengths = append(p.plan.lengths, cutLength{s.good, s.exact, i})
		default:
			p.packs[slices.Index(l.goods, s.good)]++
		}
	}
	for i, n := range p.packs {
		p.packs[i] = l.goods[i].atLeast(n)
	}
	b.price(p)
	return chosen{p, min(p.cost, c.floor(how.plan.Bound))}
}

// planCut plans the pieces twice: wherever they may be cut from, which gives the
// price, and with those that need not wait for a delivery, of an order or of what is
// bought, on what is here. The second plan is taken where it costs no more.
func (b *buyer) planCut(c *cutting, closed func(*good) bool) *cutPick {
	p := &cutPick{}
	p.task, p.stocks = c.task(closed)
	p.task.Usable = int64(b.a.house.UsableRemnant.Or(DefaultUsableRemnant))
	p.plan = p.task.Plan()
	near := p.task
	near.Pieces = slices.Clone(near.Pieces)
	some := false
	for i, w := range c.pieces {
		if w.run != nil && w.near != nil && w.on != nil {
			here := cutWant{on: w.near}
			near.Pieces[i].On, some = here.stocks(p.stocks), true
		}
	}
	if !some {
		return p
	}
	if got := near.Plan(); slices.Equal(got.Short, p.plan.Short) && got.Price == p.plan.Price {
		got.Bound, got.Proved = p.plan.Bound, p.plan.Proved
		p.plan = got
	}
	return p
}

// floor is what no plan costs less than, given what none costs less than before
// lines are rounded: each line may lose half a cent.
func (c *cutting) floor(bound int64) unit.Money {
	for _, g := range c.goods {
		if !g.ToLength() && !g.inCents() {
			bound -= 50
		}
	}
	return (unit.Money(max(0, bound)) + 99) / 100 * 100
}

// inCents reports prices of whole cents.
func (g *good) inCents() bool {
	whole := g.Price.V%100 == 0
	for _, b := range g.Breaks.V {
		whole = whole && b.V.Price%100 == 0
	}
	return whole
}

// atLeast is the number of packs from n on whose line costs least.
func (g *good) atLeast(n int) int {
	if n == 0 {
		return 0
	}
	best := max(n, g.least)
	for _, b := range g.Breaks.V {
		if b.V.Packs > best && g.cost(b.V.Packs) < g.cost(best) {
			best = b.V.Packs
		}
	}
	return best
}

// price adds up what a pick costs at each vendor.
func (b *buyer) price(p *pick) {
	clear(p.goods)
	p.cost = 0
	add := func(g *good, cost unit.Money) {
		p.goods[g.vendor] += cost
		p.cost += cost
	}
	for i, n := range p.packs {
		add(p.lot.goods[i], p.lot.goods[i].cost(n))
	}
	if p.plan == nil {
		return
	}
	for _, x := range p.plan.lengths {
		add(x.good, x.good.lengthCost(x.length))
	}
}
