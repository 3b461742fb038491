package repo

import (
	"context"
	"errors"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// inHook runs git commit with a pre-commit hook that calls this test binary anew
// to read the index, as a user's hook would, and returns what it read.
func inHook(t *testing.T, w work, hooks, root string, commit ...string) []string {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	out := w.path("../hook.out")
	hook := "#!/bin/sh\nREPO_ROOT='" + root + "' REPO_OUT='" + out + "' exec '" + self + "' -test.run '^TestReadForHook$' >/dev/null\n"
	if err := os.WriteFile(filepath.Join(hooks, "pre-commit"), []byte(hook), 0o755); err != nil {
		t.Fatal(err)
	}
	w.git(append([]string{"commit", "-q", "-m", "by hook"}, commit...)...)
	b, err := os.ReadFile(out)
	if err != nil {
		t.Fatal(err)
	}
	return strings.Split(string(b), "\n")
}

// TestReadForHook is the far side of inHook. TestMain has then kept the variables
// that git gave the hook.
func TestReadForHook(t *testing.T) {
	root, out := os.Getenv("REPO_ROOT"), os.Getenv("REPO_OUT")
	if out == "" {
		return // no hook of another test calls
	}
	lines := read(t, at(t, open(t, root), Index))
	if err := os.WriteFile(out, []byte(strings.Join(lines, "\n")), 0o600); err != nil {
		t.Fatal(err)
	}
}

func TestHookSeesWhatIsCommitted(t *testing.T) {
	prepare := func(t *testing.T) work {
		top := folder(t)
		w := work{t, top.path("main")}
		top.git("init", "-q", "main")
		w.commit("top.toml", "t", "demo/a.toml", "a", "demo/b.toml", "b")
		return w
	}
	hooksOf := func(w work) string { return w.path(".git/hooks") }

	t.Run("staged in part", func(t *testing.T) {
		w := prepare(t)
		w.write("demo/a.toml", "staged")
		w.git("add", "demo/a.toml")
		w.write("demo/a.toml", "later", "demo/b.toml", "later")
		same(t, "index", inHook(t, w, hooksOf(w), "demo"), []string{"a.toml: staged", "b.toml: b"})
	})
	t.Run("commit all", func(t *testing.T) { // GIT_INDEX_FILE is index.lock
		w := prepare(t)
		w.write("demo/a.toml", "new")
		same(t, "index", inHook(t, w, hooksOf(w), "demo", "-a"), []string{"a.toml: new", "b.toml: b"})
	})
	t.Run("commit a path", func(t *testing.T) { // GIT_INDEX_FILE is next-index-N.lock
		w := prepare(t)
		w.write("demo/a.toml", "new", "demo/b.toml", "staged, not committed")
		w.git("add", "demo/b.toml")
		same(t, "index", inHook(t, w, hooksOf(w), "demo", "demo/a.toml"), []string{"a.toml: new", "b.toml: b"})
	})
	t.Run("linked work tree", func(t *testing.T) { // GIT_DIR too
		w := prepare(t)
		hooks := hooksOf(w)
		w.git("worktree", "add", "-q", "../linked")
		w = work{t, w.path("../linked")}
		w.write("demo/a.toml", "new")
		same(t, "index", inHook(t, w, hooks, "demo", "-a"), []string{"a.toml: new", "b.toml: b"})
	})
	t.Run("workspace in another repository", func(t *testing.T) {
		w, other := prepare(t), repository(t, "o.toml", "o")
		w.write("demo/a.toml", "new")
		same(t, "index", inHook(t, w, hooksOf(w), other.dir, "-a"), []string{"o.toml: o"})
	})
	t.Run("workspace in a submodule", func(t *testing.T) {
		w, other := prepare(t), repository(t, "s.toml", "s")
		w.git("submodule", "--quiet", "add", other.dir, "sub")
		same(t, "index", inHook(t, w, hooksOf(w), "sub"), []string{"s.toml: s"})
	})
}

// Where git's variables are set outside a hook, and the program runs in a folder
// of the work tree, a relative GIT_INDEX_FILE counts from the top.
func TestRelativeIndexFromBelow(t *testing.T) {
	w := repository(t, "demo/a.toml", "a", "plans/b.toml", "b")
	w.write("demo/a.toml", "other")
	cmd := exec.Command("git", "add", "-A")
	cmd.Dir, cmd.Env = w.dir, append(os.Environ(), "GIT_INDEX_FILE=.git/other")
	if out, err := cmd.CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	t.Setenv("GIT_INDEX_FILE", ".git/other")
	for _, dir := range []string{w.dir, w.path("demo"), w.path("plans")} {
		t.Chdir(dir)
		same(t, dir, read(t, at(t, open(t, w.path("demo")), Index)), []string{"a.toml: other"})
	}
	t.Chdir(t.TempDir())
	_, err := Open(context.Background(), w.path("demo"))
	contains(t, "from outside", refusal(t, err).Error(), "GIT_INDEX_FILE", "not a git repository")
}

func TestBareRepository(t *testing.T) {
	w := repository(t, "plans/a.toml", "a")
	top := folder(t)
	top.git("clone", "-q", "--bare", w.dir, "b.git")
	r := open(t, top.path("b.git"))
	same(t, "HEAD", read(t, at(t, r, "HEAD")), []string{"plans/a.toml: a"})
	_, err := r.At(context.Background(), Index)
	contains(t, "index", refusal(t, err).Error(), "a bare repository has nothing staged", "name a revision")
	_, err = r.ChangedFiles(context.Background(), "HEAD", Index)
	refusal(t, err)

	t.Run("in its own hook", func(t *testing.T) {
		t.Chdir(top.path("b.git"))
		t.Setenv("GIT_DIR", ".")
		same(t, "HEAD", read(t, at(t, open(t, "."), "HEAD")), []string{"plans/a.toml: a"})
		same(t, "another repository", read(t, at(t, open(t, w.dir), Index)), []string{"plans/a.toml: a"})
	})
	t.Run("with another owner", func(t *testing.T) {
		t.Setenv("GIT_TEST_ASSUME_DIFFERENT_OWNER", "1")
		_, err := Open(context.Background(), top.path("b.git"))
		contains(t, "owner", refusal(t, err).Says, "dubious ownership")
	})
	t.Run("a folder inside it", func(t *testing.T) {
		_, err := Open(context.Background(), top.path("b.git/refs"))
		refusal(t, err)
	})
}

func TestNoUsableRepository(t *testing.T) {
	plain := folder(t)
	_, err := Open(context.Background(), plain.dir)
	contains(t, "plain folder", refusal(t, err).Error(), plain.dir, "git: not a git repository")

	_, err = Open(context.Background(), plain.path("missing"))
	if !errors.Is(err, os.ErrNotExist) {
		t.Errorf("no folder: %v", err)
	}

	w := repository(t, "a.toml", "a")
	_, err = Open(context.Background(), w.path(".git"))
	refusal(t, err)

	t.Setenv("GIT_TEST_ASSUME_DIFFERENT_OWNER", "1")
	_, err = Open(context.Background(), w.dir)
	contains(t, "another owner", refusal(t, err).Says, "git: detected dubious ownership in repository at '"+w.dir+"'")
	if strings.Contains(err.Error(), "\n") {
		t.Errorf("more than one line: %q", err)
	}
}

func TestGitIsMissing(t *testing.T) {
	dir := t.TempDir()
	t.Setenv("PATH", dir)
	_, err := Open(context.Background(), dir)
	if !errors.Is(err, exec.ErrNotFound) {
		t.Fatalf("got %v", err)
	}
	contains(t, "message", err.Error(), "git is needed")
}
