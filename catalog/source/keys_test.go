package source

import (
	"fmt"
	"slices"
	"strings"
	"testing"
)

// mast, room and hook are records for these tests: one with every way of holding
// tables, one of plain keys, and one that checks keys against each other.
type mast struct {
	id, at string
	Height Val[float64]
	Rooms  []room
	Named  []room
	Top    room
	HasTop bool
	Share  []Pick[float64]
}

type room struct {
	ID, At string
	Name   Val[string]
	Area   Val[float64]
}

func (m *mast) keys(k *Keys) {
	m.id, m.at = k.ID(), where(k.At())
	Need(k, &m.Height, "height", Between(0, 100, "m"), "how high it is")
	Rows(k, &m.Rooms, "room", (*room).keys, "rooms")
	Named(k, &m.Named, "named", (*room).keys, "rooms with names")
	m.HasTop = One(k, &m.Top, "top", (*room).keys, "the uppermost room")
	Each(k, &m.Share, "share", Naming{Check: isShort}, AtLeast(0, "dB"), "by word")
}

func (r *room) keys(k *Keys) {
	r.ID, r.At = k.ID(), where(k.At())
	Need(k, &r.Name, "name", Text, "what it is called")
	Opt(k, &r.Area, "area", AtLeast(0, "m²"), "its area")
}

func isShort(s string) error {
	if len(s) > 3 {
		return fmt.Errorf("%s is too long", Quote(s))
	}
	return nil
}

// read binds a text and lists its problems as "line:column text: what is said; what
// to do".
func read(t *testing.T, src string, bind func(*Keys)) []string {
	t.Helper()
	d, _ := parseBytes([]byte(src))
	var out []string
	for _, p := range Read(d, bind) {
		out = append(out, fmt.Sprintf("%s: %s; %s", where(p.At), p.Says, p.Do))
	}
	return out
}

// wants compares problems with what they must begin with and hold, each written
// "line:column text: …".
func wants(t *testing.T, got, want []string) {
	t.Helper()
	if len(got) != len(want) {
		t.Errorf("%d problems, want %d:\n  %s", len(got), len(want), strings.Join(got, "\n  "))
		return
	}
	for i := range want {
		if !strings.HasPrefix(got[i], want[i]) {
			t.Errorf("problem %d is\n  %s\nwant\n  %s", i+1, got[i], want[i])
		}
	}
}

func TestKeysReadEveryShape(t *testing.T) {
	var m mast
	got := read(t, `height = 12.5
room = [{ name = "a" }, { name = "b", area = 3 }]
[[named.x.y]]
[top]
name = "loft"
[share]
mid = 1
abc = 0.5
`, m.keys)
	wants(t, got, []string{
		`3:9 x: "x" has no name: what it is called; add name`,
		`3:11 y: nothing reads the key "y" here; take it out`,
	})
	if m.Height.V != 12.5 || !m.Height.Set || m.Height.At.Text() != "12.5" {
		t.Errorf("height is %+v", m.Height)
	}
	if len(m.Rooms) != 2 || m.Rooms[0].Name.V != "a" || m.Rooms[1].Area.V != 3 || m.Rooms[0].At != `2:9 { name = "a" }` || m.Rooms[1].ID != "" {
		t.Errorf("rows are %+v", m.Rooms)
	}
	if len(m.Named) != 1 || m.Named[0].ID != "x" || m.Named[0].At != "3:9 x" {
		t.Errorf("named rows are %+v", m.Named)
	}
	if !m.HasTop || m.Top.Name.V != "loft" || m.Top.At != "4:2 top" {
		t.Errorf("the sub-table is %+v", m.Top)
	}
	if len(m.Share) != 2 || m.Share[0].Name != "mid" || m.Share[0].At.Text() != "mid" || m.Share[1].Val.V != 0.5 {
		t.Errorf("free keys are %+v, want them in document order", m.Share)
	}
	if m.id != "" || m.at != "1:1 " {
		t.Errorf("the root is called %q at %q", m.id, m.at)
	}
}

func TestKeysOfTheWrongShape(t *testing.T) {
	var m mast
	got := read(t, `height = 1
room = 3
named = [1]
top = "loft"
share = true
`, m.keys)
	wants(t, got, []string{
		`2:8 3: room: the number 3 was read, rows, written [[room]] is expected`,
		`3:9 [1]: named: a list was read, a table is expected`,
		`4:7 "loft": top: the text "loft" was read, a table is expected`,
		`5:9 true: share: true was read, a table is expected`,
	})
	if m.HasTop || m.Rooms != nil || m.Named != nil || m.Share != nil {
		t.Errorf("something was read all the same: %+v", m)
	}
}

// One row of the wrong shape, and one with a fault in it, leave the others.
func TestKeysGoOn(t *testing.T) {
	var m mast
	got := read(t, `height = 1
room = [{ name = "a" }, 7, { area = -1 }, { name = "d" }]
[named]
a = { name = "a" }
b = 5
c = { name = 6, area = 2 }
[share]
ab = "x"
long = 1
c = 2
`, m.keys)
	wants(t, got, []string{
		`2:25 7: room: the number 7 was read, a table is expected`,
		`2:28 { area = -1 }: this table has no name: what it is called; add name`,
		`2:37 -1: area: -1 is outside what begins at 0 m²`,
		`5:5 5: b: the number 5 was read, a table is expected`,
		`6:14 6: name: the number 6 was read, text is expected`,
		`8:6 "x": ab: the text "x" was read, a number (dB) is expected`,
		`9:1 long: share: "long" is too long`,
	})
	var names, free []string
	for _, r := range append(m.Rooms, m.Named...) {
		names = append(names, r.Name.Or("?"))
	}
	for _, s := range m.Share {
		free = append(free, fmt.Sprintf("%s %v", s.Name, s.Val.Set))
	}
	if want := []string{"a", "?", "d", "a", "?"}; !slices.Equal(names, want) {
		t.Errorf("rows are %v, want %v", names, want)
	}
	if want := []string{"ab false", "c true"}; !slices.Equal(free, want) {
		t.Errorf("free keys are %v, want %v", free, want)
	}
	if m.Named[1].Area.V != 2 {
		t.Error("a fault in one key hides another key of the table")
	}
}

func TestKeysUnknown(t *testing.T) {
	var m mast
	got := read(t, `heigth = 3
height = 1
[top]
name = "x"
heigth = 2
nmae = 3
zzzzzzz = 1
`, m.keys)
	wants(t, got, []string{
		`1:1 heigth: nothing reads the key "heigth" here; did you mean height?`,
		`5:1 heigth: nothing reads the key "heigth" here; take it out`, // height is known above only
		`6:1 nmae: nothing reads the key "nmae" here; did you mean name?`,
		`7:1 zzzzzzz: nothing reads the key "zzzzzzz" here; take it out`,
	})
}

func TestKeysMissing(t *testing.T) {
	var m mast
	got := read(t, "[top]\narea = 1\n[named.a]\n[[room]]\n", m.keys)
	wants(t, got, []string{
		`1:1 : this table has no height: how high it is; add height`,
		`1:2 top: "top" has no name`,
		`3:8 a: "a" has no name`,
		`4:1 [[room]]: this table has no name`,
	})
}

// A document that was left in part, by a syntax problem or a double definition, may
// well hold what seems to be missing.
func TestPartialDocumentsMissNothing(t *testing.T) {
	for name, src := range map[string]string{
		"syntax":        "[top]\narea = 1\nheight 1\n",
		"defined twice": "[top]\narea = 1\narea = 2\n",
	} {
		var m mast
		wants(t, read(t, src, m.keys), nil)
		if m.Top.Area.V != 1 {
			t.Errorf("%s: what is there was not read", name)
		}
	}
	var m mast
	wants(t, read(t, "[top]\narea = -1\narea = 2\nnmae = 1\n", m.keys), []string{
		`2:8 -1: area: -1 is outside`,
		`4:1 nmae: nothing reads the key "nmae" here; did you mean name?`,
	})
}

func TestPartialInlineTablesMissNothing(t *testing.T) {
	var list Val[[]Val[room]]
	bind := func(k *Keys) { Opt(k, &list, "rooms", ListOf(Inline((*room).keys)), "rooms") }
	long := strings.Repeat("k", MaxKey+1)
	wants(t, read(t, "rooms = [{ area = 1, "+long+" = 2, name = \"a\" }]\n", bind), nil)
	wants(t, read(t, "rooms = [{ area = 1 }]\n", bind), []string{
		`1:10 { area = 1 }: rooms: this table has no name: what it is called; add name`,
	})
}

// What Parse refused is not said twice, and leaves the key unset.
func TestRefusedValuesAreSilent(t *testing.T) {
	var m mast
	got := read(t, `height = nan
room = inf
named = nan
top = -inf
share = { ab = nan, c = 1 }
`, m.keys)
	wants(t, got, nil)
	if m.Height.Set || m.HasTop || len(m.Share) != 2 || m.Share[0].Val.Set || !m.Share[1].Val.Set {
		t.Errorf("read %+v", m)
	}
}

func TestNamesOfTables(t *testing.T) {
	var m mast
	got := read(t, `height = 1
[named]
"a b" = { name = "x" }
amp = { name = "1" }
Amp = { name = "2" }
"" = { name = "3" }
_x = { name = "4" }
1 = { name = "5" }
AMP = { name = "6" }
`, m.keys)
	wants(t, got, []string{
		`3:1 "a b": the name "a b" cannot be referred to; use letters`,
		`5:1 Amp: the name "Amp" stands already, but for its case; give it a name of its own`,
		`6:1 "": the name "" cannot be referred to`,
		`7:1 _x: the name "_x" cannot be referred to`,
		`9:1 AMP: the name "AMP" stands already`,
	})
	d, _ := parseBytes([]byte("height = 1\n[named]\namp = { name = \"1\" }\nAmp = { name = \"2\" }\n"))
	problems := Read(d, (&mast{}).keys)
	if len(problems) != 1 || len(problems[0].Also) != 1 || where(problems[0].Also[0]) != "3:1 amp" || problems[0].Kind != Value {
		t.Errorf("the first of two names is not shown beside the second: %+v", problems)
	}
	if len(m.Named) != 2 || m.Named[0].ID != "amp" || m.Named[1].ID != "1" {
		t.Errorf("read %+v", m.Named)
	}
}

func TestValidID(t *testing.T) {
	for id, want := range map[string]bool{
		"a": true, "7": true, "CX-10": true, "a_b-": true, "zZ": true, "Z9z0": true, "AaZz09": true, strings.Repeat("x", 64): true,
		"": false, "-a": false, "_a": false, "a.b": false, "a b": false, "ä": false, strings.Repeat("x", 65): false, "a/b": false, "a\n": false,
	} {
		if ValidID(id) != want {
			t.Errorf("%q may name something: %v, want %v", id, !want, want)
		}
	}
}

func TestProblemsAreKindsAndInOrder(t *testing.T) {
	d, _ := parseBytes([]byte("zzz = 1\n[top]\nname = 3\n[[room]]\nname = 4\n"))
	var kinds []ProblemKind
	var lines []int
	for _, p := range Read(d, (&mast{}).keys) {
		kinds, lines = append(kinds, p.Kind), append(lines, p.At.Line())
	}
	if want := []ProblemKind{Key, Key, Value, Value}; !slices.Equal(kinds, want) {
		t.Errorf("kinds are %v, want %v", kinds, want)
	}
	if want := []int{1, 1, 3, 5}; !slices.Equal(lines, want) {
		t.Errorf("lines are %v, want %v", lines, want)
	}
}

func TestProblemsAreCapped(t *testing.T) {
	for _, c := range []struct{ keys, kept, more int }{{199, 199, 0}, {200, 200, 0}, {201, 200, 1}, {5000, 200, 4800}} {
		var b strings.Builder
		b.WriteString("height = 1\n")
		for i := range c.keys {
			fmt.Fprintf(&b, "unknown-%d = 1\n", i)
		}
		got := read(t, b.String(), (&mast{}).keys)
		if len(got) != c.kept {
			t.Fatalf("of %d problems %d are kept, want %d", c.keys, len(got), c.kept)
		}
		last := got[len(got)-1]
		if says := fmt.Sprintf("the file has %d more problems", c.more); strings.Contains(last, says) != (c.more > 0) {
			t.Errorf("of %d problems the last says %s", c.keys, last)
		}
		if !strings.HasPrefix(got[0], "2:1 unknown-0") || !strings.HasPrefix(last, fmt.Sprintf("%d:1", c.kept+1)) {
			t.Errorf("not the first %d are kept: %s to %s", c.kept, got[0], last)
		}
	}
}

func TestMuteAndFault(t *testing.T) {
	got := read(t, "a = 1\nb = 2\n", func(k *Keys) {
		var v Val[float64]
		Opt(k, &v, "a", Number, "a number")
		k.Fault(v.At, "it cannot stand", "change it", k.At())
		k.Mute()
	})
	wants(t, got, []string{`1:5 1: it cannot stand; change it`})
}

// Without a document nothing is reported, whatever the function asks.
func TestRecordingReportsNothing(t *testing.T) {
	r := Describe(func(k *Keys) {
		var v Val[string]
		Need(k, &v, "a", Text, "a text")
		if !k.Recording() || k.Has("a") || v.Set {
			t.Error("there is no document, but something was read")
		}
		k.Missing("b", "…")
		k.Fault(k.At(), "…", "…")
		k.Mute()
	})
	if len(r.Keys) != 1 {
		t.Errorf("recorded %+v", r.Keys)
	}
}

// street has records in records, so that the keys of one are read while those of
// another wait.
type street struct{ masts []mast }

func (s *street) keys(k *Keys) { Rows(k, &s.masts, "mast", (*mast).keys, "masts") }

func TestKeysOfTablesInTables(t *testing.T) {
	const one = `[[mast]]
height = 1
room = [{ name = "a" }, { name = "b", area = 1 }]
named.x = { name = "c" }
top = { name = "d" }
share = { ab = 1 }
`
	var s street
	wants(t, read(t, one+one+one, s.keys), nil)
	if len(s.masts) != 3 || len(s.masts[2].Rooms) != 2 || s.masts[2].Top.Name.V != "d" {
		t.Errorf("read %+v", s.masts)
	}
	wants(t, read(t, one+"nmae = 1\n"+one, (&street{}).keys), []string{`7:1 nmae: nothing reads the key "nmae" here; did you mean named?`})
}

// Of two slips of the pen one is taken for the key that is missing.
func TestTwoSlipsOfOneKey(t *testing.T) {
	wants(t, read(t, "heigth = 1\nhieght = 2\n", (&mast{}).keys), []string{
		`1:1 heigth: nothing reads the key "heigth" here, and height is needed; did you mean height?`,
		`2:1 hieght: nothing reads the key "hieght" here; did you mean height?`,
	})
}
