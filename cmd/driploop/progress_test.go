package main

import (
	"bytes"
	"io"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// The line appears after a second, is written only where it says something new, covers
// a longer one before it, and is gone in the end.
func TestMeter(t *testing.T) {
	var out bytes.Buffer
	start := time.Date(2026, 12, 1, 12, 0, 0, 0, time.UTC)
	m := &meter{to: &out, start: start}
	steps := []struct {
		after time.Duration
		stand
		want string
	}{
		{999 * time.Millisecond, stand{"reading plans", 1000, 10000}, ""},
		{time.Second, stand{"reading plans", 1234, 10000}, "\rreading plans 1,234 of 10,000"},
		{1100 * time.Millisecond, stand{"reading plans", 1234, 10000}, ""},
		{1200 * time.Millisecond, stand{"reading plans", 10000, 10000}, "\rreading plans 10,000 of 10,000"},
		{1300 * time.Millisecond, stand{"sharing out the shelf", 0, 0}, "\rsharing out the shelf         \b\b\b\b\b\b\b\b\b"},
	}
	m.show(start.Add(time.Hour))
	for _, s := range steps {
		m.tell(s.what, s.done, s.total)
		m.show(start.Add(s.after))
		if got := out.String(); got != s.want {
			t.Errorf("after %s: %q, wanted %q", s.after, got, s.want)
		}
		out.Reset()
	}
	m.wipe()
	m.wipe()
	if got, want := out.String(), "\r"+strings.Repeat(" ", len("sharing out the shelf"))+"\r"; got != want {
		t.Errorf("in the end %q, wanted %q", got, want)
	}
}

func TestGrouped(t *testing.T) {
	for n, want := range map[int]string{0: "0", 999: "999", 1000: "1,000", 1234567: "1,234,567", 100000: "100,000"} {
		if got := grouped(n); got != want {
			t.Errorf("%d is %s, wanted %s", n, got, want)
		}
	}
}

// Nobody watches a pipe or a file, nor with --quiet.
func TestMeterOnlyOnATerminal(t *testing.T) {
	file, err := os.Create(filepath.Join(t.TempDir(), "messages"))
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	for name, w := range map[string]io.Writer{"buffer": &bytes.Buffer{}, "file": file} {
		c := &Command{Stderr: w, Now: time.Now, Env: func(string) string { return "" }}
		if c.progress() != nil {
			t.Errorf("progress goes to a %s", name)
		}
		c.told("reading plans", 1, 2)
		c.settled()
	}
}

// On a terminal, here one made by the program script, the line is shown and wiped
// before the result; TestMeterAtWork is what runs there.
func TestMeterOnATerminal(t *testing.T) {
	script, err := exec.LookPath("script")
	if err != nil {
		if os.Getenv("DRIPLOOP_CI") != "" {
			t.Fatal(err)
		}
		t.Skip("there is no script: the line on a terminal is left out")
	}
	for _, c := range []struct {
		name, flag, term, want string
	}{
		{"plain", "", "xterm", "\rreading plans 1,234 of 10,000\r" + strings.Repeat(" ", 29) + "\rthe result\r\n"},
		{"quiet", "quiet", "xterm", "the result\r\n"},
		{"dumb", "", "dumb", "the result\r\n"},
		{"narrow", "", "narrow", "the result\r\n"},
	} {
		t.Run(c.name, func(t *testing.T) {
			call := os.Args[0] + " -test.run=^TestMeterAtWork$"
			if c.term == "narrow" {
				call = "stty cols 20; " + call
			}
			cmd := exec.Command(script, "-qec", call, filepath.Join(t.TempDir(), "typescript"))
			cmd.Env = append(os.Environ(), "DRIPLOOP_METER=at work "+c.flag, "TERM="+c.term)
			cmd.Stdin = strings.NewReader("")
			out, err := cmd.CombinedOutput()
			if err != nil {
				t.Fatalf("%v\n%s", err, out)
			}
			if got, _, _ := strings.Cut(string(out), "PASS"); got != c.want {
				t.Errorf("the terminal got %q, wanted %q", got, c.want)
			}
		})
	}
}

func TestMeterAtWork(t *testing.T) {
	work, on := os.LookupEnv("DRIPLOOP_METER")
	if !on {
		return // it is the other half of TestMeterOnATerminal
	}
	now := time.Now()
	c := &Command{Stdout: os.Stdout, Stderr: os.Stderr, Env: os.Getenv, Now: func() time.Time { now = now.Add(patience); return now }}
	c.shared.quiet = strings.HasSuffix(work, "quiet")
	if tell := c.progress(); tell != nil {
		tell("reading plans", 1234, 10000)
	}
	time.Sleep(5 * again)
	if err := c.emit([]byte("the result\n")); err != nil {
		t.Fatal(err)
	}
}
