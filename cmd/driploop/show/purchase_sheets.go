package show

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// OrderBook is a purchase as the clerk works with it: what to order in all, an order
// sheet for each vendor, and on what it all rests.
type OrderBook struct {
	*Buying
	Allocation *bom.Allocation
	Premises   *catalog.Premises
	Offers     *catalog.Offers
}

// Sheets lays the purchase out for printing and for being filled in.
func (o *OrderBook) Sheets() []bom.Sheet {
	out := []bom.Sheet{o.summary()}
	for i := range o.Freight {
		out = append(out, o.order(&o.Freight[i]))
	}
	for _, s := range []bom.Sheet{o.onOrder(), o.demand(), o.picks(), o.cutSheet(), o.levels()} {
		if len(s.Rows) > 0 {
			out = append(out, s)
		}
	}
	return out
}

// OrderKey is the key of a vendor's order sheet.
func OrderKey(vendor string) string { return "order " + vendor }

// The titles of the columns of an order sheet that others than this file name.
const (
	ColumnPacks     = "packs"
	ColumnPrice     = "price"
	ColumnTotal     = "total"
	ColumnOrdered   = "ordered packs"
	ColumnConfirmed = "confirmed price"
	ColumnPromised  = "promised day"
	ColumnNote      = "note"
	ColumnNeeded    = "needed on"
	ColumnFor       = "for"
)

// order is the order sheet of one vendor.
func (o *OrderBook) order(f *bom.Freight) bom.Sheet {
	v := f.Vendor
	name := v.Name.Or(v.ID)
	s := bom.Sheet{Key: OrderKey(v.ID), Name: "Order " + name, Title: "Order to " + name, Wide: true,
		Notes: []string{"Prices " + o.inCurrency() + "net of tax. The tinted columns are yours: what was ordered, at what price, promised for when."},
		Facts: o.orderFacts(v),
		Columns: []bom.Column{bom.CountColumn("line"), bom.TextColumn("their code"), bom.TextColumn("our part"), bom.TextColumn("name"), bom.TextColumn("pack"), bom.CountColumn(ColumnPacks), bom.MoneyColumn(ColumnPrice), bom.MoneyColumn(ColumnTotal),
			bom.DayColumn(ColumnNeeded), bom.TextColumn(ColumnFor),
			bom.CountColumn(ColumnOrdered).Asked(bom.Ask{Hint: "blank: as planned; 0: not ordered"}), bom.MoneyColumn(ColumnConfirmed).Asked(bom.Ask{}),
			bom.DayColumn(ColumnPromised).Asked(bom.Ask{}), bom.TextColumn(ColumnNote).Asked(bom.Ask{})}}
	for i, l := range o.LinesFor(v) {
		r := l.BuyRow
		packs := bom.CountCell(int64(r.Packs))
		if r.Offer.ToLength() {
			packs = bom.LengthCell(r.Pack.Length)
			s.Notes = appendOnce(s.Notes, "Where a part is cut to length, the length in metres stands in place of packs, and the price is for one metre.")
		}
		s.Row(l.Key, bom.CountCell(int64(i+1)), bom.WordsCell(r.Offer.Code.V), bom.WordsCell(partsOf(r)), bom.WordsCell(partNames(r)), bom.WordsCell(packWords(r)),
			packs, bom.MoneyCell(r.Price), bom.MoneyCell(r.Cost).By(bom.Live{How: bom.LiveProduct, Of: []string{ColumnPacks, ColumnPrice}}),
			bom.DayCell(r.Needed), bom.WordsCell(o.purpose(r)))
	}
	s.Sum("goods", "goods", ColumnTotal)
	s.Fixed("", bom.WordsCell("freight"), bom.Cell{}, bom.Cell{}, bom.Cell{}, bom.Cell{}, bom.Cell{}, bom.Cell{}, bom.MoneyCell(f.Amount))
	s.SumAll("total", "with freight", ColumnTotal)
	return s
}

func (o *OrderBook) inCurrency() string {
	if o.Currency == "" {
		return ""
	}
	return "in " + o.Currency + ", "
}

func appendOnce(list []string, s string) []string {
	if slices.Contains(list, s) {
		return list
	}
	return append(list, s)
}

// orderFacts are the head of an order sheet.
func (o *OrderBook) orderFacts(v *catalog.Vendor) []bom.Fact {
	facts := []bom.Fact{{Key: "po", Label: "our order number", Kind: bom.KindWords, Ask: &bom.Ask{Hint: "like PO-32; no order may have it yet"}},
		{Key: "vendor", Label: "vendor", Cell: bom.WordsCell(v.ID)}}
	add := func(key, label, s string) {
		if s != "" {
			facts = append(facts, bom.Fact{Key: key, Label: label, Cell: bom.WordsCell(s)})
		}
	}
	add("account", "account", v.Account.V)
	add("contact", "contact", v.Contact.V)
	facts = append(facts, bom.Fact{Key: "day", Label: "made on", Cell: bom.DayCell(o.Today)},
		bom.Fact{Key: "sent", Label: "sent on", Kind: bom.KindDay, Ask: &bom.Ask{}})
	if to := o.deliverTo(); to != nil {
		facts = append(facts, bom.Fact{Key: "to", Label: "deliver to shelf", Cell: bom.WordsCell(to.ID), Ask: &bom.Ask{Choice: shelfChoice(o.Premises)}})
		var lines []string
		for _, l := range to.Address.V {
			lines = append(lines, l.V)
		}
		add("", "at", strings.Join(lines, ", "))
	}
	return facts
}

// deliverTo is the shelf that goods go to unless somebody says otherwise: the first
// shop with an address, else the first shop.
func (o *OrderBook) deliverTo() *catalog.Shelf {
	var first *catalog.Shelf
	for i := range o.Premises.Shelves {
		s := &o.Premises.Shelves[i]
		switch {
		case s.Kind.V != "shop":
		case s.Address.Set:
			return s
		case first == nil:
			first = s
		}
	}
	return first
}

// shelfChoice lists the shelves that may be chosen. A list in a cell has 255
// characters at most; where they are more, any name may be written.
func shelfChoice(p *catalog.Premises) []string {
	names := p.ShelfNames()
	if len(strings.Join(names, ",")) > 250 {
		return nil
	}
	return names
}

// OrderLine is a line of an order sheet with the key by which it is known when the
// sheet is read back.
type OrderLine struct {
	Key string
	*bom.BuyRow
}

// LinesFor lists the lines of a vendor's order sheet. Where two of them are for the
// same goods, as are two lengths cut alike, their number is part of the key.
func (o *OrderBook) LinesFor(v *catalog.Vendor) []OrderLine {
	var out []OrderLine
	seen := map[string]int{}
	for _, r := range o.Rows {
		if r.Vendor != v {
			continue
		}
		key := strings.Join([]string{partsOf(r), r.Offer.Code.V, r.Pack.String()}, " | ")
		if seen[key]++; seen[key] > 1 {
			key += fmt.Sprintf(" | %d", seen[key])
		}
		out = append(out, OrderLine{key, r})
	}
	return out
}

func partsOf(r *bom.BuyRow) string {
	var out []string
	for i := range r.Parts {
		out = append(out, r.Parts[i].Part.ID)
	}
	return strings.Join(out, " + ")
}

func partNames(r *bom.BuyRow) string {
	var out []string
	for i := range r.Parts {
		if n := r.Parts[i].Part.Name.V; n != "" {
			out = append(out, n)
		}
	}
	return strings.Join(out, " + ")
}

// packWords is a pack in words.
func packWords(r *bom.BuyRow) string {
	switch {
	case r.Offer.ToLength():
		return "cut to length"
	case len(r.Offer.Brings) > 0:
		return "box"
	case r.Pack.Length > 0:
		return "reel of " + r.Pack.String()
	case r.Pack.Count == 1:
		return "piece"
	}
	return "pack of " + r.Pack.String()
}

// purpose says what a row is for: jobs, then reorder levels.
func (o *OrderBook) purpose(r *bom.BuyRow) string {
	var out []string
	for i := range r.Parts {
		b := &r.Parts[i]
		for _, s := range b.For {
			out = append(out, s.Job+" "+o.quantity(s.Qty))
		}
		if !b.Keep.IsZero() {
			out = append(out, "reorder level "+o.quantity(b.Keep))
		}
	}
	return strings.Join(out, ", ")
}

// summary says in one sheet what the purchase comes to, when to order and what does
// not come in time.
func (o *OrderBook) summary() bom.Sheet {
	s := bom.Sheet{Key: "summary", Name: "Summary", Title: "Purchase", Wide: true,
		Notes:   []string{"Prices " + o.inCurrency() + "net of tax. Jobs needed up to " + o.Until.String() + " are bought for. " + o.proof()},
		Columns: []bom.Column{bom.TextColumn("what"), bom.TextColumn("which"), bom.DayColumn("day"), bom.MoneyColumn("goods"), bom.MoneyColumn("freight"), bom.MoneyColumn("together")}}
	if len(o.Broken) > 0 {
		s.Notes = append(s.Notes, "Not counted, for their files cannot be read whole: "+strings.Join(o.Broken, ", ")+".")
	}
	s.Heading("ORDERS")
	for _, f := range o.Freight {
		goods := bom.MoneyCell(f.Goods).By(bom.Live{How: bom.LiveSame, Sheet: OrderKey(f.Vendor.ID), Row: "goods", Of: []string{ColumnTotal}})
		both := bom.MoneyCell(f.Goods + f.Amount).By(bom.Live{How: bom.LivePlus, Of: []string{"goods", "freight"}})
		s.Row("vendor "+f.Vendor.ID, bom.WordsCell(f.Vendor.Name.Or(f.Vendor.ID)), bom.WordsCell(words(len(o.LinesFor(f.Vendor)), "line", "lines")), bom.Cell{}, goods, bom.MoneyCell(f.Amount), both)
	}
	s.Sum("total", "in all", "goods", "freight", "together")
	o.orderDays(&s)
	o.lateness(&s)
	o.notBought(&s)
	from := len(s.Rows)
	for _, w := range o.Swaps {
		s.Row("", bom.WordsCell(w.Job), bom.WordsCell("bought as if its plan took "+w.To+" in place of "+w.From+"; change the plan"))
	}
	headed(&s, from, "SUBSTITUTES")
	from = len(s.Rows)
	for _, g := range o.Gaps {
		s.Row("", bom.WordsCell(g.Job), bom.WordsCell(strings.Replace(g.On, ".", " ", 1)+": "+g.Says))
	}
	headed(&s, from, "IN PLANS, BUT NOT COUNTED")
	o.underWay(&s)
	o.assumed(&s)
	return s
}

// orderDays groups what is ordered by the last day on which it may be.
func (o *OrderBook) orderDays(s *bom.Sheet) {
	type group struct {
		day    unit.Date
		vendor string
	}
	sums, parts := map[group]unit.Money{}, map[group][]string{}
	var groups []group
	for _, r := range o.Rows {
		g := group{r.OrderBy, r.Vendor.Name.Or(r.Vendor.ID)}
		if !g.day.IsZero() && g.day.Before(o.Today) {
			g.day = o.Today
		}
		if parts[g] == nil {
			groups = append(groups, g)
		}
		sums[g] += r.Cost
		parts[g] = appendOnce(parts[g], partsOf(r))
	}
	slices.SortStableFunc(groups, func(a, b group) int {
		return cmp.Or(strings.Compare(dayOrLast(a.day), dayOrLast(b.day)), strings.Compare(a.vendor, b.vendor))
	})
	if len(groups) > 0 {
		s.Heading("ORDER BY")
	}
	for _, g := range groups {
		what := "order by then"
		switch {
		case g.day == o.Today:
			what = "order today"
		case g.day.IsZero():
			what = "no day asks for it"
		}
		s.Row("", bom.WordsCell(what), bom.WordsCell(g.vendor+": "+strings.Join(parts[g], ", ")), bom.DayCell(g.day), bom.MoneyCell(sums[g]))
	}
}

func dayOrLast(d unit.Date) string {
	if d.IsZero() {
		return "~"
	}
	return d.String()
}

// lateness lists the jobs for which something comes too late.
func (o *OrderBook) lateness(s *bom.Sheet) {
	from := len(s.Rows)
	for _, r := range o.Rows {
		for _, l := range r.Late {
			comes := "nobody knows when it comes"
			if !l.Arrives.IsZero() {
				comes = "comes on " + l.Arrives.String()
			}
			s.Row("", bom.WordsCell(l.Job), bom.WordsCell(fmt.Sprintf("%s from %s %s", partsOf(r), r.Vendor.Name.Or(r.Vendor.ID), comes)), bom.DayCell(l.Needed))
		}
	}
	for _, w := range o.Waiting {
		s.Row("", bom.WordsCell(w.Job), bom.WordsCell(fmt.Sprintf("waits for %s of %s with %s on %s; nothing comes sooner", o.quantity(w.Qty), w.Part.ID, w.Order, w.Day)), bom.DayCell(w.Needed))
	}
	headed(s, from, "LATE")
}

// headed puts a heading above the rows from a place on, where there are any.
func headed(s *bom.Sheet, from int, text string) {
	if len(s.Rows) > from {
		s.Rows = slices.Insert(s.Rows, from, bom.SheetRow{Role: bom.HeadingRow, Cells: []bom.Cell{bom.WordsCell(text)}})
	}
}

// notBought lists what nobody sells, and what is bought later.
func (o *OrderBook) notBought(s *bom.Sheet) {
	from := len(s.Rows)
	for _, u := range o.Unsourced {
		var jobs []string
		for _, j := range u.Jobs {
			jobs = append(jobs, j.Job)
		}
		if u.Keep {
			jobs = append(jobs, "reorder level")
		}
		s.Row("", bom.WordsCell(u.Part), bom.WordsCell(fmt.Sprintf("%s for %s: %s", o.quantity(u.Qty), strings.Join(jobs, ", "), u.Why)))
	}
	headed(s, from, "NOT SOURCED")
	from = len(s.Rows)
	for _, l := range o.Later {
		s.Row("", bom.WordsCell(l.Job), bom.WordsCell(o.quantity(l.Qty)+" of "+l.Part.ID), bom.DayCell(l.Needed))
	}
	headed(s, from, "NOT BOUGHT YET")
}

// underWay lists the orders of which something is still to come.
func (o *OrderBook) underWay(s *bom.Sheet) {
	from := len(s.Rows)
	for i := range o.Allocation.Stock().Open {
		if l := &o.Allocation.Stock().Open[i]; !l.Complete {
			s.Row("", bom.WordsCell(l.Order.ID), bom.WordsCell(o.quantity(l.Left)+" of "+l.Part+" from "+l.Order.Vendor.V), bom.DayCell(l.Line.Due.V))
		}
	}
	headed(s, from, "ON ORDER ALREADY")
}

// assumed lists what the purchase takes for granted.
func (o *OrderBook) assumed(s *bom.Sheet) {
	from := len(s.Rows)
	say := func(what, which string, d unit.Date) {
		s.Row("", bom.WordsCell(what), bom.WordsCell(which), bom.DayCell(d))
	}
	for _, id := range o.Allocation.Parts() {
		for _, p := range o.Allocation.Supplies(id) {
			switch {
			case !p.Here() && p.Assumed:
				say(p.Name(), "nobody promised a day that is still to come; "+id+" is taken to come on the day beside", p.Day)
			case p.Tag != nil && p.Tag.How == "guess":
				say(p.Tag.ID, fmt.Sprintf("the length of %s is a guess, of which %s is counted", id, o.quantity(p.Qty)), unit.Date{})
			}
		}
	}
	for i := range o.Offers.Offers {
		if f := &o.Offers.Offers[i]; f.Until.Set && f.Until.V.Before(o.Today) {
			say(f.Vendor.V+" "+f.Code.V, "the offer for "+f.Part.Or("a box")+" has expired and is not used", f.Until.V)
		}
	}
	headed(s, from, "TAKEN FOR GRANTED")
}
