package main

import (
	"bytes"
	"errors"
	"io/fs"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"sync"
	"testing"
	"time"
)

const issueFile = "stock/issue/quay-lane-1.toml"

// demoCopy is the demo workspace in a folder of its own.
func demoCopy(t *testing.T) string {
	t.Helper()
	dir := t.TempDir()
	if err := os.CopyFS(dir, os.DirFS("../../testdata/saltmarsh")); err != nil {
		t.Fatal(err)
	}
	return dir
}

func issueCall(dir string) []string {
	return []string{"pick", "quay-lane", "--root", dir, "--today", "2026-12-01", "--issue", "--by", "jo"}
}

// Whenever the program is killed, the sheet is there whole or not at all, and all
// other files of the workspace are as they were.
func TestIssueKilled(t *testing.T) {
	whole := demoCopy(t)
	began := time.Now()
	if out, messages, status := run(issueCall(whole)); status != 0 {
		t.Fatal(out, messages)
	}
	took := 3*time.Since(began) + 20*time.Millisecond // a process begins later than a call
	want := read(t, whole, issueFile)
	before, after := 0, 0
	for i := range 24 {
		dir := demoCopy(t)
		cmd := exec.Command("driploop", issueCall(dir)...)
		if err := cmd.Start(); err != nil {
			t.Fatal(err)
		}
		time.Sleep(took * time.Duration(i) / 24)
		cmd.Process.Kill()
		cmd.Wait()
		got, err := os.ReadFile(filepath.Join(dir, issueFile))
		switch {
		case errors.Is(err, fs.ErrNotExist):
			before++
		case err != nil:
			t.Fatal(err)
		case !bytes.Equal(got, want):
			t.Fatalf("killed after %v the sheet is\n%s", took*time.Duration(i)/24, got)
		default:
			after++
		}
		sameButIssue(t, dir)
		if out, messages, status := run([]string{"inspect", "--root", dir, "--today", "2026-12-01", "quay-lane"}); status > statusHeld {
			t.Fatalf("the workspace cannot be read any more: %s%s", out, messages)
		}
	}
	if before == 0 || after == 0 {
		t.Logf("of 24, %d were killed before the sheet was there and %d after: the test saw one side only", before, after)
	}
}

func read(t *testing.T, dir, file string) []byte {
	t.Helper()
	b, err := os.ReadFile(filepath.Join(dir, file))
	if err != nil {
		t.Fatal(err)
	}
	return b
}

// sameButIssue holds that but for the folder of issues a workspace is the demo.
func sameButIssue(t *testing.T, dir string) {
	t.Helper()
	n := 0
	err := filepath.WalkDir(dir, func(name string, d fs.DirEntry, err error) error {
		rel, _ := filepath.Rel(dir, name)
		if err != nil || d.IsDir() || strings.HasPrefix(rel, filepath.Join("stock", "issue")) {
			return err
		}
		n++
		if !bytes.Equal(read(t, dir, rel), read(t, "../../testdata/saltmarsh", rel)) {
			t.Errorf("%s was changed", rel)
		}
		return nil
	})
	if err != nil || n == 0 {
		t.Fatal("nothing was compared", err)
	}
}

// Of many who issue at the same time one does; the others are told.
func TestIssueAtOnce(t *testing.T) {
	dir := demoCopy(t)
	status := make([]int, 8)
	var wg sync.WaitGroup
	for i := range status {
		wg.Go(func() { _, _, status[i] = run(issueCall(dir)) })
	}
	wg.Wait()
	done := 0
	for _, s := range status {
		if s == statusClear {
			done++
		}
	}
	if done != 1 {
		t.Errorf("%d of 8 issued: %v", done, status)
	}
	left, err := os.ReadDir(filepath.Join(dir, "stock/issue"))
	if err != nil || len(left) != 1 {
		t.Errorf("files left: %v %v", left, err)
	}
}

// A folder of issues that leads elsewhere is not followed out of the workspace.
func TestIssueStaysInside(t *testing.T) {
	dir, other := demoCopy(t), t.TempDir()
	if err := os.Symlink(other, filepath.Join(dir, "stock/issue")); err != nil {
		t.Fatal(err)
	}
	if _, messages, status := run(issueCall(dir)); status == statusClear {
		t.Errorf("it issued: %s", messages)
	}
	if left, _ := os.ReadDir(other); len(left) != 0 {
		t.Errorf("it wrote outside: %v", left)
	}
}
