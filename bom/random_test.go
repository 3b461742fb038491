package bom_test

import (
	"fmt"
	"math/rand/v2"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
)

// A random plan is a list of tables in an order that can be changed. Its names are
// few, so that lines meet, share ports, run in rings and lead nowhere.
type randomPlan struct {
	*rand.Rand
	tables  []string
	joints  []string
	devices []string // their names, copies included
	ports   []string // of these, as references
}

func newRandomPlan(seed uint64) *randomPlan {
	p := &randomPlan{Rand: rand.New(rand.NewPCG(seed, 7))}
	p.tables = strings.Split(strings.TrimSpace(places), "\n")
	for i, part := range []string{"AMP", "YAGI", "DOME", "SPLIT-2"} {
		p.device(i, part)
	}
	for i := range p.IntN(6) {
		p.device(4+i, p.of(randomParts...))
	}
	for i := range 3 + p.IntN(8) {
		p.cable(i)
	}
	for range p.IntN(3) {
		p.joints = append(p.joints, fmt.Sprintf("{ a = %q, b = %q%s }", p.ref(), p.ref(), p.way()))
	}
	for i := range p.IntN(3) {
		p.add("data.e%d = { part = %q, length = \"4 m\", from = %q, to = %q }", i, p.of("CAT", "CAT", "NIX"), p.dataRef(), p.dataRef())
		p.add("wire.p%d = { part = \"W\", from = %q, to = %q, fuse = %q }", i, p.deviceName(), p.deviceName(), p.of("FUSE", "NIX"))
	}
	for i := range p.IntN(5) {
		p.add("bond.g%d = { from = %q, to = %q, part = \"BC\", length = \"1 m\" }", i, p.deviceName(), p.deviceName())
	}
	return p
}

func (p *randomPlan) add(format string, args ...any) {
	p.tables = append(p.tables, fmt.Sprintf(format, args...))
}

func (p *randomPlan) of(words ...string) string { return words[p.IntN(len(words))] }

func (p *randomPlan) maybe(format string, args ...any) string {
	if p.IntN(2) == 0 {
		return ""
	}
	return ", " + fmt.Sprintf(format, args...)
}

var randomParts = []string{"YAGI", "PANEL", "WHIP", "DOME", "AMP", "AMP-2", "RADIO", "MIXED", "SPLIT-2", "SPLIT-2", "DIPLEX",
	"ARREST", "ARREST-MF", "LOAD", "PAD", "SPD", "INJ", "PSU", "BAR", "ROD", "MAST", "NIX"}

func (p *randomPlan) device(i int, part string) {
	text := fmt.Sprintf("part = %q", part)
	text += p.maybe("place = %q", p.place()) + p.maybe("on = \"d%d\"", p.IntN(8)) + p.maybe("up = \"1 m\"")
	names := []string{fmt.Sprint("d", i)}
	if p.IntN(4) == 0 {
		text += fmt.Sprintf(", copies = { x%d = { place = %q }, y%d = [1, 2, 3] }", i, p.place(), i)
		names = append(names, fmt.Sprint("x", i), fmt.Sprint("y", i))
	}
	if p.IntN(6) == 0 {
		text += ", existing = true"
	}
	p.add("device.d%d = { %s }", i, text)
	p.devices = append(p.devices, names...)
	c, _ := shopParts()
	if known := c.Look(part); known != nil {
		for _, n := range names {
			for _, port := range known.PortNames() {
				p.ports = append(p.ports, n+"."+port)
			}
		}
	}
}

func (p *randomPlan) cable(i int) {
	text := fmt.Sprintf("part = %q", p.of("CX", "CX", "THIN", "J-NN", "J-NN", "J-NS", "BARE", "NIX"))
	if p.IntN(6) == 0 {
		text = fmt.Sprintf("like = \"c%d\"", p.IntN(10))
	}
	text += p.maybe("length = \"%d m\"", 1+p.IntN(9))
	if p.IntN(10) > 0 {
		text += fmt.Sprintf(", from = %q", p.ref())
	}
	if p.IntN(10) > 0 {
		text += fmt.Sprintf(", to = %q", p.ref())
	}
	text += p.maybe("ends = [%q, %q]", p.end(), p.end()) + p.way()
	if p.IntN(4) == 0 {
		text += fmt.Sprintf(", through = [%q, %q]", p.of("PAD", "AD-N-S", "AD-S-N", "TEE", "NIX"), p.of("PAD", "AD-N-S", "AD-S-N"))
	}
	if p.IntN(8) == 0 {
		text += p.of(", existing = true", ", supplied_by = \"client\"")
	}
	p.add("cable.c%d = { %s }", i, text)
}

func (p *randomPlan) end() string {
	return p.of("N male", "N female", "SMA male", "NM", "NF", "NM-CRIMP", "SM", "NIX")
}

func (p *randomPlan) place() string { return p.of("roof", "wall", "room", "store", "nowhere") }

func (p *randomPlan) way() string {
	return p.maybe("way = [%q, %q]", p.place(), p.place()+" 2 m")
}

func (p *randomPlan) deviceName() string {
	if p.IntN(20) == 0 {
		return "nobody"
	}
	return p.of(p.devices...)
}

func (p *randomPlan) dataRef() string {
	return p.deviceName() + p.of("", "", ".poe", ".lan", ".line", ".gear")
}

// ref is mostly a port that is there, now and then a bare name, a cable's end, or
// nothing that is there.
func (p *randomPlan) ref() string {
	switch n := p.IntN(20); {
	case n < 13:
		return p.of(p.ports...)
	case n < 16:
		return p.deviceName()
	case n < 19:
		return fmt.Sprintf("c%d.%d", p.IntN(10), 1+p.IntN(2))
	}
	return p.deviceName() + ".zz"
}

// text writes the tables, in the order in which they were made or in another one.
func (p *randomPlan) text(shuffle bool) string {
	tables, joints := slices.Clone(p.tables), slices.Clone(p.joints)
	if len(joints) > 0 {
		if shuffle {
			p.Shuffle(len(joints), func(i, j int) { joints[i], joints[j] = joints[j], joints[i] })
		}
		tables = append(tables, "joint = ["+strings.Join(joints, ", ")+"]")
	}
	if shuffle {
		p.Shuffle(len(tables), func(i, j int) { tables[i], tables[j] = tables[j], tables[i] })
	}
	return strings.Join(tables, "\n") + "\n"
}

// The order of the tables in the file changes neither what is joined, nor the lines,
// nor where they cross, nor what is taken.
func TestOrderOfTablesDoesNotCount(t *testing.T) {
	var seen tally
	for seed := range uint64(800) {
		p := newRandomPlan(seed)
		text := p.text(false)
		first := lay(t, text)
		checkGraph(t, first)
		seen.count(first)
		want := summary(first)
		for range 3 {
			other := p.text(true)
			got := summary(lay(t, other))
			if !slices.Equal(got, want) {
				t.Fatalf("seed %d: in one order\n  %s\nin another\n  %s\n%s\n---\n%s", seed,
					strings.Join(missing(want, got), "\n  "), strings.Join(missing(got, want), "\n  "), text, other)
			}
		}
	}
	seen.check(t)
}

// missing lists what is in a and not in b.
func missing(a, b []string) []string {
	var out []string
	for _, s := range a {
		if !slices.Contains(b, s) {
			out = append(out, s)
		}
	}
	return out
}

// summary is all that a graph says, without the order in which it says it.
func summary(g *bom.Graph) []string {
	var out []string
	for _, d := range g.Devices {
		place := "nowhere"
		if d.Place != nil {
			place = d.Place.ID
		}
		path, ok := g.PathToElectrode(d)
		out = append(out, fmt.Sprintf("%s is at %s %v, bonded %v over %d", d.ID, place, d.Point.V, ok, len(path.Bonds)))
	}
	for _, m := range g.Mates {
		pair := []string{m.A.Name(), m.B.Name()}
		slices.Sort(pair)
		out = append(out, fmt.Sprintf("%v meet through %d", pair, len(m.Adapters)))
	}
	for _, l := range g.Lines().All {
		out = append(out, lineSummary(l))
	}
	for _, d := range g.Data {
		out = append(out, fmt.Sprintf("%s goes from %s to %s", d.On(), nodeName(d.From), nodeName(d.To)))
	}
	kinds := map[bom.HoleKind]int{}
	for _, h := range g.Holes {
		kinds[h.Kind]++
	}
	q := g.Takeoff(sealing("TAPE"))
	for _, r := range q.Rows {
		pieces := make([]string, len(r.Pieces))
		for i, p := range r.Pieces {
			pieces[i] = fmt.Sprint(p.Line, " ", p.Length)
		}
		slices.Sort(pieces)
		out = append(out, fmt.Sprint(r.Part.ID, " ", r.Each, " ", r.Length, " ", r.Uses, " ", pieces))
	}
	for _, x := range q.Gaps {
		out = append(out, "gap "+x.On+" "+x.Says)
	}
	slices.Sort(out)
	return append(out, fmt.Sprint("holes ", kinds), fmt.Sprint("entries ", g.Entries()))
}

func lineSummary(l *bom.Line) string {
	var crossed []string
	for _, c := range l.Crossings() {
		crossed = append(crossed, fmt.Sprintf("%s %s|%s %d-%d", c.On, c.Out.ID, c.In.ID, c.Outer, c.Inner))
	}
	return fmt.Sprintf("%s %s, open %v: %s, crossing %q", l.Kind, l.Name(), l.Open, path(l), crossed)
}

// tally counts what random plans hold, so that a property is not held of nothing.
type tally struct{ plans, mates, feeds, legs, links, loops, crossings, shared, adapters, gaps int }

func (c *tally) count(g *bom.Graph) {
	c.plans++
	c.mates += len(g.Mates)
	c.feeds += len(g.Lines().Of(bom.Feed))
	c.legs += len(g.Lines().Of(bom.Leg))
	c.links += len(g.Lines().Of(bom.Link))
	c.loops += len(g.Lines().Loops)
	for _, l := range g.Lines().All {
		c.crossings += len(l.Crossings())
	}
	for _, m := range g.Mates {
		c.adapters += len(m.Adapters)
	}
	for _, h := range g.Holes {
		if h.Kind == bom.SharedPort {
			c.shared++
		}
	}
	c.gaps += len(g.Takeoff(&bom.House{}).Gaps)
}

func (c *tally) check(t *testing.T) {
	t.Helper()
	for _, n := range []int{c.mates, c.feeds, c.legs, c.links, c.loops, c.crossings, c.shared, c.adapters, c.gaps} {
		if n < c.plans/100 {
			t.Errorf("the random plans hold too little: %+v", *c)
			return
		}
	}
}
