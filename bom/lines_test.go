package bom_test

import (
	"fmt"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// resolve reads a plan that uses generic parts only.
func resolve(t *testing.T, text string) *bom.Graph {
	t.Helper()
	f, problems := source.NewFile("plans/case.toml", []byte(text))
	d, more := source.Parse(f)
	p, rest := bom.ReadPlan(d)
	for _, x := range append(append(problems, more...), rest...) {
		t.Fatalf("line %d: %s", x.At.Line(), x.Says)
	}
	return bom.Resolve(p, catalog.New(nil))
}

// Pairs of splitters back to back double the ways with each pair: 60 of them have
// more ways than could be followed in a lifetime, and the walk ends all the same.
func TestTangleEnds(t *testing.T) {
	var b strings.Builder
	fmt.Fprintln(&b, `device.amp = { part = "GEN-AMP-W5-FIX" }`)
	from := "amp.server"
	for i := range 60 {
		fmt.Fprintf(&b, "device.a%d = { part = \"GEN-N-SPLIT-2\" }\ndevice.b%d = { part = \"GEN-N-SPLIT-2\" }\n", i, i)
		for _, ends := range [][2]string{
			{from, fmt.Sprintf("a%d.in", i)},
			{fmt.Sprintf("a%d.out1", i), fmt.Sprintf("b%d.out1", i)},
			{fmt.Sprintf("a%d.out2", i), fmt.Sprintf("b%d.out2", i)},
		} {
			fmt.Fprintf(&b, "cable.%s = { part = \"GEN-J-N-N-1\", from = %q, to = %q }\n",
				strings.ReplaceAll(ends[1], ".", "-"), ends[0], ends[1])
		}
		from = fmt.Sprintf("b%d.in", i)
	}
	g := resolve(t, b.String())
	if len(g.Holes) > 0 {
		t.Fatal(g.Holes[0].Says)
	}
	if g.Lines().Whole {
		t.Error("a tangle was followed to its end")
	}
	held := 0
	for _, l := range g.Lines().All {
		held += len(l.Steps)
	}
	if held > 1<<18 {
		t.Errorf("%d steps are held", held)
	}
}

// Two links of one length between two amplifiers are two lines; each is found from
// both ends and kept once.
func TestParallelLinks(t *testing.T) {
	g := resolve(t, `
device.head  = { part = "GEN-AMP-W5-FIX" }
device.tail  = { part = "GEN-AMP-W5-FIX" }
device.fork  = { part = "GEN-N-SPLIT-2" }
device.merge = { part = "GEN-N-SPLIT-2" }
cable.A = { part = "GEN-J-N-N-1", from = "head.server", to = "fork.in" }
cable.B = { part = "GEN-J-N-N-1", from = "fork.out1", to = "merge.out1" }
cable.C = { part = "GEN-J-N-N-1", from = "fork.out2", to = "merge.out2" }
cable.D = { part = "GEN-J-N-N-1", from = "merge.in", to = "tail.donor" }
`)
	links := g.Lines().Of(bom.Link)
	if len(links) != 2 {
		t.Fatalf("%d links, expected 2", len(links))
	}
	for i, want := range []string{"A B D", "A C D"} {
		var got []string
		for _, x := range links[i].Cables() {
			got = append(got, x.ID)
		}
		if strings.Join(got, " ") != want {
			t.Errorf("link %d runs over %v, expected %s", i, got, want)
		}
		if links[i].From.Name() != "head.server" || links[i].To.Name() != "tail.donor" {
			t.Errorf("link %d is %s", i, links[i].Name())
		}
	}
}
