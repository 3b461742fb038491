package source

import (
	"fmt"
	"strconv"
	"strings"
	"testing"
	"time"
)

func parseBytes(src []byte) (*Doc, []Problem) {
	f, found := NewFile("plans/quay-lane.toml", src)
	d, more := Parse(f)
	return d, append(found, more...)
}

// parseGood parses what must have no problem.
func parseGood(t *testing.T, src string) *Doc {
	t.Helper()
	d, found := parseBytes([]byte(src))
	if len(found) > 0 {
		t.Fatalf("%q is refused: %s", src, listed(found))
	}
	return d
}

// parseBad parses what must have exactly one problem.
func parseBad(t *testing.T, src string) Problem {
	t.Helper()
	d, found := parseBytes([]byte(src))
	checkPlaces(t, d, found)
	if len(found) != 1 {
		t.Fatalf("%q: want one problem, got %d: %s", src, len(found), listed(found))
	}
	return found[0]
}

func listed(found []Problem) string {
	var b strings.Builder
	for _, p := range found {
		fmt.Fprintf(&b, "\n  %s kind %d: %s; %s", where(p.At), p.Kind, p.Says, p.Do)
	}
	return b.String()
}

// where is a place as line:column and its text.
func where(p Place) string { return fmt.Sprintf("%d:%d %s", p.Line(), p.Col(), p.Text()) }

// at finds a key by names and indexes, such as "range 1 loss".
func at(t *testing.T, d *Doc, path string) *KeyNode {
	t.Helper()
	var k *KeyNode
	n := d.Root
	for step := range strings.FieldsSeq(path) {
		if i, err := strconv.Atoi(step); err == nil && n.Kind == Array && i < len(n.Items) {
			n = n.Items[i]
			k = &KeyNode{Value: n}
			continue
		}
		if k = n.Get(step); k == nil {
			t.Fatalf("%s: no key %s", path, step)
		}
		n = k.Value
	}
	return k
}

// checkPlaces holds that every place lies in the file, and that keys and values
// lie where their text is.
func checkPlaces(t *testing.T, d *Doc, found []Problem) {
	t.Helper()
	inside := func(p Place, of string) {
		if p.File != d.File || p.From < 0 || p.From > p.To || int(p.To) > len(d.File.Src) {
			t.Fatalf("%s: its place %d to %d is not in the file of %d bytes", of, p.From, p.To, len(d.File.Src))
		}
	}
	for _, p := range found {
		inside(p.At, p.Says)
		for _, a := range p.Also {
			inside(a, p.Says)
		}
		if p.Kind == 0 || p.Says == "" || p.Do == "" {
			t.Fatalf("a problem is not complete: %+v", p)
		}
	}
	if d.Root.Kind != Table {
		t.Fatal("the root is no table")
	}
	checkNode(t, d.Root, d.Partial, inside)
}

func checkNode(t *testing.T, n *Node, partial bool, inside func(Place, string)) {
	t.Helper()
	inside(n.At, "a value")
	if text := n.At.Text(); !partial && n.Kind == Array && n.made == asValue && (text[0] != '[' || text[len(text)-1] != ']') {
		t.Fatalf("%q is no array", text)
	}
	if text := n.At.Text(); n.Kind == String && !strings.ContainsAny(text[:1], `"'`) {
		t.Fatalf("%q is no string", text)
	}
	for _, item := range n.Items {
		checkNode(t, item, partial, inside)
	}
	for _, k := range n.Keys {
		inside(k.At, k.Name)
		if text := k.At.Text(); text != k.Name && !strings.ContainsAny(text[:1], `"'`) {
			t.Fatalf("the key %q lies at %q", k.Name, text)
		}
		if n.Get(k.Name) != k {
			t.Fatalf("the key %q is not found by its name", k.Name)
		}
		checkNode(t, k.Value, partial, inside)
	}
}

func TestPlaces(t *testing.T) {
	for _, c := range []struct{ name, src, path, key, value string }{
		{"plain", "part = \"CX-10\"\nqty = 2\n", "qty", "2:1 qty", "2:7 2"},
		{"no blanks", "a=true", "a", "1:1 a", "1:3 true"},
		{"table", "\n[ site ] # here\nwind = 44\n", "site", "2:3 site", "2:1 [ site ]"},
		{"below a table", "[device.mast]\npart = 'MT-42'", "device mast part", "2:1 part", "2:8 'MT-42'"},
		{"last part of a header", "[device . mast]", "device mast", "1:11 mast", "1:1 [device . mast]"},
		{"on the way", "[device.mast]", "device", "1:2 device", "1:2 device"},
		{"header after its sub-table", "[a.b]\n[a]\nx = 1", "a", "2:2 a", "2:1 [a]"},
		{"array of tables", "[[range]]\nmhz = 1\n[[ range ]]\nmhz = 2\n", "range 1 mhz", "4:1 mhz", "4:7 2"},
		{"its rows", "[[range]]\n[[ range ]]\n", "range 1", "", "2:1 [[ range ]]"},
		{"its key", "[[range]]\n[[range]]\n", "range", "1:3 range", "1:1 [[range]]"},
		{"table below a row", "[[r]]\n[r.s]\na = 1\n[[r]]\n[r.s]\na = 2", "r 1 s a", "6:1 a", "6:5 2"},
		{"dotted", "site . wind.basis = 1", "site wind basis", "1:13 basis", "1:21 1"},
		{"dotted, on the way", "site.wind = 1", "site", "1:1 site", "1:1 site"},
		{"inline table", "x = {a = 1, b.c = \"two\"}", "x b c", "1:15 c", "1:19 \"two\""},
		{"inline table, whole", "x = { a = {}, b = [1] } # {", "x", "1:1 x", "1:5 { a = {}, b = [1] }"},
		{"empty inline table", "x = {  }\ny = 1", "x", "1:1 x", "1:5 {  }"},
		{"inline table in an array", "x = [{a = 1}, {a = 2}]", "x 1 a", "1:16 a", "1:20 2"},
		{"array", "x = [ 1, [2, 3], ]", "x", "1:1 x", "1:5 [ 1, [2, 3], ]"},
		{"array in an array", "x = [[], [2, 3]]", "x 1", "", "1:10 [2, 3]"},
		{"item", "x = [[150, 3.4]]", "x 0 1", "", "1:12 3.4"},
		{"array over lines", "x = [ # ] [9\n  1, # one, \n\n  2\n]", "x 1", "", "4:3 2"},
		{"quoted key", `"a.b" = 1`, "a.b", `1:1 "a.b"`, "1:9 1"},
		{"text that looks like TOML", "x = '''\n[a]\nb = 1'''\n[a]\nb = 2", "a b", "5:1 b", "5:5 2"},
		{"text over lines", "x = \"\"\"\nq\\\n  \"\"\"", "x", "1:1 x", "1:5 \"\"\"\nq\\\n  \"\"\""},
		{"line ends of two bytes", "[a]\r\nx = [1,\r\n2]\r\ny = 'ß' \r\n", "a y", "4:1 y", "4:5 'ß'"},
		{"item after such line ends", "[a]\r\nx = [1,\r\n2]\r\n", "a x 1", "", "3:1 2"},
		{"wide characters", "x = {\"zählt\" = 'Café ☕🛰', b = 1}", "x b", "1:27 b", "1:31 1"},
		{"quoted part of a key", "\"Žá\".x = 1", "Žá x", "1:6 x", "1:10 1"},
		{"numbers", "a = +1_000\nb = -0.5e-3", "b", "2:1 b", "2:5 -0.5e-3"},
		{"date and time", "a = 2026-12-01 07:30:00Z # 1", "a", "1:1 a", "1:5 2026-12-01 07:30:00Z"},
	} {
		t.Run(c.name, func(t *testing.T) {
			d := parseGood(t, c.src)
			checkPlaces(t, d, nil)
			k := at(t, d, c.path)
			if c.key != "" && where(k.At) != c.key {
				t.Errorf("the key is at %q, want %q", where(k.At), c.key)
			}
			if where(k.Value.At) != c.value {
				t.Errorf("the value is at %q, want %q", where(k.Value.At), c.value)
			}
		})
	}
}

func TestValues(t *testing.T) {
	d := parseGood(t, `
whole  = -9_000
hex    = 0xFF
octal  = 0o17
binary = 0b101
figure = 6.0
power  = 5e+22
yes    = true
text   = "a\tb\u00E9"
lines  = """
one \
   two"""
offset = 2026-12-01T07:30:00.25-07:00
joined = 2026-12-01 07:30:00
day    = 2026-12-01
clock  = 23:59:59.5
`)
	utc := func(y int, m time.Month, day, h, min, s, ns int) time.Time {
		return time.Date(y, m, day, h, min, s, ns, time.UTC)
	}
	for name, want := range map[string]Node{
		"whole":  {Kind: Integer, Int: -9000},
		"hex":    {Kind: Integer, Int: 255},
		"octal":  {Kind: Integer, Int: 15},
		"binary": {Kind: Integer, Int: 5},
		"figure": {Kind: Float, Float: 6},
		"power":  {Kind: Float, Float: 5e22},
		"yes":    {Kind: Bool, Bool: true},
		"text":   {Kind: String, Str: "a\tbé"},
		"lines":  {Kind: String, Str: "one two"},
		"offset": {Kind: DateTime, Time: utc(2026, 12, 1, 14, 30, 0, 25e7)},
		"joined": {Kind: LocalDateTime, Time: utc(2026, 12, 1, 7, 30, 0, 0)},
		"day":    {Kind: LocalDate, Time: utc(2026, 12, 1, 0, 0, 0, 0)},
		"clock":  {Kind: LocalTime, Time: utc(0, 1, 1, 23, 59, 59, 5e8)},
	} {
		n := at(t, d, name).Value
		if n.Kind != want.Kind || n.Int != want.Int || n.Float != want.Float || n.Bool != want.Bool || n.Str != want.Str || !n.Time.Equal(want.Time) {
			t.Errorf("%s was read as %+v, want %+v", name, *n, want)
		}
		if n.Kind >= LocalDateTime && n.Time.Location() != time.UTC {
			t.Errorf("%s is in %v, want UTC", name, n.Time.Location())
		}
	}
	if _, seconds := at(t, d, "offset").Value.Time.Zone(); seconds != -7*3600 {
		t.Errorf("the offset was read as %d s", seconds)
	}
}

func TestByteOrderMark(t *testing.T) {
	d, found := parseBytes([]byte("\xEF\xBB\xBFpart = 'CX-10'"))
	if len(found) != 1 || found[0].Kind != Syntax || where(found[0].At) != "1:1 " {
		t.Errorf("want one problem at the start of the file, got %s", listed(found))
	}
	if k := at(t, d, "part"); where(k.At) != "1:1 part" || k.Value.Str != "CX-10" {
		t.Errorf("the file is not read on: %q", where(k.At))
	}
	if p := parseBad(t, "a = 1\n\uFEFFb = 2"); where(p.At) != "2:1 \uFEFF" {
		t.Errorf("a mark inside the file is reported at %q", where(p.At))
	}
}

func TestNotText(t *testing.T) {
	for _, c := range []struct{ src, at string }{
		{"a = 1\nb = 'x\x00'", "2:7 \x00"},
		{"# é\na = 'ü\xFF'", "2:7 \xFF"},
		{"\xFF\xFEa", "1:1 \xFF"},
		{"a = '\xED\xA0\x80'", "1:6 \xED"},
		{"a = 1 # \xC3", "1:9 \xC3"},
	} {
		p := parseBad(t, c.src)
		if where(p.At) != c.at || p.Kind != Syntax {
			t.Errorf("%q is reported at %q with kind %d, want %q", c.src, where(p.At), p.Kind, c.at)
		}
	}
}

func TestRefusedNumbers(t *testing.T) {
	for _, c := range []struct{ src, at string }{
		{"gain = nan", "1:8 nan"},
		{"points = [[150, -inf]]", "1:17 -inf"},
		{"a = {b = +nan}", "1:10 +nan"},
		{"a = 1e400", "1:5 1e400"},
		{"a = 9223372036854775808", "1:5 9223372036854775808"},
		{"a = 0xFFFFFFFFFFFFFFFF", "1:5 0xFFFFFFFFFFFFFFFF"},
	} {
		p := parseBad(t, c.src)
		if where(p.At) != c.at || p.Kind != Value {
			t.Errorf("%q is reported at %q with kind %d, want a value at %q", c.src, where(p.At), p.Kind, c.at)
		}
	}
	d, _ := parseBytes([]byte("a = nan\nb = 9223372036854775807\nc = -9223372036854775808"))
	if n := at(t, d, "a").Value; n.Kind != Refused {
		t.Errorf("a refused value has the kind %d, so that it could be read as zero", n.Kind)
	}
	if at(t, d, "b").Value.Int != 1<<63-1 || at(t, d, "c").Value.Int != -1<<63 {
		t.Error("the greatest and the least whole number are not read")
	}
}

func TestAllProblemsInOrder(t *testing.T) {
	d, found := parseBytes([]byte("a = nan\nb = {c = 1,}\na = 2\n[t]\nd = 07:30\n[t]\ne = \"\\e\"\nf = \n"))
	checkPlaces(t, d, found)
	var got []string
	for _, p := range found {
		got = append(got, fmt.Sprintf("%d:%d", p.At.Line(), p.At.Col()))
	}
	if want := "1:5 2:11 3:1 5:5 6:2 7:6 8:5"; strings.Join(got, " ") != want {
		t.Errorf("problems at %v, want %s:%s", got, want, listed(found))
	}
	if !d.Partial || at(t, d, "t d") == nil {
		t.Error("the tree before the broken line is lost, or nothing says that it is not whole")
	}
}

func TestManyProblems(t *testing.T) {
	_, found := parseBytes([]byte("a = [" + strings.Repeat("nan,\n", 500) + "]"))
	if len(found) != MaxProblems {
		t.Fatalf("%d problems are kept, want %d", len(found), MaxProblems)
	}
	if last := found[MaxProblems-1].Says; !strings.Contains(last, "300 more") {
		t.Errorf("the last problem does not say how many were left out: %s", last)
	}
}

func TestReadsWithoutWriting(t *testing.T) {
	src := "x = 1\n[a]\nb = 'é'\n"
	d := parseGood(t, src)
	if string(d.File.Src) != src {
		t.Error("the bytes of the file were changed")
	}
}
