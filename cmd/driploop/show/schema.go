package show

import (
	"encoding/json"
	"fmt"
	"reflect"
	"slices"
	"strconv"

	"driploop/catalog"
	"driploop/catalog/source"
)

// Schema is a JSON Schema of the files of a workspace, draft-07 in one document, for
// editors and other readers of TOML. It is made of what the bind functions say when they
// run without a document, like the pages of basis.
//
// It says what can be said of one file by itself, without arithmetic: keys, families of
// values, bounds, forms of quantities, what must be there. What follows from other files,
// or from two figures held against each other, only inspect can tell.
type Schema struct{ name string }

// schemaFile is one sort of file that a schema describes.
type schemaFile struct {
	name, why string
	record    func() *source.Record
}

// schemaFiles lists the sorts of file: the formats, and the catalog.
func schemaFiles() []schemaFile {
	out := []schemaFile{}
	for _, f := range formats {
		out = append(out, schemaFile{f.name, f.why, f.describe})
		if f.name == "workspace" {
			out = append(out, schemaFile{"catalog", "catalog/*.toml: parts", catalog.DescribeCatalog})
		}
	}
	return out
}

// SchemaNames lists the sorts of file that there is a schema of.
func SchemaNames() []string {
	var out []string
	for _, f := range schemaFiles() {
		out = append(out, f.name)
	}
	return out
}

// SchemaOf is the schema of one sort of file, or with "" of all of them. It is nil where
// there is no such sort.
func SchemaOf(name string) *Schema {
	if name != "" && !slices.Contains(SchemaNames(), name) {
		return nil
	}
	return &Schema{name}
}

// object is a part of a schema. Its keys come out in alphabetical order.
type object = map[string]any

// JSON is the document.
func (s *Schema) JSON() ([]byte, error) {
	w := &schemaWriter{definitions: object{}}
	top := object{"$schema": "http://json-schema.org/draft-07/schema#"}
	sorts := []object{}
	for _, f := range schemaFiles() {
		if s.name != "" && s.name != f.name {
			continue
		}
		file := w.table(f.record())
		file["title"], file["description"] = f.name, f.why
		if s.name != "" {
			for k, v := range file {
				top[k] = v
			}
			continue
		}
		w.definitions[f.name] = file
		sorts = append(sorts, ref(f.name))
	}
	if s.name == "" {
		top["title"] = "files of a workspace"
		// An empty file is a file of every sort, so it is not one of them alone.
		top["anyOf"] = sorts
	}
	if len(w.definitions) > 0 {
		top["definitions"] = w.definitions
	}
	b, err := json.MarshalIndent(top, "", " ")
	if err != nil {
		return nil, fmt.Errorf("writing the schema: %w", err)
	}
	return append(b, '\n'), nil
}

func ref(name string) object { return object{"$ref": "#/definitions/" + name} }

// schemaWriter collects what several tables share.
type schemaWriter struct{ definitions object }

// shared puts a part of the schema under a name of its own, so that it stands there once.
// Another part that has the name already keeps it, and this one is written out in place.
func (w *schemaWriter) shared(name string, part object) object {
	if first, taken := w.definitions[name]; taken && !reflect.DeepEqual(first, part) {
		return part
	}
	w.definitions[name] = part
	return ref(name)
}

// table is what a table with the keys of the record must be.
func (w *schemaWriter) table(r *source.Record) object {
	if r.Variants != nil {
		return w.variants(r.Variants)
	}
	properties, needed := object{}, []string{}
	for i := range r.Keys {
		k := &r.Keys[i]
		properties[k.Name] = w.key(k)
		if k.Required {
			needed = append(needed, k.Name)
		}
	}
	out := object{"type": "object", "properties": properties, "additionalProperties": false}
	if len(needed) > 0 {
		out["required"] = needed
	}
	conditions(out, r.Conditions)
	return out
}

// variants is a table whose keys depend on a word in it, each variant by its name.
func (w *schemaWriter) variants(v *source.Variants) object {
	all := []object{}
	for _, word := range v.Words {
		name := v.Key + "-" + word
		w.definitions[name] = w.table(v.Of(word))
		all = append(all, object{"if": state(source.Holds(v.Key, word)), "then": ref(name)})
	}
	return object{"type": "object", "required": []string{v.Key},
		"properties": object{v.Key: object{"enum": v.Words}}, "allOf": all}
}

func (w *schemaWriter) key(k *source.KeyDoc) object {
	var out object
	switch k.Shape {
	case source.OneTable:
		out = w.shared("table-"+k.Name, w.table(k.Sub))
	case source.RowTables:
		out = object{"type": "array", "items": w.shared("table-"+k.Name, w.table(k.Sub))}
		if k.Most > 0 {
			out["maxItems"] = k.Most
		}
	case source.NamedTables:
		out = object{"type": "object", "propertyNames": object{"pattern": source.NamePattern},
			"additionalProperties": w.shared("table-"+k.Name, w.table(k.Sub))}
		if k.Most > 0 {
			out["maxProperties"] = k.Most
		}
	default:
		out = w.value(&k.Type)
	}
	if k.Doc == "" {
		return out
	}
	if _, is := out["$ref"]; is {
		out = object{"allOf": []object{out}} // beside a reference nothing else counts
	}
	out["description"] = k.Doc
	return out
}

// value is what a plain value, a list or an inline table must be.
func (w *schemaWriter) value(t *source.TypeDoc) object {
	switch {
	case t.Choice != nil:
		may := []object{}
		for _, c := range t.Choice() {
			may = append(may, w.value(&c))
		}
		return object{"anyOf": may}
	case t.Sub != nil:
		return w.table(t.Sub())
	case t.Each != nil:
		out := object{"type": "object", "additionalProperties": w.value(t.Each)}
		if t.Form != nil {
			out["propertyNames"] = w.words(t.Form)
		}
		return out
	case t.List != nil:
		return w.list(t)
	case t.OneOf != nil:
		return object{"enum": t.OneOf}
	}
	if t.Form != nil && t.Form.Among != nil {
		return w.words(t.Form)
	}
	return plainValue(t)
}

// words is a text that is one of many, or of a form. Long lists stand once each.
func (w *schemaWriter) words(f *source.Form) object {
	if f.Among == nil {
		return textForm(f)
	}
	words := f.Among()
	for n := 1; ; n++ {
		name := "words-" + strconv.Itoa(n)
		if out := w.shared(name, object{"enum": words}); out["$ref"] != nil {
			return out
		}
	}
}

func (w *schemaWriter) list(t *source.TypeDoc) object {
	out := object{"type": "array", "items": w.value(t.List)}
	if t.Form == nil {
		return out
	}
	if t.Form.Items != nil {
		each := []object{}
		for _, i := range t.Form.Items() {
			each = append(each, w.value(&i))
		}
		out["items"] = each
	}
	if t.Form.Least > 0 {
		out["minItems"] = t.Form.Least
	}
	if t.Form.Most > 0 {
		out["maxItems"] = t.Form.Most
	}
	return out
}

func plainValue(t *source.TypeDoc) object {
	form := t.Form
	if form == nil {
		form = &source.Form{}
	}
	out := object{}
	switch form.Base {
	case source.AnyNumber:
		out["type"] = "number"
	case source.Whole:
		out["type"] = "integer"
	case source.Truth:
		out["type"] = "boolean"
	case source.OfDay: // a date is a text where there is no type of its own for it
		out = object{"type": "string", "pattern": `^[0-9]{4}-[0-9]{2}-[0-9]{2}$`}
	case source.OfTime:
		out = object{"type": "string", "pattern": `^[0-9]{4}-[0-9]{2}-[0-9]{2}[Tt ][0-9]{2}:[0-9]{2}`}
	default:
		out = textForm(form)
		out["type"] = "string"
	}
	if t.Min != nil {
		out["minimum"] = bound(*t.Min)
	}
	if t.Max != nil {
		out["maximum"] = bound(*t.Max)
	}
	return out
}

// bound writes a bound as a person would, where JSON numbers are otherwise free to be
// written with an exponent.
func bound(v float64) json.Number { return json.Number(strconv.FormatFloat(v, 'f', -1, 64)) }

func textForm(f *source.Form) object {
	if f.Pattern == "" {
		return object{}
	}
	return object{"pattern": f.Pattern}
}
