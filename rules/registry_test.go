package rules

import (
	"regexp"
	"slices"
	"strings"
	"testing"
	"unicode"
)

// floor lists the rules that the design asks for, area by area. There may be more.
var floor = map[string]string{
	"file":     "syntax key value merge",
	"part":     "unknown kind status",
	"mate":     "port shared series gender polarity fit loop loose open choice adapters",
	"match":    "impedance vswr",
	"band":     "antenna part amplifier profile",
	"loss":     "feed cable leg",
	"ground":   "arrestor bond conductor electrodes dc data reversed length entry spark mains",
	"gain":     "profile mobility amplifier uplink-power downlink-power uplink-eirp downlink-eirp radio-eirp system kit input isolation noise overload phone-close",
	"reach":    "downlink uplink benefit near-far quality dominance",
	"mimo":     "branches polarization imbalance xpd twin amplified",
	"exposure": "density distance",
	"build":    "wind clearance ground-plane bend rating mount outdoor-joint heat airbag",
	"power":    "fuse volts dc-path budget drop poe",
	"stock":    "short late below stranded overdue counted-twice issued over future tag cut-was unknown claimed old same-day jump",
	"paper":    "consent registration permit personal height waiver",
	"catalog":  "fit range twice",
}

// awaited lists the rules of an area that are still to come. One that is there is
// taken off.
var awaited = strings.Fields("")

func TestEveryRuleOfAnAreaIsThere(t *testing.T) {
	for _, area := range areasOf(Rules) {
		for name := range strings.FieldsSeq(floor[area]) {
			there, due := Find(area+"/"+name) != nil, !slices.Contains(awaited, area+"/"+name)
			switch {
			case !there && due:
				t.Errorf("the design asks for %s/%s", area, name)
			case there && !due:
				t.Errorf("%s/%s is there and no longer awaited: take it off the list", area, name)
			}
		}
	}
}

func TestAreasAreKnownAndStandTogether(t *testing.T) {
	areas := areasOf(Rules)
	for i, area := range areas {
		if floor[area] == "" {
			t.Errorf("nobody has described the area %s", area)
		}
		if slices.Contains(areas[:i], area) {
			t.Errorf("the rules of %s do not stand together in the list", area)
		}
	}
}

// areasOf lists the areas in the order of the list, each change of area once.
func areasOf(list []*Rule) []string {
	var out []string
	for _, r := range list {
		if n := len(out); n == 0 || out[n-1] != r.Area() {
			out = append(out, r.Area())
		}
	}
	return out
}

func TestEveryRuleIsFoundByItsName(t *testing.T) {
	for _, r := range Rules {
		if Find(r.Name) != r {
			t.Errorf("%s is not found by its name", r.Name)
		}
	}
	names := Names()
	if len(names) != len(Rules) || !slices.IsSorted(names) {
		t.Errorf("%d names of %d rules, sorted %v", len(names), len(Rules), slices.IsSorted(names))
	}
	if Find("loss/nothing") != nil {
		t.Error("a rule is found that is not there")
	}
}

var areaSlashSlug = regexp.MustCompile(`^[a-z]+/[a-z]+(-[a-z]+)*$`)

// A title is a headline; why is a clause without a full stop; a caution is said to
// people, in sentences. The lighter cases may be either clause or sentences.
func TestTextsOfRulesAreWrittenAlike(t *testing.T) {
	titles := map[string]string{}
	for _, r := range Rules {
		if !areaSlashSlug.MatchString(r.Name) {
			t.Errorf("%s is no name like area/two-words", r.Name)
		}
		if first := titles[r.Title]; first != "" {
			t.Errorf("%s and %s have the same title", r.Name, first)
		}
		titles[r.Title] = r.Name
		if first := []rune(r.Title)[0]; !unicode.IsUpper(first) || strings.HasSuffix(r.Title, ".") {
			t.Errorf("%s: a title begins with a capital and has no full stop: %q", r.Name, r.Title)
		}
		if strings.HasSuffix(r.Why, ".") {
			t.Errorf("%s: why has no full stop: %q", r.Name, r.Why)
		}
		if r.Caution != "" && !sentence(r.Caution) {
			t.Errorf("%s: a caution is said in sentences: %q", r.Name, r.Caution)
		}
		if l := r.Lighter; l != "" && sentence(l) != strings.HasSuffix(l, ".") {
			t.Errorf("%s: lighter is neither clause nor sentence: %q", r.Name, l)
		}
		for _, text := range []string{r.Title, r.Why, r.Caution, r.Lighter} {
			if text != strings.TrimSpace(text) || strings.Contains(text, "  ") || strings.ContainsAny(text, "\n\t") {
				t.Errorf("%s: stray space in %q", r.Name, text)
			}
			if assures.MatchString(text) {
				t.Errorf("%s: the tool assures nobody of anything: %q", r.Name, text)
			}
		}
		for _, b := range r.Basis {
			if b.Document == "" || !slices.Contains([]string{"code", "standard", "practice", "common practice", "calculated", "house"}, b.Kind) ||
				!slices.Contains([]string{"", "read", "copy", "memory"}, b.Proof) {
				t.Errorf("%s: a basis names document, kind and proof: %+v", r.Name, b)
			}
		}
	}
}

func sentence(text string) bool {
	return unicode.IsUpper([]rune(text)[0]) && strings.HasSuffix(text, ".")
}

// assures is what the tool never says of an install.
var assures = regexp.MustCompile(`(?i)\b(legal|legally|compliant|complies|is safe|are safe)\b`)

func TestGuardedRulesAreThoseThatCanHurt(t *testing.T) {
	for name, want := range map[string]bool{
		"gain/kit": true, "ground/bond": true, "exposure/density": true, "power/fuse": true, "build/clearance": true,
		"power/volts": false, "build/wind": false, "loss/feed": false, "band/antenna": false,
	} {
		if r := (&Rule{Name: name}); r.Guarded() != want {
			t.Errorf("%s: guarded is %v", name, !want)
		}
	}
}

func TestRegistryRefusesWhatIsNotWhole(t *testing.T) {
	whole := func() *Rule {
		return &Rule{Name: "loss/bench", Title: "Title", Why: "why", Basis: []Basis{house("bench")}, Weight: Punch, Check: func(*Case, *Report) {}}
	}
	if err := validate([]*Rule{whole()}); err != nil {
		t.Fatalf("a whole rule is refused: %v", err)
	}
	filesOnly := whole()
	filesOnly.Check, filesOnly.CheckFiles = nil, func(*Firm, *Report) {}
	if err := validate([]*Rule{filesOnly}); err != nil {
		t.Errorf("a rule for files only is refused: %v", err)
	}
	for _, c := range []struct {
		want  string
		spoil func(*Rule)
	}{
		{"name", func(r *Rule) { r.Name = "" }},
		{"name", func(r *Rule) { r.Name = "loss" }},
		{"name", func(r *Rule) { r.Name = "loss/" }},
		{"name", func(r *Rule) { r.Name = "/feed" }},
		{"name", func(r *Rule) { r.Name = "Loss/Feed" }},
		{"title", func(r *Rule) { r.Title = "" }},
		{"reason", func(r *Rule) { r.Why = "" }},
		{"basis", func(r *Rule) { r.Basis = nil }},
		{"weight", func(r *Rule) { r.Weight = Off }},
		{"checks nothing", func(r *Rule) { r.Check = nil }},
		{"both scopes", func(r *Rule) { r.CheckShelf = func(*Shelf, *Report) {} }},
	} {
		r := whole()
		c.spoil(r)
		if err := validate([]*Rule{whole(), r}); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("a rule without %s: %v", c.want, err)
		}
	}
	if err := validate([]*Rule{whole(), whole()}); err == nil || !strings.Contains(err.Error(), "twice") {
		t.Errorf("a rule listed twice: %v", err)
	}
}
