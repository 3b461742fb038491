package repo

import (
	"context"
	"fmt"
	"strings"
	"testing"
)

// BenchmarkThousandPlans opens, lists and reads a workspace of 1000 files of
// 4.6 KB, with ids written ahead and, for comparison, one at a time.
func BenchmarkThousandPlans(b *testing.B) {
	var files []string
	for i := range 1000 {
		text := strings.Repeat(fmt.Sprintf("[cable.C%d]\nlength = \"%d m\"\n", i, i*7%97), 150)
		files = append(files, fmt.Sprintf("plans/%04d.toml", i), text)
	}
	w := repository(b, files...)
	w.git("gc", "-q")
	for _, ahead := range []bool{true, false} {
		b.Run(fmt.Sprintf("ahead=%t", ahead), func(b *testing.B) {
			for b.Loop() {
				readAll(b, w.dir, ahead)
			}
		})
	}
}

func readAll(b *testing.B, dir string, ahead bool) {
	r, err := Open(context.Background(), dir)
	if err != nil {
		b.Fatal(err)
	}
	defer r.Close()
	files := at(b, r, "HEAD").(*tree)
	for _, e := range files.entries {
		var next []string
		if ahead {
			next = files.after(e)
		}
		if a := r.blobs.read(e.ID, next); a.err != nil {
			b.Fatal(a.err)
		}
	}
}

// BenchmarkHook opens a workspace of 1000 files, lists what is staged and reads
// one file: what a hook pays for git.
func BenchmarkHook(b *testing.B) {
	var files []string
	for i := range 1000 {
		files = append(files, fmt.Sprintf("plans/%04d.toml", i), fmt.Sprint(i))
	}
	w := repository(b, files...)
	for b.Loop() {
		r, err := Open(context.Background(), w.dir)
		if err != nil {
			b.Fatal(err)
		}
		staged := at(b, r, Index).(*tree)
		if _, err := staged.Read(staged.entries[500]); err != nil {
			b.Fatal(err)
		}
		r.Close()
	}
}
