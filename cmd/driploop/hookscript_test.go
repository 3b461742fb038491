package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// The workspace reaches the program as it is called, whatever the shell could make of
// its name.
func TestHookScriptQuotes(t *testing.T) {
	if _, err := exec.LookPath("sh"); err != nil {
		t.Skip("there is no sh: how the hook calls driploop is left out")
	}
	bin, dir := t.TempDir(), t.TempDir()
	write := func(name, text string) {
		t.Helper()
		if err := os.WriteFile(name, []byte(text), 0o755); err != nil {
			t.Fatal(err)
		}
	}
	write(filepath.Join(bin, "driploop"), "#!/bin/sh\nprintf '%s\\0' \"$@\"\n")
	for _, below := range []string{"firm", "it's", "a b", "-x", "$(touch ran)", "`touch ran`", "a\nb", "\"", `\`, "'; touch ran; '", "*", "zwölf", "\xff", "--root=y", "~"} {
		hook := filepath.Join(dir, "pre-commit")
		write(hook, hookScript("pre-commit", below))
		cmd := exec.Command(hook)
		cmd.Dir, cmd.Env = dir, append(os.Environ(), "PATH="+bin+":"+os.Getenv("PATH"))
		out, err := cmd.CombinedOutput()
		want := strings.Join([]string{"inspect", "--quiet", "--shelf=false", "--staged", "--root=" + below, ""}, "\x00")
		if err != nil || string(out) != want {
			t.Errorf("%q: %v, %q", below, err, out)
		}
		if state, _, _, err := hookAt(hook); state != hookOurs || err != nil {
			t.Errorf("%q: the hook is not known for ours (%d, %v)", below, state, err)
		}
	}
	if _, err := os.Stat(filepath.Join(dir, "ran")); err == nil {
		t.Error("a name was run")
	}
}

// Every byte counts: a hook that somebody changed is not ours to replace.
func TestHookThatWasEdited(t *testing.T) {
	text := hookScript("pre-commit", "firm")
	file := filepath.Join(t.TempDir(), "pre-commit")
	for _, edited := range []string{text + "\n", strings.Replace(text, "firm", "barn", 1), text[:len(text)-1], hookHead, hookHead + "\n", hookHead + "0000000000000000\n"} {
		if err := os.WriteFile(file, []byte(edited), 0o755); err != nil {
			t.Fatal(err)
		}
		if state, _, _, err := hookAt(file); state != hookEdited || err != nil {
			t.Errorf("state %d, %v of\n%s", state, err, edited)
		}
	}
}
