package rules

import (
	"fmt"
	"slices"
	"strings"
	"sync"
)

// Weight says what a finding means for the work.
type Weight int

const (
	Off   Weight = iota // not reported; only as an override
	Note                // worth knowing
	Punch               // put right before handover
	Hold                // work must not go on
)

var weightWords = [...]string{"off", "note", "punch", "hold"}

// String is the word of the trade.
func (w Weight) String() string { return weightWords[w] }

// Outcome says what a rule found.
type Outcome int

const (
	Fails   Outcome = iota + 1 // against the rule
	AtWorst                    // inside at nominal figures, beyond within tolerance
	Unknown                    // an input is missing: not assessed
	Advice                     // not against the rule, but worth saying
)

var outcomeWords = [...]string{"", "fails", "at-worst", "unknown", "advice"}

// String is the outcome's word in JSON.
func (o Outcome) String() string { return outcomeWords[o] }

// Rule is one thing that plans, or the workspace's own files, are held against.
type Rule struct {
	Name    string // area/name
	Title   string // what must hold, in one line
	Why     string // what goes wrong on site where it does not
	Caution string // printed with its findings where someone can get hurt
	Basis   []Basis
	Weight  Weight // of a plain failure
	Lighter string // which failures weigh less, for the documentation
	Grave   bool   // concerns limits or safety: what is not assessed weighs more

	// Check looks at one plan. CheckFiles looks at the workspace's own files. A
	// rule has at least one of them, or it has CheckShelf alone: then it is of scope
	// firm, looks at the shelf and what plans take of it, and stands on stock files
	// and plans as it finds fit.
	Check      func(*Case, *Report)
	CheckFiles func(*Firm, *Report)
	CheckShelf func(*Shelf, *Report)

	tellOnce sync.Once
	told     []string
}

// Basis is a document that a rule stands on.
type Basis struct {
	Document string // with section
	Edition  string
	Kind     string // code, standard, practice, house
	Proof    string // read, copy, memory; "" where the firm itself is the source
}

// String prints the document with what is known of it.
func (b Basis) String() string {
	s := b.Document
	var more []string
	for _, m := range []string{b.Edition, b.Kind} {
		if m != "" && m != "house" {
			more = append(more, m)
		}
	}
	if b.Proof != "" {
		more = append(more, proofWords(b.Proof))
	}
	if len(more) > 0 {
		s += " (" + strings.Join(more, "; ") + ")"
	}
	return s
}

// proofWords says how a figure was come by.
func proofWords(p string) string {
	switch p {
	case "read":
		return "read in the text"
	case "copy":
		return "read in a copy"
	case "memory":
		return "from memory, compare with the text"
	}
	return p
}

// practice is the basis of what the trade does without a document.
func practice(what string) Basis { return Basis{Document: what, Kind: "common practice"} }

// house is the basis of what the firm asks of itself.
func house(key string) Basis { return Basis{Document: "house figure " + key, Kind: "house"} }

// basisText is the basis as findings print it, put into words once. The list is
// shared; what changes it makes its own.
func (r *Rule) basisText() []string {
	r.tellOnce.Do(func() {
		for _, b := range r.Basis {
			r.told = append(r.told, b.String())
		}
	})
	return slices.Clip(r.told)
}

// Firm reports a rule of scope firm: it needs the shelf, and so all plans.
func (r *Rule) Firm() bool { return r.CheckShelf != nil }

// Area is the part of the name before the slash.
func (r *Rule) Area() string {
	area, _, _ := strings.Cut(r.Name, "/")
	return area
}

// Guarded reports a rule whose waivers need a name, a reason and a date, because
// what it is about can hurt someone or break the law.
func (r *Rule) Guarded() bool {
	switch r.Area() {
	case "exposure", "gain", "ground":
		return true
	}
	return r.Name == "power/fuse" || r.Name == "build/clearance"
}

// WeightOf is what an outcome of the rule weighs at a stage of the job, before the
// workspace's override.
func (r *Rule) WeightOf(o Outcome, stage string) Weight {
	return r.weigh(&Finding{Outcome: o}, stage)
}

// weigh is the one table from which every finding gets its weight.
func (r *Rule) weigh(f *Finding, stage string) Weight {
	switch f.Outcome {
	case Fails:
		w := r.Weight
		if f.override != nil {
			w = *f.override
		}
		if f.lighter != 0 {
			w = min(w, f.lighter)
		}
		return w
	case AtWorst:
		return Punch
	case Unknown:
		switch {
		case !r.Grave:
			return Note
		case stage == "construction" || stage == "as-built":
			return Hold
		}
		return Punch
	}
	return Note
}

// valid says what a rule lacks, or "".
func (r *Rule) valid() string {
	area, name, ok := strings.Cut(r.Name, "/")
	switch {
	case !ok || area == "" || name == "" || strings.ToLower(r.Name) != r.Name:
		return "its name is not area/name"
	case r.Title == "" || r.Why == "":
		return "it has no title or no reason"
	case len(r.Basis) == 0:
		return "it has no basis"
	case r.Weight == Off:
		return "it has no weight"
	case r.Check == nil && r.CheckFiles == nil && r.CheckShelf == nil:
		return "it checks nothing"
	case r.Firm() && (r.Check != nil || r.CheckFiles != nil):
		return "it is of both scopes"
	}
	return ""
}

// validate holds that a list of rules is whole and names none twice.
func validate(list []*Rule) error {
	seen := map[string]bool{}
	for _, r := range list {
		if lack := r.valid(); lack != "" {
			return fmt.Errorf("rule %q: %s", r.Name, lack)
		}
		if seen[r.Name] {
			return fmt.Errorf("rule %q is listed twice", r.Name)
		}
		seen[r.Name] = true
	}
	return nil
}
