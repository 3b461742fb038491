//go:build race

package source

import "time"

// bound is how long reading one file may take while the race detector, which
// slows everything down some ten times, looks on.
const bound = 5 * time.Second
