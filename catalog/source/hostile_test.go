package source

import (
	"fmt"
	"strings"
	"testing"
	"time"
)

// fill repeats lines until a file is as large as it may be or has as many lines
// as asked for; begin and end stand around them.
func fill(begin, end string, lines int, line func(i int) string) string {
	var b strings.Builder
	b.WriteString(begin)
	for i := range lines {
		s := line(i)
		if b.Len()+len(s)+len(end) > MaxFile {
			break
		}
		b.WriteString(s)
	}
	return b.String() + end
}

// same is a line that does not depend on its number, numbered one that does.
func same(s string) func(int) string { return func(int) string { return s } }

func numbered(format string) func(int) string {
	return func(i int) string { return fmt.Sprintf(format, i) }
}

// nested is a line whose value lies as deep as the cap allows.
func nested(key string) func(int) string {
	deep := MaxDepth - 1
	return numbered(key + "%d = " + strings.Repeat("{"+key+"=", deep) + "1" + strings.Repeat("}", deep) + "\n")
}

const endless = MaxFile

var (
	longKey  = strings.Repeat("k", MaxKey-5)
	longPath = strings.Repeat(longKey+".", MaxParts-3) + longKey
)

// refusedShapes are files as large as a file may be, each of a shape that costs
// some TOML parser time or memory out of proportion. A cap or the syntax stops
// them.
var refusedShapes = map[string]string{
	"brackets that never close":    fill("a = ", "", endless, same("[")),
	"brackets that close":          "a = " + strings.Repeat("[", MaxFile/2-2) + strings.Repeat("]", MaxFile/2-2),
	"braces that never close":      fill("a = ", "", endless, same("{a=")),
	"brackets and braces":          fill("a = ", "", endless, same("[{a=")),
	"braces nested to the cap":     fill("", "", endless, nested("k")),
	"a key of very many parts":     fill("", "k=1", endless, same("k.")),
	"one long key":                 fill("", " = 1", endless, same("k")),
	"flat keys":                    fill("", "", endless, numbered("k%d=1\n")),
	"tables":                       fill("", "", endless, numbered("[k%d]\n")),
	"rows":                         fill("", "", endless, same("[[r]]\n")),
	"rows with tables below":       fill("", "", endless, same("[[r]]\n[[r.s]]\n[r.s.t]\n")),
	"rows in braces":               fill("a = [\n", "]", endless, same("{a={}},\n")),
	"one array":                    fill("a = [\n", "]", endless, same("1,\n")),
	"one array on one line":        fill("a = [", "]", endless, same("1,")),
	"one key over and over":        fill("", "", endless, same("a=1\n")),
	"one table over and over":      fill("", "", endless, same("[a]\n")),
	"a text of escapes":            fill("a = \"", "\"", endless, same(`\n`)),
	"a text that never closes":     fill("a = \"\"\"", "", endless, same("\"\"x\n")),
	"texts that never close":       fill("", "", endless, same("a = \"\"\"\\\n")),
	"conflict markers":             fill("", "", endless, same("<<<<<<<\n")),
	"one conflict, many markers":   fill("<<<<<<<\n", "", endless, same("=======\n")),
	"commas":                       fill("a = [", "", endless, same(",")),
	"no figures":                   fill("a = [\n", "]", endless, same("nan,\n")),
	"braces over lines":            fill("a = [\n", "]", endless, same("{\n},\n")),
	"a number of very many places": fill("a = 1.", "", endless, same("1")),
}

// acceptedShapes are within all caps, so both parsers have to read all of them.
var acceptedShapes = map[string]string{
	"flat keys":   fill("", "", MaxNodes, numbered("key%08d=1\n")),
	"dotted keys": fill("", "", endless, numbered(strings.Repeat("kk.", MaxParts-1)+"k%d = 1\n")),
	"dotted keys of their own": fill("", "", MaxNodes/MaxParts, func(i int) string {
		return strings.ReplaceAll(strings.Repeat("key00000N.", MaxParts-1), "N", fmt.Sprint(i)) + "k = 1\n"
	}),
	"dotted keys of long parts":   fill("", "", endless, numbered(longPath+".k%d = 1\n")),
	"braces nested to the cap":    fill("", "", MaxNodes/MaxDepth, nested("keykeyk")),
	"braces of long keys":         fill("", "", endless, nested(longKey)),
	"a long header, small keys":   fill("["+longPath+"]\n", "", MaxNodes-MaxParts, numbered("key%06d=1\n")),
	"a long header, rows":         fill("", "", endless, same("[["+longPath+"]]\na=1\n")),
	"a long header, rows below":   fill("["+longPath[MaxKey-4:]+"]\n", "", endless, same("[["+longPath[MaxKey-4:]+".r]]\na=1\n")),
	"rows with tables below":      fill("", "", MaxNodes/8-1, same("[[row]]\nkey = 1\n[[row.sub]]\nkey = 1\n[row.sub.table]\nkey = 1\n[row.sub.table.below]\n")),
	"tables":                      fill("", "", MaxNodes, numbered("[table%06d]\n")),
	"rows in braces":              fill("a = [\n", "]", MaxNodes/5-1, same("{a={b={}, c={}, text=\"a text that is a good deal longer\"}},\n")),
	"one array":                   fill("a = [\n", "]", MaxNodes-1, same("100_000_000,\n")),
	"one array of texts":          fill("a = [\n", "]", MaxNodes-1, same("\"\\u00e9\\n\",\n")),
	"long texts":                  fill("a = [\n", "]", endless, same("\""+strings.Repeat("\\n", MaxLine/2-5)+"\",\n")),
	"a text of line escapes":      fill("a = \"\"\"", "\"\"\"", endless, same("\\\n")),
	"a text of escapes and lines": fill("a = \"\"\"", "\"\"\"", endless, same("\\\\ \n")),
	"comments":                    fill("", "", endless, same("#\n")),
	"comments in an array":        fill("a = [\n", "]", endless, same("#\n")),
	"blank lines":                 fill("", "", endless, same("\n")),
}

func TestHostileShapes(t *testing.T) {
	for name, src := range refusedShapes {
		t.Run(name, func(t *testing.T) {
			if found := parseHostile(t, src); len(found) == 0 || len(found) > MaxProblems {
				t.Errorf("%d problems", len(found))
			}
		})
	}
}

func TestHostileShapesWithinTheCaps(t *testing.T) {
	for name, src := range acceptedShapes {
		t.Run(name, func(t *testing.T) {
			if found := parseHostile(t, src); len(found) > 0 {
				t.Errorf("refused, so the second parser is not tried: %s", listed(found[:1]))
			}
		})
	}
}

// parseHostile parses a file that must be read within bound.
func parseHostile(t *testing.T, src string) []Problem {
	t.Helper()
	if len(src) > MaxFile || len(src) < MaxFile*7/10 {
		t.Fatalf("the file has %d bytes", len(src))
	}
	start := time.Now()
	d, found := parseBytes([]byte(src))
	if took := time.Since(start); took > bound {
		t.Errorf("took %v", took)
	} else {
		t.Logf("took %v", took)
	}
	checkPlaces(t, d, found)
	return found
}

// Each cap holds what is exactly at it and refuses what is one above.
func TestCaps(t *testing.T) {
	braces := func(n int) string { return "a = " + strings.Repeat("{k=", n) + "1" + strings.Repeat("}", n) }
	dots := func(n int) string { return strings.Repeat("k.", n-1) + "k = 1" }
	header := func(n int) string { return "[" + strings.Repeat("k.", n-1) + "k]" }
	// The array is a value too.
	nodes := func(n int) string {
		return "a = [\n" + strings.Repeat(strings.Repeat("1,", 1000)+"\n", (n-1)/1000) + strings.Repeat("1,", (n-1)%1000) + "]"
	}
	for _, c := range []struct{ name, good, bad, at string }{
		{"depth of braces", braces(MaxDepth - 1), braces(MaxDepth), "1:53 1"},
		{"depth of brackets", "a = " + strings.Repeat("[", MaxDepth-1) + "1" + strings.Repeat("]", MaxDepth-1),
			"a = " + strings.Repeat("[", MaxDepth) + "1" + strings.Repeat("]", MaxDepth), "1:21 1"},
		{"depth below a header", header(MaxDepth-1) + "\na=1", header(MaxDepth) + "\na=1", "2:3 1"},
		{"depth of rows", "[" + header(MaxDepth-2) + "]\na=1", "[" + header(MaxDepth-1) + "]\na=1", "2:3 1"},
		{"depth below rows", "[[k]]\n" + header(MaxDepth-2) + "\na=1", "[[k]]\n" + header(MaxDepth-1) + "\na=1", "3:3 1"},
		{"parts of a key", dots(MaxParts), dots(MaxParts + 1), "1:33 k"},
		{"parts of a header", header(MaxParts), header(MaxParts + 1), "1:34 k"},
		{"bytes of a key", strings.Repeat("k", MaxKey) + "=1", strings.Repeat("k", MaxKey+1) + "=1", "1:1 " + strings.Repeat("k", MaxKey+1)},
		{"bytes of a quoted key", `"` + strings.Repeat("é", MaxKey/2) + `"=1`, `"` + strings.Repeat("é", MaxKey/2) + `k"=1`, "1:1 \"" + strings.Repeat("é", MaxKey/2) + `k"`},
		{"values", nodes(MaxNodes), nodes(MaxNodes + 1), "21:1999 1"},
		{"bytes of a line", "\n#" + strings.Repeat("x", MaxLine-1) + "\n", "\n#" + strings.Repeat("x", MaxLine) + "\n", "2:1 #"},
		{"bytes of the last line", "#" + strings.Repeat("x", MaxLine-1), "#" + strings.Repeat("x", MaxLine), "1:1 #"},
		{"bytes of a file", strings.Repeat("#23456\n", MaxFile/7), strings.Repeat("#23456\n", MaxFile/7+1), "1:1 "},
	} {
		t.Run(c.name, func(t *testing.T) {
			parseGood(t, c.good)
			if p := parseBad(t, c.bad); p.Kind != Syntax || where(p.At) != c.at {
				t.Errorf("reported at %.80q, want %.80q:%s", where(p.At), c.at, listed([]Problem{p}))
			}
		})
	}
}

func TestCapKeepsWhatWasRead(t *testing.T) {
	d, _ := parseBytes([]byte("a = 1\nb = " + strings.Repeat("[", MaxDepth) + "1" + strings.Repeat("]", MaxDepth) + "\nc = 2"))
	if !d.Partial || at(t, d, "a").Value.Int != 1 || d.Root.Get("c") != nil {
		t.Error("want the tree up to the cap, and a word that it is not whole")
	}
}

func TestLongLineIsReadOn(t *testing.T) {
	src := "a = \"" + strings.Repeat("x", MaxLine) + "\"\nb = nan"
	if _, found := parseBytes([]byte(src)); len(found) != 2 || found[1].Kind != Value {
		t.Errorf("want the long line and the number behind it:%s", listed(found))
	}
}
