package rules

import (
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Settled is a waiver of a plan and what became of it.
type Settled struct {
	*bom.Waiver
	Stands bool     // it has all that it needs and has not expired
	Lacks  []string // what keeps it from standing
	Covers int      // findings that it covers
	Beyond *Finding // a finding that it would cover but for its figure
}

// alone is the waiver as outputs show it, without the plan that it stands in.
func (w *Settled) alone() *Settled {
	without := func(v source.Val[string]) source.Val[string] { return source.Val[string]{V: v.V, Set: v.Set} }
	return &Settled{Stands: w.Stands, Lacks: w.Lacks, Covers: w.Covers, Waiver: &bom.Waiver{
		Rule: without(w.Rule), On: without(w.On), Band: without(w.Band), Because: without(w.Because), By: without(w.By),
		UpTo:  source.Val[float64]{V: w.UpTo.V, Set: w.UpTo.Set},
		Until: source.Val[unit.Date]{V: w.Until.V, Set: w.Until.Set}}}
}

// settle applies the waivers of a plan to its findings. A covered finding stays
// where it is, marked; it stops holding.
func settle(waivers []bom.Waiver, findings []*Finding, today unit.Date) []*Settled {
	var out []*Settled
	for i := range waivers {
		w := &Settled{Waiver: &waivers[i]}
		w.Lacks = lacks(w.Waiver, today)
		w.Stands = len(w.Lacks) == 0
		for _, f := range findings {
			w.consider(f)
		}
		out = append(out, w)
	}
	return out
}

func (w *Settled) consider(f *Finding) {
	switch {
	case w.Rule.V != f.Rule.Name, w.On.Set && w.On.V != f.On, w.Band.Set && w.Band.V != f.Band:
		return
	case w.UpTo.Set && f.beyond(w.UpTo.V):
		w.Beyond = f
		return
	}
	w.Covers++
	if w.Stands && f.Waived == nil {
		f.Waived = w
	}
}

// beyond reports a finding whose first figure is worse than the one accepted. A
// finding without such a figure is beyond every figure.
func (f *Finding) beyond(accepted float64) bool {
	if f.worse == 0 || len(f.Figures) == 0 {
		return true
	}
	if f.worse > 0 {
		return rf.Exceeds(f.Figures[0].Value, accepted)
	}
	return rf.Below(f.Figures[0].Value, accepted)
}

// lacks lists what a waiver needs and does not have.
func lacks(w *bom.Waiver, today unit.Date) []string {
	var out []string
	if w.Because.V == "" {
		out = append(out, "a reason (because)")
	}
	if w.Until.Set && w.Until.V.Before(today) {
		out = append(out, "a date that is not past: it ended on "+w.Until.V.String())
	}
	r := Find(w.Rule.V)
	if r == nil {
		return append(out, "a rule: there is none named "+source.Quote(w.Rule.V))
	}
	if r.Guarded() {
		if w.By.V == "" {
			out = append(out, "a name (by)")
		}
		if !w.Until.Set {
			out = append(out, "a date (until)")
		}
	}
	return out
}

var paperWaiver = &Rule{
	Name:   "paper/waiver",
	Title:  "A waiver has what it needs, is in date, and covers a finding",
	Why:    "a waiver that has expired or covers nothing lets the next reader believe that somebody decided",
	Basis:  []Basis{practice("review of accepted deviations")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, w := range c.Waivers {
			checkWaiver(w, r)
		}
	},
}

func checkWaiver(w *Settled, r *Report) {
	name := w.Rule.V
	switch {
	case !w.Rule.Set: // its table has a finding
	case !w.Stands:
		r.Fails(w.Waiver.Rule.At, waiverOn(w), "the waiver of %s does not hold: it lacks %s", name, strings.Join(w.Lacks, " and ")).
			Then("complete or renew it, or put the matter right")
	case w.Beyond != nil && w.Covers == 0:
		f := w.Beyond
		if f.worse == 0 || len(f.Figures) == 0 {
			r.Fails(w.UpTo.At, waiverOn(w), "the waiver of %s accepts a figure, and the finding has none", name).
				Then("leave up_to out, and say in because what is accepted").Beside(f.At, "the finding")
			return
		}
		r.Fails(w.UpTo.At, waiverOn(w), "the waiver of %s accepts %s, the finding is at %s", name,
			plainFigure(w.UpTo.V), plainFigure(Round(f.Figures[0].Value))).
			Then("put the matter right, or let somebody accept the new figure").Beside(f.At, "the finding").
			Over("figure", f.Figures[0].Value, "accepted", w.UpTo.V)
	case w.Covers == 0:
		r.Fails(w.Waiver.Rule.At, waiverOn(w), "the waiver of %s covers no finding", name).Then("take it out")
	}
}

func waiverOn(w *Settled) string {
	if w.On.Set {
		return w.On.V
	}
	return "job"
}
