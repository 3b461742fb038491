package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules"
)

// Buying is a purchase and the cuts it goes by, ready to be shown.
type Buying struct {
	*bom.Purchase
	rules.Origin
	Currency string
	Jobs     map[string]bool // that were asked for; nil: all
	Broken   []string        // plans that are not counted, since their files cannot be read
	Gaps     []JobGap
	Feet     bool // lengths are printed in feet
}

// Text writes the orders, vendor by vendor, then what is late, what waits and what
// nobody sells.
func (b *Buying) Text(page Page) ([]byte, error) {
	d := &Document{Title: fmt.Sprintf("To buy as of %s, %s: %s with freight", b.Today, b.At+borrowed(b.Origin), b.money(b.Total))}
	if len(b.Rows) == 0 {
		d.Title = fmt.Sprintf("To buy as of %s, %s: nothing", b.Today, b.At+borrowed(b.Origin))
	}
	d.Blocks = append(d.Blocks, b.broken()...)
	if len(b.Rows) > 0 {
		d.Blocks = append(d.Blocks, Block{Table: b.orders(), Text: []string{b.proof()}})
	}
	d.Blocks = append(d.Blocks, b.swaps()...)
	for _, f := range b.Freight {
		d.Blocks = append(d.Blocks, b.order(f))
	}
	if moves := b.moves(); moves.Items != nil {
		d.Blocks = append(d.Blocks, moves)
	}
	d.Blocks = append(d.Blocks, b.rest()...)
	return d.Text(page)
}

func (b *Buying) broken() []Block {
	if len(b.Broken) == 0 {
		return nil
	}
	return []Block{{how: stop, Text: []string{"Not counted, for their files cannot be read whole: " + strings.Join(b.Broken, ", ") + "."}}}
}

func (b *Buying) money(m unit.Money) string { return strings.TrimSpace(m.String() + " " + b.Currency) }

// proof says how good the purchase is known to be.
func (b *Buying) proof() string {
	if b.Proved {
		return "Nothing that makes no more jobs late costs less."
	}
	return fmt.Sprintf("Whether anything costs less is not known; nothing that makes no more jobs late costs less than %s.", b.money(b.Bound))
}

// swaps are the changes of plans that the purchase goes by.
func (b *Buying) swaps() []Block {
	out := Block{Head: "GOES BY THESE CHANGES OF PLANS, TO BE MADE BY HAND"}
	for _, s := range b.Swaps {
		out.Items = append(out.Items, Item{s.Job, s.To + " in place of " + s.From + ", all of it; no new hold, punch or unknown in the plan."})
	}
	if out.Items == nil {
		return nil
	}
	return []Block{out}
}

func (b *Buying) orders() *Grid {
	g := &Grid{Columns: []string{"vendor", "order by", "lines", "goods", "freight", "in all"}, Words: 2}
	for _, f := range b.Freight {
		lines, by := 0, unit.Date{}
		for _, r := range b.Rows {
			if r.Vendor != f.Vendor {
				continue
			}
			lines++
			if !r.OrderBy.IsZero() && (by.IsZero() || r.OrderBy.Before(by)) {
				by = r.OrderBy
			}
		}
		g.Rows = append(g.Rows, []string{clip(f.Vendor.ID, 20), by.String(), fmt.Sprint(lines), f.Goods.String(), f.Amount.String(), (f.Goods + f.Amount).String()})
	}
	return g
}

// order is what is ordered from one vendor.
func (b *Buying) order(f bom.Freight) Block {
	out := Block{Head: "FROM " + strings.ToUpper(f.Vendor.Name.Or(f.Vendor.ID))}
	for _, r := range b.Rows {
		if r.Vendor == f.Vendor {
			out.Items = append(out.Items, Item{rowName(r), b.line(r)})
		}
	}
	return out
}

// rowName is the part of a row, or the parts of its box.
func rowName(r *bom.BuyRow) string {
	var ids []string
	for _, p := range r.Parts {
		ids = append(ids, p.Part.ID)
	}
	return strings.Join(ids, " + ")
}

// line puts a row into words: what, for how much, by when, for whom.
func (b *Buying) line(r *bom.BuyRow) string {
	out := []string{b.packs(r)}
	if r.Packs > 1 || r.Offer.ToLength() {
		out[0] += ", " + r.Cost.String()
	}
	if r.Offer.Code.Set {
		out[0] = r.Offer.Code.V + ": " + out[0]
	}
	if !r.OrderBy.IsZero() {
		out = append(out, "order by "+r.OrderBy.String())
	}
	for _, p := range r.Parts {
		var of []string
		for _, s := range p.For {
			of = append(of, s.Job+" "+b.quantity(s.Qty))
		}
		if !p.Keep.IsZero() {
			of = append(of, "a reorder level "+b.quantity(p.Keep))
		}
		switch {
		case len(of) == 0:
			out = append(out, p.Part.ID+" is spare")
		case len(r.Parts) > 1:
			out = append(out, p.Part.ID+" for "+strings.Join(of, ", "))
		default:
			out = append(out, "for "+strings.Join(of, ", "))
		}
	}
	for _, l := range r.Late {
		out = append(out, "too late for "+l.Job+", needed on "+l.Needed.String()+", "+arrival(l.Arrives))
	}
	return strings.Join(out, "; ") + "."
}

func arrival(d unit.Date) string {
	if d.IsZero() {
		return "and nobody knows how long it takes"
	}
	return "comes on " + d.String() + " if ordered today"
}

// packs prints "2 reels of 152.4 m at 318.00" or "3 at 28.50".
func (b *Buying) packs(r *bom.BuyRow) string {
	switch {
	case r.Offer.ToLength():
		return fmt.Sprintf("%s cut to length at %s a metre", r.Pack.Length, r.Price) // to the millimetre, as it is ordered
	case r.Pack.Length > 0:
		return fmt.Sprintf("%s of %s at %s", words(r.Packs, "reel", "reels"), b.length(r.Pack.Length), r.Price)
	case len(r.Offer.Brings) > 0:
		return fmt.Sprintf("%s at %s", words(r.Packs, "box", "boxes"), r.Price)
	case r.Pack.Count > 1:
		return fmt.Sprintf("%s of %d at %s", words(r.Packs, "pack", "packs"), r.Pack.Count, r.Price)
	}
	return fmt.Sprintf("%d at %s", r.Packs, r.Price)
}

func (b *Buying) length(l unit.MM) string { return lengthIn(l, b.Feet) }

func (b *Buying) quantity(q catalog.Quantity) string {
	if q.Length != 0 {
		return b.length(q.Length)
	}
	return q.String()
}

// moves is what fills reorder levels without being bought.
func (b *Buying) moves() Block {
	out := Block{Head: "TO MOVE, NOT TO BUY"}
	for _, m := range b.Moves {
		out.Items = append(out.Items, Item{m.Part.ID, fmt.Sprintf("%d from %s to %s, for its reorder level.", m.Each, m.From.Name(), m.Keep.Shelf.V)})
	}
	return out
}

// rest is what is not in the orders.
func (b *Buying) rest() []Block {
	waiting := Block{Head: "ON ORDER, AND TOO LATE: NOTHING COMES SOONER"}
	for _, w := range b.Waiting {
		waiting.Items = append(waiting.Items, Item{w.Part.ID, fmt.Sprintf("%s needs %s by %s; %s comes on %s.", w.Job, b.quantity(w.Qty), w.Needed, w.Order, w.Day)})
	}
	unsourced := Block{Head: "NOT TO BE HAD"}
	for _, u := range b.Unsourced {
		unsourced.Items = append(unsourced.Items, Item{u.Part, b.unsourced(u)})
	}
	later := Block{Head: "LATER: NEEDED AFTER " + b.Until.String()}
	for _, l := range b.Later {
		later.Items = append(later.Items, Item{l.Part.ID, fmt.Sprintf("%s needs %s by %s.", l.Job, b.quantity(l.Qty), l.Needed)})
	}
	gaps := Block{Head: "NOT COUNTED"}
	for _, g := range b.Gaps {
		gaps.Items = append(gaps.Items, Item{g.Job, fmt.Sprintf("%s: %s.", strings.Replace(g.On, ".", " ", 1), g.Says)})
	}
	return slices.DeleteFunc([]Block{waiting, unsourced, later, gaps}, func(x Block) bool { return x.Items == nil })
}

func (b *Buying) unsourced(u bom.Unsourced) string {
	var of []string
	for _, s := range u.Jobs {
		of = append(of, s.Job)
	}
	if u.Keep {
		of = append(of, "a reorder level")
	}
	return fmt.Sprintf("%s for %s: %s.", b.quantity(u.Qty), strings.Join(of, ", "), u.Why)
}
