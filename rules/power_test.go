package rules

import (
	"fmt"
	"math"
	"strings"
	"testing"
	"time"

	"driploop/bom"
	"driploop/catalog/source"
)

// powerCase makes the case of a plan over the generic catalog.
func powerCase(t *testing.T, plan string) *Case {
	t.Helper()
	firm, err := Load(planTree{"plans/a.toml": plan, WorkspaceFile: "[workspace]\n"}, Options{})
	if err != nil {
		t.Fatal(err)
	}
	c, broken := firm.Case(firm.PlanFiles[0])
	if broken || len(c.Problems) > 0 || len(c.Graph.Holes) > 0 {
		t.Fatalf("the plan is not in order: %+v %+v", c.Problems, c.Graph.Holes)
	}
	return c
}

type planTree map[string]string

func (planTree) Name() string { return "worktree" }

func (f planTree) Files() ([]source.Entry, error) {
	return []source.Entry{{Path: WorkspaceFile}, {Path: "plans/a.toml"}}, nil
}

func (f planTree) Read(e source.Entry) ([]byte, error) { return []byte(f[e.Path]), nil }

func TestLoadBehindTwoWiresCountsOnce(t *testing.T) {
	c := powerCase(t, `[device]
psu = { part = "GEN-PS-12-5" }
amp = { part = "GEN-AMP-W5-FIX" }
[wire]
P1 = { part = "GEN-W-14-2", length = "1 m", from = "psu", to = "amp.power" }
P2 = { part = "GEN-W-14-2", length = "1 m", from = "amp.power", to = "psu" }
`)
	d := c.hangsOn(c.Graph.Device("psu"))
	if d.watt != 30 || len(d.terms) != 1 || len(d.lacks) != 0 {
		t.Errorf("%+v, expected the amplifier's 30 W once", d)
	}
	for _, w := range c.supplies().leads {
		if w.source.ID != "psu" || w.load.ID != "amp" {
			t.Errorf("%s goes from %s to %s, whichever end is written first", w.Row.ID, w.source.ID, w.load.ID)
		}
	}
}

func TestConverterTakesMoreThanItGives(t *testing.T) {
	c := powerCase(t, `[device]
bat  = { part = "GEN-BAT-12" }
conv = { part = "GEN-PS-DCDC-12-4" }
amp  = { part = "GEN-AMP-W5-FIX" }
[wire]
P1 = { part = "GEN-W-14-2", length = "1 m", from = "bat", to = "conv.in" }
P2 = { part = "GEN-W-14-2", length = "1 m", from = "conv.out", to = "amp.power" }
`)
	if got, want := c.hangsOn(c.Graph.Device("bat")).watt, 30/0.85; math.Abs(got-want) > 1e-9 {
		t.Errorf("the battery gives %v W, expected %v", got, want)
	}
}

// Layers of converters, each of which feeds both of the next layer, have as many
// ways through them as two to the power of the layers. They are added up layer by
// layer all the same.
func TestLadderOfConvertersIsAddedUpOnce(t *testing.T) {
	var devices, wires strings.Builder
	const layers = 60
	n := 0
	for i := range layers {
		for _, side := range []string{"a", "b"} {
			fmt.Fprintf(&devices, "%s%d = { part = \"GEN-PS-DCDC-12-4\" }\n", side, i)
			for _, next := range []string{"a", "b"} {
				if i+1 < layers {
					fmt.Fprintf(&wires, "W%d = { part = \"GEN-W-14-2\", from = \"%s%d.out\", to = \"%s%d.in\" }\n", n, side, i, next, i+1)
					n++
				}
			}
		}
	}
	c := powerCase(t, "[device]\namp = { part = \"GEN-AMP-W5-FIX\" }\n"+devices.String()+"[wire]\n"+wires.String()+
		fmt.Sprintf("END = { part = \"GEN-W-14-2\", from = \"a%d.out\", to = \"amp.power\" }\n", layers-1))
	start := time.Now()
	d := c.hangsOn(c.Graph.Device("a0"))
	if took := time.Since(start); took > 5*time.Second {
		t.Errorf("it took %s", took)
	}
	if len(d.terms) > 2 || len(d.String()) > 1000 {
		t.Errorf("%d terms, %d bytes", len(d.terms), len(d.String()))
	}
	// 2^(layers−2) ways from each of the two below, each 1/0.85 a layer.
	want := 30 * math.Pow(2, layers-2) / math.Pow(0.85, layers-1)
	if math.Abs(d.watt/want-1) > 1e-9 {
		t.Errorf("%v W, expected %v", d.watt, want)
	}
}

func TestPassiveKindsAndTheirVolts(t *testing.T) {
	for kind, want := range map[string]float64{"passive 12 V": 12, "passive 24 V": 24, "passive 48 V": 48} {
		if !passive(kind) || passiveVolts(kind) != want {
			t.Errorf("%s: passive %v, %v V", kind, passive(kind), passiveVolts(kind))
		}
	}
	for _, kind := range []string{"", "af", "at", "bt3", "bt4"} {
		if passive(kind) || passiveVolts(kind) != 0 {
			t.Errorf("%q: passive %v, %v V", kind, passive(kind), passiveVolts(kind))
		}
	}
}

// A source does for gear of its own kind and of lower classes, and for nothing of
// another kind of voltage.
func TestWhichSourceDoesForWhichGear(t *testing.T) {
	kinds := []string{"af", "at", "bt3", "bt4", "passive 12 V", "passive 24 V", "passive 48 V"}
	for i, gives := range kinds {
		for j, takes := range kinds {
			want := gives == takes || i < 4 && j < 4 && i > j
			if givesFor(gives, takes) != want {
				t.Errorf("%s for %s: %v", gives, takes, !want)
			}
		}
	}
	if givesFor("", "") || givesFor("", "af") {
		t.Error("a source without power does for something")
	}
}

// A run keeps its cables in order, over the protectors in it, whichever way round
// each is written.
func TestRunListsItsLines(t *testing.T) {
	c := powerCase(t, `[device]
inj   = { part = "GEN-INJ-AT" }
s1    = { part = "GEN-SPD-BT" }
s2    = { part = "GEN-SPD-BT" }
radio = { part = "GEN-RTR-OUT-8" }
[data]
E2 = { part = "GEN-CAT6-R", length = "2 m", from = "s2.line", to = "s1.gear" }
E1 = { part = "GEN-CAT6-R", length = "1 m", from = "inj.out", to = "s1.line" }
E3 = { part = "GEN-CAT6-R", length = "3 m", from = "s2.gear", to = "radio.poe" }
`)
	if len(c.supplies().runs) != 1 {
		t.Fatalf("%d runs, expected one", len(c.supplies().runs))
	}
	run := &c.supplies().runs[0]
	var ids []string
	for _, l := range run.lines() {
		ids = append(ids, l.Row.ID)
	}
	if got := strings.Join(ids, " "); got != "E1 E2 E3" && got != "E3 E2 E1" {
		t.Errorf("lines %s", got)
	}
	give, take := run.giver()
	if give < 0 || take < 0 || run.ends[give].ID != "inj" || run.ends[take].ID != "radio" {
		t.Errorf("gives %d, takes %d of %v", give, take, []*bom.Device{run.ends[0], run.ends[1]})
	}
	if to := run.fedBy(c.Graph.Device("inj")); to == nil || to.ID != "radio" {
		t.Errorf("the injector feeds %v", to)
	}
	if run.fedBy(c.Graph.Device("radio")) != nil {
		t.Error("the radio feeds something")
	}
}
