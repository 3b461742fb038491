package repo

import (
	"context"
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"reflect"
	"strings"
	"testing"

	"driploop/catalog/source"
)

// TestMain gives git a home of its own: neither the configuration of whoever runs
// the tests nor the variables of a hook that runs them may show. Run by a hook of
// these tests themselves it leaves all as it is.
func TestMain(m *testing.M) {
	if os.Getenv("REPO_OUT") != "" {
		os.Exit(m.Run())
	}
	for _, pair := range os.Environ() {
		if name, _, _ := strings.Cut(pair, "="); strings.HasPrefix(name, "GIT_") {
			os.Unsetenv(name)
		}
	}
	home, err := os.MkdirTemp("", "repo-home-*")
	if err != nil {
		panic(err)
	}
	// The user allows local transports; nothing may be fetched all the same.
	config := "[user]\nname = Jo\nemail = jo@saltmarsh.example\n[init]\ndefaultBranch = main\n" +
		"[protocol \"file\"]\nallow = always\n[uploadpack]\nallowFilter = true\n[commit]\ngpgsign = false\n"
	if err := os.WriteFile(filepath.Join(home, "config"), []byte(config), 0o600); err != nil {
		panic(err)
	}
	for name, value := range map[string]string{
		"HOME": home, "GIT_CONFIG_GLOBAL": filepath.Join(home, "config"), "GIT_CONFIG_NOSYSTEM": "1", "LC_ALL": "C",
	} {
		os.Setenv(name, value)
	}
	code := m.Run()
	os.RemoveAll(home)
	os.Exit(code)
}

// work is a folder in which git is run.
type work struct {
	t   testing.TB
	dir string
}

// folder makes an empty one.
func folder(t testing.TB) work {
	t.Helper()
	if _, err := exec.LookPath("git"); err != nil {
		t.Skipf("git is not installed: %s is not tested, reading from git is left out", t.Name())
	}
	dir, err := filepath.EvalSymlinks(t.TempDir())
	if err != nil {
		t.Fatal(err)
	}
	return work{t, dir}
}

// repository makes one with the files committed on main: path, text, path, text.
func repository(t testing.TB, files ...string) work {
	t.Helper()
	w := folder(t)
	w.git("init", "-q")
	w.commit(files...)
	return w
}

// commit writes files and commits everything.
func (w work) commit(files ...string) {
	w.t.Helper()
	w.write(files...)
	w.git("add", "-A")
	w.git("commit", "-q", "--allow-empty", "-m", "plans")
}

func (w work) write(files ...string) {
	w.t.Helper()
	for i := 0; i < len(files); i += 2 {
		name := w.path(files[i])
		if err := os.MkdirAll(filepath.Dir(name), 0o755); err != nil {
			w.t.Fatal(err)
		}
		if err := os.WriteFile(name, []byte(files[i+1]), 0o644); err != nil {
			w.t.Fatal(err)
		}
	}
}

func (w work) path(name string) string { return filepath.Join(w.dir, name) }

// try runs git with the user's full trust, as the tests' own fixture does.
func (w work) try(args ...string) (string, error) {
	cmd := exec.Command("git", args...)
	cmd.Dir = w.dir
	out, err := cmd.CombinedOutput()
	return strings.TrimSpace(string(out)), err
}

func (w work) git(args ...string) string {
	w.t.Helper()
	out, err := w.try(args...)
	if err != nil {
		w.t.Fatalf("git %s: %v\n%s", strings.Join(args, " "), err, out)
	}
	return out
}

// put stores text as a blob and returns its id.
func (w work) put(text string) string {
	w.t.Helper()
	return w.feed(text, "hash-object", "-w", "--stdin")
}

// feed runs git with standard input.
func (w work) feed(in string, args ...string) string {
	w.t.Helper()
	cmd := exec.Command("git", args...)
	cmd.Dir, cmd.Stdin = w.dir, strings.NewReader(in)
	out, err := cmd.Output()
	if err != nil {
		w.t.Fatalf("git %s: %v", strings.Join(args, " "), err)
	}
	return strings.TrimSpace(string(out))
}

func open(t testing.TB, root string) *Repo {
	t.Helper()
	r, err := Open(context.Background(), root)
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { r.Close() })
	return r
}

func at(t testing.TB, r *Repo, rev string) source.Tree {
	t.Helper()
	tree, err := r.At(context.Background(), rev)
	if err != nil {
		t.Fatal(err)
	}
	return tree
}

// read lists a tree and reads all of it: "PATH: TEXT", or "PATH is …" where it is
// skipped, or "PATH! ERROR".
func read(t testing.TB, tree source.Tree) []string {
	t.Helper()
	entries, err := tree.Files()
	if err != nil {
		t.Fatal(err)
	}
	var lines []string
	for _, e := range entries {
		if e.Skip != "" {
			lines = append(lines, e.Path+" "+e.Skip)
			continue
		}
		b, err := tree.Read(e)
		if err != nil {
			lines = append(lines, fmt.Sprintf("%s! %v", e.Path, err))
			continue
		}
		lines = append(lines, e.Path+": "+string(b))
	}
	return lines
}

func same(t testing.TB, what string, got, want any) {
	t.Helper()
	if !reflect.DeepEqual(got, want) {
		t.Errorf("%s:\n got %q\nwant %q", what, got, want)
	}
}

// refusal is the error as a *Refusal.
func refusal(t testing.TB, err error) *Refusal {
	t.Helper()
	var r *Refusal
	if !errors.As(err, &r) {
		t.Fatalf("got %v (%T), want a *Refusal", err, err)
	}
	return r
}

func contains(t testing.TB, what, got string, wants ...string) {
	t.Helper()
	for _, want := range wants {
		if !strings.Contains(got, want) {
			t.Errorf("%s: %q does not hold %q", what, got, want)
		}
	}
}
