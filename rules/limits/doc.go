// Package limits holds what a plan is measured against as data: limit profiles of
// radio authorities and codes for grounding, clearance and wind.
//
// A profile is one TOML file. Its limit rows are linear in what a plan knows:
//
//	value = c0 + kf·log10(f/MHz) + kr·RSSI + km·MSCL + kb·BSCL
//
// so a new country is a file and no code. A row says by its selectors where it
// applies, by its clause where it comes from, and by its proof how sure that is.
// Match finds the rows for a question, Least computes them and keeps the least.
// A row with an unknown input, or one of which nobody can tell whether it applies,
// is listed as open: it is not assessed, and never a pass.
//
// Beside the rows a profile says which spectrum it permits, which papers it asks
// for, at which field people may stand, how high a fixed antenna may be, and what
// a plan cannot show at all. A code is rows that the grounding and building rules
// look up by ID.
//
// Builtin has the embedded profiles and codes, each parsed when it is first asked
// for. Load puts those of a workspace in front and reports what they override.
// The package compares figures; it never says that an install is lawful or safe.
package limits
