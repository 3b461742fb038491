//go:build !race

package show_test

// everySlip: all of them.
const everySlip = 1
