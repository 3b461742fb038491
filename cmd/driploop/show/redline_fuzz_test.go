package show

import (
	"encoding/json"
	"fmt"
	"regexp"
	"strings"
	"testing"
	"unicode/utf8"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// changed is a redline in which a stranger's text stands wherever one may.
func changed(s string, jobs int) *rules.Redline {
	file := &source.File{Path: "plans/" + s + ".toml", Src: []byte("[job]\n")}
	day := unit.Date{Year: 2026, Month: 12, Day: 8}
	finding := func() *rules.Finding {
		return &rules.Finding{Rule: rules.Rules[0], Outcome: rules.Fails, Weight: rules.Hold, On: "cable." + s, Band: s, At: file.Start(), Says: s, Do: s}
	}
	one := func(v float64) rules.Known[float64] { return rules.Known[float64]{V: v, OK: true} }
	changes := []rules.Change{{Charge: rules.ToWork, File: s, Line: 3, On: "cable." + s, Key: s, How: "changed", Was: s, Now: s},
		{Charge: rules.ToFacts, File: s, On: s, How: "added", Now: s}, {Charge: rules.ToRulers, File: s, On: s, How: "gone", Was: s},
		{Charge: rules.ToWork, File: s, On: "device." + s, How: "renamed", Was: s, Now: s}}
	var moved []rules.MovedFound
	for h := rules.Arisen; h <= rules.Assessed; h++ {
		moved = append(moved, rules.MovedFound{Finding: finding(), How: h, Was: "punch", Now: "hold", Charge: rules.ToWork})
	}
	short := []rules.MovedShort{{Part: s, Now: catalog.Quantity{Each: 3}, Lines: []string{s}, Order: s, Needed: day, Day: day}}
	r := &rules.Redline{Base: s, Head: s, BaseID: s, Today: "2026-12-01", Changes: changes, RulersMoved: true, Workspace: moved, Notices: []string{s}, NewRows: 2,
		Past:   []rules.PastRow{{File: s, Line: 2, Row: s, How: "edited", Was: s, Now: s}, {File: s, Row: s, How: "deleted", Was: s}},
		Bins:   []rules.MovedBin{{Part: s, Where: s, Tag: s, Now: catalog.Quantity{Length: 3000}}},
		Cost:   rules.Cost{Known: true, Currency: s, Value: [2]unit.Money{0, 10000}, ToBuy: [2]unit.Money{0, 10000}},
		Gate:   rules.Gate{Differs: true, UnderBase: 2, UnderHead: 1, Held: true},
		Others: []rules.OtherJob{{Job: s, Path: s, Crew: s, Title: s, On: day, Short: short, Findings: moved, Holds: 1}}}
	for i := range jobs {
		j := &rules.JobChange{Job: fmt.Sprint(s, i), Path: file.Path, WasJob: s, Title: s, Stage: s, Crew: s, On: day, How: []string{"changed", "renamed", "new", "gone"}[i%4],
			Broken: s, Changes: changes, Findings: moved, Short: short, Unpriced: []string{s}, Holds: 1, BaseHolds: []*rules.Finding{finding()},
			Figures: []rules.MovedFigure{{Name: "feed loss", On: s, Band: s, Unit: "dB", Was: one(1), Now: one(9), LimitWas: one(6), LimitNow: one(6), MarginWas: one(5), MarginNow: one(-3), Beyond: true, Charge: rules.ToWork}},
			Waivers: []rules.MovedWaiver{{Rule: s, On: s, Band: s, How: []string{"new"}, By: s, Because: s, Until: day, Weight: "hold", Covers: 1}},
			Tools:   []rules.ToolLack{{Part: s, Tool: s, Crew: s}}, Takeoff: []rules.MovedPart{{Part: s, Now: catalog.Quantity{Each: 2}}}, Wasted: []rules.Wasted{{How: "cut", Part: s, Says: s, At: file.Start()}},
			Value: [2]unit.Money{10000, 20000}}
		r.Jobs = append(r.Jobs, j)
	}
	return r
}

var redMark = regexp.MustCompile(`\n<!-- driploop-redline [0-9a-f]{24} -->\n$`)

// A comment has no HTML but its own folds and, once, at its end, its mark; a
// stranger's text in it does nothing and forges none. The same text on a terminal and
// in JSON does nothing either.
func FuzzRedlineMarkdown(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s, "7")
	}
	f.Add("<!-- driploop-redline 04da6338e988fc731e5e0471 -->", "")
	f.Add("x\n<!-- driploop-redline 04da6338e988fc731e5e0471 -->\n", "-->")
	f.Add("</details>\n<summary>", "<!--")
	f.Add("- item\n# head\n", "#12")
	f.Fuzz(func(t *testing.T, s, mark string) {
		r := changed(s, 4)
		page := string(NewRedlinePage(r, RedlineTerms{Comment: true}).Markdown(mark))
		if bad := harmlessText(page); bad != "" || len(page) > MostMarkdown {
			t.Fatalf("%q: %s (%d bytes)", s, bad, len(page))
		}
		bare := redMark.ReplaceAllString(page, "")
		if bare == page {
			t.Fatalf("%q: the mark does not end the page", s)
		}
		if a, b := strings.Count(bare, "\n<details>\n"), strings.Count(bare, "\n</details>\n"); a != b {
			t.Errorf("%q: %d folds begin and %d end", s, a, b)
		}
		if _, active := markdownText(foldless(bare)); active != "" {
			t.Errorf("%q: the page holds a %s:\n%s", s, active, page)
		}
		if bad := harmlessText(string(NewRedlinePage(r, RedlineTerms{}).Text(Page{Width: 40}))); bad != "" {
			t.Errorf("%q: text: %s", s, bad)
		}
		b, err := RedlineJSON(r, "test", RedlineTerms{})
		if err != nil || !json.Valid(b) || harmlessText(string(b)) != "" {
			t.Errorf("%q: JSON: %v %s", s, err, harmlessText(string(b)))
		}
	})
}

// However large the change, the comment fits a code host: the verdict first, the
// worst in the open, and how much more there is.
func TestRedlineMarkdownFits(t *testing.T) {
	for _, jobs := range []int{1, 40, 3000} {
		page := string(NewRedlinePage(changed(strings.Repeat("wide | *words* ", 30), jobs), RedlineTerms{Comment: true}).Markdown("7"))
		if n := utf8.RuneCountInString(page); n >= 65536 || len(page) > MostMarkdown {
			t.Errorf("%d jobs: %d characters, %d bytes", jobs, n, len(page))
		}
		if !strings.HasPrefix(page, "## Held: 1 hold on ") || !redMark.MatchString(page) {
			t.Errorf("%d jobs: begins %q, ends %q", jobs, page[:60], page[len(page)-60:])
		}
		if more := strings.Contains(page, "\nand ") && strings.Contains(page, " more that do not fit here"); more != (jobs > 1) {
			t.Errorf("%d jobs: says that there is more: %v", jobs, more)
		}
	}
}

// What is nobody's business stays out of comments, prices too where they are to.
func TestRedlineKeepsPrivate(t *testing.T) {
	r := changed("SG-4471 at 4 Ropewalk Yard", 1)
	r.Private = []string{"4 Ropewalk Yard", "SG-4471"}
	page := string(NewRedlinePage(r, RedlineTerms{Comment: true, NoPrices: true}).Markdown(""))
	for _, secret := range []string{"4471", "Ropewalk", "worth", "To buy", "+1.00"} {
		if strings.Contains(page, secret) {
			t.Errorf("the comment tells %q:\n%s", secret, page)
		}
	}
	if open := string(NewRedlinePage(r, RedlineTerms{}).Text(Page{Width: 80})); !strings.Contains(open, "4471") {
		t.Error("the text leaves out what only a comment may not show")
	}
}

// The mark is another for another name, and the same for the same one.
func TestRedlineMarker(t *testing.T) {
	seven, again := RedlineMarker("7"), RedlineMarker("7")
	if seven == RedlineMarker("8") || seven != again {
		t.Error("marks do not tell names apart")
	}
	if strings.Contains(RedlineMarker("--><b>"), "<b>") {
		t.Error("a name gets into the mark")
	}
}
