package catalog

import (
	"fmt"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Offers is what vendors sell, and on which terms.
type Offers struct {
	Vendors []Vendor
	Offers  []Offer
}

// Vendor is someone goods are bought from. Amounts are net of tax.
type Vendor struct {
	ID         string
	At         source.Place
	Name       source.Val[string]
	Freight    source.Val[unit.Money] // for each order; absent: none
	FreeOver   source.Val[unit.Money] // goods from this amount on travel free
	LeastOrder source.Val[unit.Money] // an order has at least this much in goods
	Account    source.Val[string]
	Contact    source.Val[string]
}

// Offer is one line of a vendor's list: packs of a part, a box that brings
// several parts, or cable cut to length.
type Offer struct {
	At       source.Place
	Part     source.Val[string]
	Brings   []source.Pick[int] // parts in one box, with their number
	Vendor   source.Val[string]
	Code     source.Val[string] // the vendor's number
	Pack     source.Val[Pack]   // absent: one piece
	Price    source.Val[unit.Money]
	Breaks   source.Val[[]source.Val[Break]] // by rising number of packs
	Least    source.Val[int]                 // packs; absent: 1
	LeadDays source.Val[int]                 // working days; absent: unknown
	Until    source.Val[unit.Date]           // last day on which it holds
	CutFrom  source.Val[unit.MM]             // cut to length: shortest piece
	CutTo    source.Val[unit.MM]             // cut to length: longest piece
}

// Pack is what one pack holds: pieces, or one length of cut stock.
type Pack struct {
	Count  int // 0 for a length
	Length unit.MM
}

// Quantity is the contents of n packs.
func (p Pack) Quantity(n int) Quantity {
	return Quantity{Each: int64(p.Count) * int64(n), Length: p.Length * unit.MM(n)}
}

// String prints "25" or "152.4 m".
func (p Pack) String() string { return p.Quantity(1).String() }

// Break is a price per pack that holds for all packs of an order of at least
// Packs packs.
type Break struct {
	Packs int
	Price unit.Money
}

// ToLength reports whether the offer is cable cut to the length asked for; its
// price is then per metre.
func (o *Offer) ToLength() bool { return o.CutFrom.Set || o.CutTo.Set }

// Holds is what one pack of the offer holds.
func (o *Offer) Holds() Pack { return o.Pack.Or(Pack{Count: 1}) }

// PriceOf is the price of one pack where n packs are ordered.
func (o *Offer) PriceOf(n int) unit.Money {
	price := o.Price.V
	for _, b := range o.Breaks.V {
		if n >= b.V.Packs {
			price = b.V.Price
		}
	}
	return price
}

// ValidOn reports whether the offer holds on a day; its last day counts.
func (o *Offer) ValidOn(d unit.Date) bool { return !o.Until.Set || !d.After(o.Until.V) }

// Parts lists the parts that the offer brings, by ID.
func (o *Offer) Parts() []string {
	if o.Part.Set {
		return []string{o.Part.V}
	}
	var out []string
	for _, b := range o.Brings {
		out = append(out, b.Name)
	}
	return out
}

// Vendor finds a vendor by ID, or nil.
func (o *Offers) Vendor(id string) *Vendor {
	for i := range o.Vendors {
		if o.Vendors[i].ID == id {
			return &o.Vendors[i]
		}
	}
	return nil
}

// Add takes over what another file offers.
func (o *Offers) Add(more *Offers) {
	o.Vendors = append(o.Vendors, more.Vendors...)
	o.Offers = append(o.Offers, more.Offers...)
}

// ReadOffers reads one file of vendors and offers.
func ReadOffers(d *source.Doc) (*Offers, []source.Problem) {
	o := &Offers{}
	return o, source.Read(d, o.keys)
}

// DescribeOffers documents the format of offer files.
func DescribeOffers() *source.Record { return source.Describe(new(Offers).keys) }

func (o *Offers) keys(k *source.Keys) {
	source.Named(k, &o.Vendors, "vendor", (*Vendor).keys, "who sells; prices are net of tax")
	source.Rows(k, &o.Offers, "offer", (*Offer).keys, "one line of a vendor's list")
}

func (v *Vendor) keys(k *source.Keys) {
	v.ID, v.At = k.ID(), k.At()
	source.Opt(k, &v.Name, "name", source.Text, "the vendor's name")
	source.Opt(k, &v.Freight, "freight", source.Price, "carriage of one order; absent: none")
	source.Opt(k, &v.FreeOver, "free_over", source.Price, "goods from this amount on travel free")
	source.Opt(k, &v.LeastOrder, "least_order", source.Price, "least amount of goods in one order")
	source.Opt(k, &v.Account, "account", source.Text, "the firm's account there")
	source.Opt(k, &v.Contact, "contact", source.Text, "whom to ask")
}

var (
	pack       = source.Either(source.IsString, packLength, packCount, "a count, or a length for cut stock")
	packLength = source.Map(source.Shaped(source.Length, source.Form{Pattern: unit.SomeLengthPattern}), toPackLength)
	packCount  = source.Map(source.Count(1, 100000), func(n int) (Pack, error) { return Pack{Count: n}, nil })
)

func toPackLength(l unit.MM) (Pack, error) {
	if l == 0 {
		return Pack{}, fmt.Errorf("a pack holds some length")
	}
	return Pack{Length: l}, nil
}

// priceBreak reads [5, "301.00"], whose two values are of two types: each is
// read into a Break that holds one of them.
var priceBreak = source.Shaped(source.Map(source.Pair(source.Either(source.IsString,
	source.Map(source.Price, func(p unit.Money) (Break, error) { return Break{Price: p}, nil }),
	source.Map(breakPacks, func(n int) (Break, error) { return Break{Packs: n}, nil }),
	"packs, then price"), `[5, "301.00"]`), toBreak),
	source.Form{Least: 2, Most: 2, Items: func() []source.TypeDoc { return []source.TypeDoc{breakPacks.Shape, source.Price.Shape} }})

var breakPacks = source.Count(2, 1000000)

func toBreak(p [2]Break) (Break, error) {
	if p[0].Packs == 0 || p[1].Packs != 0 {
		return Break{}, fmt.Errorf(`a price break is a number of packs and a price, [5, "301.00"]`)
	}
	return Break{p[0].Packs, p[1].Price}, nil
}

func (o *Offer) keys(k *source.Keys) {
	o.At = k.At()
	source.Opt(k, &o.Part, "part", source.Name, "the part that is sold; or brings")
	source.Each(k, &o.Brings, "brings", source.Names, source.Count(1, 1000), "one box with several parts, and how many of each")
	source.Need(k, &o.Vendor, "vendor", source.Name, "who sells it")
	source.Opt(k, &o.Code, "code", source.Text, "the vendor's number")
	source.Opt(k, &o.Pack, "pack", pack, "what one pack holds; absent: one piece")
	source.Need(k, &o.Price, "price", source.Price, "per pack; per metre where it is cut to length")
	source.Opt(k, &o.Breaks, "breaks", source.ListOf(priceBreak), "price per pack, for all packs, from so many packs on")
	source.Opt(k, &o.Least, "least", source.Count(1, 1000000), "least number of packs; absent: 1")
	source.Opt(k, &o.LeadDays, "lead_days", source.Count(0, 1000), "working days from order to delivery; absent: unknown")
	source.Opt(k, &o.Until, "until", source.Day, "last day on which the offer holds; absent: open")
	source.Opt(k, &o.CutFrom, "cut_from", source.Length, "shortest piece that is cut to length")
	source.Opt(k, &o.CutTo, "cut_to", source.Length, "longest piece that is cut to length")
	o.agree(k)
}

// agree holds the keys of an offer against each other.
func (o *Offer) agree(k *source.Keys) {
	oneOfPartBrings(k, o.At, "the offer")
	k.Demand(source.Condition{Not: []source.State{source.Given("pack"), source.Given("cut_from")}},
		source.Condition{Not: []source.State{source.Given("pack"), source.Given("cut_to")}})
	if o.ToLength() && o.Pack.Set {
		k.Fault(o.Pack.At, "the offer has a pack and is cut to length", "keep pack, or keep cut_from and cut_to", o.CutFrom.At)
	}
	if o.CutFrom.Set && o.CutTo.Set && o.CutTo.V < o.CutFrom.V {
		k.Fault(o.CutTo.At, fmt.Sprintf("cut_to %s is shorter than cut_from %s", o.CutTo.V, o.CutFrom.V), "write the shortest piece in cut_from", o.CutFrom.At)
	}
	for i := 1; i < len(o.Breaks.V); i++ {
		if prev, b := o.Breaks.V[i-1], o.Breaks.V[i]; b.V.Packs <= prev.V.Packs {
			k.Fault(b.At, fmt.Sprintf("a break from %d packs follows one from %d", b.V.Packs, prev.V.Packs), "order the breaks by rising number of packs", prev.At)
		}
	}
}

// oneOfPartBrings says that a line sells a part or a box of parts, not both.
func oneOfPartBrings(k *source.Keys, at source.Place, what string) {
	k.Demand(source.OneOfTwo("part", "brings")...)
	switch part, brings := k.Has("part"), k.Has("brings"); {
	case part && brings:
		k.Fault(at, what+" names a part and brings others", "keep part, or list every part of the box in brings")
	case !part && !brings:
		k.Missing("part", "or brings: what is sold")
	}
}

// Check holds offers from all files against each other and against the catalog:
// vendors that nobody describes or that two files describe, parts that do not
// exist, packs that do not suit the part. look finds a part by ID, or nil.
func (o *Offers) Check(look func(string) *Part) []source.Problem {
	var out []source.Problem
	byID := map[string]*Vendor{}
	var names []string
	for i := range o.Vendors {
		v := &o.Vendors[i]
		if first := byID[v.ID]; first != nil {
			out = append(out, source.Problem{Kind: source.Value, At: v.At, Says: "the vendor " + source.Quote(v.ID) + " is described twice",
				Do: "keep one of the two", Also: []source.Place{first.At}})
			continue
		}
		byID[v.ID] = v
		names = append(names, v.ID)
	}
	for i := range o.Offers {
		f := &o.Offers[i]
		if f.Vendor.Set && byID[f.Vendor.V] == nil {
			out = append(out, unknownVendor(f.Vendor, names))
		}
		out = append(out, f.check(look)...)
	}
	source.SortProblems(out)
	return out
}

// CheckOrders says which orders go to a vendor that nobody describes.
func (o *Offers) CheckOrders(orders []*Order) []source.Problem {
	var names []string
	for i := range o.Vendors {
		names = append(names, o.Vendors[i].ID)
	}
	var out []source.Problem
	for _, r := range orders {
		if r.Vendor.Set && o.Vendor(r.Vendor.V) == nil {
			out = append(out, unknownVendor(r.Vendor, names))
		}
	}
	source.SortProblems(out)
	return out
}

func unknownVendor(v source.Val[string], names []string) source.Problem {
	do := "describe it in [vendor." + v.V + "]"
	if near := source.Nearest(v.V, names); near != "" {
		do = "did you mean " + near + "?"
	}
	return source.Problem{Kind: source.Value, At: v.At, Says: "nobody describes the vendor " + source.Quote(v.V), Do: do}
}

func (o *Offer) check(look func(string) *Part) []source.Problem {
	var out []source.Problem
	if p := partOf(&out, look, o.Part); p != nil && !o.ToLength() {
		out = append(out, packSuits(p, o.Holds(), o.Pack.At, o.At)...)
	} else if p != nil && !p.CutStock() {
		out = append(out, source.Problem{Kind: source.Value, At: o.Part.At, Says: source.Quote(p.ID) + " is not kept by length and cannot be cut to length", Do: "write pack in place of cut_from and cut_to"})
	}
	for _, b := range o.Brings {
		partOf(&out, look, source.Val[string]{V: b.Name, At: b.At, Set: true})
	}
	return out
}

// partOf finds the part that a value names, or adds the problem that there is none.
func partOf(out *[]source.Problem, look func(string) *Part, v source.Val[string]) *Part {
	if !v.Set {
		return nil
	}
	p := look(v.V)
	if p == nil {
		*out = append(*out, source.Problem{Kind: source.Value, At: v.At, Says: "no catalog has the part " + source.Quote(v.V), Do: "check its ID, or describe it in the catalog"})
	}
	return p
}

// packSuits says whether a pack is written in the unit its part is kept in: a
// length for cut stock, a count for all else.
func packSuits(p *Part, holds Pack, at, row source.Place) []source.Problem {
	if at.IsZero() {
		at = row
	}
	switch {
	case p.CutStock() && holds.Length == 0:
		return []source.Problem{{Kind: source.Value, At: at, Says: fmt.Sprintf("%s is kept by length, but its pack is %s pieces", source.Quote(p.ID), holds),
			Do: `write the length of one reel, pack = "152.4 m"`}}
	case !p.CutStock() && holds.Length > 0:
		return []source.Problem{{Kind: source.Value, At: at, Says: fmt.Sprintf("%s is counted, but its pack is a length, %s", source.Quote(p.ID), holds),
			Do: "write how many pieces one pack holds"}}
	}
	return nil
}
