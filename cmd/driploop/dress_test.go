package main

import (
	"bytes"
	"encoding/json"
	"os"
	"path/filepath"
	"regexp"
	"slices"
	"strings"
	"testing"
)

// The workspaces that others take as examples are laid out as the tool lays them out.
func TestDemoIsDressed(t *testing.T) {
	for _, root := range []string{"saltmarsh", "readme"} {
		out, messages, status := run([]string{"dress", "--list", "--root", filepath.Join("../../testdata", root)})
		if out != "" || messages != "" || status != statusClear {
			t.Errorf("%s is not laid out, status %d: driploop dress --root testdata/%s\n%s%s", root, status, root, out, messages)
		}
	}
}

// Dressed, the demo workspace and one in which every string tries to be something
// else say of their plans what they said before, only on other lines.
func TestDressChangesNoFinding(t *testing.T) {
	for _, name := range []string{"saltmarsh", "hostile"} {
		root := filepath.Join(t.TempDir(), name)
		if err := os.CopyFS(root, os.DirFS(filepath.Join("../../testdata", name))); err != nil {
			t.Fatal(err)
		}
		disarrange(t, root)
		before := said(t, root)
		out, messages, status := run([]string{"dress", "--root", root})
		if !strings.Contains(out, ".toml\n") || status > statusHeld {
			t.Errorf("%s: nothing was dressed, status %d: %s", name, status, messages)
		}
		if after := said(t, root); after != before {
			t.Errorf("%s: it said\n%s\nand says\n%s", name, before, after)
		}
		if out, _, _ := run([]string{"dress", "--list", "--root", root}); out != "" {
			t.Errorf("%s: a second time %s would change", name, out)
		}
	}
}

// disarrange turns the order of the tables of each plan round that can be read.
func disarrange(t *testing.T, root string) {
	t.Helper()
	files, err := filepath.Glob(filepath.Join(root, "plans/*.toml"))
	if err != nil || len(files) == 0 {
		t.Fatalf("there are no plans: %v", err)
	}
	for _, file := range files {
		src, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		job := bytes.Index(src, []byte("[job]"))
		if job < 0 {
			continue
		}
		end := job + bytes.Index(src[job:], []byte("\n["))
		if end < job {
			continue
		}
		turned := string(src[:job]) + string(src[end+1:]) + "\n" + string(src[job:end+1])
		if err := os.WriteFile(file, []byte(turned), 0o644); err != nil {
			t.Fatal(err)
		}
	}
}

var onLine = regexp.MustCompile(`\bline \d+`)

// said is every finding on a workspace, without its place.
func said(t *testing.T, root string) string {
	t.Helper()
	out, messages, status := run([]string{"inspect", "--root", root, "--as", "json"})
	var all any
	if err := json.Unmarshal([]byte(out), &all); err != nil || status > statusHeld {
		t.Fatalf("status %d: %s%v", status, messages, err)
	}
	var list []string
	var walk func(v any)
	walk = func(v any) {
		switch v := v.(type) {
		case []any:
			for _, item := range v {
				walk(item)
			}
		case map[string]any:
			if v["rule"] == nil {
				for _, item := range v {
					walk(item)
				}
				return
			}
			delete(v, "line")
			delete(v, "col")
			delete(v, "related")
			b, err := json.Marshal(v)
			if err != nil {
				t.Fatal(err)
			}
			list = append(list, onLine.ReplaceAllString(string(b), "line N"))
		}
	}
	walk(all)
	if len(list) < 20 {
		t.Fatalf("only %d findings were found in\n%s", len(list), out)
	}
	slices.Sort(list)
	return strings.Join(list, "\n")
}
