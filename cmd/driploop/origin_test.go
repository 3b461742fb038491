package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"driploop/cmd/driploop/book"
)

// madeFromOf is what a workbook of the workspace says of itself, by key.
func madeFromOf(t *testing.T, dir string, args ...string) map[string]string {
	t.Helper()
	out, messages, status := run(append([]string{"takeoff", "--root", dir, "--today", "2026-12-01", "--as", "xlsx"}, args...))
	if status != statusClear {
		t.Fatal(messages)
	}
	all, err := book.Read([]byte(out))
	if err != nil {
		t.Fatal(err)
	}
	s, err := all.Sheet("made-from")
	if err != nil {
		t.Fatal(err)
	}
	is := map[string]string{}
	for i := range s.Rows {
		is[s.Rows[i].Key] = s.Rows[i].Entry("is").Text
	}
	return is
}

// A workbook says which commit it stands on and which files differ from it, so that
// it can be told whether what comes back still fits.
func TestMadeFrom(t *testing.T) {
	if _, err := exec.LookPath("git"); err != nil {
		if os.Getenv("DRIPLOOP_CI") != "" {
			t.Fatal(err)
		}
		t.Skip("left out: the revision in a workbook, for want of git")
	}
	dir := t.TempDir()
	put := func(name, text string) {
		t.Helper()
		if err := os.MkdirAll(filepath.Dir(filepath.Join(dir, name)), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	git := func(args ...string) string {
		t.Helper()
		cmd := exec.Command("git", append([]string{"-C", dir, "-c", "user.name=jo", "-c", "user.email=jo@saltmarsh.example"}, args...)...)
		out, err := cmd.CombinedOutput()
		if err != nil {
			t.Fatalf("git %v: %v\n%s", args, err, out)
		}
		return strings.TrimSpace(string(out))
	}
	put("driploop.toml", "[workspace]\n")
	put("plans/a.toml", "[job]\nstage = \"review\"\n")
	put("notes.txt", "not of the workspace")
	alone := madeFromOf(t, dir)
	if !strings.HasPrefix(alone["revision"], "not known: ") || alone["state"] != "as they lie in the folder" {
		t.Errorf("without a repository it says %q, %q", alone["revision"], alone["state"])
	}
	git("init", "-q")
	if got := madeFromOf(t, dir); got["revision"] != "none yet" {
		t.Errorf("before the first commit it says %q", got["revision"])
	}
	git("add", ".")
	git("commit", "-qm", "first")
	first := git("rev-parse", "HEAD")
	clean := madeFromOf(t, dir)
	if clean["revision"] != first || clean["state"] != "as committed, in the folder" {
		t.Errorf("after a commit it says %q, %q", clean["revision"], clean["state"])
	}
	put("notes.txt", "changed, and none of our business")
	put("plans/a.toml", "[job]\nstage = \"draft\"\n")
	put("stock/counts/b.toml", "[sheet]\non = 2026-11-20\n")
	changed := madeFromOf(t, dir)
	if changed["state"] != "in the folder, not as committed: stock/counts/b.toml, plans/a.toml" {
		t.Errorf("after changes it says %q", changed["state"])
	}
	for _, kind := range []string{"digest plans", "digest stock"} {
		if changed[kind] == clean[kind] || len(changed[kind]) != 16 {
			t.Errorf("%s was %q and is %q", kind, clean[kind], changed[kind])
		}
	}
	if changed["digest catalog"] != clean["digest catalog"] {
		t.Error("the catalog did not change, and its digest did")
	}
	if got := madeFromOf(t, dir, "--at", "HEAD"); got["revision"] != first || got["state"] != "as committed (HEAD)" || got["digest plans"] != clean["digest plans"] {
		t.Errorf("of the commit it says %q", got)
	}
	git("add", "plans")
	if got := madeFromOf(t, dir, "--at", ":index"); got["state"] != "staged, not as committed: plans/a.toml" {
		t.Errorf("of what is staged it says %q", got["state"])
	}
}
