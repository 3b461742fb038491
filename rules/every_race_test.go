//go:build race

package rules_test

// every says which of the inputs are taken away while the race detector, which slows
// everything down some ten times, looks on.
const every = 11
