package show

import (
	"fmt"
	"unicode"
	"unicode/utf8"

	"driploop/rules"
)

// ruleWeights is what the outcomes of a rule weigh.
type ruleWeights struct {
	Fails        string `json:"fails"` // before the workspace's override
	AtWorst      string `json:"at_worst"`
	Unknown      string `json:"unknown"`
	UnknownBuilt string `json:"unknown_from_construction"`
	Advice       string `json:"advice"`

	Override *overrideJSON `json:"-"`
}

// overrideJSON is what the workspace makes a plain failure weigh.
type overrideJSON struct {
	Weight  string `json:"weight"`
	Because string `json:"because"`
	File    string `json:"file"`
	Line    int    `json:"line"`
}

func (b *Basis) weights(r *rules.Rule) ruleWeights {
	of := func(o rules.Outcome, stage string) string { return r.WeightOf(o, stage).String() }
	w := ruleWeights{of(rules.Fails, "review"), of(rules.AtWorst, "review"), of(rules.Unknown, "review"),
		of(rules.Unknown, "construction"), of(rules.Advice, "review"), nil}
	if b.Override == nil {
		return w
	}
	if o := b.Override(r.Name); o != nil && o.Weight.Set {
		w.Override = &overrideJSON{o.Weight.V, o.Because.V, o.At.Path(), o.At.Line()}
	}
	return w
}

// now is what a plain failure weighs here.
func (w ruleWeights) now() string {
	if w.Override != nil {
		return w.Override.Weight
	}
	return w.Fails
}

// fails says what a plain failure weighs, and what it weighs here.
func (w ruleWeights) fails() string {
	if w.Override != nil {
		return fmt.Sprintf("%s, here %s", w.Fails, w.Override.Weight)
	}
	return w.Fails
}

type ruleJSON struct {
	Rule     string        `json:"rule"`
	Title    string        `json:"title"`
	Why      string        `json:"why"`
	Shelf    bool          `json:"needs_shelf"`
	Weights  ruleWeights   `json:"weights"`
	Lighter  string        `json:"lighter"`
	Override *overrideJSON `json:"override"`
	Guarded  bool          `json:"waiver_needs_by_because_until"`
	Basis    []basisJSON   `json:"basis"`
	Caution  string        `json:"caution"`
}

type basisJSON struct {
	Document string `json:"document"`
	Edition  string `json:"edition"`
	Kind     string `json:"kind"`
	Proof    string `json:"proof"`
}

func (b *Basis) rule(r *rules.Rule) *Topic {
	w := b.weights(r)
	out := ruleJSON{Rule: r.Name, Title: r.Title, Why: r.Why, Shelf: r.Firm(), Weights: w, Lighter: r.Lighter, Override: w.Override,
		Guarded: r.Guarded(), Basis: []basisJSON{}, Caution: r.Caution}
	page := Document{Title: r.Name, Blocks: []Block{{Text: []string{sentence(r.Title), sentence(r.Why)}}, weightBlock(r, w)}}
	if w.Override != nil {
		page.Blocks = append(page.Blocks, Block{Head: "Changed by the workspace", Text: []string{w.Override.says()}})
	}
	stands := Block{Head: "It stands on"}
	for _, d := range r.Basis {
		stands.Items = append(stands.Items, Item{Text: d.String()})
		out.Basis = append(out.Basis, basisJSON{d.Document, d.Edition, d.Kind, d.Proof})
	}
	page.Blocks = append(page.Blocks, stands)
	if r.Caution != "" {
		page.Blocks = append(page.Blocks, Block{Head: "Mind", Text: []string{sentence(r.Caution)}})
	}
	return &Topic{page, out}
}

func (o *overrideJSON) says() string {
	what := "A plain failure weighs " + o.Weight
	if o.Weight == rules.Off.String() {
		what = "The rule is off and says nothing at all"
	}
	return fmt.Sprintf("%s (%s, line %d). Why: %s", what, o.File, o.Line, o.Because+ending(o.Because))
}

func weightBlock(r *rules.Rule, w ruleWeights) Block {
	unknown := w.Unknown
	if w.UnknownBuilt != w.Unknown {
		unknown += "; " + w.UnknownBuilt + " from stage construction on"
	}
	block := Block{Head: "What it weighs", Items: []Item{
		{"fails", w.fails()},
		{"at worst", w.AtWorst + ", where it holds at nominal figures and not within their tolerance"},
		{"not assessed", unknown},
		{"advice", w.Advice},
	}}
	if r.Lighter != "" {
		block.Items = append(block.Items, Item{"lighter", sentence(r.Lighter)})
	}
	if r.Firm() {
		block.Items = append(block.Items, Item{"needs", "the shelf, and so every plan of the workspace"})
	}
	if r.Guarded() {
		block.Items = append(block.Items, Item{"waiver", "only with by whom, why and until when; the caution is printed all the same"})
	}
	return block
}

// sentence makes a line of a sentence: a capital at its start, a full stop behind.
func sentence(s string) string {
	r, n := utf8.DecodeRuneInString(s)
	if n == 0 {
		return s
	}
	return string(unicode.ToUpper(r)) + s[n:] + ending(s)
}
