package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// readyDays is the basis of the day by which goods are needed.
var readyDays = house("ready_days")

var stockShort = &Rule{
	Name:   "stock/short",
	Title:  "What a job takes is on a shelf or on order",
	Why:    "the crew stands on the roof without it, or takes it from the next job",
	Basis:  []Basis{practice("the store's books, shared out over all open jobs: issues, reserves, order lines bought for a job, then construction before review, by date"), readyDays},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, d := range s.Demands {
			s.notCounted(d, r)
			s.noBooks(d, r)
		}
		for _, l := range s.lacks() {
			if l.late() {
				continue
			}
			f := r.Fails(l.claim.Need.At, "part."+l.claim.Part().ID, "%s%s%s", l.what(), s.by(l.claim), s.heldBy(l.claim)).
				Then("%s", s.remedy(l)).With(stockFigure("short", l.qty, l.cut())).With(stockFigure("claimed", l.claim.Quantity(), l.cut()))
			f.Part = l.claim.Part().ID
		}
	},
}

var stockLate = &Rule{
	Name:   "stock/late",
	Title:  "What a job takes comes in time",
	Why:    "the goods are paid for and arrive after the crew has gone up",
	Basis:  []Basis{practice("the vendor's promise, kept as due on the order line, or lead_days of the offer in working days of the calendar"), readyDays},
	Weight: Punch,
	CheckShelf: func(s *Shelf, r *Report) {
		for _, l := range s.lacks() {
			if !l.late() {
				continue
			}
			late := s.Workspace.Premises.Calendar.Workdays(l.claim.Needed, l.comes)
			f := r.Fails(l.claim.Need.At, "part."+l.claim.Part().ID, "%s: %s on %s, %s after it is needed on %s%s", l.what(), l.bringer(), l.comes, workdays(late), l.claim.Needed, s.heldBy(l.claim)).
				Then("%s", s.hasten(l)).Over("late_workdays", float64(late), "limit_workdays", 0).With(stockFigure("short", l.qty, l.cut()))
			f.Part = l.claim.Part().ID
			if l.order != nil {
				f.Beside(l.order.Line.At, "the order line")
			}
		}
		for _, c := range s.Allocation.Claims {
			s.undated(c, r)
		}
	},
}

// lack is what a claim is short of, and what brings it too late if anything does.
type lack struct {
	claim *bom.Claim
	qty   catalog.Quantity
	lines []string
	comes unit.Date      // too late; zero where nothing does
	order *catalog.Open  // the order line that brings it
	offer *catalog.Offer // or the offer that would, the soonest there is; also of what would come in time
}

func (l *lack) late() bool { return !l.comes.IsZero() }
func (l *lack) cut() bool  { return l.claim.Part().CutStock() }

// what says what is short: "the shelf lacks 3 of 10 NC-10-NM".
func (l *lack) what() string {
	id := l.claim.Part().ID
	if l.cut() {
		return fmt.Sprintf("the shelf has no piece of %s for %s, %s with its allowance", id, list(l.lines), l.qty)
	}
	return fmt.Sprintf("the shelf lacks %d of %s", l.qty.Each, amountOf(l.claim.Quantity(), id))
}

// bringer is what brings it too late.
func (l *lack) bringer() string {
	if l.order != nil {
		return l.order.Order.ID + " brings it"
	}
	return "the soonest offer, of " + l.offer.Vendor.V + ", comes"
}

// lacks lists what the claims are short of: first what sent orders bring too late,
// then the rest, for which an offer may be in time, too late or missing.
func (s *Shelf) lacks() []*lack {
	if s.short != nil {
		return s.short
	}
	s.short = []*lack{}
	if s.Stock.IsEmpty() {
		return s.short
	}
	for _, c := range s.Allocation.Claims {
		if c.IsShort() {
			s.short = append(s.short, s.lacksOf(c)...)
		}
	}
	return s.short
}

func (s *Shelf) lacksOf(c *bom.Claim) []*lack {
	rest := &lack{claim: c, qty: c.ShortBy()}
	for _, p := range c.ShortLines {
		rest.lines = append(rest.lines, p.Line)
	}
	var out []*lack
	for _, h := range c.Late {
		l := out
		if len(l) == 0 || l[len(l)-1].order != h.Supply.Open {
			out = append(out, &lack{claim: c, comes: h.Supply.Day, order: h.Supply.Open})
		}
		last := out[len(out)-1]
		q := catalog.Quantity{Each: int64(h.Each), Length: h.Piece.Length}
		last.qty, rest.qty = last.qty.Plus(q), rest.qty.Minus(q)
		if h.Piece.Line != "" {
			last.lines = append(last.lines, h.Piece.Line)
			rest.lines = withoutOne(rest.lines, h.Piece.Line)
		}
	}
	if rest.qty.IsZero() {
		return out
	}
	var comes unit.Date
	rest.offer, comes = s.soonest(c.Part().ID)
	if rest.offer != nil && !comes.IsZero() && !c.Needed.IsZero() && comes.After(c.Needed) {
		rest.comes = comes
	}
	return append(out, rest)
}

// withoutOne leaves one line out of a list.
func withoutOne(lines []string, line string) []string {
	for i, l := range lines {
		if l == line {
			return append(append([]string{}, lines[:i]...), lines[i+1:]...)
		}
	}
	return lines
}

// soonest is the offer that brings a part first if it is ordered today, and when.
// An offer without lead_days comes nobody knows when and is taken only where there
// is no other; then there is no day.
func (s *Shelf) soonest(part string) (*catalog.Offer, unit.Date) {
	if s.offers == nil {
		s.offers = map[string]*catalog.Offer{}
		for i := range s.Offers.Offers {
			o := &s.Offers.Offers[i]
			if !o.ValidOn(s.Today) || s.Offers.Vendor(o.Vendor.V) == nil {
				continue
			}
			for _, id := range o.Parts() {
				if sooner(o, s.offers[id]) {
					s.offers[id] = o
				}
			}
		}
	}
	o := s.offers[part]
	if o == nil || !o.LeadDays.Set {
		return o, unit.Date{}
	}
	return o, s.Workspace.Premises.Calendar.AddWorkdays(s.Today, o.LeadDays.V)
}

func sooner(o, than *catalog.Offer) bool {
	return than == nil || o.LeadDays.Set && (!than.LeadDays.Set || o.LeadDays.V < than.LeadDays.V)
}

// by says by when a claim is needed.
func (s *Shelf) by(c *bom.Claim) string {
	if c.Needed.IsZero() {
		return ""
	}
	return ", needed by " + c.Needed.String()
}

// heldBy says which jobs hold what would suit the claim, and until when; the first
// three by name.
func (s *Shelf) heldBy(c *bom.Claim) string {
	var held []string
	for o := range s.Allocation.HeldBy(c) {
		if len(held) == 3 {
			held = append(held, "others")
			break
		}
		until := "without a date"
		if !o.Demand.On.IsZero() {
			until = "until " + o.Demand.On.String()
		}
		held = append(held, fmt.Sprintf("%s (%s, %s)", o.Job(), o.Demand.Stage, until))
	}
	if held == nil {
		return ""
	}
	return "; what suits is held by " + list(held)
}

// remedy says what to do about what no order brings.
func (s *Shelf) remedy(l *lack) string {
	var out []string
	switch o := l.offer; {
	case o == nil:
		out = append(out, "no vendor offers it: ask for an offer, or name another part")
	case l.claim.Needed.IsZero() || !o.LeadDays.Set:
		out = append(out, "order it from "+o.Vendor.V)
	default:
		by := s.Workspace.Premises.Calendar.AddWorkdays(l.claim.Needed, -o.LeadDays.V)
		out = append(out, fmt.Sprintf("order it from %s by %s", o.Vendor.V, by))
	}
	return strings.Join(append(out, s.substitutes(l)...), "; ")
}

// hasten says what to do about what comes too late.
func (s *Shelf) hasten(l *lack) string {
	out := []string{"ask the vendor for an earlier day, or move the install"}
	if l.order != nil {
		if o, comes := s.soonest(l.claim.Part().ID); o != nil && !comes.IsZero() && comes.Before(l.comes) {
			out = []string{fmt.Sprintf("an offer of %s comes on %s if it is ordered today; else ask for an earlier day, or move the install", o.Vendor.V, comes)}
		}
	}
	return strings.Join(append(out, s.substitutes(l)...), "; ")
}

// substitutes lists what the catalog names instead, where it is on hand.
func (s *Shelf) substitutes(l *lack) []string {
	var out []string
	for _, id := range l.claim.Part().Instead.V {
		if p := s.Catalog.Look(id.V); p != nil {
			if q, _ := s.Stock.OnHand(p.ID); !q.IsZero() {
				out = append(out, "the catalog names "+s.OnHand(p)+" instead")
			}
		}
	}
	return out
}

// notCounted says what of a plan cannot be held against the shelf.
func (s *Shelf) notCounted(d *bom.Demand, r *Report) {
	if !d.Claims() || len(d.Gaps) == 0 {
		return
	}
	var what, on []string
	for _, g := range d.Gaps {
		if n := len(on); n > 0 && on[n-1] == g.On {
			what[n-1] += ", " + g.Says
			continue
		}
		on, what = append(on, g.On), append(what, strings.Replace(g.On, ".", " ", 1)+" ("+g.Says)
	}
	for i := range what {
		what[i] += ")"
	}
	f := r.Unknown(d.At, "job", "whether the shelf has all that the job takes is not assessed: %s cannot be counted", list(what)).Then("add what is missing")
	for _, g := range d.Gaps {
		f.Beside(g.At, "%s", g.Says)
	}
}

// noBooks says where nobody keeps books of the stock.
func (s *Shelf) noBooks(d *bom.Demand, r *Report) {
	if d.Claims() && len(d.Needs) > 0 && s.Stock.IsEmpty() {
		r.Unknown(d.At, "job", "whether the shelf has what the job takes is not assessed: the workspace has no stock sheet and no order").
			Then("count the shelf into a sheet, or leave the shelf out with --shelf=false")
	}
}

// undated says where a claim rests on a delivery and nobody knows whether it is in
// time.
func (s *Shelf) undated(c *bom.Claim, r *Report) {
	for _, h := range c.Held {
		switch id := c.Part().ID; {
		case h.Supply.Here():
		case c.Needed.IsZero():
			f := r.Unknown(c.Need.At, "part."+id, "%s comes with %s on %s; whether that is in time is not assessed: the job lacks install_on", id, h.Supply.Name(), h.Supply.Day).
				Then("give the job its date").Beside(h.Supply.Open.Line.At, "the order line")
			f.Part = id
			return
		case h.Supply.Assumed:
			f := r.Unknown(c.Need.At, "part."+id, "%s comes with %s, of which nobody knows the day; it is taken for %s, and whether that is in time is not assessed", id, h.Supply.Name(), h.Supply.Day).
				Then("ask the vendor, and write the day into due").Beside(h.Supply.Open.Line.At, "the order line")
			f.Part = id
			return
		}
	}
}

func workdays(n int) string { return count(n, "working day", "working days") }
