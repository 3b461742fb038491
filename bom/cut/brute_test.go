package cut

import (
	"fmt"
	"math"
	"math/rand/v2"
	"slices"
	"testing"
)

// verdict is what a plan is judged by, in order.
type verdict struct {
	short  []int
	price  int64
	opened int
	scrap  int64
}

func compare(a, b verdict, scrapFirst bool) int {
	// An earlier piece that is kept counts more than all later ones.
	in := func(s []int, i int) int {
		if slices.Contains(s, i) {
			return 1
		}
		return 0
	}
	for i := range 16 {
		if d := in(a.short, i) - in(b.short, i); d != 0 {
			return d
		}
	}
	if a.price != b.price {
		return int(a.price - b.price)
	}
	if a.opened != b.opened && (!scrapFirst || a.scrap == b.scrap) {
		return a.opened - b.opened
	}
	return int(a.scrap - b.scrap)
}

// brute tries every assignment of pieces to stocks.
func brute(t Task) verdict {
	type opened struct {
		stock int
		used  int64
	}
	best := verdict{price: math.MaxInt32}
	for i := range t.Pieces {
		best.short = append(best.short, i)
	}
	var bins []opened
	var short []int
	var try func(i int)
	try = func(i int) {
		if i == len(t.Pieces) {
			v := verdict{short: slices.Clone(short), opened: len(bins)}
			n := make([]int, len(t.Stocks))
			for _, b := range bins {
				n[b.stock]++
				if left := t.Stocks[b.stock].Length - b.used; left < t.Usable {
					v.scrap += left
				}
			}
			for s, k := range n {
				if k > 0 {
					v.price += t.Stocks[s].Price * int64(max(k, t.Stocks[s].Least))
				}
			}
			if compare(v, best, t.ScrapFirst) < 0 {
				best = v
			}
			return
		}
		p := t.Pieces[i]
		need := p.Length + t.Allowance
		for b := range bins {
			s := bins[b].stock
			if bins[b].used+need <= t.Stocks[s].Length && (p.On == nil || slices.Contains(p.On, s)) {
				bins[b].used += need
				try(i + 1)
				bins[b].used -= need
			}
		}
		for s := range t.Stocks {
			once := !t.Stocks[s].Many && slices.ContainsFunc(bins, func(b opened) bool { return b.stock == s })
			if once || need > t.Stocks[s].Length || p.On != nil && !slices.Contains(p.On, s) {
				continue
			}
			bins = append(bins, opened{s, need})
			try(i + 1)
			bins = bins[:len(bins)-1]
		}
		short = append(short, i)
		try(i + 1)
		short = short[:len(short)-1]
	}
	try(0)
	return best
}

func randomTask(rng *rand.Rand, pieces int) Task {
	t := Task{Allowance: rng.Int64N(2), Usable: rng.Int64N(6), ScrapFirst: rng.IntN(2) == 0}
	stocks := 1 + rng.IntN(4)
	for i := range stocks {
		s := Stock{ID: fmt.Sprint("s", i), Length: 4 + rng.Int64N(14)}
		if rng.IntN(2) == 0 {
			s.Many, s.Price, s.Least = true, 1+rng.Int64N(9), rng.IntN(4)
		} else if rng.IntN(4) == 0 {
			s.Price = rng.Int64N(5)
		}
		t.Stocks = append(t.Stocks, s)
	}
	for i := range pieces {
		p := Piece{ID: fmt.Sprint("p", i), Length: 1 + rng.Int64N(9)}
		if rng.IntN(3) == 0 {
			p.On = []int{}
			for s := range stocks {
				if rng.IntN(2) == 0 {
					p.On = append(p.On, s)
				}
			}
		}
		t.Pieces = append(t.Pieces, p)
	}
	return t
}

func verdictOf(p Plan) verdict {
	return verdict{p.Short, p.Price, len(p.Opened), p.Scrap}
}

// Every assignment of small tasks is tried: masks, remnants, least packs, shortages.
func TestAgainstEveryAssignment(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 7))
	short := 0
	for i := range 1500 {
		task := randomTask(rng, 1+rng.IntN(7))
		p := task.Plan()
		if err := task.Check(p); err != nil {
			t.Fatalf("%d: %v\n%+v\n%+v", i, err, task, p)
		}
		want := brute(task)
		if compare(verdictOf(p), want, task.ScrapFirst) != 0 || !p.Proved {
			t.Fatalf("%d: got %+v, proved %t, want %+v\n%+v", i, verdictOf(p), p.Proved, want, task)
		}
		if len(p.Short) > 0 {
			short++
		}
	}
	if short < 50 {
		t.Errorf("only %d tasks with shortages", short)
	}
}
