package show_test

import (
	"fmt"
	"regexp"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
)

// slips are files without a fault with a slip of the pen in each: another value in the
// place of one, a key that nobody knows, a line left out. Every so many are taken.
func slips(t *testing.T, every int) []sample {
	t.Helper()
	var out []sample
	seen := map[string]bool{}
	for _, s := range samples(t) {
		if dir, _, _ := strings.Cut(s.name, "/"); dir != "saltmarsh" && !slices.Contains(slipped, s.name) {
			continue
		}
		doc, _, _ := read(t, s)
		for _, text := range variations(s.sort, doc, seen) {
			out = append(out, sample{s.name, s.sort, text})
		}
	}
	n := 0
	return slices.DeleteFunc(out, func(sample) bool { n++; return n%every != 0 })
}

// slipped are the files beside the demo that slips are made in.
var slipped = []string{"limits/profiles/us-fixed-wideband.toml", "limits/profiles/us-router.toml", "limits/codes/us-nec-2020.toml"}

// variations are a document with one thing changed in each. What was changed likewise in
// the same place of the format is in seen, and not done again.
func variations(sort string, doc *source.Doc, seen map[string]bool) []string {
	var out []string
	src := string(doc.File.Src)
	where := ""
	put := func(from, to int32, text string) {
		if slip := where + " " + text; !seen[slip] {
			seen[slip] = true
			out = append(out, src[:from]+text+src[to:])
		}
	}
	var walk func(n *source.Node)
	walk = func(n *source.Node) {
		before := where
		defer func() { where = before }()
		for _, k := range n.Keys {
			kind := ""
			if of := n.Get("kind"); of != nil {
				kind = of.Value.Str
			}
			_, table, _ := strings.Cut(before, " ")
			where = sort + " " + lastWord(table) + " " + kind + " " + k.Name + fmt.Sprint(k.Value.Kind)
			walk(k.Value)
			if k.Value.Kind != source.Table && k.Value.Kind != source.Array {
				put(k.At.From, k.At.To, "unheard-of")
			}
		}
		for _, i := range n.Items {
			walk(i)
		}
		if n.Kind == source.Table || n.At.From == n.At.To {
			return
		}
		for _, text := range []string{`true`, `"§"`, `""`, `-1000000000`, `0.5`, `7`, `2026-12-01`, `[]`, `[7, 7]`, `{}`, `"7 m"`, `"a"`, `7.0`, `"200000 m"`, `"900 C"`, `"900 m/s"`, `"2000 mm2"`} {
			if n.Kind != source.Array || src[n.At.From] == '[' && src[n.At.To-1] == ']' && !strings.Contains(src[n.At.From:n.At.To], "\n") {
				put(n.At.From, n.At.To, text)
			}
		}
	}
	walk(doc.Root)
	lines := strings.SplitAfter(src, "\n")
	header := ""
	for i, line := range lines {
		if strings.HasPrefix(line, "[") {
			header = regexp.MustCompile(`[^.\[\]]*`).FindString(strings.Trim(line, "[")) + line[strings.LastIndexByte(line, '.')+1:]
		}
		if key, _, is := strings.Cut(line, " = "); is && !seen[sort+header+key] {
			seen[sort+header+key] = true
			out = append(out, strings.Join(append(append([]string{}, lines[:i]...), lines[i+1:]...), ""))
		}
	}
	return out
}

func lastWord(s string) string {
	words := strings.Fields(s)
	if len(words) == 0 {
		return ""
	}
	return words[len(words)-1]
}
