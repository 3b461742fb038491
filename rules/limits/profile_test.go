package limits

import (
	"slices"
	"strings"
	"testing"

	"driploop/catalog/unit"
)

func TestPermissionSaysWhichMegahertzAreLeftOut(t *testing.T) {
	p := Builtin().Profile("us-fixed-wideband")
	got := p.Permits("B66")
	if got.Whole() || !slices.Equal(got.Uplink, []unit.Span{{Lo: 1755, Hi: 1780}}) || !slices.Equal(got.Downlink, []unit.Span{{Lo: 2155, Hi: 2200}}) {
		t.Errorf("B66 leaves out %v and %v", got.Uplink, got.Downlink)
	}
	if p.Permits("B999").Known || p.Permits("B999").Whole() {
		t.Error("a band that nobody knows is permitted")
	}
	if Builtin().Profile("eu-permission").Permits("B3").Whole() {
		t.Error("a profile without a list permits")
	}
	// Band 4's uplink lies in the British 1800 MHz uplink, its downlink in another pair.
	if Builtin().Profile("uk-indoor-multi").Permits("B4").Whole() {
		t.Error("an uplink of one pair and a downlink of another are no band that is permitted")
	}
}

func TestBandsOfAProfile(t *testing.T) {
	var got []string
	for _, b := range Builtin().Profile("us-mobile-wideband").Bands() {
		got = append(got, b.Name)
	}
	for _, want := range []string{"B2", "B4", "B5", "B12", "B13", "B17", "B25"} {
		if !slices.Contains(got, want) {
			t.Errorf("%s is missing from %v", want, got)
		}
	}
	for _, not := range []string{"B66", "B71", "B14", "B26", "B30", "B41"} {
		if slices.Contains(got, not) {
			t.Errorf("%s is among the bands of consumer boosters", not)
		}
	}
}

func TestDutiesOfTheClasses(t *testing.T) {
	for _, c := range []struct {
		id                           string
		kit, personal, setting, mobi string
		separation                   unit.MM
	}{
		{"us-fixed-wideband", "20.21(a)(3)", "20.21(a)", "building", "fixed", 200},
		{"us-mobile-wideband", "20.21(a)(3)", "20.21(a)", "vehicle", "mobile", 200},
		{"us-fixed-provider", "20.21(a)(3)", "", "building", "fixed", 200},
		{"us-mobile-provider", "20.21(a)(3)", "", "vehicle", "mobile", 200},
		{"us-industrial", "", "", "", "", 200},
		{"us-router", "", "", "", "", 200},
	} {
		p := Builtin().Profile(c.id)
		if !names(p.Kit, c.kit) || !names(p.Personal, c.personal) {
			t.Errorf("%s: kit %v and personal use %v, expected %q and %q", c.id, p.Kit, p.Personal, c.kit, c.personal)
		}
		if p.Setting.V != c.setting || p.Mobility.V != c.mobi || p.Separation.Least.V != c.separation {
			t.Errorf("%s: setting %q, mobility %q, separation %v", c.id, p.Setting.V, p.Mobility.V, p.Separation.Least.V)
		}
	}
}

// names reports whether a duty cites a clause, or is absent where none is named.
func names(d *Duty, clause string) bool {
	if d == nil {
		return clause == ""
	}
	return clause != "" && strings.Contains(d.Clause.V, clause)
}

func TestEveryRowSaysWhereItComesFrom(t *testing.T) {
	each(t, func(p *Profile, r *Row) {
		if r.Clause.V == "" || r.Proof.V == "" || r.Edition.V == "" {
			t.Errorf("%s: row %s lacks clause, proof or edition", p.ID, r.Formula())
		}
	})
	for _, id := range Builtin().ProfileIDs() {
		p := Builtin().Profile(id)
		for _, d := range p.duties() {
			if d.Edition.V == "" {
				t.Errorf("%s: %s has no edition", id, d.Clause.V)
			}
		}
		if !p.Checked.Set || len(p.Cautions) == 0 {
			t.Errorf("%s has no date of checking or no caution", id)
		}
	}
}

func TestUnverifiedProfilesSaySo(t *testing.T) {
	for _, r := range Builtin().Profile("ca-fixed-wideband").Limits {
		if r.Proof.V != "memory" {
			t.Errorf("a Canadian row is marked %s, though its text was not read", r.Proof.V)
		}
	}
}

// The Canadian rows are taken over from the American ones, so they must not drift.
func TestCanadianRowsEqualThoseTheyWereTakenFrom(t *testing.T) {
	us, ca := Builtin().Profile("us-fixed-wideband"), Builtin().Profile("ca-fixed-wideband")
	for _, r := range ca.Limits {
		same := func(u *Row) bool { return u.Formula() == r.Formula() && u.Where() == r.Where() }
		if !slices.ContainsFunc(us.Limits, same) {
			t.Errorf("no American row reads %s %s", r.Where(), r.Formula())
		}
	}
}

func TestLevelHoldsToItsLastEndAndNotBeyond(t *testing.T) {
	l := Builtin().Profile("us-router").Level("general")
	for _, c := range []struct {
		f     unit.MHz
		known bool
		want  float64
	}{{29.999, false, 0}, {30, true, 2}, {299.999, true, 2}, {300, true, 2}, {750, true, 5}, {1500, true, 10}, {100000, true, 10}, {100001, false, 0}} {
		got, known := l.DensityAt(c.f)
		if known != c.known || !near(got, c.want) {
			t.Errorf("at %v the level is %v (%v), expected %v (%v)", c.f, got, known, c.want, c.known)
		}
	}
}

// The printed factors of the local level leave small steps, which show that a
// boundary belongs to the stretch above it: 0.058·400^0.86 = 10.028, below it 10.
func TestBoundaryOfStretchesBelongsToTheUpperOne(t *testing.T) {
	l := Builtin().Profile("uk-indoor-multi").Level("local")
	if got, _ := l.DensityAt(400); !near(got, 10.028) {
		t.Errorf("at 400 MHz the level is %v, expected 10.028", got)
	}
	if got, _ := l.DensityAt(399.999); got != 10 {
		t.Errorf("below 400 MHz the level is %v, expected 10", got)
	}
}

func TestRadioRowsDoNotOverlap(t *testing.T) {
	rows := Builtin().Profile("us-router").Radio
	for i, r := range rows {
		for _, s := range rows[:i] {
			if !r.Span().Overlap(s.Span()).Empty() {
				t.Errorf("%s and %s both hold at %v", r.Clause.V, s.Clause.V, r.Span().Overlap(s.Span()))
			}
		}
	}
}

func TestCodesAnswerTheSameQuestions(t *testing.T) {
	// What the grounding and building rules ask of whichever code a plan names.
	for _, id := range []string{"mast-bond", "discharge-unit", "discharge-place", "bond-conductor", "bond-straight", "electrode-tie",
		"electrode-rod", "electrode-clamp", "data-arrestor", "reversed", "spark", "mains", "fall-zone", "wind-pressure", "wind-drag"} {
		for _, code := range Builtin().CodeIDs() {
			if Builtin().Code(code).Row(id) == nil {
				t.Errorf("%s has no row %s", code, id)
			}
		}
	}
	for _, id := range []string{"exempt-below-edge", "exempt-off-wall"} {
		if r := Builtin().Code("iec-60728-11").Row(id); r == nil || Builtin().Code("us-nec-2020").Row(id) != nil {
			t.Errorf("%s belongs to the IEC code alone", id)
		}
	}
}

func TestCodeRowsAreWhole(t *testing.T) {
	for _, id := range Builtin().CodeIDs() {
		for _, r := range Builtin().Code(id).Rows {
			if r.Citation() == "" || (r.Kind.V != "practice" && r.Edition.V == "") {
				t.Errorf("%s %s: no citation or edition", id, r.ID.V)
			}
			for i := 1; i < len(r.Steps); i++ {
				if below := r.Steps[i-1].To; !below.Set || r.Steps[i].To.Set && r.Steps[i].To.V <= below.V {
					t.Errorf("%s %s: its steps do not rise", id, r.ID.V)
				}
			}
		}
	}
	r := Builtin().Code("us-nec-2020").Row("fire-plenum")
	if ok, known := r.Permits("CATVP"); !ok || !known {
		t.Error("CATVP is refused in a plenum")
	}
	if ok, known := r.Permits("CATVR"); ok || !known {
		t.Error("CATVR is allowed in a plenum")
	}
	if _, known := Builtin().Code("us-nec-2020").Row("mast-bond").Permits("CATVP"); known {
		t.Error("a row without a list decides about a jacket")
	}
	if v, ok := Builtin().Code("us-nec-2020").Row("spark").Constant("factor"); !ok || v != 1.5 {
		t.Errorf("spark factor %v", v)
	}
	if _, ok := Builtin().Code("us-nec-2020").Row("spark").Constant("facto"); ok {
		t.Error("a constant that is not there was found")
	}
}
