package show

import (
	"fmt"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules"
)

// Pick is the pick list of one job, ready to be shown.
type Pick struct {
	*bom.Pick
	Today string
	rules.Origin
	Feet bool
}

// Text writes the list for a crew that walks the shelves with it.
func (p *Pick) Text(page Page) ([]byte, error) { return p.document().Text(page) }

func (p *Pick) document() *Document {
	d := &Document{Title: "Pick list for " + p.Job + dash(p.Title)}
	d.Blocks = append(d.Blocks, Block{Text: p.when()})
	if len(p.Missing) > 0 {
		d.Blocks = append(d.Blocks, Block{Head: "NOT ALL THERE", Items: p.missing(), how: stop})
	}
	if items := p.tools(); items != nil {
		d.Blocks = append(d.Blocks, Block{Head: "TOOLS", Items: items})
	}
	for _, where := range p.Shelves() {
		d.Blocks = append(d.Blocks, p.shelf(where)...)
	}
	if items := p.loose(); items != nil {
		d.Blocks = append(d.Blocks, Block{Head: "ALSO TO BRING, NOT BOOKED", Items: items})
	}
	if items := p.coming(); items != nil {
		d.Blocks = append(d.Blocks, Block{Head: "ON ORDER FOR THIS JOB", Items: items})
	}
	if items := p.given(); items != nil {
		d.Blocks = append(d.Blocks, Block{Head: "GIVEN ALREADY", Items: items})
	}
	if len(p.Labels) > 0 {
		d.Blocks = append(d.Blocks, Block{Head: "LABELS, ONE FOR EACH END", Items: p.labels()})
	}
	return d
}

func dash(s string) string {
	if s == "" {
		return ""
	}
	return " · " + s
}

// when says whose list it is, and by when it is to be picked.
func (p *Pick) when() []string {
	crew := "No crew is named; what follows is taken from the shops."
	if p.Crew != "" {
		crew = "Crew " + p.Crew + "."
	}
	day := "The job has no date."
	if !p.On.IsZero() {
		day = fmt.Sprintf("Install on %s, everything ready by %s.", p.On, p.Needed)
	}
	out := []string{day + " " + crew + " Stage " + p.Stage + ". As of " + p.Today + ", " + p.At + borrowed(p.Origin) + "."}
	if p.Empty() {
		out = append(out, "Nothing is to be taken from a shelf.")
	}
	return out
}

func (p *Pick) missing() []Item {
	var out []Item
	for _, c := range p.Missing {
		text := p.quantity(c.ShortBy()) + " short"
		if len(c.ShortLines) > 0 {
			var lines []string
			for _, l := range c.ShortLines {
				lines = append(lines, fmt.Sprintf("%s (%s)", l.Line, p.length(l.Length)))
			}
			text = "no piece for " + strings.Join(lines, ", ")
		}
		for _, h := range c.Late {
			text += fmt.Sprintf("; %s brings %s on %s%s", h.Supply.Name(), p.hold(h), h.Supply.Day, expected(h.Supply))
		}
		out = append(out, Item{c.Part().ID, text})
	}
	return out
}

func expected(s *bom.Supply) string {
	if s.Assumed {
		return ", as it is expected"
	}
	return ""
}

func (p *Pick) hold(h bom.Hold) string {
	if h.Each > 0 {
		return strconv.Itoa(h.Each)
	}
	return h.Piece.Line
}

func (p *Pick) tools() []Item {
	var out []Item
	for _, t := range p.Tools {
		text := "for " + strings.Join(t.For, ", ")
		if p.Crew != "" && !t.Has {
			text += "; not on the list of crew " + p.Crew
		}
		out = append(out, Item{t.Name, text})
	}
	return out
}

// shelf is what is taken from one shelf: bins as a table, each reel with its cuts.
func (p *Pick) shelf(where string) []Block {
	b := Block{Head: "FROM " + strings.ToUpper(where)}
	g := &Grid{Columns: []string{"part", "what it is", "take", "taken"}, Words: 2}
	for _, x := range p.Bins {
		if x.Where == where {
			g.Rows = append(g.Rows, []string{x.Part.ID, p.describe(x.Part, x.CountFirst), strconv.Itoa(x.Qty), "____"})
		}
	}
	if g.Rows != nil {
		b.Table = g
	}
	out := []Block{b}
	for _, r := range p.Reels {
		if r.Where == where {
			out = append(out, p.reel(r))
		}
	}
	if b.Table == nil {
		out[1].Head = b.Head + ": " + out[1].Head
		out = out[1:]
	}
	return out
}

func (p *Pick) describe(part *catalog.Part, first bool) string {
	text := part.Name.Or(part.Kind.V)
	if first {
		text += "; count it first, it is not put away"
	}
	return text
}

func (p *Pick) reel(r bom.PickReel) Block {
	b := Block{Head: fmt.Sprintf("reel %s, %s, %s", r.Tag.ID, r.Part.ID, p.known(r))}
	if r.CountFirst {
		b.Text = append(b.Text, "Measure it first: it is not put away.")
	}
	g := &Grid{Columns: []string{"line", "cut off", "to lay", "cut"}, Words: 1}
	for _, c := range r.Cuts {
		g.Rows = append(g.Rows, []string{c.Line, p.length(c.Length), p.length(c.Bare), "____"})
	}
	b.Table = g
	b.Items = append(b.Items, Item{"", p.left(r)})
	return b
}

// known is how long a reel is and how that is known.
func (p *Pick) known(r bom.PickReel) string {
	out := p.length(r.Tag.Left) + " on it"
	if r.Tag.How != "" {
		out += " by " + r.Tag.How
	}
	return out + " on " + r.Tag.Read.String()
}

func (p *Pick) left(r bom.PickReel) string {
	switch {
	case r.Left <= 0:
		return "nothing is left on it"
	case r.Usable && r.Others > 0:
		return fmt.Sprintf("%s is left, of which %s is kept for other jobs; measure ____", p.length(r.Left), p.length(r.Others))
	case r.Usable:
		return fmt.Sprintf("%s is left and goes back; measure ____", p.length(r.Left))
	}
	return fmt.Sprintf("%s is left, too short to keep", p.length(r.Left))
}

func (p *Pick) loose() []Item {
	var out []Item
	for _, b := range p.Loose {
		out = append(out, Item{b.Part.ID, fmt.Sprintf("%d, %s", b.Qty, p.describe(b.Part, false))})
	}
	return out
}

func (p *Pick) coming() []Item {
	var out []Item
	for _, c := range p.Coming {
		out = append(out, Item{c.Part.ID, fmt.Sprintf("%s with %s on %s%s", p.hold(c.Hold), c.Supply.Name(), c.Supply.Day, expected(c.Supply))})
	}
	return out
}

func (p *Pick) given() []Item {
	var out []Item
	for _, is := range p.Given {
		if !is.Net.IsZero() {
			out = append(out, Item{is.Part, p.quantity(is.Net)})
		}
	}
	return out
}

// labels prints each line's label twice, as it is wanted: one for each end.
func (p *Pick) labels() []Item {
	var out []Item
	for _, l := range p.Labels {
		for i, end := range []string{l.From, l.To} {
			other := []string{l.To, l.From}[i]
			out = append(out, Item{p.Job + " " + l.Line, strings.TrimSpace(fmt.Sprintf("at %s, the other end at %s; %s%s", orNothing(end), orNothing(other), l.Part, p.lay(l)))})
		}
	}
	return out
}

func (p *Pick) lay(l bom.Label) string {
	if l.Length == 0 {
		return ""
	}
	return ", " + p.length(l.Length)
}

func orNothing(s string) string {
	if s == "" {
		return "nothing yet"
	}
	return s
}

func (p *Pick) quantity(q catalog.Quantity) string {
	if q.Length != 0 {
		return p.length(q.Length)
	}
	return fmt.Sprint(q.Each)
}

func (p *Pick) length(l unit.MM) string { return lengthIn(l, p.Feet) }

// lengthIn prints a length to a tenth of the unit that the firm works in.
func lengthIn(l unit.MM, feet bool) string {
	if feet {
		return unit.Fixed(l.Feet(), 1) + " ft"
	}
	return unit.Fixed(l.Metres(), 1) + " m"
}
