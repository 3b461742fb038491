//go:build !race

package rules_test

// every says which of the inputs are taken away: all of them.
const every = 1
