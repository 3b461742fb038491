package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules"
)

// mostChanges is how many changes of one job a comment shows before it folds.
const mostChanges = 8

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
