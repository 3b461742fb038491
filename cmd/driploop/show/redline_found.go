package show

import (
	"fmt"
	"strings"

	"driploop/rules"
)

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
