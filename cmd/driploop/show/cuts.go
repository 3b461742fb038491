package show

import (
	"encoding/json"
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
)

// Cuts is the plan of cuts of a purchase.
type Cuts struct{ *Buying }

// plans lists the plans of the parts that the jobs take which were asked for, with
// what is cut for these jobs.
func (c *Cuts) plans() []*bom.CutPlan {
	var out []*bom.CutPlan
	for _, p := range c.Buying.Cuts {
		if c.Jobs == nil && len(p.Opened) > 0 || slices.ContainsFunc(p.Pieces, func(x bom.CutPiece) bool { return c.Jobs[x.Job] }) {
			out = append(out, p)
		}
	}
	return out
}

// shown reports whether anything is cut from a reel for the jobs that were asked for.
func (c *Cuts) shown(p *bom.CutPlan, from int) bool {
	return c.Jobs == nil || slices.ContainsFunc(p.Pieces, func(x bom.CutPiece) bool { return x.From == from && c.Jobs[x.Job] })
}

// Text writes, part by part, what is cut from each reel in the order of the jobs.
func (c *Cuts) Text(page Page) ([]byte, error) {
	d := &Document{Title: fmt.Sprintf("Cuts as of %s, %s", c.Today, c.At+borrowed(c.Origin))}
	d.Blocks = append(d.Blocks, c.broken()...)
	d.Blocks = append(d.Blocks, c.swaps()...)
	plans := c.plans()
	if len(plans) == 0 {
		d.Blocks = append(d.Blocks, Block{Text: []string{"Nothing is to be cut."}})
	}
	for _, p := range plans {
		b := Block{Head: p.Part.ID}
		for i, o := range p.Opened {
			if c.shown(p, i) {
				b.Items = append(b.Items, Item{o.ID, c.reel(p, i)})
			}
		}
		if p.Cost > 0 {
			b.Text = append(b.Text, c.cost(p))
		}
		d.Blocks = append(d.Blocks, b)
	}
	d.Blocks = append(d.Blocks, c.rest()...)
	return d.Text(page)
}

func (c *Cuts) cost(p *bom.CutPlan) string {
	text := fmt.Sprintf("To buy for %s without freight", c.money(p.Cost))
	if p.Proved {
		return text + "; no way to cut these pieces costs less."
	}
	return text + fmt.Sprintf("; no way to cut these pieces costs less than %s.", c.money(p.Bound))
}

// reel puts into words what is cut from one reel and what is left of it.
func (c *Cuts) reel(p *bom.CutPlan, at int) string {
	o := p.Opened[at]
	var pieces []string
	for _, x := range p.Pieces {
		if x.From == at {
			pieces = append(pieces, fmt.Sprintf("%s %s %s", x.Job, x.Piece.Line, c.length(x.Piece.Length)))
		}
	}
	text := c.length(o.Length) + ", " + c.lies(o) + ": " + strings.Join(pieces, ", ")
	if pieces == nil {
		text = c.length(o.Length) + ", " + c.lies(o) + ": nothing is cut"
	}
	left := "scrap"
	if o.Usable {
		left = "goes back"
	}
	text += "; " + c.length(o.Left) + " left, " + left
	if o.Keep > 0 {
		text += ", " + c.length(o.Keep) + " of it for a reorder level"
	}
	return text + "."
}

func (c *Cuts) lies(o bom.CutFrom) string {
	switch s := o.Supply; {
	case s == nil && o.Offer.ToLength():
		return "cut to length by " + o.Offer.Vendor.V
	case s == nil:
		return "new from " + o.Offer.Vendor.V
	case s.Here():
		return "at " + s.Where
	default:
		return "due " + s.Day.String() + expected(s)
	}
}

type cutPartJSON struct {
	Part   string         `json:"part"`
	Pieces []cutPieceJSON `json:"pieces"`
	New    []cutNewJSON   `json:"new"`
	Left   []cutLeftJSON  `json:"left"`
	Cost   string         `json:"cost"`
	Bound  string         `json:"bound"`
	Proved bool           `json:"proved"`
}

// cutPieceJSON has the length that leaves the reel, and the one that is installed.
type cutPieceJSON struct {
	Cable   string `json:"cable"`
	Length  int64  `json:"length_mm"`
	Install int64  `json:"installed_mm"`
	From    string `json:"from"`
}

type cutNewJSON struct {
	ID     string `json:"id"`
	Vendor string `json:"vendor"`
	Offer  string `json:"offer"`
	Length int64  `json:"length_mm"`
}

type cutLeftJSON struct {
	ID     string `json:"id"`
	Length int64  `json:"length_mm"`
	Usable bool   `json:"usable"`
	Keep   int64  `json:"keep_mm,omitempty"`
}

// JSON writes the cuts as the interface describes them.
func (c *Cuts) JSON() ([]byte, error) {
	out := struct {
		At         string          `json:"at"`
		LimitsFrom string          `json:"limits_from"`
		StockFrom  string          `json:"stock_from"`
		Today      string          `json:"today"`
		Until      string          `json:"until"`
		Parts      []cutPartJSON   `json:"parts"`
		Unsourced  []unsourcedJSON `json:"unsourced"`
		Later      []laterJSON     `json:"later"`
		Waiting    []waitingJSON   `json:"waiting"`
		Gaps       []gapJSON       `json:"not_counted"`
		Broken     []string        `json:"broken"`
	}{c.At, c.LimitsFrom, c.StockFrom, c.Today.String(), c.Until.String(), []cutPartJSON{}, unsourcedsJSON(c.Unsourced), latersJSON(c.Later), waitingsJSON(c.Waiting), gapsJSON(c.Gaps), append([]string{}, c.Broken...)}
	for _, p := range c.plans() {
		out.Parts = append(out.Parts, c.part(p))
	}
	return encode(out)
}

func (c *Cuts) part(p *bom.CutPlan) cutPartJSON {
	j := cutPartJSON{Part: p.Part.ID, Pieces: []cutPieceJSON{}, New: []cutNewJSON{}, Left: []cutLeftJSON{}, Cost: p.Cost.String(), Bound: p.Bound.String(), Proved: p.Proved}
	for _, x := range p.Pieces {
		if c.shown(p, x.From) {
			j.Pieces = append(j.Pieces, cutPieceJSON{x.Job + "/" + x.Piece.Line, int64(x.Piece.Length), int64(x.Piece.Bare), p.Opened[x.From].ID})
		}
	}
	for i, o := range p.Opened {
		if !c.shown(p, i) {
			continue
		}
		if o.Offer != nil {
			j.New = append(j.New, cutNewJSON{o.ID, o.Offer.Vendor.V, o.Offer.Code.V, int64(o.Length)})
		}
		j.Left = append(j.Left, cutLeftJSON{o.ID, int64(o.Left), o.Usable, int64(o.Keep)})
	}
	return j
}

// CSV writes a row for each piece; lengths are in millimetres. left_mm is what the
// reel has left after all its cuts.
func (c *Cuts) CSV() ([]byte, error) {
	rows := [][]Cell{{"part", "job", "line", "length_mm", "installed_mm", "from", "reel_mm", "offer", "left_mm", "usable"}}
	mm := func(n int64) Cell { return Cell(json.Number(fmt.Sprint(n))) }
	for _, p := range c.plans() {
		for _, x := range p.Pieces {
			if !c.shown(p, x.From) {
				continue
			}
			o := p.Opened[x.From]
			offer := ""
			if o.Offer != nil {
				offer = o.Offer.Code.V
			}
			rows = append(rows, []Cell{CellOf(p.Part.ID), CellOf(x.Job), CellOf(x.Piece.Line), mm(int64(x.Piece.Length)), mm(int64(x.Piece.Bare)),
				CellOf(o.ID), mm(int64(o.Length)), CellOf(offer), mm(int64(o.Left)), Cell(fmt.Sprint(o.Usable))})
		}
	}
	for _, p := range c.Broken {
		rows = append(rows, []Cell{"", CellOf(p), "not counted", "", "", "", "", "", "", ""})
	}
	return csvOf(rows)
}
