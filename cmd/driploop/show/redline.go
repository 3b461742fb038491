package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// RedlinePage is a redline put into words once, for text and for a comment.
type RedlinePage struct {
	Verdict string
	Lead    []string // sentences below it
	Blocks  []redBlock
	Seen    string
}

// redBlock is what there is to say of one job, or of one matter of the workspace.
type redBlock struct {
	head  string
	items []redItem
	worse bool // something in it asks for an answer
}

// redItem is a line behind a word that says what it is about. fold: a comment hides it
// until it is asked for.
type redItem struct {
	tag, text string
	fold      bool
}

func (b *redBlock) add(tag, format string, args ...any) {
	b.items = append(b.items, redItem{tag: tag, text: fmt.Sprintf(format, args...)})
}

func (b *redBlock) hide(tag, format string, args ...any) {
	b.items = append(b.items, redItem{tag: tag, text: fmt.Sprintf(format, args...), fold: true})
}

// RedlineTerms says what a redline shows.
type RedlineTerms struct {
	NoPrices bool   // subcontractors read along
	Comment  bool   // serial numbers and addresses are left out
	Mark     string // by which a comment is found again
}

// NewRedlinePage puts a redline into words.
func NewRedlinePage(r *rules.Redline, t RedlineTerms) *RedlinePage {
	w := &redWords{r: r, terms: t}
	p := &RedlinePage{Verdict: w.verdict()}
	p.Lead = append(p.Lead, w.kinds())
	if s := w.gate(); s != "" {
		p.Lead = append(p.Lead, s)
	}
	p.Lead = append(p.Lead, r.Notices...)
	var jobs []*redBlock
	for _, j := range r.Jobs {
		if moved(j) {
			jobs = append(jobs, w.job(j))
		}
	}
	slices.SortStableFunc(jobs, func(a, b *redBlock) int {
		switch {
		case a.worse == b.worse:
			return 0
		case a.worse:
			return -1
		}
		return 1
	})
	blocks := []*redBlock{w.others(), w.past(), w.rulers()}
	blocks = append(blocks, jobs...)
	blocks = append(blocks, w.files(), w.shelf(), w.cost())
	for _, b := range blocks {
		if b != nil && len(b.items) > 0 {
			p.Blocks = append(p.Blocks, *b)
		}
	}
	p.Seen = w.seen()
	if t.Comment {
		p.scrub(r.Private)
	}
	return p
}

// leastCut is how much of a private text may be left where it was cut.
const leastCut = 3

// scrub takes what is nobody's business out of all that the page says.
func (p *RedlinePage) scrub(private []string) {
	if len(private) == 0 {
		return
	}
	var pairs []string
	for _, s := range private {
		pairs = append(pairs, s, "…")
	}
	for _, s := range private { // what is left of one where a long text was cut
		for r := []rune(s); len(r) > leastCut; r = r[:len(r)-1] {
			pairs = append(pairs, string(r[:len(r)-1])+"…", "…")
		}
	}
	out := strings.NewReplacer(pairs...)
	p.Verdict, p.Seen = out.Replace(p.Verdict), out.Replace(p.Seen)
	for i := range p.Lead {
		p.Lead[i] = out.Replace(p.Lead[i])
	}
	for i := range p.Blocks {
		b := &p.Blocks[i]
		b.head = out.Replace(b.head)
		for j := range b.items {
			b.items[j].text = out.Replace(b.items[j].text)
		}
	}
}

// redWords puts a redline into words.
type redWords struct {
	r     *rules.Redline
	terms RedlineTerms
}

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
	for _, o := range w.r.Others {
		name := short(o.Job) + whenAndWho(o.On, o.Crew)
		switch {
		case slices.ContainsFunc(o.Short, func(m rules.MovedShort) bool { return m.Newly() }):
			newly = append(newly, name)
		case slices.ContainsFunc(o.Short, func(m rules.MovedShort) bool { return m.Was.Less(m.Now) }):
			more = append(more, name)
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
	verdict := "The gate of this run follows the base's: "
	if g.Held {
		verdict += "held."
	} else {
		verdict += "open."
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
