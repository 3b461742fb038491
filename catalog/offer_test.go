package catalog

import (
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

const terns = `
[vendor.tern]
name = "Tern Supply"
freight = "18.00"
free_over = "600.00"
least_order = "50.00"
account = "4410"
contact = "the counter"

[[offer]]
part = "CX-10"
vendor = "tern"
code = "T-40077"
pack = "152.4 m"
price = "318.00"
breaks = [[5, "301.00"], [10, "290.0050"]]
least = 1
lead_days = 6
until = 2026-12-31

[[offer]]
brings = { AMP-W = 1, PS-12 = 1 }
vendor = "tern"
price = "610.00"

[[offer]]
part = "CX-10"
vendor = "tern"
cut_from = "10 m"
cut_to = "150 m"
price = "2.95"
`

// stockParts is the small catalog that the tests of offers and stock look into.
func stockParts(t testing.TB) func(string) *Part {
	t.Helper()
	parts, problems := ReadParts(docOf(t, "catalog/parts.toml", `
[part.CX-10]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = [[850, 12.0]]
[part.CX-7]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = [[850, 18.0]]
[part.NC-10-NM]
kind = "connector"
connector = "N male"
impedance_ohm = 50
fits = ["CX-10"]
bags = [25, 10]
[part.NC-10-NF]
kind = "connector"
connector = "N female"
impedance_ohm = 50
fits = ["CX-10"]
[part.AMP-W]
kind = "supply"
serials = true
[part.PS-12]
kind = "supply"
`))
	wantNone(t, problems)
	byID := map[string]*Part{}
	for _, p := range parts {
		byID[p.ID] = p
	}
	return func(id string) *Part { return byID[id] }
}

func wantNone(t testing.TB, problems []source.Problem) {
	t.Helper()
	for _, p := range told(problems) {
		t.Fatal(p)
	}
}

func TestOffersRead(t *testing.T) {
	o, problems := ReadOffers(docOf(t, "offers/tern.toml", terns))
	wantNone(t, problems)
	wantNone(t, o.Check(stockParts(t)))
	v := o.Vendor("tern")
	if v == nil || v.Freight.V != 180000 || v.FreeOver.V != 6000000 || v.LeastOrder.V != 500000 || v.Account.V != "4410" {
		t.Fatalf("vendor read as %+v", v)
	}
	reel, box, cut := &o.Offers[0], &o.Offers[1], &o.Offers[2]
	if reel.Holds() != (Pack{Length: 152400}) || reel.LeadDays.V != 6 || reel.ToLength() {
		t.Errorf("reel read as %+v", reel)
	}
	if len(box.Brings) != 2 || box.Holds() != (Pack{Count: 1}) {
		t.Errorf("box read as %+v", box)
	}
	if !cut.ToLength() || cut.CutFrom.V != 10000 || cut.CutTo.V != 150000 {
		t.Errorf("cut to length read as %+v", cut)
	}
}

// A break is the price of all packs, from its number of packs on.
func TestOfferPriceAtBreaks(t *testing.T) {
	o, problems := ReadOffers(docOf(t, "offers/tern.toml", terns))
	wantNone(t, problems)
	for packs, want := range map[int]unit.Money{1: 3180000, 4: 3180000, 5: 3010000, 9: 3010000, 10: 2900050, 500: 2900050} {
		if got := o.Offers[0].PriceOf(packs); got != want {
			t.Errorf("%d packs cost %s each, want %s", packs, got, want)
		}
	}
}

func TestOfferUntilIsInclusive(t *testing.T) {
	o := Offer{Until: source.Val[unit.Date]{V: unit.Date{Year: 2026, Month: 12, Day: 31}, Set: true}}
	if !o.ValidOn(unit.Date{Year: 2026, Month: 12, Day: 31}) || o.ValidOn(unit.Date{Year: 2027, Month: 1, Day: 1}) {
		t.Error("an offer holds on its last day and not after it")
	}
	if !new(Offer).ValidOn(unit.Date{Year: 2099, Month: 1, Day: 1}) {
		t.Error("an offer without an end holds")
	}
}

func TestOfferProblems(t *testing.T) {
	const from = "[[offer]]\nvendor = \"tern\"\nprice = \"1.00\"\n"
	for name, c := range map[string]struct {
		src  string
		want []string
	}{
		"nothing sold":     {from, []string{"1: this table has no part"}},
		"both":             {from + "part = \"A\"\nbrings = { B = 1 }\n", []string{"1: the offer names a part and brings others"}},
		"five decimals":    {"[[offer]]\npart = \"A\"\nvendor = \"v\"\nprice = \"1.00001\"\n", []string{"4: price: an amount is written"}},
		"a number":         {"[[offer]]\npart = \"A\"\nvendor = \"v\"\nprice = 1.0\n", []string{"4: price: the number 1 was read"}},
		"pack and cut":     {from + "part = \"A\"\npack = \"10 m\"\ncut_from = \"1 m\"\n", []string{"5: the offer has a pack and is cut to length"}},
		"cut backwards":    {from + "part = \"A\"\ncut_from = \"10 m\"\ncut_to = \"1 m\"\n", []string{"6: cut_to 1 m is shorter"}},
		"breaks fall":      {from + "part = \"A\"\nbreaks = [[5, \"1.00\"], [5, \"0.90\"]]\n", []string{"5: a break from 5 packs follows one from 5"}},
		"break turned":     {from + "part = \"A\"\nbreaks = [[\"1.00\", 5]]\n", []string{"5: breaks: a price break is a number of packs and a price"}},
		"brings a no-name": {from + "brings = { \"a b\" = 1 }\n", []string{"4: brings: \"a b\" is no name"}},
	} {
		t.Run(name, func(t *testing.T) {
			_, problems := ReadOffers(docOf(t, "offers/x.toml", c.src))
			wantTold(t, problems, c.want...)
		})
	}
}

func TestOffersCheckOverFiles(t *testing.T) {
	all := &Offers{}
	for _, f := range []struct{ path, src string }{
		{"offers/a.toml", "[vendor.tern]\n[[offer]]\npart = \"CX-10\"\nvendor = \"turn\"\npack = 2\nprice = \"1\"\n"},
		{"offers/b.toml", "[vendor.tern]\n[[offer]]\npart = \"NC-10-NM\"\nvendor = \"tern\"\npack = \"5 m\"\nprice = \"1\"\n" +
			"[[offer]]\npart = \"NC-10-NM\"\nvendor = \"tern\"\ncut_from = \"5 m\"\nprice = \"1\"\n" +
			"[[offer]]\nbrings = { NOPE = 1 }\nvendor = \"tern\"\nprice = \"1\"\n"},
	} {
		o, problems := ReadOffers(docOf(t, f.path, f.src))
		wantNone(t, problems)
		all.Add(o)
	}
	problems := all.Check(stockParts(t))
	wantTold(t, problems,
		"4: nobody describes the vendor \"turn\"",
		"5: \"CX-10\" is kept by length, but its pack is 2 pieces",
		"1: the vendor \"tern\" is described twice",
		"5: \"NC-10-NM\" is counted, but its pack is a length, 5 m",
		"8: \"NC-10-NM\" is not kept by length",
		"13: no catalog has the part \"NOPE\"")
	if do := problems[0].Do; do != "did you mean tern?" {
		t.Errorf("the remedy is %q", do)
	}
}

func TestOrdersNameVendors(t *testing.T) {
	o, problems := ReadOffers(docOf(t, "offers/tern.toml", terns))
	wantNone(t, problems)
	known := orderOf(t, "stock/orders/PO-1.toml", "[order]\nvendor = \"tern\"\n")
	typo := orderOf(t, "stock/orders/PO-2.toml", "[order]\nvendor = \"terne\"\n")
	wantTold(t, o.CheckOrders([]*Order{typo, known}), "2: nobody describes the vendor \"terne\"")
}
