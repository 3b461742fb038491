// Package book writes sheets as a workbook and reads one back that somebody filled
// in. It is the only place that knows the spreadsheet library.
//
// The way through the package: Write lays each sheet out (layout.go), gives every
// cell its text (text.go), its look (style.go) and its formula (formula.go), streams
// the rows, and packs the parts in a fixed order (pack.go), so that the same sheets
// are the same bytes. Read (read.go) takes a workbook apart without the library:
// that fills the gaps between cells with cells, so a file of a few kilobytes that
// names the last row and column would take all memory.
//
// Texts of a workspace come from strangers. They are written as text cells only and
// never become part of a formula, a reference, a name or a print code.
package book
