package repo

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"slices"
	"strings"
	"time"
)

// settings come before every git command. Those of the command line win over the
// configuration that lies in the repository.
var settings = []string{
	"-c", "core.fsmonitor=false", // else the program named there is run when the index is read
	"-c", "core.hooksPath=/dev/null",
	"-c", "protocol.allow=never",
	"-c", "safe.bareRepository=explicit", // no repository that hides among the plans
	"--no-pager",
}

// environment is added to the one this program was started with.
var environment = []string{
	"GIT_OPTIONAL_LOCKS=0",
	"GIT_TERMINAL_PROMPT=0",
	"GIT_NO_REPLACE_OBJECTS=1",
	// An object missing from a partial clone would be fetched. The setting
	// protocol.allow loses against protocol.file.allow in the repository's own
	// configuration; this list, empty, does not. A git that knows the second
	// variable does not even try.
	"GIT_ALLOW_PROTOCOL=",
	"GIT_NO_LAZY_FETCH=1",
	"GIT_LITERAL_PATHSPECS=0", // ":/" must keep its meaning
}

// pointers are the variables that bind git to one repository; those that decide
// which one it is come first (git rev-parse --local-env-vars).
var pointers = []string{
	"GIT_DIR", "GIT_WORK_TREE", "GIT_INDEX_FILE", "GIT_COMMON_DIR", "GIT_OBJECT_DIRECTORY",
	"GIT_ALTERNATE_OBJECT_DIRECTORIES", "GIT_CONFIG", "GIT_CONFIG_PARAMETERS", "GIT_CONFIG_COUNT",
	"GIT_IMPLICIT_WORK_TREE", "GIT_GRAFT_FILE", "GIT_REPLACE_REF_BASE", "GIT_PREFIX",
	"GIT_SHALLOW_FILE", "GIT_INTERNAL_SUPER_PREFIX",
}

// pointed reports whether the environment binds git to a repository.
func pointed() bool {
	return slices.ContainsFunc(pointers[:5], func(name string) bool {
		_, set := os.LookupEnv(name)
		return set
	})
}

// git is one way to start git.
type git struct {
	dir   string   // the folder it runs in; "" is where this program was started
	env   []string // its whole environment
	where []string // options that say which repository; none: git looks for it
}

// inherited is the git of a hook: same folder, same variables.
func inherited() git {
	return git{env: append(os.Environ(), environment...)}
}

// alone is a git that finds its repository from dir and nothing else.
func alone(dir string) git {
	env := slices.DeleteFunc(os.Environ(), func(pair string) bool {
		name, _, _ := strings.Cut(pair, "=")
		return slices.Contains(pointers, name)
	})
	return git{dir: dir, env: append(env, environment...)}
}

// command prepares one call; it ends with ctx.
func (g git) command(ctx context.Context, args ...string) *exec.Cmd {
	cmd := exec.CommandContext(ctx, "git", slices.Concat(settings, g.where, args)...)
	cmd.Dir, cmd.Env = g.dir, g.env
	cmd.WaitDelay = time.Second // for what git itself has started and left behind
	return cmd
}

// run returns what the call prints. doing says what it is for, in errors.
func (g git) run(ctx context.Context, doing string, args ...string) (string, error) {
	cmd := g.command(ctx, args...)
	var out strings.Builder
	var complaint firstBytes
	cmd.Stdout, cmd.Stderr = &out, &complaint
	if err := cmd.Run(); err != nil {
		return "", explain(ctx, doing, err, complaint)
	}
	return out.String(), nil
}

// explain turns the failure of a call into an error: git's own words where it
// ran and refused, else what kept it from running.
func explain(ctx context.Context, doing string, err error, complaint firstBytes) error {
	var exit *exec.ExitError
	switch {
	case ctx.Err() != nil:
		return fmt.Errorf("%s: %w", doing, ctx.Err())
	case errors.Is(err, exec.ErrNotFound):
		return fmt.Errorf("%s: git is needed for that: %w", doing, err)
	case errors.As(err, &exit) && !exit.Exited() && complaint.kept != nil:
		// An older git breaks off like this when the fetch it has begun is refused.
		return &Refusal{Doing: doing, Says: "git: " + complaint.first(exit) + " (" + exit.String() + ")", status: exit.ExitCode()}
	case errors.As(err, &exit) && exit.Exited():
		return &Refusal{Doing: doing, Says: "git: " + complaint.first(exit), status: exit.ExitCode()}
	}
	return fmt.Errorf("%s: git: %w", doing, err)
}
