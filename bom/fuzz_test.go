package bom_test

import (
	"os"
	"path/filepath"
	"testing"
	"time"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// FuzzPlan holds for any bytes: no panic, an end in time, and a graph that hangs
// together. The parts are those of the demo workspace and of these tests, with the
// generic ones behind them. The bound in time is wide because the fuzzer's
// instrumentation is slow; TestHostilePlans times what a file can ask for.
func FuzzPlan(f *testing.F) {
	parts := demoCatalog(f)
	for _, text := range seeds(f) {
		f.Add([]byte(text))
	}
	f.Fuzz(func(t *testing.T, src []byte) {
		start := time.Now()
		file, _ := source.NewFile("plans/case.toml", src)
		d, _ := source.Parse(file)
		p, problems := bom.ReadPlan(d)
		for _, x := range problems {
			if x.At.File != file || int(x.At.To) > len(file.Src) || x.At.From > x.At.To {
				t.Fatalf("a problem lies outside the file: %+v", x)
			}
		}
		g := bom.Resolve(p, parts)
		for _, h := range g.Holes {
			if h.At.File != file || h.Says == "" || h.Do == "" || h.On == "" || h.Kind == 0 {
				t.Fatalf("a hole says too little: %+v", h)
			}
		}
		checkGraph(t, g)
		if took := time.Since(start); took > 5*time.Second {
			t.Fatalf("took %v", took)
		}
	})
}

// seeds are the plans of the demo workspace, the plans of these tests that have the
// most in them, and some random ones.
func seeds(t testing.TB) []string {
	out := []string{fullPlan, fullJob}
	names, err := filepath.Glob("../testdata/saltmarsh/plans/*.toml")
	if err != nil || len(names) == 0 {
		t.Fatal("the demo workspace has no plans", err)
	}
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		out = append(out, string(text))
	}
	for seed := range uint64(20) {
		out = append(out, newRandomPlan(seed).text(false))
	}
	return out
}

func demoCatalog(t testing.TB) *catalog.Catalog {
	names, err := filepath.Glob("../testdata/saltmarsh/catalog/*.toml")
	if err != nil || len(names) == 0 {
		t.Fatal("the demo workspace has no catalog", err)
	}
	var own []*catalog.Part
	read := func(name string, text []byte) {
		d, problems := source.Parse(&source.File{Path: name, Src: text})
		list, more := catalog.ReadParts(d)
		for _, p := range append(problems, more...) {
			t.Fatalf("%s, line %d: %s", name, p.At.Line(), p.Says)
		}
		own = append(own, list...)
	}
	for _, name := range names {
		text, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		read(name, text)
	}
	read("catalog/shop.toml", []byte(shop))
	return catalog.New(own)
}

// The plans of the demo workspace have exactly the holes that their faults make.
func TestDemoPlansResolve(t *testing.T) {
	parts := demoCatalog(t)
	for name, want := range map[string][]string{
		"quay-lane": nil, "fenmoor-farm": nil, "boathouse": nil, "eel-van": nil, "mill-cottage": nil, "sluice-house": nil, "north-pier": nil,
		"heron-clinic": {`no part, "DOME-NFF", device.dome-4: the catalog has no part "DOME-NFF"; did you mean DOME-NF?`},
	} {
		text, err := os.ReadFile("../testdata/saltmarsh/plans/" + name + ".toml")
		if err != nil {
			t.Fatal(err)
		}
		p, problems := readPlan(t, string(text))
		if len(problems) > 0 {
			t.Errorf("%s: %v", name, problems)
		}
		g := bom.Resolve(p, parts)
		hasHoles(t, name, g, want...)
		checkGraph(t, g)
	}
}
