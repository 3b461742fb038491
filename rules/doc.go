// Package rules decides what a plan is told.
//
// Load reads a workspace once into a Firm: its catalog, shelf, limits, house
// figures and overrides. Inspect reads each plan, resolves it and builds a Case:
// the facts of one plan, computed once. Every rule is a constant value with one
// pure function from a Case to a Report; registry.go lists them all. What a
// report says becomes findings with a weight, waivers are applied, and the whole
// is put into one order.
//
// To add a rule: write its value beside its relatives (mate.go, gain.go, …), add
// it to the list in registry.go, and give it bad, good, boundary and missing
// cases in testdata/rules/<area>-<name>/. A test holds that nothing is forgotten.
//
// Numbers that a regulator, a handbook or the firm may change are not here: they
// are rows of package limits or keys of the house. Every dB is computed in
// package rf.
package rules
