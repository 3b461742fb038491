package cut

import (
	"fmt"
	"math/rand/v2"
	"testing"
)

// bigTask has pieces of fifty lengths, five reel sizes and ten remnants.
func bigTask(pieces int, seed uint64) Task {
	rng := rand.New(rand.NewPCG(seed, 1))
	t := Task{Allowance: 50, Usable: 3000}
	for i, r := range [][2]int64{{30000, 6900}, {50000, 10500}, {100000, 18900}, {152000, 26500}, {305000, 48900}} {
		t.Stocks = append(t.Stocks, Stock{ID: fmt.Sprint("reel", i), Length: r[0], Price: r[1] + 100*rng.Int64N(9), Many: true})
	}
	for i := range 10 {
		t.Stocks = append(t.Stocks, Stock{ID: fmt.Sprint("R-", i), Length: 2000 + 100*rng.Int64N(480)})
	}
	var lengths []int64
	for range 50 {
		lengths = append(lengths, 1500+100*rng.Int64N(600))
	}
	for i := range pieces {
		t.Pieces = append(t.Pieces, Piece{ID: fmt.Sprint("p", i), Length: lengths[rng.IntN(50)]})
	}
	return t
}

func benchmark(b *testing.B, pieces int) {
	i := uint64(0)
	worst := 0.0
	for b.Loop() {
		p := bigTask(pieces, i%10).Plan()
		worst = max(worst, float64(p.Price-p.Bound)/float64(p.Bound)*100)
		i++
	}
	b.ReportMetric(worst, "%-above-bound")
}

func BenchmarkPlan200(b *testing.B) { benchmark(b, 200) }
func BenchmarkPlan500(b *testing.B) { benchmark(b, 500) }
