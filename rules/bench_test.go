//go:build unix

package rules_test

import (
	"context"
	"flag"
	"runtime"
	"strings"
	"sync"
	"sync/atomic"
	"syscall"
	"testing"
	"time"

	"github.com/BurntSushi/toml"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// The benchmarks state how much the whole inspection costs beside the least that
// anybody would pay: decoding the same files with BurntSushi/toml into a map, on as
// many cores, in turn with it. Of what they report,
//
//	x-decode  is an inspection over the decoding; 2.5 at most
//	x-1000    is 10,000 plans over 1,000; 9 at most
//
// Each is a quotient of processor time, of all cores and with collecting garbage,
// and takes the least of the run for either: what else the machine does disturbs
// that little. x-decode-wall and x-1000-wall are the same by the clock.
//
//	go test ./rules -run '^$' -bench Inspect -benchtime 10x

func BenchmarkInspect1000(b *testing.B) {
	tree := benchFirm(1000)
	var inspect, decode least
	b.ReportAllocs()
	for b.Loop() {
		inspect.time(b, func() { inspectAll(b, tree) })
		b.StopTimer()
		decode.time(b, func() { decodeAll(b, tree) })
		b.StartTimer()
	}
	b.ReportMetric(float64(inspect.cpu)/float64(decode.cpu), "x-decode")
	b.ReportMetric(float64(inspect.wall)/float64(decode.wall), "x-decode-wall")
	b.ReportMetric(float64(decode.cpu.Milliseconds()), "decode-ms")
}

func BenchmarkInspect10000(b *testing.B) {
	few, many := benchFirm(1000), benchFirm(10000)
	var long, short least
	b.ReportAllocs()
	for b.Loop() {
		long.time(b, func() { inspectAll(b, many) })
		b.StopTimer()
		short.time(b, func() { inspectAll(b, few) })
		b.StartTimer()
	}
	b.ReportMetric(float64(long.cpu)/float64(short.cpu), "x-1000")
	b.ReportMetric(float64(long.wall)/float64(short.wall), "x-1000-wall")
}

// BenchmarkLoad is what is read before the first plan: the catalog and the shelf.
func BenchmarkLoad(b *testing.B) {
	tree := benchFirm(1)
	b.ReportAllocs()
	for b.Loop() {
		loadFirm(b, tree)
	}
}

// BenchmarkPlan is one plan in a firm that has been read.
func BenchmarkPlan(b *testing.B) {
	firm := loadFirm(b, benchFirm(2))
	b.ReportAllocs()
	for b.Loop() {
		if _, err := firm.Inspect(context.Background(), firm.PlanFiles[1:]); err != nil {
			b.Fatal(err)
		}
	}
}

// least is the least that something took, of several times.
type least struct{ cpu, wall time.Duration }

func (l *least) time(b *testing.B, run func()) {
	runtime.GC() // what the other left behind is not ours
	start, used := time.Now(), processorTime(b)
	run()
	wall, cpu := time.Since(start), processorTime(b)-used
	if l.wall == 0 || wall < l.wall {
		l.wall = wall
	}
	if l.cpu == 0 || cpu < l.cpu {
		l.cpu = cpu
	}
}

// processorTime is what this process has used so far.
func processorTime(b *testing.B) time.Duration {
	var u syscall.Rusage
	if err := syscall.Getrusage(syscall.RUSAGE_SELF, &u); err != nil {
		b.Fatal(err)
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}

func loadFirm(t testing.TB, tree source.Tree) *rules.Firm {
	t.Helper()
	day, err := unit.ParseDate("2026-12-01")
	if err != nil {
		t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: day})
	if err != nil {
		t.Fatal(err)
	}
	return firm
}

func inspectAll(b *testing.B, tree source.Tree) {
	if _, err := loadFirm(b, tree).Inspect(context.Background(), nil); err != nil {
		b.Fatal(err)
	}
}

// decodeAll decodes every file of a tree with as many hands as an inspection has.
func decodeAll(b *testing.B, tree source.Tree) {
	entries, err := tree.Files()
	if err != nil {
		b.Fatal(err)
	}
	var next atomic.Int64
	var hands sync.WaitGroup
	for range runtime.GOMAXPROCS(0) {
		hands.Go(func() {
			for i := next.Add(1) - 1; int(i) < len(entries); i = next.Add(1) - 1 {
				src, err := tree.Read(entries[i])
				if err != nil {
					b.Error(err)
				}
				var m map[string]any
				if _, err := toml.Decode(string(src), &m); err != nil {
					b.Error(err)
				}
			}
		})
	}
	hands.Wait()
}

var (
	benchFirmDir   = flag.String("bench-firm", "", "a folder into which the made-up firm is written")
	benchFirmPlans = flag.Int("bench-plans", 1000, "how many plans are written there")
)

// TestBenchFirm holds that the made-up firm is as large as the benchmarks say, that
// its files are sound, and that findings stand on some of its plans and not on all.
//
//	go test ./rules -run TestBenchFirm -bench-firm DIR
//
// leaves it in a folder, for measuring the program as a whole.
func TestBenchFirm(t *testing.T) {
	tree := benchFirm(1000)
	if *benchFirmDir != "" {
		writeTree(t, benchFirm(*benchFirmPlans), *benchFirmDir)
	}
	firm := loadFirm(t, tree)
	if n := len(firm.Catalog.Own()); n != benchParts {
		t.Errorf("the firm has %d parts of its own, not %d", n, benchParts)
	}
	rows, size := 0, 0
	for name, text := range tree.files {
		rows += strings.Count(text, "[[count]]") + strings.Count(text, "[[reel]]")
		if strings.HasPrefix(name, "plans/") {
			size += len(text)
		}
	}
	if rows != benchRows {
		t.Errorf("the shelf has %d rows, not %d", rows, benchRows)
	}
	if size /= 1000; size < 4700 || size > 5300 {
		t.Errorf("a plan has %d bytes, not about 5 KB", size)
	}
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range res.Workspace {
		t.Errorf("%s line %d: %s", f.At.Path(), f.At.Line(), f.Says)
	}
	held := 0
	for _, p := range res.Plans {
		if p.Holds+p.Punch > 0 {
			held++
		}
		for _, f := range p.Findings {
			if f.Rule.Area() == "file" || f.Rule.Area() == "part" {
				t.Errorf("%s line %d: %s", f.At.Path(), f.At.Line(), f.Says)
			}
		}
	}
	t.Logf("%d of 1000 plans have a hold or something to put right", held)
	if held == 0 || held == 1000 {
		t.Error("the made-up plans should be sound for the most part, and not all")
	}
}
