package show

import (
	"fmt"
	"slices"

	"driploop/rules"
)

// mostBins is how many shelves and reels are listed before a comment folds.
const mostBins = 6

// others is what the change means for jobs whose plans it leaves alone.
func (w *redWords) others() *redBlock {
	b := &redBlock{head: "Other jobs", worse: true}
	for _, o := range w.r.Others {
		name := clip(o.Job, mostName) + whenAndWho(o.On, o.Crew)
		for _, m := range o.Short {
			b.add("shelf", "%s: %s", name, shortWords(m))
		}
		for _, g := range groupFound(o.Findings) {
			m := g.worst
			switch {
			case m.How.Worse() && !said(o, m):
				b.add("new", "%s: %s, by %s: %s%s.", name, m.Now, m.Charge, m.Says, g.also())
			case m.How.Worse():
				b.hide("new", "%s: %s, by %s: %s%s.", name, m.Now, m.Charge, m.Says, g.also())
			default:
				b.hide("cleared", "%s: %s, %s: %s%s.", name, m.Was, byWhat(m.Charge), m.Says, g.also())
			}
		}
	}
	return b
}

// said reports a finding of another job that needs no line in the open: a note, or a
// shortage that has its line.
func said(o rules.OtherJob, m rules.MovedFound) bool {
	short := m.Rule.Name == "stock/short" || m.Rule.Name == "stock/late"
	return m.Weight == rules.Note || short && slices.ContainsFunc(o.Short, func(s rules.MovedShort) bool { return m.On == "part."+s.Part })
}

// past names the rows of stock history that are not as they were.
func (w *redWords) past() *redBlock {
	b := &redBlock{head: "The past was rewritten", worse: true}
	for _, p := range w.r.Past {
		where := placeWords(p.File, p.Line)
		if p.How == "deleted" {
			b.add("deleted", "%s: %s, was %s", where, clip(p.Row, mostName), p.Was)
			continue
		}
		b.add("edited", "%s: %s, %s becomes %s", where, clip(p.Row, mostName), p.Was, p.Now)
	}
	if len(b.items) > 0 {
		b.add("do", "Books are kept by adding rows; what was counted from these rows is counted anew.")
	}
	return b
}

// rulers lists what plans are held against otherwise than they were.
func (w *redWords) rulers() *redBlock {
	b := &redBlock{head: "Rulers", worse: true}
	for _, c := range w.r.Changes {
		if c.Charge == rules.ToRulers {
			b.add("ruler", "%s", changeWords(c))
		}
	}
	if len(b.items) > 0 {
		b.add("mind", "A limit of an authority is not the firm's to raise; this tool does not say that a row is right.")
	}
	return b
}

// files lists what else the workspace's own files say otherwise, and what rules find
// on them.
func (w *redWords) files() *redBlock {
	b := &redBlock{head: "The workspace's own files"}
	w.found(b, w.r.Workspace)
	var rest []rules.Change
	for _, c := range w.r.Changes {
		if c.Charge != rules.ToRulers {
			rest = append(rest, c)
		}
	}
	w.changes(b, rest)
	return b
}

// shelf says what lies where otherwise than it did.
func (w *redWords) shelf() *redBlock {
	b := &redBlock{head: "Stock"}
	if w.r.NewRows > 0 {
		b.add("rows", "%s.", words(w.r.NewRows, "new row", "new rows"))
	}
	for i, m := range w.r.Bins {
		name := clip(m.Part, mostName)
		if m.Tag != "" {
			name += " on " + clip(m.Tag, mostName)
		}
		text := fmt.Sprintf("%s at %s: %s", name, clip(m.Where, mostName), wasNow(m.Was, m.Now, w.r.Feet))
		if i < mostBins {
			b.add("bin", "%s", text)
		} else {
			b.hide("bin", "%s", text)
		}
	}
	if len(b.items) == 0 && len(w.r.Jobs) > 0 && len(w.r.Others) == 0 && w.noShorts() {
		b.add("shelf", "No effect.")
	}
	return b
}

func (w *redWords) noShorts() bool {
	for _, j := range w.r.Jobs {
		if len(j.Short) > 0 || !j.SaysSame && len(j.Wasted) > 0 {
			return false
		}
	}
	return true
}

// cost says what the change costs.
func (w *redWords) cost() *redBlock {
	k := w.r.Cost
	b := &redBlock{head: "Cost"}
	if !k.Known || w.terms.NoPrices {
		return b
	}
	if k.Value[0] != k.Value[1] && len(w.r.Jobs) > 1 {
		b.add("value", "Parts of the jobs concerned, at the cheapest offers without freight: %s %s, before %s (%s).", k.Value[1], k.Currency, k.Value[0], signedMoney(k.Value[1]-k.Value[0]))
	}
	if k.ToBuy[0] != k.ToBuy[1] {
		text := fmt.Sprintf("To buy for them and for the other jobs above: %s %s, before %s (%s), freight in it %s", k.ToBuy[1], k.Currency, k.ToBuy[0], signedMoney(k.ToBuy[1]-k.ToBuy[0]), k.Freight[1])
		if !k.Proved {
			text += "; a cheaper purchase may exist"
		}
		b.add("to buy", "%s.", text)
	}
	return b
}
