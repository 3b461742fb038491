package catalog

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Open is one part of an order line that was sent, and how much of it is still to
// come. A box of several parts has an entry for each.
type Open struct {
	Order    *Order
	Line     *OrderLine
	Part     string
	Ordered  Quantity
	Arrived  Quantity
	Dropped  Quantity
	Left     Quantity // never below zero
	Overdue  bool
	Complete bool // nothing is left to come
}

// arrivals is what came under one order.
type arrivals struct {
	order *Order
	moves []*Move
	reels []*Reel
}

func (b *book) arrivalOf(order string) *arrivals {
	a := b.arrived[order]
	if a == nil {
		a = &arrivals{}
		b.arrived[order] = a
	}
	return a
}

func (a *arrivals) pieces(m *Move) { a.moves = append(a.moves, m) }

// fillOrders takes arrivals off the order lines they came for.
func (b *book) fillOrders(orders []*Order) {
	orders = slices.Clone(orders)
	slices.SortStableFunc(orders, func(o, p *Order) int { return strings.Compare(o.File.Path, p.File.Path) })
	for _, o := range orders {
		a := b.arrivalOf(o.ID)
		if a.order != nil {
			continue // a second file for the order, see CheckStock
		}
		a.order = o
		lines := b.linesOf(o)
		for _, m := range a.moves {
			b.fill(lines, o, m.At, cmp.Or(m.ForPart.V, m.Part.V), Quantity{Each: int64(m.Qty.V)})
		}
		b.fillReels(lines, o, a.reels)
		b.keepOpen(o, lines)
	}
}

// linesOf spreads an order over the parts it brings.
func (b *book) linesOf(o *Order) []*Open {
	var out []*Open
	for i := range o.Lines {
		l := &o.Lines[i]
		row := func(part string, each Quantity) {
			out = append(out, &Open{Order: o, Line: l, Part: part, Ordered: times(each, l.Packs.V), Dropped: times(each, l.Dropped.V)})
		}
		if l.Part.Set && l.Packs.Set {
			row(l.Part.V, l.Holds().Quantity(1))
		}
		for _, p := range l.Brings {
			row(p.Name, Quantity{Each: int64(p.Val.V * max(1, l.Holds().Count))})
		}
	}
	return out
}

func times(q Quantity, n int) Quantity {
	return Quantity{q.Each * int64(n), q.Length * unit.MM(n)}
}

// room is what may still come on the line.
func (o *Open) room() Quantity { return o.Ordered.Minus(o.Dropped).Minus(o.Arrived) }

// byDue is the order in which arrivals fill lines for the same part.
func byDue(lines []*Open, part string) []*Open {
	var out []*Open
	for _, l := range lines {
		if l.Part == part {
			out = append(out, l)
		}
	}
	slices.SortStableFunc(out, func(x, y *Open) int {
		if dx, dy := x.Line.Due, y.Line.Due; dx.Set && dy.Set {
			return strings.Compare(dx.V.String(), dy.V.String())
		}
		return cmp.Compare(rank(!x.Line.Due.Set), rank(!y.Line.Due.Set))
	})
	return out
}

// fill takes pieces that arrived off the lines for their part.
func (b *book) fill(lines []*Open, o *Order, at source.Place, part string, came Quantity) {
	var also []source.Place
	rest := came
	for _, l := range byDue(lines, part) {
		take := min(rest.Each, max(0, l.room().Each))
		l.Arrived.Each += take
		rest.Each -= take
		also = append(also, l.Line.At)
	}
	if rest.Each > 0 {
		b.over(o, at, also, part, came, rest)
	}
}

// over notes what arrived beyond the order; where the order has no line for the
// part at all, the note points at its head.
func (b *book) over(o *Order, at source.Place, lines []source.Place, part string, came, beyond Quantity) {
	if lines == nil {
		lines = []source.Place{o.At}
	}
	b.note(Note{Kind: NoteOver, At: at, Also: placesOf(at, lines...), Part: part, Order: o.ID, Book: came.Minus(beyond), Read: came})
}

// fillReels takes tags that arrived off the lines, a pack for each: first those
// that are as long as a pack of a line, then the others.
func (b *book) fillReels(lines []*Open, o *Order, reels []*Reel) {
	var odd []*Reel
	for _, r := range reels {
		if !fillPack(byDue(lines, orderedAs(r)), func(pack unit.MM) bool { return pack == r.Left.V }) {
			odd = append(odd, r)
		}
	}
	for _, r := range odd {
		open := byDue(lines, orderedAs(r))
		if fillPack(open, func(unit.MM) bool { return true }) {
			continue
		}
		var also []source.Place
		for _, l := range open {
			also = append(also, l.Line.At)
		}
		came := Quantity{Length: r.Left.V}
		b.over(o, r.At, also, orderedAs(r), came, came)
	}
}

// orderedAs is the part of the line that a reel came for.
func orderedAs(r *Reel) string { return cmp.Or(r.ForPart.V, r.Part.V) }

// fillPack takes one pack off the first line that has room for one and whose pack fits.
func fillPack(lines []*Open, fits func(unit.MM) bool) bool {
	for _, l := range lines {
		if pack := l.Line.Holds().Length; pack > 0 && l.room().Length >= pack && fits(pack) {
			l.Arrived.Length += pack
			return true
		}
	}
	return false
}

// keepOpen lists the lines of an order that is out, and notes what is late.
func (b *book) keepOpen(o *Order, lines []*Open) {
	if !o.Sent.Set {
		return
	}
	if o.Sent.V.After(b.today) {
		for _, l := range lines {
			b.note(Note{Kind: NoteFuture, At: o.Sent.At, Also: []source.Place{l.Line.At}, Part: l.Part, Order: o.ID, On: Moment{Day: o.Sent.V}})
		}
		return
	}
	for _, l := range lines {
		left := l.room()
		l.Left = Quantity{max(0, left.Each), max(0, left.Length)}
		l.Complete = l.Left.IsZero()
		l.Overdue = !l.Complete && l.Line.Due.Set && l.Line.Due.V.Before(b.today)
		if l.Overdue {
			b.note(Note{Kind: NoteOverdue, At: l.Line.Due.At, Also: []source.Place{l.Line.At}, Part: l.Part, Order: o.ID, Where: o.To.V, Book: l.Left, On: Moment{Day: l.Line.Due.V}})
		}
		b.stock.Open = append(b.stock.Open, *l)
	}
	b.doubtOrder(o, lines)
}

// doubtOrder looks up what an order that is not yet here names.
func (b *book) doubtOrder(o *Order, lines []*Open) {
	d := b.doubt(0, "")
	for _, l := range lines {
		if l.Complete {
			continue
		}
		part := l.Line.Part
		if !part.Set {
			part = source.Val[string]{V: l.Part, At: l.Line.At, Set: true}
		}
		d.note.Part = l.Part
		d.part(part)
		d.shelf(o.To)
	}
}
