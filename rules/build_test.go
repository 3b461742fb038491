package rules_test

import (
	"context"
	"path/filepath"
	"strings"
	"testing"

	"github.com/rogpeppe/go-internal/txtar"

	"driploop/rules"
)

// archived is a case as a tree, its stage another one.
func archived(t *testing.T, file, stage string) memory {
	t.Helper()
	archive, err := txtar.ParseFile(filepath.Join(casesDir, file+".txtar"))
	if err != nil {
		t.Fatal(err)
	}
	tree := memory{files: files(t, filepath.Join(casesDir, "base"))}
	for _, f := range archive.Files {
		text := string(f.Data)
		for _, was := range []string{"review", "construction"} {
			text = strings.Replace(text, `"`+was+`"`, `"`+stage+`"`, 1)
		}
		tree.files[f.Name] = text
	}
	return tree
}

func TestWeightsOfBuilding(t *testing.T) {
	for _, c := range []struct{ file, rule, stage, outcome, weight string }{
		{"build-wind/bad", "build/wind", "draft", "fails", "hold"},
		{"build-wind/bad-ballast", "build/wind", "review", "fails", "hold"},
		{"build-wind/good-ballast", "build/wind", "construction", "advice", "note"},
		{"build-wind/missing", "build/wind", "review", "unknown", "punch"},
		{"build-wind/missing", "build/wind", "construction", "unknown", "hold"},
		{"build-clearance/bad", "build/clearance", "draft", "fails", "hold"},
		{"build-clearance/missing", "build/clearance", "review", "unknown", "punch"},
		{"build-clearance/missing", "build/clearance", "construction", "unknown", "hold"},
		{"build-ground-plane/bad", "build/ground-plane", "review", "fails", "hold"},
		{"build-ground-plane/bad-edge", "build/ground-plane", "construction", "fails", "punch"},
		{"build-ground-plane/missing", "build/ground-plane", "construction", "unknown", "note"},
		{"build-rating/bad", "build/rating", "review", "fails", "hold"},
		{"build-rating/bad-data", "build/rating", "review", "fails", "hold"},
		{"build-rating/bad-outdoors", "build/rating", "construction", "fails", "punch"},
		{"build-rating/bad-gear-plenum", "build/rating", "construction", "fails", "punch"},
		{"build-rating/missing", "build/rating", "construction", "unknown", "note"},
		{"build-bend/bad", "build/bend", "construction", "fails", "punch"},
		{"build-bend/missing", "build/bend", "construction", "unknown", "note"},
		{"build-mount/bad", "build/mount", "construction", "fails", "punch"},
		{"build-outdoor-joint/bad", "build/outdoor-joint", "construction", "fails", "punch"},
		{"build-heat/bad", "build/heat", "construction", "fails", "punch"},
		{"build-heat/boundary-sun-over", "build/heat", "construction", "at-worst", "punch"},
		{"build-airbag/bad", "build/airbag", "construction", "fails", "punch"},
	} {
		t.Run(c.file+"/"+c.stage, func(t *testing.T) {
			found := false
			for _, f := range findings(t, archived(t, c.file, c.stage), today(t, "")) {
				if f.Rule.Name != c.rule || f.Outcome.String() != c.outcome {
					continue
				}
				found = true
				if f.Weight.String() != c.weight {
					t.Errorf("%s weighs %s, want %s", f.Says, f.Weight, c.weight)
				}
			}
			if !found {
				t.Errorf("no finding of %s that is %s", c.rule, c.outcome)
			}
		})
	}
}

// A finding that stands on a row of the plan's code prints that row and no other
// code's documents.
func TestBuildingPrintsTheRowItStandsOn(t *testing.T) {
	for file, want := range map[string]string{
		"build-wind/bad":                            "share of the yield strength; practice of the trade",
		"build-wind/bad-en-moment":                  "IEC/EN 60728-11 12",
		"build-wind/bad-en-sixth":                   "more than a sixth of the mast lies between its fixings",
		"build-wind/bad-ballast":                    "by at least this factor: at least 1.5 times",
		"build-wind/missing":                        "ASCE 7 chapters 26 and 29, 7-16",
		"build-wind/good-ballast":                   "0.96 kPa",
		"build-clearance/bad":                       "at least 10 ft; practice of the trade",
		"build-clearance/bad-approach":              "29 CFR 1910.333 (c)(3)(i)",
		"build-clearance/bad-lead-in":               "NFPA 70 (NEC) 810.18(A), 2020",
		"build-clearance/boundary-lead-in-low-over": "at least 2 ft",
		"build-rating/bad":                          "300.22(C)",
		"build-rating/bad-data":                     "table 800.154",
		"build-rating/boundary-limited-under":       "at most 10 ft",
	} {
		var printed []string
		for _, f := range findings(t, archived(t, file, "review"), today(t, "")) {
			if f.Rule.Name == ruleOf(file) {
				printed = append(printed, f.Basis...)
			}
		}
		all := strings.Join(printed, "\n")
		if !strings.Contains(all, want) {
			t.Errorf("%s stands on %s, want %s", file, all, want)
		}
		if strings.Contains(all, "60728") && strings.Contains(all, "ASCE") {
			t.Errorf("%s prints the documents of both codes: %s", file, all)
		}
	}
}

func ruleOf(file string) string {
	folder, _, _ := strings.Cut(file, "/")
	return strings.Replace(folder, "-", "/", 1)
}

// What is put up says how high the work goes and how far it falls.
func TestCautionsCarryThePlansOwnFigures(t *testing.T) {
	for file, want := range map[string][]string{
		// Antenna at 7.5 + 1.3 m; a quarter of 7.5 m; 3.235 m and 10 ft.
		"build-clearance/good":         {"up to 8.8 m.", "A ladder up 7.5 m stands 1.9 m out", "rails reach 0.9 m", "that is 6.3 m around mast"},
		"build-clearance/good-iec":     {"up to 8.8 m.", "that is 6.3 m around mast"},
		"build-clearance/good-vehicle": nil,
		"build-clearance/good-indoor":  nil,
	} {
		firm, err := rules.Load(archived(t, file, "review"), rules.Options{Today: today(t, "")})
		if err != nil {
			t.Fatal(err)
		}
		res, err := firm.Inspect(context.Background(), nil)
		if err != nil {
			t.Fatal(err)
		}
		text := strings.Join(res.Plans[0].Cautions, "\n")
		for _, w := range want {
			if !strings.Contains(text, w) {
				t.Errorf("%s: the cautions do not say %q:\n%s", file, w, text)
			}
		}
		if got := strings.Contains(text, "Here "); got != (want != nil) {
			t.Errorf("%s: figures of the plan %v", file, got)
		}
		if strings.HasSuffix(file, "iec") && strings.Contains(text, "ladder up") {
			t.Errorf("%s: a code without ladders speaks of one", file)
		}
	}
}

// What to do names a part that would do, of the same sort.
func TestRemediesOfBuilding(t *testing.T) {
	for file, want := range map[string]string{
		"build-wind/bad":                     "take a stronger mast such as GEN-MAST-42-3 (none on hand)",
		"build-wind/bad-en-sixth":            "so that less than 2.5 m is free",
		"build-wind/bad-ballast-house":       "bring its weight to 66 kg", // 2 × 192 N·m over 0.6 m are 640 N
		"build-wind/missing-basis":           "asce7-strength in editions from 7-10 on",
		"build-wind/missing-en-long":         "have a structural engineer prove it",
		"build-clearance/bad":                "set it at least 6.3 m from the line",
		"build-clearance/bad-approach":       "set it at least 9.4 m from the line", // 6.096 + 3.235 m
		"build-clearance/missing":            `a [[reading]] of a length from mast with at = "power line"`,
		"build-ground-plane/bad":             "bond a steel plate to the skin",
		"build-ground-plane/bad-aluminium":   "or take GEN-ANT-WHIP-FME-3 (none on hand)",
		"build-ground-plane/bad-edge":        "move it toward the middle",
		"build-bend/bad":                     "give the bend more room",
		"build-bend/bad-jumper":              "give the bend more room",
		"build-rating/bad":                   "make it of GEN-CX-7-P (none on hand)",
		"build-rating/bad-riser":             "make it of GEN-CX-10-R (none on hand)",
		"build-rating/bad-data":              "make it of GEN-CAT6-R (none on hand)",
		"build-rating/bad-burial":            "make it of GEN-CX-10-B (none on hand)",
		"build-rating/bad-outdoors":          "make it of GEN-CX-10 (none on hand)",
		"build-rating/bad-gear":              "or take GEN-ANT-LP-10 (none on hand)",
		"build-rating/bad-gear-plenum":       "put it into an enclosure",
		"build-rating/missing-unlisted-open": "change over at the entry to GEN-CX-10-R (none on hand)",
		"build-mount/bad-thin":               "a mast such as GEN-MAST-48-3 (none on hand)",
		"build-mount/bad-router":             "no mast of the catalog fits",
		"build-outdoor-joint/bad":            "name it as sealing under [house], or list it as an [[extra]]",
		"build-outdoor-joint/bad-sma":        "list a boot such as GEN-BOOT-SMA (none on hand)",
		"build-heat/bad":                     "move it where it is cooler",
	} {
		var said []string
		for _, f := range findings(t, archived(t, file, "review"), today(t, "")) {
			if f.Rule.Name == ruleOf(file) {
				said = append(said, f.Do)
			}
		}
		if all := strings.Join(said, "\n"); !strings.Contains(all, want) {
			t.Errorf("%s: %q, want %q", file, all, want)
		}
	}
}
