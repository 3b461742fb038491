package bom_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
)

// path writes a line as it is passed: contacts as "a~b", cables by ID, with ' where
// they are passed from end 2, passives as "device(in>out)", leads as "lead(port)".
func path(l *bom.Line) string {
	var out []string
	for _, s := range l.Steps {
		switch {
		case s.Contact != nil:
			a, b := s.Contact.A.Name, s.Contact.B.Name
			if s.Reverse {
				a, b = b, a
			}
			out = append(out, a+"~"+b)
		case s.Cable != nil:
			back := ""
			if s.Reverse {
				back = "'"
			}
			out = append(out, s.Cable.ID+back)
		case s.Lead != nil:
			out = append(out, "lead("+s.Lead.Name()+")")
		case s.Pass != nil:
			name := s.Pass.Part.ID
			if s.Pass.Device != nil {
				name = s.Pass.Device.ID
			}
			out = append(out, fmt.Sprintf("%s(%s>%s)", name, s.Pass.In.Name, s.Pass.Out.Name))
		}
	}
	return strings.Join(out, " ")
}

// followed lists the lines as "kind from > to" and, where asked, what they pass.
func followed(g *bom.Graph, paths bool) []string {
	var out []string
	for _, l := range g.Lines().All {
		s := fmt.Sprintf("%s %s > %s", l.Kind, l.From.Name(), l.To.Name())
		if l.Open {
			s += " (open)"
		}
		if paths {
			s += ": " + path(l)
		}
		out = append(out, s)
	}
	slices.Sort(out)
	return out
}

// short writes only the cables of each line.
func short(g *bom.Graph) []string {
	var out []string
	for _, l := range g.Lines().All {
		var ids []string
		for _, s := range l.Steps {
			if s.Cable != nil && s.Reverse {
				ids = append(ids, s.Cable.ID+"'")
			} else if s.Cable != nil {
				ids = append(ids, s.Cable.ID)
			}
		}
		open := ""
		if l.Open {
			open = " (open)"
		}
		out = append(out, fmt.Sprintf("%s %s > %s%s: %s", l.Kind, l.From.Name(), l.To.Name(), open, strings.Join(ids, " ")))
	}
	slices.Sort(out)
	return out
}

func hasLines(t *testing.T, name string, got []string, want ...string) {
	t.Helper()
	slices.Sort(want)
	if !slices.Equal(got, want) {
		t.Errorf("%s: the lines are\n  %s\nwant\n  %s", name, strings.Join(got, "\n  "), strings.Join(want, "\n  "))
	}
}

func TestFeedsAndLegsInTheirDirection(t *testing.T) {
	devices := `
[device]
amp = { part = "AMP" }
arrest = { part = "ARREST" }
yagi = { part = "YAGI" }
dome = { part = "DOME" }
`
	for name, cables := range map[string]string{
		"written along": cx("C1", "yagi", "arrest.line", nn) + cx("C2", "arrest.gear", "amp.donor", nn) + cx("L", "amp.server", "dome", nn),
		"written back":  cx("C1", "arrest.line", "yagi", nn) + cx("C2", "amp.donor", "arrest.gear", nn) + cx("L", "dome", "amp.server", nn),
	} {
		g := whole(t, cables+devices)
		along := "feed yagi.rf > amp.donor: yagi.rf~C1.1 C1 C1.2~arrest.line arrest(line>gear) arrest.gear~C2.1 C2 C2.2~amp.donor"
		leg := "leg amp.server > dome.rf: amp.server~L.1 L L.2~dome.rf"
		if name == "written back" {
			along = "feed yagi.rf > amp.donor: yagi.rf~C1.2 C1' C1.1~arrest.line arrest(line>gear) arrest.gear~C2.2 C2' C2.1~amp.donor"
			leg = "leg amp.server > dome.rf: amp.server~L.2 L' L.1~dome.rf"
		}
		hasLines(t, name, followed(g, true), along, leg)
	}
}

func TestLinesOverLeadsAndAdapters(t *testing.T) {
	g := whole(t, `
cable.C = { part = "CX", length = "1 m", from = "whip-2", to = "radio.main", ends = ["NF", "NM"], through = ["PAD", "AD-S-N"] }
cable.D = { part = "THIN", length = "1 m", from = "radio.div", to = "yagi", ends = ["SM", "NM-CRIMP"], through = ["PAD"] }
joint = [{ a = "amp.donor", b = "whip.rf" }, { a = "pad.m", b = "amp.server" }, { a = "load", b = "pad.f" }]
[device]
amp = { part = "AMP" }
whip = { part = "WHIP" }
whip-2 = { part = "WHIP" }
radio = { part = "RADIO" }
pad = { part = "PAD" }
load = { part = "LOAD" }
yagi = { part = "YAGI" }
`)
	hasLines(t, "leads and adapters", followed(g, true),
		"feed whip.rf > amp.donor: lead(whip.rf) whip.rf~amp.donor",
		"stub amp.server > load.rf: amp.server~pad.m pad(m>f) pad.f~load.rf",
		"feed whip-2.rf > radio.main: lead(whip-2.rf) whip-2.rf~C.1 C C.2~PAD PAD(f>m) PAD~AD-S-N AD-S-N(n>s) AD-S-N~radio.main",
		"feed yagi.rf > radio.div: yagi.rf~PAD PAD(m>f) PAD~D.2 D' D.1~radio.div",
	)
}

// A contact knows both faces, their impedances, and the loss that a connector part
// states for its pair.
func TestContacts(t *testing.T) {
	g := whole(t, `
cable.C = { part = "CX", length = "1 m", from = "yagi.rf", to = "radio.main", ends = ["NF", "NM"], through = ["AD-N-S"] }
device.yagi = { part = "WHIP" }
device.radio = { part = "RADIO" }
`)
	var got []string
	for _, m := range g.Mates {
		for _, x := range m.Contacts() {
			for _, h := range []bom.Half{x.A, x.B} {
				got = append(got, fmt.Sprintf("%s %v %v ohm, loss %v %v", h.Name, h.Face.V, h.Ohm.V, h.Loss.V, h.Loss.Set))
			}
		}
	}
	same(t, "halves", got, []string{
		"C.1 N female 50 ohm, loss 0 false", "yagi.rf N male 50 ohm, loss 0 false",
		"C.2 N male 50 ohm, loss 0.15 true", "AD-N-S N female 50 ohm, loss 0 false",
		"AD-N-S SMA male 50 ohm, loss 0 false", "radio.main SMA female 50 ohm, loss 0 false",
	})
}

func TestLeadsOfRadiosAndPassives(t *testing.T) {
	g := whole(t, cx("C", "yagi", "radio.main", `ends = ["NM", "NM"]`)+`
joint = [{ a = "tail.a", b = "radio-2" }, { a = "tail.b", b = "dome.rf" }]
[device]
radio = { part = "RADIO-L", copies = { radio-2 = {} } }
yagi = { part = "YAGI" }
dome = { part = "DOME" }
tail = { part = "TAIL" }
`)
	hasLines(t, "leads", followed(g, true),
		"feed yagi.rf > radio.main: yagi.rf~C.1 C C.2~radio.main lead(radio.main)",
		"feed dome.rf > radio-2.main: dome.rf~tail.b lead(tail.b) tail(b>a) lead(tail.a) tail.a~radio-2.main lead(radio-2.main)",
	)
}

func TestSplitters(t *testing.T) {
	g := whole(t, cx("L0", "amp.server", "split.in", nn)+cx("L1", "split.out1", "dome", nn)+cx("L2", "split.out2", "split-2.in", nn)+
		cx("L3", "split-2.out1", "dome-2", nn)+`
[device]
dome = { part = "DOME", copies = { dome-2 = {} } }
split = { part = "SPLIT-2" }
split-2 = { part = "SPLIT-2" }
amp = { part = "AMP" }
`)
	hasLines(t, "three ways behind two splitters", short(g),
		"leg amp.server > dome.rf: L0 L1",
		"leg amp.server > dome-2.rf: L0 L2 L3",
		"stub amp.server > split-2.out2 (open): L0 L2",
	)
	if len(g.Lines().Loops) > 0 || !g.Lines().Whole {
		t.Errorf("loops are %v", g.Lines().Loops)
	}
	if got := len(g.Lines().At(g.Device("amp").Node("server"))); got != 3 {
		t.Errorf("%d lines begin at the amplifier's server port, want 3", got)
	}
	if got := len(g.Lines().Of(bom.Leg)); got != 2 {
		t.Errorf("%d legs, want 2", got)
	}
	if got := g.Lines().At(g.Device("dome-2").Node("rf")); len(got) != 1 || got[0].Kind != bom.Leg {
		t.Errorf("at a dome are %v", got)
	}
	l := g.Lines().Of(bom.Leg)[0]
	if !l.Passes(g.Device("split")) || l.Passes(g.Device("amp")) || l.Name() != "amp.server to dome.rf" || l.On() != "cable.L0" || l.At().Text() != "L0" {
		t.Errorf("the leg is %s on %s at %s", l.Name(), l.On(), l.At().Text())
	}
}

func TestSeveralDonorsAndServers(t *testing.T) {
	g := whole(t, cx("C1", "yagi", "split.out1", nn)+cx("C2", "panel.a", "split.out2", nn)+cx("C3", "split.in", "amp.donor", nn)+
		cx("L1", "amp.server1", "dome", nn)+cx("L2", "dome-2", "amp.server2", nn)+`
[device]
yagi = { part = "YAGI" }
panel = { part = "PANEL" }
split = { part = "SPLIT-2" }
amp = { part = "AMP-2" }
dome = { part = "DOME", copies = { dome-2 = {} } }
`)
	hasLines(t, "two donors, two servers", short(g),
		"feed yagi.rf > amp.donor: C1 C3", "feed panel.a > amp.donor: C2 C3", "leg amp.server1 > dome.rf: L1", "leg amp.server2 > dome-2.rf: L2'")
}

func TestLinks(t *testing.T) {
	cables := cx("C1", "yagi", "amp.donor", nn) + cx("K", "amp.server", "amp-2.donor", nn) + cx("L", "amp-2.server", "dome", nn)
	for name, devices := range map[string]string{
		"the first amplifier first":  "amp = { part = \"AMP\" }\namp-2 = { part = \"AMP\" }\n",
		"the second amplifier first": "amp-2 = { part = \"AMP\" }\namp = { part = \"AMP\" }\n",
	} {
		g := whole(t, cables+"[device]\nyagi = { part = \"YAGI\" }\ndome = { part = \"DOME\" }\n"+devices)
		hasLines(t, name, short(g), "feed yagi.rf > amp.donor: C1", "link amp.server > amp-2.donor: K", "leg amp-2.server > dome.rf: L")
	}
	g := whole(t, cx("K", "amp.donor", "amp.server", nn)+"device.amp = { part = \"AMP\" }\n")
	hasLines(t, "an amplifier that feeds itself", short(g), "link amp.server > amp.donor: K'")
}

func TestRouters(t *testing.T) {
	g := whole(t, `
cable.F1 = { part = "J-NS", from = "panel.a", to = "radio.main" }
cable.F2 = { part = "J-NS", from = "panel.b", to = "radio.div" }
device.radio = { part = "RADIO" }
device.panel = { part = "PANEL" }
device.radio-2 = { part = "RADIO" }
`)
	hasLines(t, "two ports", short(g), "feed panel.a > radio.main: F1", "feed panel.b > radio.div: F2")
}

func TestStubs(t *testing.T) {
	g := whole(t, cx("A", "amp.donor", "", nn)+cx("B", "amp.server", "C.1", nn)+cx("C", "", "arrest.line", nn)+cx("D", "yagi", "", nn)+
		cx("E", "lone.in", "lone-2.in", nn)+`
[device]
amp = { part = "AMP" }
arrest = { part = "ARREST" }
yagi = { part = "YAGI" }
lone = { part = "SPLIT-2", copies = { lone-2 = {} } }
`)
	hasLines(t, "ways that lead nowhere", short(g),
		"stub amp.donor > A.2 (open): A", "stub amp.server > arrest.gear (open): B C", "stub yagi.rf > D.2 (open): D")
}

// Antennas without anything active are joined all the same, each pair once.
func TestPassiveAntennas(t *testing.T) {
	cables := cx("A", "yagi", "split.in", nn) + cx("B", "dome", "split.out1", nn) + cx("C", "dome-2", "split.out2", nn)
	for name, devices := range map[string]string{
		"donor first": "yagi = { part = \"YAGI\" }\ndome = { part = \"DOME\" }\ndome-2 = { part = \"DOME\" }\nsplit = { part = \"SPLIT-2\" }\n",
		"donor last":  "dome = { part = \"DOME\" }\ndome-2 = { part = \"DOME\" }\nsplit = { part = \"SPLIT-2\" }\nyagi = { part = \"YAGI\" }\n",
	} {
		g := whole(t, cables+"[device]\n"+devices)
		// Nothing decides the direction, so the names do.
		hasLines(t, name, short(g), "stub dome.rf > yagi.rf: B A'", "stub dome-2.rf > yagi.rf: C A'")
	}
}

func TestDiplexers(t *testing.T) {
	const devices = `
[device]
amp = { part = "AMP" }
yagi = { part = "YAGI" }
arrest = { part = "ARREST" }
dip = { part = "DIPLEX" }
dip-2 = { part = "DIPLEX" }
amp-2 = { part = "AMP" }
panel = { part = "PANEL" }
`
	g := whole(t, cx("A", "yagi", "dip.com", nn)+cx("B", "dip.low", "dip-2.low", nn)+cx("C", "dip.high", "arrest.line", nn)+
		cx("D", "arrest.gear", "dip-2.high", nn)+cx("E", "dip-2.com", "amp.donor", nn)+devices)
	hasLines(t, "parted by band and joined again", short(g), "feed yagi.rf > amp.donor: A B E", "feed yagi.rf > amp.donor: A C D E")
	for _, l := range g.Lines().All {
		for _, s := range l.Steps {
			if s.Pass != nil && s.Pass.Device.ID == "dip" {
				if n := len(s.Pass.Rows); n != 1 || s.Pass.In.Name != "com" || s.Pass.Rows[0].MHz.V.Contains(700) != (s.Pass.Out.Name == "low") {
					t.Errorf("%s takes the rows %+v", path(l), s.Pass.Rows)
				}
			}
		}
	}
	g = whole(t, cx("A", "panel.a", "dip.low", nn)+cx("B", "panel.b", "dip.high", nn)+cx("C", "dip.com", "amp.donor", nn)+devices)
	hasLines(t, "two antennas joined by band", short(g), "feed panel.a > amp.donor: A C", "feed panel.b > amp.donor: B C")
	// Two ways of one length between two amplifiers are two links.
	g = whole(t, cx("A", "amp.server", "dip.com", nn)+cx("B", "dip.low", "dip-2.low", nn)+cx("C", "dip.high", "dip-2.high", nn)+
		cx("D", "dip-2.com", "amp-2.donor", nn)+devices)
	hasLines(t, "two links", short(g), "link amp.server > amp-2.donor: A B D", "link amp.server > amp-2.donor: A C D")
}

func TestLoops(t *testing.T) {
	g := whole(t, cx("L0", "amp.server", "split.in", nn)+cx("L1", "split.out1", "split.out2", nn)+`
[device]
amp = { part = "AMP" }
split = { part = "SPLIT-2" }
`)
	hasLines(t, "two outputs joined", short(g))
	var at []string
	for _, n := range g.Lines().Loops {
		at = append(at, n.Name())
	}
	if want := []string{"split.in", "split.in"}; !slices.Equal(at, want) {
		t.Errorf("ways come back at %v, want %v", at, want)
	}
	g = lay(t, cx("A", "A.2", "", nn)+cx("B", "amp.server", "B2.1", nn)+"cable.B2 = { part = \"CX\", length = \"1 m\", to = \"B2.1\", ends = [\"NM\", \"NM\"] }\n"+`device.amp = { part = "AMP" }
`)
	at = nil
	for _, n := range g.Lines().Loops {
		at = append(at, n.Name())
	}
	if want := []string{"B2.1"}; !slices.Equal(at, want) {
		t.Errorf("a cable that is joined to itself comes back at %v, want %v", at, want)
	}
	g = lay(t, cx("A", "amp.server", "split.in", nn)+cx("B", "split.out1", "amp.server", nn)+`device.amp = { part = "AMP" }
device.split = { part = "SPLIT-2" }
`)
	hasLines(t, "back to where it began", short(g), "stub amp.server > split.out2 (open): A")
	if n := len(g.Lines().Loops); n != 2 { // once round each way
		t.Errorf("%d ways come back to where they began, want 2", n)
	}
}

// A hybrid passes on between all of its ports: a way that comes back in at one of them
// goes on to those that it has not passed.
func TestHybrids(t *testing.T) {
	const devices = `
[device]
amp = { part = "AMP" }
hybrid = { part = "HYBRID" }
dome = { part = "DOME" }
yagi = { part = "YAGI" }
`
	g := whole(t, cx("A", "amp.server", "hybrid.in", nn)+cx("B", "hybrid.a", "hybrid.b", nn)+cx("C", "hybrid.c", "dome", nn)+devices)
	hasLines(t, "a ring beside the way", short(g), "leg amp.server > dome.rf: A C", "leg amp.server > dome.rf: A B C", "leg amp.server > dome.rf: A B' C")
	// What an antenna reaches beside the amplifier that it belongs to is no line of its own.
	g = whole(t, cx("A", "amp.server", "hybrid.in", nn)+cx("C", "hybrid.c", "dome", nn)+cx("D", "hybrid.b", "yagi", nn)+devices)
	hasLines(t, "two antennas and an open port", short(g),
		"leg amp.server > dome.rf: A C", "leg amp.server > yagi.rf: A D", "stub amp.server > hybrid.a (open): A")
}

// A plan with more ways than are kept says so: three rows of splitters of 16 have
// 4096 open ends.
func TestMoreLinesThanAreKept(t *testing.T) {
	wide := "[part.WIDE]\nkind = \"splitter\"\nport.in = { connector = \"N female\", impedance_ohm = 50 }\n"
	var outs []string
	for i := range 16 {
		wide += fmt.Sprintf("port.o%d = { connector = \"N female\", impedance_ohm = 50 }\n", i)
		outs = append(outs, fmt.Sprintf("%q", fmt.Sprint("o", i)))
	}
	wide += "path = [{ from = \"in\", to = [" + strings.Join(outs, ", ") + "], loss_db = 13 }]\n"
	for rows, want := range map[int]int{2: 256, 3: 4000} {
		var b strings.Builder
		id := 0
		var grow func(from string, row int)
		grow = func(from string, row int) {
			id++
			me := fmt.Sprintf("s%d", id)
			fmt.Fprintf(&b, "device.%s.part = \"WIDE\"\ncable.c%d = { part = \"J-NN\", from = %q, to = \"%s.in\" }\n", me, id, from, me)
			for i := 0; i < 16 && row < rows; i++ {
				grow(fmt.Sprintf("%s.o%d", me, i), row+1)
			}
		}
		b.WriteString("device.amp.part = \"AMP\"\n")
		grow("amp.server", 1)
		p, problems := readPlan(t, b.String())
		if len(problems) > 0 {
			t.Fatal(problems)
		}
		l := bom.Resolve(p, ownCatalog(t, shop+wide)).Lines()
		if len(l.All) != want || l.Whole != (rows == 2) {
			t.Errorf("%d rows: %d lines, whole %v; want %d", rows, len(l.All), l.Whole, want)
		}
	}
}

// Rings of splitters have few ends and very many ways that come back.
func TestRingsEnd(t *testing.T) {
	var b strings.Builder
	b.WriteString("device.amp = { part = \"AMP\" }\ncable.c = { part = \"J-NN\", from = \"amp.server\", to = \"s0.in\" }\n")
	const n = 40
	for i := range n {
		fmt.Fprintf(&b, "device.s%d.part = \"MESH\"\n", i)
		fmt.Fprintf(&b, "cable.a%d = { part = \"J-NN\", from = \"s%d.a\", to = \"s%d.b\" }\n", i, i, (i+1)%n)
		fmt.Fprintf(&b, "cable.b%d = { part = \"J-NN\", from = \"s%d.c\", to = \"s%d.d\" }\n", i, i, (i+7)%n)
	}
	port := func(s string) string { return "port." + s + " = { connector = \"N female\", impedance_ohm = 50 }\n" }
	mesh := "[part.MESH]\nkind = \"splitter\"\n" + port("in") + port("a") + port("b") + port("c") + port("d") +
		"path = [{ from = \"in\", to = [\"a\", \"b\", \"c\", \"d\"], loss_db = 6 }, { from = \"a\", to = [\"b\", \"c\", \"d\"], loss_db = 6 }, { from = \"b\", to = [\"c\", \"d\"], loss_db = 6 }, { from = \"c\", to = \"d\", loss_db = 6 }]\n"
	p, problems := readPlan(t, b.String())
	if len(problems) > 0 {
		t.Fatal(problems)
	}
	g := bom.Resolve(p, ownCatalog(t, shop+mesh))
	if len(g.Holes) > 0 {
		t.Fatal(holes(g))
	}
	if g.Lines().Whole {
		t.Error("a mesh was followed to its end")
	}
	if n := len(g.Lines().Loops); n == 0 || n > 1<<18 {
		t.Errorf("%d loops are kept", n)
	}
}
