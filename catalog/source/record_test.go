package source

import (
	"reflect"
	"testing"
)

func TestDescribe(t *testing.T) {
	bound := func(v float64) *float64 { return &v }
	roomDoc := &Record{Keys: []KeyDoc{
		{Name: "name", Required: true, Type: TypeDoc{Name: "text", Example: `"…"`}, Doc: "what it is called"},
		{Name: "area", Type: TypeDoc{Name: "m²", Min: bound(0), Form: numberForm}, Doc: "its area"},
	}}
	want := &Record{Keys: []KeyDoc{
		{Name: "height", Required: true, Type: TypeDoc{Name: "m", Min: bound(0), Max: bound(100), Form: numberForm}, Doc: "how high it is"},
		{Name: "room", Shape: RowTables, Doc: "rooms", Sub: roomDoc},
		{Name: "named", Shape: NamedTables, Doc: "rooms with names", Sub: roomDoc},
		{Name: "top", Shape: OneTable, Doc: "the uppermost room", Sub: roomDoc},
		{Name: "share", Type: TypeDoc{Name: "table", Each: &TypeDoc{Name: "dB", Min: bound(0), Form: numberForm}}, Doc: "by word"},
	}}
	if got := Describe((&mast{}).keys); !reflect.DeepEqual(got, want) {
		t.Errorf("described as\n%+v\nwant\n%+v", got, want)
	}
}

func TestDescribeTypes(t *testing.T) {
	doc := func(k *Keys) {
		Opt(k, new(Val[string]), "word", OneOf("a", "b"), "")
		Opt(k, new(Val[[]Val[int]]), "list", ListOf(Count(1, 3)), "")
		Opt(k, new(Val[[2]float64]), "pair", Pair(Number, "[1, 2]"), "")
	}
	r := Describe(doc)
	if k := r.Key("word"); k == nil || !reflect.DeepEqual(k.Type.OneOf, []string{"a", "b"}) || k.Required {
		t.Errorf("a word is described as %+v", k)
	}
	if k := r.Key("list"); k == nil || k.Type.List == nil || *k.Type.List.Max != 3 || k.Type.Min != nil {
		t.Errorf("a list is described as %+v", k)
	}
	if k := r.Key("pair"); k == nil || k.Type.Example != "[1, 2]" || k.Type.List.Name != "number" || k.Type.List.Min != nil {
		t.Errorf("a pair is described as %+v", k)
	}
	if r.Key("other") != nil {
		t.Error("a key that is not there is found")
	}
}

// What a table needs beyond its keys is documented, and costs a reader nothing.
func TestDescribeConditions(t *testing.T) {
	bind := func(k *Keys) {
		k.Demand(Needs("a", "b"))
		k.Demand(OneOfTwo("c", "d")...)
		k.Vary("kind", []string{"x"}, func(string) *Record { return &Record{} })
	}
	r := Describe(bind)
	want := []Condition{{Any: []State{{Key: "a"}, {Key: "b"}}}, {Any: []State{{Key: "c"}, {Key: "d"}}}, {Not: []State{{Key: "c"}, {Key: "d"}}}}
	if !reflect.DeepEqual(r.Conditions, want) {
		t.Errorf("described as %+v", r.Conditions)
	}
	if r.Variants == nil || r.Variants.Key != "kind" {
		t.Errorf("the variants are %+v", r.Variants)
	}
	if problems := read(t, "", bind); len(problems) > 0 {
		t.Errorf("a document has %v", problems)
	}
}

func TestDescribeShapes(t *testing.T) {
	r := Describe(func(k *Keys) {
		Opt(k, new(Val[[]Val[string]]), "filled", Filled(ListOf(Text)), "")
		Opt(k, new(Val[[]Val[string]]), "three", Exactly(3, ListOf(Text)), "")
		Opt(k, new(Val[string]), "either", Either(IsString, Text, Inline(func(s *string, k *Keys) { Need(k, new(Val[string]), "name", Text, "") }), ""), "")
	})
	if f := r.Key("filled").Type.Form; f.Least != 1 || f.Most != 0 {
		t.Errorf("a filled list is described as %+v", f)
	}
	if f := r.Key("three").Type.Form; f.Least != 3 || f.Most != 3 {
		t.Errorf("three items are described as %+v", f)
	}
	choice := r.Key("either").Type.Choice()
	if len(choice) != 2 || choice[1].Sub().Key("name") == nil {
		t.Errorf("a choice is described as %+v", choice)
	}
}
