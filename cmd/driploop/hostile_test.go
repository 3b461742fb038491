package main

import (
	"io/fs"
	"os"
	"path"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/rules"
	"driploop/rules/limits"
)

const hostile = "../../testdata/hostile"

// Forms that a command lists and does not make yet.
var unmade = map[string]bool{}

// harmless runs every form of every command and reads what comes out, results and
// messages, as the programs behind them would.
func harmless(t *testing.T, samples map[string][][]string, common ...string) (all string) {
	t.Helper()
	for _, c := range allCalls(t, samples, append(common, "--today", "2026-12-01")...) {
		out, messages, status := run(c.args)
		all += out + messages
		if name := c.args[0] + " " + c.form; unmade[name] {
			if status == statusClear {
				t.Errorf("%s is made now: take it off the list", name)
			}
			continue
		}
		read := readers[c.form]
		switch {
		case read == nil:
			t.Errorf("nothing here reads the form %s; add its reader", c.form)
		case status == statusFailed:
			t.Errorf("driploop %s failed: %s", c, messages)
		case status == statusCall:
			if out != "" {
				t.Errorf("driploop %s cannot be used and writes %q", c, out)
			}
		case read(out) != "":
			t.Errorf("driploop %s: %s", c, read(out))
		}
		if bad := inMessages(messages); bad != "" {
			t.Errorf("driploop %s, messages: %s", c, bad)
		}
	}
	return all
}

// inMessages reads standard error: each line begins with the program's name.
func inMessages(messages string) string {
	for line := range strings.Lines(messages) {
		if !strings.HasPrefix(line, "driploop: ") {
			return "a line of somebody else: " + line
		}
	}
	return inLog(messages)
}

// A workspace in which every text is an attack on some reader harms none of them.
func TestHostileTexts(t *testing.T) {
	out := harmless(t, map[string][][]string{
		"inspect":  {{}, {"lane"}, {"--quiet"}},
		"budget":   {{"lane"}, {"lane", "--terms"}, {"faults"}},
		"takeoff":  {{}},
		"purchase": {{}},
		"cuts":     {{}},
		"pick":     {{"lane"}},
		"redline":  {{"HEAD"}},
		"stock":    {{}, {"lane"}},
		"basis":    {{}, {"own"}, {"bad"}, {"loss/leg"}, {"loss/cable"}, {"loss"}},
		"parts":    {{}, {"CX-10"}, {"AMP-W-65"}, {"NC-10-NM"}, {"TAPE-SA"}, {"JMP-10-NN-1"}},
		"dress":    {{"--list"}},
		"hook":     {{"--at", "HEAD"}}, // else it would be put into the repository around this test
	}, "--root", hostile)
	for _, shown := range []string{`\x1b[2J`, `:\x3aerror`, `#\x23[error]`, `\u202eturned`, `\u001b[2J`} {
		if !strings.Contains(out, shown) {
			t.Errorf("no result shows %s; the attacks do not reach it", shown)
		}
	}
}

// Colour does not let anything through: without the program's own codes the text is
// what it is without colour.
func TestHostileTextsInColour(t *testing.T) {
	args := []string{"inspect", "--root", hostile, "--today", "2026-12-01"}
	plain, _, _ := run(args)
	coloured, _, _ := run(append(args, "--color", "always"))
	if coloured == plain {
		t.Fatal("--color always changes nothing")
	}
	if got := regexp.MustCompile("\x1b\\[[0-9;]*m").ReplaceAllString(coloured, ""); got != plain {
		t.Error("the coloured text is another text")
	}
}

// Names of files come from strangers too.
func TestHostileFileNames(t *testing.T) {
	dir := t.TempDir()
	for _, name := range []string{"::error::x", "=1+1", "a\nb", "\n::error::x", "`x`|y", "<b>x", "@someone", "#12", "\x1b[31m", "\u202ex", "-x", "a\xffb", "##[error]x", "a b", "[x](http:h.example)", "--help"} {
		for _, file := range []struct{ like, as string }{{"plans/lane.toml", "plans/" + name}, {"plans/torn.toml", "plans/torn/" + name},
			{"catalog/faults.toml", "catalog/" + name}, {"stock/counts/own.toml", "stock/counts/" + name}, {"stock/orders/own.toml", "stock/orders/" + name}, {"stock/counts/void.toml", "stock/in/" + name}, {"offers/own.toml", "offers/" + name}, {"profiles/own.toml", "profiles/" + name}} {
			copyFile(t, filepath.Join(hostile, file.like), filepath.Join(dir, file.as+".toml"))
		}
	}
	copyFile(t, filepath.Join(hostile, "driploop.toml"), filepath.Join(dir, "driploop.toml"))
	harmless(t, map[string][][]string{
		"inspect":  {{}},
		"budget":   {{"::error::x"}, {filepath.Join(dir, "plans/a\nb.toml")}},
		"takeoff":  {{}},
		"purchase": {{}},
		"cuts":     {{}},
		"pick":     {{"=1+1"}, {"::error::x"}},
		"redline":  {{"HEAD"}},
		"stock":    {{}},
		"basis":    {{"own"}},
		"parts":    {{"F"}},
		"dress":    {{"--list"}},
		"hook":     {{"--at", "HEAD"}}, // else it would be put into the repository around this test
	}, "--root", dir)
}

func copyFile(t *testing.T, from, to string) {
	t.Helper()
	src, err := os.ReadFile(from)
	if err == nil {
		err = os.MkdirAll(filepath.Dir(to), 0o777)
	}
	if err == nil {
		err = os.WriteFile(to, src, 0o666)
	}
	if err != nil {
		t.Fatal(err)
	}
}

// Arguments are shown in messages.
func TestHostileArguments(t *testing.T) {
	for _, text := range []string{"::error::x", "\n::error::x", "\x1b[31m", "\u202ex", "##[error]x", "a\xffb", "", strings.Repeat("x", 5000)} {
		for _, args := range [][]string{{text}, {"inspect", text}, {"inspect", "--", text}, {"inspect", "--root", text}, {"inspect", "--at", text}, {"inspect", "--as", text},
			{"inspect", "--today", text}, {"inspect", "--color", text}, {"inspect", "--" + text}, {"takeoff", text}, {"basis", text}, {"parts", text, "--as", "toml"}, {"parts", text},
			{"budget", text}, {"help", text}, {"inspect", "--out", "/nowhere/" + text}} {
			if len(args) > 1 && !slices.Contains(args, "--root") && args[0] != "help" {
				args = append([]string{args[0], "--root", hostile}, args[1:]...)
			}
			out, messages, status := run(args)
			if bad := inMessages(messages); bad != "" {
				t.Errorf("%q: %s", args, bad)
			}
			if bad := inLog(out); bad != "" && args[0] != "completion" {
				t.Errorf("%q: %s", args, bad)
			}
			if status != statusClear && strings.Count(messages, "\n") != 1 && out == "" {
				t.Errorf("%q: status %d with the message %q", args, status, messages)
			}
		}
	}
}

// literal is a plain string of TOML.
var literal = regexp.MustCompile(`"[^"\\]*"`)

// The demo with every seventh of its strings replaced, seven times over: whatever a
// value is meant to be, what is wrong with it is said harmlessly.
func TestHostileValues(t *testing.T) {
	const step = 7
	texts := []string{"\n::error::x", "::error::x", "\x1b[31m", "\u202ex", "=1+1", "##[error]x", "`a`|<b>", "[x](http://h.example)", "@a #1", "\u2028", "x.y.z", "N male male", "1 m m", ""}
	for offset := range step {
		dir, n := t.TempDir(), offset
		err := filepath.WalkDir("../../testdata/saltmarsh", func(name string, e fs.DirEntry, err error) error {
			if err != nil || e.IsDir() || path.Ext(name) != ".toml" {
				return err
			}
			rel, err := filepath.Rel("../../testdata/saltmarsh", name)
			if err != nil {
				return err
			}
			copyFile(t, name, filepath.Join(dir, rel))
			src, err := os.ReadFile(name)
			if err != nil {
				return err
			}
			out := literal.ReplaceAllStringFunc(string(src), func(old string) string {
				if n++; n%step != 0 || strings.HasSuffix(rel, "driploop.toml") && strings.Contains(old, "**") {
					return old
				}
				return tomlText(texts[n/step%len(texts)])
			})
			return os.WriteFile(filepath.Join(dir, rel), []byte(out), 0o666)
		})
		if err != nil {
			t.Fatal(err)
		}
		harmless(t, map[string][][]string{
			"inspect":  {{}},
			"budget":   {{"quay-lane", "--terms"}, {"heron-clinic"}},
			"takeoff":  {{}},
			"purchase": {{}},
			"cuts":     {{}},
			"pick":     {{"quay-lane"}},
			"redline":  {{"HEAD"}},
			"stock":    {{}},
			"basis":    {{}},
			"parts":    {{}, {"CX-10"}},
			"dress":    {{"--list"}},
			"hook":     {{"--at", "HEAD"}}, // else it would be put into the repository around this test
		}, "--root", dir)
	}
}

// tomlText writes a string as TOML does.
func tomlText(s string) string {
	var b strings.Builder
	for _, r := range s {
		if r < ' ' || r == '"' || r == '\\' {
			b.WriteString(`\u` + strconv.FormatInt(0x10000+int64(r), 16)[1:])
			continue
		}
		b.WriteRune(r)
	}
	return `"` + b.String() + `"`
}

// Every key that takes free text stands in the hostile workspace, with such a text.
func TestHostileTextsStandEverywhere(t *testing.T) {
	formats := map[string]*source.Record{"driploop.toml": rules.DescribeWorkspace(), "plans/*": bom.DescribePlan(), "offers/*": catalog.DescribeOffers(),
		"stock/counts/*": catalog.DescribeSheet(), "stock/orders/*": catalog.DescribeOrder(), "profiles/*": limits.Describe()}
	for pattern, record := range formats {
		var roots []*source.Node
		files, err := filepath.Glob(filepath.Join(hostile, pattern))
		if err != nil || len(files) == 0 {
			t.Fatalf("%s: no files (%v)", pattern, err)
		}
		for _, name := range files {
			src, err := os.ReadFile(name)
			if err != nil {
				t.Fatal(err)
			}
			file, _ := source.NewFile(name, src)
			doc, _ := source.Parse(file)
			roots = append(roots, doc.Root)
		}
		for _, lack := range untested(record, roots, "") {
			t.Errorf("%s: no hostile text stands in %s", pattern, lack)
		}
	}
}

// untested lists the free texts of a record that none of the tables has hostile.
func untested(r *source.Record, tables []*source.Node, at string) []string {
	var out []string
	for _, k := range r.Keys {
		var values []*source.Node
		for _, table := range tables {
			if v := table.Get(k.Name); v != nil {
				values = append(values, v.Value)
			}
		}
		switch {
		case k.Shape == source.OneTable:
			out = append(out, untested(k.Sub, values, at+k.Name+".")...)
		case k.Shape != source.Scalar:
			out = append(out, untested(k.Sub, below(values), at+k.Name+".")...)
		case isText(k.Type) && !slices.ContainsFunc(append(values, below(values)...), isHostile):
			out = append(out, at+k.Name)
		}
	}
	return out
}

func isText(t source.TypeDoc) bool {
	text := source.Text.Shape.Name
	return t.Name == text || t.List != nil && t.List.Name == text
}

// below lists the items of arrays and the values of tables.
func below(nodes []*source.Node) []*source.Node {
	var out []*source.Node
	for _, n := range nodes {
		out = append(out, n.Items...)
		for _, k := range n.Keys {
			out = append(out, k.Value)
		}
	}
	return out
}

func isHostile(n *source.Node) bool {
	return n.Kind == source.String && (inLog(n.Str) != "" || inCSV(n.Str) != "" || inMarkdown(n.Str) != "")
}
