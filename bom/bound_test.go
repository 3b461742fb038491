//go:build !race

package bom_test

import "time"

// bound is how long following one plan may take.
const bound = time.Second

// wildPlans is how many random plans are dressed.
const wildPlans = 10_000
