//go:build race

package main

// The race detector slows a start of the program by much; what it looks for shows
// in fewer of them.
const sameBytesRuns = 4
