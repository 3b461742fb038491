package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/rules"
)

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
		w.gone(b, j)
		return b
	}
	found := j.Findings
	if j.Broken != "" {
		b.add("only", "%s; nothing but its file was looked at.", j.Broken)
		found = w.unseen(b, found)
	}
	w.found(b, found)
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

// gone says what goes with a plan that is taken out: nobody put right what was found on
// it, so that is counted and not called cleared.
func (w *redWords) gone(b *redBlock, j *rules.JobChange) {
	n := rules.Counts{}
	for _, m := range j.Findings {
		n.Count(m.Finding)
	}
	b.worse = n.Holds > 0
	b.add("plan", "It is taken out, with all that was claimed for it and all that was found on it: %s.", tally(n))
	for _, x := range j.Wasted {
		b.worse = true
		b.add("done", "Of no use any more: %s (%s).", x.Says, placeWords(x.At.Path(), x.At.Line()))
	}
	for _, m := range j.Takeoff {
		b.hide("takes", "%s: %s", clip(m.Part, mostName), wasNow(m.Was, m.Now, w.r.Feet))
	}
}

// unseen counts what was found on a plan of which only the file is looked at now, and
// returns what else there is to say.
func (w *redWords) unseen(b *redBlock, moved []rules.MovedFound) (rest []rules.MovedFound) {
	n := rules.Counts{}
	for _, m := range moved {
		if m.Now == "" {
			n.Count(m.Finding)
		} else {
			rest = append(rest, m)
		}
	}
	if len(rest) < len(moved) {
		b.add("lost", "What was found on it before is not looked at any more: %s.", tally(n))
	}
	return rest
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
