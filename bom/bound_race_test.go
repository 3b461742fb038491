//go:build race

package bom_test

import "time"

// bound is how long following one plan may take while the race detector, which slows
// everything down some ten times, looks on.
const bound = 10 * time.Second

// wildPlans is how many random plans are dressed.
const wildPlans = 1_000
