package bom_test

import (
	"fmt"
	"slices"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// taken writes a takeoff, a line for each part: a count, or the length with the
// length as installed and the pieces.
func taken(q *bom.Takeoff) []string {
	var out []string
	for _, r := range q.Rows {
		s := r.Part.ID
		if r.Each != 0 {
			s += fmt.Sprintf(" %d", r.Each)
		}
		if r.Uses != 0 {
			s += fmt.Sprintf(" for %g uses", r.Uses)
		}
		if r.Length != 0 {
			s += fmt.Sprintf(" %v of %v:", r.Length, r.Bare)
		}
		for _, p := range r.Pieces {
			s += fmt.Sprintf(" %s %v of %v", p.Line, p.Length, p.Bare)
		}
		out = append(out, s)
	}
	return out
}

func gaps(q *bom.Takeoff) []string {
	var out []string
	for _, g := range q.Gaps {
		out = append(out, fmt.Sprintf("%s, %s: %s", g.On, g.At.Text(), g.Says))
	}
	return out
}

func same(t *testing.T, name string, got, want []string) {
	t.Helper()
	if !slices.Equal(got, want) {
		t.Errorf("%s:\n  %s\nwant\n  %s", name, strings.Join(got, "\n  "), strings.Join(want, "\n  "))
	}
}

const fullJob = places + `
[device]
rod = { existing = true, part = "ROD", place = "wall" }
psu = { part = "PSU", place = "room", supplied_by = "client" }
yagi = { part = "YAGI", on = "mast" }
mast = { part = "MAST", place = "roof" }
arrest = { part = "ARREST", place = "wall" }
amp = { part = "AMP", place = "room" }
split = { part = "SPLIT-2", place = "room" }
dome = { part = "DOME", place = "room", copies = { dome-2 = {}, dome-3 = {} } }
bar = { part = "BAR", place = "wall" }
radio = { part = "RADIO", place = "roof", existing = true }
spare = { existing = true, kind = "amplifier" }
[cable]
C1 = { part = "CX", length = "18.5 m", from = "yagi", to = "arrest.line", ends = ["N male", "NM"], way = ["roof", "wall"] }
C2 = { part = "CX", length = "4.8 m", from = "arrest.gear", to = "amp.donor", ends = ["NM", "NF"], through = ["PAD"] }
J1 = { part = "J-NN", from = "amp.server", to = "split.in", through = ["AD-N-S", "PAD"] }
L1 = { part = "THIN", length = "9 m", from = "split.out1", to = "dome", ends = ["NM-CRIMP", "NM-CLAMP"] }
L2 = { like = "L1", from = "split.out2", to = "dome-2" }
X = { part = "CX", length = "50 m", existing = true, through = ["PAD"] }
S = { part = "CX", length = "60 m", supplied_by = "client", through = ["PAD"], ends = ["NM", "NM"] }
[data]
E1 = { part = "CAT", length = "22 m" }
E2 = { part = "CAT", length = "7 m", existing = true }
E3 = { part = "CAT", length = "8 m", supplied_by = "client" }
[wire]
P1 = { part = "W", length = "4 m", from = "psu", to = "amp", fuse = "FUSE" }
P2 = { part = "W", length = "5 m", existing = true, fuse = "FUSE" }
P3 = { part = "W", length = "6 m", supplied_by = "client", fuse = "FUSE" }
[bond]
G1 = { from = "arrest", to = "bar", part = "BC", length = "2.1 m" }
G2 = { from = "mast", to = "yagi", direct = true }
G3 = { from = "bar", to = "rod", existing = true, part = "BC", length = "5 m" }
G4 = { from = "bar", to = "amp", part = "BC", length = "3 m", supplied_by = "electrician" }
[[extra]]
part = "TAPE"
qty = 2
[[extra]]
part = "CX"
qty = "12 m"
[[extra]]
part = "FUSE"
qty = 3
`

func TestTakeoff(t *testing.T) {
	q := lay(t, fullJob).Takeoff(&bom.House{})
	same(t, "taken", taken(q), []string{
		"AD-N-S 1",
		"AMP 1",
		"ARREST 1",
		"BAR 1",
		"BC 2.4 m of 2.1 m: G1 2.4 m of 2.1 m",
		"CAT 22.3 m of 22 m: E1 22.3 m of 22 m",
		"CX 35.9 m of 35.3 m: C1 18.8 m of 18.5 m C2 5.1 m of 4.8 m extra 12 m of 12 m", // 18.5 + 0.3 + 4.8 + 0.3 + 12
		"DOME 3",
		"FUSE 4", // one in P1 and three extra
		"J-NN 1",
		"MAST 1",
		"NF 1",
		"NM 3",
		"NM-CLAMP 2",
		"NM-CRIMP 2",
		"PAD 2",
		"SPLIT-2 1",
		"TAPE 2",
		"THIN 18.6 m of 18 m: L1 9.3 m of 9 m L2 9.3 m of 9 m",
		"W 4.3 m of 4 m: P1 4.3 m of 4 m",
		"YAGI 1",
	})
	same(t, "gaps", gaps(q), nil)
	if r := q.Row("CX"); r == nil || r.At.Text() != "C1" || r.Pieces[1].At.Text() != "C2" || r.Pieces[2].At.Text() != "[[extra]]" {
		t.Errorf("the row of CX is %+v", r)
	}
	if q.Row("nothing") != nil {
		t.Error("a row is found that is not there")
	}
}

func TestCutAllowanceOfTheHouse(t *testing.T) {
	house := &bom.House{CutAllowance: source.Val[unit.MM]{V: 500, Set: true}}
	q := lay(t, fullJob).Takeoff(house)
	if got := q.Row("THIN"); got.Length != 19000 || got.Bare != 18000 {
		t.Errorf("two pieces of 9 m take %v of %v, want 19 m of 18 m", got.Length, got.Bare)
	}
	house.CutAllowance.V = 0
	if got := lay(t, fullJob).Takeoff(house).Row("THIN"); got.Length != 18000 {
		t.Errorf("without allowance two pieces of 9 m take %v", got.Length)
	}
}

// What the plan implies and nobody can count is a gap, once, and never nothing.
func TestTakeoffGaps(t *testing.T) {
	q := lay(t, `
[device]
a = { part = "NIX" }
b = { part = "CX" }
yagi = { part = "YAGI" }
[cable]
C1 = { part = "NIX", length = "3 m", through = ["PAD"] }
C2 = { part = "CX", ends = ["NM", "NM"] }
C3 = { part = "THIN", length = "3 m", ends = ["N male", "NM-CRIMP"] }
C4 = { part = "CX", length = "3 m", from = "yagi" }
C5 = { part = "J-NN", to = "yagi", through = ["NIX", "CX", "PAD"] }
C6 = { like = "C7" }
[data]
E1 = { part = "NIX", length = "3 m" }
E2 = { part = "CAT" }
[wire]
P1 = { part = "W", length = "1 m", fuse = "NIX" }
P2 = { part = "W", length = "1 m", fuse = "W" }
[bond]
G1 = { from = "yagi", to = "a", part = "BC" }
G2 = { from = "yagi", to = "a", existing = true }
[[extra]]
part = "NIX"
qty = 1
[[extra]]
part = "CX"
qty = 3
[[extra]]
part = "PAD"
qty = "3 m"
`).Takeoff(&bom.House{})
	same(t, "gaps", gaps(q), []string{
		"device.a, a: its part is not known",
		"device.b, b: its part is not known",
		"cable.C1, C1: its part is not known",
		"cable.C2, C2: its length is not given",
		`cable.C3, "N male": end 1 can be made with several connector parts; none is counted`,
		"cable.C4, C4: no connector part is known for end 2",
		`cable.C5, "NIX": the part "NIX" that it passes through is not known`,
		`cable.C5, "CX": the part "CX" that it passes through is not known`,
		"cable.C6, C6: its part is not known",
		"data.E1, E1: its part is not known",
		"data.E2, E2: its length is not given",
		`wire.P1, "NIX": its fuse "NIX" is not known`,
		`wire.P2, "W": its fuse "W" is not known`,
		"bond.G1, G1: its length is not given",
		`job, [[extra]]: the extra part "NIX" is not known`,
		"job, [[extra]]: the extra CX is measured by length, its qty is not",
		"job, [[extra]]: the extra PAD is counted, its qty is not",
	})
	same(t, "taken", taken(q), []string{
		"CX 3.3 m of 3 m: C4 3.3 m of 3 m",
		"J-NN 1",
		"NM 3", // both of C2, though its length is missing, and one of C4
		"NM-CRIMP 1",
		"PAD 2",
		"THIN 3.3 m of 3 m: C3 3.3 m of 3 m",
		"W 2.6 m of 2 m: P1 1.3 m of 1 m P2 1.3 m of 1 m",
		"YAGI 1",
	})
}

func sealing(part string) *bom.House {
	return &bom.House{Sealing: source.Val[string]{V: part, Set: true}}
}

func TestConsumables(t *testing.T) {
	plan := cx("C1", "yagi", "arrest.line", nn+`, way = ["roof", "wall"]`) + cx("C2", "arrest.gear", "amp.donor", nn) +
		`cable.F1 = { part = "J-NS", from = "panel.a", to = "radio.main" }
cable.F2 = { part = "CX", length = "20.5 m", from = "panel.b", to = "radio.div", ends = ["NM", "NM"], through = ["PAD", "AD-N-S"] }
cable.X1 = { part = "CX", length = "9 m", from = "yagi-2", to = "yagi-3", ends = ["NM", "NM"], existing = true }
cable.X2 = { part = "CX", length = "9 m", from = "amp.server", to = "yagi-4", ends = ["NM", "NM"], existing = true }
cable.B1 = { part = "CX", length = "2 m", to = "B2.1", ends = ["NM", "NM"], way = ["room", "roof"] }
cable.B2 = { part = "CX", length = "2 m", to = "dome", ends = ["NF", "NM"], way = ["roof"] }
joint = [{ a = "whip", b = "split.in" }]
` + "data.E1 = { part = \"CAT\", from = \"radio.poe\", way = [\"wall\", \"room\"] }\n" +
		"data.E2 = { part = \"CAT\", from = \"radio.lan\", to = \"inj\", existing = true }\n" +
		"data.E3 = { part = \"CAT\", from = \"radio-2.poe\", way = [\"roof\", \"wall\"] }\n" +
		"data.E4 = { part = \"CAT\", from = \"inj-2\", way = [\"wall\", \"room\"] }\n" + places + `
[device]
yagi = { part = "YAGI", place = "roof" }
yagi-2 = { part = "YAGI", place = "roof", existing = true }
yagi-3 = { part = "YAGI", place = "roof", existing = true }
yagi-4 = { part = "YAGI", place = "roof", existing = true }
panel = { part = "PANEL", place = "roof" }
whip = { part = "WHIP", place = "roof" }
split = { part = "SPLIT-2", place = "roof" }
radio = { part = "RADIO", place = "roof", copies = { radio-2 = {} } }
inj = { part = "INJ", place = "room", copies = { inj-2 = {} } }
arrest = { part = "ARREST", place = "wall" }
amp = { part = "AMP", place = "room" }
dome = { part = "DOME", place = "room" }
`
	g := whole(t, plan)
	// Outdoors: C1 at the yagi; F1 at both ends; F2 at the panel, and at the radio
	// through two adapters three pairs; the whip on the splitter; B1 on B2. Not the
	// pairs at the entry and in the room, nor X1, which is there already.
	if got := g.OutdoorJoints(); got != 1+2+1+3+1+1 {
		t.Errorf("%d joints outdoors, want 9", got)
	}
	// C1 and E1 come in, B1 goes out and B2 comes back in; E2 and X2 were there
	// before, E3 stays outdoors up to the entry, and E4 begins there.
	if got := g.Entries(); got != 4 {
		t.Errorf("%d entries, want 4", got)
	}
	for part, want := range map[string]string{
		"TAPE": "TAPE 2 for 9 uses",    // 6 a roll
		"CLIP": "CLIP 3 for 28.5 uses", // C1, C2, F1, F2, B1, B2: 1 + 1 + 2 + 20.5 + 2 + 2 metres, 10 a box
		"BUSH": "BUSH 4 for 4 uses",
		"NIX":  "",
		"AMP":  "AMP 1",
	} {
		got := ""
		for _, row := range taken(g.Takeoff(sealing(part))) {
			if strings.HasPrefix(row, part+" ") {
				got = row
			}
		}
		if got != want {
			t.Errorf("the house seals with %s: %q, want %q", part, got, want)
		}
	}
	// What the plan lists as an extra was counted by hand.
	if got := whole(t, plan+"[[extra]]\npart = \"TAPE\"\nqty = 1\n").Takeoff(sealing("TAPE")).Row("TAPE"); got.Each != 1 || got.Uses != 0 {
		t.Errorf("beside an extra %+v is taken", got)
	}
	if got := whole(t, "device.amp = { part = \"AMP\" }\n").Takeoff(sealing("TAPE")).Row("TAPE"); got != nil {
		t.Errorf("without a joint %+v is taken", got)
	}
}

func TestPackages(t *testing.T) {
	holds := func(text string) string {
		return "[part.X]\nkind = \"consumable\"\nper = \"joint\"\n" + text
	}
	for _, c := range []struct {
		holds string
		uses  float64
		want  int
	}{
		{"holds = 6\n", 5.5, 1}, {"holds = 6\n", 6, 1}, {"holds = 6\n", 6.001, 2}, {"holds = 6\n", 12, 2}, {"holds = 6\n", 13, 3},
		{"holds = \"10 m\"\n", 10, 1}, {"holds = \"10 m\"\n", 10.001, 2}, {"holds = \"10 m\"\n", 28.5, 3},
		{"holds = \"300 mm\"\n", 0.9, 3}, // three, though 0.9/0.3 is a little more in binary
		{"", 4, 4}, {"", 3.2, 4},
		{"holds = 2.5\n", 5, 2},
		{"holds = \"0 m\"\n", 4, 4}, // a package that holds nothing is read as one use
		{"holds = 6\n", 0, 0},
	} {
		p := ownCatalog(t, holds(c.holds)).Look("X")
		if got := bom.Packages(p, c.uses); got != c.want {
			t.Errorf("%q, %v uses: %d packages, want %d", c.holds, c.uses, got, c.want)
		}
	}
	if got := bom.Packages(shopCatalog(t).Look("AMP"), 3); got != 3 {
		t.Errorf("of what is no consumable %d pieces serve three uses", got)
	}
}

func TestTotals(t *testing.T) {
	job := func(joints int, extra string) *bom.Takeoff {
		text := places + "device.s0 = { part = \"SPLIT-2\", place = \"roof\" }\n"
		for i := range joints {
			text += fmt.Sprintf("device.y%d = { part = \"YAGI\", place = \"roof\" }\ncable.c%d = { part = \"J-NN\", from = \"y%d\" }\n", i, i, i)
		}
		return whole(t, text+extra).Takeoff(sealing("TAPE"))
	}
	totals := bom.Totals([]bom.PlanTakeoff{
		{Job: "a", Takeoff: job(2, "cable.L = { part = \"CX\", length = \"3 m\", ends = [\"NM\", \"NM\"] }\n")},
		{Job: "b", Takeoff: job(3, "cable.L = { part = \"CX\", length = \"4 m\", ends = [\"NM\", \"NF\"] }\n")},
		{Job: "c", Takeoff: job(0, "[[extra]]\npart = \"TAPE\"\nqty = 5\n")},
	})
	var got []string
	for _, x := range totals {
		s := x.Part.ID
		if x.Each > 0 {
			s += fmt.Sprintf(" %d", x.Each)
		}
		if x.Length > 0 {
			s += fmt.Sprintf(" %v of %v", x.Length, x.Bare)
		}
		for _, j := range x.Jobs {
			s += fmt.Sprintf("; %s %d %v %d", j.Job, j.Each, j.Length, len(j.Pieces))
		}
		got = append(got, s)
	}
	same(t, "totals", got, []string{
		"CX 7.6 m of 7 m; a 0 3.3 m 1; b 0 4.3 m 1",
		"J-NN 5; a 2 0 m 0; b 3 0 m 0",
		"NF 1; b 1 0 m 0",
		"NM 3; a 2 0 m 0; b 1 0 m 0",
		"SPLIT-2 3; a 1 0 m 0; b 1 0 m 0; c 1 0 m 0",
		"TAPE 6; a 1 0 m 0; b 1 0 m 0; c 5 0 m 0", // 2 + 3 joints share a roll of 6, and five by hand
		"YAGI 5; a 2 0 m 0; b 3 0 m 0",
	})
	if got := bom.Totals(nil); len(got) != 0 {
		t.Errorf("the total of nothing is %v", got)
	}
}

func TestHouseKeys(t *testing.T) {
	f, _ := source.NewFile("driploop.toml", []byte(`
cut_allowance = "0.2 m"
usable_remnant = "10 ft"
buy_ahead_days = 31
sealing = "TAPE"
claim_days = 29
ready_days = 2
slip_days = 6
count_days = 61
reel_doubt = "40 cm"
`))
	d, problems := source.Parse(f)
	var h bom.House
	if problems = append(problems, source.Read(d, h.Keys)...); len(problems) > 0 {
		t.Fatal(problems[0].Says)
	}
	got := fmt.Sprint(h.CutAllowance.V, h.UsableRemnant.V, h.BuyAheadDays.V, h.Sealing.V, h.ClaimDays.V, h.ReadyDays.V, h.SlipDays.V, h.CountDays.V, h.ReelDoubt.V)
	if want := fmt.Sprint(unit.MM(200), unit.MM(3048), 31, "TAPE", 29, 2, 6, 61, unit.MM(400)); got != want {
		t.Errorf("the house is read as %s, want %s", got, want)
	}
}

// An extra that cannot be read is not counted, and that is said.
func TestTakeoffUnreadExtra(t *testing.T) {
	f, _ := source.NewFile("plans/case.toml", []byte("extra = [{ part = \"GEN-PS-12-5\", qty = 99999999999 }, { part = \"GEN-PS-12-5\" }, { qty = 2 }, { part = \"GEN-PS-12-5\", qty = 2 }]\n"))
	d, _ := source.Parse(f)
	p, _ := bom.ReadPlan(d)
	q := bom.Resolve(p, catalog.New(nil)).Takeoff(&bom.House{})
	if len(q.Gaps) != 3 || len(q.Rows) != 1 || q.Rows[0].Each != 2 {
		t.Errorf("gaps %v, rows %v; want three gaps and two supplies", q.Gaps, q.Rows)
	}
}
