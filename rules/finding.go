package rules

import (
	"fmt"
	"math"
	"slices"
	"sort"
	"strings"

	"driploop/catalog/source"
)

// Finding is one thing that a rule has to say, at one place.
type Finding struct {
	Rule    *Rule
	Outcome Outcome
	Weight  Weight
	On      string       // what it stands on: "cable.C1", "device.amp", "job"
	At      source.Place // the key or value at fault
	Says    string       // what was read and what was expected
	Do      string       // what to do about it
	Band    string       // where it is about one band
	Basis   []string
	Figures []Figure
	Related []Related
	Waived  *Settled // the waiver that covers it, or nil
	Part    string   // of findings on the catalog: the part concerned
	Of      string   // of findings that lack something: what is not assessed
	Lacks   string   // and what is lacking

	bands    []string // of a finding that several bands may share
	lighter  Weight   // weighs no more than this
	override *Weight  // of the workspace
	row      *Finding // of a finding on a plan that stands on a stock file as well: that one
	worse    int      // +1: greater figures are worse; −1: smaller ones; 0: no figure to accept
}

// Figure is a named number of a finding; its name carries the unit.
type Figure struct {
	Name  string
	Value float64
}

// Related is another place that belongs to a finding.
type Related struct {
	At   source.Place
	Says string
}

// Report collects what one rule says about one case.
type Report struct {
	rule     *Rule
	findings []*Finding
}

// Fails reports what stands against the rule.
func (r *Report) Fails(at source.Place, on, says string, args ...any) *Finding {
	return r.add(Fails, at, on, says, args)
}

// AtWorst reports what holds at nominal figures and not within their tolerance.
func (r *Report) AtWorst(at source.Place, on, says string, args ...any) *Finding {
	return r.add(AtWorst, at, on, says, args)
}

// Unknown reports what could not be assessed because an input is missing.
func (r *Report) Unknown(at source.Place, on, says string, args ...any) *Finding {
	return r.add(Unknown, at, on, says, args)
}

// Lacking reports a figure that could not be assessed because the plan or the
// catalog lacks something; what is lacking is shown with its place.
func (r *Report) Lacking(at source.Place, on string, lacks []Lack, subject string, args ...any) *Finding {
	of := fmt.Sprintf(subject, args...)
	f := r.Unknown(at, on, "%s is not assessed: it lacks %s", of, lackWords(lacks)).Then("add what is missing")
	f.Of, f.Lacks = of, lackWords(lacks)
	for _, l := range dedupe(lacks) {
		f.Beside(l.At, "what is missing: %s", l.What)
	}
	return f
}

// Advice reports what is worth saying without standing against the rule.
func (r *Report) Advice(at source.Place, on, says string, args ...any) *Finding {
	return r.add(Advice, at, on, says, args)
}

func (r *Report) add(o Outcome, at source.Place, on, says string, args []any) *Finding {
	f := &Finding{Rule: r.rule, Outcome: o, At: at, On: on, Says: fmt.Sprintf(says, args...)}
	f.Basis = r.rule.basisText()
	r.findings = append(r.findings, f)
	return f
}

// Then says what to do about the finding.
func (f *Finding) Then(do string, args ...any) *Finding {
	f.Do = fmt.Sprintf(do, args...)
	return f
}

// With adds a figure; its name carries the unit.
func (f *Finding) With(name string, v float64) *Finding {
	if !math.IsNaN(v) && !math.IsInf(v, 0) {
		f.Figures = append(f.Figures, Figure{name, v})
	}
	return f
}

// Over adds a figure and the limit above which it may not go. A waiver accepts
// the figure up to a value.
func (f *Finding) Over(name string, v float64, limitName string, limit float64) *Finding {
	f.worse = +1
	return f.With(name, v).With(limitName, limit)
}

// Under adds a figure and the limit below which it may not go. A waiver accepts
// the figure down to a value.
func (f *Finding) Under(name string, v float64, limitName string, limit float64) *Finding {
	f.worse = -1
	return f.With(name, v).With(limitName, limit)
}

// Beside adds another place that belongs to the finding.
func (f *Finding) Beside(at source.Place, says string, args ...any) *Finding {
	if !at.IsZero() {
		f.Related = append(f.Related, Related{at, fmt.Sprintf(says, args...)})
	}
	return f
}

// Lighter lets the finding weigh no more than w.
func (f *Finding) Lighter(w Weight) *Finding {
	f.lighter = w
	return f
}

// InBand says which band the finding is about.
func (f *Finding) InBand(band string) *Finding {
	f.Band = band
	return f
}

// inBands stands in what a finding says for the bands that it holds in. Findings
// that differ in nothing but their band are one finding.
const inBands = "\x00"

// AcrossBands says that the finding is one of several that may differ only in
// their band; Says has inBands where the bands belong.
func (f *Finding) AcrossBands(band string) *Finding {
	f.bands = []string{band}
	return f
}

// merged joins the findings that differ only in their band.
func (r *Report) merged() []*Finding {
	if len(r.findings) == 0 {
		return nil
	}
	type key struct {
		at       source.Place
		on, says string
		outcome  Outcome
	}
	first := map[key]*Finding{}
	var out []*Finding
	for _, f := range r.findings {
		k := key{f.At, f.On, f.Says, f.Outcome}
		if one := first[k]; one != nil && f.bands != nil {
			for _, b := range f.bands {
				if !slices.Contains(one.bands, b) {
					one.bands = append(one.bands, b)
				}
			}
			continue
		}
		if f.bands != nil {
			first[k] = f
		}
		out = append(out, f)
	}
	for _, f := range out {
		if f.bands == nil {
			continue
		}
		f.Says = strings.ReplaceAll(f.Says, inBands, list(f.bands))
		f.Of = strings.ReplaceAll(f.Of, inBands, list(f.bands))
		if len(f.bands) == 1 {
			f.Band = f.bands[0]
		}
	}
	return out
}

// By puts the row of a document on which the finding stands before the rule's own
// basis; where that only says that a row of the profile decides, it takes its place.
func (f *Finding) By(basis string) *Finding {
	rest := slices.DeleteFunc(slices.Clone(f.Basis), func(b string) bool { return b == byProfile.String() })
	f.Basis = append([]string{basis}, rest...)
	return f
}

// Replacing states the basis in place of the rule's own.
func (f *Finding) Replacing(basis ...string) *Finding {
	f.Basis = basis
	return f
}

// sortFindings puts findings into one total order: file, place, rule, what they
// stand on, what they say.
func sortFindings(fs []*Finding) {
	sort.SliceStable(fs, func(i, j int) bool {
		a, b := fs[i], fs[j]
		switch {
		case a.At.Path() != b.At.Path():
			return a.At.Path() < b.At.Path()
		case a.At.From != b.At.From:
			return a.At.From < b.At.From
		case a.Rule.Name != b.Rule.Name:
			return a.Rule.Name < b.Rule.Name
		case a.On != b.On:
			return a.On < b.On
		case a.Band != b.Band:
			return a.Band < b.Band
		}
		return a.Says < b.Says
	})
}

// Round is the one rounding through which figures leave the tool: three decimals.
func Round(v float64) float64 {
	r := math.Round(v*1000) / 1000
	if r == 0 {
		return 0 // never minus zero
	}
	return r
}
