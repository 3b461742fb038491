// Package bom follows one install plan from its file to quantities.
//
// ReadPlan reads every table of the plan file. Resolve looks its parts up in the
// catalog and ties devices, cables and joints into a graph of ports; what does
// not resolve leaves a hole, and work goes on with the rest. From the graph come
// the lines (feeds, legs and links between ports), the places where they cross
// from outdoors to indoors, the bond paths, and the takeoff.
//
// The package makes no findings. Holes and problems are data that package rules
// turns into findings.
package bom
