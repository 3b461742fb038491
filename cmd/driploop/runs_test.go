//go:build !race

package main

const sameBytesRuns = 20
