package rules

import (
	"driploop/catalog"
	"driploop/catalog/source"
)

var stockCountedTwice = &Rule{
	Name:   "stock/counted-twice",
	Title:  "Two counts of one bin at one time agree",
	Why:    "one of the two is wrong, and whoever relies on the higher one comes up short",
	Basis:  []Basis{ledger},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the other count", catalog.NoteCountedTwice) {
			s.stand(n.row, func(at source.Place, on string) *Finding {
				low, read := stockFigure("lower", n.Read, n.Tag != "")
				high, book := stockFigure("higher", n.Book, n.Tag != "")
				return r.Fails(at, on, "%s was counted twice on %s, as %s and as %s; the lower holds until that is settled", thing(n.Note), n.On, stocked(n.Read, n.Tag), stocked(n.Book, n.Tag)).
					Then("count again, and void the sheet that is wrong").With(low, read).With(high, book)
			})
		}
	},
}

// stocked prints a quantity; none of a tag is a length as well.
func stocked(q catalog.Quantity, tag string) string {
	if tag != "" {
		return q.Length.String()
	}
	return q.String()
}

var stockJump = &Rule{
	Name:    "stock/jump",
	Title:   "A count is what the book says",
	Why:     "what nobody wrote down is missing from some other count, or from some other job",
	Basis:   []Basis{ledger},
	Weight:  Punch,
	Lighter: "a count that differs, a reel that is shorter and a tag on another shelf are notes; a reel that is longer than it can be is a punch",
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("what the book stands on", catalog.NoteJump, catalog.NoteLost, catalog.NoteGrew) {
			says, do := jump(n.Note)
			s.stand(n.row, func(at source.Place, on string) *Finding {
				was, book := stockFigure("book", n.Book, n.Tag != "")
				now, read := stockFigure("read", n.Read, n.Tag != "")
				f := r.Fails(at, on, "%s", says).Then("%s", do).With(now, read).With(was, book)
				if n.Kind != catalog.NoteGrew {
					f.Lighter(Note)
				}
				return f
			})
		}
	},
}

// jump says how a count differs from the book.
func jump(n *catalog.Note) (says, do string) {
	read, book := stocked(n.Read, n.Tag), stocked(n.Book, n.Tag)
	head := thing(n) + ": "
	switch {
	case n.Kind == catalog.NoteLost:
		return head + read + " read, and its cuts leave " + book + ": " + n.Book.Minus(n.Read).String() + " are lost", "book what was cut, or leave the new reading as it is"
	case n.Kind == catalog.NoteGrew:
		return head + read + " read, and no more than " + book + " can be left: " + n.Read.Minus(n.Book).String() + " too much", "look whether it is the right reel, and whether a cut was booked that was never made"
	case n.Tag != "" && n.Was == "":
		return head + "read at " + n.Where + ", and the book has it nowhere", "book how it came back"
	case n.Tag != "" && n.Was != n.Where:
		return head + "read at " + n.Where + ", and the book has it at " + n.Was, "book the move"
	case n.Tag != "":
		return head + "not found in the complete count of " + n.Where + ", where the book has " + book, "look for it, or leave the count as it is"
	case n.Bag > 0:
		return head + read + " counted, and the book has " + book + ", which is as many bags of " + plainFigure(float64(n.Bag)), "look whether bags were counted for pieces"
	}
	return head + read + " counted, and the book has " + book, "look for a row that is missing, or leave the count as it is"
}

var stockSameDay = &Rule{
	Name:   "stock/same-day",
	Title:  "What moves on the day of a count says at what time",
	Why:    "whether the count has seen the move is only a convention, and the bin is off by the move where it was otherwise",
	Basis:  []Basis{ledger},
	Weight: Note,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the move", catalog.NoteSameDay) {
			verb := "counted"
			if n.Tag != "" {
				verb = "read"
			}
			s.stand(n.row, func(at source.Place, on string) *Finding {
				return r.Fails(at, on, "%s was %s and moved on %s, not both with a time: what moved is taken to be gone, or there, when it was %s", thing(n.Note), verb, n.On.Day, verb).
					Then("write the time of day on both rows")
			})
		}
	},
}

// defaultCountDays is how long a count is good where the house says nothing.
const defaultCountDays = 60

var stockOld = &Rule{
	Name:   "stock/old",
	Title:  "What lies on the shelf was counted not long ago",
	Why:    "an old count has collected every row that nobody wrote",
	Basis:  []Basis{house("count_days")},
	Weight: Note,
	CheckShelf: func(s *Shelf, r *Report) {
		for i := range s.Stock.Bins {
			if b := &s.Stock.Bins[i]; b.Qty.Each > 0 && b.OnHand() {
				s.old(r, b.Part, b.Part+" at "+b.Where, b.At, b.Counted, b)
			}
		}
		for i := range s.Stock.Tags {
			t := &s.Stock.Tags[i]
			if bin := (catalog.Bin{Kind: t.Kind}); t.Left > 0 && bin.OnHand() {
				s.old(r, t.Part, t.Part+" on "+t.ID, t.At, t.Read, nil)
			}
		}
	},
}

// old reports a count that is too old, or a bin that never had one.
func (s *Shelf) old(r *Report, part, what string, at source.Place, counted catalog.Moment, bin *catalog.Bin) {
	limit := s.Workspace.House.CountDays.Or(defaultCountDays)
	never := bin != nil && at.IsZero()
	if never {
		at, counted = bin.Began, bin.BeganOn
	}
	age := counted.Day.DaysUntil(s.Today)
	if age <= limit || at.IsZero() {
		return
	}
	s.stand(stockRow{at: at, parts: []string{part}}, func(at source.Place, on string) *Finding {
		if never {
			return r.Unknown(at, on, "%s: how old its count is is not assessed: it was never counted, and its first row is of %s", what, counted).Then("count the bin")
		}
		return r.Fails(at, on, "%s was counted on %s, %s ago; the house counts within %s", what, counted, days(age), days(limit)).
			Then("count it again").Over("age_days", float64(age), "limit_days", float64(limit))
	})
}

func days(n int) string { return count(n, "day", "days") }
