package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
)

var fileRules = []*Rule{fileSyntax, fileKey, fileValue, fileMerge}

// The file rules say what reading a file met. They stand on every file of the
// workspace alike.

var fileSyntax = fileRule("file/syntax", "A file is TOML that every reader reads alike",
	"what one reader takes for a length another takes for nothing, and the crew gets the wrong cable",
	source.Syntax, Basis{Document: "TOML 1.0.0, and the common subset described in the formats", Kind: "standard", Proof: "read"})

var fileKey = fileRule("file/key", "Every key is known, and every key that is needed is there",
	"a key with a slip in it is a figure that nobody checks",
	source.Key, Basis{Document: "the project's file formats", Kind: "house"})

var fileValue = fileRule("file/value", "Every value has its type, unit and range, and every reference leads somewhere",
	"a length in feet read as metres, or a name that leads nowhere, is found out on the roof",
	source.Value, Basis{Document: "the project's file formats", Kind: "house"})

var fileMerge = fileRule("file/merge", "Nothing is left behind by a merge",
	"two branches each had a reason; what stands twice has lost one of them",
	source.Merge, Basis{Document: "the project's file formats", Kind: "house"})

func fileRule(name, title, why string, kind source.ProblemKind, basis Basis) *Rule {
	return &Rule{
		Name: name, Title: title, Why: why, Basis: []Basis{basis}, Weight: Hold,
		Check: func(c *Case, r *Report) {
			for _, p := range c.Problems {
				reportProblem(r, kind, p, "job")
			}
			if kind == source.Value && c.Graph != nil {
				for _, h := range c.Graph.Holes {
					reportHole(r, h, bom.BadRef)
				}
			}
		},
		CheckFiles: func(f *Firm, r *Report) {
			for _, p := range f.Problems {
				if x := reportProblem(r, kind, p.Problem, p.On); x != nil {
					x.Part = p.Part
				}
			}
		},
	}
}

func reportProblem(r *Report, kind source.ProblemKind, p source.Problem, on string) *Finding {
	if p.Kind != kind {
		return nil
	}
	f := r.Fails(p.At, on, "%s", p.Says).Then("%s", p.Do)
	for _, also := range p.Also {
		f.Beside(also, "it stands here too")
	}
	return f
}

// reportHole turns the holes of some kinds into findings.
func reportHole(r *Report, h bom.Hole, kinds ...bom.HoleKind) {
	for _, k := range kinds {
		if h.Kind != k {
			continue
		}
		f := r.Fails(h.At, h.On, "%s", h.Says).Then("%s", h.Do)
		for _, also := range h.Also {
			f.Beside(also, "see here")
		}
	}
}
