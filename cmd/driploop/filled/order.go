package filled

import (
	"errors"
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
)

// Orders takes a purchase workbook back: an order for each order sheet that was given a
// number. Sheets on which nothing was filled in are passed over. What a pack holds is
// the offer's, for the sheet says it in words only; jobs are the plans' that there are.
func Orders(b bom.FilledBook, g *Ground, offers *catalog.Offers, jobs []string) ([]*show.Ordered, error) {
	o := &orderer{Ground: g, offers: offers, jobs: jobs, feet: feet(b, g.Feet)}
	ours := false
	for _, s := range b {
		vendor, ok := strings.CutPrefix(s.Key, show.OrderKey(""))
		if !ok {
			continue
		}
		ours = true
		if err := o.sheet(s, vendor); err != nil {
			return nil, err
		}
	}
	if !ours {
		return nil, errors.New("the file has no order sheet")
	}
	if err := o.faults.all(); err != nil {
		return nil, err
	}
	if len(o.out) == 0 {
		return nil, errors.New("no order sheet was given an order number")
	}
	return o.out, nil
}

// orderer reads order sheets.
type orderer struct {
	*Ground
	faults Faults
	offers *catalog.Offers
	jobs   []string
	feet   bool
	out    []*show.Ordered
}

// The columns that the clerk fills in.
var clerks = []string{show.ColumnOrdered, show.ColumnConfirmed, show.ColumnPromised, show.ColumnNote}

func (o *orderer) sheet(s *bom.FilledSheet, vendor string) error {
	if err := s.Has(append([]string{show.ColumnPacks, show.ColumnPrice, show.ColumnNeeded, show.ColumnFor}, clerks...)...); err != nil {
		return err
	}
	po, sent := s.Fact("po"), s.Fact("sent")
	if po.Blank() {
		if touched(s) || !sent.Blank() {
			o.faults.add("%s: something was filled in, and the order has no number", s.Name)
		}
		return nil
	}
	out := &show.Ordered{Vendor: vendor, To: words(&o.faults, s.Fact("to")), PO: o.number(po)}
	var err error
	if out.Sent, err = sent.Day(); err != nil {
		o.faults.err(err)
	} else if out.Sent.After(o.Today) {
		o.faults.add("%s: %s is still to come", sent.Where, out.Sent)
	}
	if e := s.Fact("vendor"); e.Text != vendor {
		o.faults.add("%s: the sheet was made for the vendor %s, and says %s", e.Where, vendor, source.Quote(e.Text))
	}
	if o.offers.Vendor(vendor) == nil {
		o.faults.add("%s: the workspace has no vendor %s any more", s.Name, vendor)
		return nil
	}
	if out.To != "" {
		o.shelf(&o.faults, s.Fact("to").Where, out.To)
	}
	before := len(o.faults)
	for i := range s.Rows {
		o.row(out, &s.Rows[i], fmt.Sprintf("%s, row %d", s.Name, s.Rows[i].Line))
	}
	if len(out.Lines) == 0 && len(o.faults) == before {
		o.faults.add("%s: nothing is ordered under %s", s.Name, out.PO)
	}
	o.out = append(o.out, out)
	return nil
}

// touched reports that the clerk wrote something beside a line.
func touched(s *bom.FilledSheet) bool {
	for i := range s.Rows {
		if filledBy(&s.Rows[i]) {
			return true
		}
	}
	return false
}

func filledBy(r *bom.FilledRow) bool {
	return slices.ContainsFunc(clerks, func(t string) bool { return !r.Entry(t).Blank() })
}

// number is the number of the order: a name that no other order has, whatever its case,
// for it becomes the name of a file.
func (o *orderer) number(e bom.Entry) string {
	po := words(&o.faults, e)
	if po != "" && !source.ValidID(po) {
		o.faults.add("%s: an order number is of letters, digits, - and _, not %s", e.Where, source.Quote(po))
	}
	taken := func(id string) bool { return strings.EqualFold(id, po) }
	for i := range o.Stock.Open {
		if id := o.Stock.Open[i].Order.ID; taken(id) {
			o.faults.add("%s: there is an order %s already", e.Where, id)
			break
		}
	}
	if slices.ContainsFunc(o.out, func(x *show.Ordered) bool { return taken(x.PO) }) {
		o.faults.add("%s: two sheets have the order number %s", e.Where, po)
	}
	return po
}

// row reads one line of an order.
func (o *orderer) row(out *show.Ordered, r *bom.FilledRow, at string) {
	if !strings.Contains(r.Key, " | ") {
		if filledBy(r) {
			o.faults.add("%s: the row is no line of the order that was planned; write it into the order's file by hand", at)
		}
		return
	}
	f, pack := o.offer(out.Vendor, r.Key)
	if f == nil {
		if e := r.Entry(show.ColumnOrdered); e.Blank() || e.Text != "0" {
			o.faults.add("%s: %s has no offer %s any more; write 0 as ordered, or the line into the order's file by hand", at, out.Vendor, source.Quote(r.Key))
		}
		return
	}
	l := show.OrderedLine{Offer: f, Pack: pack, Note: words(&o.faults, r.Entry(show.ColumnNote)), Parts: strings.SplitN(r.Key, " | ", 2)[0], Jobs: o.jobsOf(r.Entry(show.ColumnFor))}
	var err error
	if l.Listed, err = r.Entry(show.ColumnPrice).Money(); err != nil {
		o.faults.add("%s: what was planned to be paid cannot be read any more", at)
		return
	}
	if l.Price, err = r.Entry(show.ColumnConfirmed).Money(); errors.Is(err, bom.ErrBlank) {
		l.Price = l.Listed
	} else if err != nil {
		o.faults.err(err)
		return
	}
	l.Needed, _ = r.Entry(show.ColumnNeeded).Day()
	if l.Due, err = r.Entry(show.ColumnPromised).Day(); err != nil {
		o.faults.err(err)
	} else if l.Due.Before(out.Sent) {
		o.faults.add("%s: %s is before the order was sent, on %s", r.Entry(show.ColumnPromised).Where, l.Due, out.Sent)
	}
	if !o.amount(&l, r, at) {
		return
	}
	if l.Pack.Length > 0 && int64(l.Price) > math.MaxInt64/2/int64(l.Pack.Length) {
		o.faults.add("%s: %s for %s is no price", at, l.Price, l.Pack)
		return
	}
	if l.Packs == 0 {
		out.Dropped = append(out.Dropped, l)
		return
	}
	out.Lines = append(out.Lines, l)
}

// amount reads how much is ordered; blank is as planned. Of what is cut to length it is
// the length, and its price is for a metre.
func (o *orderer) amount(l *show.OrderedLine, r *bom.FilledRow, at string) bool {
	ordered := r.Entry(show.ColumnOrdered)
	if l.Offer.ToLength() {
		l.Planned, l.Packs = 1, 1
		length, err := ordered.Length(o.feet)
		switch {
		case errors.Is(err, bom.ErrBlank):
			length = l.Pack.Length
		case err != nil:
			o.faults.err(err)
			return false
		case length == 0:
			l.Packs = 0
			return true
		case length < l.Offer.CutFrom.V || l.Offer.CutTo.Set && length > l.Offer.CutTo.V:
			o.faults.add("%s: %s is cut to length from %s to %s, not to %s", ordered.Where, l.Parts, l.Offer.CutFrom.V, l.Offer.CutTo.V, length)
			return false
		}
		l.PlannedLength, l.Pack.Length = l.Pack.Length, length
		return true
	}
	planned, err := r.Entry(show.ColumnPacks).Count()
	if err != nil || planned == 0 {
		o.faults.add("%s: how many packs were planned cannot be read any more", at)
		return false
	}
	l.Planned = planned
	if l.Packs, err = ordered.Count(); errors.Is(err, bom.ErrBlank) {
		l.Packs = planned
	} else if err != nil {
		o.faults.err(err)
		return false
	}
	return true
}

// offer finds the offer of a line by its key: parts, the vendor's number, what a pack
// holds, and of lines that are alike their number.
func (o *orderer) offer(vendor, key string) (*catalog.Offer, catalog.Pack) {
	for i := range o.offers.Offers {
		f := &o.offers.Offers[i]
		parts, pack, found := strings.Cut(key, " | "+f.Code.V+" | ")
		if f.Vendor.V != vendor || !found || !brings(f, strings.Split(parts, " + ")) {
			continue
		}
		pack, _, _ = strings.Cut(pack, " | ")
		if !f.ToLength() {
			if f.Holds().String() == pack {
				return f, f.Holds()
			}
			continue
		}
		if l, err := unit.ParseLength(pack); err == nil {
			return f, catalog.Pack{Length: l}
		}
	}
	return nil, catalog.Pack{}
}

// brings reports an offer that is for these parts, of a box among others.
func brings(f *catalog.Offer, parts []string) bool {
	for _, p := range parts {
		if f.Part.V != p && !slices.ContainsFunc(f.Brings, func(b source.Pick[int]) bool { return b.Name == p }) {
			return false
		}
	}
	return true
}

// jobsOf are the jobs that a line is for: words like "quay-lane 4 m, reorder level 6".
func (o *orderer) jobsOf(e bom.Entry) []string {
	var out []string
	for _, s := range strings.Split(e.Text, ", ") {
		if job, _, _ := strings.Cut(s, " "); slices.Contains(o.jobs, job) && !slices.Contains(out, job) {
			out = append(out, job)
		}
	}
	return out
}

// Moved lists what a workbook was made from and is now otherwise: now is the sheet that
// a workbook made today would have.
func Moved(b bom.FilledBook, now bom.Sheet) ([]string, error) {
	s, err := b.Sheet(now.Key)
	if err != nil {
		return nil, err
	}
	then := map[string]string{}
	for i := range s.Rows {
		then[s.Rows[i].Key] = s.Rows[i].Entry("is").Text
	}
	var out []string
	for _, r := range now.Rows {
		what, is := r.Cells[0].Words, r.Cells[1].Words
		if matters := r.Key == "workspace" || r.Key == "lengths" || r.Key == "currency" || strings.HasPrefix(r.Key, "digest "); matters && then[r.Key] != is {
			out = append(out, fmt.Sprintf("%s: %s in the workbook, now %s", what, orNothing(then[r.Key]), orNothing(is)))
		}
	}
	if i := now.RowOf("revision"); out != nil && i >= 0 {
		out = append(out, fmt.Sprintf("the revision: %s in the workbook, now %s", orNothing(then["revision"]), now.Rows[i].Cells[1].Words))
	}
	return out, nil
}

func orNothing(s string) string {
	if s == "" {
		return "nothing"
	}
	if len(s) > 80 {
		return strconv.Quote(s[:80])
	}
	return s
}
