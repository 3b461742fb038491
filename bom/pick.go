package bom

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Pick is what a crew takes from the shelves for one job, in the order in which it
// walks: shelf by shelf as the crew takes from them, bins before reels.
type Pick struct {
	Job, Title string
	Crew       string
	On, Needed unit.Date // of the install, and by when everything is to be ready
	Stage      string
	Tools      []Tool
	Loose      []PickBin // what the job takes and nobody books: consumables that reorder levels keep
	Bins       []PickBin
	Reels      []PickReel
	Missing    []*Claim // what is not all there, in whole or in part
	Coming     []Coming // what is held for the job on orders that are out
	Given      []catalog.Issue
	Labels     []Label
}

// Tool is something the crew needs to fit the parts.
type Tool struct {
	Name string
	For  []string // part IDs
	Has  bool     // the crew's list has it; without a crew it is not known and false
}

// PickBin is a number of pieces from one bin.
type PickBin struct {
	Where      string
	CountFirst bool // arrived and not put away yet
	Part       *catalog.Part
	Qty        int
}

// PickReel is a reel or remnant with what is cut from it, the longest piece first.
type PickReel struct {
	Where      string
	CountFirst bool
	Part       *catalog.Part
	Tag        *catalog.Tag
	Cuts       []Piece
	Left       unit.MM // after these cuts, by the book
	Usable     bool    // what is left goes back; else it is scrap
	Others     unit.MM // what other jobs hold of the reel
}

// Coming is goods on order that are held for the job.
type Coming struct {
	Part *catalog.Part
	Hold
}

// Label is what is written on both ends of a line that the crew lays.
type Label struct {
	Line     string // "C1"
	Part     string
	Length   unit.MM // as installed; 0 where the plan gives none, as for a jumper
	From, To string  // "donor.rf"; "" where it did not resolve
}

// PickFor makes the pick list of a job from the allocation over all jobs and the
// job's own plan.
func PickFor(a *Allocation, d *Demand, g *Graph) *Pick {
	p := &Pick{Job: d.Job, Title: d.Title, Crew: d.Crew, On: d.On, Needed: d.Needed(a.house, &a.premises.Calendar), Stage: d.Stage,
		Given: a.stock.IssuesOf(d.Job), Labels: labels(g)}
	p.tools(a.premises.Crew(d.Crew), d)
	for i := range d.Needs {
		if n := &d.Needs[i]; n.Part.Expendable.V && n.Each > 0 {
			p.Loose = append(p.Loose, PickBin{Part: n.Part, Qty: n.Each})
		}
	}
	for _, c := range a.ClaimsOf(d.Job) {
		if c.IsShort() {
			p.Missing = append(p.Missing, c)
		}
		for _, h := range c.Held {
			switch {
			case !h.Supply.Here():
				p.Coming = append(p.Coming, Coming{c.Part(), h})
			case h.Supply.Tag != nil:
				p.cut(a, c, h)
			default:
				p.Bins = append(p.Bins, PickBin{Where: h.Supply.Where, CountFirst: !h.Supply.Pickable(), Part: c.Part(), Qty: h.Each})
			}
		}
	}
	p.walk(a, d.Crew)
	return p
}

func (p *Pick) tools(crew *catalog.Crew, d *Demand) {
	byName := map[string]*Tool{}
	var names []string
	for i := range d.Needs {
		part := d.Needs[i].Part
		for _, t := range part.Tools.V {
			if byName[t.V] == nil {
				byName[t.V] = &Tool{Name: t.V, Has: crew != nil && catalog.Has(crew.Tools, t.V)}
				names = append(names, t.V)
			}
			byName[t.V].For = append(byName[t.V].For, part.ID)
		}
	}
	slices.Sort(names)
	for _, n := range names {
		p.Tools = append(p.Tools, *byName[n])
	}
}

// cut adds a piece to the reel that it comes from.
func (p *Pick) cut(a *Allocation, c *Claim, h Hold) {
	i := slices.IndexFunc(p.Reels, func(r PickReel) bool { return r.Tag == h.Supply.Tag })
	if i < 0 {
		i = len(p.Reels)
		t := h.Supply.Tag
		p.Reels = append(p.Reels, PickReel{Where: h.Supply.Where, CountFirst: !h.Supply.Pickable(), Part: c.Part(), Tag: t, Left: t.Left,
			Others: h.Supply.Qty.Length - h.Supply.Free.Length})
	}
	r := &p.Reels[i]
	r.Cuts = append(r.Cuts, h.Piece)
	r.Left -= h.Piece.Length
	r.Others -= h.Piece.Length
	r.Usable = r.Left >= a.house.UsableRemnant.Or(DefaultUsableRemnant)
}

// walk puts bins and reels into the order in which the crew meets them.
func (p *Pick) walk(a *Allocation, crew string) {
	shelves := a.shelves(crew)
	stop := func(where string, first bool) int {
		if at := slices.Index(shelves, where); at >= 0 && !first {
			return at
		}
		return len(shelves)
	}
	slices.SortStableFunc(p.Bins, func(x, y PickBin) int {
		return cmp.Or(cmp.Compare(stop(x.Where, x.CountFirst), stop(y.Where, y.CountFirst)), strings.Compare(x.Where, y.Where),
			strings.Compare(x.Part.Kind.V, y.Part.Kind.V), strings.Compare(x.Part.ID, y.Part.ID))
	})
	slices.SortStableFunc(p.Reels, func(x, y PickReel) int {
		return cmp.Or(cmp.Compare(stop(x.Where, x.CountFirst), stop(y.Where, y.CountFirst)), strings.Compare(x.Where, y.Where),
			strings.Compare(x.Part.ID, y.Part.ID), strings.Compare(x.Tag.ID, y.Tag.ID))
	})
	for i := range p.Reels {
		slices.SortStableFunc(p.Reels[i].Cuts, func(x, y Piece) int {
			return cmp.Or(cmp.Compare(y.Length, x.Length), strings.Compare(x.Line, y.Line))
		})
	}
}

// Shelves lists the shelves of the pick list in the order of walking.
func (p *Pick) Shelves() []string {
	var out []string
	add := func(where string) {
		if !slices.Contains(out, where) {
			out = append(out, where)
		}
	}
	for _, b := range p.Bins {
		add(b.Where)
	}
	for _, r := range p.Reels {
		add(r.Where)
	}
	return out
}

// Empty reports that there is nothing to take.
func (p *Pick) Empty() bool { return len(p.Bins) == 0 && len(p.Reels) == 0 }

// labels lists the lines that the crew lays: cables, Ethernet lines and supply.
func labels(g *Graph) []Label {
	var out []Label
	for _, c := range g.Cables {
		if !c.Row.Existing.V {
			out = append(out, Label{c.ID, partID(c.Part), c.Length.V, farEnd(c.Ends[0]), farEnd(c.Ends[1])})
		}
	}
	for _, d := range g.Data {
		if !d.Row.Existing.V {
			out = append(out, Label{d.Row.ID, partID(d.Part), d.Row.Length.V, nodeName(d.From), nodeName(d.To)})
		}
	}
	for _, w := range g.Wires {
		if !w.Row.Existing.V {
			out = append(out, Label{w.Row.ID, partID(w.Part), w.Row.Length.V, nodeName(w.From), nodeName(w.To)})
		}
	}
	return out
}

func partID(p *catalog.Part) string {
	if p == nil {
		return ""
	}
	return p.ID
}

// farEnd is what a cable's end mates with.
func farEnd(n *Node) string {
	if n == nil || len(n.Mates) == 0 {
		return ""
	}
	return n.Mates[0].Other(n).Name()
}

func nodeName(n *Node) string {
	if n == nil {
		return ""
	}
	return n.Name()
}
