// Readme runs the commands that a document shows and compares what they print with
// what it shows. A block that is to be run stands right below a comment that says
// how its last command ends; the commands before it must end with 0:
//
//	<!-- run: status 1 -->
//	```console
//	$ driploop inspect --root testdata/saltmarsh heron-clinic
//	…
//	3 holds, 2 punch, 1 note.
//	```
//
// Lines from "$ " on are commands for bash, run in the folder of the document. A
// line that is only "…" stands for any lines; a block without output lines
// compares none.
package main

import (
	"bytes"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
)

func main() {
	if err := checkAll(os.Args[1:]); err != nil {
		fmt.Fprintln(os.Stderr, "readme:", err)
		os.Exit(1)
	}
}

func checkAll(documents []string) error {
	failed := 0
	for _, name := range documents {
		text, err := os.ReadFile(name)
		if err != nil {
			return err
		}
		found := blocks(string(text))
		if len(found) == 0 {
			return fmt.Errorf("%s has no block to run", name)
		}
		for _, b := range found {
			err := b.check(filepath.Dir(name))
			if err != nil {
				failed++
			}
			fmt.Printf("%s line %d: %s\n", name, b.line, outcome(err))
		}
	}
	if failed > 0 {
		return fmt.Errorf("%d blocks do not do what they show", failed)
	}
	return nil
}

func outcome(err error) string {
	if err == nil {
		return "does what it shows"
	}
	return err.Error()
}

type block struct {
	line     int // of the marking comment
	status   int
	commands []string
	shown    []string
}

var marked = regexp.MustCompile(`(?m)^<!-- run: status ([0-9]+) -->\n+` + "```[a-z]*\n((?s:.*?))^```$")

func blocks(text string) []block {
	var out []block
	for _, m := range marked.FindAllStringSubmatchIndex(text, -1) {
		b := block{line: 1 + strings.Count(text[:m[0]], "\n")}
		b.status, _ = strconv.Atoi(text[m[2]:m[3]])
		for _, l := range strings.Split(strings.TrimSuffix(text[m[4]:m[5]], "\n"), "\n") {
			if c, ok := strings.CutPrefix(l, "$ "); ok {
				b.commands = append(b.commands, c)
			} else if l != "" || len(b.shown) > 0 {
				b.shown = append(b.shown, l)
			}
		}
		out = append(out, b)
	}
	return out
}

func (b block) check(dir string) error {
	if len(b.commands) == 0 {
		return errors.New("the block has no command")
	}
	var printed bytes.Buffer
	for i, c := range b.commands {
		want := 0
		if i == len(b.commands)-1 {
			want = b.status
		}
		cmd := exec.Command("bash", "-c", c)
		cmd.Dir, cmd.Stdout, cmd.Stderr = dir, &printed, os.Stderr
		err := cmd.Run()
		if cmd.ProcessState == nil {
			return err
		}
		if got := cmd.ProcessState.ExitCode(); got != want {
			return fmt.Errorf("%s ends with %d, not %d", c, got, want)
		}
	}
	if len(b.shown) == 0 || like(b.shown).Match(printed.Bytes()) {
		return nil
	}
	return fmt.Errorf("the output differs; it is now:\n%s", printed.String())
}

// like is a pattern for the lines shown: "…" is any lines, everything else itself,
// but for blanks and empty lines at an end.
func like(shown []string) *regexp.Regexp {
	pattern := `\A\s*`
	for _, l := range shown {
		if strings.TrimSpace(l) == "…" {
			pattern += `(?:.*\n)*?`
			continue
		}
		pattern += regexp.QuoteMeta(strings.TrimRight(l, " ")) + ` *\n`
	}
	return regexp.MustCompile(pattern + `\s*\z`)
}
