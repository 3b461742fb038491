package cut

import (
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"testing"
	"time"
)

func readJSON(t testing.TB, name string, into any) {
	t.Helper()
	raw, err := os.ReadFile(filepath.Join("..", "..", "testdata", "cutting", name))
	if err != nil {
		t.Fatal(err)
	}
	if err := json.Unmarshal(raw, into); err != nil {
		t.Fatal(err)
	}
}

func readTask(t testing.TB, name string) Task {
	t.Helper()
	var job struct {
		Allowance int64 `json:"cut_allowance_mm"`
		Usable    int64 `json:"usable_remnant_mm"`
		Pieces    []struct {
			Length int64 `json:"length_mm"`
			Qty    int   `json:"qty"`
		} `json:"pieces"`
		Reels []struct {
			Length int64 `json:"length_mm"`
			Price  int64 `json:"price_cents"`
		} `json:"reels"`
		Remnants []int64 `json:"remnants_mm"`
	}
	readJSON(t, name+".json", &job)
	task := Task{Allowance: job.Allowance, Usable: job.Usable}
	for _, p := range job.Pieces {
		for range p.Qty {
			task.Pieces = append(task.Pieces, Piece{ID: fmt.Sprint("p", len(task.Pieces)), Length: p.Length})
		}
	}
	for i, r := range job.Reels {
		task.Stocks = append(task.Stocks, Stock{ID: fmt.Sprint("reel", i), Length: r.Length, Price: r.Price, Many: true})
	}
	for i, l := range job.Remnants {
		task.Stocks = append(task.Stocks, Stock{ID: fmt.Sprint("R-", i), Length: l})
	}
	return task
}

type optimum struct {
	Name   string `json:"name"`
	Pieces int    `json:"pieces"`
	Cost   int64  `json:"optimal_cost_cents"`
	Scrap  int64  `json:"best_scrap_mm"`
}

// The ten jobs come with optima proved by other means.
func TestProvedOptima(t *testing.T) {
	var optima []optimum
	readJSON(t, "optima.json", &optima)
	if len(optima) != 10 {
		t.Fatalf("%d optima, want 10", len(optima))
	}
	for _, o := range optima {
		task := readTask(t, o.Name)
		start := time.Now()
		p := task.Plan()
		t.Logf("%s: %d pieces, %d opened, scrap %d (best known %d), %v", o.Name, len(task.Pieces), len(p.Opened), p.Scrap, o.Scrap, time.Since(start))
		if err := task.Check(p); err != nil {
			t.Errorf("%s: %v", o.Name, err)
		}
		if p.Price != o.Cost || !p.Proved || len(p.Short) > 0 {
			t.Errorf("%s: price %d, bound %d, proved %t, short %v; the optimum is %d", o.Name, p.Price, p.Bound, p.Proved, p.Short, o.Cost)
		}
		task.ScrapFirst = true
		p = task.Plan()
		t.Logf("%s: scrap %d with %d opened", o.Name, p.Scrap, len(p.Opened))
		if len(task.Pieces) <= exactPieces && p.Scrap != o.Scrap {
			t.Errorf("%s: scrap %d, want %d", o.Name, p.Scrap, o.Scrap)
		}
	}
}

// A textbook example of the cutting-stock problem (from memory): 73 stock pieces.
func TestTextbook(t *testing.T) {
	task := Task{Stocks: []Stock{{ID: "bar", Length: 5600, Price: 1, Many: true}}}
	for _, d := range [][2]int{{1380, 22}, {1520, 25}, {1560, 12}, {1710, 14}, {1820, 18}, {1880, 18}, {1930, 20},
		{2000, 10}, {2050, 12}, {2100, 14}, {2140, 16}, {2150, 18}, {2200, 20}} {
		for range d[1] {
			task.Pieces = append(task.Pieces, Piece{Length: int64(d[0])})
		}
	}
	p := task.Plan()
	if err := task.Check(p); err != nil {
		t.Fatal(err)
	}
	if p.Price != 73 || !p.Proved {
		t.Errorf("price %d, bound %d, proved %t; want 73, proved", p.Price, p.Bound, p.Proved)
	}
}
