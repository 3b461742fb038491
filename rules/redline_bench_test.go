//go:build unix

package rules_test

import (
	"context"
	"crypto/sha1"
	"encoding/hex"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// identified is a tree whose files are named by their content, as git names them.
type identified struct{ memory }

func (t identified) Files() ([]source.Entry, error) {
	out, err := t.memory.Files()
	for i := range out {
		sum := sha1.Sum([]byte(t.files[out[i].Path]))
		out[i].ID = hex.EncodeToString(sum[:])
	}
	return out, err
}

// lengthened is a firm with the feed of one of its plans made longer.
func lengthened(firm memory) memory {
	out := memory{files: map[string]string{}}
	for path, text := range firm.files {
		out.files[path] = text
	}
	const plan = "plans/job-00500.toml"
	text := out.files[plan]
	at := strings.Index(text, "length")
	from := at + strings.Index(text[at:], `"`) + 1
	out.files[plan] = text[:from] + "3" + text[from:]
	return out
}

// BenchmarkRedline1000 compares two states of a firm of 1,000 plans of which one
// differs, in turn with an inspection of the workspace. It reports
//
//	x-inspect  a redline over an inspection; 1.5 at most
//
// as a quotient of processor time, and x-inspect-wall by the clock.
//
//	go test ./rules -run '^$' -bench Redline -benchtime 5x
func BenchmarkRedline1000(b *testing.B) {
	base := benchFirm(1000)
	head := lengthened(base)
	var redline, inspect least
	b.ReportAllocs()
	for b.Loop() {
		redline.time(b, func() { compareAll(b, identified{base}, identified{head}) })
		b.StopTimer()
		inspect.time(b, func() { inspectAll(b, head) })
		b.StartTimer()
	}
	b.ReportMetric(float64(redline.cpu)/float64(inspect.cpu), "x-inspect")
	b.ReportMetric(float64(redline.wall)/float64(inspect.wall), "x-inspect-wall")
	b.ReportMetric(float64(inspect.wall.Milliseconds()), "inspect-ms")
}

func compareAll(tb *testing.B, base, head source.Tree) *rules.Redline {
	tb.Helper()
	r, err := rules.Compare(context.Background(), base, head, rules.Options{Today: today(tb, "")})
	if err != nil {
		tb.Fatal(err)
	}
	if len(r.Jobs) != 1 || r.Untouched != 999 {
		tb.Fatalf("%d jobs are concerned and %d are not; 1 and 999 are expected", len(r.Jobs), r.Untouched)
	}
	return r
}
