package catalog

import (
	"fmt"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Order is goods asked of a vendor. Without Sent it is a wish and no supply.
type Order struct {
	ID     string
	File   *source.File
	At     source.Place
	Vendor source.Val[string]
	Sent   source.Val[unit.Date]
	To     source.Val[string] // the shelf it is delivered to
	Lines  []OrderLine
}

// OrderLine is one line of an order: packs of a part, or boxes of several parts.
type OrderLine struct {
	At      source.Place
	Part    source.Val[string]
	Brings  []source.Pick[int]
	Code    source.Val[string]
	Pack    source.Val[Pack] // absent: one piece
	Packs   source.Val[int]
	Price   source.Val[unit.Money] // per pack
	Due     source.Val[unit.Date]  // absent: unknown
	Jobs    source.Val[Words]      // first call on it
	Dropped source.Val[int]        // packs that will not come
	Because source.Val[string]
}

// ReadOrder reads an order file.
func ReadOrder(d *source.Doc) (*Order, []source.Problem) {
	o := &Order{ID: nameOf(d.File), File: d.File}
	return o, source.Read(d, o.keys)
}

// DescribeOrder documents the format of order files.
func DescribeOrder() *source.Record { return source.Describe(new(Order).keys) }

func (o *Order) keys(k *source.Keys) {
	source.One(k, o, "order", (*Order).head, "an order to one vendor")
	source.Rows(k, &o.Lines, "line", (*OrderLine).keys, "what is ordered")
}

func (o *Order) head(k *source.Keys) {
	o.At = k.At()
	source.Need(k, &o.Vendor, "vendor", source.Name, "who it goes to")
	source.Opt(k, &o.Sent, "sent", source.Day, "when it went out; absent: a wish and no supply")
	source.Opt(k, &o.To, "to", source.Name, "the shelf it is delivered to")
}

func (l *OrderLine) keys(k *source.Keys) {
	l.At = k.At()
	source.Opt(k, &l.Part, "part", source.Name, "what is ordered; or brings")
	source.Each(k, &l.Brings, "brings", source.Names, source.Count(1, 1000), "one box with several parts, and how many of each")
	source.Opt(k, &l.Code, "code", source.Text, "the vendor's number")
	source.Opt(k, &l.Pack, "pack", pack, "what one pack holds; absent: one piece")
	source.Need(k, &l.Packs, "packs", source.Count(1, 1000000), "how many packs")
	source.Opt(k, &l.Price, "price", source.Price, "per pack")
	source.Opt(k, &l.Due, "due", source.Day, "when it is promised; absent: unknown")
	source.Opt(k, &l.Jobs, "jobs", source.ListOf(source.Name), "jobs with the first call on it")
	source.Opt(k, &l.Dropped, "dropped", source.Count(0, 1000000), "packs that will not come")
	source.Opt(k, &l.Because, "because", source.Text, "why they will not")
	oneOfPartBrings(k, l.At, "the line")
	dropped := source.State{Key: "dropped", Non: []any{0}}
	k.Demand(source.Condition{When: &dropped, Any: []source.State{source.Given("because")}})
	if l.Dropped.V > 0 {
		needs(k, k.Has("because"), "because", "why the packs will not come")
		if l.Packs.Set && l.Dropped.V > l.Packs.V {
			k.Fault(l.Dropped.At, fmt.Sprintf("%d packs are dropped of %d ordered", l.Dropped.V, l.Packs.V), "check both figures", l.Packs.At)
		}
	}
}

// Holds is what one pack of the line holds.
func (l *OrderLine) Holds() Pack { return l.Pack.Or(Pack{Count: 1}) }
