package show

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/rules"
	"driploop/rules/limits"
)

// Basis is what can be looked up about the tool's own yardsticks: rules, limit
// profiles and codes, kinds of part, and the formats of the files.
type Basis struct {
	Limits   *limits.Set
	Override func(rule string) *rules.Override // of the workspace; it may give nil
}

// Topic is one thing that was looked up.
type Topic struct {
	Page Document
	data any
}

// JSON writes the topic for programs.
func (t *Topic) JSON() ([]byte, error) { return encode(t.data) }

// Find looks a word up. Rules, formats and kinds of part go before profiles and
// codes, which a workspace names; the name of an area is looked up last.
func (b *Basis) Find(word string) *Topic {
	if r := rules.Find(word); r != nil {
		return b.rule(r)
	}
	for _, f := range formats {
		if f.name == word {
			t := formatTopic(f)
			if slices.Contains(areas(), word) {
				for _, of := range b.index(word).Page.Blocks {
					of.Head = "Rules of the area " + of.Head
					t.Page.Blocks = append(t.Page.Blocks, of)
				}
			}
			return t
		}
	}
	for _, k := range catalog.Kinds {
		if k.Name == word {
			return kindTopic(k)
		}
	}
	if p := b.Limits.Profile(word); p != nil {
		return profileTopic(p)
	}
	if c := b.Limits.Code(word); c != nil {
		return codeTopic(c)
	}
	if slices.Contains(areas(), word) {
		return b.index(word)
	}
	return nil
}

// Words lists all that Find knows.
func (b *Basis) Words() []string {
	var formatNames []string
	for _, f := range formats {
		formatNames = append(formatNames, f.name)
	}
	return slices.Concat(rules.Names(), formatNames, catalog.KindNames(), b.Limits.ProfileIDs(), b.Limits.CodeIDs(), areas())
}

// areas lists the areas of rules in the order of their documentation.
func areas() []string {
	var out []string
	for _, r := range rules.Rules {
		if !slices.Contains(out, r.Area()) {
			out = append(out, r.Area())
		}
	}
	return out
}

type indexJSON struct {
	Rules    []ruleLineJSON  `json:"rules"`
	Profiles []limitLineJSON `json:"profiles"`
	Codes    []limitLineJSON `json:"codes"`
	Kinds    []kindLineJSON  `json:"kinds"`
	Formats  []kindLineJSON  `json:"formats"`
}

type ruleLineJSON struct {
	Rule     string        `json:"rule"`
	Title    string        `json:"title"`
	Weight   string        `json:"weight"` // of a plain failure, in this workspace
	Override *overrideJSON `json:"override"`
}

type limitLineJSON struct {
	ID       string `json:"id"`
	Title    string `json:"title"`
	Embedded bool   `json:"embedded"`
}

type kindLineJSON struct {
	Name string `json:"name"`
	Why  string `json:"why"`
}

// Index lists everything.
func (b *Basis) Index() *Topic {
	t := b.index(areas()...)
	out := t.data.(indexJSON)
	t.Page.Title = "What plans are held against"
	profiles, codes := Block{Head: "Limit profiles"}, Block{Head: "Codes"}
	for _, id := range b.Limits.ProfileIDs() {
		p := b.Limits.Profile(id)
		profiles.Items = append(profiles.Items, Item{id, p.Title.V + own(p.Embedded)})
		out.Profiles = append(out.Profiles, limitLineJSON{id, p.Title.V, p.Embedded})
	}
	for _, id := range b.Limits.CodeIDs() {
		c := b.Limits.Code(id)
		codes.Items = append(codes.Items, Item{id, c.Title.V + own(c.Embedded)})
		out.Codes = append(out.Codes, limitLineJSON{id, c.Title.V, c.Embedded})
	}
	kinds, files := Block{Head: "Kinds of part"}, Block{Head: "Formats of the files"}
	for _, k := range catalog.Kinds {
		kinds.Items = append(kinds.Items, Item{k.Name, k.Why})
		out.Kinds = append(out.Kinds, kindLineJSON{k.Name, k.Why})
	}
	for _, f := range formats {
		files.Items = append(files.Items, Item{f.name, f.why})
		out.Formats = append(out.Formats, kindLineJSON{f.name, f.why})
	}
	t.Page.Blocks = append(t.Page.Blocks, profiles, codes, kinds, files)
	t.data = out
	return t
}

// own marks what the workspace brings.
func own(embedded bool) string {
	if embedded {
		return ""
	}
	return " (the workspace's own)"
}

// index lists the rules of some areas.
func (b *Basis) index(of ...string) *Topic {
	out := indexJSON{Rules: []ruleLineJSON{}, Profiles: []limitLineJSON{}, Codes: []limitLineJSON{}, Kinds: []kindLineJSON{}, Formats: []kindLineJSON{}}
	t := &Topic{Page: Document{Title: "Rules of the area " + strings.Join(of, ", ")}}
	for _, area := range of {
		block := Block{Head: area}
		for _, r := range rules.Rules {
			if r.Area() != area {
				continue
			}
			w := b.weights(r)
			line := w.fails() + ": " + r.Title
			block.Items = append(block.Items, Item{r.Name, line})
			out.Rules = append(out.Rules, ruleLineJSON{r.Name, r.Title, w.now(), w.Override})
		}
		t.Page.Blocks = append(t.Page.Blocks, block)
	}
	t.data = out
	return t
}
