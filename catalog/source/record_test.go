package source

import (
	"reflect"
	"testing"
)

func TestDescribe(t *testing.T) {
	bound := func(v float64) *float64 { return &v }
	roomDoc := &Record{Keys: []KeyDoc{
		{Name: "name", Required: true, Type: TypeDoc{Name: "text", Example: `"…"`}, Doc: "what it is called"},
		{Name: "area", Type: TypeDoc{Name: "m²", Min: bound(0)}, Doc: "its area"},
	}}
	want := &Record{Keys: []KeyDoc{
		{Name: "height", Required: true, Type: TypeDoc{Name: "m", Min: bound(0), Max: bound(100)}, Doc: "how high it is"},
		{Name: "room", Shape: RowTables, Doc: "rooms", Sub: roomDoc},
		{Name: "named", Shape: NamedTables, Doc: "rooms with names", Sub: roomDoc},
		{Name: "top", Shape: OneTable, Doc: "the uppermost room", Sub: roomDoc},
		{Name: "share", Type: TypeDoc{Name: "table", Each: &TypeDoc{Name: "dB", Min: bound(0)}}, Doc: "by word"},
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
