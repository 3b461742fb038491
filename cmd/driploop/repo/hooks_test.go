package repo

import (
	"context"
	"os"
	"path/filepath"
	"testing"
)

func TestHooks(t *testing.T) {
	w := repository(t, "demo/a.toml", "a")
	w.git("worktree", "add", "-q", "../linked")
	linked := work{t, w.path("../linked")}
	sub := repository(t, "s.toml", "s")
	w.git("submodule", "--quiet", "add", sub.dir, "sub")
	check := func(when, root string, want Hooks) {
		t.Helper()
		if got, err := open(t, root).Hooks(context.Background()); err != nil || got != want {
			t.Errorf("%s: got %v, %v; want %v", when, got, err, want)
		}
	}
	check("top", w.dir, Hooks{Dir: w.path(".git/hooks")})
	check("below", w.path("demo"), Hooks{Dir: w.path(".git/hooks")})
	check("linked", linked.path("demo"), Hooks{Dir: w.path(".git/hooks")})
	check("submodule", w.path("sub"), Hooks{Dir: w.path(".git/modules/sub/hooks")})

	w.git("config", "core.hooksPath", "tools/hooks")
	check("relative", w.path("demo"), Hooks{Dir: w.path("tools/hooks")})
	check("relative, linked", linked.path("demo"), Hooks{Dir: linked.path("tools/hooks")})
	w.git("config", "--add", "core.hooksPath", "/somewhere else\nhere")
	check("the last of two", w.dir, Hooks{Dir: "/somewhere else\nhere"})
	w.git("config", "--unset-all", "core.hooksPath")
	w.git("config", "core.hooksPath", "../beside")
	check("beside the work tree", w.dir, Hooks{Dir: filepath.Join(filepath.Dir(w.dir), "beside")})
	if err := os.Symlink(t.TempDir(), w.path("led")); err != nil {
		t.Fatal(err)
	}
	w.git("config", "core.hooksPath", "led/hooks")
	_, out := open(t, w.dir).Hooks(context.Background())
	contains(t, "through a link", refusal(t, out).Error(), "link out of the work tree")
	w.git("config", "--unset-all", "core.hooksPath")

	config := os.Getenv("GIT_CONFIG_GLOBAL")
	was, err := os.ReadFile(config)
	if err != nil {
		t.Fatal(err)
	}
	mine := filepath.Join(t.TempDir(), "config")
	if err := os.WriteFile(mine, append(was, "[core]\nhooksPath = ~/hooks\n"...), 0o600); err != nil {
		t.Fatal(err)
	}
	t.Setenv("GIT_CONFIG_GLOBAL", mine)
	check("the user's", w.dir, Hooks{Dir: filepath.Join(os.Getenv("HOME"), "hooks"), Shared: true})
	w.git("config", "core.hooksPath", "")
	_, err = open(t, w.dir).Hooks(context.Background())
	contains(t, "empty", refusal(t, err).Error(), "core.hooksPath is empty")

	top := folder(t)
	top.git("clone", "-q", "--bare", w.dir, "b.git")
	_, err = open(t, top.path("b.git")).Hooks(context.Background())
	contains(t, "bare", refusal(t, err).Error(), "bare repository")
}

// As another hook calls it, with GIT_DIR and GIT_INDEX_FILE from git.
func TestHooksFromAHook(t *testing.T) {
	w := repository(t, "demo/a.toml", "a")
	t.Chdir(w.dir)
	t.Setenv("GIT_DIR", ".git")
	got, err := open(t, "demo").Hooks(context.Background())
	if err != nil || got.Dir != w.path(".git/hooks") {
		t.Errorf("got %v, %v", got, err)
	}
}
