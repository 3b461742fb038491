package bom_test

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// smallMarket makes up two or three vendors and a few offers for counted parts.
func smallMarket(rng *rand.Rand) string {
	var b strings.Builder
	vendors := []string{"t", "u", "w"}[:2+rng.IntN(2)]
	for _, v := range vendors {
		pickOne := func(some ...string) string { return some[rng.IntN(len(some))] }
		fmt.Fprintf(&b, ":%s %s %s %s\n", v, pickOne("-", "3.00", "7.50"), pickOne("-", "14.00", "25.00"), pickOne("-", "-", "12.00"))
	}
	for _, part := range []string{"NC*1", "NC*3", "AMP*1", "AMP+PS", "PS*1"} {
		for range 1 + rng.IntN(2) {
			if rng.IntN(4) == 0 {
				continue
			}
			fmt.Fprintf(&b, "%s %s %d.%02d", vendors[rng.IntN(len(vendors))], part, 1+rng.IntN(7), rng.IntN(100))
			if rng.IntN(6) > 0 {
				fmt.Fprintf(&b, " %dd", 2+rng.IntN(12))
			}
			if rng.IntN(3) == 0 {
				fmt.Fprintf(&b, " %d@1.%02d", 2+rng.IntN(3), rng.IntN(100))
			}
			if rng.IntN(6) == 0 {
				fmt.Fprintf(&b, " least%d", 2+rng.IntN(2))
			}
			b.WriteByte('\n')
		}
	}
	return b.String()
}

func smallJobs(rng *rand.Rand) []*bom.Demand {
	var out []*bom.Demand
	for _, id := range []string{"a", "b"} {
		day := fmt.Sprintf("2026-12-%02d", 7+rng.IntN(14))
		if rng.IntN(6) == 0 {
			day = ""
		}
		d := jobOf(id, "review", "south", day, rng.IntN(4))
		if rng.IntN(2) == 0 {
			need(d, amp, 1)
			if rng.IntN(2) == 0 {
				need(d, power, 1+rng.IntN(2))
			}
		}
		out = append(out, d)
	}
	return out
}

// shortfall is what a claim of a brute-force check is short of, and from which offers
// it may be served.
type shortfall struct {
	part string
	qty  int64
	from []bool
}

// cheapestOf tries every number of packs up to a most of every offer that brings
// something that is short; nobody buys spares of what no job takes.
func cheapestOf(a *bom.Allocation, offers *catalog.Offers, most int) (int64, bool) {
	var short []shortfall
	for _, c := range a.Claims {
		all := sourcesOf(c.Part().ID, 0, a.Today, offers)
		if c.Short == 0 || len(all) == 0 {
			continue
		}
		s := shortfall{c.Part().ID, int64(c.Short), make([]bool, len(offers.Offers))}
		for i := range offers.Offers {
			for _, o := range all {
				s.from[i] = s.from[i] || o == &offers.Offers[i] && mayServe(o, all, c.Needed, a.Today)
			}
		}
		short = append(short, s)
	}
	best, found := int64(0), false
	packs, wanted := make([]int, len(offers.Offers)), make([]bool, len(offers.Offers))
	for i := range offers.Offers {
		for _, s := range short {
			wanted[i] = wanted[i] || slices.Contains(sourcesOf(s.part, 0, a.Today, offers), &offers.Offers[i])
		}
	}
	var try func(i int)
	try = func(i int) {
		if i < len(packs) && !wanted[i] {
			try(i + 1)
			return
		}
		if i < len(packs) {
			for n := 0; n <= most; n++ {
				if n == 0 || n >= offers.Offers[i].Least.V {
					packs[i] = n
					try(i + 1)
				}
			}
			packs[i] = 0
			return
		}
		if cost, ok := costOf(packs, offers); ok && (!found || cost < best) && covers(packs, offers, short) {
			best, found = cost, true
		}
	}
	try(0)
	return best, found
}

func costOf(packs []int, offers *catalog.Offers) (int64, bool) {
	var total int64
	for i := range offers.Vendors {
		v := &offers.Vendors[i]
		var goods int64
		for j, n := range packs {
			if offers.Offers[j].Vendor.V == v.ID {
				goods += halfUp(packPrice(&offers.Offers[j], n)*int64(n), 1)
			}
		}
		switch {
		case goods == 0:
		case goods < int64(v.LeastOrder.V):
			return 0, false
		case !v.FreeOver.Set || goods < int64(v.FreeOver.V):
			goods += int64(v.Freight.V)
		}
		total += goods
	}
	return total, true
}

// covers looks at every set of shortfalls of a part: what may serve one of them is
// enough for all.
func covers(packs []int, offers *catalog.Offers, short []shortfall) bool {
	for set := 1; set < 1<<len(short); set++ {
		part, want, have, one := "", int64(0), int64(0), true
		from := make([]bool, len(packs))
		for k, s := range short {
			if set>>k&1 == 0 {
				continue
			}
			one = one && (part == "" || part == s.part)
			part = s.part
			want += s.qty
			for i := range from {
				from[i] = from[i] || s.from[i]
			}
		}
		for i, n := range packs {
			if o := &offers.Offers[i]; from[i] {
				per := int64(o.Pack.Or(catalog.Pack{Count: 1}).Count)
				have += int64(n) * per
			}
		}
		if one && have < want {
			return false
		}
	}
	return true
}

// On small workspaces the purchase costs what the cheapest of all purchases costs.
func TestBuyAgainstEveryPurchase(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 5))
	proved, most := 0, 6
	for n := range 250 {
		text := smallMarket(rng)
		offers := market(text)
		if len(offers.Offers) > 6 {
			offers.Offers = offers.Offers[:6]
		}
		stock := &catalog.Stock{Today: date("2026-12-01"), Bins: []catalog.Bin{bin("shop", "shop", int64(rng.IntN(2)))}}
		a := bom.Allocate(smallJobs(rng), stock, yard(), &bom.House{})
		p := bom.Buy(a, offers, partOf, bom.Terms{})
		if err := checkBuy(p, a, offers, 0); err != nil {
			t.Fatalf("%d: %v\n%s\n%s", n, err, text, toBuy(p))
		}
		best, found := cheapestOf(a, offers, most)
		if !found {
			continue // a least order that no few packs reach
		}
		within := true
		for _, r := range p.Rows {
			within = within && r.Packs <= most
		}
		switch {
		case int64(p.Bound) > best && p.Unsourced == nil:
			t.Errorf("%d: the bound is %s, and %s is possible\n%s\n%s", n, p.Bound, unit.Money(best), text, toBuy(p))
		case p.Proved && within && int64(p.Total) != best && p.Unsourced == nil:
			t.Errorf("%d: %s is proved, and %s is the least\n%s\n%s", n, p.Total, unit.Money(best), text, toBuy(p))
		}
		if p.Proved {
			proved++
		}
	}
	if proved < 220 {
		t.Errorf("only %d purchases are proved", proved)
	}
}
