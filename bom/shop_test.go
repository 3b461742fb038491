package bom_test

import (
	"fmt"
	"slices"
	"strings"
	"sync"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// shop is a small catalog whose figures are round, so that sums can be done by hand.
// Ports are listed in an order that tells from and to apart.
const shop = `
[part.YAGI]
kind = "antenna"
port.rf = { connector = "N female", impedance_ohm = 50 }
[part.PANEL]
kind = "antenna"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "N female", impedance_ohm = 50 }
[part.WHIP]
kind = "antenna"
port.rf = { connector = "N male", impedance_ohm = 50, lead = { cable = "THIN", length = "3 m" } }
[part.DOME]
kind = "antenna"
port.rf = { connector = "N female", impedance_ohm = 50 }
[part.AMP]
kind = "amplifier"
port.donor = { connector = "N female", impedance_ohm = 50, side = "donor" }
port.server = { connector = "N female", impedance_ohm = 50, side = "server" }
port.dc = { use = "power" }
[part.AMP-2]
kind = "amplifier"
port.donor = { connector = "N female", impedance_ohm = 50, side = "donor" }
port.server1 = { connector = "N female", impedance_ohm = 50, side = "server" }
port.server2 = { connector = "N female", impedance_ohm = 50, side = "server" }
[part.RADIO]
kind = "router"
port.main = { connector = "SMA female", impedance_ohm = 50 }
port.div = { connector = "SMA female", impedance_ohm = 50 }
port.poe = { use = "data" }
port.lan = { use = "data" }
port.dc = { use = "power" }
[part.RADIO-L]
kind = "router"
port.main = { connector = "N female", impedance_ohm = 50, lead = { cable = "THIN", length = "30 cm" } }
[part.TAIL]
kind = "filter"
port.a = { connector = "N male", impedance_ohm = 50, lead = { cable = "THIN", length = "10 cm" } }
port.b = { connector = "N male", impedance_ohm = 50, lead = { cable = "THIN", length = "20 cm" } }
path = [{ from = "b", to = "a", loss_db = 1 }]
[part.HYBRID]
kind = "coupler"
port.in = { connector = "N female", impedance_ohm = 50 }
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "N female", impedance_ohm = 50 }
port.c = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "in", to = ["a", "b", "c"], loss_db = 6 }, { from = "a", to = ["b", "c"], loss_db = 6 }, { from = "b", to = "c", loss_db = 6 }]
[part.MIXED]
kind = "router"
port.n = { connector = "N female", impedance_ohm = 50 }
port.s = { connector = "SMA female", impedance_ohm = 50 }
[part.SPLIT-2]
kind = "splitter"
port.in = { connector = "N female", impedance_ohm = 50 }
port.out1 = { connector = "N female", impedance_ohm = 50 }
port.out2 = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "in", to = ["out1", "out2"], loss_db = 3.2 }]
[part.DIPLEX]
kind = "diplexer"
port.com = { connector = "N female", impedance_ohm = 50 }
port.low = { connector = "N female", impedance_ohm = 50 }
port.high = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "com", to = "low", mhz = [600, 1000], loss_db = 0.4 }, { from = "high", to = "com", mhz = [1700, 2700], loss_db = 0.5 }]
[part.ARREST]
kind = "arrestor"
principle = "gas-tube"
port.line = { connector = "N female", impedance_ohm = 50 }
port.gear = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "line", to = "gear", loss_db = 0.1 }]
[part.ARREST-MF]
kind = "arrestor"
principle = "gas-tube"
port.line = { connector = "N female", impedance_ohm = 50 }
port.gear = { connector = "N male", impedance_ohm = 50 }
path = [{ from = "line", to = "gear", loss_db = 0.1 }]
[part.LOAD]
kind = "load"
port.rf = { connector = "N male", impedance_ohm = 50 }
[part.PAD]
kind = "attenuator"
port.f = { connector = "N female", impedance_ohm = 50 }
port.m = { connector = "N male", impedance_ohm = 50 }
path = [{ from = "f", to = "m", loss_db = 3 }]
[part.AD-N-S]
kind = "adapter"
port.n = { connector = "N female", impedance_ohm = 50 }
port.s = { connector = "SMA male", impedance_ohm = 50 }
path = [{ from = "n", to = "s", loss_db = 0.1 }]
[part.AD-S-N]
kind = "adapter"
port.s = { connector = "SMA male", impedance_ohm = 50 }
port.n = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "s", to = "n", loss_db = 0.1 }]
[part.AD-NM-SF]
kind = "adapter"
port.n = { connector = "N male", impedance_ohm = 50 }
port.s = { connector = "SMA female", impedance_ohm = 50 }
path = [{ from = "s", to = "n", loss_db = 0.1 }]
[part.BARREL]
kind = "adapter"
port.a = { connector = "N female", impedance_ohm = 50 }
port.b = { connector = "N female", impedance_ohm = 50 }
path = [{ from = "a", to = "b", loss_db = 0.1 }]
[part.TEE]
kind = "adapter"
port.a = { connector = "N male", impedance_ohm = 50 }
port.b = { connector = "N female", impedance_ohm = 50 }
port.c = { connector = "N female", impedance_ohm = 50 }

[part.CX]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = [[1000, 10]]
[part.THIN]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = [[1000, 20]]
[part.BARE]
kind = "cable"
impedance_ohm = 50
loss_db_per_100m = [[1000, 20]]
[part.NM]
kind = "connector"
connector = "N male"
impedance_ohm = 50
loss_db = 0.15
fits = ["CX"]
[part.NF]
kind = "connector"
connector = "N female"
impedance_ohm = 50
fits = ["CX", "THIN"]
[part.NM-CRIMP]
kind = "connector"
connector = "N male"
impedance_ohm = 50
fits = ["THIN"]
[part.NM-CLAMP]
kind = "connector"
connector = "N male"
impedance_ohm = 50
fits = ["THIN"]
[part.SM]
kind = "connector"
connector = "SMA male"
impedance_ohm = 50
fits = ["THIN"]
[part.J-NN]
kind = "jumper"
cable = "THIN"
length = "1 m"
ends = ["N male", "N male"]
[part.J-NS]
kind = "jumper"
length = "2 m"
loss_db = 0.5
ends = ["N male", "SMA male"]

[part.CAT]
kind = "data-cable"
[part.SPD]
kind = "data-arrestor"
port.line = { use = "data" }
port.gear = { use = "data" }
[part.INJ]
kind = "injector"
port.poe = { use = "data" }
[part.PSU]
kind = "supply"
port.dc = { use = "power" }
[part.W]
kind = "wire"
[part.FUSE]
kind = "fuse"
[part.BC]
kind = "bond-conductor"
[part.BAR]
kind = "bond-point"
[part.ROD]
kind = "electrode"
[part.MAST]
kind = "mount"
[part.TAPE]
kind = "consumable"
per = "joint"
holds = 6
[part.CLIP]
kind = "consumable"
per = "metre"
holds = "10 m"
[part.BUSH]
kind = "consumable"
per = "entry"
`

// place is what most of the plans below begin with.
const places = `
place.roof = { kind = "outdoor", at = [0, 0, 7] }
place.wall = { kind = "entry", at = [1, 0, 3] }
place.room = { kind = "indoor", at = [2, 0, 2] }
place.store = { kind = "indoor", at = [9, 9, 2] }
`

var shopParts = sync.OnceValues(func() (*catalog.Catalog, []source.Problem) {
	d, problems := source.Parse(&source.File{Path: "catalog/shop.toml", Src: []byte(shop)})
	list, more := catalog.ReadParts(d)
	return catalog.New(list), append(problems, more...)
})

func shopCatalog(t *testing.T) *catalog.Catalog {
	t.Helper()
	c, problems := shopParts()
	for _, p := range problems {
		t.Fatalf("the shop's catalog, line %d: %s", p.At.Line(), p.Says)
	}
	return c
}

// lay resolves a plan, which must read without a problem, with the shop's parts.
func lay(t *testing.T, text string) *bom.Graph {
	t.Helper()
	p, problems := readPlan(t, text)
	if len(problems) > 0 {
		t.Fatalf("the plan has problems:\n%s\n%s", strings.Join(problems, "\n"), text)
	}
	return bom.Resolve(p, shopCatalog(t))
}

// whole resolves a plan that must leave no hole.
func whole(t *testing.T, text string) *bom.Graph {
	t.Helper()
	g := lay(t, text)
	if len(g.Holes) > 0 {
		t.Fatalf("the plan has holes:\n  %s\n%s", strings.Join(holes(g), "\n  "), text)
	}
	return g
}

var holeNames = map[bom.HoleKind]string{bom.NoPart: "no part", bom.WrongKind: "wrong kind", bom.NoPort: "no port",
	bom.SharedPort: "shared port", bom.OpenChoice: "choice", bom.NoConnector: "no connector", bom.BadRef: "bad reference"}

// holes lists what did not resolve as "kind, text at the place, on: says; do".
func holes(g *bom.Graph) []string {
	var out []string
	for _, h := range g.Holes {
		out = append(out, fmt.Sprintf("%s, %s, %s: %s; %s", holeNames[h.Kind], h.At.Text(), h.On, h.Says, h.Do))
	}
	return out
}

// hasHoles holds that a plan leaves exactly these holes.
func hasHoles(t *testing.T, name string, g *bom.Graph, want ...string) {
	t.Helper()
	got := holes(g)
	if len(got) != len(want) {
		t.Errorf("%s: %d holes, want %d:\n  %s", name, len(got), len(want), strings.Join(got, "\n  "))
		return
	}
	for i := range want {
		if got[i] != want[i] {
			t.Errorf("%s: hole %d is\n  %s\nwant\n  %s", name, i+1, got[i], want[i])
		}
	}
}

// mates lists what is joined, as "C1.1 = donor.rf" or "C1.2 [AD-N-S n s] = radio.main".
func mates(g *bom.Graph) []string {
	var out []string
	for _, m := range g.Mates {
		var through []string
		for _, a := range m.Adapters {
			through = append(through, fmt.Sprintf("[%s %s %s] ", a.Part.ID, a.In.Name, a.Out.Name))
		}
		out = append(out, m.A.Name()+" "+strings.Join(through, "")+"= "+m.B.Name())
	}
	slices.Sort(out)
	return out
}

// hasMates holds that a plan joins exactly these.
func hasMates(t *testing.T, name string, g *bom.Graph, want ...string) {
	t.Helper()
	slices.Sort(want)
	if got := mates(g); !slices.Equal(got, want) {
		t.Errorf("%s: joined are\n  %s\nwant\n  %s", name, strings.Join(got, "\n  "), strings.Join(want, "\n  "))
	}
}

// ownCatalog is a catalog of the parts in a text, whatever is wrong with them.
func ownCatalog(t *testing.T, text string) *catalog.Catalog {
	t.Helper()
	d, problems := source.Parse(&source.File{Path: "catalog/own.toml", Src: []byte(text)})
	if len(problems) > 0 {
		t.Fatal(problems[0].Says)
	}
	list, _ := catalog.ReadParts(d)
	return catalog.New(list)
}

// lines writes the keys of a table in braces one to a line.
func lines(keys string) string {
	depth := 0
	out := []rune(keys)
	for i, c := range out {
		switch {
		case c == '[':
			depth++
		case c == ']':
			depth--
		case c == ',' && depth == 0:
			out[i] = '\n'
		}
	}
	return string(out) + "\n"
}
