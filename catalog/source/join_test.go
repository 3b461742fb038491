package source

import (
	"strings"
	"sync"
	"testing"
	"time"
)

// The two parsers agree on every text that is known, so the tree is changed by
// hand here to see that a difference is found, and where.
func TestDifferenceIsFound(t *testing.T) {
	const src = `
whole  = 1
figure = 1.5
yes    = true
text   = "x"
day    = 2026-12-01
clock  = 07:30:00
joined = 2026-12-01T07:30:00
offset = 2026-12-01T07:30:00+01:00
list   = [1, [2]]
[[row]]
a = 1
[[row]]
a = {b = 2}
`
	for _, c := range []struct {
		name   string
		change func(t *testing.T, d *Doc)
		at     string
	}{
		{"nothing", func(t *testing.T, d *Doc) {}, ""},
		{"whole number", func(t *testing.T, d *Doc) { at(t, d, "whole").Value.Int++ }, "2:10 1"},
		{"figure", func(t *testing.T, d *Doc) { at(t, d, "figure").Value.Float += 1e-15 }, "3:10 1.5"},
		{"truth", func(t *testing.T, d *Doc) { at(t, d, "yes").Value.Bool = false }, "4:10 true"},
		{"text", func(t *testing.T, d *Doc) { at(t, d, "text").Value.Str = "X" }, `5:10 "x"`},
		{"day", func(t *testing.T, d *Doc) { later(at(t, d, "day")) }, "6:10 2026-12-01"},
		{"clock", func(t *testing.T, d *Doc) { later(at(t, d, "clock")) }, "7:10 07:30:00"},
		{"joined", func(t *testing.T, d *Doc) { later(at(t, d, "joined")) }, "8:10 2026-12-01T07:30:00"},
		{"offset", func(t *testing.T, d *Doc) { later(at(t, d, "offset")) }, "9:10 2026-12-01T07:30:00+01:00"},
		{"kind of number", func(t *testing.T, d *Doc) {
			*at(t, d, "whole").Value = Node{Kind: Float, Float: 1, At: d.File.stretch(1, 2)}
		}, "2:1 w"},
		{"kind of time", func(t *testing.T, d *Doc) { at(t, d, "joined").Value.Kind = DateTime }, "8:10 2026-12-01T07:30:00"},
		{"item", func(t *testing.T, d *Doc) { at(t, d, "list 1 0").Value.Int = 3 }, "10:15 2"},
		{"number of items", func(t *testing.T, d *Doc) { n := at(t, d, "list 1").Value; n.Items = append(n.Items, n.Items[0]) }, "10:14 [2]"},
		{"list for a value", func(t *testing.T, d *Doc) { at(t, d, "list 1").Value.Kind = Integer }, "10:14 [2]"},
		{"value for a list", func(t *testing.T, d *Doc) { at(t, d, "whole").Value.Kind = Array }, "2:10 1"},
		{"row", func(t *testing.T, d *Doc) { at(t, d, "row 0 a").Value.Int = 2 }, "12:5 1"},
		{"name of a key", func(t *testing.T, d *Doc) { at(t, d, "row 1 a b").Name = "c" }, "14:6 b"},
		{"number of keys", func(t *testing.T, d *Doc) { at(t, d, "row 1 a").Value.Keys = nil }, "14:5 {b = 2}"},
		{"table for a value", func(t *testing.T, d *Doc) { at(t, d, "whole").Value.Kind = Table }, "2:10 1"},
	} {
		t.Run(c.name, func(t *testing.T) {
			d := parseGood(t, src)
			c.change(t, d)
			found := disagreement(d)
			if c.at == "" {
				if len(found) > 0 {
					t.Errorf("a difference where there is none:%s", listed(found))
				}
				return
			}
			if len(found) != 1 || found[0].Kind != Syntax || where(found[0].At) != c.at {
				t.Errorf("want the difference at %q, got %s", c.at, listed(found))
			}
		})
	}
}

func later(k *KeyNode) { k.Value.Time = k.Value.Time.Add(time.Nanosecond) }

func TestSecondReaderRefuses(t *testing.T) {
	f := &File{Path: "plan.toml", Src: []byte("a = 1\né = 2\n")}
	found := disagreement(&Doc{File: f, Root: &Node{Kind: Table, At: f.Start()}})
	if len(found) != 1 || found[0].At.Line() != 2 || !strings.Contains(found[0].Says, "refuses") {
		t.Errorf("want what the second reader says on line 2, got %s", listed(found))
	}
}

// A document and the lines of its file are read by many at once.
func TestReadByMany(t *testing.T) {
	d := parseGood(t, planLike())
	var all sync.WaitGroup
	for range 4 {
		all.Go(func() {
			for _, k := range d.Root.Get("device").Value.Keys {
				if d.Root.Get("device").Value.Get(k.Name) != k || k.At.Line() == 0 {
					t.Errorf("%s is not found", k.Name)
				}
			}
		})
	}
	all.Wait()
}
