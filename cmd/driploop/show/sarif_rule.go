package show

import (
	"slices"
	"strings"

	"driploop/rules"
)

type sarifRule struct {
	ID    string       `json:"id"`
	Name  string       `json:"name"`
	Short sarifMessage `json:"shortDescription"`
	Full  sarifMessage `json:"fullDescription"`
	Help  struct {
		Text     SARIF  `json:"text"`
		Markdown string `json:"markdown"`
	} `json:"help"`
	Default    sarifConfiguration `json:"defaultConfiguration"`
	Properties struct {
		Tags     []string `json:"tags"`
		Severity string   `json:"problem.severity"`
	} `json:"properties"`
}

type sarifConfiguration struct {
	Enabled bool   `json:"enabled"`
	Level   string `json:"level,omitempty"`
}

// sarifOverride is what the workspace changes of a rule.
type sarifOverride struct {
	Descriptor struct {
		ID    string `json:"id"`
		Index int    `json:"index"`
	} `json:"descriptor"`
	Configuration sarifConfiguration `json:"configuration"`
}

// sarifRules describes all rules, those that found nothing among them: what was looked
// at is part of the log.
func sarifRules() []sarifRule {
	out := []sarifRule{}
	plain := &Basis{}
	for _, r := range rules.Rules {
		level := sarifLevel(r.Weight)
		s := sarifRule{ID: r.Name, Name: pascal(r.Name), Short: sarifMessage{SARIFOf(sentence(r.Title))}, Full: sarifMessage{SARIFOf(sentence(r.Why))},
			Default: sarifConfiguration{true, level}}
		page := plain.rule(r).Page
		s.Help.Text, s.Help.Markdown = sarifHelp(&page), string(page.Markdown())
		s.Properties.Tags = []string{r.Area()}
		if s.Properties.Severity = level; level == "note" {
			s.Properties.Severity = "recommendation"
		}
		out = append(out, s)
	}
	return out
}

// sarifHelp is a page as lines of plain text.
func sarifHelp(d *Document) SARIF {
	var lines []string
	for _, b := range d.Blocks {
		if b.Head != "" {
			lines = append(lines, string(SARIFOf(b.Head))+":")
		}
		for _, t := range b.Text {
			lines = append(lines, string(SARIFOf(t)))
		}
		for _, it := range b.Items {
			text := it.Text
			if it.Name != "" {
				text = it.Name + ": " + text
			}
			lines = append(lines, "- "+string(SARIFOf(text)))
		}
	}
	return SARIF(strings.Join(lines, "\n"))
}

// pascal is a rule's name in the way in which logs name rules: "GroundArrestor".
func pascal(name string) string {
	var b strings.Builder
	for _, word := range strings.FieldsFunc(name, func(r rune) bool { return r == '/' || r == '-' }) {
		b.WriteString(strings.ToUpper(word[:1]) + word[1:])
	}
	return b.String()
}

// sarifOverrides are the weights that the workspace gives rules.
func sarifOverrides(r *rules.Result) []sarifOverride {
	out := []sarifOverride{}
	for _, w := range r.Weights {
		rule := rules.Find(w.Rule)
		if rule == nil || !w.Weight.Set {
			continue
		}
		var o sarifOverride
		o.Descriptor.ID, o.Descriptor.Index = rule.Name, slices.Index(rules.Rules, rule)
		o.Configuration = sarifConfiguration{true, sarifLevel(rules.WeightNamed(w.Weight.V))}
		if o.Configuration.Level == "none" {
			o.Configuration = sarifConfiguration{Enabled: false}
		}
		out = append(out, o)
	}
	return out
}
