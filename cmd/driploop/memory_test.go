package main

import (
	"math"
	"testing"
)

// The limit grows by what each plan may take, ends with the inspection, and a limit
// of the caller's own stays as it is.
func TestMemoryIsKeptSmall(t *testing.T) {
	limit := int64(math.MaxInt64)
	c := &Command{Limit: func(n int64) int64 {
		was := limit
		if n >= 0 {
			limit = n
		}
		return was
	}}
	release := c.keepSmall(0)
	few := limit
	release()
	if few < memoryAtHand || few > memoryAtHand+1<<30 {
		t.Errorf("without plans the limit is %d", few)
	}
	if limit != math.MaxInt64 {
		t.Errorf("afterwards the limit is %d", limit)
	}
	release = c.keepSmall(1 << 30)
	if limit < memoryAPlan<<30 {
		t.Errorf("with many plans the limit is %d", limit)
	}
	release()
	limit = 1 << 20
	c.keepSmall(10)()
	if limit != 1<<20 {
		t.Errorf("the caller's limit became %d", limit)
	}
	(&Command{}).keepSmall(10)()
}
