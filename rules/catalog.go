package rules

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// The catalog rules look at the firm's own parts, used or not: a wrong row is
// wrong in every plan that will use it. A plan shows what stands on its parts.

var catalogRules = []*Rule{catalogFit, catalogRange, catalogTwice}

var catalogTwice = &Rule{
	Name:   "catalog/twice",
	Title:  "Every part is described once",
	Why:    "of two descriptions one is read and the other is believed",
	Basis:  []Basis{{Document: "the project's file formats", Kind: "house"}},
	Weight: Hold,
	CheckFiles: func(f *Firm, r *Report) {
		for _, t := range f.Catalog.Twice {
			partFails(r, t.Other, t.Other.At, "%s is described twice; this one is not read", t.Other.ID).
				Then("keep one of the two").Beside(t.Kept.At, "this one is read")
		}
		byLower := map[string]*catalog.Part{}
		own := f.Catalog.Own()
		slices.SortFunc(own, byPlace)
		for _, p := range own {
			first := byLower[strings.ToLower(p.ID)]
			if first == nil {
				byLower[strings.ToLower(p.ID)] = p
				continue
			}
			if first.At.File != p.At.File { // within one file, reading it says so
				partFails(r, p, p.At, "the IDs %s and %s are equal but for their case", p.ID, first.ID).
					Then("give one of them a name of its own").Beside(first.At, "the other")
			}
		}
	},
}

func byPlace(a, b *catalog.Part) int {
	switch {
	case a.At.Before(b.At):
		return -1
	case b.At.Before(a.At):
		return 1
	}
	return 0
}

// partFails reports something wrong with a part of the catalog.
func partFails(r *Report, p *catalog.Part, at source.Place, says string, args ...any) *Finding {
	f := r.Fails(placeOr(at, p.At), "part."+p.ID, says, args...)
	f.Part = p.ID
	return f
}

// partUnknowable reports something of a part of the catalog that cannot be
// assessed.
func partUnknowable(r *Report, p *catalog.Part, at source.Place, says string, args ...any) *Finding {
	f := r.Unknown(placeOr(at, p.At), "part."+p.ID, says, args...)
	f.Part = p.ID
	return f
}
