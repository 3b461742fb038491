// Package unit holds the quantities of the trade as types: ratios and levels,
// frequencies and spans of spectrum, lengths, temperatures, speeds, conductor
// sizes, money and days. Each has one way to be read from a plan file's string
// and one way to be printed; arithmetic that would be nonsense does not compile.
package unit
