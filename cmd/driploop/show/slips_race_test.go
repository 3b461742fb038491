//go:build race

package show_test

// everySlip: the race detector makes each ten times as dear, and looks for other things.
const everySlip = 10
