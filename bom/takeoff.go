package bom

import (
	"math"
	"sort"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Quantity is what a plan takes of one part. Cut stock has a length, cut
// allowances included, and is also listed by piece; all else is counted.
type Quantity struct {
	Part   *catalog.Part
	Each   int
	Length unit.MM // with the allowance of each cut
	Bare   unit.MM // as installed
	Pieces []Piece
	Uses   float64 // of a consumable, before it is rounded up to packages
	At     source.Place
}

// Piece is one piece of cut stock.
type Piece struct {
	Line   string  // the plan's cable, data line, wire or bond
	Length unit.MM // to be cut, allowance included
	Bare   unit.MM // as installed
	At     source.Place
}

// ExtraLine stands for the line of a piece that the plan asks for as an extra.
const ExtraLine = "extra"

// Takeoff is what a plan takes, by part.
type Takeoff struct {
	Rows []*Quantity
	Gaps []Gap // what could not be counted
}

// Gap is something that the plan implies and that could not be counted.
type Gap struct {
	On, Says string
	At       source.Place
}

// Row finds the row of a part, or nil.
func (t *Takeoff) Row(part string) *Quantity {
	for _, q := range t.Rows {
		if q.Part.ID == part {
			return q
		}
	}
	return nil
}

type counter struct {
	g     *Graph
	house *House
	rows  map[string]*Quantity
	gaps  []Gap
}

// Takeoff counts everything that the plan implies and the firm has to bring:
// devices, cables with their allowance for cutting, a connector for each
// field-cut end, adapters, fuses, conductors, consumables by joint, metre and
// entry, and extras. What exists, or is supplied by somebody else, is left out.
func (g *Graph) Takeoff(house *House) *Takeoff {
	c := &counter{g: g, house: house, rows: map[string]*Quantity{}}
	c.devices()
	c.cables()
	c.supply()
	c.extras()
	c.consumables()
	t := &Takeoff{Gaps: c.gaps}
	for _, q := range c.rows {
		q.pack()
		t.Rows = append(t.Rows, q)
	}
	sort.Slice(t.Rows, func(i, j int) bool { return t.Rows[i].Part.ID < t.Rows[j].Part.ID })
	return t
}

func (c *counter) row(p *catalog.Part, at source.Place) *Quantity {
	q := c.rows[p.ID]
	if q == nil {
		q = &Quantity{Part: p, At: at}
		c.rows[p.ID] = q
	}
	return q
}

func (c *counter) each(p *catalog.Part, n int, at source.Place) { c.row(p, at).Each += n }

func (c *counter) gap(on, says string, at source.Place) { c.gaps = append(c.gaps, Gap{on, says, at}) }

func (c *counter) devices() {
	for _, d := range c.g.Devices {
		if d.Row.Existing.V || d.Row.SuppliedBy.Set {
			continue
		}
		if d.Part == nil {
			c.gap(d.On(), "its part is not known", d.At)
			continue
		}
		c.each(d.Part, 1, d.At)
	}
}

func (c *counter) cables() {
	for _, x := range c.g.Cables {
		if x.Row.Existing.V || x.Row.SuppliedBy.Set {
			continue
		}
		c.adapters(x)
		switch {
		case x.Part == nil:
			c.gap(x.On(), "its part is not known", x.At)
		case x.Part.Jumper != nil:
			c.each(x.Part, 1, x.At)
		default:
			c.piece(x.Part, x.ID, x.On(), x.Length, x.At)
			c.connectors(x)
		}
	}
}

// adapters counts what a cable passes through at its to end.
func (c *counter) adapters(x *Cable) {
	for i, p := range x.Through {
		id := x.Row.Through.V[i]
		if p == nil {
			c.gap(x.On(), "the part "+source.Quote(id.V)+" that it passes through is not known", id.At)
			continue
		}
		c.each(p, 1, id.At)
	}
}

// connectors counts one connector part for each field-cut end.
func (c *counter) connectors(x *Cable) {
	for _, e := range x.Ends {
		switch {
		case e.Fit != nil:
			c.each(e.Fit, 1, x.At)
		case len(e.Could) > 0:
			c.gap(x.On(), "end "+string('0'+rune(e.End))+" can be made with several connector parts; none is counted", e.writtenAt())
		default:
			c.gap(x.On(), "no connector part is known for end "+string('0'+rune(e.End)), e.writtenAt())
		}
	}
}

// piece counts one piece of cut stock with the allowance for its cut.
func (c *counter) piece(p *catalog.Part, line, on string, length source.Val[unit.MM], at source.Place) {
	if p == nil {
		c.gap(on, "its part is not known", at)
		return
	}
	if !length.Set {
		c.gap(on, "its length is not given", at)
		return
	}
	q := c.row(p, at)
	cut := length.V + c.house.CutAllowance.Or(DefaultCutAllowance)
	q.Pieces = append(q.Pieces, Piece{Line: line, Length: cut, Bare: length.V, At: at})
	q.Length += cut
	q.Bare += length.V
}

func (c *counter) supply() {
	for _, d := range c.g.Data {
		if !d.Row.Existing.V && !d.Row.SuppliedBy.Set {
			c.piece(d.Part, d.Row.ID, d.On(), d.Row.Length, d.Row.At)
		}
	}
	for _, w := range c.g.Wires {
		if !w.Row.Existing.V && !w.Row.SuppliedBy.Set {
			c.piece(w.Part, w.Row.ID, w.On(), w.Row.Length, w.Row.At)
			c.fuse(w)
		}
	}
	for _, b := range c.g.Bonds {
		if b.Row.Existing.V || b.Row.SuppliedBy.Set || b.Row.Direct.V {
			continue
		}
		c.piece(b.Part, b.Row.ID, b.On(), b.Row.Length, b.Row.At)
	}
}

func (c *counter) fuse(w *WireLine) {
	switch id := w.Row.Fuse; {
	case w.Fuse != nil:
		c.each(w.Fuse, 1, w.Row.At)
	case id.Set:
		c.gap(w.On(), "its fuse "+source.Quote(id.V)+" is not known", id.At)
	}
}

func (c *counter) extras() {
	for i := range c.g.Plan.Extras {
		x := &c.g.Plan.Extras[i]
		p := c.g.Catalog.Look(x.Part.V)
		switch {
		case !x.Part.Set:
			c.gap("job", "an extra names no part that can be counted", x.At)
		case p == nil:
			c.gap("job", "the extra part "+source.Quote(x.Part.V)+" is not known", x.At)
		case !x.Qty.Set:
			c.gap("job", "the extra "+p.ID+" has no qty that can be counted", x.At)
		case p.CutStock() != (x.Qty.V.Length > 0):
			c.gap("job", "the extra "+p.ID+" is "+measured(p)+", its qty is not", x.At)
		case p.CutStock():
			q := c.row(p, x.At)
			q.Pieces = append(q.Pieces, Piece{Line: ExtraLine, Length: x.Qty.V.Length, Bare: x.Qty.V.Length, At: x.At})
			q.Length += x.Qty.V.Length
			q.Bare += x.Qty.V.Length
		default:
			c.row(p, x.At).Each += x.Qty.V.Each
		}
	}
}

func measured(p *catalog.Part) string {
	if p.CutStock() {
		return "measured by length"
	}
	return "counted"
}

// consumables adds the house's sealing at every joint in the weather. A plan that
// lists the part as an extra has counted it by hand, and that stands.
func (c *counter) consumables() {
	id := c.house.Sealing
	if !id.Set || c.rows[id.V] != nil {
		return
	}
	p := c.g.Catalog.Look(id.V)
	if p == nil || p.Consumable == nil {
		return
	}
	uses := 0.0
	switch p.Consumable.Per.V {
	case "joint":
		uses = float64(c.g.OutdoorJoints())
	case "entry":
		uses = float64(c.g.Entries())
	case "metre":
		for _, x := range c.g.Cables {
			if !x.Row.Existing.V {
				uses += x.Length.V.Metres()
			}
		}
	}
	if uses > 0 {
		c.row(p, p.At).Uses += uses
	}
}

// pack rounds the uses of a consumable up to whole packages, over the whole plan.
func (q *Quantity) pack() {
	if q.Uses == 0 {
		return
	}
	q.Each += Packages(q.Part, q.Uses)
}

// Packages is how many packages of a consumable serve that many uses.
func Packages(p *catalog.Part, uses float64) int {
	per := 1.0
	if p.Consumable != nil && p.Consumable.Holds.Set {
		per = max(p.Consumable.Holds.V.Length.Metres(), p.Consumable.Holds.V.Uses)
	}
	if per <= 0 {
		per = 1 // a package that holds nothing would never be enough
	}
	return int(math.Ceil(uses/per - 1e-9))
}

// OutdoorJoints counts the mated pairs in the weather that this job makes.
func (g *Graph) OutdoorJoints() int {
	n := 0
	for _, m := range g.Mates {
		if p := m.Place(); p.Outdoors() && !m.existing() {
			n += 1 + len(m.Adapters)
		}
	}
	return n
}

// Place is where the two nodes meet: the place of a device, else the end of the
// cable's way, or nil. A port with a captive lead meets at the lead's free end, so
// that what it is mated with goes before its own device.
func (m *Mate) Place() *Place {
	var far *Place
	for _, n := range []*Node{m.A, m.B} {
		switch {
		case n.Device == nil || n.Device.Place == nil:
		case n.Port.Lead == nil:
			return n.Device.Place
		case far == nil:
			far = n.Device.Place
		}
	}
	for _, n := range []*Node{m.A, m.B} {
		if n.Cable != nil && len(n.Cable.Way) > 0 {
			if n.End == 1 {
				return n.Cable.Way[0].Place
			}
			return n.Cable.Way[len(n.Cable.Way)-1].Place
		}
	}
	return far
}

// existing reports a mate of two things that are already there.
func (m *Mate) existing() bool { return m.A.existing() && m.B.existing() }

func (n *Node) existing() bool {
	if n.Device != nil {
		return n.Device.Row.Existing.V
	}
	return n.Cable.Row.Existing.V
}

// Entries counts the lines that this job brings in from outdoors, data lines
// included.
func (g *Graph) Entries() int {
	seen := map[string]bool{}
	for _, l := range g.Lines().All {
		for _, c := range l.Crossings() {
			if !c.There {
				seen[c.On] = true
			}
		}
	}
	for _, d := range g.Data {
		if d.Crosses() && !d.Row.Existing.V {
			seen[d.On()] = true
		}
	}
	return len(seen)
}

// Crosses reports a data line that goes between outdoors and indoors.
func (d *DataLine) Crosses() bool {
	out, in := false, false
	note := func(p *Place) {
		out = out || p.Outdoors()
		in = in || p.Indoors()
	}
	for _, s := range d.Way {
		note(s.Place)
	}
	for _, n := range []*Node{d.From, d.To} {
		if n != nil && n.Device != nil {
			note(n.Device.Place)
		}
	}
	return out && in
}
