package main

import (
	"context"
	"encoding/json"
	"fmt"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/cmd/driploop/show"
	"driploop/rules"
)

// stored is a tree in memory.
type stored struct {
	name  string
	files map[string]string
}

func (m stored) Name() string { return m.name }

func (m stored) Files() ([]source.Entry, error) {
	var out []source.Entry
	for path, text := range m.files {
		out = append(out, source.Entry{Path: path, ID: blobID([]byte(text), 40)})
	}
	slices.SortFunc(out, func(a, b source.Entry) int { return strings.Compare(a.Path, b.Path) })
	return out, nil
}

func (m stored) Read(e source.Entry) ([]byte, error) { return []byte(m.files[e.Path]), nil }

// redlinePair is two states of the demo workspace and what must be said of them. The
// archive holds:
//
//	base/FILE, head/FILE  a file of one state; what head has not is as in base
//	both.edit, head.edit  lines "FILE: OLD => NEW", \n for a line break
//	without, gone         files that neither state has, or the head has not
//	want                  parts of the text, "!" before what must not be in it, "first:" before
//	                      what must stand in the first 200 characters of the comment
//	json                  lines "path = value" of the JSON
type redlinePair struct {
	base, head stored
	want, json []string
}

func readPair(t *testing.T, file string) redlinePair {
	t.Helper()
	a, err := txtar.ParseFile(file)
	if err != nil {
		t.Fatal(err)
	}
	p := redlinePair{base: stored{"base", demoFiles(t)}, head: stored{"head", map[string]string{}}}
	lines := map[string][]string{}
	for _, f := range a.Files {
		for l := range strings.Lines(string(f.Data)) {
			if l = strings.TrimSpace(l); l != "" {
				lines[f.Name] = append(lines[f.Name], l)
			}
		}
	}
	for _, gone := range lines["without"] {
		delete(p.base.files, gone)
	}
	edit(t, p.base.files, lines["both.edit"])
	for _, f := range a.Files {
		if path, ok := strings.CutPrefix(f.Name, "base/"); ok {
			p.base.files[path] = string(f.Data)
		}
	}
	for path, text := range p.base.files {
		p.head.files[path] = text
	}
	for _, f := range a.Files {
		if path, ok := strings.CutPrefix(f.Name, "head/"); ok {
			p.head.files[path] = string(f.Data)
		}
	}
	edit(t, p.head.files, lines["head.edit"])
	for _, gone := range lines["gone"] {
		if _, there := p.head.files[gone]; !there {
			t.Fatalf("there is no %s to take away", gone)
		}
		delete(p.head.files, gone)
	}
	p.want, p.json = lines["want"], lines["json"]
	if len(p.want) == 0 {
		t.Fatal("the pair expects nothing")
	}
	return p
}

// edit changes files as lines "FILE: OLD => NEW" say. OLD must stand there; every place
// of it is changed. "FILE => OTHER" renames one.
func edit(t *testing.T, files map[string]string, lines []string) {
	t.Helper()
	breaks := strings.NewReplacer(`\n`, "\n")
	for _, l := range lines {
		file, change, ok := strings.Cut(l, ": ")
		if from, to, rename := strings.Cut(l, " => "); !ok && rename {
			files[to] = files[from]
			delete(files, from)
			continue
		}
		old, now, ok := strings.Cut(change, "=>")
		old, now = breaks.Replace(strings.TrimSpace(old)), breaks.Replace(strings.TrimSpace(now))
		if !ok || old != "" && !strings.Contains(files[file], old) {
			t.Fatalf("the edit %q finds nothing to change", l)
		}
		if old == "" {
			files[file] += "\n" + now + "\n"
		} else {
			files[file] = strings.ReplaceAll(files[file], old, now)
		}
	}
}

func demoFiles(t *testing.T) map[string]string {
	t.Helper()
	disk, err := source.Disk("../../testdata/saltmarsh")
	if err != nil {
		t.Fatal(err)
	}
	entries, err := disk.Files()
	if err != nil {
		t.Fatal(err)
	}
	out := map[string]string{}
	for _, e := range entries {
		src, err := disk.Read(e)
		if err != nil {
			t.Fatal(err)
		}
		out[e.Path] = string(src)
	}
	return out
}

func (p redlinePair) compare(t *testing.T) *rules.Redline {
	t.Helper()
	day, err := unit.ParseDate("2026-12-01")
	if err != nil {
		t.Fatal(err)
	}
	r, err := rules.Compare(context.Background(), p.base, p.head, rules.Options{Today: day})
	if err != nil {
		t.Fatal(err)
	}
	return r
}

// Two states of the demo workspace, and what a reviewer is told.
func TestRedlinePairs(t *testing.T) {
	names, err := filepath.Glob("../../testdata/redline/*.txtar")
	if err != nil || len(names) < 25 {
		t.Fatalf("%d pairs are there, at least 25 are expected (%v)", len(names), err)
	}
	for _, name := range names {
		t.Run(strings.TrimSuffix(filepath.Base(name), ".txtar"), func(t *testing.T) {
			t.Parallel()
			p := readPair(t, name)
			r := p.compare(t)
			page := show.NewRedlinePage(r, show.RedlineTerms{})
			text := string(page.Text(show.Page{Width: 80}))
			checkText(t, text, 80)
			narrow := string(page.Text(show.Page{Width: 40}))
			checkText(t, narrow, 40)
			comment := string(show.NewRedlinePage(r, show.RedlineTerms{Comment: true}).Markdown("1"))
			if bad := inMarkdown(comment); bad != "" || len(comment) > show.MostMarkdown {
				t.Errorf("the comment has %d bytes and holds %s", len(comment), bad)
			}
			p.checkWords(t, text, comment)
			p.checkJSON(t, r)
			if again := show.NewRedlinePage(p.compare(t), show.RedlineTerms{}).Text(show.Page{Width: 80}); string(again) != text {
				t.Error("a second run says something else")
			}
		})
	}
}

// checkText holds that no line is longer than the page; a single long word may be.
func checkText(t *testing.T, text string, width int) {
	t.Helper()
	if bad := inLog(text); bad != "" {
		t.Error(bad)
	}
	for l := range strings.Lines(text) {
		if l = strings.TrimRight(l, "\n"); utf8.RuneCountInString(l) > width {
			t.Errorf("a line is wider than %d: %q", width, l)
		}
	}
}

// flat is text without the breaks of its lines.
func flat(s string) string { return strings.Join(strings.Fields(s), " ") }

func (p redlinePair) checkWords(t *testing.T, text, comment string) {
	t.Helper()
	all := flat(text)
	failed := false
	for _, w := range p.want {
		what, not := strings.CutPrefix(w, "!")
		what, first := strings.CutPrefix(what, "first:")
		where := all
		if first {
			where = flat(strings.NewReplacer(`\`, "", "`", "").Replace(string([]rune(comment)[:min(200, utf8.RuneCountInString(comment))])))
		}
		if strings.Contains(where, flat(what)) == not {
			t.Errorf("%q: expected %v", w, !not)
			failed = true
		}
	}
	if failed {
		t.Logf("\n%s", text)
	}
}

func (p redlinePair) checkJSON(t *testing.T, r *rules.Redline) {
	t.Helper()
	b, err := show.RedlineJSON(r, "test", show.RedlineTerms{})
	if err != nil {
		t.Fatal(err)
	}
	var all any
	if err := json.Unmarshal(b, &all); err != nil {
		t.Fatal(err)
	}
	for _, line := range p.json {
		path, want, ok := strings.Cut(line, " = ")
		got, err := lookUp(all, strings.TrimSpace(path))
		if !ok || err != nil || got != strings.TrimSpace(want) {
			t.Errorf("%s: got %s (%v)", line, got, err)
		}
	}
}

// lookUp finds a value by a path like "jobs.0.findings.*.rule"; of a star the values
// are joined by spaces, and # is how many there are.
func lookUp(v any, path string) (string, error) {
	if path == "" {
		b, err := json.Marshal(v)
		return string(b), err
	}
	key, rest, _ := strings.Cut(path, ".")
	switch x := v.(type) {
	case map[string]any:
		child, there := x[key]
		if !there {
			return "", fmt.Errorf("there is no %s", key)
		}
		return lookUp(child, rest)
	case []any:
		if key == "#" {
			return strconv.Itoa(len(x)), nil
		}
		if key == "*" {
			var out []string
			for _, e := range x {
				s, err := lookUp(e, rest)
				if err != nil {
					return "", err
				}
				out = append(out, s)
			}
			return strings.Join(out, " "), nil
		}
		i, err := strconv.Atoi(key)
		if err != nil || i >= len(x) {
			return "", fmt.Errorf("there is no item %s of %d", key, len(x))
		}
		return lookUp(x[i], rest)
	}
	return "", fmt.Errorf("%s leads nowhere", path)
}
