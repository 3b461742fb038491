// Package catalog knows parts: what kinds there are, what each is described by,
// which connectors mate, which bands exist, what vendors offer and what lies on
// the shelf. It carries a generic catalog and the tables of the trade inside; a
// workspace adds its own parts, and the same ID there wins.
//
// A kind of part is one row in kinds.go and one bind function that names its
// keys. The package states what was read and makes no judgement: a cable table
// that misfits its own curve, or a range written backwards, is data here and
// becomes a finding in package rules.
package catalog
