package catalog

import (
	"math/bits"

	"driploop/catalog/unit"
)

// Worth is what a part costs by the piece or metre: a share of the pack of one offer,
// without freight.
type Worth struct {
	Offer *Offer
	price unit.Money // of
	per   int64      // so many pieces, or millimetres
}

// Worth finds the offer that brings a part cheapest by the piece or metre on a day;
// false where none holds that day. A box says nothing of what one of its parts is
// worth, and a break holds for those who buy that many.
func (o *Offers) Worth(part string, on unit.Date) (Worth, bool) {
	var best Worth
	for i := range o.Offers {
		f := &o.Offers[i]
		if !f.Part.Set || f.Part.V != part || !f.Price.Set || !f.ValidOn(on) || o.Vendor(f.Vendor.V) == nil {
			continue
		}
		if w := f.worth(); best.Offer == nil || w.less(best) {
			best = w
		}
	}
	return best, best.Offer != nil
}

func (o *Offer) worth() Worth {
	if o.ToLength() {
		return Worth{o, o.Price.V, 1000}
	}
	pack := o.Holds()
	return Worth{o, o.PriceOf(o.Least.Or(1)), max(1, int64(pack.Count), int64(pack.Length))}
}

func (w Worth) less(x Worth) bool {
	whi, wlo := bits.Mul64(uint64(w.price), uint64(x.per))
	xhi, xlo := bits.Mul64(uint64(x.price), uint64(w.per))
	return whi < xhi || whi == xhi && wlo < xlo
}

// Of is what a quantity is worth, rounded half up to the cent.
func (w Worth) Of(q Quantity) unit.Money {
	n := max(0, q.Each, int64(q.Length))
	if w.per == 0 {
		return 0
	}
	hi, lo := bits.Mul64(uint64(w.price), uint64(n))
	lo, carry := bits.Add64(lo, 50*uint64(w.per), 0)
	if hi += carry; hi >= 100*uint64(w.per) {
		return 0 // no sum of money
	}
	cents, _ := bits.Div64(hi, lo, 100*uint64(w.per))
	return unit.Money(cents * 100)
}
