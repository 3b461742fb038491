package rules_test

import (
	"bytes"
	"fmt"
	"strings"
	"testing"

	"driploop/catalog/source"
)

// removal is a file with one key, row, table or list item taken out of it.
type removal struct {
	what string // "device.mast.place", "power_line[0]", "cable.C1.way[1]"
	text string
}

// removals lists what can be taken out of a TOML file one at a time: every key, with
// all that it holds; every key inside of it; every table and row under a header; and
// every item of a list.
//
// Of a file that is no TOML nothing is taken out.
func removals(path, text string) []removal {
	file, _ := source.NewFile(path, []byte(text))
	doc, problems := source.Parse(file)
	if len(problems) > 0 {
		return nil
	}
	c := &cutter{src: file.Src}
	c.table("", doc.Root)
	return c.out
}

type cutter struct {
	src []byte
	out []removal
}

func (c *cutter) cut(what string, from, to int) {
	c.out = append(c.out, removal{what, string(c.src[:from]) + string(c.src[to:])})
}

func (c *cutter) table(path string, n *source.Node) {
	for _, k := range n.Keys {
		name := strings.TrimPrefix(path+"."+k.Name, ".")
		c.key(name, k)
		c.value(name, k.Value)
	}
}

func (c *cutter) value(name string, n *source.Node) {
	switch n.Kind {
	case source.Table:
		c.table(name, n)
	case source.Array:
		for i, item := range n.Items {
			at := fmt.Sprintf("%s[%d]", name, i)
			if c.header(item) {
				c.block(at, int(item.At.From))
			} else {
				c.listed(at, int(item.At.From), int(item.At.To))
			}
			c.value(at, item)
		}
	}
}

// header reports a value that a line in brackets begins: a table or a row.
func (c *cutter) header(n *source.Node) bool {
	return n.Kind == source.Table && c.lineStart(int(n.At.From)) == int(n.At.From) && c.src[n.At.From] == '['
}

func (c *cutter) key(name string, k *source.KeyNode) {
	from, to := int(k.At.From), int(k.Value.At.To)
	start := c.lineStart(from)
	lead := bytes.TrimLeft(c.src[start:from], " \t")
	switch {
	case k.Value.Kind == source.Array && len(k.Value.Items) > 0 && c.header(k.Value.Items[0]):
		// its rows are taken out one by one
	case len(lead) > 0 && lead[0] == '[':
		c.block(name, start) // a header: what it holds, without the tables below it
	case k.Value.Kind == source.Table && to <= from, to <= from:
		// a table that only the headers or dotted keys of its parts make
	case bytes.ContainsAny(lead, "{"):
		c.listed(name, from, to)
	default:
		c.cut(name, start, c.lineEnd(to))
	}
}

// block takes out a header with its lines, up to the next header.
func (c *cutter) block(name string, from int) {
	to := c.lineEnd(from)
	for to < len(c.src) && c.src[to] != '[' {
		to = c.lineEnd(to)
	}
	c.cut(name, from, to)
}

// listed takes out what stands between commas.
func (c *cutter) listed(name string, from, to int) {
	for to < len(c.src) && (c.src[to] == ' ' || c.src[to] == '\n') {
		to++
	}
	if to < len(c.src) && c.src[to] == ',' {
		c.cut(name, from, to+1)
		return
	}
	for from > 0 && strings.ContainsRune(" \n,", rune(c.src[from-1])) {
		from--
		if c.src[from] == ',' {
			break
		}
	}
	c.cut(name, from, to)
}

func (c *cutter) lineStart(i int) int { return bytes.LastIndexByte(c.src[:i], '\n') + 1 }

func (c *cutter) lineEnd(i int) int {
	if n := bytes.IndexByte(c.src[i:], '\n'); n >= 0 {
		return i + n + 1
	}
	return len(c.src)
}

// What is taken out is what is meant, and nothing besides.
func TestRemovals(t *testing.T) {
	const text = `# a plan
[job]
bands = ["B12", "B5"] # two
[site]
wind = "44 m/s"
[device]
mast = { part = "M", place = "roof", free = "1 m" }
[device.donor]
part = "A"
copies = { d2 = { at = [1, 2, 3] } }
[[power_line]]
kv = 1
[[power_line]]
kv = 2
[bond]
G1.from = "a"
`
	got := map[string]string{}
	for _, r := range removals("plans/x.toml", text) {
		if got[r.what] != "" {
			t.Errorf("%s is taken out twice", r.what)
		}
		got[r.what] = r.text
	}
	for what, gone := range map[string]string{
		"job":                          "[job]\nbands = [\"B12\", \"B5\"] # two\n",
		"job.bands":                    "bands = [\"B12\", \"B5\"] # two\n",
		"job.bands[0]":                 "\"B12\",",
		"job.bands[1]":                 ", \"B5\"",
		"site":                         "[site]\nwind = \"44 m/s\"\n",
		"site.wind":                    "wind = \"44 m/s\"\n",
		"device.mast":                  "mast = { part = \"M\", place = \"roof\", free = \"1 m\" }\n",
		"device.mast.part":             "part = \"M\",",
		"device.mast.free":             ", free = \"1 m\"",
		"device.donor.part":            "part = \"A\"\n",
		"device.donor.copies":          "copies = { d2 = { at = [1, 2, 3] } }\n",
		"device.donor.copies.d2":       "d2 = { at = [1, 2, 3] }",
		"power_line[0]":                "[[power_line]]\nkv = 1\n",
		"power_line[1].kv":             "kv = 2\n",
		"device.donor.copies.d2.at[2]": ", 3",
		"bond.G1.from":                 "G1.from = \"a\"\n",
	} {
		want := strings.Replace(text, gone, "", 1)
		if what == "device.donor.copies.d2" {
			want = strings.Replace(text, " d2 = { at = [1, 2, 3] } ", " ", 1)
		}
		if strings.ReplaceAll(got[what], " ", "") != strings.ReplaceAll(want, " ", "") {
			t.Errorf("without %s:\n%s", what, got[what])
		}
	}
}
