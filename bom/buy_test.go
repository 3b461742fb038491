package bom_test

import (
	"fmt"
	"sort"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

var (
	amp   = &catalog.Part{ID: "AMP", Kind: val("amplifier")}
	power = &catalog.Part{ID: "PS", Kind: val("supply")}
)

func partOf(id string) *catalog.Part {
	for _, p := range []*catalog.Part{plug, coax, amp, power} {
		if p.ID == id {
			return p
		}
	}
	return nil
}

func money(s string) unit.Money {
	m, err := unit.ParseMoney(s)
	if err != nil {
		panic(err)
	}
	return m
}

// vendor writes "tern 18 600 50": freight, free from, least order; - is none.
func vendor(s string) catalog.Vendor {
	f := strings.Fields(s)
	v := catalog.Vendor{ID: f[0], Name: val(f[0])}
	for i, to := range []*source.Val[unit.Money]{&v.Freight, &v.FreeOver, &v.LeastOrder} {
		if i+1 < len(f) && f[i+1] != "-" {
			*to = val(money(f[i+1]))
		}
	}
	return v
}

// offer writes "tern NC*10 6.20 4d": vendor, part and pack, price, lead; then
// "5@5.90" for a break, "least2", "until2026-12-31", "10-120m" for cut to length,
// and "AMP+PS" for a box.
func offer(s string) catalog.Offer {
	f := strings.Fields(s)
	o := catalog.Offer{Vendor: val(f[0]), Code: val("#" + f[0] + f[1]), Price: val(money(f[2]))}
	part, pack, _ := strings.Cut(f[1], "*")
	if a, b, box := strings.Cut(part, "+"); box {
		o.Brings = []source.Pick[int]{{Name: a, Val: val(1)}, {Name: b, Val: val(1)}}
	} else {
		o.Part = val(part)
	}
	if n := 0; strings.HasSuffix(pack, "m") {
		mm, err := unit.ParseLength(strings.TrimSuffix(pack, "m") + " m")
		if err != nil {
			panic(err)
		}
		o.Pack = val(catalog.Pack{Length: mm})
	} else if _, err := fmt.Sscan(pack, &n); err == nil {
		o.Pack = val(catalog.Pack{Count: n})
	}
	for _, w := range f[3:] {
		var a, b int
		switch packs, price, isBreak := strings.Cut(w, "@"); {
		case isBreak:
			fmt.Sscan(packs, &a)
			o.Breaks.V = append(o.Breaks.V, val(catalog.Break{Packs: a, Price: money(price)}))
			o.Breaks.Set = true
		case strings.HasPrefix(w, "until"):
			o.Until = val(date(w[5:]))
		case strings.HasPrefix(w, "least"):
			fmt.Sscan(w[5:], &a)
			o.Least = val(a)
		case strings.HasSuffix(w, "d"):
			fmt.Sscan(w[:len(w)-1], &a)
			o.LeadDays = val(a)
		default:
			if n, err := fmt.Sscanf(w, "%d-%dm", &a, &b); n != 2 {
				panic(err)
			}
			o.CutFrom, o.CutTo = val(unit.MM(a*1000)), val(unit.MM(b*1000))
		}
	}
	return o
}

// market reads vendors and offers, one a line; a vendor's line begins with a colon.
func market(text string) *catalog.Offers {
	out := &catalog.Offers{}
	for _, line := range strings.Split(text, "\n") {
		switch line = strings.TrimSpace(line); {
		case line == "":
		case line[0] == ':':
			out.Vendors = append(out.Vendors, vendor(line[1:]))
		default:
			out.Offers = append(out.Offers, offer(line))
		}
	}
	return out
}

// toBuy prints a purchase.
func toBuy(p *bom.Purchase) string {
	var out []string
	for _, r := range p.Rows {
		pack := fmt.Sprint(r.Pack)
		line := fmt.Sprintf("%s %s %d*%s %s:", r.Vendor.ID, r.Parts[0].Part.ID, r.Packs, strings.ReplaceAll(pack, " ", ""), r.Cost)
		for _, of := range r.Parts {
			for _, f := range of.For {
				line += " " + f.Job + " " + strings.ReplaceAll(f.Qty.String(), " ", "")
			}
			if !of.Keep.IsZero() {
				line += " keep " + strings.ReplaceAll(of.Keep.String(), " ", "")
			}
		}
		if !r.OrderBy.IsZero() {
			line += " by " + r.OrderBy.String()[5:]
		}
		for _, l := range r.Late {
			line += " late " + l.Job
		}
		out = append(out, line)
	}
	for _, f := range p.Freight {
		if f.Amount > 0 {
			out = append(out, "freight "+f.Vendor.ID+" "+f.Amount.String())
		}
	}
	for _, u := range p.Unsourced {
		out = append(out, "unsourced "+u.Part+" "+u.Qty.String()+": "+u.Why)
	}
	for _, l := range p.Later {
		out = append(out, "later "+l.Job+" "+l.Qty.String())
	}
	for _, w := range p.Waiting {
		out = append(out, fmt.Sprintf("waiting %s %s<%s", w.Job, w.Qty, w.Order))
	}
	sort.Strings(out)
	total := "total " + p.Total.String()
	if !p.Proved {
		total += " not proved, at least " + p.Bound.String()
	}
	return strings.Join(append(out, total), "\n")
}

func buy(stock *catalog.Stock, premises *catalog.Premises, offers string, t bom.Terms, jobs ...*bom.Demand) *bom.Purchase {
	stock.Today = date("2026-12-01") // a Tuesday
	a := bom.Allocate(jobs, stock, premises, &bom.House{})
	return bom.Buy(a, market(offers), partOf, t)
}

func need(d *bom.Demand, part *catalog.Part, n int) *bom.Demand {
	d.Needs = append(d.Needs, bom.Need{Part: part, Each: n})
	return d
}

func TestBuy(t *testing.T) {
	soon := func(n int, lengths ...float64) *bom.Demand {
		return jobOf("a", "review", "south", "2026-12-15", n, lengths...)
	}
	for _, c := range []struct {
		name, offers string
		stock        catalog.Stock
		jobs         []*bom.Demand
		keeps        []catalog.Keep
		terms        bom.Terms
		want         string
	}{
		{name: "the cheapest that comes in time", offers: ":t\n t NC*1 2.00 4d\n t NC*10 9.00 9d\n t NC*10 8.00 10d", jobs: []*bom.Demand{soon(6)},
			want: "t NC 1*10 9.00: a 6 by 12-01\ntotal 9.00"},
		{name: "what is on the shelf is not bought", offers: ":t\n t NC*1 2.00 4d", stock: catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 4)}}, jobs: []*bom.Demand{soon(6)},
			want: "t NC 2*1 4.00: a 2 by 12-08\ntotal 4.00"},
		{name: "nothing comes in time: the fastest", offers: ":t\n t NC*1 2.00 12d\n t NC*1 1.00 20d", jobs: []*bom.Demand{soon(6)},
			want: "t NC 6*1 12.00: a 6 by 11-26 late a\ntotal 12.00"},
		{name: "a lead nobody knows is not in time", offers: ":t\n t NC*1 2.00\n t NC*1 5.00 4d", jobs: []*bom.Demand{soon(1)},
			want: "t NC 1*1 5.00: a 1 by 12-08\ntotal 5.00"},
		{name: "and taken where there is none else", offers: ":t\n t NC*1 2.00", jobs: []*bom.Demand{soon(1)},
			want: "t NC 1*1 2.00: a 1 late a\ntotal 2.00"},
		{name: "some early, the rest cheap", offers: ":t\n t NC*1 3.00 4d\n t NC*1 1.00 9d", jobs: []*bom.Demand{jobOf("a", "review", "south", "2026-12-09", 2), jobOf("b", "review", "south", "2026-12-22", 5)},
			want: "t NC 2*1 6.00: a 2 by 12-02\nt NC 5*1 5.00: b 5 by 12-08\ntotal 11.00"},
		{name: "an order that comes late is not bought again", offers: ":t\n t NC*1 2.00 12d", stock: catalog.Stock{Open: []catalog.Open{onOrder("PO-1", "NC", 2, "2026-12-16")}}, jobs: []*bom.Demand{soon(3)},
			want: "t NC 1*1 2.00: a 1 by 11-26 late a\nwaiting a 2<PO-1\ntotal 2.00"},
		{name: "but where it comes in time", offers: ":t\n t NC*1 2.00 4d", stock: catalog.Stock{Open: []catalog.Open{onOrder("PO-1", "NC", 2, "2026-12-16")}}, jobs: []*bom.Demand{soon(3)},
			want: "t NC 3*1 6.00: a 3 by 12-08\ntotal 6.00"},
		{name: "or sooner than the order", offers: ":t\n t NC*1 2.00 12d", stock: catalog.Stock{Open: []catalog.Open{onOrder("PO-1", "NC", 2, "2026-12-18")}}, jobs: []*bom.Demand{soon(3)},
			want: "t NC 3*1 6.00: a 3 by 11-26 late a\ntotal 6.00"},
		{name: "a level counts what is free and on its way", offers: ":t\n t NC*1 2.00", keeps: []catalog.Keep{level("NC", 6, 12)},
			stock: catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 6)}, Open: []catalog.Open{onOrder("PO-1", "NC", 1, "2026-12-16")}}, jobs: []*bom.Demand{soon(3)},
			want: "t NC 8*1 16.00: keep 8\ntotal 16.00"},
		{name: "a level that is met buys nothing", offers: ":t\n t NC*1 2.00", keeps: []catalog.Keep{level("NC", 6, 12)}, stock: catalog.Stock{Bins: []catalog.Bin{bin("shop", "shop", 6)}},
			want: "total 0.00"},
		{name: "one pack for a job and a level", offers: ":t\n t NC*10 9.00 4d", keeps: []catalog.Keep{level("NC", 2, 4)}, jobs: []*bom.Demand{soon(6)},
			want: "t NC 1*10 9.00: a 6 keep 4 by 12-08\ntotal 9.00"},
		{name: "a later job waits", offers: ":t\n t NC*1 2.00 4d", jobs: []*bom.Demand{soon(1), jobOf("b", "review", "south", "2027-01-05", 2), jobOf("c", "review", "south", "2027-01-01", 2)},
			want: "later b 2\nt NC 3*1 6.00: a 1 c 2 by 12-08\ntotal 6.00"},
		{name: "unless bought until then", offers: ":t\n t NC*1 2.00 4d", jobs: []*bom.Demand{jobOf("b", "review", "south", "2027-01-05", 2)}, terms: bom.Terms{Until: date("2027-01-04")},
			want: "t NC 2*1 4.00: b 2 by 12-29\ntotal 4.00"},
		{name: "a job without a date is bought", offers: ":t\n t NC*1 2.00", jobs: []*bom.Demand{jobOf("b", "review", "south", "", 2)},
			want: "t NC 2*1 4.00: b 2\ntotal 4.00"},
		{name: "only for the jobs that are asked for", offers: ":t\n t NC*1 2.00 4d", keeps: []catalog.Keep{level("NC", 2, 4)}, terms: bom.Terms{Jobs: map[string]bool{"a": true}},
			jobs: []*bom.Demand{soon(1), jobOf("b", "review", "south", "2026-12-14", 2)}, want: "t NC 1*1 2.00: a 1 by 12-08\ntotal 2.00"},
		{name: "a break is the price of all packs", offers: ":t\n t NC*1 2.00 4d 5@1.50", jobs: []*bom.Demand{soon(4)},
			want: "t NC 5*1 7.50: a 4 by 12-08\ntotal 7.50"},
		{name: "a least number of packs", offers: ":t\n t NC*1 2.00 4d least3\n t NC*1 4.00 4d", jobs: []*bom.Demand{soon(2)},
			want: "t NC 3*1 6.00: a 2 by 12-08\ntotal 6.00"},
		{name: "lines are rounded half up", offers: ":t\n t NC*1 0.0050 4d", jobs: []*bom.Demand{soon(3)}, want: "t NC 3*1 0.02: a 3 by 12-08\ntotal 0.02"},
		{name: "the last day of an offer counts", offers: ":t\n t NC*1 2.00 4d until2026-12-01\n t NC*1 1.00 4d until2026-11-30", jobs: []*bom.Demand{soon(1)},
			want: "t NC 1*1 2.00: a 1 by 12-08\ntotal 2.00"},
		{name: "a part whose only offer has expired", offers: ":t\n t NC*1 1.00 4d until2026-11-30", jobs: []*bom.Demand{soon(1)},
			want: "unsourced NC 1: the offer #tNC*1 of t held until 2026-11-30\ntotal 0.00"},
		{name: "a part nobody sells", offers: ":t", jobs: []*bom.Demand{soon(1)}, want: "unsourced NC 1: nobody offers it\ntotal 0.00"},
		{name: "freight decides between vendors", offers: ":t 5\n:u\n t NC*1 1.00 4d\n u NC*1 2.00 4d", jobs: []*bom.Demand{soon(4)},
			want: "total 8.00\nu NC 4*1 8.00: a 4 by 12-08", terms: bom.Terms{}},
		{name: "free carriage from an amount on", offers: ":t 5 8.00\n t NC*1 2.00 4d", jobs: []*bom.Demand{soon(4)}, want: "t NC 4*1 8.00: a 4 by 12-08\ntotal 8.00"},
		{name: "a spare pack reaches it", offers: ":t 5 10.00\n t NC*1 2.00 4d", jobs: []*bom.Demand{soon(4)}, want: "t NC 5*1 10.00: a 4 by 12-08\ntotal 10.00"},
		{name: "where freight costs more", offers: ":t 5 13.50\n t NC*1 2.00 4d", jobs: []*bom.Demand{soon(4)}, want: "freight t 5.00\nt NC 4*1 8.00: a 4 by 12-08\ntotal 13.00"},
		{name: "a least order", offers: ":t - - 9.00\n t NC*1 2.00 4d", jobs: []*bom.Demand{soon(4)}, want: "t NC 5*1 10.00: a 4 by 12-08\ntotal 10.00"},
		{name: "two parts come up to it", offers: ":t - - 9.00\n:u\n t NC*1 2.00 4d\n t AMP 3.00 4d\n u AMP 2.50 4d", jobs: []*bom.Demand{need(soon(3), amp, 1)},
			want: "t AMP 1*1 3.00: a 1 by 12-08\nt NC 3*1 6.00: a 3 by 12-08\ntotal 9.00"},
		{name: "a box brings both", offers: ":t\n t AMP+PS 600.00 4d\n t PS 18.00 4d\n t AMP 590.00 4d", jobs: []*bom.Demand{need(need(soon(0), amp, 2), power, 3)},
			want: "t AMP 2*1 1200.00: a 2 a 2 by 12-08\nt PS 1*1 18.00: a 1 by 12-08\ntotal 1218.00"},
		{name: "reels for pieces", offers: ":t\n t CX*30m 30.00 4d\n t CX*50m 45.00 4d", jobs: []*bom.Demand{soon(0, 20, 20, 12)},
			want: "t CX 1*50m 45.00: a 40m by 12-08\ntotal 45.00", stock: catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 13)}}},
		{name: "a reel that is bought anyhow takes no piece off what is here", offers: ":t\n t CX*100m 300.00 4d", jobs: []*bom.Demand{soon(0, 20, 30)},
			want: "t CX 1*100m 300.00: a 30m by 12-08\ntotal 300.00", stock: catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 45)}}},
		{name: "cut to length", offers: ":t\n t CX*50m 145.00 4d\n t CX 2.95 4d 10-120m", jobs: []*bom.Demand{soon(0, 29.3, 4)},
			want: "t CX 1*10m 29.50: a 4m by 12-08\nt CX 1*29.3m 86.44: a 29.3m by 12-08\ntotal 115.94"},
		{name: "a break on reels", offers: ":t\n t CX*30m 30.00 4d 2@14.00", jobs: []*bom.Demand{soon(0, 20)}, want: "t CX 2*30m 28.00: a 20m by 12-08\ntotal 28.00"},
		{name: "one reel that comes in time for two jobs", offers: ":t\n t CX*30m 30.00 9d\n t CX*50m 80.00 4d", jobs: []*bom.Demand{jobOf("a", "review", "south", "2026-12-14", 0, 20), jobOf("b", "review", "south", "2026-12-08", 0, 20)},
			want: "t CX 1*50m 80.00: b 20m a 20m by 12-01\ntotal 80.00"},
		{name: "nothing in time for one piece", offers: ":t\n t CX*30m 30.00 9d\n t CX*50m 90.00 8d", jobs: []*bom.Demand{jobOf("a", "review", "south", "2026-12-15", 0, 20), jobOf("b", "review", "south", "2026-12-08", 0, 20)},
			want: "t CX 1*50m 90.00: b 20m a 20m by 11-25 late b\ntotal 90.00"},
		{name: "a reel on order comes late, and none sooner", offers: ":t\n t CX*30m 30.00 20d", stock: catalog.Stock{Open: []catalog.Open{reelOnOrder("PO-1", 30, 1, "2026-12-18")}}, jobs: []*bom.Demand{soon(0, 20, 20)},
			want: "t CX 1*30m 30.00: a 20m by 11-16 late a\nwaiting a 20 m<PO-1\ntotal 30.00"},
		{name: "a piece that only what is here serves in time", offers: ":t\n t CX*30m 30.00 4d", stock: catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 25)}},
			jobs: []*bom.Demand{jobOf("a", "review", "south", "2026-12-15", 0, 20), jobOf("b", "review", "south", "2026-12-03", 0, 20)},
			want: "t CX 1*30m 30.00: a 20m by 12-08\ntotal 30.00"},
		{name: "a later job keeps its reel", offers: ":t\n t CX*30m 30.00 4d", stock: catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 25)}},
			jobs: []*bom.Demand{jobOf("a", "review", "south", "2026-12-15", 0, 20), jobOf("b", "construction", "south", "2027-02-03", 0, 20, 20)},
			want: "t CX 1*30m 30.00: a 20m by 12-08\nlater b 20 m\ntotal 30.00"},
		{name: "a least order of one length", offers: ":t - - 100.00\n t CX 2.95 4d 10-120m", jobs: []*bom.Demand{soon(0, 29.3)},
			want: "t CX 1*33.899m 100.00: a 29.3m by 12-08\ntotal 100.00"},
		{name: "a least order out of reach", offers: ":t - - 900.00\n:u\n t CX 2.95 4d 10-120m\n u CX*30m 300.00 4d", jobs: []*bom.Demand{soon(0, 29.3)},
			want: "total 300.00\nu CX 1*30m 300.00: a 29.3m by 12-08"},
		{name: "a piece longer than any reel", offers: ":t\n t CX*30m 30.00 9d", jobs: []*bom.Demand{soon(0, 31, 30)},
			want: "t CX 1*30m 30.00: a 30m by 12-01\nunsourced CX 31 m: no offer holds a piece of 31 m\ntotal 30.00"},
		{name: "a level of cable is a length in one piece", offers: ":t\n t CX*30m 30.00 9d\n t CX*50m 55.00 9d", keeps: []catalog.Keep{{Part: val("CX"), Shelf: val("shop"), Least: val(catalog.Quantity{Length: 20000}), Fill: val(catalog.Quantity{Length: 40000})}},
			jobs: []*bom.Demand{soon(0, 15)}, stock: catalog.Stock{Tags: []catalog.Tag{tag("R-1", "shop", "shop", 12)}},
			want: "t CX 1*50m 55.00: a 15m keep 28m by 12-01\ntotal 55.00"},
	} {
		premises := yard()
		premises.Keeps = c.keeps
		got := strings.Split(toBuy(buy(&c.stock, premises, c.offers, c.terms, c.jobs...)), "\n")
		want := strings.Split(c.want, "\n")
		sort.Strings(got)
		sort.Strings(want)
		if g, w := strings.Join(got, "\n"), strings.Join(want, "\n"); g != w {
			t.Errorf("%s:\n%s\nwant\n%s", c.name, g, w)
		}
	}
}

func level(part string, least, fill int64) catalog.Keep {
	return catalog.Keep{Part: val(part), Shelf: val("shop"), Least: val(catalog.Quantity{Each: least}), Fill: val(catalog.Quantity{Each: fill})}
}
