package bom_test

import (
	"testing"

	"driploop/bom"
)

func nodeName(n *bom.Node) string {
	if n == nil {
		return "nothing"
	}
	return n.Name()
}

func TestDataLines(t *testing.T) {
	const devices = places + `
[device]
radio = { part = "RADIO", place = "roof" }
spd = { part = "SPD", place = "wall" }
inj = { part = "INJ", place = "room" }
`
	for name, text := range map[string]string{
		"the named port first": `data.E1 = { part = "CAT", from = "radio.poe", to = "spd.line", way = ["roof 3 m", "wall"] }` + "\n" + `data.E2 = { part = "CAT", from = "spd", to = "inj" }` + "\n",
		"the bare one first":   `data.E2 = { part = "CAT", from = "spd", to = "inj" }` + "\n" + `data.E1 = { part = "CAT", from = "radio.poe", to = "spd.line", way = ["roof 3 m", "wall"] }` + "\n",
	} {
		g := whole(t, text+devices)
		for _, d := range g.Data {
			want := map[string][2]string{"data.E1": {"radio.poe", "spd.line"}, "data.E2": {"spd.gear", "inj.poe"}}[d.On()]
			if got := [2]string{nodeName(d.From), nodeName(d.To)}; got != want || d.From.Data != d || d.To.Data != d {
				t.Errorf("%s: %s goes from %s to %s, want %v", name, d.On(), got[0], got[1], want)
			}
			if d.On() == "data.E1" && (len(d.Way) != 2 || d.Way[0].Length.V != 3000 || d.Part.ID != "CAT") {
				t.Errorf("%s: E1 is %+v", name, d)
			}
		}
	}
	g := lay(t, devices+`
[data]
E1 = { part = "CAT", from = "radio", to = "inj.poe" }
E2 = { part = "CATT", from = "radio.main", to = "inj.poe" }
E3 = { part = "CX", from = "spd.lin", to = "nobody" }
E4 = { part = "CAT" }
`)
	hasHoles(t, "data lines", g,
		`no part, "CATT", data.E2: the catalog has no part "CATT"; did you mean CAT?`,
		`wrong kind, "CX", data.E3: CX is of kind cable; data-cable is expected here; name a part of that kind`,
		`no port, "radio.main", data.E2: radio.main carries cellular; a data port is expected; name a data port`,
		`no port, "spd.lin", data.E3: spd (part SPD) has no port "lin"; did you mean spd.line?`,
		`shared port, "inj.poe", data.E2: inj.poe already takes the line E1; a port takes one line`,
		`no port, "radio", data.E1: "radio" alone does not say which port: radio.poe, radio.lan are free; write one of them`,
		`bad reference, "nobody", data.E3: the plan has no device "nobody"; add it, or correct the name`,
	)
	if g.Data[3].From != nil || g.Data[3].To != nil || g.Data[1].To == nil {
		t.Error("a line without ends has some, or a line on a taken port has none")
	}
}

// Two bare names of a device with one port share it, whichever comes first.
func TestDataLinesOnOnePort(t *testing.T) {
	for _, text := range []string{
		"data.E1 = { part = \"CAT\", from = \"inj\" }\ndata.E2 = { part = \"CAT\", from = \"inj\" }\n",
		"data.E2 = { part = \"CAT\", from = \"inj\" }\ndata.E1 = { part = \"CAT\", from = \"inj\" }\n",
	} {
		g := lay(t, text+"device.inj = { part = \"INJ\" }\n")
		if len(g.Holes) != 1 || g.Holes[0].Kind != bom.SharedPort || g.Data[0].From != g.Data[1].From || g.Data[0].From == nil {
			t.Errorf("holes are %v", holes(g))
		}
	}
}

func TestWires(t *testing.T) {
	g := whole(t, places+`
[device]
psu = { part = "PSU", place = "room" }
amp = { part = "AMP", place = "room" }
radio = { part = "RADIO", place = "room" }
[wire]
P1 = { part = "W", length = "2 m", from = "psu", to = "amp", fuse = "FUSE", way = ["room"] }
P2 = { part = "W", length = "2 m", from = "psu.dc", to = "radio.dc" }
`)
	p1, p2 := g.Wires[0], g.Wires[1]
	if nodeName(p1.From) != "psu.dc" || nodeName(p1.To) != "amp.dc" || p1.Fuse.ID != "FUSE" || p1.Part.ID != "W" || len(p1.Way) != 1 || p1.On() != "wire.P1" {
		t.Errorf("P1 is %+v", p1)
	}
	if p2.From != p1.From || nodeName(p2.To) != "radio.dc" || p2.Fuse != nil {
		t.Errorf("a supply feeds several wires: P2 is %+v", p2)
	}
	g = lay(t, `
[device]
psu = { part = "PSU" }
amp = { part = "AMP" }
[wire]
P1 = { part = "W", from = "psu.dc", to = "amp.donor", fuse = "W" }
P2 = { part = "W", from = "dome", to = "amp.dx" }
`)
	hasHoles(t, "wires", g,
		`wrong kind, "W", wire.P1: W is of kind wire; fuse is expected here; name a part of that kind`,
		`no port, "amp.donor", wire.P1: amp.donor carries cellular; a power port is expected; name a power port`,
		`bad reference, "dome", wire.P2: the plan has no device "dome"; add it, or correct the name`,
		`no port, "amp.dx", wire.P2: amp (part AMP) has no port "dx"; did you mean amp.dc?`,
	)
}

func TestBonds(t *testing.T) {
	g := whole(t, `
[device]
arrest = { part = "ARREST" }
arrest-2 = { part = "ARREST" }
mast = { part = "MAST" }
clamp = { part = "BAR" }
bar = { part = "BAR" }
rod = { existing = true, kind = "electrode" }
rod-2 = { part = "ROD" }
loose = { part = "BAR" }
[bond]
G1 = { from = "arrest.gear", to = "bar", part = "BC", length = "1 m" }
G2 = { from = "clamp", to = "mast", direct = true }
G3 = { from = "clamp", to = "bar", part = "BC", length = "2 m" }
G4 = { from = "bar", to = "rod", part = "BC", length = "3 m" }
G5 = { from = "arrest-2", to = "arrest", part = "BC", length = "1 m" }
G6 = { from = "rod-2", to = "rod", existing = true }
`)
	for id, want := range map[string]string{
		"arrest": "G1 G4 rod", "mast": "G2 G3 G4 rod", "bar": "G4 rod", "arrest-2": "G5 G1 G4 rod", "rod": "rod", "rod-2": "rod-2", "loose": "",
	} {
		path, ok := g.PathToElectrode(g.Device(id))
		got := ""
		for _, b := range path.Bonds {
			got += b.Row.ID + " "
		}
		if path.End != nil {
			got += path.End.ID
		}
		if got != want || ok != (want != "") {
			t.Errorf("from %s the way is %q, %v; want %q", id, got, ok, want)
		}
	}
	for id, want := range map[string]int{"bar": 3, "rod": 2, "arrest": 2, "mast": 1, "loose": 0} {
		if got := len(g.BondsAt(g.Device(id))); got != want {
			t.Errorf("%s has %d bonds, want %d", id, got, want)
		}
	}
	if g.Bonds[0].Conductor() == nil || g.Bonds[1].Conductor() != nil || g.Bonds[5].Conductor() != nil {
		t.Error("a conductor is where a part is, and only there")
	}
	if b := g.Bonds[0]; b.Other(g.Device("arrest")) != g.Device("bar") || b.Other(g.Device("bar")) != g.Device("arrest") || b.Other(g.Device("rod")) != nil || b.On() != "bond.G1" {
		t.Errorf("the bond is %+v", b)
	}
}

// The shortest of several ways is taken, and a ring of bonds ends.
func TestShortestBondPath(t *testing.T) {
	g := whole(t, `
[device]
a = { part = "BAR" }
b = { part = "BAR" }
c = { part = "BAR" }
rod = { part = "ROD" }
[bond]
AB = { from = "a", to = "b", direct = true }
BC = { from = "b", to = "c", direct = true }
CA = { from = "c", to = "a", direct = true }
CR = { from = "c", to = "rod", direct = true }
AR = { from = "rod", to = "a", direct = true }
`)
	if path, ok := g.PathToElectrode(g.Device("a")); !ok || len(path.Bonds) != 1 || path.Bonds[0].Row.ID != "AR" {
		t.Errorf("from a the way is %+v", path.Bonds)
	}
	if path, ok := g.PathToElectrode(g.Device("b")); !ok || len(path.Bonds) != 2 {
		t.Errorf("from b the way is %+v", path.Bonds)
	}
}

func TestBondsThatLeadNowhere(t *testing.T) {
	g := lay(t, `
[device]
a = { part = "BAR" }
[bond]
G1 = { from = "a", to = "bb", part = "BC" }
G2 = { from = "a", to = "a", direct = true }
G3 = { from = "a", to = "a", part = "W" }
`)
	hasHoles(t, "bonds", g,
		`bad reference, "bb", bond.G1: the plan has no device "bb"; add it, or correct the name`,
		`bad reference, "a", bond.G2: a is bonded to itself; name another device`,
		`wrong kind, "W", bond.G3: W is of kind wire; bond-conductor is expected here; name a part of that kind`,
		`bad reference, "a", bond.G3: a is bonded to itself; name another device`,
	)
	if got := len(g.BondsAt(g.Device("a"))); got != 0 {
		t.Errorf("a has %d bonds, but none of them leads anywhere", got)
	}
	if _, ok := g.PathToElectrode(g.Device("a")); ok {
		t.Error("there is a way to an electrode where there is none")
	}
}
