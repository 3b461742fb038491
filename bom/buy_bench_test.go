package bom_test

import (
	"fmt"
	"math/rand/v2"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
)

// largeRun is so many counted parts and pieces of cable for forty jobs, at four vendors.
func largeRun(seed uint64, parts, pieces int) (*bom.Allocation, *catalog.Offers, func(string) *catalog.Part) {
	rng := rand.New(rand.NewPCG(seed, 4))
	byID := map[string]*catalog.Part{"CX": coax}
	var text strings.Builder
	for i, v := range []string{"t", "u", "v", "w"} {
		fmt.Fprintf(&text, ":%s %d.00 %d.00 50.00\n", v, 12+4*i, 400+200*i)
	}
	jobs := make([]*bom.Demand, 40)
	for i := range jobs {
		jobs[i] = jobOf(fmt.Sprintf("j%02d", i), "review", "south", fmt.Sprintf("2026-12-%02d", 8+rng.IntN(20)), 0)
	}
	for i := range parts {
		p := &catalog.Part{ID: fmt.Sprintf("P%03d", i), Kind: val("connector")}
		byID[p.ID] = p
		price := 200 + rng.IntN(9000)
		for _, v := range []string{"t", "u", "v", "w"} {
			if rng.IntN(3) > 0 {
				m := price * (80 + rng.IntN(40)) / 100
				fmt.Fprintf(&text, "%s %s*%d %d.%02d %dd\n", v, p.ID, []int{1, 1, 5, 10}[rng.IntN(4)], m/100, m%100, 2+rng.IntN(12))
			}
		}
		for _, j := range rng.Perm(len(jobs))[:1+rng.IntN(4)] {
			need(jobs[j], p, 1+rng.IntN(5))
		}
	}
	for i, reel := range []string{"30", "50", "100", "152", "305"} {
		fmt.Fprintf(&text, "%s CX*%sm %d.00 3d\n", []string{"t", "u"}[i%2], reel, []int{69, 105, 189, 265, 489}[i])
	}
	lengths := make([][]float64, len(jobs))
	for range pieces {
		j := rng.IntN(len(jobs))
		lengths[j] = append(lengths[j], float64(15+rng.IntN(600))/10)
	}
	for i, l := range lengths {
		jobs[i].Needs = append(jobs[i].Needs, jobOf("", "", "", "", 0, l...).Needs...)
	}
	stock := &catalog.Stock{Today: date("2026-12-01")}
	for i := range 10 {
		stock.Tags = append(stock.Tags, tag(fmt.Sprint("R-", i), "shop", "shop", float64(2+rng.IntN(48))))
	}
	return bom.Allocate(jobs, stock, yard(), &bom.House{}), market(text.String()), func(id string) *catalog.Part { return byID[id] }
}

// A large purchase holds, and its bound is near.
func TestBuyLarge(t *testing.T) {
	for seed := range uint64(3) {
		a, offers, look := largeRun(seed, 120, 200)
		p := bom.Buy(a, offers, look, bom.Terms{})
		if err := checkBuy(p, a, offers, 0); err != nil {
			t.Fatal(err)
		}
		if p.Total > p.Bound+p.Bound/100 {
			t.Errorf("%s, and no less than %s: more than a hundredth apart", p.Total, p.Bound)
		}
		t.Logf("%d lines, %s, at least %s, proved %t", len(p.Rows), p.Total, p.Bound, p.Proved)
	}
}

// Where many vendors sell a lot, and many pieces are cut, it ends, and what it says of
// the price is true.
func TestBuyOfMany(t *testing.T) {
	var text strings.Builder
	for i := range 40 {
		fmt.Fprintf(&text, ":v%d %d\n", i, 5+i*7%11)
		for j := range 5 {
			fmt.Fprintf(&text, "v%d CX*%dm %d.00 3d\nv%d NC*%d %d.00 3d\n", i, 50+(i*j)%9*25, 60+(i*13+j*29)%17*20, i, 1+(i+j)%25, 2+(i*5+j)%40)
		}
	}
	lengths := make([]float64, 500)
	for i := range lengths {
		lengths[i] = float64(30+i*37%400) / 10
	}
	job := jobOf("a", "review", "south", "2026-12-22", 300, lengths...)
	stock := &catalog.Stock{Today: date("2026-12-01")}
	a, offers := bom.Allocate([]*bom.Demand{job}, stock, yard(), &bom.House{}), market(text.String())
	p := bom.Buy(a, offers, partOf, bom.Terms{})
	if err := checkBuy(p, a, offers, 0); err != nil {
		t.Fatal(err)
	}
	if p.Proved {
		t.Error("proved, so it was no hard case")
	}
	t.Logf("%d lines, %s, at least %s", len(p.Rows), p.Total, p.Bound)
}

func benchmarkBuy(b *testing.B, parts, pieces int) {
	a, offers, look := largeRun(1, parts, pieces)
	for b.Loop() {
		bom.Buy(a, offers, look, bom.Terms{})
	}
}

func BenchmarkBuy120And200(b *testing.B) { benchmarkBuy(b, 120, 200) }
func BenchmarkBuy300And500(b *testing.B) { benchmarkBuy(b, 300, 500) }
