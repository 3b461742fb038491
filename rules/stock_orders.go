package rules

import (
	"driploop/catalog"
	"driploop/catalog/source"
)

var stockOver = &Rule{
	Name:   "stock/over",
	Title:  "No more arrives than was ordered",
	Why:    "the bin holds what nobody ordered, or a delivery was booked twice and half of it is not there",
	Basis:  []Basis{ledger},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the order", catalog.NoteOver) {
			s.stand(n.row, func(at source.Place, on string) *Finding {
				came, read := stockFigure("came", n.Read, n.Read.Length != 0)
				open, book := stockFigure("open", n.Book, n.Read.Length != 0)
				return r.Fails(at, on, "%s arrived under %s, which still asked for %s", amountOf(n.Read, n.Part), n.Order, open0(n.Note)).
					Then("look whether the delivery was booked twice; else send back what is too much, or order it").Over(came, read, open, book)
			})
		}
	},
}

// open0 prints what an order still asked for when more arrived.
func open0(n *catalog.Note) string {
	if n.Book.IsZero() {
		return "none"
	}
	return n.Book.String()
}

var stockOverdue = &Rule{
	Name:   "stock/overdue",
	Title:  "What was ordered comes on the day promised",
	Why:    "a job is planned on goods of which nobody knows where they are",
	Basis:  []Basis{practice("the vendor's promise, kept as due on the order line")},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the order line", catalog.NoteOverdue) {
			late := n.On.Day.DaysUntil(s.Today)
			s.stand(n.row, func(at source.Place, on string) *Finding {
				return r.Fails(at, on, "%s of %s were due on %s, %s ago, and have not come", amountOf(n.Book, n.Part), n.Order, n.On, days(late)).
					Then("ask the vendor, and write the new day into due; what will not come is dropped, with because").Over("late_days", float64(late), "limit_days", 0)
			})
		}
		for _, o := range s.Stock.Open {
			if o.Complete || o.Line.Due.Set {
				continue
			}
			s.stand(stockRow{at: o.Line.At, parts: []string{o.Part}}, func(at source.Place, on string) *Finding {
				return r.Unknown(at, on, "%s of %s: whether they are overdue is not assessed: the line lacks due", amountOf(o.Left, o.Part), o.Order.ID).
					Then("write down the day that the vendor promised")
			})
		}
	},
}

var stockFuture = &Rule{
	Name:   "stock/future",
	Title:  "What is booked has happened",
	Why:    "a slip in a date takes a row out of the book until that day comes",
	Basis:  []Basis{ledger},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the order line", catalog.NoteFuture) {
			what := "the row of " + n.Part
			switch {
			case n.Order != "":
				what = "the order " + n.Order
			case n.Part == "":
				what = "the sheet"
			}
			ahead := s.Today.DaysUntil(n.On.Day)
			s.stand(n.row, func(at source.Place, on string) *Finding {
				return r.Fails(at, on, "%s is dated %s, after today, %s, and does not count yet", what, n.On, s.Today).
					Then("correct the date, or wait for it").Over("ahead_days", float64(ahead), "limit_days", 0)
			})
		}
	},
}
