package show

import (
	"fmt"
	"slices"
	"strings"

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
