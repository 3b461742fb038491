package rules

import (
	"context"
	"sync/atomic"
)

// Progress is told how far work over many plans has come: what is being done, and of
// how many plans it is done; total is 0 of work that nobody can count. It is called
// from several goroutines, once for each plan, and has to be quick.
type Progress func(what string, done, total int)

// What a firm is doing while somebody waits.
const (
	readingPlans = "reading plans"
	sharingOut   = "sharing out the shelf"
	buyingParts  = "working out the purchase"
)

// doing says that work begins which is not counted.
func (f *Firm) doing(what string) {
	if f.progress != nil {
		f.progress(what, 0, 0)
	}
}

// eachPlan does something for each of n plans, in no order, and tells how far it is.
func (f *Firm) eachPlan(ctx context.Context, n int, do func(i int)) error {
	if f.progress == nil {
		return eachSideBySide(ctx, n, do)
	}
	var done atomic.Int64
	f.progress(readingPlans, 0, n)
	return eachSideBySide(ctx, n, func(i int) {
		do(i)
		f.progress(readingPlans, int(done.Add(1)), n)
	})
}
