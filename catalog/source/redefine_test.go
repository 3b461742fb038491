package source

import "testing"

func TestDefinedTwice(t *testing.T) {
	for _, c := range []struct{ name, src, at, first string }{
		{"key", "a = 1\nb = 2\na = 3", "3:1 a", "1:1 a"},
		{"key of a table", "[t]\na = 1\n\"a\" = 1", "3:1 \"a\"", "2:1 a"},
		{"key in braces", "x = {a = 1, a = 2}", "1:13 a", "1:6 a"},
		{"key in braces in an array", "x = [{a = 1}, {a = 1, a = 2}]", "1:23 a", "1:16 a"},
		{"dotted key", "a.b = 1\na.b = 2", "2:3 b", "1:3 b"},
		{"dotted key in braces", "x = {a.b = 1, a.b = 2}", "1:17 b", "1:8 b"},
		{"table", "[a.b]\n[c]\n[a.b]", "3:4 b", "1:4 b"},
		{"table that was on the way", "[a.b]\n[a]\n[a]", "3:2 a", "2:2 a"},
		{"table of a row", "[[r]]\n[r.a]\n[r.a]", "3:4 a", "2:4 a"},
		{"table after a key", "[t]\na = {}\n[t.a]", "3:4 a", "2:1 a"},
		{"table after rows", "[[a]]\n[a]", "2:2 a", "1:3 a"},
		{"table after a dotted key", "[t]\na.b = 1\n[t.a]", "3:4 a", "2:1 a"},
		{"rows after a table", "[a]\n[[a]]", "2:3 a", "1:2 a"},
		{"rows after a table on the way", "[a.b]\n[[a]]", "2:3 a", "1:2 a"},
		{"rows after an array", "a = []\n[[a]]", "2:3 a", "1:1 a"},
		{"key after a table", "[t.a]\n[t]\na = 1", "3:1 a", "1:4 a"},
		{"key after a dotted key", "a.b = 1\na = 2", "2:1 a", "1:1 a"},
	} {
		t.Run(c.name, func(t *testing.T) {
			p := parseBad(t, c.src)
			if p.Kind != Merge || where(p.At) != c.at {
				t.Errorf("reported at %q with kind %d, want a merge problem at %q", where(p.At), p.Kind, c.at)
			}
			if len(p.Also) != 1 || where(p.Also[0]) != c.first {
				t.Errorf("the first place is not %q: %v", c.first, p.Also)
			}
		})
	}
}

func TestNothingCanBeAdded(t *testing.T) {
	for _, c := range []struct{ name, src, at, first string }{
		{"to braces, by a header", "a = {}\n[a.b]", "2:2 a", "1:1 a"},
		{"to braces, by a dotted key", "a = {b = 1}\na.c = 2", "2:1 a", "1:1 a"},
		{"to braces inside braces", "x = {a = {}, a.b = 1}", "1:14 a", "1:6 a"},
		{"to a plain value, by a header", "a = 1\n[a.b]", "2:2 a", "1:1 a"},
		{"to a plain value, by a dotted key", "a = 1\na.b = 2", "2:1 a", "1:1 a"},
		{"to an array, by rows", "a = [{}]\n[[a.b]]", "2:3 a", "1:1 a"},
		{"to a table, from the one above it", "[a.b]\n[a]\nb.c = 1", "3:1 b", "1:4 b"},
		{"to rows, from the table above them", "[[a.b]]\n[a]\nb.c = 1", "3:1 b", "1:5 b"},
		{"to a refused number", "a = nan\n[a.b]", "2:2 a", "1:1 a"},
	} {
		t.Run(c.name, func(t *testing.T) {
			_, found := parseBytes([]byte(c.src))
			p := found[len(found)-1]
			if p.Kind != Syntax || where(p.At) != c.at {
				t.Errorf("reported at %q with kind %d, want a syntax problem at %q", where(p.At), p.Kind, c.at)
			}
			if len(p.Also) != 1 || where(p.Also[0]) != c.first {
				t.Errorf("the first place is not %q: %v", c.first, p.Also)
			}
		})
	}
}

func TestTablesThatMayGrow(t *testing.T) {
	for _, src := range []string{
		"a.b = 1\na.c = 2",
		"x = {a.b = 1, a.c = 2}",
		"[a.b]\n[a]\nc = 1",
		"[a]\n[a.b]\n[c]\n[a.d]",
		"[a]\nb.c = 1\n[a.b.d]",
		"[[r]]\na = 1\n[[r]]\na = 1",
		"[[r]]\n[r.a]\n[[r]]\n[r.a]",
		"[[a.b]]\n[a]\nc = 1",
		"[[a]]\n[[a.b]]\n[[a]]\n[[a.b]]\n[[a.b]]",
		"[[r]]\na.b = 1\n[[r]]\na.b = 1",
	} {
		parseGood(t, src)
	}
}

// After a merge that took both sides the first definition stands, the second is
// still looked at, and what follows lands where it belongs.
func TestFirstDefinitionStands(t *testing.T) {
	d, found := parseBytes([]byte(`
[device.donor]
part = "ANT-LP-11"
[device.donor]
part = "ANT-LP-12"
gain = nan
[device.amp]
part = "AMP-5"
`))
	if len(found) != 2 || found[0].Kind != Merge || where(found[1].At) != "6:8 nan" {
		t.Errorf("want a merge problem and the one in the second table:%s", listed(found))
	}
	if !d.Partial {
		t.Error("nothing says that the tree is not whole")
	}
	donor := at(t, d, "device donor")
	if where(donor.At) != "2:9 donor" || len(donor.Value.Keys) != 1 || donor.Value.Get("part").Value.Str != "ANT-LP-11" {
		t.Errorf("the first table did not stay as it was: %+v", donor.Value)
	}
	if at(t, d, "device amp part").Value.Str != "AMP-5" {
		t.Error("the table after it is lost")
	}
}
