package catalog

import (
	"strings"

	"driploop/catalog/source"
)

// CheckStock holds sheets and orders against the catalog: cut stock is read by tag
// and never counted, all else is counted and has no tag, packs are in the unit of
// their part, and an order has one file. Names that lead nowhere are not reported
// here but noted by Book, which knows what a newer count has settled.
func CheckStock(sheets []*Sheet, orders []*Order, look func(string) *Part) []source.Problem {
	c := stockCheck{look: look}
	for _, s := range sheets {
		if !s.Head.Void.Set {
			c.sheet(s)
		}
	}
	first := map[string]*Order{}
	for _, o := range orders {
		id := strings.ToLower(o.ID)
		if f := first[id]; f != nil {
			c.fault(o.At, "there are two files for the order "+source.Quote(o.ID), "keep one of the two", f.At)
			continue
		}
		first[id] = o
		c.order(o)
	}
	source.SortProblems(c.problems)
	return c.problems
}

type stockCheck struct {
	look     func(string) *Part
	problems []source.Problem
}

func (c *stockCheck) fault(at source.Place, says, do string, also ...source.Place) {
	c.problems = append(c.problems, source.Problem{Kind: source.Value, At: at, Says: says, Do: do, Also: also})
}

func (c *stockCheck) sheet(s *Sheet) {
	for i := range s.Counts {
		c.counted(s.Counts[i].Part, "write what is left on each reel as [[reel]] with its tag")
	}
	for i := range s.Moves {
		c.counted(s.Moves[i].Part, "move the reel by its tag, or write the length that left it as [[cut]]")
	}
	for i := range s.Reels {
		if p := c.look(s.Reels[i].Part.V); p != nil && !p.CutStock() {
			c.fault(s.Reels[i].Part.At, source.Quote(p.ID)+" is counted in pieces and has no tag", "write it as [[count]]")
		}
	}
}

func (c *stockCheck) counted(part source.Val[string], do string) {
	if p := c.look(part.V); p != nil && p.CutStock() {
		c.fault(part.At, source.Quote(p.ID)+" is kept by length and is never counted in pieces", do)
	}
}

func (c *stockCheck) order(o *Order) {
	for i := range o.Lines {
		l := &o.Lines[i]
		if p := c.look(l.Part.V); p != nil {
			c.problems = append(c.problems, packSuits(p, l.Holds(), l.Pack.At, l.At)...)
		}
	}
}
