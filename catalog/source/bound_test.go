//go:build !race

package source

import "time"

// bound is how long reading one file may take.
const bound = time.Second
