package source

import (
	"bytes"
	"flag"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/unit"
)

var updateDressed = flag.Bool("update", false, "write what Dress makes of the examples")

// chest is a format with a table of every shape; its order is that of no alphabet.
// Lengths are of the given type.
func chest(length Type[unit.MM]) func(*Doc) []Problem {
	type none struct{}
	var some []none
	text := func(names ...string) func(*none, *Keys) {
		return func(_ *none, k *Keys) {
			for _, n := range names {
				Opt(k, new(Val[string]), n, Text, "")
			}
		}
	}
	device := func(to *none, k *Keys) {
		text("part", "place")(to, k)
		Opt(k, new(Val[unit.MM]), "up", length, "")
		Opt(k, new(Val[[]Val[unit.MM]]), "steps", ListOf(length), "")
		Opt(k, new(Val[unit.MM]), "reach", Either(IsString, length, Map(Number, func(float64) (unit.MM, error) { return 1, nil }), ""), "")
		Each(k, new([]Pick[none]), "set", Names, Inline(func(_ *none, k *Keys) {
			Opt(k, new(Val[unit.MM]), "off", length, "")
		}), "")
		Named(k, &some, "port", text("use", "face"), "")
		Rows(k, &some, "path", text("from", "to"), "")
	}
	return func(d *Doc) []Problem {
		return Read(d, func(k *Keys) {
			One(k, new(none), "job", text("title", "stage", "bands"), "")
			One(k, new(none), "site", text("wind", "mains"), "")
			Named(k, &some, "device", device, "")
			Rows(k, &some, "signal", text("operator", "band"), "")
		})
	}
}

var readChest = chest(Length)

// lengthAsText reads any text where a length is expected, so that nothing is spelled
// otherwise.
var lengthAsText = Map(Text, func(string) (unit.MM, error) { return 0, nil })

// The examples of testdata/dress are files before and after. Those without the second
// are laid out already. They are compared byte by byte.
func TestDressExamples(t *testing.T) {
	files, err := filepath.Glob("testdata/dress/*.txtar")
	if err != nil || len(files) < 10 {
		t.Fatalf("%d examples were found: %v", len(files), err)
	}
	for _, file := range files {
		t.Run(filepath.Base(file), func(t *testing.T) {
			a, err := txtar.ParseFile(file)
			if err != nil {
				t.Fatal(err)
			}
			before := a.Files[0].Data
			got := dressGood(t, before)
			if *updateDressed {
				a.Files = a.Files[:1]
				if !bytes.Equal(got, before) {
					a.Files = append(a.Files, txtar.File{Name: "after.toml", Data: got})
				}
				if err := os.WriteFile(file, txtar.Format(a), 0o644); err != nil {
					t.Fatal(err)
				}
			}
			if want := a.Files[len(a.Files)-1].Data; !bytes.Equal(got, want) {
				t.Errorf("it became\n%s\nwant\n%s", got, want)
			}
		})
	}
}

func dressGood(t *testing.T, src []byte) []byte {
	t.Helper()
	out, problems, err := Dress("plan.toml", src, readChest)
	if err != nil || len(problems) > 0 {
		t.Fatalf("%q is not dressed: %v%s", src, err, listed(problems))
	}
	return out
}

// What a file ends its lines with stays, what is no text of it goes.
func TestDressLineEnds(t *testing.T) {
	for _, c := range []struct{ name, before, after string }{
		{"nothing", "", ""},
		{"blank lines", " \n\n\t\n", ""},
		{"no end", "a = 1", "a = 1\n"},
		{"many ends", "\n\na = 1\n\n\n", "a = 1\n"},
		{"only a comment", "# a", "# a\n"},
		{"blanks", "a = 1 \t\n  # b  \n", "a = 1\n# b\n"},
		{"of another system", "[site]\r\nmains = 'x'\r\nwind = \"y\"\r\n[job]", "[job]\r\n\r\n[site]\r\nwind = \"y\"\r\nmains = 'x'\r\n"},
		{"of two systems", "# a\r\n\nb = 1\n", "# a\r\n\r\nb = 1\r\n"},
		{"of another system in a comment only", "\nb = 1\n# a\r\n", "b = 1\n# a\n"},
		{"in a text", "a = '''\r\nx \r\n'''\nb = 1\n", "a = '''\r\nx \r\n'''\nb = 1\n"},
		{"in a list", "a = [\r\n 1]\n", "a = [\r\n 1]\n"},
		{"a byte order mark", "\uFEFF[job]\n", "[job]\n"},
	} {
		if got := string(dressGood(t, []byte(c.before))); got != c.after {
			t.Errorf("%s: %q became %q, want %q", c.name, c.before, got, c.after)
		}
	}
}

// A value is spelled otherwise only where its type says that both mean the same, and
// only there.
func TestDressSpelling(t *testing.T) {
	for before, after := range map[string]string{
		`up = "18.50 m"`:                    `up = "18.5 m"`,
		`up = '60.0 ft'   # walked`:         `up = "60 ft"   # walked`,
		`up = """ 08   in"""`:               `up = "8 in"`,
		`up = "\u0031.0 m"`:                 `up = "1 m"`,
		`up = "18.50m"`:                     `up = "18.50m"`, // no length
		`up = "-1.0 m"`:                     `up = "-1.0 m"`, // likewise
		`up = 1.50`:                         `up = 1.50`,
		`part = "18.50 m"`:                  `part = "18.50 m"`,
		`other = "18.50 m"`:                 `other = "18.50 m"`,
		`steps = ["1.0 m", "2 m", "03 m"]`:  `steps = ["1 m", "2 m", "3 m"]`,
		`steps = ["1.0 m", 7]`:              `steps = ["1 m", 7]`,
		`reach = ".5 m"`:                    `reach = "0.5 m"`,
		`reach = 0.50`:                      `reach = 0.50`,
		`set = { x = { off = "1.0  mm" } }`: `set = { x = { off = "1 mm" } }`,
		`set.y.off = "1. cm"`:               `set.y.off = "1 cm"`,
	} {
		head := "[device.a]\n"
		if got := string(dressGood(t, []byte(head+before+"\n"))); got != head+after+"\n" {
			t.Errorf("%s became %s", before, got)
		}
	}
}

// What cannot be read is not touched; what can, but holds what no plan can mean, is
// not either.
func TestDressRefuses(t *testing.T) {
	for _, src := range []string{
		"a = \n", "a = 1\na = 2\n", "[a]\n[a]\n", "<<<<<<< HEAD\na = 1\n", "a = nan\n", "a = {\n}\n", "\xFF", "a = 1 # \x01",
		"# " + strings.Repeat("x", MaxLine), strings.Repeat("#\n", MaxFile/2+1),
	} {
		out, problems, err := Dress("plan.toml", []byte(src), readChest)
		if out != nil || len(problems) == 0 || err != nil {
			t.Errorf("%.40q became %q: %v%s", src, out, err, listed(problems))
		}
	}
}

// The proof fails where anything is lost or changed.
func TestDressProof(t *testing.T) {
	const src = "[job]\ntitle = \"a\" # b\nstage = \"c\"\n[device.x]\nup = \"1.0 m\"\n# d\nset.p.off = \"1 m\"\nset.q.off = \"1 m\"\n[[signal]]\nband = \"e\"\n[[signal]]\n"
	for _, c := range []struct{ name, old, new, want string }{
		{"nothing", "", "", ""},
		{"keys in another order", "title = \"a\" # b\nstage = \"c\"\n", "stage = \"c\"\ntitle = \"a\" # b\n", ""},
		{"a spelling", "1.0 m", "1 m", ""},
		{"another spelling", "1.0 m", "1000 mm", ""},
		{"a value", `"c"`, `"C"`, "line 3 would mean something else"},
		{"a length", "1.0 m", "1.1 m", "line 5 would mean"},
		{"no length", "1.0 m", "1.0m", "line 5 would mean"},
		{"a kind", `"e"`, `1`, "line 10 would mean"},
		{"a key lost", "stage = \"c\"\n", "", "line 1 would mean"},
		{"a key renamed", "stage", "stags", "line 3 would mean"},
		{"a key of an other table", "title = \"a\" # b\n", "job.title = \"a\" # b\n", "line 2 would mean"},
		{"a row lost", "[[signal]]\nband", "band", "line 4 would mean"},
		{"rows in another order", "[[signal]]\nband = \"e\"\n[[signal]]\n", "[[signal]]\n[[signal]]\nband = \"e\"\n", "line 9 would mean"},
		{"names in another order", "set.p.off = \"1 m\"\nset.q.off = \"1 m\"\n", "set.q.off = \"1 m\"\nset.p.off = \"1 m\"\n", "line 7 would mean"},
		{"a comment lost", " # b", "", "a comment would be lost"},
		{"a comment changed", "# d", "#d", "a comment would be lost"},
		{"a comment twice", "# d", "# d\n# d", "a comment would be lost"},
	} {
		changed := strings.Replace(src, c.old, c.new, 1)
		got := ""
		if err := undressed(t, src).proves(undressed(t, changed)); err != nil {
			got = err.Error()
		}
		if c.want == "" && got != "" || !strings.HasPrefix(got, c.want) {
			t.Errorf("%s: the proof says %q, want %q", c.name, got, c.want)
		}
	}
}

func undressed(t *testing.T, src string) *draft {
	t.Helper()
	d, problems, err := undress("plan.toml", []byte(src), readChest)
	if err != nil || len(problems) > 0 {
		t.Fatalf("%q: %v%s", src, err, listed(problems))
	}
	return d
}

// A reader that meets other problems in what was laid out, or asks for other keys
// each time, is found out.
func TestDressWildReaders(t *testing.T) {
	calls := 0
	count := func(d *Doc) []Problem { calls++; return make([]Problem, calls) }
	other := func(d *Doc) []Problem {
		calls++
		return Read(d, func(k *Keys) {
			for _, n := range [][]string{{"a", "b"}, {"b", "a"}}[calls%2] {
				Opt(k, new(Val[string]), n, Text, "")
			}
		})
	}
	for want, read := range map[string]func(*Doc) []Problem{"reading it would meet 2 problems instead of 1": count, "laid out in yet another way": other} {
		calls = 0
		out, _, err := Dress("plan.toml", []byte("a = ''\nb = ''\n"), read)
		if out != nil || err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("it became %q: %v, want %s", out, err, want)
		}
	}
}

// checkDressed holds what Dress makes of a file against what a plain look at the
// lines, and two TOML libraries, say of both. The reader must spell nothing otherwise.
func checkDressed(t *testing.T, src, out []byte) {
	t.Helper()
	if got, want := linesIn(out), linesIn(src); !slices.Equal(got, want) {
		t.Fatalf("%q became %q: its lines are not the same", src, out)
	}
	d, found := parseBytes(out)
	if len(found) > 0 {
		t.Fatalf("%q became %q, which has problems:%s", src, out, listed(found))
	}
	checkAgreement(t, d)
	before, _ := parseBytes(src)
	if got, want := flat(nil, "", plainTree(d.Root)), flat(nil, "", plainTree(before.Root)); !slices.Equal(got, want) {
		t.Fatalf("%q became %q: it means something else", src, out)
	}
	if n := len(out); n > 0 && (out[n-1] != '\n' || bytes.HasSuffix(out, []byte("\n\n"))) {
		t.Fatalf("%q became %q: its end is not that of a line", src, out)
	}
}

// linesIn are the lines of a file that hold anything, sorted, without blanks at
// their ends.
func linesIn(src []byte) []string {
	var out []string
	for _, l := range strings.Split(strings.TrimPrefix(string(src), "\uFEFF"), "\n") {
		if l = strings.Trim(l, " \t\r"); l != "" {
			out = append(out, l)
		}
	}
	slices.Sort(out)
	return out
}

// All files of the suite that Parse accepts are dressed, by a reader that knows their
// keys and by one that knows none.
func TestDressSuite(t *testing.T) {
	done := 0
	walkSuite(t, suite(t), "valid", func(name string, src []byte) {
		for _, read := range []func(*Doc) []Problem{chest(lengthAsText), backwards, func(*Doc) []Problem { return nil }} {
			out, problems, err := Dress(name, src, read)
			if err != nil {
				t.Errorf("%s: %v", name, err)
			}
			if len(problems) == 0 && err == nil {
				done++
				checkDressed(t, src, out)
			}
		}
	})
	if done < 3*245 {
		t.Errorf("only %d files were dressed", done)
	}
}

// backwards asks every table for its keys from the last to the first.
func backwards(d *Doc) []Problem {
	var reverse func(n *Node)
	reverse = func(n *Node) {
		var names []string
		for _, k := range n.Keys {
			names = append(names, k.Name)
			reverse(k.Value)
		}
		for _, item := range n.Items {
			reverse(item)
		}
		slices.Sort(names)
		slices.Reverse(names)
		if n.Kind == Table && d.layout != nil {
			d.layout.ranks[n] = names
		}
	}
	reverse(d.Root)
	return nil
}

// FuzzDress holds for any bytes: no panic, no failed proof, and where the file has no
// problem the same lines and the same values.
func FuzzDress(f *testing.F) {
	f.Add([]byte(planLike()))
	f.Fuzz(func(t *testing.T, src []byte) {
		for _, read := range []func(*Doc) []Problem{chest(lengthAsText), backwards, readChest} {
			out, problems, err := Dress("plan.toml", src, read)
			if err != nil {
				t.Fatalf("%q: %v", src, err)
			}
			if len(problems) > 0 {
				if out != nil {
					t.Fatalf("%q is dressed in spite of its problems", src)
				}
				return
			}
		}
		out, _, _ := Dress("plan.toml", src, backwards)
		checkDressed(t, src, out)
	})
}
