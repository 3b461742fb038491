package show

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

// onOrder lists the lines of orders of which something is still to come, and who
// waits for it.
func (o *OrderBook) onOrder() bom.Sheet {
	s := bom.Sheet{Key: "on-order", Name: "On order", Title: "On order", Wide: true, Filter: true, Feet: o.Feet,
		Columns: []bom.Column{bom.TextColumn("order"), bom.TextColumn("vendor"), bom.TextColumn("part"), bom.CountColumn("ordered"), bom.CountColumn("arrived"), bom.CountColumn("dropped"),
			bom.CountColumn("rest"), bom.DayColumn("due"), bom.CountColumn("days over"), bom.TextColumn("jobs waiting")}}
	stock := o.Allocation.Stock()
	for i := range stock.Open {
		l := &stock.Open[i]
		if l.Complete {
			continue
		}
		over := bom.Cell{}
		if l.Overdue && l.Line.Due.Set {
			over = bom.CountCell(int64(l.Line.Due.V.DaysUntil(o.Today)))
		}
		s.Row("", bom.WordsCell(l.Order.ID), bom.WordsCell(l.Order.Vendor.V), bom.WordsCell(l.Part), bom.QuantityCell(l.Ordered), bom.QuantityCell(l.Arrived),
			bom.QuantityCell(l.Dropped), bom.QuantityCell(l.Left), bom.DayCell(l.Line.Due.V), over, bom.WordsCell(strings.Join(o.waitFor(l), ", ")))
	}
	return s
}

// waitFor lists the jobs for which an order line is held, and those that it reaches
// too late.
func (o *OrderBook) waitFor(l *catalog.Open) []string {
	var out []string
	for _, c := range o.Allocation.ClaimsOn(l.Part) {
		for _, h := range slices.Concat(c.Held, c.Late) {
			if h.Supply.Open == l {
				out = appendOnce(out, c.Job())
			}
		}
	}
	return out
}

// demand says for every part and job what it takes and where it comes from.
func (o *OrderBook) demand() bom.Sheet {
	s := bom.Sheet{Key: "demand", Name: "Demand", Title: "Demand", Wide: true, Filter: true, Feet: o.Feet,
		Notes: []string{"What open jobs are still to be given: from shelves, from orders that are out, and from what is ordered now."},
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("name"), bom.TextColumn("job"), bom.DayColumn("needed on"), bom.CountColumn("takes"), bom.CountColumn("from shelves"),
			bom.CountColumn("from orders"), bom.CountColumn("bought now"), bom.CountColumn("not yet")}}
	for _, id := range o.Allocation.Parts() {
		for _, c := range o.Allocation.ClaimsOn(id) {
			if !o.asked(c) {
				continue
			}
			here, coming := o.supplied(c)
			bought := o.boughtFor(c)
			rest := c.Quantity().Minus(here).Minus(coming).Minus(bought)
			s.Row(c.Job()+" "+id, bom.WordsCell(id), bom.WordsCell(c.Part().Name.V), bom.WordsCell(c.Job()), bom.DayCell(c.Needed), bom.QuantityCell(c.Quantity()),
				quantityOrBlank(here), quantityOrBlank(coming), quantityOrBlank(bought), quantityOrBlank(rest))
		}
	}
	return s
}

// asked reports a claim of a job that the purchase is for.
func (o *OrderBook) asked(c *bom.Claim) bool { return o.Jobs == nil || o.Jobs[c.Job()] }

func quantityOrBlank(q catalog.Quantity) bom.Cell {
	if q.IsZero() {
		return bom.Cell{}
	}
	return bom.QuantityCell(q)
}

// supplied is what a claim gets from shelves and from orders that are out: of cut
// stock as the purchase cuts it, where it does.
func (o *OrderBook) supplied(c *bom.Claim) (here, coming catalog.Quantity) {
	add := func(s *bom.Supply, q catalog.Quantity) {
		if s.Here() {
			here = here.Plus(q)
		} else {
			coming = coming.Plus(q)
		}
	}
	if plan := o.planOf(c.Part().ID); plan != nil {
		for _, p := range plan.Pieces {
			if s := plan.Opened[p.From].Supply; p.Job == c.Job() && s != nil {
				add(s, catalog.Quantity{Length: p.Piece.Length})
			}
		}
		return here, coming
	}
	for _, h := range c.Held {
		add(h.Supply, catalog.Quantity{Each: int64(h.Each), Length: h.Piece.Length})
	}
	return here, coming
}

func (o *OrderBook) planOf(part string) *bom.CutPlan {
	for _, p := range o.Cuts {
		if p.Part.ID == part {
			return p
		}
	}
	return nil
}

func (o *OrderBook) boughtFor(c *bom.Claim) catalog.Quantity {
	var sum catalog.Quantity
	for _, r := range o.Rows {
		for i := range r.Parts {
			for _, s := range r.Parts[i].For {
				if r.Parts[i].Part.ID == c.Part().ID && s.Job == c.Job() {
					sum = sum.Plus(s.Qty)
				}
			}
		}
	}
	return sum
}

// taking is something that a crew takes from a shelf for a job.
type taking struct {
	crew, shelf, part, tag, job, line string
	day                               bom.Cell
	qty                               catalog.Quantity
}

// picks lists what every crew takes from every shelf.
func (o *OrderBook) picks() bom.Sheet {
	s := bom.Sheet{Key: "picks", Name: "Shelf picks", Title: "Shelf picks by crew and shelf", Feet: o.Feet,
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("tag"), bom.CountColumn("take"), bom.TextColumn("job"), bom.TextColumn("line"), bom.DayColumn("ready by")}}
	var all []taking
	for _, c := range o.Allocation.Claims {
		if !o.asked(c) {
			continue
		}
		all = append(all, o.takings(c)...)
	}
	slices.SortStableFunc(all, func(a, b taking) int {
		return cmp.Or(strings.Compare(a.crew, b.crew), strings.Compare(a.shelf, b.shelf))
	})
	for i, t := range all {
		if i == 0 || t.crew != all[i-1].crew || t.shelf != all[i-1].shelf {
			crew := "no crew"
			if t.crew != "" {
				crew = "crew " + t.crew
			}
			s.Heading(crew + ", from " + t.shelf)
		}
		s.Row("", bom.WordsCell(t.part), bom.WordsCell(t.tag), bom.QuantityCell(t.qty), bom.WordsCell(t.job), bom.WordsCell(t.line), t.day)
	}
	return s
}

func (o *OrderBook) takings(c *bom.Claim) []taking {
	base := taking{crew: c.Demand.Crew, part: c.Part().ID, job: c.Job(), day: bom.DayCell(c.Needed)}
	var out []taking
	add := func(s *bom.Supply, line string, q catalog.Quantity) {
		if s == nil || !s.Here() {
			return
		}
		t := base
		t.shelf, t.line, t.qty = s.Where, line, q
		if s.Tag != nil {
			t.tag = s.Tag.ID
		}
		if !s.Pickable() {
			t.shelf += " (count it first)"
		}
		out = append(out, t)
	}
	if plan := o.planOf(c.Part().ID); plan != nil {
		for _, p := range plan.Pieces {
			if p.Job == c.Job() {
				add(plan.Opened[p.From].Supply, p.Piece.Line, catalog.Quantity{Length: p.Piece.Length})
			}
		}
		return out
	}
	for _, h := range c.Held {
		add(h.Supply, h.Piece.Line, catalog.Quantity{Each: int64(h.Each), Length: h.Piece.Length})
	}
	return out
}

// cutSheet says which pieces are cut from which reel, in turn, and what is left.
func (o *OrderBook) cutSheet() bom.Sheet {
	s := bom.Sheet{Key: "cuts", Name: "Cuts", Title: "Cuts", Feet: o.Feet,
		Columns: []bom.Column{bom.TextColumn("job"), bom.TextColumn("line"), bom.DayColumn("needed on"), bom.LengthColumn("to cut"), bom.LengthColumn("to lay")}}
	for _, plan := range o.Cuts {
		for at, from := range plan.Opened {
			s.Heading(plan.Part.ID + ", " + o.reelWords(&from))
			for _, p := range plan.Pieces {
				if p.From == at {
					s.Row("", bom.WordsCell(p.Job), bom.WordsCell(p.Piece.Line), bom.DayCell(p.Needed), bom.LengthCell(p.Piece.Length), bom.LengthCell(p.Piece.Bare))
				}
			}
			s.Sum("", o.leftWords(&from), "to cut")
		}
	}
	return s
}

// reelWords says what is cut from, and how its length is known.
func (o *OrderBook) reelWords(f *bom.CutFrom) string {
	length := lengthIn(f.Length, o.Feet)
	switch {
	case f.Supply == nil:
		return f.ID + " from " + f.Offer.Vendor.V + ", to be ordered, " + length
	case f.Supply.Tag == nil:
		return f.ID + " on order, " + length
	}
	t := f.Supply.Tag
	how := cmp.Or(t.How, "nobody says how")
	return fmt.Sprintf("reel %s at %s, %s (known by %s on %s)", t.ID, t.Where, length, how, t.Read)
}

func (o *OrderBook) leftWords(f *bom.CutFrom) string {
	left := lengthIn(f.Left, o.Feet)
	switch {
	case f.Left <= 0:
		return "nothing left; cut off"
	case f.Usable:
		return left + " left goes back; cut off"
	}
	return left + " left, too short to keep; cut off"
}

// levels lists the shelves that hold less than they should.
func (o *OrderBook) levels() bom.Sheet {
	s := bom.Sheet{Key: "keep", Name: "Keep", Title: "Below their reorder levels", Wide: true, Feet: o.Feet,
		Columns: []bom.Column{bom.TextColumn("part"), bom.TextColumn("shelf"), bom.CountColumn("on hand"), bom.CountColumn("claimed"), bom.CountColumn("to come"), bom.CountColumn("least"),
			bom.CountColumn("fill up to"), bom.CountColumn("lacks")}}
	standings := o.Allocation.Standings()
	for i := range o.Premises.Keeps {
		k := &o.Premises.Keeps[i]
		at := slices.IndexFunc(standings, func(r bom.Standing) bool { return r.Part == k.Part.V && r.Where == k.Shelf.V })
		var st bom.Standing
		if at >= 0 {
			st = standings[at]
		}
		level := o.Allocation.Level(k)
		if level.Less(k.Least.V) {
			s.Row("", bom.WordsCell(k.Part.V), bom.WordsCell(k.Shelf.V), bom.QuantityCell(st.OnHand), quantityOrBlank(st.Claimed), quantityOrBlank(st.Inbound),
				bom.QuantityCell(k.Least.V), bom.QuantityCell(k.Fill.V), bom.QuantityCell(k.Fill.V.Minus(level)))
		}
	}
	return s
}
