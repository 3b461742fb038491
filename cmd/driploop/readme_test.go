package main

import (
	"flag"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

var update = flag.Bool("update", false, "rewrite what the README shows")

// shown is a block of the README that is kept equal to a file or to what the tool
// prints: a comment that says so, and the fenced block under it.
var shown = regexp.MustCompile("(?s)<!-- (shows|prints) ([^\n]*?) -->\n```([a-z]*)\n(.*?)```\n")

// TestReadme holds that the README shows the files and the output that there are.
func TestReadme(t *testing.T) {
	t.Chdir(filepath.Join("..", ".."))
	text, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	found := 0
	want := shown.ReplaceAllStringFunc(string(text), func(block string) string {
		found++
		m := shown.FindStringSubmatch(block)
		return "<!-- " + m[1] + " " + m[2] + " -->\n```" + m[3] + "\n" + content(t, m[1], m[2]) + "```\n"
	})
	if found < 2 {
		t.Fatalf("the README has %d blocks to hold; a plan and its output are expected", found)
	}
	if want == string(text) {
		return
	}
	if *update {
		if err := os.WriteFile("README.md", []byte(want), 0o644); err != nil {
			t.Fatal(err)
		}
		return
	}
	t.Errorf("the README shows something else than there is; run the test with -update and read the difference. Expected:\n%s", want)
}

func content(t *testing.T, how, what string) string {
	if how == "shows" {
		b, err := os.ReadFile(what)
		if err != nil {
			t.Fatal(err)
		}
		return string(b)
	}
	out, messages, status := run(strings.Fields(what))
	if status > statusHeld {
		t.Fatalf("driploop %s: status %d: %s", what, status, messages)
	}
	return out
}

// TestReadmeCommands holds the commands at the top of the README to the status
// that it gives them.
func TestReadmeCommands(t *testing.T) {
	t.Chdir(filepath.Join("..", ".."))
	for plan, want := range map[string]int{"quay-lane": statusClear, "mill-cottage": statusClear, "fenmoor-farm": statusClear,
		"eel-van": statusClear, "boathouse": statusClear, "sluice-house": statusClear, "north-pier": statusClear, "heron-clinic": statusHeld} {
		out, _, status := run([]string{"inspect", "--root", "testdata/saltmarsh", plan})
		if status != want {
			t.Errorf("inspect %s has status %d, the README says %d:\n%s", plan, status, want, out)
		}
	}
}
