package limits

import (
	"fmt"
	"slices"
	"strings"
	"sync"
	"testing"

	"driploop/catalog/source"
)

func TestEveryEmbeddedFileHoldsWhatItsNameSays(t *testing.T) {
	s := Builtin()
	want := []string{"au-permission", "ca-fixed-wideband", "eu-permission", "uk-indoor-multi", "us-fixed-provider",
		"us-fixed-wideband", "us-industrial", "us-mobile-provider", "us-mobile-wideband", "us-router"}
	if got := s.ProfileIDs(); !slices.Equal(got, want) {
		t.Errorf("profiles: %v, expected %v", got, want)
	}
	if got := s.CodeIDs(); !slices.Equal(got, []string{"iec-60728-11", "us-nec-2020"}) {
		t.Errorf("codes: %v", got)
	}
	for _, id := range s.ProfileIDs() {
		if p := s.Profile(id); p.ID != id || !p.Embedded {
			t.Errorf("the file of %s holds %s", id, p.ID)
		}
		for _, name := range s.Profile(id).With.V {
			if s.Profile(name.V) == nil {
				t.Errorf("%s leans on %s, which is not there", id, name.V)
			}
		}
	}
	for _, id := range s.CodeIDs() {
		if c := s.Code(id); c.ID != id || !c.Embedded {
			t.Errorf("the file of %s holds %s", id, c.ID)
		}
	}
	if s.Profile("us-fixed-wide") != nil || s.Code("us-nec") != nil {
		t.Error("a name that nobody defines was found")
	}
	if len(s.Overrides()) != 0 {
		t.Errorf("overrides without a workspace: %v", s.Overrides())
	}
}

// doc parses a file of a workspace.
func doc(t *testing.T, name, text string) *source.Doc {
	t.Helper()
	d, problems := source.Parse(&source.File{Path: name, Src: []byte(text)})
	for _, p := range problems {
		t.Fatalf("%s does not parse: %s", name, p.Says)
	}
	return d
}

// house is a small profile of a firm.
func house(id, more string) string {
	return fmt.Sprintf("[profile.%[1]s]\ntitle = \"t\"\ninstrument = \"i\"\nedition = \"e\"\n%[2]s\n", id, strings.ReplaceAll(more, "ID", id))
}

const oneRow = "[[profile.ID.limit]]\nkind = \"gain\"\nc0 = 40\nclause = \"house\"\nproof = \"common practice\"\n"

func TestWorkspaceGoesFirstAndTheOverrideIsNamed(t *testing.T) {
	s, problems := Load(doc(t, "profiles/a.toml", house("us-fixed-wideband", oneRow)), doc(t, "profiles/b.toml", house("house-rule", oneRow)),
		doc(t, "profiles/c.toml", "[code.us-nec-2020]\ntitle = \"t\"\ninstrument = \"i\"\nedition = \"e\"\n"))
	if len(problems) > 0 {
		t.Fatalf("problems: %+v", problems)
	}
	p := s.Profile("us-fixed-wideband")
	if a := p.Assess(amp("gain", "downlink", "B5"), For("B5")); a.Value != 40 || p.Embedded {
		t.Errorf("the workspace's row gives 40, got %v", a.Value)
	}
	if got := s.Overrides(); !slices.Equal(got, []string{"code us-nec-2020", "profile us-fixed-wideband"}) {
		t.Errorf("overrides: %v", got)
	}
	if s.Profile("house-rule") == nil || s.Profile("us-router") == nil || s.Code("iec-60728-11") == nil {
		t.Error("the other profiles and codes are no longer found")
	}
	if !slices.Contains(s.ProfileIDs(), "house-rule") {
		t.Error("a profile of the workspace is not listed")
	}
	if a := Builtin().Profile("us-fixed-wideband").Assess(amp("gain", "downlink", "B5"), For("B5")); !near(a.Value, 64.95) {
		t.Errorf("the embedded profile changed: %v", a.Value)
	}
}

func TestOverriddenBaseReachesThoseThatLeanOnIt(t *testing.T) {
	row := "[[profile.ID.radio]]\nkind = \"eirp\"\nf_from = 1710\nf_below = 1780\nc0 = 20\nclause = \"house\"\nproof = \"common practice\"\n"
	s, problems := Load(doc(t, "profiles/a.toml", house("us-router", row)))
	if len(problems) > 0 {
		t.Fatalf("problems: %+v", problems)
	}
	q := Query{Kind: "eirp", Class: Radio, Band: "B4"}
	if a := s.Profile("us-fixed-wideband").Assess(q, For("B4")); a.Value != 20 {
		t.Errorf("the radio limit is %v, expected the workspace's 20", a.Value)
	}
	if a := Builtin().Profile("us-fixed-wideband").Assess(q, For("B4")); a.Value != 30 {
		t.Errorf("without the workspace it is %v, expected 30", a.Value)
	}
}

func TestWithBorrowsRowsAndOwnLevelsGoFirst(t *testing.T) {
	own := "with = [\"us-router\"]\n[profile.ID.exposure.general]\naverage_min = 6\nsegment = [{ mhz = [30, 300000], a = 1 }]\nclause = \"house\"\nproof = \"common practice\"\n"
	s, problems := Load(doc(t, "profiles/a.toml", house("strict", own)))
	if len(problems) > 0 {
		t.Fatalf("problems: %+v", problems)
	}
	p := s.Profile("strict")
	if v, _ := p.Level("general").DensityAt(836.5); v != 1 {
		t.Errorf("general level %v, expected the profile's own 1", v)
	}
	if p.Level("occupational") == nil || len(p.Radio) == 0 || p.Separation == nil || len(p.Heights) == 0 {
		t.Error("levels, radio rows, heights and separation of us-router are missing")
	}
	if len(p.Papers)+len(p.Limits) != 0 {
		t.Error("papers and amplifier rows are not borrowed")
	}
}

func TestBadProfilesAreRefusedWithAPlace(t *testing.T) {
	for _, c := range []struct{ name, text, says string }{
		{"no coefficient", house("a", "[[profile.ID.limit]]\nkind = \"gain\"\nclause = \"c\"\nproof = \"read\"\n"), "c0"},
		{"no clause", house("a", "[[profile.ID.limit]]\nkind = \"gain\"\nc0 = 1\nproof = \"read\"\n"), "clause"},
		{"unknown kind", house("a", "[[profile.ID.limit]]\nkind = \"gains\"\nc0 = 1\nclause = \"c\"\nproof = \"read\"\n"), "gains"},
		{"selector backwards", house("a", "[[profile.ID.limit]]\nkind = \"gain\"\nc0 = 1\nf_from = 900\nf_below = 900\nclause = \"c\"\nproof = \"read\"\n"), "f_below"},
		{"radio without spectrum", house("a", "[[profile.ID.radio]]\nkind = \"eirp\"\nc0 = 1\nf_from = 900\nclause = \"c\"\nproof = \"read\"\n"), "f_from and f_below"},
		{"unknown paper", house("a", "[profile.ID.paper.licence]\nsays = \"s\"\nclause = \"c\"\nproof = \"read\"\n"), "licence"},
		{"gap in a level", house("a", "[profile.ID.exposure.general]\naverage_min = 6\nsegment = [{ mhz = [30, 300], a = 1 }, { mhz = [400, 500], a = 1 }]\nclause = \"c\"\nproof = \"read\"\n"), "segment"},
		{"level without segments", house("a", "[profile.ID.exposure.general]\naverage_min = 6\nclause = \"c\"\nproof = \"read\"\n"), "segment"},
		{"empty spectrum", house("a", "[[profile.ID.spectrum]]\nname = \"n\"\nuplink = [716, 698]\ndownlink = [728, 746]\nclause = \"c\"\nproof = \"read\"\n"), "spectrum"},
		{"with leads nowhere", house("a", "with = [\"us-rooter\"]\n"), "us-rooter"},
		{"comparison without a figure", "[code.a]\ntitle = \"t\"\ninstrument = \"i\"\nedition = \"e\"\n[[code.a.row]]\nid = \"x\"\nsays = \"s\"\nkind = \"code\"\ncompare = \"at-least\"\nproof = \"read\"\n", "at-least"},
		{"row twice", "[code.a]\ntitle = \"t\"\ninstrument = \"i\"\nedition = \"e\"\n" + strings.Repeat("[[code.a.row]]\nid = \"x\"\nsays = \"s\"\nkind = \"code\"\ncompare = \"required\"\nproof = \"read\"\n", 2), "stands already"},
	} {
		_, problems := Load(doc(t, "profiles/a.toml", c.text))
		switch {
		case len(problems) != 1:
			t.Errorf("%s: %d problems, expected one: %+v", c.name, len(problems), problems)
		case !strings.Contains(problems[0].Says, c.says):
			t.Errorf("%s: %q does not speak of %q", c.name, problems[0].Says, c.says)
		case problems[0].At.Line() == 0 || problems[0].Do == "":
			t.Errorf("%s: no place, or nothing to do", c.name)
		}
	}
}

func TestOneProfileInTwoFilesIsAProblemAndTheFirstStays(t *testing.T) {
	second := strings.Replace(oneRow, "40", "90", 1)
	s, problems := Load(doc(t, "profiles/a.toml", house("mine", oneRow)), doc(t, "profiles/b.toml", house("mine", second)))
	if len(problems) != 1 || problems[0].At.Path() != "profiles/b.toml" || len(problems[0].Also) != 1 {
		t.Fatalf("problems: %+v", problems)
	}
	if a := s.Profile("mine").Assess(amp("gain", "uplink", "B5"), For("B5")); a.Value != 40 {
		t.Errorf("the limit is %v, expected the first file's 40", a.Value)
	}
}

func TestFormatIsDocumented(t *testing.T) {
	r := Describe()
	profile := r.Key("profile")
	if profile == nil || profile.Sub.Key("limit") == nil || profile.Sub.Key("limit").Sub.Key("c0") == nil {
		t.Fatal("the limit rows of a profile are not documented")
	}
	if code := r.Key("code"); code == nil || code.Sub.Key("row").Sub.Key("size") == nil {
		t.Error("the rows of a code are not documented")
	}
	var walk func(path string, r *source.Record)
	walk = func(path string, r *source.Record) {
		for _, k := range r.Keys {
			if k.Doc == "" {
				t.Errorf("%s%s has no description", path, k.Name)
			}
			if k.Sub != nil {
				walk(path+k.Name+".", k.Sub)
			}
		}
	}
	walk("", r)
}

func TestSetServesSeveralPlansAtOnce(t *testing.T) {
	s, _ := Load()
	var wg sync.WaitGroup
	for range 8 {
		wg.Go(func() {
			for _, id := range s.ProfileIDs() {
				if s.Profile(id) == nil {
					t.Errorf("%s is lost", id)
				}
			}
		})
	}
	wg.Wait()
}

func BenchmarkFirstPlan(b *testing.B) {
	for b.Loop() {
		readFile("profiles/us-fixed-wideband.toml")
		readFile("profiles/us-router.toml")
		readFile("codes/us-nec-2020.toml")
	}
}

func BenchmarkAssess(b *testing.B) {
	p := Builtin().Profile("us-fixed-wideband")
	in := everything("B5")
	for b.Loop() {
		p.Assess(amp("gain", "uplink", "B5"), in)
	}
}
