package main

import (
	"math"
	"runtime"
)

// What an inspection may take beside the workspace itself: what it found and what
// each plan takes of the shelf is kept to the end, some 9 KB a plan, and the plans at
// hand make garbage.
const (
	memoryAPlan  = 10 << 10
	memoryAtHand = 48 << 20
)

// keepSmall keeps the memory of the process, while that many plans are read, near what
// they can need: left alone the collector waits until it has doubled. The limit grows
// with the plans, so that a large workspace does not collect without end. It gives
// back the limit that was; one that the caller's environment sets stays.
func (c *Command) keepSmall(plans int) (release func()) {
	if c.Limit == nil {
		return func() {}
	}
	was := c.Limit(-1)
	if was != math.MaxInt64 {
		return func() {}
	}
	var now runtime.MemStats
	runtime.ReadMemStats(&now)
	c.Limit(int64(now.HeapAlloc) + memoryAtHand + memoryAPlan*int64(plans))
	return func() { c.Limit(was) }
}
