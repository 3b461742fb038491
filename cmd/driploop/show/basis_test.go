package show

import (
	"bytes"
	"context"
	"encoding/json"
	"slices"
	"sort"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/limits"
)

// demo is the demo workspace on a day that suits its files.
func demo(t testing.TB) *rules.Firm {
	t.Helper()
	tree, err := source.Disk("../../../testdata/saltmarsh")
	if err != nil {
		t.Fatal(err)
	}
	return load(t, tree)
}

func load(t testing.TB, tree source.Tree) *rules.Firm {
	t.Helper()
	today, err := unit.ParseDate("2026-12-01")
	if err != nil {
		t.Fatal(err)
	}
	firm, err := rules.Load(tree, rules.Options{Today: today})
	if err != nil {
		t.Fatal(err)
	}
	return firm
}

// earlier is the demo with its clinic still in review.
type earlier struct{ source.Tree }

func (e earlier) Read(entry source.Entry) ([]byte, error) {
	src, err := e.Tree.Read(entry)
	return bytes.Replace(src, []byte(`"construction"`), []byte(`"review"`), 1), err
}

// What basis says that outcomes weigh is what findings of the demo weigh, before
// and after construction has begun.
func TestWeightsAreThoseOfFindings(t *testing.T) {
	firm := demo(t)
	met := map[string]bool{}
	for _, f := range []*rules.Firm{firm, load(t, earlier{firm.Tree})} {
		res, err := f.Inspect(context.Background(), nil)
		if err != nil {
			t.Fatal(err)
		}
		b := &Basis{Limits: f.Limits, Override: f.Override}
		for _, p := range res.Plans {
			for _, f := range p.Findings {
				name, want := toldWeight(b.weights(f.Rule), f, p.Stage)
				met[name] = true
				if f.Weight.String() != want {
					t.Errorf("%s, %s of %s: the finding weighs %s, basis says %s", p.Job, name, f.Rule.Name, f.Weight, want)
				}
			}
		}
	}
	for _, name := range []string{"fails", "unknown", "unknown grave", "unknown, built", "unknown grave, built"} {
		if !met[name] {
			t.Errorf("the demo has no finding of the outcome %s; the test holds nothing there", name)
		}
	}
}

// toldWeight is what basis says that a finding weighs, and the name of its outcome.
func toldWeight(w ruleWeights, f *rules.Finding, stage string) (name, weight string) {
	grave := map[bool]string{true: " grave"}[f.Rule.Grave]
	switch {
	case f.Outcome == rules.Fails && f.Rule.Lighter != "" && f.Weight < f.Rule.Weight:
		return "lighter", f.Weight.String()
	case f.Outcome == rules.Fails:
		return "fails", w.now()
	case f.Outcome == rules.AtWorst:
		return "at worst", w.AtWorst
	case f.Outcome == rules.Unknown && (stage == "construction" || stage == "as-built"):
		return "unknown" + grave + ", built", w.UnknownBuilt
	case f.Outcome == rules.Unknown:
		return "unknown" + grave, w.Unknown
	}
	return "advice", w.Advice
}

// Everything that can be looked up shows in every form, harmlessly and within the
// page.
func TestEveryTopicInEveryForm(t *testing.T) {
	firm := demo(t)
	b := &Basis{Limits: firm.Limits, Override: firm.Override}
	topics := map[string]*Topic{"": b.Index()}
	for _, w := range b.Words() {
		topics[w] = b.Find(w)
	}
	if len(topics) < 100 {
		t.Fatalf("%d topics only", len(topics))
	}
	for word, topic := range topics {
		if topic == nil {
			t.Errorf("%s is listed and cannot be found", word)
			continue
		}
		for _, width := range []int{40, 80} {
			text, err := topic.Page.Text(Page{Width: width})
			if err != nil {
				t.Fatal(err)
			}
			if bad := harmlessText(string(text)); bad != "" {
				t.Errorf("%s: %s", word, bad)
			}
			if wide := tooWide(string(text), width); wide != "" {
				t.Errorf("%s at %d columns: %q", word, width, wide)
			}
		}
		if _, active := markdownText(string(topic.Page.Markdown())); active != "" {
			t.Errorf("%s: its Markdown holds a %s", word, active)
		}
		b, err := topic.JSON()
		if err != nil || !json.Valid(b) {
			t.Errorf("%s: its JSON is none (%v)", word, err)
		}
	}
}

// tooWide is the first line that does not fit a page, or "".
func tooWide(text string, width int) string {
	for line := range strings.Lines(text) {
		if line = strings.TrimSuffix(line, "\n"); utf8.RuneCountInString(line) > width || strings.HasSuffix(line, " ") {
			return line
		}
	}
	return ""
}

// The shape of the JSON: what stands at the top of each topic, and in its rows.
func TestBasisJSON(t *testing.T) {
	b := &Basis{Limits: limits.Builtin()}
	for _, c := range []struct{ word, at, keys string }{
		{"", "", "rules profiles codes kinds formats"},
		{"", "rules", "rule title weight override"},
		{"", "profiles", "id title embedded"},
		{"", "kinds", "name why"},
		{"gain", "", "rules profiles codes kinds formats"},
		{"loss/feed", "", "rule title why needs_shelf weights lighter override waiver_needs_by_because_until basis caution"},
		{"loss/feed", "weights", "fails at_worst unknown unknown_from_construction advice"},
		{"loss/feed", "basis", "document edition kind proof"},
		{"us-fixed-wideband", "", "profile title instrument edition checked embedded setting class mobility with operator_permission spectrum papers kit personal separation bscl limits bands exposure heights conditions cautions"},
		{"us-fixed-wideband", "spectrum", "name uplink_mhz downlink_mhz says clause edition proof note"},
		{"us-fixed-wideband", "limits", "id kind class where formula unit c0 kf kr km kb clause edition proof note"},
		{"us-fixed-wideband", "bands", "band figures"},
		{"us-fixed-wideband", "bands.figures", "limit value lacks"},
		{"us-fixed-wideband", "papers", "id says clause edition proof note"},
		{"us-fixed-wideband", "conditions", "says clause edition proof note"},
		{"us-nec-2020", "", "code title instrument edition checked embedded rows cautions"},
		{"us-nec-2020", "rows", "id says compare figure steps constants inputs instrument section edition kind proof caution note"},
		{"antenna", "", "kind why keys"},
		{"antenna", "keys", "key required shape type doc"},
		{"plan", "", "format why keys"},
		{"plan", "keys", "key required shape doc keys"},
	} {
		topic := b.Index()
		if c.word != "" {
			topic = b.Find(c.word)
		}
		src, err := topic.JSON()
		if err != nil {
			t.Fatal(err)
		}
		var v any
		if err := json.Unmarshal(src, &v); err != nil {
			t.Fatal(err)
		}
		want := strings.Fields(c.keys)
		sort.Strings(want)
		if diff := cmp.Diff(want, keysAt(v, c.at)); diff != "" {
			t.Errorf("%s, %q (-want +got):\n%s", c.word, c.at, diff)
		}
	}
}

// keysAt lists the keys of an object, or of the first of a list of them.
func keysAt(v any, path string) []string {
	for _, step := range strings.Fields(strings.ReplaceAll(path, ".", " ")) {
		v = first(v)[step]
	}
	var out []string
	for k := range first(v) {
		out = append(out, k)
	}
	sort.Strings(out)
	return out
}

func first(v any) map[string]any {
	if list, ok := v.([]any); ok && len(list) > 0 {
		v = list[0]
	}
	m, _ := v.(map[string]any)
	return m
}

// Figures of the profile reach the reader as the profile computes them: the mean
// of B12's uplink is 707.5 MHz, and 6.5 + 20·log10(707.5) = 63.4945.
func TestBasisNumbers(t *testing.T) {
	topic := (&Basis{Limits: limits.Builtin()}).Find("us-fixed-wideband")
	data := topic.data.(profileJSON)
	i := slices.IndexFunc(data.Bands, func(b bandFiguresJSON) bool { return b.Band == "B12" })
	if i < 0 {
		t.Fatal("B12 is missing")
	}
	for _, f := range data.Bands[i].Figures {
		switch f.Limit {
		case "L1":
			if f.Value != nil || !slices.Equal(f.Lacks, []string{"RSSI", "MSCL"}) {
				t.Errorf("L1 depends on the site; it came out as %v, lacking %v", f.Value, f.Lacks)
			}
		case "L2":
			if f.Value == nil || *f.Value != 63.494 && *f.Value != 63.495 {
				t.Errorf("L2 is %v in B12, want 63.494", f.Value)
			}
		}
	}
	text, err := topic.Page.Text(Page{Width: 40})
	if err != nil || !strings.Contains(string(text), "B12: L2 63.5, L8 −45.5") {
		t.Errorf("on a narrow page the bands are lines of their own (%v):\n%s", err, text)
	}
}
