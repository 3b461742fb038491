package show

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules"
)

// mostChanges is how many changes of one job a comment shows before it folds.
const mostChanges = 8

// job is what the change means for one job.
func (w *redWords) job(j *rules.JobChange) *redBlock {
	b := &redBlock{head: w.jobHead(j)}
	switch {
	case j.SaysSame:
		b.add("same", "No change in meaning: only its layout or comments are other.")
	case j.How == "concerned":
		b.hide("why", "Its file is as it was; parts or rulers that it stands on are not.")
	case j.How == "renamed":
		b.add("renamed", "It was %s.", clip(j.WasJob, mostName))
	case j.How == "new":
		b.add("plan", "It is new; nothing of it was assessed before.")
	case j.How == "gone":
		b.add("plan", "It is taken out, and with it all that is claimed for it.")
	}
	if j.Broken != "" {
		b.add("only", "%s; nothing but its file was looked at.", j.Broken)
	}
	w.found(b, j.Findings)
	w.baseHolds(b, j)
	for _, m := range j.Waivers {
		b.worse = true
		b.add("waiver", "%s", waiverWords(m))
	}
	w.changes(b, j.Changes)
	w.figures(b, j)
	for _, t := range j.Tools {
		b.worse = true
		b.add("tool", "%s asks for %s; crew %s has none.", clip(t.Part, mostName), clip(t.Tool, mostName), clip(t.Crew, mostName))
	}
	for _, m := range j.Short {
		b.worse = b.worse || !m.Now.IsZero() && m.Was.Less(m.Now)
		b.add("shelf", "%s", shortWords(m))
	}
	for _, x := range j.Wasted {
		b.worse = true
		b.add("done", "Of no use any more: %s (%s).", x.Says, placeWords(x.At.Path(), x.At.Line()))
	}
	for _, m := range j.Takeoff {
		b.hide("takes", "%s: %s", clip(m.Part, mostName), wasNow(m.Was, m.Now, w.r.Feet))
	}
	if v := j.Value; v[0] != v[1] && !w.terms.NoPrices {
		text := fmt.Sprintf("Its parts are worth %s %s, before %s (%s)", v[1], w.r.Cost.Currency, v[0], signedMoney(v[1]-v[0]))
		if j.ValueByFacts != 0 {
			text += fmt.Sprintf("; prices alone make %s", signedMoney(j.ValueByFacts))
		}
		b.add("value", "%s.", text)
	}
	if n := j.Standing; len(b.items) > 0 && n.Holds+n.Punch+n.Notes+n.Waived > 0 {
		b.add("stands", "As before: %s.", tally(n))
	}
	return b
}

// baseHolds lists the holds that only the base's rulers see, those left out that are
// said above: cleared because the ruler moved.
func (w *redWords) baseHolds(b *redBlock, j *rules.JobChange) {
	for _, f := range j.BaseHolds {
		said := slices.ContainsFunc(j.Findings, func(m rules.MovedFound) bool {
			return m.Rule == f.Rule && m.On == f.On && m.Band == f.Band && m.Charge == rules.ToRulers
		})
		if !said {
			b.worse = true
			b.add("base", "Under the base's rulers a hold stands that the head's let pass: %s: %s.", heading(f, j.Path), f.Says)
		}
	}
}

// jobHead names a job with what the crew and the clerk go by.
func (w *redWords) jobHead(j *rules.JobChange) string {
	head := clip(j.Job, mostName)
	if j.Title != "" && j.Title != j.Job {
		head += " · " + clip(j.Title, mostName)
	}
	var more []string
	switch j.How {
	case "new":
		more = append(more, "new plan")
	case "gone":
		more = append(more, "plan taken out")
	case "renamed":
		more = append(more, "renamed, was "+clip(j.WasJob, mostName))
	}
	if j.Stage != "" {
		more = append(more, j.Stage)
	}
	if !j.On.IsZero() {
		more = append(more, j.On.String())
	}
	if j.Crew != "" {
		more = append(more, "crew "+clip(j.Crew, mostName))
	}
	if len(more) > 0 {
		head += " (" + strings.Join(more, ", ") + ")"
	}
	return head
}

// found lists what is new or lost, then what is gone and by what.
func (w *redWords) found(b *redBlock, moved []rules.MovedFound) {
	for _, g := range groupFound(moved) {
		m := g.worst
		text := heading(m.Finding, "") + ": " + m.Says + g.also() + "."
		switch m.How {
		case rules.Arisen:
			b.worse = true
			b.add("new", "%s, by %s: %s %s", m.Now, m.Charge, text, doWords(m.Finding))
		case rules.Lost:
			b.worse = true
			was := "assessed before"
			if m.Was != "" {
				was = "before: " + m.Was
			}
			b.add("lost", "%s, %s, by %s: %s", m.Now, was, m.Charge, text)
		case rules.Heavier:
			b.worse = true
			b.add("heavier", "%s, before %s, by %s: %s %s", m.Now, m.Was, m.Charge, text, doWords(m.Finding))
		case rules.Lighter:
			b.worse = b.worse || m.Charge == rules.ToRulers
			b.add("lighter", "%s, before %s, %s: %s", m.Now, m.Was, byWhat(m.Charge), text)
		case rules.Cleared:
			b.worse = b.worse || m.Charge == rules.ToRulers
			b.add("cleared", "%s, %s: %s", m.Was, byWhat(m.Charge), text)
		case rules.Assessed:
			b.hide("known", "Was not assessed and is now, %s: %s", byWhat(m.Charge), heading(m.Finding, "")+" ("+m.Rule.Name+").")
		}
	}
}

func doWords(f *rules.Finding) string {
	if f.Do == "" {
		return "(" + f.Rule.Name + ")"
	}
	return sentence(f.Do) + " (" + f.Rule.Name + ")"
}

// byWhat says what cleared a finding: the install is one thing, a ruler another.
func byWhat(c rules.Charge) string {
	switch c {
	case rules.ToWork:
		return "by the install"
	case rules.ToFacts:
		return "by a fact"
	case rules.ToRulers:
		return "only because the ruler moved"
	}
	return "by what stands beside it"
}

// foundGroup is findings of one rule on one thing that moved alike, in several bands.
type foundGroup struct {
	worst rules.MovedFound
	more  []rules.MovedFound
}

func (g *foundGroup) also() string {
	if len(g.more) == 0 {
		return ""
	}
	var bands []string
	for _, m := range g.more {
		if m.Band != "" {
			bands = append(bands, m.Band)
		}
	}
	if len(bands) == 0 {
		return fmt.Sprintf("; and %d more alike", len(g.more))
	}
	return "; also in " + strings.Join(bands, ", ")
}

func groupFound(moved []rules.MovedFound) []foundGroup {
	type key struct {
		rule, on, was, now string
		how                rules.FoundHow
		charge             rules.Charge
	}
	at := map[key]int{}
	var out []foundGroup
	for _, m := range moved {
		k := key{m.Rule.Name, m.On, m.Was, m.Now, m.How, m.Charge}
		i, known := at[k]
		switch {
		case !known:
			at[k] = len(out)
			out = append(out, foundGroup{worst: m})
		case excess(m.Finding) > excess(out[i].worst.Finding):
			out[i].more = append(out[i].more, out[i].worst)
			out[i].worst = m
		default:
			out[i].more = append(out[i].more, m)
		}
	}
	return out
}

// changes lists what the files say otherwise, by kind.
func (w *redWords) changes(b *redBlock, list []rules.Change) {
	shown := 0
	for _, kind := range []rules.Charge{rules.ToRulers, rules.ToFacts, rules.ToWork} {
		for _, c := range list {
			if c.Charge != kind || c.Price && w.terms.NoPrices {
				continue
			}
			if shown++; shown > mostChanges {
				b.hide(kind.String(), "%s", changeWords(c))
			} else {
				b.add(kind.String(), "%s", changeWords(c))
			}
		}
	}
}

// changeWords is "cable.C1 length: 9 m becomes 22 m".
func changeWords(c rules.Change) string {
	what := clip(c.On, mostName)
	if c.Key != "" {
		what += " " + clip(c.Key, mostName)
	}
	where := ""
	if c.Line > 0 {
		where = " (" + placeWords(c.File, c.Line) + ")"
	}
	switch c.How {
	case "added":
		return fmt.Sprintf("%s is new: %s%s", what, c.Now, where)
	case "gone":
		return fmt.Sprintf("%s is gone, was %s%s", what, c.Was, where)
	case "renamed":
		return fmt.Sprintf("%s is renamed, was %s%s", what, c.Was, where)
	}
	return fmt.Sprintf("%s: %s becomes %s%s", what, c.Was, c.Now, where)
}

func placeWords(path string, line int) string {
	if line == 0 {
		return clip(path, mostName)
	}
	return fmt.Sprintf("%s line %d", clip(path, mostName), line)
}

// mostFigures is how many figures of a job stand in the open.
const mostFigures = 6

// figures lists what moved, each figure once with its worst band and how far it moved
// in the others. What got better is folded away.
func (w *redWords) figures(b *redBlock, j *rules.JobChange) {
	type key struct{ name, on, way string }
	at := map[key][]rules.MovedFigure{}
	var order []key
	for _, m := range j.Figures {
		k := key{m.Name, m.On, m.Way}
		if at[k] == nil {
			order = append(order, k)
		}
		at[k] = append(at[k], m)
	}
	shown := 0
	for _, k := range order {
		if k.name == "EIRP" && at[key{"gain/" + k.way + "-eirp", k.on, k.way}] != nil {
			continue // the limit's own line says it
		}
		worst := at[k][0]
		text := figureLine(worst) + otherBands(at[k][1:])
		if b.worse = b.worse || worst.Beyond || worst.Was.OK && !worst.Now.OK; shown < mostFigures && !worst.Better() {
			b.add("figure", "%s", text)
			shown++
		} else {
			b.hide("figure", "%s", text)
		}
	}
	if len(order) == 0 && j.Largest != nil {
		d, _ := j.Largest.Difference()
		b.add("figure", "No figure moves by more than it may be off (largest: %s, %s %s, of ±%s).", figureName(*j.Largest), signed(d, 2), j.Largest.Unit,
			unit.Fixed(math.Max(j.Largest.Tolerance, 0.05), 2))
	}
}

// otherBands says how far a figure moved in its other bands.
func otherBands(list []rules.MovedFigure) string {
	var out []string
	for _, m := range list {
		d, both := m.Difference()
		switch {
		case both && m.Beyond:
			out = append(out, m.Band+" (past it by "+unit.Fixed(-m.MarginNow.V, 2)+")")
		case both && d == 0 && m.MarginNow.OK:
			out = append(out, m.Band+" (margin "+unit.Fixed(m.MarginNow.V, 2)+")")
		case both:
			out = append(out, m.Band+" "+signed(d, 2))
		case m.Now.OK:
			out = append(out, m.Band+" now known")
		default:
			out = append(out, m.Band+" not known any more")
		}
	}
	if len(out) == 0 {
		return ""
	}
	return " Also " + strings.Join(out, ", ") + "."
}

func figureName(m rules.MovedFigure) string {
	out := m.Name + ", " + clip(m.On, mostName)
	if m.Band != "" {
		out += ", " + m.Band
	}
	if m.Way != "" {
		out += " " + m.Way
	}
	return out
}

func figureLine(m rules.MovedFigure) string {
	var b strings.Builder
	b.WriteString(figureName(m) + ": ")
	d, both := m.Difference()
	switch {
	case both && d == 0:
		fmt.Fprintf(&b, "stays at %s %s", unit.Fixed(m.Now.V, 2), m.Unit)
	case both:
		fmt.Fprintf(&b, "%s becomes %s %s (%s)", unit.Fixed(m.Was.V, 2), unit.Fixed(m.Now.V, 2), m.Unit, signed(d, 2))
	case m.Now.OK:
		fmt.Fprintf(&b, "%s %s, not known before", unit.Fixed(m.Now.V, 2), m.Unit)
	case m.Was.OK:
		fmt.Fprintf(&b, "was %s %s, not known any more", unit.Fixed(m.Was.V, 2), m.Unit)
	}
	if m.LimitNow.OK {
		if m.LimitWas.OK && math.Abs(m.LimitWas.V-m.LimitNow.V) > 0.005 {
			fmt.Fprintf(&b, "; limit %s, was %s", unit.Fixed(m.LimitNow.V, 2), unit.Fixed(m.LimitWas.V, 2))
		} else {
			fmt.Fprintf(&b, "; limit %s", unit.Fixed(m.LimitNow.V, 2))
		}
	} else if m.LimitWas.OK {
		fmt.Fprintf(&b, "; limit was %s, none is known now", unit.Fixed(m.LimitWas.V, 2))
	}
	if m.MarginNow.OK {
		switch {
		case m.Beyond:
			fmt.Fprintf(&b, ", past it by %s", unit.Fixed(-m.MarginNow.V, 2))
		case m.Eaten:
			fmt.Fprintf(&b, ", more than half of the margin is eaten: %s left of %s", unit.Fixed(m.MarginNow.V, 2), unit.Fixed(m.MarginWas.V, 2))
		case m.Back:
			fmt.Fprintf(&b, ", back inside by %s", unit.Fixed(m.MarginNow.V, 2))
		default:
			fmt.Fprintf(&b, ", margin %s", unit.Fixed(m.MarginNow.V, 2))
		}
	}
	if m.Tolerance > 0 {
		fmt.Fprintf(&b, ", ±%s", unit.Fixed(m.Tolerance, 2))
	}
	if m.Charge != rules.Uncharged {
		fmt.Fprintf(&b, "; by %s", m.Charge)
		var split []string
		for c := rules.ToRulers; c <= rules.ToWork; c++ {
			if v := m.By[c]; v != 0 {
				split = append(split, c.String()+" "+signed(v, 2))
			}
		}
		if len(split) > 1 {
			b.WriteString(" (" + strings.Join(split, ", ") + ")")
		}
	}
	return b.String() + "."
}

func signed(v float64, decimals int) string {
	s := unit.Fixed(v, decimals)
	if v > 0 {
		return "+" + s
	}
	return s
}

func signedMoney(m unit.Money) string {
	if m > 0 {
		return "+" + m.String()
	}
	return strings.Replace(m.String(), "-", "−", 1)
}

func wasNow(was, now catalog.Quantity, feet bool) string {
	return quantityWords(was, feet) + " becomes " + quantityWords(now, feet)
}

func quantityWords(q catalog.Quantity, feet bool) string {
	switch {
	case q.IsZero():
		return "none"
	case q.Length != 0 && feet:
		return unit.Fixed(q.Length.Feet(), 1) + " ft"
	}
	return q.String()
}

// shortWords says what a job is short of, and what would bring it.
func shortWords(m rules.MovedShort) string {
	var out string
	part := clip(m.Part, mostName)
	switch {
	case m.Now.IsZero():
		return fmt.Sprintf("%s: no longer short (was short by %s).", part, m.Was)
	case m.Newly():
		out = fmt.Sprintf("%s: newly short by %s", part, m.Now)
	default:
		out = fmt.Sprintf("%s: short by %s, was %s", part, m.Now, m.Was)
	}
	if len(m.Lines) > 0 {
		out += ", no piece for " + clip(strings.Join(m.Lines, ", "), mostName)
	}
	if !m.Needed.IsZero() {
		out += ", needed by " + m.Needed.String()
	}
	if m.Order != "" {
		out += fmt.Sprintf("; %s brings it on %s, too late", clip(m.Order, mostName), m.Day)
	}
	return out + "."
}

// waiverWords is a waiver as a reviewer reads it: what moved, what it accepts, who
// says so, until when and why.
func waiverWords(m rules.MovedWaiver) string {
	out := strings.Join(m.How, ", ") + ": " + m.Rule
	if m.On != "" {
		out += " on " + clip(m.On, mostName)
	}
	if m.Band != "" {
		out += " in " + m.Band
	}
	switch {
	case m.UpTo.OK:
		out += ", up to " + unit.Fixed(m.UpTo.V, 2)
	default:
		out += ", up to any figure"
	}
	if m.UpToWas.OK != m.UpTo.OK || m.UpToWas.V != m.UpTo.V {
		if slices.Contains(m.How, "widened") || slices.Contains(m.How, "narrowed") {
			out += " (was " + map[bool]string{true: unit.Fixed(m.UpToWas.V, 2), false: "any"}[m.UpToWas.OK] + ")"
		}
	}
	if m.Figure.OK {
		out += ", the finding is at " + unit.Fixed(m.Figure.V, 2)
	}
	if m.Weight != "" {
		out += fmt.Sprintf(", it covers %s (%s)", words(m.Covers, "finding", "findings"), m.Weight)
	}
	until := "without a date"
	if !m.Until.IsZero() {
		until = "until " + m.Until.String()
	}
	if !m.UntilWas.IsZero() && m.UntilWas != m.Until {
		until += " (was " + m.UntilWas.String() + ")"
	}
	return out + ", " + until + ", by " + or(m.By, "nobody named") + ": " + or(m.Because, "no reason given")
}
