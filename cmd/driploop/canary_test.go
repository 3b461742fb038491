package main

import (
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// strange is a repository with the README's workspace in it, of which somebody else
// may have written every file, its configuration too.
type strange struct {
	t   *testing.T
	dir string
	// program leaves a line in trace when it is started.
	program, trace string
}

func newStrange(t *testing.T) *strange {
	t.Helper()
	if _, err := exec.LookPath("git"); err != nil {
		t.Skipf("git is not installed: %s is left out", t.Name())
	}
	for _, pair := range os.Environ() {
		if name, _, _ := strings.Cut(pair, "="); strings.HasPrefix(name, "GIT_") {
			t.Setenv(name, "") // so that it comes back
			os.Unsetenv(name)
		}
	}
	home := t.TempDir()
	config := "[user]\nname = jo\nemail = jo@saltmarsh.example\n[init]\ndefaultBranch = main\n[protocol \"file\"]\nallow = always\n[uploadpack]\nallowFilter = true\n"
	s := &strange{t: t, dir: filepath.Join(home, "repo"), program: filepath.Join(home, "canary"), trace: filepath.Join(home, "trace")}
	s.put(filepath.Join(home, "config"), config, 0o600)
	s.put(s.program, "#!/bin/sh\necho \"$0 $*\" >>'"+s.trace+"'\nexit 1\n", 0o755)
	t.Setenv("GIT_CONFIG_GLOBAL", filepath.Join(home, "config"))
	t.Setenv("GIT_CONFIG_NOSYSTEM", "1")
	t.Setenv("LC_ALL", "C")
	for _, name := range []string{"driploop.toml", "plans/ferry-hut.toml"} {
		copyFile(t, filepath.Join("../../testdata/readme", name), filepath.Join(s.dir, name))
	}
	s.git("init", "-q")
	s.commit()
	s.write("plans/ferry-hut.toml", s.read("plans/ferry-hut.toml")+"# once more\n")
	s.commit()
	return s
}

func (s *strange) put(name, text string, mode os.FileMode) {
	s.t.Helper()
	if err := os.MkdirAll(filepath.Dir(name), 0o777); err != nil {
		s.t.Fatal(err)
	}
	if err := os.WriteFile(name, []byte(text), mode); err != nil {
		s.t.Fatal(err)
	}
}

func (s *strange) write(name, text string) {
	s.t.Helper()
	s.put(filepath.Join(s.dir, name), text, 0o666)
}

func (s *strange) read(name string) string {
	s.t.Helper()
	b, err := os.ReadFile(filepath.Join(s.dir, name))
	if err != nil {
		s.t.Fatal(err)
	}
	return string(b)
}

func (s *strange) link(to, name string) {
	s.t.Helper()
	if err := os.MkdirAll(filepath.Dir(filepath.Join(s.dir, name)), 0o777); err != nil {
		s.t.Fatal(err)
	}
	if err := os.Symlink(to, filepath.Join(s.dir, name)); err != nil {
		s.t.Fatal(err)
	}
}

// try runs git with a user's full trust.
func (s *strange) try(args ...string) (string, error) {
	cmd := exec.Command("git", args...)
	cmd.Dir = s.dir
	out, err := cmd.CombinedOutput()
	return string(out), err
}

func (s *strange) git(args ...string) {
	s.t.Helper()
	if out, err := s.try(args...); err != nil {
		s.t.Fatalf("git %s: %v\n%s", strings.Join(args, " "), err, out)
	}
}

func (s *strange) commit() {
	s.t.Helper()
	s.git("add", "-A")
	s.git("commit", "-q", "-m", "plans")
}

// started is what has started the program since the last time.
func (s *strange) started() string {
	b, _ := os.ReadFile(s.trace)
	os.Remove(s.trace)
	return string(b)
}

// sings holds that a git without care starts the program; a canary that never sings
// would prove nothing.
func (s *strange) sings(args ...string) {
	s.t.Helper()
	_, _ = s.try(args...)
	if s.started() == "" {
		s.t.Fatalf("git %s does not start the program: the test shows nothing", strings.Join(args, " "))
	}
}

// reads runs every command on the folder, on each revision, and what the hook runs.
// It returns all that came out. Of the commands that it knows arguments for each must
// get through to a result; others, and other arguments, must do no harm at least.
func (s *strange) reads(root string, revisions ...string) (all string) {
	s.t.Helper()
	known := map[string]bool{"inspect": true, "budget": true, "takeoff": true, "stock": true, "pick": true, "cuts": true, "purchase": true, "basis": true, "parts": true}
	for _, cmd := range (&Command{}).tree().Commands() {
		if cmd.Name() == "help" || cmd.Name() == "completion" || cmd.Name() == "hook" {
			continue
		}
		for _, rev := range revisions {
			through := false
			for _, args := range [][]string{{}, {"ferry-hut"}} {
				args = append([]string{cmd.Name(), "--root", root}, args...)
				if rev != "" {
					args = append(args, "--at", rev)
				}
				out, messages, status := s.soon(args)
				all += out + messages
				through = through || status <= statusHeld && out != ""
			}
			if known[cmd.Name()] && !through {
				s.t.Errorf("driploop %s --at %q has no result: the test shows nothing of it", cmd.Name(), rev)
			}
		}
	}
	out, messages, status := s.soon([]string{"inspect", "--root", root, "--staged", "--", "plans/ferry-hut.toml"})
	if status > statusHeld {
		s.t.Errorf("inspect --staged: %s", messages)
	}
	all += out + messages
	out, messages, status = s.soon([]string{"redline", "--root", root, "HEAD", "--as", "markdown"})
	if status > statusHeld {
		s.t.Errorf("redline HEAD: %s", messages)
	}
	return all + out + messages
}

// soon runs one call that must end before long.
func (s *strange) soon(args []string) (out, messages string, status int) {
	s.t.Helper()
	done := make(chan struct{})
	go func() {
		out, messages, status = run(args)
		close(done)
	}()
	select {
	case <-done:
	case <-time.After(time.Minute):
		s.t.Fatalf("driploop %s does not end", strings.Join(args, " "))
	}
	return out, messages, status
}

// hook puts the hook in and runs it as git does, which would start more by itself.
func (s *strange) hook() string {
	s.t.Helper()
	if _, messages, status := run([]string{"hook", "--root", s.dir}); status != statusClear {
		s.t.Fatalf("driploop hook: %s", messages)
	}
	cmd := exec.Command(filepath.Join(s.dir, ".git/hooks/pre-commit"))
	cmd.Dir, cmd.Env = s.dir, append(os.Environ(), "GIT_INDEX_FILE=.git/index")
	out, err := cmd.CombinedOutput()
	if code := cmd.ProcessState.ExitCode(); code != statusHeld {
		s.t.Errorf("the hook ends with %d, %v, not as for the plan's faults:\n%s", code, err, out)
	}
	return string(out)
}

// What the configuration of a repository names is not started, by no command and not
// by the hook.
func TestStrangeConfigurationStartsNothing(t *testing.T) {
	for name, c := range map[string]struct {
		lay   func(s *strange)
		proof []string
	}{
		"fsmonitor": {func(s *strange) { s.git("config", "core.fsmonitor", s.program) }, []string{"ls-files"}},
		"textconv": {func(s *strange) {
			s.write(".git/info/attributes", "*.toml diff=trap\n")
			s.git("config", "diff.trap.textconv", s.program)
		}, []string{"diff", "HEAD~1", "HEAD"}},
		"external diff": {func(s *strange) { s.git("config", "diff.external", s.program) }, []string{"diff", "HEAD~1", "HEAD"}},
		"external diff of a kind": {func(s *strange) {
			s.write(".git/info/attributes", "*.toml diff=trap\n")
			s.git("config", "diff.trap.command", s.program)
		}, []string{"diff", "HEAD~1", "HEAD"}},
		"filter": {func(s *strange) {
			s.write(".git/info/attributes", "*.toml filter=trap\n")
			s.git("config", "filter.trap.clean", s.program)
			s.git("config", "filter.trap.smudge", s.program)
		}, []string{"cat-file", "--filters", "HEAD:plans/ferry-hut.toml"}},
		"filter process": {func(s *strange) {
			s.write(".git/info/attributes", "*.toml filter=trap\n")
			s.git("config", "filter.trap.process", s.program)
		}, []string{"cat-file", "--filters", "HEAD:plans/ferry-hut.toml"}},
		"hooks": {func(s *strange) {
			for _, hook := range []string{"post-index-change", "reference-transaction", "post-checkout"} {
				s.link(s.program, ".git/hooks/"+hook)
			}
		}, []string{"update-index", "--force-write-index"}},
	} {
		t.Run(name, func(t *testing.T) {
			s := newStrange(t)
			c.lay(s)
			s.write("plans/ferry-hut.toml", s.read("plans/ferry-hut.toml")+"# dirty\n")
			s.sings(c.proof...)
			s.reads(s.dir, "HEAD~1", ":index", "")
			if by := s.started(); by != "" {
				t.Errorf("it was started: %s", by)
			}
			s.stage("plans/ferry-hut.toml")
			s.started()
			s.hook()
			if by := s.started(); by != "" {
				t.Errorf("the hook has it started: %s", by)
			}
		})
	}
}

// stage puts a file as it is into the index without a filter or hook of the repository.
func (s *strange) stage(name string) {
	s.t.Helper()
	s.git("-c", "core.fsmonitor=false", "-c", "core.hooksPath=/dev/null", "-c", "filter.trap.clean=cat", "-c", "filter.trap.process=", "add", name)
}

// A folder of hooks of the repository's own: ours goes in beside the others, and
// nothing else of it is started.
func TestStrangeHooksPath(t *testing.T) {
	s := newStrange(t)
	s.git("config", "core.hooksPath", "tools")
	for _, hook := range []string{"post-index-change", "reference-transaction", "post-commit"} {
		s.link(s.program, "tools/"+hook)
	}
	s.sings("update-index", "--force-write-index")
	s.reads(s.dir, "HEAD", ":index")
	if _, messages, status := run([]string{"hook", "--root", s.dir}); status != statusClear {
		t.Fatal(messages)
	}
	if by := s.started(); by != "" {
		t.Errorf("it was started: %s", by)
	}
	if text := s.read("tools/pre-commit"); !strings.HasPrefix(text, hookHead) {
		t.Errorf("tools/pre-commit is\n%s", text)
	}
}

// A bare repository committed among the plans, with a configuration and hooks of its
// own, from beside it and from within.
func TestStrangeRepositoryAmongThePlans(t *testing.T) {
	s := newStrange(t)
	s.git("clone", "-q", "--bare", s.dir, "plans/trap")
	trap := &strange{t: t, dir: filepath.Join(s.dir, "plans/trap"), program: s.program, trace: s.trace}
	trap.git("config", "core.fsmonitor", s.program)
	trap.git("config", "core.bare", "false")
	trap.git("config", "core.worktree", s.dir)
	trap.sings("ls-files")
	s.write("plans/ferry-hut.toml", s.read("plans/ferry-hut.toml")+"# staged\n")
	s.git("-c", "safe.bareRepository=all", "add", "plans/ferry-hut.toml")
	for _, dir := range []string{s.dir, filepath.Join(s.dir, "plans"), trap.dir, filepath.Join(trap.dir, "refs")} {
		t.Chdir(dir)
		s.reads(s.dir, "HEAD", ":index", "")
	}
	t.Chdir(s.dir)
	for _, root := range []string{trap.dir, filepath.Join(trap.dir, "refs"), filepath.Join(trap.dir, "not-there")} {
		for _, args := range [][]string{{"inspect", "--at", "HEAD"}, {"inspect", "--staged"}, {"hook"}, {"hook", "--remove"}} {
			if out, _, status := run(append(args, "--root", root)); status == statusHeld || strings.Contains(out, "ferry-hut") {
				t.Errorf("%v is looked at as a workspace with --root %s: %s", args, root, out)
			}
		}
	}
	if _, err := os.Stat(filepath.Join(trap.dir, "hooks/pre-commit")); err == nil {
		t.Error("the hook was put into the repository among the plans")
	}
	s.hook()
	if by := s.started(); by != "" {
		t.Errorf("it was started: %s", by)
	}
}

// What a partial clone lacks is not fetched, whatever the clone says of where it
// comes from.
func TestStrangePartialCloneFetchesNothing(t *testing.T) {
	far := newStrange(t)
	far.git("clone", "-q", "--filter=blob:none", "file://"+far.dir, "../near")
	s := &strange{t: t, dir: filepath.Join(filepath.Dir(far.dir), "near"), program: far.program, trace: far.trace}
	s.git("config", "remote.origin.uploadpack", s.program)
	s.git("config", "protocol.file.allow", "always")
	s.sings("cat-file", "-p", "HEAD~1:plans/ferry-hut.toml")
	s.reads(s.dir, "HEAD", ":index")
	out, _, status := run([]string{"inspect", "--root", s.dir, "--at", "HEAD~1"})
	if status != statusHeld || !strings.Contains(strings.Join(strings.Fields(out), " "), "this clone is partial and nothing is fetched here") {
		t.Errorf("status %d: %s", status, out)
	}
	s.write("plans/ferry-hut.toml", s.read("plans/ferry-hut.toml")+"# staged\n")
	s.git("add", ".")
	s.started()
	s.hook()
	if by := s.started(); by != "" {
		t.Errorf("it was fetched: %s", by)
	}
}

// Objects that lie in another repository of the user's are read like any other; where
// that is gone it is said, and nothing hangs.
func TestStrangeAlternates(t *testing.T) {
	far := newStrange(t)
	far.git("clone", "-q", "--shared", far.dir, "../near")
	s := &strange{t: t, dir: filepath.Join(filepath.Dir(far.dir), "near"), program: far.program, trace: far.trace}
	want, _, _ := run([]string{"inspect", "--root", far.dir, "--at", "HEAD", "--as", "json"})
	got, _, _ := run([]string{"inspect", "--root", s.dir, "--at", "HEAD", "--as", "json"})
	if got != want {
		t.Errorf("with objects elsewhere the result is\n%s\nnot\n%s", got, want)
	}
	s.write(".git/objects/info/alternates", far.dir+"/gone\n../../../../../../../../dev/zero\n")
	out, messages, status := s.soon([]string{"inspect", "--root", s.dir, "--at", "HEAD"})
	if status != statusCall || out != "" || !strings.Contains(messages, `find revision "HEAD"`) {
		t.Errorf("status %d: %s%s", status, out, messages)
	}
}

// Links that lead out of the workspace, pipes and devices are neither followed nor
// opened, whether the folder is read or git.
func TestStrangeFilesLeadNowhere(t *testing.T) {
	s := newStrange(t)
	outside := filepath.Join(filepath.Dir(s.dir), "outside")
	s.put(filepath.Join(outside, "x.toml"), "[job]\ntitle = \"OUT OF THE WORKSPACE\"\n[part.OUT-OF-THE-WORKSPACE]\nkind = \"OUT OF THE WORKSPACE\"\n", 0o666)
	for _, folder := range []string{"plans", "catalog", "offers", "stock", "profiles"} {
		s.link(filepath.Join(outside, "x.toml"), folder+"/absolute.toml")
		s.link("../../outside/x.toml", folder+"/relative.toml")
		s.link(outside, folder+"/folder")
		s.link("/dev/zero", folder+"/device.toml")
		s.link("gone", folder+"/gone.toml")
		s.link("loop.toml", folder+"/loop.toml")
	}
	s.git("add", "-A")
	for _, folder := range []string{"plans", "catalog"} {
		if out, err := exec.Command("mkfifo", filepath.Join(s.dir, folder, "pipe.toml")).CombinedOutput(); err != nil {
			t.Fatalf("mkfifo: %v %s", err, out)
		}
	}
	s.git("commit", "-q", "-m", "links")
	s.write("plans/ferry-hut.toml", s.read("plans/ferry-hut.toml")+"# staged\n")
	s.git("add", "plans/ferry-hut.toml")
	all := s.reads(s.dir, "HEAD", ":index", "") + s.hook()
	if strings.Contains(strings.ReplaceAll(all, "-", " "), "OUT OF THE WORKSPACE") {
		t.Error("what lies outside of the workspace was read")
	}
	for _, why := range []string{"plans/absolute.toml is not read: it is a symbolic link", "plans/pipe.toml"} {
		if !strings.Contains(strings.Join(strings.Fields(all), " "), why) {
			t.Errorf("it is not said that %s", why)
		}
	}
}
