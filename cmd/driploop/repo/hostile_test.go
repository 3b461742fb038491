package repo

import (
	"context"
	"fmt"
	"math/rand/v2"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// canary is a program that leaves a file behind when it is run.
type canary struct{ program, trace string }

func newCanary(t *testing.T) canary {
	t.Helper()
	dir := t.TempDir()
	c := canary{filepath.Join(dir, "canary"), filepath.Join(dir, "trace")}
	script := fmt.Sprintf("#!/bin/sh\necho \"$0 $*\" >>'%s'\nexit 1\n", c.trace)
	if err := os.WriteFile(c.program, []byte(script), 0o755); err != nil {
		t.Fatal(err)
	}
	return c
}

// sang reports whether it was run since the last time, and by what.
func (c canary) sang() string {
	b, _ := os.ReadFile(c.trace)
	os.Remove(c.trace)
	return string(b)
}

// all uses everything that a Repo does, the work tree dirty and an announced file
// in the index.
func all(t *testing.T, w work) {
	t.Helper()
	w.write("a.toml", "dirty", "n.toml", "n")
	w.git("-c", "core.fsmonitor=false", "-c", "core.hooksPath=/dev/null", "add", "-N", "n.toml")
	r := open(t, w.dir)
	for _, rev := range []string{"HEAD", "HEAD~1", Index} {
		if lines := read(t, at(t, r, rev)); len(lines) == 0 || strings.Contains(lines[0], "!") {
			t.Errorf("%s: %q", rev, lines)
		}
	}
	for _, head := range []string{"HEAD", Index} {
		if _, err := r.ChangedFiles(context.Background(), "HEAD~1", head); err != nil {
			t.Error(err)
		}
	}
	if _, err := r.MergeBase(context.Background(), "HEAD", "HEAD~1"); err != nil {
		t.Error(err)
	}
	for _, branch := range []func(context.Context) (string, error){r.Branch, r.Upstream, r.DefaultBranch} {
		if _, err := branch(context.Background()); err != nil {
			t.Error(err)
		}
	}
	if c, err := r.Staged(context.Background()); err != nil || len(read(t, c.Head)) == 0 {
		t.Error(c, err)
	}
	if _, err := r.Hooks(context.Background()); err != nil {
		t.Error(err)
	}
}

// Each case first shows that its canary sings for a git without our settings; one
// that never sings would prove nothing.
func TestConfigurationRunsNothing(t *testing.T) {
	for _, c := range []struct {
		name   string
		config func(w work, program string)
		proof  []string // the git command that runs the program
	}{
		{"fsmonitor", func(w work, p string) { w.git("config", "core.fsmonitor", p) }, []string{"ls-files"}},
		{"textconv", func(w work, p string) {
			w.write(".git/info/attributes", "*.toml diff=trap\n")
			w.git("config", "diff.trap.textconv", p)
		}, []string{"diff", "HEAD~1", "HEAD"}},
		{"external diff", func(w work, p string) { w.git("config", "diff.external", p) }, []string{"diff", "HEAD~1", "HEAD"}},
		{"filter", func(w work, p string) {
			w.write(".git/info/attributes", "*.toml filter=trap\n")
			w.git("config", "filter.trap.clean", p)
			w.git("config", "filter.trap.smudge", p)
		}, []string{"cat-file", "--filters", "HEAD:a.toml"}},
		{"hooks", func(w work, p string) {
			for _, hook := range []string{"post-index-change", "reference-transaction", "post-checkout"} {
				if err := os.Symlink(p, w.path(".git/hooks/"+hook)); err != nil {
					w.t.Fatal(err)
				}
			}
		}, []string{"update-index", "--force-write-index"}},
	} {
		t.Run(c.name, func(t *testing.T) {
			w := repository(t, "a.toml", "a")
			w.commit("a.toml", "b")
			trap := newCanary(t)
			c.config(w, trap.program)
			w.write("a.toml", "touched")
			_, _ = w.try(c.proof...)
			if trap.sang() == "" {
				t.Fatalf("git %v does not run it: the test shows nothing", c.proof)
			}
			all(t, w)
			if by := trap.sang(); by != "" {
				t.Errorf("the repository's program was run: %s", by)
			}
		})
	}
}

// Some guards are for commands that git may come to run programs for: here only
// that they are there can be shown. A git on the PATH writes down how it is called.
func TestEveryCallIsGuarded(t *testing.T) {
	w := repository(t, "a.toml", "a")
	w.commit("a.toml", "b")
	git, err := exec.LookPath("git")
	if err != nil {
		t.Fatal(err)
	}
	dir := t.TempDir()
	log := filepath.Join(dir, "log")
	script := fmt.Sprintf("#!/bin/sh\necho \"$*|$GIT_OPTIONAL_LOCKS|$GIT_TERMINAL_PROMPT|$GIT_NO_REPLACE_OBJECTS|${GIT_ALLOW_PROTOCOL-unset}|$GIT_AUTHOR_NAME\" >>'%s'\nexec '%s' \"$@\"\n", log, git)
	if err := os.WriteFile(filepath.Join(dir, "git"), []byte(script), 0o755); err != nil {
		t.Fatal(err)
	}
	t.Setenv("GIT_AUTHOR_NAME", "of the hook")
	t.Run("calls", func(t *testing.T) {
		t.Setenv("PATH", dir+":"+os.Getenv("PATH"))
		all(t, w)
	})
	b, err := os.ReadFile(log)
	if err != nil {
		t.Fatal(err)
	}
	calls := 0
	for call := range strings.Lines(string(b)) {
		call = strings.TrimSpace(call)
		if !strings.Contains(call, "|0|0|1||of the hook") {
			continue // the test's own
		}
		calls++
		rest, ok := strings.CutPrefix(call, "-c core.fsmonitor=false -c core.hooksPath=/dev/null -c protocol.allow=never -c safe.bareRepository=explicit --no-pager ")
		if !ok {
			t.Errorf("unguarded: %s", call)
		}
		if strings.HasPrefix(rest, "diff") {
			contains(t, "diff", rest, " --no-ext-diff --no-textconv ")
		}
		if strings.HasPrefix(rest, "rev-parse --verify") {
			contains(t, "rev-parse", rest, "--end-of-options ")
		}
	}
	if calls < 10 {
		t.Errorf("only %d calls were seen with the environment they should have:\n%s", calls, b)
	}
}

// A bare repository committed among the plans has a configuration of its own.
func TestRepositoryHiddenAmongThePlans(t *testing.T) {
	w := repository(t, "plans/a.toml", "a")
	w.git("clone", "-q", "--bare", w.dir, "plans/trap")
	trap := newCanary(t)
	hidden := work{t, w.path("plans/trap")}
	hidden.git("config", "core.fsmonitor", trap.program)
	hidden.git("config", "core.bare", "false")
	hidden.git("config", "core.worktree", w.dir)
	hidden.git("ls-files")
	if trap.sang() == "" {
		t.Fatal("git ls-files does not run it: the test shows nothing")
	}
	hidden.git("config", "core.bare", "true")
	hidden.git("config", "--unset", "core.worktree")

	_, err := Open(context.Background(), hidden.dir)
	contains(t, "hidden", refusal(t, err).Says, "cannot use bare repository")
	same(t, "around it", read(t, at(t, open(t, w.path("plans")), "HEAD")), []string{"a.toml: a"})
	if by := trap.sang(); by != "" {
		t.Errorf("the repository's program was run: %s", by)
	}
}

// The clone says where missing files can be had, how, and that this is allowed.
func TestPartialCloneFetchesNothing(t *testing.T) {
	w := repository(t, "a.toml", "a", "b.toml", "b")
	w.commit("a.toml", "c")
	for _, way := range []string{"file", "ext", "vcs"} {
		t.Run(way, func(t *testing.T) { fetchesNothing(t, w, way) })
	}
	// A git without the switch against fetching at all still may use no transport.
	whole := environment
	defer func() { environment = whole }()
	environment = slices.DeleteFunc(slices.Clone(whole), func(s string) bool { return strings.HasPrefix(s, "GIT_NO_LAZY_FETCH") })
	for _, way := range []string{"file", "ext", "vcs"} {
		t.Run(way+" with an older git", func(t *testing.T) { fetchesNothing(t, w, way) })
	}
}

func fetchesNothing(t *testing.T, w work, way string) {
	top := folder(t)
	top.git("clone", "-q", "--filter=blob:none", "file://"+w.dir, "partial")
	part := work{t, top.path("partial")}
	trap := newCanary(t)
	part.git("config", "protocol.file.allow", "always")
	part.git("config", "protocol.ext.allow", "always")
	switch way {
	case "file":
		part.git("config", "remote.origin.uploadpack", trap.program)
	case "ext":
		part.git("config", "remote.origin.url", "ext::"+trap.program)
	case "vcs":
		part.git("config", "remote.origin.vcs", "ext")
		part.git("config", "remote.origin.url", trap.program)
	}
	_, _ = part.try("cat-file", "-e", w.git("rev-parse", "HEAD~1:a.toml"))
	if trap.sang() == "" {
		t.Fatal("git does not fetch: the test shows nothing")
	}
	lines := read(t, at(t, open(t, part.dir), "HEAD~1"))
	contains(t, "missing", lines[0], "a.toml! ", "git: ", "this clone is partial")
	same(t, "the file beside it", lines[1], "b.toml: b")
	if by := trap.sang(); by != "" {
		t.Errorf("it was fetched through: %s", by)
	}
}

// An object that git dies of must not take its neighbours with it, nor those that
// git was asked for ahead.
func TestDamagedObjectIsLostAlone(t *testing.T) {
	long := make([]byte, 20_000) // not to be compressed
	rand.NewChaCha8([32]byte{}).Read(long)
	w := repository(t, "a.toml", "a", "b.toml", "b", "c.toml", "c", "cut.toml", string(long), "d.toml", "d", "e.toml", "e")
	object := func(name string) string {
		id := w.git("rev-parse", "HEAD:"+name)
		return w.path(".git/objects/" + id[:2] + "/" + id[2:])
	}
	damage := func(name string, keep int64, with string) {
		b, err := os.ReadFile(object(name))
		if err != nil {
			t.Fatal(err)
		}
		os.Remove(object(name))
		if err := os.WriteFile(object(name), append(b[:keep], with...), 0o444); err != nil {
			t.Fatal(err)
		}
	}
	damage("b.toml", 0, "garbage")
	damage("cut.toml", 5000, "") // head and first bytes are good
	os.Remove(object("d.toml"))

	tree := at(t, open(t, w.dir), "HEAD")
	for range 2 {
		lines := read(t, tree)
		same(t, "a", lines[0], "a.toml: a")
		contains(t, "b", lines[1], "b.toml! ", "missing from the repository or damaged", "incorrect header")
		same(t, "c", lines[2], "c.toml: c")
		contains(t, "cut", lines[3], "cut.toml! ", "git: ", w.git("rev-parse", "HEAD:cut.toml"))
		if strings.Contains(lines[3], "incorrect header") {
			t.Errorf("blamed for the fault of b: %s", lines[3])
		}
		contains(t, "d", lines[4], "d.toml! ", "missing from the repository or damaged")
		same(t, "e", lines[5], "e.toml: e")
	}
}

func TestReplacedObjectsAreNotTaken(t *testing.T) {
	w := repository(t, "a.toml", "a")
	w.git("replace", w.git("rev-parse", "HEAD:a.toml"), w.put("another"))
	same(t, "plain git", w.git("show", "HEAD:a.toml"), "another")
	same(t, "here", read(t, at(t, open(t, w.dir), "HEAD")), []string{"a.toml: a"})
}

func TestNothingIsWritten(t *testing.T) {
	w := repository(t, "a.toml", "a")
	w.commit("a.toml", "b")
	w.write("a.toml", "dirty", "n.toml", "n")
	w.git("add", "-N", "n.toml")
	list := func() string {
		var s strings.Builder
		_ = filepath.Walk(w.dir, func(name string, info os.FileInfo, err error) error {
			fmt.Fprintln(&s, name, info.Size(), info.ModTime().UnixNano())
			return err
		})
		return s.String()
	}
	before := list()
	r := open(t, w.dir)
	for _, rev := range []string{"HEAD", Index} {
		read(t, at(t, r, rev))
		if _, err := r.ChangedFiles(context.Background(), "HEAD~1", rev); err != nil {
			t.Error(err)
		}
	}
	same(t, "the folder", list(), before)
}
