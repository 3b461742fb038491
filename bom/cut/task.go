// Package cut plans in whole millimetres which piece of cable is cut from which
// reel or remnant, and which reels are bought for it.
//
// The number of reels bought is small even where the number of pieces is not, so
// the search runs over purchases, not over patterns: a greedy plan is the upper
// bound, then every purchase that is cheaper is either refuted or found to hold the
// pieces. A plan is proved when every cheaper purchase was refuted.
//
// What is best, in this order:
//
//  1. Shortages: a piece is short only where the pieces before it, kept where
//     possible, leave no way to hold it. No price makes an earlier piece short.
//  2. The least price.
//  3. The fewest opened reels and remnants.
//  4. The least scrap: what is left of opened ones below the usable length.
//  5. Stock in order of length, price and ID; of equal pieces the earlier one
//     comes from the earlier stock.
//
// Task.ScrapFirst puts 4 before 3. Proved is about 1 and 2. Levels 3 and 4 are exact
// up to 14 pieces, unless that takes too many steps; beyond, they are the best of a
// fixed number of tries.
//
// All limits are counts and the seed is fixed: the same task gives the same plan.
package cut

import (
	"cmp"
	"slices"
	"strings"
)

// Numbers beyond these, or below zero, are refused so that no sum can overflow: such
// a piece is short and such a stock is not used.
const (
	maxLength = 1 << 40
	maxPrice  = 1 << 36
	maxLeast  = 1 << 12
	maxStocks = 1 << 13
	maxPieces = 1 << 13
)

// Piece is one run of cable.
type Piece struct {
	ID     string
	Length int64 // millimetres, as installed
	On     []int // indices of the stocks it may be cut from; nil: any
}

// Stock is a reel or remnant, or a size that can be bought.
type Stock struct {
	ID     string
	Length int64 // millimetres
	Price  int64 // smallest unit of money; 0 for what is on hand
	Many   bool  // can be bought any number of times
	Least  int   // where any is bought, at least so many are paid
}

// Task is what is to be cut, and from what.
type Task struct {
	Pieces    []Piece
	Stocks    []Stock
	Allowance int64 // millimetres each piece consumes on top, also the last on a reel
	Usable    int64 // millimetres from which a leftover is kept
	Nodes     int   // limit of the exact search in steps; 0: the default

	Tries int // changes tried for fewer opened stocks and less scrap, beyond the sizes for which they are exact; 0: the default

	ScrapFirst bool // less scrap goes before fewer opened stocks
}

// Cut is one piece and where it comes from.
type Cut struct {
	Piece  int // index in Task.Pieces
	Opened int // index in Plan.Opened
}

// Opened is a reel or remnant that is cut.
type Opened struct {
	Stock  int // index in Task.Stocks
	Copy   int // 0, 1, ... of a stock that is bought several times
	Left   int64
	Usable bool // Left is at least the usable length
}

// Plan is how a task is cut.
type Plan struct {
	Cuts   []Cut // in the order of the pieces
	Opened []Opened
	Short  []int // pieces that fit nowhere, in order
	Price  int64
	Bound  int64 // no plan with these shortages is cheaper
	Scrap  int64 // millimetres
	Proved bool  // the shortages and the price are the least possible
}

// supply is a stock that can be used, in the order of the search.
type supply struct {
	Stock
	index int
}

// kind is all pieces of one length that may be cut from the same stocks.
type kind struct {
	need   int64 // length and allowance
	fits   []bool
	pieces []int
}

// problem is a task with equal pieces merged, longest first, and stocks sorted,
// shortest first.
type problem struct {
	stocks []supply
	kinds  []kind
	usable int64

	scrapFirst bool
	moves      int
	tryA, tryB []int // of the changes that are tried

	base  []load // of the pieces that nothing bought can hold
	all   int    // steps of the exact search
	nodes int    // those that are left; below zero, what quick passes took beyond
	each  int    // steps for one purchase
}

const defaultNodes = 10_000_000

func newProblem(t Task) (*problem, []int) {
	p := &problem{usable: max(0, min(t.Usable, maxLength+1)), scrapFirst: t.ScrapFirst, nodes: t.Nodes, moves: t.Tries}
	if p.moves <= 0 {
		p.moves = defaultMoves
	}
	if p.nodes <= 0 {
		p.nodes = defaultNodes
	}
	p.all, p.each = p.nodes, max(1, p.nodes/16)
	for i, s := range t.Stocks {
		if i < maxStocks && s.Length > 0 && s.Length <= maxLength && s.Price >= 0 && s.Price <= maxPrice && s.Least <= maxLeast {
			p.stocks = append(p.stocks, supply{s, i})
		}
	}
	slices.SortStableFunc(p.stocks, func(a, b supply) int {
		return cmp.Or(cmp.Compare(a.Length, b.Length), cmp.Compare(a.Price, b.Price), strings.Compare(a.ID, b.ID))
	})
	return p, p.merge(t)
}

// merge sorts the pieces into kinds and returns those that no stock can hold.
func (p *problem) merge(t Task) (short []int) {
	byKey := map[string]int{}
	for i, piece := range t.Pieces {
		k, ok := p.kindOf(t, i, piece)
		if !ok {
			short = append(short, i)
			continue
		}
		key := k.key()
		at, seen := byKey[key]
		if !seen {
			at = len(p.kinds)
			byKey[key] = at
			p.kinds = append(p.kinds, k)
		}
		p.kinds[at].pieces = append(p.kinds[at].pieces, i)
	}
	slices.SortFunc(p.kinds, func(a, b kind) int {
		return cmp.Or(cmp.Compare(b.need, a.need), strings.Compare(a.key(), b.key()))
	})
	return short
}

func (p *problem) kindOf(t Task, i int, piece Piece) (kind, bool) {
	inRange := i < maxPieces && piece.Length > 0 && piece.Length <= maxLength && t.Allowance >= 0 && t.Allowance <= maxLength
	if !inRange {
		return kind{}, false
	}
	k := kind{need: piece.Length + t.Allowance, fits: make([]bool, len(p.stocks))}
	on := make([]bool, len(t.Stocks))
	for _, at := range piece.On {
		if at >= 0 && at < len(on) {
			on[at] = true
		}
	}
	some := false
	for j, s := range p.stocks {
		k.fits[j] = s.Length >= k.need && (piece.On == nil || on[s.index])
		some = some || k.fits[j]
	}
	return k, some
}

// key tells kinds apart.
func (k kind) key() string {
	b := make([]byte, 0, len(k.fits)+8)
	for shift := 56; shift >= 0; shift -= 8 {
		b = append(b, byte(k.need>>shift))
	}
	for _, f := range k.fits {
		if f {
			b = append(b, 1)
		} else {
			b = append(b, 0)
		}
	}
	return string(b)
}

// counts is the number of pieces of each kind.
func (p *problem) counts() []int {
	n := make([]int, len(p.kinds))
	for i, k := range p.kinds {
		n[i] = len(k.pieces)
	}
	return n
}

// price of n copies of a stock.
func (s supply) price(n int) int64 {
	if n == 0 {
		return 0
	}
	return s.Price * int64(max(n, s.Least))
}

// Plan finds the best plan for the task; the package says what best means. It never
// fails: what cannot be held is short.
func (t Task) Plan() Plan {
	p, short := newProblem(t)
	more, sure := p.shortages()
	short = append(short, more...)
	slices.Sort(short)
	loads, bound, proved := p.search()
	plan := p.plan(t, loads)
	plan.Short = short
	plan.Proved = proved && sure
	plan.Bound = bound
	return plan
}

// plan writes loads in terms of the task.
func (p *problem) plan(t Task, loads []load) Plan {
	var plan Plan
	next := make([]int, len(p.kinds))
	copies := make([]int, len(p.stocks))
	loads = slices.Clone(loads)
	slices.SortStableFunc(loads, func(a, b load) int {
		return cmp.Or(cmp.Compare(a.stock, b.stock), slices.Compare(a.items, b.items))
	})
	for _, l := range loads {
		if len(l.items) == 0 {
			continue
		}
		o := Opened{p.stocks[l.stock].index, copies[l.stock], l.room, l.room >= t.Usable}
		copies[l.stock]++
		if !o.Usable {
			plan.Scrap += o.Left
		}
		for _, k := range l.items {
			plan.Cuts = append(plan.Cuts, Cut{p.kinds[k].pieces[next[k]], len(plan.Opened)})
			next[k]++
		}
		plan.Opened = append(plan.Opened, o)
	}
	for i, n := range copies {
		plan.Price += p.stocks[i].price(n)
	}
	slices.SortFunc(plan.Cuts, func(a, b Cut) int { return cmp.Compare(a.Piece, b.Piece) })
	return plan
}
