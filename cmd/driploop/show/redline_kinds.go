package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/rules"
)

// kinds says what kind of change it is, and of what.
func (w *redWords) kinds() string {
	byCharge := map[rules.Charge][]string{}
	note := func(c rules.Change) {
		thing, _, _ := strings.Cut(c.On, ".")
		thing, _, _ = strings.Cut(thing, " ")
		byCharge[c.Charge] = append(byCharge[c.Charge], thing+"\x00"+c.File+" "+c.On)
	}
	for _, c := range w.r.Changes {
		note(c)
	}
	for _, j := range w.r.Jobs {
		for _, c := range j.Changes {
			note(c)
		}
		if j.How == "new" || j.How == "gone" || j.How == "renamed" {
			byCharge[rules.ToWork] = append(byCharge[rules.ToWork], "plan "+j.How+"\x00"+j.Path)
		}
	}
	if w.r.NewRows > 0 || len(w.r.Past) > 0 {
		byCharge[rules.ToFacts] = append(byCharge[rules.ToFacts], "stock\x00")
	}
	var out []string
	for _, c := range []rules.Charge{rules.ToWork, rules.ToFacts, rules.ToRulers} {
		if things := byCharge[c]; len(things) > 0 {
			out = append(out, c.String()+" ("+tallyOf(things)+")")
		} else {
			out = append(out, c.String()+" untouched")
		}
	}
	return "Kind of change: " + strings.Join(out, "; ") + "."
}

// tallyOf counts things by their sort: "2 cable, 1 device".
func tallyOf(things []string) string {
	slices.Sort(things)
	things = slices.Compact(things)
	var names []string
	count := map[string]int{}
	for _, t := range things {
		sort, _, _ := strings.Cut(t, "\x00")
		if count[sort]++; count[sort] == 1 {
			names = append(names, sort)
		}
	}
	var out []string
	for _, n := range names {
		out = append(out, fmt.Sprintf("%d %s", count[n], clip(n, 24)))
	}
	return strings.Join(out, ", ")
}

// gate says by whose rulers work is held, where they differ.
func (w *redWords) gate() string {
	g := w.r.Gate
	if !g.Differs {
		return ""
	}
	verdict := "The gate of this run follows the base's: open."
	switch {
	case g.UnderBase > 0:
		verdict = "The gate of this run follows the base's: held."
	case g.Held:
		verdict = "The base's would let it pass; its own hold it."
	}
	return fmt.Sprintf("The rulers moved. Under the base's this head has %s, under its own %d. %s", words(g.UnderBase, "hold", "holds"), g.UnderHead, verdict)
}

// seen says what was compared.
func (w *redWords) seen() string {
	r := w.r
	name := func(s, id string) string {
		if id != "" && id != s {
			return clip(s, mostName) + " (" + id[:min(12, len(id))] + ")"
		}
		return clip(s, mostName)
	}
	out := fmt.Sprintf("Seen: base %s, head %s, today %s for both.", name(r.Base, r.BaseID), name(r.Head, r.HeadID), r.Today)
	if r.Untouched > 0 {
		out += " " + words(r.Untouched, "plan is", "plans are") + " not concerned."
	}
	return out + " Claims of other open branches are not seen. The tool holds plans against the limits it was given; it does not say that an install may go up."
}
