package bom

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Supply is one place that goods of a part come from: a bin, a tagged reel, or the
// rest of an order line that was sent.
type Supply struct {
	Part  string
	Where string // the shelf; of an order line the one it is delivered to, "" unknown
	Kind  string // of the shelf

	Tag  *catalog.Tag  // of a reel or remnant
	Open *catalog.Open // of an order line
	Pack int           // which pack of the line, from 1, where packs are reels

	Day     unit.Date // of arrival; zero for what is here
	Assumed bool      // nobody promised the day

	Qty  catalog.Quantity // in all
	Free catalog.Quantity // what no claim holds, never below 0
}

// Name is how the supply is called: a tag, or "shop", or "PO-31".
func (s *Supply) Name() string {
	switch {
	case s.Tag != nil:
		return s.Tag.ID
	case s.Open != nil:
		return s.Open.Order.ID
	}
	return s.Where
}

// Here reports goods that have arrived.
func (s *Supply) Here() bool { return s.Open == nil }

// Pickable reports goods that a crew may take today: on an inbound shelf they are
// to be counted first.
func (s *Supply) Pickable() bool { return s.Here() && s.Kind != "inbound" }

// supplies lists where the parts come from: bins and tags of all shelves but
// quarantine and those that nobody describes, then what sent orders still owe.
func (a *allocator) supplies() {
	for i := range a.stock.Bins {
		b := &a.stock.Bins[i]
		if b.OnHand() && b.Qty.Each > 0 {
			a.supply(&Supply{Part: b.Part, Where: b.Where, Kind: b.Kind, Qty: catalog.Quantity{Each: b.Qty.Each}})
		}
	}
	for i := range a.stock.Tags {
		t := &a.stock.Tags[i]
		if t.Kind != "shop" && t.Kind != "van" && t.Kind != "inbound" {
			continue
		}
		if left := a.surely(t); left > 0 {
			a.supply(&Supply{Part: t.Part, Where: t.Where, Kind: t.Kind, Tag: t, Qty: catalog.Quantity{Length: left}})
		}
	}
	for i := range a.stock.Open {
		a.open(&a.stock.Open[i])
	}
	for _, list := range a.byPart {
		slices.SortStableFunc(list, func(s, t *Supply) int {
			return cmp.Or(byDay(s.Day, t.Day), strings.Compare(s.Name(), t.Name()), cmp.Compare(s.Pack, t.Pack))
		})
	}
}

func (a *allocator) supply(s *Supply) {
	s.Free = s.Qty
	a.byPart[s.Part] = append(a.byPart[s.Part], s)
}

// surely is what a reel holds for sure: of a guess the house keeps some back.
func (a *allocator) surely(t *catalog.Tag) unit.MM {
	if t.How == "guess" {
		return max(0, t.Left-a.house.ReelDoubt.Or(500))
	}
	return t.Left
}

// open adds what an order line still owes; each pack of cut stock is a reel of its
// own.
func (a *allocator) open(o *catalog.Open) {
	if o.Complete {
		return
	}
	s := Supply{Part: o.Part, Where: o.Order.To.V, Open: o}
	if shelf := a.premises.Shelf(s.Where); shelf != nil {
		s.Kind = shelf.Kind.V
	}
	s.Day, s.Assumed = a.due(o)
	pack := o.Line.Holds().Length
	if pack == 0 {
		s.Qty = catalog.Quantity{Each: o.Left.Each}
		a.supply(&s)
		return
	}
	for n, left := 1, o.Left.Length; left > 0; n, left = n+1, left-pack {
		reel := s
		reel.Pack, reel.Qty = n, catalog.Quantity{Length: min(pack, left)}
		a.supply(&reel)
	}
}

// due is the day on which an order line is expected: as promised, or where that
// day is past or nobody gave one, so many working days from now.
func (a *allocator) due(o *catalog.Open) (day unit.Date, assumed bool) {
	if o.Line.Due.Set && !o.Line.Due.V.Before(a.today) {
		return o.Line.Due.V, false
	}
	return a.calendar().AddWorkdays(a.today, a.house.SlipDays.Or(5)), true
}

// shelvesOf lists the shelves that a crew takes from, in its order: without a crew,
// or where the crew names none, every shop.
func (a *Allocation) shelvesOf(crew string) []string {
	if c := a.premises.Crew(crew); c != nil && c.Shelves.Set {
		out := make([]string, 0, len(c.Shelves.V))
		for _, s := range c.Shelves.V {
			out = append(out, s.V)
		}
		return out
	}
	var out []string
	for i := range a.premises.Shelves {
		if s := &a.premises.Shelves[i]; s.Kind.V == "shop" {
			out = append(out, s.ID)
		}
	}
	return out
}

// reach says how well a supply suits a claim: 0 not at all, else the lower the
// sooner it is taken. Goods of another crew's van are out of reach; goods that
// arrived and were not put away, and deliveries to anywhere but a van, are not.
func (a *Allocation) reach(s *Supply, d *Demand, needed unit.Date) int {
	if !s.Here() && !needed.IsZero() && s.Day.After(needed) {
		return 0
	}
	shelves := a.shelves(d.Crew)
	at := slices.Index(shelves, s.Where)
	switch {
	case s.Here() && s.Kind != "inbound":
		return at + 1
	case s.Kind == "van" && at < 0:
		return 0
	case s.Here():
		return len(shelves) + 1
	}
	return len(shelves) + 2
}

// shelves is shelvesOf, looked up once for each crew.
func (a *Allocation) shelves(crew string) []string {
	list, known := a.crews[crew]
	if !known {
		list = a.shelvesOf(crew)
		a.crews[crew] = list
	}
	return list
}
