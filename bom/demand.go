package bom

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// The stages in which a job claims goods.
const (
	StageReview       = "review"
	StageConstruction = "construction"
)

// Demand is all that other jobs may know of a plan: what it takes, when, and what
// it keeps for itself. It is small, so that the demands of thousands of plans fit
// in memory when the plans are let go.
type Demand struct {
	Job, Path string
	Title     string
	Stage     string
	Crew      string
	On        unit.Date // of the install; zero where the plan gives none
	At        source.Place
	Needs     []Need // by part ID
	Reserves  []Reserve
	Gaps      []Gap // what could not be counted
}

// Need is what a job takes of one part in all, whatever it was given already.
type Need struct {
	Part   *catalog.Part
	Each   int
	Pieces []Piece // of cut stock, allowances included
	At     source.Place
}

// DemandOf is the demand of a plan with its takeoff.
func DemandOf(p *Plan, t *Takeoff) *Demand {
	d := &Demand{Job: p.ID, Path: p.File.Path, Title: p.Job.Title.V, Stage: p.Job.Stage.Or("draft"), Crew: p.Job.Crew.V,
		On: p.Job.InstallOn.V, At: p.Job.At, Reserves: p.Reserves, Gaps: t.Gaps}
	n := 0
	for _, q := range t.Rows {
		n += len(q.Pieces)
	}
	pieces := make([]Piece, 0, n) // of all needs, no longer than they are together
	d.Needs = make([]Need, 0, len(t.Rows))
	for _, q := range t.Rows {
		from := len(pieces)
		pieces = append(pieces, q.Pieces...)
		d.Needs = append(d.Needs, Need{Part: q.Part, Each: q.Each, Pieces: slices.Clip(pieces[from:]), At: q.At})
	}
	return d
}

// Claims reports whether the job is in a stage in which goods are kept for it.
func (d *Demand) Claims() bool { return d.Stage == StageReview || d.Stage == StageConstruction }

// Need finds what the job takes of a part, or nil.
func (d *Demand) Need(part string) *Need {
	for i := range d.Needs {
		if d.Needs[i].Part.ID == part {
			return &d.Needs[i]
		}
	}
	return nil
}

// Quantity is the whole need; of cut stock, its pieces with their allowance.
func (n *Need) Quantity() catalog.Quantity {
	q := catalog.Quantity{Each: int64(n.Each)}
	for _, p := range n.Pieces {
		q.Length += p.Length
	}
	return q
}

// LinePiece is the piece of cut stock that a line of the plan takes.
type LinePiece struct {
	Part  *catalog.Part
	Piece *Piece
}

// Piece finds what a line of the plan takes, or nil.
func (d *Demand) Piece(line string) *LinePiece {
	for i := range d.Needs {
		n := &d.Needs[i]
		for j := range n.Pieces {
			if n.Pieces[j].Line == line {
				return &LinePiece{n.Part, &n.Pieces[j]}
			}
		}
	}
	return nil
}

// HasGap reports a line of the plan of which something could not be counted.
func (d *Demand) HasGap(line string) bool {
	for _, g := range d.Gaps {
		if _, name, ok := strings.Cut(g.On, "."); ok && name == line {
			return true
		}
	}
	return false
}

// Places are all places of the demand, to be moved off the plan's text.
func (d *Demand) Places() []*source.Place {
	out := []*source.Place{&d.At}
	for i := range d.Needs {
		n := &d.Needs[i]
		out = append(out, &n.At)
		for j := range n.Pieces {
			out = append(out, &n.Pieces[j].At)
		}
	}
	for i := range d.Gaps {
		out = append(out, &d.Gaps[i].At)
	}
	for i := range d.Reserves {
		r := &d.Reserves[i]
		out = append(out, &r.At, &r.Tag.At, &r.Part.At, &r.Qty.At, &r.Where.At, &r.Cable.At, &r.Until.At)
	}
	return out
}

// Needed is the day by which goods have to be there: so many working days before
// the install. It is zero where the job has no date.
func (d *Demand) Needed(house *House, c *catalog.Calendar) unit.Date {
	if d.On.IsZero() {
		return unit.Date{}
	}
	return c.AddWorkdays(d.On, -house.ReadyDays.Or(1))
}
