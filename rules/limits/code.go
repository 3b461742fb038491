package limits

import (
	"math"
	"slices"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Code is a set of grounding and safety rows that belong to one place of the
// world.
type Code struct {
	ID       string
	At       source.Place
	Embedded bool

	Title      source.Val[string]
	Instrument source.Val[string] // of rows that name none
	Edition    source.Val[string] // of rows that name none
	Checked    source.Val[unit.Date]
	Rows       []CodeRow
	Cautions   []source.Val[string]
}

// CodeRow is one requirement or figure. Exactly one of Length, Value, Sizes,
// Steps and Allowed holds its figure; a row that only requires or forbids has
// none.
type CodeRow struct {
	At         source.Place
	ID         source.Val[string]
	Says       source.Val[string]
	Instrument source.Val[string]
	Section    source.Val[string]
	Edition    source.Val[string]
	Kind       source.Val[string] // code, standard, practice
	Inputs     source.Val[[]source.Val[string]]

	Compare source.Val[string] // at-least, at-most, more-than, less-than, required, forbidden, figures
	Length  source.Val[unit.MM]
	Value   source.Val[float64]
	Unit    source.Val[string]
	Sizes   []source.Pick[unit.Gauge] // least size by material
	Steps   []Step
	Allowed source.Val[[]source.Val[string]]
	Figures []source.Pick[float64] // constants of a formula, by name

	Caution source.Val[string]
	Proof   source.Val[string]
	Note    source.Val[string]
}

// Step is a figure that holds up to a value of the row's input, that value inside.
type Step struct {
	To     source.Val[float64] // absent on the last: without end
	Length source.Val[unit.MM]
	Value  source.Val[float64]
}

// Row finds a row by ID, or nil: a code need not speak about everything.
func (c *Code) Row(id string) *CodeRow {
	for i := range c.Rows {
		if c.Rows[i].ID.V == id {
			return &c.Rows[i]
		}
	}
	return nil
}

// Allows compares a figure in the row's unit. Known is false where the row has no
// such figure.
func (r *CodeRow) Allows(v float64) (ok, known bool) {
	if !r.Value.Set {
		return false, false
	}
	return r.compare(v, r.Value.V)
}

// AllowsLength compares a length.
func (r *CodeRow) AllowsLength(l unit.MM) (ok, known bool) {
	if !r.Length.Set {
		return false, false
	}
	return r.compare(float64(l), float64(r.Length.V))
}

// AllowsSize compares a conductor with the least size of its material. A material
// that the row does not list cannot be decided.
func (r *CodeRow) AllowsSize(material string, size unit.Gauge) (ok, known bool) {
	least, known := r.SizeFor(material)
	if !known {
		return false, false
	}
	return r.compare(size.MM2, least.MM2)
}

// SizeFor is the size that the row gives for a material.
func (r *CodeRow) SizeFor(material string) (unit.Gauge, bool) {
	for _, s := range r.Sizes {
		if s.Name == material && s.Val.Set {
			return s.Val.V, true
		}
	}
	return unit.Gauge{}, false
}

// StepFor is the step that holds at a value of the input, such as the voltage of a
// line; nil above the last one, and where the value is no number.
func (r *CodeRow) StepFor(v float64) *Step {
	if math.IsNaN(v) {
		return nil
	}
	for i := range r.Steps {
		if to := r.Steps[i].To; !to.Set || !rf.Exceeds(v, to.V) {
			return &r.Steps[i]
		}
	}
	return nil
}

// Permits reports whether a word is in the list of what is allowed.
func (r *CodeRow) Permits(word string) (ok, known bool) {
	if !r.Allowed.Set {
		return false, false
	}
	return slices.ContainsFunc(r.Allowed.V, func(v source.Val[string]) bool { return v.V == word }), true
}

// Constant is a figure of the row's formula by name.
func (r *CodeRow) Constant(name string) (float64, bool) {
	for _, f := range r.Figures {
		if f.Name == name && f.Val.Set {
			return f.Val.V, true
		}
	}
	return 0, false
}

// compare is the one place where the words of comparison get their meaning: an
// equal figure passes at-least and at-most, and fails more-than and less-than.
// No number at all passes none of them.
func (r *CodeRow) compare(v, limit float64) (ok, known bool) {
	switch r.Compare.V {
	case "at-least":
		return !rf.Below(v, limit), true
	case "at-most":
		return !rf.Exceeds(v, limit), true
	case "more-than":
		return v > limit+rf.Slack, true
	case "less-than":
		return v < limit-rf.Slack, true
	}
	return false, false
}

func (c *Code) keys(k *source.Keys) {
	c.ID, c.At = k.ID(), k.At()
	source.Need(k, &c.Title, "title", source.Text, "what it is, in a line")
	source.Need(k, &c.Instrument, "instrument", source.Text, "code or standard of rows that name none")
	source.Need(k, &c.Edition, "edition", source.Text, "of that instrument")
	source.Opt(k, &c.Checked, "checked", source.Day, "when the rows were last compared with their sources")
	source.Rows(k, &c.Rows, "row", (*CodeRow).keys, "requirements and figures")
	var cautions source.Val[[]source.Val[string]]
	source.Opt(k, &cautions, "cautions", source.ListOf(source.Text), "what a plan that grounds something is told beside the rows")
	c.Cautions = cautions.V
	seen := map[string]source.Place{}
	for i := range c.Rows {
		r := &c.Rows[i]
		if first, twice := seen[r.ID.V]; twice && r.ID.Set {
			k.Fault(r.ID.At, "the row "+source.Quote(r.ID.V)+" stands already", "give it an ID of its own", first)
		}
		seen[r.ID.V] = r.ID.At
		if !r.Instrument.Set {
			r.Instrument = c.Instrument
			if !r.Edition.Set {
				r.Edition = c.Edition
			}
		}
	}
}

func (r *CodeRow) keys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.ID, "id", source.Name, "how rules look it up")
	source.Need(k, &r.Says, "says", source.Text, "the requirement in our words")
	source.Opt(k, &r.Instrument, "instrument", source.Text, "absent: as the code")
	source.Opt(k, &r.Section, "section", source.Text, "section, clause or table")
	source.Opt(k, &r.Edition, "edition", source.Text, "absent: as the code, unless the row names another instrument")
	source.Need(k, &r.Kind, "kind", source.OneOf("code", "standard", "practice"), "law where adopted, agreed standard, or custom of the trade")
	source.Opt(k, &r.Inputs, "inputs", source.ListOf(source.Text), "what it needs to know")
	source.Need(k, &r.Compare, "compare", source.OneOf("at-least", "at-most", "more-than", "less-than", "required", "forbidden", "figures"), "how the plan's figure stands to the row's")
	source.Opt(k, &r.Length, "length", source.Length, "the figure, where it is a length")
	source.Opt(k, &r.Value, "value", source.Number, "the figure otherwise")
	source.Opt(k, &r.Unit, "unit", source.Text, "what the value, or the input of steps, is counted in")
	source.Each(k, &r.Sizes, "size", byName, source.Size, "least conductor size by material")
	source.Rows(k, &r.Steps, "step", (*Step).keys, "figures by the input, from low to high")
	source.Opt(k, &r.Allowed, "allowed", source.ListOf(source.Text), "what is allowed, by name")
	source.Each(k, &r.Figures, "figures", byName, source.Number, "constants of the formula, by name")
	source.Opt(k, &r.Caution, "caution", source.Text, "printed with a finding")
	source.Need(k, &r.Proof, "proof", proof, "how sure the figure is")
	source.Opt(k, &r.Note, "note", source.Text, "what a reader should know about it")
	k.Demand(source.Condition{When: &comparing, Any: []source.State{source.Given("length"), source.Given("value"), source.Given("size"), source.Given("step")}})
	if !k.Recording() {
		r.wantFigure(k)
	}
}

// comparing is the comparisons that need a figure.
var comparing = source.Holds("compare", "at-least", "at-most", "more-than", "less-than")

// wantFigure refuses a comparison without a figure: it could never fail.
func (r *CodeRow) wantFigure(k *source.Keys) {
	switch r.Compare.V {
	case "at-least", "at-most", "more-than", "less-than":
		if !k.Has("length") && !k.Has("value") && !k.Has("size") && !k.Has("step") {
			k.Missing("length", "or value, size or step: "+r.Compare.V+" compares with one")
		}
	}
}

func (s *Step) keys(k *source.Keys) {
	source.Opt(k, &s.To, "to", source.Number, "holds up to this, inside; absent on the last: without end")
	source.Opt(k, &s.Length, "length", source.Length, "the figure, where it is a length")
	source.Opt(k, &s.Value, "value", source.Number, "the figure otherwise")
}

// byName is the naming of tables that hold figures by a name.
var byName = source.Naming{Check: nameOnly, Form: source.Names.Form}

func nameOnly(s string) error {
	if !source.ValidID(s) {
		return errName
	}
	return nil
}
