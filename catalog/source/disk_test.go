//go:build unix

package source

import (
	"errors"
	"net"
	"os"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"testing/iotest"
	"time"
)

// shop is a folder with everything that a tree must cope with.
func shop(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	outside := filepath.Join(t.TempDir(), "outside.toml")
	write(t, outside, "secret = 1")
	write(t, filepath.Join(dir, "driploop.toml"), "[workspace]")
	write(t, filepath.Join(dir, "plans", "quay-lane.toml"), "[job]")
	write(t, filepath.Join(dir, "plans", "2026", "a.toml"), "")
	write(t, filepath.Join(dir, "plans-old.toml"), "")
	write(t, filepath.Join(dir, ".gitignore"), "")
	write(t, filepath.Join(dir, ".git", "config"), "")
	write(t, filepath.Join(dir, "plans", ".cache", "x.toml"), "")
	write(t, filepath.Join(dir, "full.toml"), strings.Repeat("#", MaxFile))
	write(t, filepath.Join(dir, "big.toml"), strings.Repeat("#", MaxFile+1))
	for name, target := range map[string]string{
		"out.toml": outside, "in.toml": "driploop.toml", "folder": "plans", "up": "..", "nowhere.toml": "none",
	} {
		must(t, os.Symlink(target, filepath.Join(dir, name)))
	}
	must(t, syscall.Mkfifo(filepath.Join(dir, "pipe.toml"), 0o600))
	return dir
}

func write(t *testing.T, path, text string) {
	t.Helper()
	must(t, os.MkdirAll(filepath.Dir(path), 0o755))
	must(t, os.WriteFile(path, []byte(text), 0o644))
}

func must(t *testing.T, err error) {
	t.Helper()
	if err != nil {
		t.Fatal(err)
	}
}

func open(t *testing.T, dir string) Tree {
	t.Helper()
	tree, err := Disk(dir)
	must(t, err)
	return tree
}

func TestDiskFiles(t *testing.T) {
	tree := open(t, shop(t))
	entries, err := tree.Files()
	must(t, err)
	var got []string
	for _, e := range entries {
		got = append(got, strings.TrimSpace(e.Path+" "+e.Skip))
	}
	want := []string{
		".gitignore",
		"big.toml",
		"driploop.toml",
		"folder is a symbolic link",
		"full.toml",
		"in.toml is a symbolic link",
		"nowhere.toml is a symbolic link",
		"out.toml is a symbolic link",
		"pipe.toml is a pipe",
		"plans-old.toml",
		"plans/2026/a.toml",
		"plans/quay-lane.toml",
		"up is a symbolic link",
	}
	if strings.Join(got, "\n") != strings.Join(want, "\n") {
		t.Errorf("the tree lists\n%s\nwant\n%s", strings.Join(got, "\n"), strings.Join(want, "\n"))
	}
	if tree.Name() != "worktree" {
		t.Errorf("the tree is called %q", tree.Name())
	}
}

func TestDiskRead(t *testing.T) {
	tree := open(t, shop(t))
	for path, want := range map[string]int{"driploop.toml": 11, "plans/2026/a.toml": 0, "full.toml": MaxFile} {
		if src, err := tree.Read(Entry{Path: path}); err != nil || len(src) != want {
			t.Errorf("%s: %d bytes, %v; want %d bytes", path, len(src), err, want)
		}
	}
	var big *TooBig
	if _, err := tree.Read(Entry{Path: "big.toml"}); !errors.As(err, &big) || big.Path != "big.toml" || big.Size != MaxFile+1 {
		t.Errorf("big.toml: %v", err)
	}
}

func TestReadCapped(t *testing.T) {
	if src, err := readCapped(strings.NewReader(strings.Repeat("#", MaxFile)), "a.toml"); err != nil || len(src) != MaxFile {
		t.Errorf("a file of the largest size: %d bytes, %v", len(src), err)
	}
	var big *TooBig
	if _, err := readCapped(strings.NewReader(strings.Repeat("#", MaxFile+1)), "a.toml"); !errors.As(err, &big) {
		t.Errorf("a file that grew while it was read: %v", err)
	}
	if _, err := readCapped(iotest.ErrReader(errors.New("disk fault")), "a.toml"); err == nil {
		t.Error("a fault of the disk is not reported")
	}
}

// An entry may have been replaced since it was listed, so Read must hold by itself.
func TestDiskReadRefuses(t *testing.T) {
	dir := shop(t)
	tree := open(t, dir)
	for _, path := range []string{"out.toml", "up/x", "../outside.toml", "/etc/passwd", "nowhere.toml", "none.toml", "plans", "pipe.toml", ""} {
		done := make(chan error)
		go func() {
			_, err := tree.Read(Entry{Path: path})
			done <- err
		}()
		select {
		case err := <-done:
			if err == nil {
				t.Errorf("%q is read", path)
			}
		case <-time.After(5 * time.Second):
			t.Fatalf("%q: opening waits", path)
		}
	}
	if _, err := tree.Read(Entry{Path: "driploop.toml", Skip: "is a symbolic link"}); err == nil {
		t.Error("an entry that is to be skipped is read")
	}
}

func TestDiskSocketAndDevice(t *testing.T) {
	dir := t.TempDir()
	t.Chdir(dir) // the path of a socket must be short
	l, err := net.Listen("unix", "s.toml")
	must(t, err)
	defer l.Close()
	entries, err := open(t, dir).Files()
	must(t, err)
	if len(entries) != 1 || entries[0].Skip != "is a socket" {
		t.Errorf("the socket is listed as %+v", entries)
	}
	for _, device := range []string{"null", "zero"} {
		if _, err := open(t, "/dev").Read(Entry{Path: device}); err == nil || !strings.Contains(err.Error(), "is a device") {
			t.Errorf("%s: %v", device, err)
		}
	}
	if got := skipReason(os.ModeDevice | os.ModeCharDevice); got != "is a device" {
		t.Errorf("a device is listed as %q", got)
	}
}

func TestDiskErrors(t *testing.T) {
	if _, err := Disk(filepath.Join(t.TempDir(), "none")); err == nil {
		t.Error("a folder that is not there is opened")
	}
	file := filepath.Join(t.TempDir(), "file")
	write(t, file, "")
	if _, err := Disk(file); err == nil {
		t.Error("a file is opened as a folder")
	}
	dir := t.TempDir()
	tree := open(t, dir)
	must(t, os.Remove(dir))
	if entries, err := tree.Files(); err == nil && len(entries) > 0 {
		t.Errorf("a folder that has gone lists %v", entries)
	}
}
