package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

var stockIssued = &Rule{
	Name:   "stock/issued",
	Title:  "A job is given what it takes, and no more",
	Why:    "what is out on a job and not needed is missing on another; what was built in and not booked is still on the shelf in the books",
	Basis:  []Basis{ledger},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, d := range s.Demands {
			if d.Claims() || d.Stage == "as-built" {
				s.issuedTo(d, r)
			}
		}
	},
}

// issuedTo holds what a job was given against what its plan takes.
func (s *Shelf) issuedTo(d *bom.Demand, r *Report) {
	for _, is := range s.Stock.IssuesOf(d.Job) {
		s.beyond(d, is, r)
	}
	if d.Stage == "as-built" {
		for i := range d.Needs {
			s.unbooked(d, &d.Needs[i], r)
		}
	}
	for _, p := range s.Stock.PiecesFor(d.Job) {
		switch {
		case p.Part == "":
			r.Unknown(d.At, "job", "what was cut from %s for %s is not assessed: no reading says what is on that reel", p.Tag, p.Cable).
				Then("read the reel").Beside(p.At, "the cut")
		case p.Kept() > 0 && p.Cable != bom.ExtraLine && d.Piece(p.Cable) == nil && !d.HasGap(p.Cable):
			r.Fails(d.At, "part."+p.Part, "%s of %s was cut for %s, and the plan takes no piece for such a line", p.Kept(), p.Part, p.Cable).
				Then("bring it back as a remnant, or name the line it was laid as").With("cut_m", p.Kept().Metres()).Beside(p.At, "the cut")
		}
	}
}

// beyond says where more was given than the plan takes. A reel that the job has as
// a whole may hold more than the job takes until it is built.
func (s *Shelf) beyond(d *bom.Demand, is catalog.Issue, r *Report) {
	at, takes := d.At, catalog.Quantity{}
	if n := d.Need(is.Part); n != nil {
		at, takes = n.At, n.Quantity()
	}
	if p := s.Catalog.Look(is.Part); p != nil && (p.Expendable.V || p.CutStock() && d.Stage != "as-built") {
		return
	}
	over := is.Net.Minus(takes)
	if over.Each <= 0 && over.Length < s.Workspace.House.UsableRemnant.Or(bom.DefaultUsableRemnant) {
		return
	}
	cut := over.Length > 0
	f := r.Fails(at, "part."+is.Part, "the job was given %s and takes %s: %s more than it needs", amountOf(is.Net, is.Part), noneOr(takes), over).
		Then("bring them back, or add to the plan what they are for")
	name, got := stockFigure("issued", is.Net, cut)
	limit, want := stockFigure("takes", takes, cut)
	f.Over(name, got, limit, want).Part = is.Part
	for _, row := range is.Rows {
		f.Beside(row.At, "the row")
	}
}

// unbooked says where a finished job takes what nobody booked to it.
func (s *Shelf) unbooked(d *bom.Demand, n *bom.Need, r *Report) {
	if n.Part.Expendable.V {
		return
	}
	net, takes := s.Stock.Issued(d.Job, n.Part.ID), n.Quantity()
	if n.Part.CutStock() {
		takes = catalog.Quantity{}
		for _, p := range n.Pieces {
			takes.Length += p.Bare
		}
	}
	if !net.Less(takes) {
		return
	}
	name, got := stockFigure("issued", net, n.Part.CutStock())
	limit, want := stockFigure("takes", takes, n.Part.CutStock())
	f := r.Fails(n.At, "part."+n.Part.ID, "the finished job takes %s, and the books have given it %s: the shelf holds less than they say", amountOf(takes, n.Part.ID), noneOr(net)).
		Then("book the issue; if the goods came from elsewhere, write supplied_by").Under(name, got, limit, want)
	f.Part = n.Part.ID
}

func noneOr(q catalog.Quantity) string {
	if q.IsZero() {
		return "none"
	}
	return q.String()
}

var stockCutWas = &Rule{
	Name:    "stock/cut-was",
	Title:   "What was cut for a line is long enough for it",
	Why:     "a cable cannot be made longer: the crew finds out at the far end of the run",
	Basis:   []Basis{ledger},
	Weight:  Hold,
	Lighter: "a piece that was cut longer than the plan now asks for is a note",
	CheckShelf: func(s *Shelf, r *Report) {
		for _, d := range s.Demands {
			if !d.Claims() && d.Stage != "as-built" {
				continue
			}
			for _, c := range cutFor(s.Stock.PiecesFor(d.Job)) {
				s.cutWas(d, c, r)
			}
		}
	},
}

// cutLine is what was cut for one line of a job and is still with it: one piece, or
// several where it was cut again.
type cutLine struct {
	line, part string
	longest    unit.MM
	at         source.Place
}

// cutFor joins the pieces of each line. Of several the longest is the one that can
// be laid.
func cutFor(pieces []catalog.Piece) []cutLine {
	var out []cutLine
	for _, p := range pieces {
		if p.Kept() <= 0 || p.Part == "" {
			continue
		}
		if n := len(out); n > 0 && out[n-1].line == p.Cable {
			if p.Kept() > out[n-1].longest {
				out[n-1] = cutLine{p.Cable, p.Part, p.Kept(), p.At}
			}
			continue
		}
		out = append(out, cutLine{p.Cable, p.Part, p.Kept(), p.At})
	}
	return out
}

func (s *Shelf) cutWas(d *bom.Demand, c cutLine, r *Report) {
	if c.line == bom.ExtraLine {
		return
	}
	on := "part." + c.part
	n := d.Piece(c.line)
	if n == nil {
		if d.HasGap(c.line) {
			r.Unknown(d.At, on, "whether the %s cut for %s will do is not assessed: the plan does not say how long the line is", c.longest, c.line).
				Then("give the line its length").Beside(c.at, "the cut")
		}
		return
	}
	asks := fmt.Sprintf("%s of %s was cut for %s", c.longest, c.part, c.line)
	switch {
	case n.Part.ID != c.part:
		r.Fails(n.Piece.At, on, "%s, and the plan now asks for %s", asks, n.Part.ID).
			Then("cut it from the part that is planned, or plan the one that was cut").Beside(c.at, "the cut")
	case c.longest < n.Piece.Bare:
		r.Fails(n.Piece.At, on, "%s, and the plan now asks for %s to be laid: it is %s too short", asks, n.Piece.Bare, n.Piece.Bare-c.longest).
			Then("cut a new piece and bring this one back, or lay the line the shorter way").
			Under("cut_m", c.longest.Metres(), "laid_m", n.Piece.Bare.Metres()).Beside(c.at, "the cut")
	case c.longest > n.Piece.Length:
		r.Fails(n.Piece.At, on, "%s, and the plan now asks for %s with its allowance: it is %s too long", asks, n.Piece.Length, c.longest-n.Piece.Length).
			Then("lay it as it is, and bring back what is left over").Lighter(Note).
			With("cut_m", c.longest.Metres()).With("asked_m", n.Piece.Length.Metres()).Beside(c.at, "the cut")
	}
}
