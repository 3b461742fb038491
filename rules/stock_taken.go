package rules

import (
	"driploop/catalog"
	"driploop/catalog/source"
)

var stockBelow = &Rule{
	Name:    "stock/below",
	Title:   "Nothing is taken that was not there",
	Why:     "two crews count on the same piece, and the second finds out at the bench or on the roof",
	Basis:   []Basis{ledger},
	Weight:  Hold,
	Lighter: "counted goods are a punch; cut stock, where the piece cannot be made up from others, is a hold",
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("belongs to it", catalog.NoteBelow) {
			s.stand(n.row, func(at source.Place, on string) *Finding { return below(r, n.Note, at, on) })
		}
	},
}

func below(r *Report, n *catalog.Note, at source.Place, on string) *Finding {
	if n.Baseless {
		return r.Unknown(at, on, "%s: whether the %s taken on %s were there is not assessed: the bin was never counted", thing(n), n.Read, n.On).
			Then("count the bin")
	}
	taken, read := stockFigure("taken", n.Read, n.Tag != "")
	had, book := stockFigure("there", n.Book, n.Tag != "")
	if n.Tag != "" {
		return r.Fails(at, on, "%s: %s cut on %s, where %s was left; the book goes on from none", thing(n), n.Read, n.On, n.Book.Length).
			Then("measure what is left and write it down as a reading; cut the missing piece from another reel").Over(taken, read, had, book)
	}
	return r.Fails(at, on, "%s: %s taken on %s, where %s were there; the book goes on from none", thing(n), n.Read, n.On, n.Book).
		Then("count the bin, and void what was booked twice").Over(taken, read, had, book).Lighter(Punch)
}

var stockTag = &Rule{
	Name:   "stock/tag",
	Title:  "A tag or serial number is one piece, of one part, in one place",
	Why:    "of two reels with one tag one is planned with the other's length, and is too short when it is cut",
	Basis:  []Basis{ledger},
	Weight: Hold,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, n := range s.notes("the other row", catalog.NoteClash) {
			if n.Name != "" {
				n.row.parts = append(n.row.parts, n.Name)
			}
			says, do := clash(n.Note)
			s.stand(n.row, func(at source.Place, on string) *Finding { return r.Fails(at, on, "%s", says).Then("%s", do) })
		}
	},
}

// clash says what about a tag or serial number contradicts itself.
func clash(n *catalog.Note) (says, do string) {
	switch n.What {
	case catalog.ClashPart:
		return "the tag " + n.Tag + " belongs to " + n.Part + " and stands here for " + n.Name + "; the row does not count",
			"give the piece of " + n.Name + " a tag of its own"
	case catalog.ClashParent:
		return "the piece " + n.Tag + " is " + n.Part + ", and the reel that it was cut from is " + n.Name, "correct of or part"
	case catalog.ClashBirth:
		return "the tag " + n.Tag + " begins twice, with " + n.Book.Length.String() + " and with " + n.Read.Length.String() + " of " + n.Part + ": two pieces have one tag",
			"give one of the two a tag of its own"
	}
	name := n.Tag
	if n.Serial != "" {
		name = n.Part + " with serial number " + source.Quote(n.Serial)
	}
	if n.Was == "" {
		return name + " leaves " + n.Where + " here, and the book has it nowhere", "correct the row, or book how it came back"
	}
	return name + " is at " + n.Where + " and at " + n.Was + " at one time", "look where it is, and correct the other row"
}
