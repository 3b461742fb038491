package rules_test

import (
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/rules"
)

// eachCase visits every plan of the cases whose folders match a pattern, and those
// of the demo workspace.
func eachCase(t *testing.T, pattern string, visit func(name string, c *rules.Case)) {
	t.Helper()
	base := files(t, filepath.Join(casesDir, "base"))
	trees := map[string]memory{"saltmarsh": {files: files(t, filepath.Join("..", "testdata", "saltmarsh"))}}
	names, _ := filepath.Glob(filepath.Join(casesDir, pattern, "*.txtar"))
	for _, name := range names {
		archive, err := txtar.ParseFile(name)
		if err != nil {
			t.Fatal(err)
		}
		tree := memory{files: map[string]string{}}
		for path, text := range base {
			tree.files[path] = text
		}
		for _, f := range archive.Files {
			tree.files[f.Name] = string(f.Data)
		}
		trees[filepath.Base(filepath.Dir(name))+"/"+filepath.Base(name)] = tree
	}
	for name, tree := range trees {
		firm, err := rules.Load(tree, rules.Options{Today: today(t, "")})
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range firm.PlanFiles {
			if c, broken := firm.Case(e); !broken {
				visit(name+" "+filepath.Base(e.Path), c)
			}
		}
	}
}

// What a finding shows as a sum adds up to the figure that it is about, both ways.
func TestReachIsTheSumOfItsTerms(t *testing.T) {
	sums := 0
	eachCase(t, "reach-*", func(name string, c *rules.Case) {
		for _, r := range c.Reach() {
			if r.RSRP.OK {
				sum := r.Signal.RSRP.V
				if through := r.Signal.Through; through != nil {
					sum += through.LossDB.V - through.GainDBi.V
				}
				for _, term := range r.Terms {
					sum += float64(term.DB)
				}
				if sums++; !nearly(sum, r.RSRP.V.Value(), 1e-9) {
					t.Errorf("%s: %s in %s adds up to %.4f, not %.4f", name, r.Signal.Operator.V, r.Area.Name.V, sum, r.RSRP.V.Value())
				}
			}
			if r.Up.OK {
				sum := 23.0
				for _, term := range r.Up.V.Terms {
					sum += float64(term.DB)
				}
				if sums++; !nearly(sum, r.Up.V.Level.Value(), 1e-9) {
					t.Errorf("%s: the way back from %s adds up to %.4f, not %.4f", name, r.Area.Name.V, sum, r.Up.V.Level.Value())
				}
			}
		}
	})
	if sums < 100 {
		t.Errorf("%d sums were looked at, 100 or more are expected", sums)
	}
}

// What is not known says what it lacks, whichever way.
func TestReachSaysWhatItLacks(t *testing.T) {
	eachCase(t, "reach-*", func(name string, c *rules.Case) {
		for _, r := range c.Reach() {
			if !r.RSRP.OK && len(r.RSRP.Lacks) == 0 {
				t.Errorf("%s: the level in %s is not known and lacks nothing", name, r.Area.Name.V)
			}
			if !r.Up.OK && len(r.Up.Lacks) == 0 && !r.Chain.Up.Span.Empty() {
				t.Errorf("%s: the way back from %s is not known and lacks nothing", name, r.Area.Name.V)
			}
		}
	})
}

const counter = `
[[area]]
name            = "counter"
distance        = "10 m"
walls           = [{ name = "shelf", loss_db = 6 }]
target_rsrp_dbm = -90
`

// The end with the smaller margin limits the link. At −99 dBm the downlink comes to
// −87.35, 2.65 dB over its target; the phone arrives with 20 − 2 + 10 − 117 = −89,
// 21 dB over what is needed.
func TestWhichEndLimits(t *testing.T) {
	for _, c := range []struct{ target, ends string }{
		{"-90", "downlink"}, {"-108.34", "downlink"}, {"-108.36", "uplink"}, {"-130", "uplink"},
	} {
		plan := strings.Replace(counter, "-90", c.target, 1) + heard("-99") + apart("90")
		r := planCase(t, chainPlan(fixedWideband, plan), "shop").Reach()[0]
		if !nearly(r.RSRP.V.Value(), -87.3522, 0.0001) || !nearly(r.Up.V.Level.Value(), -89, 1e-9) {
			t.Fatalf("%.4f down, %.4f up", r.RSRP.V.Value(), r.Up.V.Level.Value())
		}
		if r.Ends() != c.ends {
			t.Errorf("with a target of %s dBm the %s limits, want the %s", c.target, r.Ends(), c.ends)
		}
	}
	r := planCase(t, chainPlan(fixedWideband, strings.Replace(counter, "distance", "# distance", 1)+heard("-99")+apart("90")), "shop").Reach()[0]
	if r.Ends() != "" {
		t.Errorf("without a distance the %s limits", r.Ends())
	}
}

// A phone far away is not held down by the rated output, one close by is.
func TestRatedOutputHoldsANearPhone(t *testing.T) {
	for distance, limited := range map[string]bool{"10 m": true, "12 m": false} {
		plan := strings.Replace(counter, "10 m", distance, 1) + heard("-99") + apart("90")
		r := planCase(t, chainPlan(fixedWideband, plan), "shop").Reach()[0]
		// 21.10 dBm at 10 m, 1.58 dB less at 12 m; 20 dBm are rated.
		if r.Up.V.Limited != limited {
			t.Errorf("at %s limited is %v", distance, r.Up.V.Limited)
		}
	}
}

// Of several server antennas the one that brings least stands at the only distance
// that the plan gives: the level is never more than any of them alone would bring.
func TestNoServerIsCountedOn(t *testing.T) {
	level := func(served string) float64 {
		text := strings.NewReplacer(
			`port  = { donor`, `port  = { s2 = { connector = "N female", impedance_ohm = 50, side = "server" }, donor`,
			`dome  =`, "far   = { part = \"ANT-S\", place = \"room\" }\ndome  =",
			`F = {`, "L2 = { part = \"JX\", from = \"amp.s2\", to = \"far\" }\nF = {",
			`distance `, "served_by = ["+served+"]\ndistance ",
		).Replace(chainPlan(fixedWideband, counter+heard("-99")+apart("90"))) + "\n-- catalog/jx.toml --\n[part.JX]\nkind = \"jumper\"\ncable = \"GEN-CX-10\"\nlength = \"1 m\"\nends = [\"N male\", \"N male\"]\nloss_db = 7\n"
		r := planCase(t, text, "shop").Reach()[0]
		if !r.RSRP.OK {
			t.Fatalf("lacks %v", r.RSRP.Lacks)
		}
		return r.RSRP.V.Value()
	}
	near, far, both := level(`"dome"`), level(`"far"`), level(`"dome", "far"`)
	if !nearly(near-far, 5, 1e-9) || both != far {
		t.Errorf("%.2f dBm by dome, %.2f by far, %.2f by both", near, far, both)
	}
}
