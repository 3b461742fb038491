package catalog

import (
	"cmp"
	"slices"
	"strings"
)

// hop is one move of one thing; i says which.
type hop struct {
	from, to Spot
	i        int
}

// chain puts the moves of one thing at one instant into an order in which each
// begins where the one before ended, as far as there is such an order.
func chain(start Spot, hops []hop) []hop {
	slices.SortStableFunc(hops, func(g, h hop) int {
		return cmp.Or(strings.Compare(g.from.Shelf, h.from.Shelf), strings.Compare(g.from.Job, h.from.Job),
			strings.Compare(g.to.Shelf, h.to.Shelf), strings.Compare(g.to.Job, h.to.Job))
	})
	tries := 1000 // more moves of one thing at one instant than people make
	best := longest(start, hops, nil, &tries)
	for _, h := range hops {
		if !slices.ContainsFunc(best, func(g hop) bool { return g.i == h.i }) {
			best = append(best, h)
		}
	}
	return best
}

// longest is the longest chain that continues done from the spot at.
func longest(at Spot, hops, done []hop, tries *int) []hop {
	best := slices.Clone(done)
	for _, h := range hops {
		if *tries == 0 || len(best) == len(hops) {
			break
		}
		if h.from != at || slices.ContainsFunc(done, func(g hop) bool { return g.i == h.i }) {
			continue
		}
		*tries--
		if got := longest(h.to, hops, append(slices.Clone(done), h), tries); len(got) > len(best) {
			best = got
		}
	}
	return best
}
