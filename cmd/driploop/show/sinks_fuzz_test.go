package show

import (
	"encoding/json"
	"slices"
	"strings"
	"testing"

	"golang.org/x/net/html"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// JSON of any text is JSON, does nothing in a log, and gives the text back.
func FuzzJSON(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s, s)
	}
	f.Fuzz(func(t *testing.T, key, text string) {
		b, err := encode(map[string]string{key: text})
		if err != nil {
			t.Fatal(err)
		}
		if bad := harmlessText(string(b)); bad != "" {
			t.Fatalf("%q and %q: %s", key, text, bad)
		}
		var back map[string]string
		if err := json.Unmarshal(b, &back); err != nil || len(back) != 1 {
			t.Fatalf("%q and %q came back as %q (%v)", key, text, back, err)
		}
		for _, got := range back {
			if strings.ToValidUTF8(text, "") == text && got != text {
				t.Errorf("%q came back as %q", text, got)
			}
		}
	})
}

// A sheet that books an issue is read as it was meant, whoever took the goods and
// whatever the IDs are: TOML's own reader finds the same words in it.
func FuzzIssueTOML(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		if strings.ToValidUTF8(s, "") != s || len(s) > 256 {
			return // files of a workspace and arguments that are no UTF-8, or as long as that, are refused before
		}
		b := (&Issue{Pick: pickOf(s), On: "2026-12-01", By: s}).TOML()
		if bad := harmlessText(string(b)); bad != "" {
			t.Fatalf("%q: %s", s, bad)
		}
		doc, problems := source.Parse(&source.File{Path: "stock/issue/a-1.toml", Src: b})
		if len(problems) > 0 {
			t.Fatalf("%q: %s in\n%s", s, problems[0].Says, b)
		}
		sheet, _ := catalog.ReadSheet(doc)
		if sheet.Head.By.V != s || len(sheet.Moves) != 1 || len(sheet.Cuts) != 1 {
			t.Errorf("%q came back as %q with %d moves and %d cuts", s, sheet.Head.By.V, len(sheet.Moves), len(sheet.Cuts))
		}
	})
}

// A pick list for the browser holds no element but its own, and all of its text.
func FuzzPickHTML(f *testing.F) {
	for _, s := range hostileTexts {
		f.Add(s)
	}
	want := elements(f, pickPageOf(f, "plain"))
	f.Fuzz(func(t *testing.T, s string) {
		page := pickPageOf(t, s)
		if bad := harmlessText(page); bad != "" {
			t.Fatalf("%q: %s", s, bad)
		}
		if got := elements(t, page); !slices.Equal(got, want) {
			t.Errorf("%q: the page is made of %v, not %v", s, got, want)
		}
	})
}

func pickPageOf(t testing.TB, s string) string {
	b, err := (&Pick{Pick: pickOf(s), Today: "2026-12-01", Origin: rules.Origin{At: s}}).HTML()
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// elements lists the elements of a page with their attributes, in order.
func elements(t testing.TB, page string) []string {
	doc, err := html.Parse(strings.NewReader(page))
	if err != nil {
		t.Fatal(err)
	}
	var out []string
	for n := range doc.Descendants() {
		switch n.Type {
		case html.CommentNode:
			out = append(out, "comment")
		case html.ElementNode:
			name := n.Data
			for _, a := range n.Attr {
				name += " " + a.Key
			}
			out = append(out, name)
		}
	}
	return out
}

// pickOf is a pick list in which every text is s.
func pickOf(s string) *bom.Pick {
	text := source.Val[string]{V: s, Set: true}
	part := &catalog.Part{ID: s, Name: text, Kind: text}
	tag := &catalog.Tag{ID: s, Part: s, Where: s, Left: 20000, How: s}
	return &bom.Pick{Job: s, Title: s, Crew: s, Stage: s,
		Tools:   []bom.Tool{{Name: s, For: []string{s}}},
		Loose:   []bom.PickBin{{Part: part, Qty: 1}},
		Bins:    []bom.PickBin{{Where: s, Part: part, Qty: 2}},
		Reels:   []bom.PickReel{{Where: s, Part: part, Tag: tag, Cuts: []bom.Piece{{Line: s, Length: 5000, Bare: 4700}}, Left: 15000, Usable: true}},
		Missing: []*bom.Claim{{Demand: &bom.Demand{Job: s}, Need: &bom.Need{Part: part}, Short: 1}},
		Given:   []catalog.Issue{{Job: s, Part: s, Net: catalog.Quantity{Each: 1}}},
		Labels:  []bom.Label{{Line: s, Part: s, Length: unit.MM(1000), From: s, To: s}},
	}
}
