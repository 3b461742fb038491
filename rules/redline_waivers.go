package rules

import (
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog/unit"
)

// MovedWaiver is a waiver that a reviewer has to look at like code: new, gone, wider
// or narrower than it was, or one that does not do what it says.
type MovedWaiver struct {
	Rule, On, Band  string
	How             []string // new, gone, widened, narrowed, reworded, covers nothing, expired, incomplete, beyond its figure
	By, Because     string
	Until, UntilWas unit.Date
	UpTo, UpToWas   Known[float64]
	Figure          Known[float64] // that of the finding it covers, or would
	Covers          int
	Line            int
	Weight          string // of the finding it covers, "" where none

	worse int // +1: greater figures of the finding are worse, −1: smaller ones, 0: not known
}

// movedWaivers compares the waivers of a plan. Those that are as they were and do
// what they did are left out.
func (c *comparison) movedWaivers(p *pair) []MovedWaiver {
	if p.isGone() || p.broken[atHead] {
		return nil
	}
	var was []bom.Waiver
	if p.plan[atBase] != nil && !p.broken[atBase] {
		was = slices.Clone(p.plan[atBase].Waivers)
	}
	head := c.at(p, steps[3].mix)
	base := c.at(p, steps[0].mix)
	var out []MovedWaiver
	for i := range p.plan[atHead].Waivers {
		w := &p.plan[atHead].Waivers[i]
		j := slices.IndexFunc(was, func(v bom.Waiver) bool { return v.Rule.V == w.Rule.V && v.On.V == w.On.V && v.Band.V == w.Band.V })
		m := waiverIn(w, head.findings, c.firms[atHead].Today)
		if j < 0 {
			m.How = append([]string{"new"}, m.How...)
			out = append(out, m)
			continue
		}
		v := was[j]
		was = slices.Delete(was, j, j+1)
		before := waiverIn(&v, base.findings, c.firms[atHead].Today)
		m.UntilWas, m.UpToWas = before.Until, before.UpTo
		how := widened(&before, &m)
		for _, h := range m.How {
			if !slices.Contains(before.How, h) {
				how = append(how, h)
			}
		}
		if m.How = how; len(how) > 0 {
			out = append(out, m)
		}
	}
	for i := range was {
		m := waiverIn(&was[i], nil, c.firms[atHead].Today)
		m.How, m.UntilWas, m.UpToWas = []string{"gone"}, m.Until, m.UpTo
		out = append(out, m)
	}
	return out
}

// waiverIn is a waiver and what it does to findings. Those of rules of scope firm are
// not told here.
func waiverIn(w *bom.Waiver, findings []*Finding, today unit.Date) MovedWaiver {
	m := MovedWaiver{Rule: w.Rule.V, On: w.On.V, Band: w.Band.V, By: w.By.V, Because: w.Because.V, Until: w.Until.V, Line: w.Rule.At.Line(),
		UpTo: Known[float64]{V: w.UpTo.V, OK: w.UpTo.Set}}
	s := &Settled{Waiver: w}
	s.Lacks = lacks(w, today)
	for _, f := range findings {
		n := s.Covers
		s.wouldCover(f)
		if (s.Covers > n || s.Beyond == f) && len(f.Figures) > 0 && f.worse != 0 && (!m.Figure.OK || f.beyond(m.Figure.V)) {
			m.Figure, m.worse = known(f.Figures[0].Value), f.worse
		}
		if s.Covers > n && (m.Weight == "" || f.Weight > WeightNamed(m.Weight)) {
			m.Weight = f.Weight.String()
		}
	}
	m.Covers = s.Covers
	r := Find(w.Rule.V)
	switch {
	case w.Until.Set && w.Until.V.Before(today):
		m.How = append(m.How, "expired")
	case len(s.Lacks) > 0:
		m.How = append(m.How, "incomplete: it lacks "+strings.Join(s.Lacks, " and "))
	}
	switch {
	case r != nil && r.Firm() || findings == nil:
	case s.Covers == 0 && s.Beyond != nil:
		m.How = append(m.How, "beyond its figure")
	case s.Beyond != nil:
		m.How = append(m.How, "beyond its figure in part")
	case s.Covers == 0:
		m.How = append(m.How, "covers nothing")
	}
	return m
}

// wouldCover is consider without a mark on the finding.
func (w *Settled) wouldCover(f *Finding) {
	was := f.Waived
	w.consider(f)
	f.Waived = was
}

// widened says how the terms of a waiver moved.
func widened(was, now *MovedWaiver) []string {
	wider := was.UpTo.OK && !now.UpTo.OK || was.UpTo.OK && now.UpTo.OK && was.UpTo.V != now.UpTo.V && now.reaches(was) ||
		!was.Until.IsZero() && now.Until.IsZero() || !was.Until.IsZero() && now.Until.After(was.Until)
	narrower := !was.UpTo.OK && now.UpTo.OK || was.UpTo.OK && now.UpTo.OK && was.UpTo.V != now.UpTo.V && !now.reaches(was) ||
		was.Until.IsZero() && !now.Until.IsZero() || !now.Until.IsZero() && now.Until.Before(was.Until)
	var out []string
	if wider {
		out = append(out, "widened")
	}
	if narrower {
		out = append(out, "narrowed")
	}
	if was.By != now.By || was.Because != now.Because {
		out = append(out, "reworded")
	}
	return out
}

// reaches reports a figure accepted that is worse than the one before. Which way is
// worse the findings say that the waiver covers, or covered; without any, greater is.
func (m *MovedWaiver) reaches(was *MovedWaiver) bool {
	if m.worse < 0 || m.worse == 0 && was.worse < 0 {
		return m.UpTo.V < was.UpTo.V
	}
	return m.UpTo.V > was.UpTo.V
}
