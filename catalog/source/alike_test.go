package source

import "testing"

type alikeRow struct {
	At    Place
	Name  Val[string]
	Inner *alikeRow
	List  []Val[float64]
	By    map[string]int
	Size  struct {
		MM2     float64
		Written string
	}
}

// Alike looks at what a record means and at nothing else.
func TestAlike(t *testing.T) {
	file := &File{Path: "a.toml", Src: []byte("name = 1\n")}
	row := func(change func(*alikeRow)) *alikeRow {
		r := &alikeRow{Name: Val[string]{V: "x", Set: true}, Inner: &alikeRow{}, List: []Val[float64]{{V: 1, Set: true}}, By: map[string]int{"a": 1}}
		r.Size.MM2 = 16
		if change != nil {
			change(r)
		}
		return r
	}
	for _, c := range []struct {
		name   string
		change func(*alikeRow)
		want   bool
	}{
		{"nothing", nil, true},
		{"another place", func(r *alikeRow) { r.At = Place{file, 1, 3}; r.Name.At = Place{file, 4, 5} }, true},
		{"spelled otherwise", func(r *alikeRow) { r.Size.Written = "16 mm2" }, true},
		{"another value", func(r *alikeRow) { r.Name.V = "y" }, false},
		{"a value that is not set", func(r *alikeRow) { r.Name.Set = false }, false},
		{"deeper down", func(r *alikeRow) { r.Inner.Name.V = "y" }, false},
		{"nothing in place of something", func(r *alikeRow) { r.Inner = nil }, false},
		{"a longer list", func(r *alikeRow) { r.List = append(r.List, Val[float64]{}) }, false},
		{"another figure", func(r *alikeRow) { r.List[0].V = 2 }, false},
		{"another key", func(r *alikeRow) { r.By = map[string]int{"b": 1} }, false},
		{"another size", func(r *alikeRow) { r.Size.MM2 = 10 }, false},
	} {
		if got := Alike(row(nil), row(c.change)); got != c.want {
			t.Errorf("%s: %v", c.name, got)
		}
	}
	if Alike(1, "1") || !Alike(nil, nil) || Alike(nil, 1) {
		t.Error("values of different types are alike")
	}
}
