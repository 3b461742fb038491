package main

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"testing"
)

// The same input gives the same bytes, wherever and however often the program runs.
func TestSameBytes(t *testing.T) {
	calls := allCalls(t, map[string][][]string{
		"inspect":  {{"--color", "always"}},
		"budget":   {{"heron-clinic", "--terms"}},
		"takeoff":  {{}},
		"purchase": {{}},
		"cuts":     {{}},
		"pick":     {{"quay-lane"}},
		"redline":  {{"HEAD"}},
		"stock":    {{}},
		"basis":    {{}, {"us-fixed-wideband"}},
		"parts":    {{"AMP-W-65"}},
		"dress":    {{"--list"}},
		"hook":     {{"--at", "HEAD"}}, // else it would be put into the repository around this test
	}, "--root", "../../testdata/saltmarsh", "--today", "2026-12-01")
	for _, c := range calls {
		t.Run(c.String(), func(t *testing.T) {
			t.Parallel()
			first := runElsewhere(t, c.args, 0)
			if name := c.args[0] + " " + c.form; bytes.Contains(first, []byte("status 3driploop: ")) && !unmade[name] {
				t.Fatalf("the call fails: %s", first)
			}
			for i := 1; i < sameBytesRuns; i++ {
				if got := runElsewhere(t, c.args, i); !bytes.Equal(got, first) {
					t.Fatalf("run %d gave other bytes than the first:\n%s", i+1, got)
				}
			}
		})
	}
}

// runElsewhere runs the program as the i-th of many machines would.
func runElsewhere(t *testing.T, args []string, i int) []byte {
	t.Helper()
	pick := func(list ...string) string { return list[i%len(list)] }
	cmd := exec.Command("driploop", args...)
	cmd.Env = append(os.Environ(),
		"TZ="+pick("UTC", "Asia/Tokyo", "America/St_Johns", "Pacific/Kiritimati", "bad"),
		"LANG="+pick("C", "de_DE.UTF-8", "ja_JP.UTF-8", "tr_TR.UTF-8"), "LC_ALL="+pick("", "C", "ja_JP.UTF-8"),
		fmt.Sprintf("GOMAXPROCS=%d", 1+i%4),
		"RUNEWIDTH_EASTASIAN="+pick("", "1", "0"), "COLUMNS="+pick("", "40", "200"), "TERM="+pick("xterm", "dumb", ""))
	var messages bytes.Buffer
	cmd.Stderr = &messages
	out, err := cmd.Output()
	if exit := (*exec.ExitError)(nil); errors.As(err, &exit) {
		out = fmt.Appendf(out, "status %d", exit.ExitCode())
	} else if err != nil {
		t.Fatal(err)
	}
	return append(out, messages.Bytes()...)
}
