package show

import (
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules"
	"driploop/rules/limits"
)

// format is one of the formats of a workspace's files.
type format struct {
	name, why string
	describe  func() *source.Record
}

var formats = []format{
	{"plan", "one file a job, plans/JOB.toml", bom.DescribePlan},
	{"workspace", "driploop.toml: the firm, its house figures, shelves and crews", rules.DescribeWorkspace},
	{"offer", "offers/*.toml: vendors and what they sell", catalog.DescribeOffers},
	{"stock", "stock/*/*.toml: what was counted, read, moved and cut", catalog.DescribeSheet},
	{"order", "stock/orders/ORDER.toml: what is on order", catalog.DescribeOrder},
	{"profile", "profiles/*.toml: limit profiles and codes of the firm", limits.Describe},
}

// keyJSON documents one key. The type of a plain value is described; a table has
// keys of its own.
type keyJSON struct {
	Key      string    `json:"key"`
	Required bool      `json:"required"`
	Shape    string    `json:"shape"` // value, table, rows, named
	Type     *typeJSON `json:"type,omitempty"`
	Doc      string    `json:"doc"`
	Keys     []keyJSON `json:"keys,omitempty"`
}

type typeJSON struct {
	Name    string      `json:"name"`
	Example string      `json:"example,omitempty"`
	OneOf   []string    `json:"one_of,omitempty"`
	Min     *float64    `json:"min,omitempty"`
	Max     *float64    `json:"max,omitempty"`
	List    *typeJSON   `json:"list,omitempty"`
	Each    *typeJSON   `json:"each,omitempty"`
	Choice  []*typeJSON `json:"choice,omitempty"` // it may be of any of these
	Keys    []keyJSON   `json:"keys,omitempty"`   // of an inline table
}

var shapeWords = map[source.Shape]string{source.Scalar: "value", source.OneTable: "table", source.RowTables: "rows", source.NamedTables: "named"}

func formatTopic(f format) *Topic {
	record := f.describe()
	t := &Topic{Page: Document{Title: "Format " + f.name, Blocks: []Block{{Text: []string{sentence(f.why)}}}}}
	t.Page.Blocks = append(t.Page.Blocks, tableBlocks("", "", record)...)
	t.data = struct {
		Format string    `json:"format"`
		Why    string    `json:"why"`
		Keys   []keyJSON `json:"keys"`
	}{f.name, f.why, keysJSON(record)}
	return t
}

func kindTopic(k catalog.Kind) *Topic {
	record := catalog.DescribePart(k.Name)
	t := &Topic{Page: Document{Title: "Part of kind " + k.Name, Blocks: []Block{{Text: []string{sentence(k.Why)}}}}}
	t.Page.Blocks = append(t.Page.Blocks, tableBlocks("part.ID", "", record)...)
	t.data = struct {
		Kind string    `json:"kind"`
		Why  string    `json:"why"`
		Keys []keyJSON `json:"keys"`
	}{k.Name, k.Why, keysJSON(record)}
	return t
}

// tableBlocks is a block for each table of a format: the plain keys of the one at
// hand, then the tables below it. path is how its header is written.
func tableBlocks(path, why string, r *source.Record) []Block {
	var own []Item
	var below []Block
	for _, k := range r.Keys {
		if k.Shape == source.Scalar {
			own = append(own, Item{k.Name, keyText(k)})
			below = append(below, inlineBlocks(path, k)...)
			continue
		}
		name := strings.TrimPrefix(path+"."+k.Name, ".")
		switch k.Shape {
		case source.NamedTables:
			name += "." + strings.ToUpper(idWord(k.Name))
		case source.RowTables:
			name = "[" + name + "]"
		}
		below = append(below, tableBlocks(strings.Trim(name, "[]"), header(name)+" "+k.Doc, k.Sub)...)
	}
	if len(own) == 0 && why == "" {
		return below
	}
	block := Block{Head: why, Items: own}
	if why == "" && path != "" {
		block.Head = header(path)
	}
	return append([]Block{block}, below...)
}

// inlineBlocks is a block for each sort of inline table that the value of a key may
// have: "device.ID.copies = { NAME = { … } }".
func inlineBlocks(path string, k source.KeyDoc) []Block {
	var out []Block
	for _, in := range inlines(k.Type, "{ … }") {
		name := strings.TrimPrefix(path+"."+k.Name, ".")
		out = append(out, tableBlocks(name, name+" = "+in.written, in.keys)...)
	}
	return out
}

// inline is an inline table somewhere in a value, and how the value is written around it.
type inline struct {
	written string
	keys    *source.Record
}

func inlines(t source.TypeDoc, written string) []inline {
	var out []inline
	switch {
	case t.Choice != nil:
		for _, c := range t.Choice() {
			out = append(out, inlines(c, written)...)
		}
	case t.Sub != nil:
		out = append(out, inline{written, t.Sub()})
	case t.Each != nil:
		out = inlines(*t.Each, "{ NAME = "+written+" }")
	case t.List != nil:
		out = inlines(*t.List, "["+written+"]")
	}
	return out
}

func header(name string) string { return "[" + name + "]" }

// idWord is the word for the ID of a named table: NAME for ports, ID else.
func idWord(table string) string {
	if table == "port" {
		return "name"
	}
	return "id"
}

// keyText says what a key holds: its type, whether it must be there, its meaning.
func keyText(k source.KeyDoc) string {
	out := k.Doc
	if out != "" {
		out += "; "
	}
	out += typeText(k.Type)
	if k.Required {
		out = "(required) " + out
	}
	return out
}

func typeText(t source.TypeDoc) string {
	switch {
	case t.Each != nil:
		return "a table, each value " + typeText(*t.Each)
	case t.List != nil && t.Name == "pair":
		return "a pair, each " + typeText(*t.List) + like(t.Example)
	case t.List != nil && t.List.OneOf != nil:
		return "a list, any of " + strings.Join(t.List.OneOf, ", ")
	case t.List != nil:
		return "a list, each " + typeText(*t.List)
	case t.OneOf != nil:
		return "one of " + strings.Join(t.OneOf, ", ")
	}
	name := t.Name
	if name == "" {
		name = "number"
	}
	switch {
	case t.Min != nil && t.Max != nil:
		name += ", " + plainNumber(*t.Min) + " to " + plainNumber(*t.Max)
	case t.Min != nil:
		name += ", from " + plainNumber(*t.Min) + " on"
	case t.Max != nil:
		name += ", up to " + plainNumber(*t.Max)
	}
	if t.Name == source.Flag.Shape.Name || t.Name == source.Name.Shape.Name || t.Name == source.Text.Shape.Name {
		return name
	}
	return name + like(t.Example)
}

func like(example string) string {
	if example == "" {
		return ""
	}
	return ", like " + example
}

// plainNumber prints a number without needless zeros, with a true minus sign.
func plainNumber(v float64) string {
	return strings.Replace(strconv.FormatFloat(v, 'f', -1, 64), "-", "−", 1)
}

func keysJSON(r *source.Record) []keyJSON {
	out := []keyJSON{}
	for _, k := range r.Keys {
		j := keyJSON{Key: k.Name, Required: k.Required, Shape: shapeWords[k.Shape], Doc: k.Doc}
		if k.Shape == source.Scalar {
			j.Type = typeData(&k.Type)
		} else {
			j.Keys = keysJSON(k.Sub)
		}
		out = append(out, j)
	}
	return out
}

func typeData(t *source.TypeDoc) *typeJSON {
	if t == nil {
		return nil
	}
	out := &typeJSON{Name: t.Name, Example: t.Example, OneOf: t.OneOf, Min: t.Min, Max: t.Max, List: typeData(t.List), Each: typeData(t.Each)}
	if t.Choice != nil {
		for _, c := range t.Choice() {
			out.Choice = append(out.Choice, typeData(&c))
		}
	}
	if t.Sub != nil {
		out.Keys = keysJSON(t.Sub())
	}
	return out
}
