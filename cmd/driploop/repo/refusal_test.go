package repo

import (
	"os/exec"
	"strings"
	"testing"
)

func TestFirstLineOfAComplaint(t *testing.T) {
	for complaint, want := range map[string]string{
		"fatal: no\nhint: try this\n":                       "no",
		"warning: ambiguous\nfatal: no\n":                   "no",
		"error: short object ID ab is ambiguous\nfatal: no": "short object ID ab is ambiguous",
		"Schwerwiegend: nein\n":                             "Schwerwiegend: nein",
		"fatal: '\x1b[31m\u202e\xff\x00'":                   `'\x1b[31m\u202e\xff\x00'`,
		"fatal: a\rb":                                       `a\x0db`,
		"fatal: zwölf":                                      "zwölf",
	} {
		var f firstBytes
		if _, err := f.Write([]byte(complaint)); err != nil {
			t.Fatal(err)
		}
		same(t, complaint, f.first(nil), want)
	}
}

func TestComplaintWithoutEnd(t *testing.T) {
	var f firstBytes
	for range 1000 {
		if n, err := f.Write([]byte(strings.Repeat("x", 1000))); n != 1000 || err != nil {
			t.Fatal(n, err)
		}
	}
	same(t, "kept", len(f.kept), 4096)
	same(t, "shown", f.first(nil), strings.Repeat("x", longest)+"…")
}

func TestSilentComplaint(t *testing.T) {
	err := exec.Command("git", "--no-such-option-and-no-words").Run()
	exit, ok := err.(*exec.ExitError)
	if !ok {
		t.Skipf("git is not installed: the message of a silent exit is not tested")
	}
	same(t, "status", (&firstBytes{}).first(exit), "exit status 129")
}
