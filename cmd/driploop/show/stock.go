package show

import (
	"fmt"
	"slices"
	"strings"
	"unicode/utf8"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules"
)

// Stock is the stock and what is kept of it for jobs, ready to be shown.
type Stock struct {
	*bom.Allocation
	Look func(string) *catalog.Part
	Jobs []string // of these jobs' parts only; nil: all
	rules.Origin
	Today  string
	Feet   bool
	Broken []string // plans whose claims are not known, since their files cannot be read
}

// cutStock reports a part that is kept by length. One that no catalog has is known
// by what its sheets say of it.
func (s *Stock) cutStock(part string) bool {
	if p := s.Look(part); p != nil {
		return p.CutStock()
	}
	return slices.ContainsFunc(s.Stock().Tags, func(t catalog.Tag) bool { return t.Part == part })
}

// wanted reports a part that is to be shown.
func (s *Stock) wanted(part string) bool {
	if s.Jobs == nil {
		return true
	}
	return slices.ContainsFunc(s.ClaimsOn(part), func(c *bom.Claim) bool { return slices.Contains(s.Jobs, c.Job()) })
}

func (s *Stock) rows() []bom.Standing {
	return slices.DeleteFunc(s.Standings(), func(r bom.Standing) bool { return !s.wanted(r.Part) })
}

func (s *Stock) reels() []bom.ReelStanding {
	return slices.DeleteFunc(s.Reels(), func(r bom.ReelStanding) bool { return !s.wanted(r.Part) })
}

func (s *Stock) claims() []*bom.Claim {
	var out []*bom.Claim
	for _, c := range s.Claims {
		if s.Jobs == nil || slices.Contains(s.Jobs, c.Job()) {
			out = append(out, c)
		}
	}
	return out
}

// Text writes what is short first, then the shelves, then the reels.
func (s *Stock) Text(page Page) ([]byte, error) {
	d := &Document{Title: fmt.Sprintf("Stock as of %s, %s", s.Today, s.At+borrowed(s.Origin))}
	if len(s.Broken) > 0 {
		d.Blocks = append(d.Blocks, Block{how: stop, Text: []string{"Not counted, for their files cannot be read whole: " + strings.Join(s.Broken, ", ") + "."}})
	}
	d.Blocks = append(d.Blocks, s.shortages())
	if g := s.shelves(page.Width); len(g.Rows) > 0 {
		d.Blocks = append(d.Blocks, Block{Head: "ON THE SHELVES", Table: g})
	} else {
		d.Blocks = append(d.Blocks, Block{Text: []string{"Nothing is on a shelf and nothing is on its way."}})
	}
	if g := s.reelTable(); len(g.Rows) > 0 {
		d.Blocks = append(d.Blocks, Block{Head: "REELS AND REMNANTS", Table: g})
	}
	return d.Text(page)
}

func (s *Stock) shortages() Block {
	b := Block{Head: "SHORT"}
	for _, c := range s.claims() {
		if !c.IsShort() {
			continue
		}
		b.Items = append(b.Items, Item{c.Part().ID, s.shortage(c)})
	}
	switch {
	case len(s.claims()) == 0:
		return Block{Text: []string{"No open job claims anything."}}
	case b.Items == nil:
		return Block{Text: []string{"Every open job has what it takes, on a shelf or on order in time."}}
	}
	return b
}

// shortage says what a job is short of, what comes too late, and who holds the part
// and until when.
func (s *Stock) shortage(c *bom.Claim) string {
	text := fmt.Sprintf("%s is short of %s", c.Job(), s.quantity(c.ShortBy()))
	if len(c.ShortLines) > 0 {
		var lines []string
		for _, l := range c.ShortLines {
			lines = append(lines, l.Line)
		}
		text = fmt.Sprintf("%s has no piece for %s, %s", c.Job(), strings.Join(lines, ", "), s.quantity(c.ShortBy()))
	}
	if !c.Needed.IsZero() {
		text += ", needed by " + c.Needed.String()
	}
	for _, h := range c.Late {
		text += fmt.Sprintf("; %s comes on %s%s", h.Supply.Name(), h.Supply.Day, expected(h.Supply))
	}
	var held []string
	for o := range s.HeldBy(c) {
		until := "no date"
		if !o.Demand.On.IsZero() {
			until = "until " + o.Demand.On.String()
		}
		held = append(held, fmt.Sprintf("%s (%s, %s)", o.Job(), o.Demand.Stage, until))
	}
	if held != nil {
		text += "; held by " + strings.Join(held, ", ")
	}
	return text
}

// shelves is the table of bins; where the page is narrow, one line a row.
func (s *Stock) shelves(width int) *Grid {
	g := &Grid{Columns: []string{"part", "where", "on hand", "inbound", "claimed", "free", "longest"}, Words: 2}
	for _, r := range s.rows() {
		cut := s.cutStock(r.Part)
		where := r.Where
		if r.Kind == "inbound" || r.Kind == "quarantine" {
			where += " (" + r.Kind + ")"
		}
		longest := ""
		if cut {
			longest = s.length(r.Longest)
		}
		qty := func(q catalog.Quantity) string {
			switch {
			case cut:
				return s.length(q.Length)
			case q.IsZero():
				return "0"
			}
			return q.String()
		}
		g.Rows = append(g.Rows, []string{clip(r.Part, 24), where, qty(r.OnHand), blank(r.Inbound, qty), blank(r.Claimed, qty), qty(r.Free), longest})
	}
	return g
}

// clip shortens a name that would push the figures off the page; the other forms
// have it whole.
func clip(s string, most int) string {
	if utf8.RuneCountInString(s) <= most {
		return s
	}
	return string([]rune(s)[:most-1]) + "…"
}

func blank(q catalog.Quantity, print func(catalog.Quantity) string) string {
	if q.IsZero() {
		return ""
	}
	return print(q)
}

func (s *Stock) reelTable() *Grid {
	g := &Grid{Columns: []string{"tag", "part", "where", "how", "left", "free"}, Words: 4}
	for _, r := range s.reels() {
		g.Rows = append(g.Rows, []string{r.ID, clip(r.Part, 24), r.Where, r.How, s.length(r.Left), s.length(r.Free)})
	}
	return g
}

func (s *Stock) quantity(q catalog.Quantity) string {
	if q.Length != 0 {
		return s.length(q.Length)
	}
	return q.String()
}

func (s *Stock) length(l unit.MM) string { return lengthIn(l, s.Feet) }

// CSV writes a row for each part and shelf, then one for each reel; lengths are in
// metres.
func (s *Stock) CSV() ([]byte, error) {
	rows := [][]Cell{{"part", "where", "tag", "unit", "on_hand", "inbound", "claimed", "free", "longest_m"}}
	for _, r := range s.rows() {
		u, longest := Cell("each"), Cell("")
		if s.cutStock(r.Part) {
			u, longest = "m", Cell(number(0, r.Longest))
		}
		rows = append(rows, []Cell{CellOf(r.Part), CellOf(r.Where), "", u, Cell(quantityNumber(r.OnHand)), Cell(quantityNumber(r.Inbound)),
			Cell(quantityNumber(r.Claimed)), Cell(quantityNumber(r.Free)), longest})
	}
	for _, r := range s.reels() {
		rows = append(rows, []Cell{CellOf(r.Part), CellOf(r.Where), CellOf(r.ID), "m", Cell(number(0, r.Left)), "", Cell(number(0, r.Left-r.Free)),
			Cell(number(0, r.Free)), ""})
	}
	return csvOf(rows)
}
