package catalog_test

import (
	"fmt"
	"math"
	"slices"
	"strings"
	"testing"

	"driploop/catalog"
	"driploop/catalog/source"
)

// says holds that a catalog file has exactly these problems, each "line: …".
func says(t *testing.T, name, src string, want ...string) {
	t.Helper()
	_, got := parts(t, src)
	if len(got) != len(want) {
		t.Errorf("%s: %d problems, want %d:\n  %s", name, len(got), len(want), strings.Join(got, "\n  "))
		return
	}
	for i := range want {
		if !strings.Contains(got[i], want[i]) {
			t.Errorf("%s: problem %d is %s, want %s", name, i+1, got[i], want[i])
		}
	}
}

// Where the kind is not known nobody can say which keys belong to the part: one
// problem stands for all that would follow from it.
func TestUnknownKindMutesTheRest(t *testing.T) {
	const rest = "gain_dbi = 3\nanything = 1\n[part.X.port.a]\nuse = 7\n[[part.X.range]]\nmhz = 3\n"
	says(t, "missing", "[part.X]\n"+rest, `1: "X" has no kind: what sort of part it is; add kind`)
	says(t, "misspelled", "[part.X]\nkind = \"antena\"\n"+rest, `2: kind: "antena" is not one of antenna, cable`)
	says(t, "of the wrong type", "[part.X]\nkind = 3\n"+rest, "2: kind: the number 3 was read")
	says(t, "beside a fault in a common key", "[part.X]\nkind = \"antena\"\nmass_kg = -1\n"+rest, "2: kind:", "3: mass_kg: -1 is outside")
	list, _ := parts(t, "[part.X]\nkind = \"antena\"\nname = \"n\"\n[part.Y]\nkind = \"electrode\"\n")
	if len(list) != 2 || list[0].Name.V != "n" || list[0].Kind.Set || list[1].Bond == nil {
		t.Errorf("parts are %+v", list)
	}
}

func TestKeysOfAnotherKind(t *testing.T) {
	says(t, "of a cable on an antenna", "[part.X]\nkind = \"antenna\"\nod_mm = 3\n", `3: nothing reads the key "od_mm" here`)
	says(t, "of an antenna on a router without one", "[part.X]\nkind = \"router\"\nxpd_db = 3\n", `3: nothing reads the key "xpd_db" here`)
	says(t, "of an antenna on a router with one", "[part.X]\nkind = \"router\"\nxpd_db = 3\n[[part.X.range]]\nmhz = [700, 800]\ngain_dbi = 2\n")
	says(t, "paths of an antenna", "[part.X]\nkind = \"antenna\"\n[[part.X.path]]\nfrom = \"a\"\n", `nothing reads the key "path" here`)
	says(t, "ports of a mount", "[part.X]\nkind = \"mount\"\n[part.X.port.a]\n", `nothing reads the key "port" here`)
}

func TestPortsThatAreMatedNeedAConnector(t *testing.T) {
	head := "[part.X]\nkind = \"amplifier\"\n[part.X.port.a]\n"
	connector := `3: "a" has no connector: a port for radio signals is mated`
	impedance := `3: "a" has no impedance_ohm: a port for radio signals has one`
	for use, mated := range map[string]bool{"": true, "cellular": true, "wifi": true, "gnss": true, "data": false, "power": false} {
		src := head
		if use != "" {
			src += "use = \"" + use + "\"\n"
		}
		if mated {
			says(t, "use "+use, src, connector, impedance)
		} else {
			says(t, "use "+use, src)
		}
		says(t, "complete, use "+use, src+"connector = \"N female\"\nimpedance_ohm = 50\n")
	}
	says(t, "one is there", head+"impedance_ohm = 50\n", connector)
	says(t, "one is wrong", head+"impedance_ohm = 50\nconnector = \"N\"\n", `5: connector: "N" needs a series and male or female`)
	says(t, "the other is wrong", head+"impedance_ohm = 0.5\nconnector = \"N male\"\n", "4: impedance_ohm: 0.5 is outside 1 to 1000 ohm")
}

func TestCableLossPer100Feet(t *testing.T) {
	p := one(t, "[part.X]\nkind = \"cable\"\nimpedance_ohm = 50\nloss_db_per_100ft = [[150, 3.048], [2500, 6.7]]\n")
	want := []float64{10, 6.7 / 0.3048} // 100 ft are 30.48 m
	if !p.Cable.PerFeet || len(p.Cable.Loss.V) != 2 {
		t.Fatalf("read %+v", p.Cable)
	}
	for i, pt := range p.Cable.Loss.V {
		if math.Abs(pt.V-want[i]) > 1e-12 {
			t.Errorf("point %d is %v dB per 100 m, want %v", i+1, pt.V, want[i])
		}
	}
	if p.Cable.Loss.V[0].MHz != 150 || p.Cable.Loss.V[1].MHz != 2500 {
		t.Errorf("the frequencies are converted too: %v", p.Cable.Loss.V)
	}
	if p.Cable.Loss.At.Text() != "[[150, 3.048], [2500, 6.7]]" {
		t.Errorf("the loss stands at %q", p.Cable.Loss.At.Text())
	}
	if metres := one(t, "[part.X]\nkind = \"cable\"\nimpedance_ohm = 50\nloss_db_per_100m = [[150, 3]]\n"); metres.Cable.PerFeet || metres.Cable.Loss.V[0].V != 3 {
		t.Errorf("a loss per 100 m is read as %+v", metres.Cable)
	}
}

func TestCableNeedsOneLoss(t *testing.T) {
	head := "[part.X]\nkind = \"cable\"\nimpedance_ohm = 50\n"
	says(t, "none", head, `1: "X" has no loss_db_per_100m: without it no loss can be computed`)
	says(t, "both", head+"loss_db_per_100m = [[150, 3]]\nloss_db_per_100ft = [[150, 1]]\n", "5: the loss is given per 100 m and per 100 ft")
	says(t, "one that cannot be read", head+"loss_db_per_100ft = [[150, \"3\"]]\n", `4: loss_db_per_100ft: the text "3" was read`)
	says(t, "an empty table", head+"loss_db_per_100m = []\n", "4: loss_db_per_100m: the table is empty")
	list, _ := parts(t, head+"loss_db_per_100m = [[150, 3]]\nloss_db_per_100ft = [[150, 1]]\n")
	if c := list[0].Cable; c.PerFeet || c.Loss.V[0].V != 3 {
		t.Errorf("of both %+v is kept", c.Loss.V)
	}
}

func TestJumperNeedsCableOrLoss(t *testing.T) {
	head := "[part.X]\nkind = \"jumper\"\nlength = \"1 m\"\nends = [\"N male\", \"N male\"]\n"
	says(t, "neither", head, `1: "X" has no cable: or loss_db`)
	says(t, "cable", head+"cable = \"CX-5\"\n")
	says(t, "loss", head+"loss_db = 0.4\n")
	says(t, "one end only", "[part.X]\nkind = \"jumper\"\nlength = \"1 m\"\ncable = \"C\"\nends = [\"N male\"]\n", "5: ends: a list was read, a pair is expected")
}

func TestShapesOfValues(t *testing.T) {
	mount := one(t, "[part.X]\nkind = \"mount\"\nmast_mm = 42.4\n")
	if mount.Mount.MastMM.V != [2]float64{42.4, 42.4} {
		t.Errorf("one diameter is read as %v", mount.Mount.MastMM.V)
	}
	uses := one(t, "[part.X]\nkind = \"consumable\"\nper = \"joint\"\nholds = 6\n").Consumable
	if uses.Holds.V != (catalog.Holds{Uses: 6}) {
		t.Errorf("a number of uses is read as %+v", uses.Holds.V)
	}
	says(t, "no use", "[part.X]\nkind = \"consumable\"\nper = \"joint\"\nholds = 0\n", "4: holds: 0 is outside what begins at 1 uses")
	says(t, "a span is a pair", "[part.X]\nkind = \"antenna\"\n[[part.X.range]]\nmhz = 700\ngain_dbi = 3\n", "4: mhz: the number 700 was read, a pair is expected")
	says(t, "an unknown band", "[part.X]\nkind = \"router\"\nbands = [\"B4\", \"B0\"]\n", `3: bands: "B0" is no band of 3GPP`)
	says(t, "a band as a key", "[part.X]\nkind = \"router\"\nmax_antenna_gain_dbi = { B4 = 9, X9 = 1 }\n", `3: max_antenna_gain_dbi: "X9" is no band of 3GPP`)
	says(t, "a position in a list", "[part.X]\nkind = \"antenna\"\nrated = [\"outdoor\", \"rizer\"]\n", `3: rated: "rizer" is not one of outdoor, riser, plenum, burial; did you mean riser?`)
}

func TestPartHelps(t *testing.T) {
	p := one(t, "[part.X]\nkind = \"splitter\"\n"+strings.ReplaceAll(splitterPorts, "PART", "X"))
	if got := p.PortNames(); !slices.Equal(got, []string{"in", "out1", "out2"}) {
		t.Errorf("ports are %v, want them in document order", got)
	}
	if p.Port("out2") == nil || p.Port("out2").Name != "out2" || p.Port("out3") != nil {
		t.Error("a port is not found by its name")
	}
	for pair, want := range map[[2]string]int{{"in", "out1"}: 1, {"out1", "in"}: 1, {"in", "out2"}: 2, {"out2", "in"}: 2, {"out1", "out2"}: 0, {"in", "in"}: 0, {"in", "x"}: 0} {
		if got := len(p.Between(pair[0], pair[1])); got != want {
			t.Errorf("%d rows lead from %s to %s, want %d", got, pair[0], pair[1], want)
		}
	}
	if p.Title() != "X" || one(t, "[part.X]\nkind = \"electrode\"\nname = \"rod\"\n").Title() != "rod" {
		t.Error("a part is known by its name, else by its ID")
	}
	for _, kind := range catalog.KindNames() {
		list, _ := parts(t, "[part.X]\nkind = \""+kind+"\"\n")
		want := slices.Contains([]string{"cable", "data-cable", "wire", "bond-conductor"}, kind)
		if list[0].CutStock() != want {
			t.Errorf("%s is cut stock: %v", kind, !want)
		}
	}
}

const splitterPorts = `
[part.PART.port]
in   = { connector = "N female", impedance_ohm = 50 }
out1 = { connector = "N female", impedance_ohm = 50 }
out2 = { connector = "N female", impedance_ohm = 50 }
[[part.PART.path]]
from = "in"
to = ["out1", "out2"]
loss_db = 3.3
[[part.PART.path]]
from = "out2"
to = "in"
mhz = [3000, 4000]
loss_db = 4
`

func TestAntennaRanges(t *testing.T) {
	a := one(t, `[part.X]
kind = "antenna"
[[part.X.range]]
mhz = [698, 960]
gain_dbi = 1
[[part.X.range]]
mhz = [1710, 2700]
gain_dbi = 2
ports = ["a"]
[[part.X.range]]
mhz = [2500, 2700]
gain_dbi = 3
ports = ["b"]
`).Antenna
	for _, c := range []struct {
		port string
		mhz  float64
		gain float64 // 0: no range
	}{
		{"a", 697.9, 0}, {"a", 698, 1}, {"a", 960, 1}, {"a", 960.1, 0}, {"b", 900, 1}, {"c", 900, 1},
		{"a", 1710, 2}, {"b", 1710, 0}, {"a", 2600, 2}, {"b", 2600, 3}, {"c", 2600, 0},
	} {
		r := a.RangeAt(c.port, unitMHz(c.mhz))
		if (r == nil) != (c.gain == 0) || r != nil && r.Gain.V != c.gain {
			t.Errorf("port %s at %v MHz has the range %+v, want a gain of %v", c.port, c.mhz, r, c.gain)
		}
	}
}

// Every table of a part knows where it stands.
func TestPlacesInParts(t *testing.T) {
	p := one(t, "[part.X]\nkind = \"router\"\nload = { w = 1 }\n"+portsExample+rangesExample)
	amp := one(t, "[part.X]\nkind = \"amplifier\"\n[[part.X.band]]\nband = \"B5\"\nuplink = { gain_db = 60 }\ndownlink = { gain_db = 61 }\n[[part.X.kit]]\nside = \"donor\"\n")
	split := one(t, "[part.X]\nkind = \"splitter\"\n"+portsExample+pathsExample)
	for at, want := range map[source.Place]string{
		p.At: "X", p.Ports[1].At: "p2", p.Antenna.Ranges[0].At: "[[part.X.range]]", split.Paths[1].At: "[[part.X.path]]",
		amp.Amplifier.Bands[0].At: "[[part.X.band]]", amp.Amplifier.Bands[0].Uplink.At: "uplink", amp.Amplifier.Bands[0].Downlink.At: "downlink",
		amp.Amplifier.Kits[0].At: "[[part.X.kit]]",
	} {
		if at.Text() != want {
			t.Errorf("a place shows %q, want %q", at.Text(), want)
		}
	}
}

func TestAmplifierAndRouterByBand(t *testing.T) {
	a := one(t, "[part.X]\nkind = \"amplifier\"\n[[part.X.band]]\nband = \"B5\"\n[[part.X.band]]\nband = \"B12\"\nuplink = { gain_db = 60 }\n").Amplifier
	if b := a.Band("B12"); b == nil || b.Uplink == nil || b.Uplink.GainDB.V != 60 || b.Downlink != nil || b.Uplink.MaxOut.Set {
		t.Errorf("B12 is %+v", b)
	}
	if a.Band("B13") != nil || a.Band("B5").Uplink != nil {
		t.Error("what is not given is not there")
	}
	r := one(t, "[part.X]\nkind = \"router\"\nmax_antenna_gain_dbi = { B4 = 9 }\n").Router
	if g := r.GrantGain("B4"); !g.Set || g.V != 9 {
		t.Errorf("the grant's gain in B4 is %+v", g)
	}
	if g := r.GrantGain("B5"); g.Set {
		t.Errorf("the grant's gain in B5 is %+v", g)
	}
}

// Gear that hangs outdoors says what the wind meets like an antenna does; a router
// says it once, with its own antenna or without.
func TestInWind(t *testing.T) {
	for text, want := range map[string][2]float64{
		"kind = \"antenna\"\nwind_area_m2 = 0.06\nsize_mm = 620\n":                                                  {0.06, 620},
		"kind = \"router\"\nwind_area_m2 = 0.05\nsize_mm = 300\n":                                                   {0.05, 300},
		"kind = \"router\"\nwind_area_m2 = 0.05\nsize_mm = 300\n[[part.X.range]]\nmhz = [698, 960]\ngain_dbi = 2\n": {0.05, 300},
		"kind = \"amplifier\"\nwind_area_m2 = 0.07\n":                                                               {0.07, 0},
		"kind = \"injector\"\nsize_mm = 120\n":                                                                      {0, 120},
		"kind = \"bond-point\"\n":                                                                                   {},
	} {
		area, side := one(t, "[part.X]\n"+text).InWind()
		if area.V != want[0] || side.V != want[1] || area.Set != (want[0] > 0) || side.Set != (want[1] > 0) {
			t.Errorf("%q shows the wind %v m² and %v mm, want %v", text, area.V, side.V, want)
		}
	}
}

// A use that is not one leaves open whether the port is mated: one slip, one problem.
func TestMisspelledUseAsksForNothing(t *testing.T) {
	says(t, "misspelled", "[part.X]\nkind = \"amplifier\"\n[part.X.port.a]\nuse = \"pover\"\n", `4: use: "pover" is not one of`)
}

func TestPortsAndPathsOfAPartAreBounded(t *testing.T) {
	var ports, paths strings.Builder
	for i := range 65 {
		fmt.Fprintf(&ports, "port.p%d = { use = \"power\" }\n", i)
	}
	says(t, "65 ports", "[part.X]\nkind = \"splitter\"\n"+ports.String(), "67: the part has 65 ports, more than the 64 that are read")
	for range 257 {
		paths.WriteString("[[part.X.path]]\nfrom = \"a\"\nto = \"b\"\nloss_db = 1\n")
	}
	says(t, "257 paths", "[part.X]\nkind = \"splitter\"\n"+paths.String(), "1027: the part has 257 paths, more than the 256 that are read")
	list, _ := parts(t, "[part.X]\nkind = \"splitter\"\n"+ports.String())
	if len(list) != 1 || len(list[0].Ports) != 64 {
		t.Errorf("%d ports are kept", len(list[0].Ports))
	}
}

func TestAPackageOfNoLengthServesNothing(t *testing.T) {
	const tape = "[part.X]\nkind = \"consumable\"\nper = \"metre\"\n"
	says(t, "no length", tape+"holds = \"0 m\"\n", "4: holds: a package of no length serves nothing")
	says(t, "some length", tape+"holds = \"10 m\"\n")
}
