package bom

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Claim is what a job is still to be given of one part: its takeoff less what it
// was issued.
type Claim struct {
	Demand *Demand
	Need   *Need
	Needed unit.Date // by when; zero where the job has no date

	Each   int     // of what is counted
	Pieces []Piece // of cut stock, those not cut yet

	Held []Hold // what is kept for the claim, in the order in which it is taken
	// What nothing brings in time: pieces to count, or the lines whose piece it is.
	Short      int
	ShortLines []Piece
	// Of what is short, what a sent order brings too late.
	Late []Hold
}

// Hold is a part of a supply that is kept for a claim.
type Hold struct {
	Supply *Supply
	Each   int
	Piece  Piece // of cut stock
}

// Part is the part claimed.
func (c *Claim) Part() *catalog.Part { return c.Need.Part }

// Job is the job that claims.
func (c *Claim) Job() string { return c.Demand.Job }

// IsShort reports whether something of the claim comes in time from nowhere.
func (c *Claim) IsShort() bool { return c.Short > 0 || len(c.ShortLines) > 0 }

// Quantity is the whole claim.
func (c *Claim) Quantity() catalog.Quantity {
	q := catalog.Quantity{Each: int64(c.Each)}
	for _, p := range c.Pieces {
		q.Length += p.Length
	}
	return q
}

// ShortBy is what is short of the claim; of cut stock, its pieces together.
func (c *Claim) ShortBy() catalog.Quantity {
	q := catalog.Quantity{Each: int64(c.Short)}
	for _, p := range c.ShortLines {
		q.Length += p.Length
	}
	return q
}

// turn is where a demand stands among all: jobs under construction first, then by
// date, jobs without one and jobs whose date is long past last, then by name.
func (a *allocator) turn(d, e *Demand) int {
	return cmp.Or(cmp.Compare(a.lapsed(d), a.lapsed(e)), cmp.Compare(stageTurn(d), stageTurn(e)),
		cmp.Compare(noDate(d), noDate(e)), byDay(d.On, e.On), strings.Compare(d.Job, e.Job), strings.Compare(d.Path, e.Path))
}

// lapsed is 1 for a job whose date passed longer ago than the house waits.
func (a *allocator) lapsed(d *Demand) int {
	if d.Lapsed(a.house, a.today) {
		return 1
	}
	return 0
}

// Lapsed reports a job whose date passed longer ago than the house waits: it no
// longer goes first.
func (d *Demand) Lapsed(house *House, today unit.Date) bool {
	return !d.On.IsZero() && d.On.Add(house.ClaimDays.Or(30)).Before(today)
}

func stageTurn(d *Demand) int {
	if d.Stage == StageConstruction {
		return 0
	}
	return 1
}

func noDate(d *Demand) int {
	if d.On.IsZero() {
		return 1
	}
	return 0
}

func byDay(d, e unit.Date) int {
	switch {
	case d.Before(e):
		return -1
	case e.Before(d):
		return 1
	}
	return 0
}

// claims lists, in their turn, what the jobs are still to be given.
func (a *allocator) claims() []*Claim {
	var out []*Claim
	for _, d := range a.Demands {
		if !d.Claims() {
			continue
		}
		needed := d.Needed(a.house, a.calendar())
		given := a.given(d.Job)
		for i := range d.Needs {
			n := &d.Needs[i]
			if n.Part.Expendable.V {
				continue // kept by reorder levels alone
			}
			c := &Claim{Demand: d, Need: n, Needed: needed}
			if n.Part.CutStock() {
				c.Pieces = given.uncut(n)
			} else {
				c.Each = max(0, n.Each-int(given.each[n.Part.ID]))
			}
			if c.Each > 0 || len(c.Pieces) > 0 {
				out = append(out, c)
			}
		}
	}
	return out
}

// given is what a job was issued.
type given struct {
	each  map[string]int64
	whole map[string]unit.MM // of cut stock that went to the job uncut: what no cut accounts for
	cut   map[string]unit.MM // by line: what was cut for it and is still with the job
}

// given is nothing, without a map, for a job that was issued nothing: of thousands
// of jobs most are.
func (a *allocator) given(job string) given {
	issues, pieces := a.stock.IssuesOf(job), a.stock.PiecesFor(job)
	if len(issues) == 0 && len(pieces) == 0 {
		return given{}
	}
	g := given{map[string]int64{}, map[string]unit.MM{}, map[string]unit.MM{}}
	for _, is := range issues {
		g.each[is.Part] = is.Net.Each
		g.whole[is.Part] = is.Net.Length
	}
	for _, p := range pieces {
		g.cut[p.Cable] += p.Kept()
		g.whole[p.Part] -= p.Kept()
	}
	return g
}

// uncut lists the pieces of a need that were not cut yet. What a job was given
// uncut, a reel as a whole, serves its pieces in their order as far as it goes.
func (g given) uncut(n *Need) []Piece {
	if g.each == nil {
		return slices.Clip(n.Pieces)
	}
	whole := g.whole[n.Part.ID]
	var out []Piece
	for _, p := range n.Pieces {
		switch cut := g.cut[p.Line]; {
		case p.Line == ExtraLine && cut >= p.Length:
			g.cut[p.Line] -= p.Length // extras share one name
		case p.Line != ExtraLine && cut > 0:
		case p.Bare <= whole:
			whole -= min(whole, p.Length)
		default:
			out = append(out, p)
		}
	}
	return out
}
