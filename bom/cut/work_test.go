package cut

import (
	"fmt"
	"testing"
)

// Thousands of pieces on thousands of reels and sizes take no more steps than twice
// what the search is given: what quick passes take is counted as well.
func TestWorkIsBounded(t *testing.T) {
	for _, c := range []struct {
		name   string
		sizes  int
		shelf  int
		pieces int
	}{{"on the shelf alone", 0, 1000, 2000}, {"and from many sizes", 300, 500, 1500}, {"from many sizes alone", 300, 0, 1500}} {
		task := Task{Usable: 3000, Tries: 10, Nodes: 1_000_000}
		for i := range c.shelf {
			task.Stocks = append(task.Stocks, Stock{ID: fmt.Sprint("R-", i), Length: int64(5000 + i%60*1000)})
		}
		for i := range c.sizes {
			task.Stocks = append(task.Stocks, Stock{ID: fmt.Sprint("T-", i), Length: int64(30000 + i%7*11000), Price: int64(40_0000 + i*i%977*1000), Many: true})
		}
		for i := range c.pieces {
			task.Pieces = append(task.Pieces, Piece{ID: fmt.Sprint(i), Length: int64(3300 + i%40*1000)})
		}
		p, _ := newProblem(task)
		if _, sure := p.shortages(); c.sizes == 0 && (sure || p.nodes > -p.all) {
			t.Errorf("%s: sure %t with %d steps left: this is no hard case, or passes are not counted", c.name, sure, p.nodes)
		}
		p.search()
		one := c.pieces * (c.shelf + c.pieces) / 16 // the last pass may begin with one step left
		if p.nodes < -p.all-maxWalk-4*one {
			t.Errorf("%s: %d steps over of %d", c.name, -p.nodes, p.all)
		}
	}
}
