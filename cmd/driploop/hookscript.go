package main

import (
	"crypto/sha256"
	"fmt"
	"strings"
)

// beforeSuffix ends the name under which a hook that was there before is kept. It
// stays in its folder: hooks look for their neighbours there.
const beforeSuffix = ".before-driploop"

// legacySuffix ends the name under which the hook framework keeps, and runs, the hook
// that was there before it.
const legacySuffix = ".legacy"

// hookHead begins every hook of ours; the sum over what follows it stands at its end,
// by which a hook that somebody has edited is told from one that may be replaced.
const hookHead = "#!/bin/sh\n# Put here by driploop hook; driploop hook --remove takes it out. "

// hookScript is the hook of that name for the workspace below the top of the work
// tree, where git runs it.
func hookScript(name, below string) string {
	root := ""
	if below != "." {
		root = " --root='" + strings.ReplaceAll(below, "'", `'\''`) + "'"
	}
	body := `before=${0%/*}/` + name + beforeSuffix + `
if [ -f "$before" ] && [ -x "$before" ]; then "$before" "$@" || exit; fi
if command -v driploop >/dev/null; then exec driploop inspect --quiet --shelf=false --staged` + root + `; fi
echo 'driploop hook: driploop is not on the PATH, so nobody can look at what is staged.
Install it, or take the hook out; --no-verify passes it by this once.' >&2
exit 1
`
	return hookHead + hookSum(body) + "\n" + body
}

func hookSum(body string) string { return fmt.Sprintf("%.8x", sha256.Sum256([]byte(body))) }
