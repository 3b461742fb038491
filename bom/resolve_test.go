package bom_test

import (
	"fmt"
	"testing"

	"driploop/bom"
)

func TestDevicesStandWhereTheyAre(t *testing.T) {
	g := whole(t, places+`
[device]
donor = { part = "YAGI", on = "mast", up = "1.3 m", aim_deg = 214 }
mast = { part = "MAST", place = "roof", on = "frame", up = "0.5 m" }
frame = { part = "MAST", place = "roof", at = [3, 4, 6] }
loose = { part = "YAGI" }
spot = { part = "YAGI", place = "roof", at = [5, 5, 5] }
plain = { part = "DOME", place = "room" }
high = { part = "YAGI", on = "loose", up = "2 m" }
inside = { part = "DOME", on = "mast", place = "room", up = "1 m" }
[device.dome]
part = "DOME"
place = "room"
copies = { d2 = [6, 5, 4], d3 = { place = "store" }, d4 = { place = "store", at = [8, 8, 8] }, d5 = {} }
[device.pair]
part = "YAGI"
on = "mast"
up = "1 m"
copies = { p2 = {}, p3 = { place = "store" } }
`)
	for id, want := range map[string]string{
		"frame": "roof {3 4 6}", "mast": "roof {3 4 6.5}", "donor": "roof {3 4 7.8}", // 6 + 0.5 + 1.3
		"loose": "nowhere", "spot": "roof {5 5 5}", "plain": "room {2 0 2}", "high": "nowhere",
		"inside": "room {2 0 2}", // a place of its own goes first
		"dome":   "room {2 0 2}", "d2": "room {6 5 4}", "d3": "store {9 9 2}", "d4": "store {8 8 8}", "d5": "room {2 0 2}",
		"pair": "roof {3 4 7.5}", "p2": "roof {3 4 7.5}", "p3": "store {9 9 2}",
	} {
		d, got := g.Device(id), "nowhere"
		if d == nil {
			t.Errorf("there is no %s", id)
			continue
		}
		if d.Place != nil {
			got = d.Place.ID
		}
		if d.Point.Set {
			got += fmt.Sprintf(" %v", d.Point.V)
		}
		if got != want {
			t.Errorf("%s is at %s, want %s", id, got, want)
		}
	}
	if d := g.Device("d3"); d.Row.ID != "dome" || d.Part.ID != "DOME" || d.At.Text() != "d3" || d.On() != "device.d3" || len(d.Nodes) != 1 {
		t.Errorf("a copy is %+v", d)
	}
	if g.Device("donor").Stands != g.Device("mast") || g.Device("mast").Stands != g.Device("frame") || g.Device("frame").Stands != nil {
		t.Error("what stands on what is not kept")
	}
	if g.Device("nobody") != nil || g.Place("roof") == nil || g.Place("nowhere") != nil {
		t.Error("what is not there is found")
	}
}

func TestWhatStandsOnItself(t *testing.T) {
	const a = `a = { part = "MAST", on = "b" }` + "\n"
	const b = `b = { part = "MAST", on = "c" }` + "\n"
	const c = `c = { part = "MAST", on = "b", place = "roof" }` + "\n"
	// a stands on the ring of b and c, and is not part of it.
	for _, text := range []string{a + b + c, c + b + a, b + a + c} {
		g := lay(t, places+"[device]\n"+text)
		if len(g.Holes) != 1 || g.Holes[0].Kind != bom.BadRef || g.Holes[0].On == "device.a" {
			t.Errorf("holes are %v", holes(g))
		}
		for id, place := range map[string]string{"c": "roof"} {
			if d := g.Device(id); d.Place == nil || d.Place.ID != place {
				t.Errorf("%s is at %v, want %s", id, d.Place, place)
			}
		}
		if g.Device("b").Stands != nil || g.Device("c").Stands != nil || g.Device("a").Stands != g.Device("b") {
			t.Error("the ring is not opened, or more than the ring")
		}
		if g.Device("b").Place != nil {
			t.Errorf("b is at %v, which depends on where the ring is opened", g.Device("b").Place)
		}
	}
	g := lay(t, "[device]\na = { part = \"MAST\", on = \"a\" }\n")
	hasHoles(t, "on itself", g, `bad reference, "a", device.a: what a stands on stands on a again; let the chain end at a place`)
}

func TestHolesOfPlacesAndDevices(t *testing.T) {
	g := lay(t, places+`
[device]
a = { part = "YAGY", place = "rooof", on = "mats" }
mast = { part = "MAST", place = "roof" }
b = { part = "CX", place = "zzzzzz" }
c = { existing = true, kind = "electrode", place = "roof" }
d = { existing = true, part = "ROD" }
`)
	hasHoles(t, "devices", g,
		`no part, "YAGY", device.a: the catalog has no part "YAGY"; did you mean YAGI?`,
		`bad reference, "rooof", device.a: the plan has no place "rooof"; did you mean roof?`,
		`wrong kind, "CX", device.b: CX is of kind cable; antenna or adapter or splitter or tap or coupler or diplexer or filter or attenuator or dc-block or bias-tee or load or arrestor or amplifier or router or supply or injector or switch or battery or data-arrestor or fuse or bond-point or electrode or mount is expected here; name a part of that kind`,
		`bad reference, "zzzzzz", device.b: the plan has no place "zzzzzz"; add it under [place], or correct the name`,
		`bad reference, "mats", device.a: the plan has no device "mats"; did you mean mast?`,
	)
	if g.Device("a").Part != nil || g.Device("b").Part != nil || g.Device("mast").Part == nil {
		t.Error("a bad part hides a good one, or is taken for one")
	}
	if g.Device("c").Kind() != "electrode" || g.Device("d").Kind() != "electrode" || g.Device("a").Kind() != "" {
		t.Error("a kind comes from the part, else from the plan")
	}
	if len(g.Holes[2].Also) != 1 || g.Holes[2].Also[0].Text() != "CX" {
		t.Error("the part of the wrong kind is not shown")
	}
}

// A place that is not there is one hole, however many copies stand in it, and none
// for a copy that stands elsewhere.
func TestPlaceOfCopies(t *testing.T) {
	g := lay(t, places+`
[device.dome]
part = "DOME"
place = "shed"
copies = { d2 = [6, 5, 4], d3 = { place = "store" }, d4 = { place = "stoer" } }
`)
	hasHoles(t, "copies", g,
		`bad reference, "shed", device.dome: the plan has no place "shed"; add it under [place], or correct the name`,
		`bad reference, "stoer", device.d4: the plan has no place "stoer"; did you mean store?`,
	)
	if d := g.Device("d3"); d.Place == nil || d.Place.ID != "store" {
		t.Errorf("d3 is at %v", d.Place)
	}
}

func TestLike(t *testing.T) {
	g := whole(t, places+`
[device]
panel = { part = "PANEL", place = "roof" }
[device.amp]
part = "AMP"
copies = { amp-2 = {} }
[cable.F2]
like = "F1"
from = "panel.b"
to = "amp-2.donor"
through = ["PAD"]
[cable.F1]
part = "CX"
length = "6 m"
from = "panel.a"
to = "amp.donor"
ends = ["N male", "N male"]
way = ["roof 2 m", "wall"]
least_bend = "70 mm"
existing = true
[cable.F3]
like = "F1"
length = "7 m"
way = ["room"]
part = "THIN"
ends = ["NM-CRIMP", "NM-CLAMP"]
`)
	f1, f2, f3 := g.Cable("F1"), g.Cable("F2"), g.Cable("F3")
	if f2.Part.ID != "CX" || f2.Length.V != 6000 || len(f2.Way) != 2 || f2.Way[0].Place.ID != "roof" || f2.Way[0].Length.V != 2000 || f2.Ends[0].Face.V.Series != "N" {
		t.Errorf("F2 is %+v", f2)
	}
	if f2.Like != f1 || f1.Like != nil {
		t.Error("which cable it is like is not kept")
	}
	if f2.Row.Existing.Set || f2.Row.LeastBend.Set || f2.Row.From.V.String() != "panel.b" || f1.Row.Through.Set {
		t.Errorf("more than part, ends, length and way is taken over: %+v", f2.Row)
	}
	if f3.Part.ID != "THIN" || f3.Length.V != 7000 || len(f3.Way) != 1 || f3.Ends[1].Fit.ID != "NM-CLAMP" {
		t.Errorf("own keys do not win: %+v", f3)
	}
	if row := g.Plan.Cables[0]; row.Part.Set || row.Length.Set || row.Ends.Set {
		t.Error("the plan is changed as it was read")
	}
	hasMates(t, "like", g, "F1.1 = panel.a", "F1.2 = amp.donor", "F2.1 = panel.b", "F2.2 [PAD f m] = amp-2.donor")
}

func TestLikeLeadsNowhere(t *testing.T) {
	g := lay(t, `
[cable]
A = { like = "B" }
B = { like = "C" }
C = { part = "CX", length = "1 m", ends = ["N male", "N male"] }
D = { like = "D" }
E = { like = "CC" }
F = { like = "Zzzzz" }
`)
	hasHoles(t, "like", g,
		`bad reference, "B", cable.A: B is itself like another cable; name the cable that has the keys`,
		`bad reference, "D", cable.D: D is itself like another cable; name the cable that has the keys`,
		`bad reference, "CC", cable.E: the plan has no cable "CC"; did you mean C?`,
		`bad reference, "Zzzzz", cable.F: the plan has no cable "Zzzzz"; correct the name`,
	)
	if g.Cable("B").Part == nil || g.Cable("A").Part != nil {
		t.Error("a chain is followed, or a single step is not")
	}
}

func TestNamesAreUniqueWithoutRegardToCase(t *testing.T) {
	g := lay(t, `
[device.amp]
part = "AMP"
copies = { Dome = {}, x2 = {} }
[device.dome]
part = "DOME"
[cable.AMP]
part = "CX"
length = "1 m"
[data.X2]
part = "CAT"
[wire.p1]
part = "W"
[data.P1]
part = "CAT"
`)
	hasHoles(t, "names", g,
		`bad reference, dome, device.dome: the name "dome" stands already in this plan; give it a name of its own`,
		`bad reference, AMP, cable.AMP: the name "AMP" stands already in this plan; give it a name of its own`,
		`bad reference, X2, data.X2: the name "X2" stands already in this plan; give it a name of its own`,
		`bad reference, p1, wire.p1: the name "p1" stands already in this plan; give it a name of its own`,
	)
	if also := g.Holes[0].Also; len(also) != 1 || also[0].Text() != "Dome" {
		t.Errorf("the first of the two is not shown: %v", also)
	}
}

func TestReferencesOfOtherTables(t *testing.T) {
	g := lay(t, places+`
[operator.north]
consent = { state = "granted" }
[device]
amp = { part = "AMP", place = "room" }
dome = { part = "DOME", place = "room" }
[cable]
L1 = { part = "CX", length = "3 m", from = "amp.server", to = "dome", ends = ["N male", "N male"] }
[wire.P1]
part = "W"
[data.E1]
part = "CAT"
[bond.G1]
from = "amp"
to = "dome"
direct = true
[[between]]
a = "roof"
b = "rom"
loss_db = 3
[[signal]]
operator = "south"
band = "B12"
rsrp_dbm = -100
[[area]]
name = "counter"
served_by = ["dome", "domme"]
operators = ["north", "south", "nroth"]
[[reading]]
what = "rsrp"
value_dbm = -90
from = "amp.server"
to = "amp.servr"
[[reading]]
what = "return-loss"
value_db = 18
from = "L1"
to = "L1.2"
[[reading]]
what = "length"
length = "3 m"
from = "L1.3"
to = "P1"
[[reading]]
what = "ground-ohm"
value_ohm = 5
from = "G1"
to = "G2"
[[reading]]
what = "length"
length = "3 m"
from = "E1"
[[extra]]
part = "TAPEE"
qty = 1
[[reserve]]
part = "NMM"
cable = "L1"
until = 2026-12-05
[[reserve]]
tag = "R-1"
cable = "L9"
until = 2026-12-05
`)
	hasHoles(t, "references", g,
		`bad reference, "rom", site: the plan has no place "rom"; did you mean room?`,
		`bad reference, "domme", area.counter: the plan has no device "domme"; did you mean dome?`,
		`bad reference, "nroth", area.counter: the plan has no operator "nroth"; did you mean north?`,
		`no port, "amp.servr", reading.1: amp (part AMP) has no port "servr"; did you mean amp.server?`,
		`no port, "L1.3", reading.3: "L1.3" names no end of cable L1; write L1.1 or L1.2`,
		`bad reference, "G2", reading.4: the plan has nothing named "G2"; correct the name`,
		`no part, "TAPEE", job: the catalog has no part "TAPEE"; did you mean TAPE?`,
		`no part, "NMM", job: the catalog has no part "NMM"; did you mean NM?`,
		`bad reference, "L9", job: the plan has no line "L9"; correct the name`,
	)
}

// A part whose kind the catalog does not say has a finding there, and none here.
func TestPartWithoutKindIsSilent(t *testing.T) {
	p, _ := readPlan(t, "[device.a]\npart = \"ODD\"\n[cable.C]\npart = \"ODD\"\nto = \"a\"\n")
	g := bom.Resolve(p, ownCatalog(t, "[part.ODD]\nname = \"odd\"\n"))
	hasHoles(t, "a part without kind", g)
	if g.Device("a").Part != nil {
		t.Error("it is taken for a device")
	}
}
