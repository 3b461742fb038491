package show

import (
	"strings"

	"driploop/rules/limits"
)

type codeJSON struct {
	Code       string        `json:"code"`
	Title      string        `json:"title"`
	Instrument string        `json:"instrument"`
	Edition    string        `json:"edition"`
	Checked    string        `json:"checked"`
	Embedded   bool          `json:"embedded"`
	Rows       []codeRowJSON `json:"rows"`
	Cautions   []string      `json:"cautions"`
}

type codeRowJSON struct {
	ID         string             `json:"id"`
	Says       string             `json:"says"`
	Compare    string             `json:"compare"`
	Figure     string             `json:"figure"` // as its file writes it
	Steps      []stepJSON         `json:"steps"`
	Constants  map[string]float64 `json:"constants"`
	Inputs     []string           `json:"inputs"`
	Instrument string             `json:"instrument"`
	Section    string             `json:"section"`
	Edition    string             `json:"edition"`
	Kind       string             `json:"kind"`
	Proof      string             `json:"proof"`
	Caution    string             `json:"caution"`
	Note       string             `json:"note"`
}

// stepJSON is a figure that holds up to a value of the row's input; the last one
// may have no end.
type stepJSON struct {
	To     *float64 `json:"to"`
	Figure string   `json:"figure"`
}

func codeTopic(c *limits.Code) *Topic {
	out := codeJSON{c.ID, c.Title.V, c.Instrument.V, c.Edition.V, day(c.Checked), c.Embedded, []codeRowJSON{}, plainWords(c.Cautions)}
	page := Document{Title: c.ID, Blocks: []Block{{Text: []string{sentence(c.Title.V + own(c.Embedded)), instrument(c.Instrument.V, c.Edition.V, day(c.Checked))}}}}
	rows := Block{Head: "Rows"}
	for i := range c.Rows {
		r := &c.Rows[i]
		rows.Items = append(rows.Items, Item{r.ID.V, codeRowText(r)})
		out.Rows = append(out.Rows, codeRowData(r))
	}
	page.Blocks = append(page.Blocks, rows)
	if len(c.Cautions) > 0 {
		mind := Block{Head: "Mind"}
		for _, t := range out.Cautions {
			mind.Items = append(mind.Items, Item{Text: t})
		}
		page.Blocks = append(page.Blocks, mind)
	}
	return &Topic{page, out}
}

func codeRowText(r *limits.CodeRow) string {
	out := r.Explain()
	if steps := stepsOf(r); len(steps) > 0 {
		var words []string
		for _, s := range steps {
			if s.To == nil {
				words = append(words, "above that "+s.Figure)
				continue
			}
			words = append(words, "up to "+plainNumber(*s.To)+" "+r.Unit.V+" "+s.Figure)
		}
		out += ". By steps: " + strings.Join(words, ", ")
	}
	if len(r.Figures) > 0 {
		var words []string
		for _, f := range r.Figures {
			words = append(words, f.Name+" "+plainNumber(f.Val.V))
		}
		out += ". Constants: " + strings.Join(words, ", ")
	}
	if len(r.Inputs.V) > 0 {
		out += ". It needs " + strings.Join(plainWords(r.Inputs.V), ", ")
	}
	if r.Caution.Set {
		out += ". " + sentence(r.Caution.V)
	}
	return sentence(out)
}

func codeRowData(r *limits.CodeRow) codeRowJSON {
	out := codeRowJSON{r.ID.V, r.Says.V, r.Compare.V, r.Figure(), stepsOf(r), map[string]float64{}, plainWords(r.Inputs.V),
		r.Instrument.V, r.Section.V, r.Edition.V, r.Kind.V, r.Proof.V, r.Caution.V, r.Note.V}
	for _, f := range r.Figures {
		out.Constants[f.Name] = f.Val.V
	}
	return out
}

func stepsOf(r *limits.CodeRow) []stepJSON {
	out := []stepJSON{}
	for _, s := range r.Steps {
		j := stepJSON{Figure: plainNumber(s.Value.V)}
		if s.Length.Set {
			j.Figure = s.Length.V.String()
		}
		if s.To.Set {
			j.To = &s.To.V
		}
		out = append(out, j)
	}
	return out
}
