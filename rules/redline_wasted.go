package rules

import (
	"fmt"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// wasted lists what was done for a job already and is of no use after the change:
// pieces that were cut, goods that were issued, orders that were sent.
func (c *comparison) wasted(p *pair, at [4]*shelfState) []Wasted {
	base, head := c.at(p, steps[0].mix), c.at(p, steps[3].mix)
	if base == nil || base.shelf.demand == nil || p.broken[atHead] {
		return nil
	}
	was, now := base.shelf.demand, &bom.Demand{}
	if head != nil && head.shelf.demand != nil {
		now = head.shelf.demand
	}
	if now.Stage == "cancelled" {
		now = &bom.Demand{Job: now.Job, Stage: now.Stage}
	}
	stock := at[3].Stock
	w := &waste{stock: stock, was: was, now: now, job: was.Job, renames: p.renames}
	w.cuts()
	w.issues()
	w.orders()
	return w.out
}

// waste finds what is of no use any more.
type waste struct {
	stock    *catalog.Stock
	was, now *bom.Demand
	job      string
	renames  bom.Renames
	out      []Wasted
	cutOf    map[string]unit.MM // by part, what cuts account for
}

// cuts finds pieces that the line they were cut for does not take any more, though it
// did.
func (w *waste) cuts() {
	w.cutOf = map[string]unit.MM{}
	for _, x := range w.stock.PiecesFor(w.job) {
		w.cutOf[x.Part] += x.Kept()
		old := w.was.Piece(x.Cable)
		if x.Kept() <= 0 || old == nil || old.Part.ID != x.Part || x.Kept() < old.Piece.Bare {
			continue // it did not fit before either
		}
		line := w.renames.Of(x.Cable)
		says := ""
		switch now := w.now.Piece(line); {
		case now == nil:
			says = fmt.Sprintf("%s of %s were cut from %s for %s, which the plan no longer has", x.Kept(), x.Part, x.Tag, x.Cable)
		case now.Part.ID != x.Part:
			says = fmt.Sprintf("%s of %s were cut from %s for %s, which is %s now", x.Kept(), x.Part, x.Tag, line, now.Part.ID)
		case x.Kept() < now.Piece.Bare:
			says = fmt.Sprintf("%s of %s were cut from %s for %s, which takes %s now", x.Kept(), x.Part, x.Tag, line, now.Piece.Bare)
		default:
			continue
		}
		w.out = append(w.out, Wasted{How: "cut", Part: x.Part, Qty: catalog.Quantity{Length: x.Kept()}, Line: x.Cable, From: x.Tag, Says: says, At: x.At})
	}
}

// issues finds goods out on the job beyond what it takes now, as far as it took them
// before.
func (w *waste) issues() {
	for _, is := range w.stock.IssuesOf(w.job) {
		old, now := needOf(w.was, is.Part), needOf(w.now, is.Part)
		if is.Net.Length > 0 || is.Net.Each <= now.Each || old.Each <= now.Each {
			continue
		}
		n := is.Net.Each - max(now.Each, 0)
		if over := is.Net.Each - old.Each; over > 0 {
			n -= over
		}
		q := catalog.Quantity{Each: n}
		w.out = append(w.out, Wasted{How: "issued", Part: is.Part, Qty: q, Says: fmt.Sprintf("%s were issued to the job; %s come back", amountOf(is.Net, is.Part), q), At: is.Rows[0].At})
	}
}

func needOf(d *bom.Demand, part string) catalog.Quantity {
	if n := d.Need(part); n != nil {
		return n.Quantity()
	}
	return catalog.Quantity{}
}

// orders finds lines of sent orders that were bought for the job and that it needs
// less of.
func (w *waste) orders() {
	for i := range w.stock.Open {
		o := &w.stock.Open[i]
		if o.Complete || !slices.ContainsFunc(o.Line.Jobs.V, func(j wordVal) bool { return j.V == w.job }) {
			continue
		}
		old, now := needOf(w.was, o.Part), needOf(w.now, o.Part)
		if !now.Less(old) {
			continue
		}
		q := old.Minus(now)
		w.out = append(w.out, Wasted{How: "ordered", Part: o.Part, Qty: q, From: o.Order.ID, At: o.Line.At,
			Says: fmt.Sprintf("%s is on its way with %s for the job, which takes %s less", amountOf(o.Left, o.Part), o.Order.ID, q)})
	}
}

// toolLacks lists the tools that parts new in the plan ask for and its crew has not. A
// job without a crew asks for none.
func (c *comparison) toolLacks(j *JobChange) []ToolLack {
	head := c.firms[atHead]
	crew := head.Workspace.Premises.Crew(j.Crew)
	if crew == nil {
		return nil
	}
	var out []ToolLack
	for _, m := range j.Takeoff {
		p := head.Catalog.Look(m.Part)
		if p == nil || !m.Was.IsZero() || m.Now.IsZero() {
			continue
		}
		for _, tool := range p.Tools.V {
			if !catalog.Has(crew.Tools, tool.V) {
				out = append(out, ToolLack{m.Part, tool.V, j.Crew})
			}
		}
	}
	return out
}
