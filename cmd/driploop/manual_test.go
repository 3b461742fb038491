package main

import (
	"errors"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/spf13/cobra"
)

func everyCommand() []*cobra.Command {
	root := (&Command{}).tree()
	return append([]*cobra.Command{root}, root.Commands()...)
}

// Help of every command has an example and fits a page of 80 columns.
func TestHelpFits(t *testing.T) {
	for _, cmd := range everyCommand() {
		args := append(strings.Fields(cmd.CommandPath())[1:], "--help")
		out, messages, status := run(args)
		if status != statusClear || messages != "" {
			t.Errorf("driploop %v ends with %d: %s", args, status, messages)
		}
		for line := range strings.Lines(out) {
			if n := utf8.RuneCountInString(strings.TrimSuffix(line, "\n")); n > pageWidth {
				t.Errorf("driploop %v: %d columns: %s", args, n, line)
			}
		}
		if cmd.Example == "" {
			t.Errorf("the command %s has no example", cmd.Name())
		}
		if has := forms[cmd.Name()]; len(has) > 1 && !strings.Contains(strings.ReplaceAll(out, "\n", " "), "Forms of --as: "+strings.Join(has, ", ")) {
			t.Errorf("driploop %v does not list the forms", args)
		}
		if bad := inLog(out); bad != "" {
			t.Errorf("driploop %v: %s", args, bad)
		}
	}
}

// Every example of the help runs, in the demo workspace kept in git: nothing but a hold
// may make one end otherwise than well.
func TestExamplesRun(t *testing.T) {
	if _, err := exec.LookPath("git"); err != nil {
		t.Skip("git is not there")
	}
	for _, cmd := range everyCommand() {
		if cmd.Example == "" {
			continue // TestHelpFits says so
		}
		t.Run(cmd.Name(), func(t *testing.T) {
			t.Parallel()
			dir := filepath.Join(t.TempDir(), "demo")
			if err := os.CopyFS(dir, os.DirFS("../../testdata/saltmarsh")); err != nil {
				t.Fatal(err)
			}
			for _, args := range [][]string{{"init", "-q"}, {"add", "."}, {"-c", "user.name=jo", "-c", "user.email=jo@saltmarsh.example", "commit", "-qm", "demo"}} {
				git := exec.Command("git", args...)
				git.Dir = dir
				if out, err := git.CombinedOutput(); err != nil {
					t.Fatalf("git %v: %s", args, out)
				}
			}
			if cmd.Name() == "start" { // its first example makes the workspace of the second
				if err := os.Remove(filepath.Join(dir, "driploop.toml")); err != nil {
					t.Fatal(err)
				}
			}
			for line := range strings.Lines(cmd.Example) {
				words := strings.Fields(line)
				if len(words) == 0 || words[0] != "driploop" {
					t.Fatalf("an example is a call of driploop: %s", line)
				}
				call := exec.Command("driploop", append(words[1:], "--today", "2026-12-01")...)
				call.Dir = dir
				out, err := call.CombinedOutput()
				exit := (*exec.ExitError)(nil)
				if err != nil && (!errors.As(err, &exit) || exit.ExitCode() != statusHeld) {
					t.Errorf("%s: %v\n%s", strings.TrimSpace(line), err, out)
				}
			}
		})
	}
}

// What the shell offers for --as is what the commands have.
func TestFormsAreOffered(t *testing.T) {
	for name, has := range forms {
		sample := map[string][]string{"budget": {"quay-lane"}, "pick": {"quay-lane"}}[name]
		got := formsOf(t, append([]string{name}, append(sample, "--root", "../../testdata/saltmarsh")...))
		if !slices.Equal(got, has) {
			t.Errorf("%s has the forms %v, and offers %v", name, got, has)
		}
	}
	for _, cmd := range everyCommand()[1:] {
		if !formless[cmd.Name()] && forms[cmd.Name()] == nil {
			t.Errorf("nothing is offered for --as of %s", cmd.Name())
		}
	}
}

// Text that is indented keeps its lines, all else is set anew.
func TestReflow(t *testing.T) {
	long := strings.Repeat("eleven more ", 10)
	got := reflow("one\ntwo\n\n  kept  as\n  it is\n\n" + long)
	want := "one two\n\n  kept  as\n  it is\n\n" + strings.TrimSpace(strings.Repeat("eleven more ", 6)) + " eleven\nmore " + strings.TrimSpace(strings.Repeat("eleven more ", 3))
	if got != want {
		t.Errorf("set as\n%s\nwant\n%s", got, want)
	}
}

// The manual has a page for every command, and its bytes depend on the day alone.
func TestManualSameBytes(t *testing.T) {
	pages := func(args ...string) map[string]string {
		dir := filepath.Join(t.TempDir(), "man1")
		_, messages, status := run(append([]string{"help", "--man", dir}, args...))
		if status != statusClear || messages != "" {
			t.Fatalf("ends with %d: %s", status, messages)
		}
		out := map[string]string{}
		err := fs.WalkDir(os.DirFS(dir), ".", func(name string, e fs.DirEntry, err error) error {
			if err == nil && !e.IsDir() {
				b, err := os.ReadFile(filepath.Join(dir, name))
				out[name] = string(b)
				return err
			}
			return err
		})
		if err != nil {
			t.Fatal(err)
		}
		return out
	}
	first, again, later := pages("--today", "2026-12-01"), pages("--today", "2026-12-01"), pages("--today", "2027-01-01")
	if len(first) != len(everyCommand()) {
		t.Errorf("%d pages are written for %d commands", len(first), len(everyCommand()))
	}
	for name, page := range first {
		if again[name] != page {
			t.Errorf("%s has other bytes the second time", name)
		}
		if later[name] == page || !strings.Contains(page, `"Dec 2026"`) || !strings.Contains(later[name], `"Jan 2027"`) {
			t.Errorf("%s does not carry the day", name)
		}
	}
}
