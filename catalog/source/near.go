package source

import (
	"sort"
	"strings"
	"unicode/utf8"
)

// Nearest is the known name that got was probably meant to be, or "" where none
// is near: the allowed distance grows with the length of the name, and of equally
// near names the first in alphabetical order is taken.
func Nearest(got string, known []string) string {
	if len(got) > 128 {
		return ""
	}
	x := []rune(strings.ToLower(got))
	best, name := allowedDistance(got)+1, ""
	var c comparison
	for _, k := range known {
		limit := best // what is as near as the best goes before it in the alphabet or is of no use
		if name != "" && k < name {
			limit++
		}
		if n := utf8.RuneCountInString(k); abs(len(x)-n) >= limit {
			continue
		}
		if d := c.distance(x, []rune(strings.ToLower(k)), limit); d < limit {
			best, name = d, k
		}
	}
	return name
}

func allowedDistance(s string) int {
	switch n := utf8.RuneCountInString(s); {
	case n <= 2:
		return 1
	case n <= 5:
		return 2
	default:
		return n / 3
	}
}

// comparison is the room that comparing names takes, used again for each.
type comparison struct{ prev2, prev, cur []int }

// distance counts insertions, deletions, replacements and swaps of neighbours
// (optimal string alignment); it gives up with limit once that is reached.
func (c *comparison) distance(x, y []rune, limit int) int {
	if abs(len(x)-len(y)) >= limit {
		return limit
	}
	if len(c.cur) <= len(y) {
		c.prev2, c.prev, c.cur = make([]int, 2*len(y)+1), make([]int, 2*len(y)+1), make([]int, 2*len(y)+1)
	}
	prev2, prev, cur := c.prev2, c.prev, c.cur
	for j := range len(y) + 1 {
		prev[j] = j
	}
	before := 0 // the least of the row before
	for i := 1; i <= len(x); i++ {
		cur[0] = i
		least := i
		for j := 1; j <= len(y); j++ {
			same := 1
			if x[i-1] == y[j-1] {
				same = 0
			}
			cur[j] = min(prev[j]+1, cur[j-1]+1, prev[j-1]+same)
			if i > 1 && j > 1 && x[i-1] == y[j-2] && x[i-2] == y[j-1] {
				cur[j] = min(cur[j], prev2[j-2]+1)
			}
			least = min(least, cur[j])
		}
		if least >= limit && before >= limit {
			return limit // a row follows from the two before it and is never less
		}
		before = least
		prev2, prev, cur = prev, cur, prev2
	}
	return min(prev[len(y)], limit)
}

func abs(v int) int {
	if v < 0 {
		return -v
	}
	return v
}

// Quote puts a string from a file into quotes for a message, shortened where it
// is long. What it may contain is made harmless where the message is shown.
func Quote(s string) string {
	const most = 60
	if utf8.RuneCountInString(s) > most {
		s = string([]rune(s)[:most]) + "…"
	}
	return `"` + s + `"`
}

// SortProblems puts problems into the order of the document; at one place they
// keep the order in which they were met.
func SortProblems(ps []Problem) {
	sort.SliceStable(ps, func(i, j int) bool { return ps[i].At.Before(ps[j].At) })
}
