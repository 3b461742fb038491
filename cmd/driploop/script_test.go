package main

import (
	"bytes"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

// TestMain makes the test binary the program itself where a script runs driploop.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){"driploop": main})
}

// The scripts of testdata/script run the whole program on small workspaces that
// stand in the same file. They have, beside the usual commands:
//
//	status N driploop …       the call must end with the exit status N
//	onto FILE N driploop …    the same with standard output on a file or device;
//	                          the messages are in the file messages
//	closed N driploop …       the same with nobody reading standard output
//	[!] has FILE TEXT         a text, with \x1b and the like for bytes, stands there
//
// $SALTMARSH is the demo workspace. In a clean build nothing may be left out: there
// the condition [ci] holds. With DRIPLOOP_UPDATE set, the whole outputs that scripts
// compare with are written anew; look at what that changed before it is kept.
func TestScripts(t *testing.T) {
	demo, err := filepath.Abs("../../testdata/saltmarsh")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir:                 "../../testdata/script",
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		UpdateScripts:       os.Getenv("DRIPLOOP_UPDATE") != "",
		Setup: func(e *testscript.Env) error {
			e.Setenv("SALTMARSH", demo)
			e.Setenv("NO_COLOR", "")
			e.Setenv("GIT_CONFIG_NOSYSTEM", "1")
			for _, who := range []string{"AUTHOR", "COMMITTER"} {
				e.Setenv("GIT_"+who+"_NAME", "jo")
				e.Setenv("GIT_"+who+"_EMAIL", "jo@saltmarsh.example")
			}
			return nil
		},
		Condition: func(cond string) (bool, error) {
			if cond == "ci" {
				return os.Getenv("DRIPLOOP_CI") != "", nil
			}
			return false, errors.New("unknown condition " + cond)
		},
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"status": scriptStatus, "onto": scriptOnto, "closed": scriptClosed, "has": scriptHas,
		},
	})
}

// scriptStatus runs a program and holds its exit status against the one given.
func scriptStatus(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: status N program…")
	}
	sameStatus(ts, args[0], ts.Exec(args[1], args[2:]...))
}

func sameStatus(ts *testscript.TestScript, want string, err error) {
	got := 0
	if exit := (*exec.ExitError)(nil); errors.As(err, &exit) {
		got = exit.ExitCode()
	} else if err != nil {
		ts.Fatalf("running the program: %v", err)
	}
	if want != strconv.Itoa(got) {
		ts.Fatalf("the exit status is %d, want %s", got, want)
	}
}

// scriptOnto runs a program with its standard output on a file.
func scriptOnto(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 3 {
		ts.Fatalf("usage: onto FILE N program…")
	}
	out, err := os.OpenFile(ts.MkAbs(args[0]), os.O_WRONLY|os.O_CREATE|os.O_TRUNC, 0o666)
	ts.Check(err)
	defer out.Close()
	runOn(ts, out, args[1], args[2:])
}

// scriptClosed runs a program whose standard output is a pipe that nobody reads.
func scriptClosed(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: closed N program…")
	}
	r, w, err := os.Pipe()
	ts.Check(err)
	ts.Check(r.Close())
	defer w.Close()
	runOn(ts, w, args[0], args[1:])
}

func runOn(ts *testscript.TestScript, out *os.File, status string, args []string) {
	path, err := exec.LookPath(args[0])
	ts.Check(err)
	cmd := exec.Command(path, args[1:]...)
	cmd.Dir = ts.MkAbs(".")
	cmd.Env = append(os.Environ(), "HOME="+ts.Getenv("HOME"))
	cmd.Stdout = out
	var messages bytes.Buffer
	cmd.Stderr = &messages
	err = cmd.Run()
	ts.Check(os.WriteFile(ts.MkAbs("messages"), messages.Bytes(), 0o666))
	sameStatus(ts, status, err)
}

// scriptHas looks for a fixed text, every character as it stands, in a file or in
// stdout or stderr of the last call. \xNN in the text is that byte.
func scriptHas(ts *testscript.TestScript, neg bool, args []string) {
	if len(args) != 2 {
		ts.Fatalf("usage: has FILE TEXT")
	}
	text, err := strconv.Unquote(`"` + strings.ReplaceAll(args[1], `"`, `\"`) + `"`)
	ts.Check(err)
	if strings.Contains(ts.ReadFile(args[0]), text) == neg {
		ts.Fatalf("%s: %q is there: %v", args[0], text, neg)
	}
}
