package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// verdict is one or two sentences that a phone shows before anybody opens the message:
// whether work is held, and which other jobs pay for it.
func (w *redWords) verdict() string {
	r := w.r
	if s := w.nothing(); s != "" {
		return s
	}
	out := []string{w.held(2)}
	if s := w.taken(); s != "" {
		out = []string{w.held(1), s} // both fit the preview
	}
	if len(r.Past) > 0 {
		out = append(out, "The past of the stock was rewritten: "+words(len(r.Past), "row", "rows")+".")
	}
	if s := w.ask(); s != "" {
		out = append(out, s)
	}
	return strings.Join(out, " ")
}

// nothing is the verdict on a change that means nothing, or "".
func (w *redWords) nothing() string {
	r := w.r
	same := 0
	for _, j := range r.Jobs {
		if !j.SaysSame {
			return ""
		}
		same++
	}
	switch {
	case len(r.Changes) > 0 || len(r.Past) > 0 || r.NewRows > 0 || len(r.Others) > 0 || len(r.Workspace) > 0:
		return ""
	case same > 0:
		return "No change in meaning: " + words(same, "plan is", "plans are") + " laid out or commented otherwise."
	}
	return "No change in meaning."
}

// held is whether work is held up, and where; at most so many jobs are named.
func (w *redWords) held(most int) string {
	g := w.r.Gate
	var own, base []string
	for _, j := range w.r.Jobs {
		if j.Holds > 0 {
			own = append(own, short(j.Job))
		}
		if len(j.BaseHolds) > 0 {
			base = append(base, short(j.Job))
		}
	}
	for _, o := range w.r.Others {
		if o.Holds > 0 {
			own = append(own, short(o.Job))
		}
	}
	switch {
	case g.UnderHead > 0:
		return "Held: " + words(g.UnderHead, "hold", "holds") + someOf(" on ", own, most) + "."
	case g.UnderBase > 0 && len(base) > 0:
		return "Held by the base's rulers: " + words(g.UnderBase, "hold", "holds") + someOf(" on ", base, most) + " that the head's own rulers let pass."
	case g.UnderBase > 0:
		return "Held by the base's rulers: " + words(g.UnderBase, "hold", "holds") + "."
	case len(w.names()) == 0:
		return "No plan comes to anything else."
	}
	return "Nothing holds work" + someOf(" on ", w.names(), most) + "."
}

// names are the jobs that something is said of.
func (w *redWords) names() []string {
	var out []string
	for _, j := range w.r.Jobs {
		if moved(j) {
			out = append(out, short(j.Job))
		}
	}
	return out
}

// moved reports a job of which there is something to say: a plan whose file is as it
// was may stand on a changed ruler and come to the same.
func moved(j *rules.JobChange) bool {
	return j.How != "concerned" || len(j.Findings)+len(j.Figures)+len(j.BaseHolds)+len(j.Waivers)+len(j.Short)+len(j.Wasted)+len(j.Takeoff) > 0
}

// short is a name that fits a preview.
func short(s string) string { return clip(s, 24) }

// someOf names the first of a list and counts the rest.
func someOf(lead string, names []string, most int) string {
	if len(names) == 0 {
		return ""
	}
	out := strings.Join(names[:min(most, len(names))], ", ")
	if more := len(names) - most; more > 0 {
		out += fmt.Sprintf(" and %d more", more)
	}
	return lead + out
}

// taken names the other jobs that come to be short because of the change, or short of
// more.
func (w *redWords) taken() string {
	var newly, more []string
	note := func(job string, on unit.Date, crew string, moved []rules.MovedShort) {
		name := short(job) + whenAndWho(on, crew)
		switch {
		case slices.ContainsFunc(moved, func(m rules.MovedShort) bool { return m.Newly() }):
			newly = append(newly, name)
		case slices.ContainsFunc(moved, func(m rules.MovedShort) bool { return m.Was.Less(m.Now) }):
			more = append(more, name)
		}
	}
	for _, o := range w.r.Others {
		note(o.Job, o.On, o.Crew, o.Short)
	}
	for _, j := range w.r.Jobs {
		if j.How == "concerned" { // its own plan asks for no more than before
			note(j.Job, j.On, j.Crew, j.Short)
		}
	}
	if len(newly) > 0 {
		return sentenceIf("Newly short because of it", someOf(": ", newly, 2))
	}
	return sentenceIf("Short of more because of it", someOf(": ", more, 2))
}

func sentenceIf(lead, rest string) string {
	if rest == "" {
		return ""
	}
	return lead + rest + "."
}

func whenAndWho(on unit.Date, crew string) string {
	var out []string
	if !on.IsZero() {
		out = append(out, on.String())
	}
	if crew != "" {
		out = append(out, "crew "+clip(crew, 12))
	}
	if len(out) == 0 {
		return ""
	}
	return " (" + strings.Join(out, ", ") + ")"
}

// ask counts what a reviewer has to look at.
func (w *redWords) ask() string {
	fresh, lost, waivers, eased := 0, 0, 0, 0
	for _, j := range w.r.Jobs {
		for _, m := range j.Findings {
			switch {
			case j.How == "gone":
			case m.How == rules.Lost:
				lost++
			case m.How.Worse():
				fresh++
			case m.Charge == rules.ToRulers:
				eased++
			}
		}
		waivers += len(j.Waivers)
	}
	var out []string
	for _, n := range []struct {
		n         int
		one, many string
	}{{fresh, "new finding", "new findings"}, {lost, "no longer assessed", "no longer assessed"}, {eased, "gone only because a ruler moved", "gone only because a ruler moved"},
		{waivers, "waiver to read", "waivers to read"}} {
		if n.n > 0 {
			out = append(out, words(n.n, n.one, n.many))
		}
	}
	if len(out) == 0 {
		return ""
	}
	return strings.ToUpper(out[0][:1]) + strings.Join(out, ", ")[1:] + "."
}
