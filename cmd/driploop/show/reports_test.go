package show

import (
	"context"
	"encoding/json"
	"fmt"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/rules"
)

// inspected is what an inspection finds in a small workspace.
func inspected(t testing.TB, files map[string]string) *rules.Result {
	t.Helper()
	dir := t.TempDir()
	for name, text := range files {
		path := filepath.Join(dir, name)
		if err := os.MkdirAll(filepath.Dir(path), 0o777); err != nil {
			t.Fatal(err)
		}
		if err := os.WriteFile(path, []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	tree, err := source.Disk(dir)
	if err != nil {
		t.Fatal(err)
	}
	return inspect(t, load(t, tree))
}

func inspect(t testing.TB, firm *rules.Firm) *rules.Result {
	t.Helper()
	res, err := firm.Inspect(context.Background(), nil)
	if err != nil {
		t.Fatal(err)
	}
	return res
}

// logOf is a SARIF log as a reader has it.
type logOf struct {
	Runs []struct {
		Tool struct {
			Driver struct {
				Rules []struct {
					ID   string
					Help struct{ Text, Markdown string }
				}
			}
		}
		Invocations []struct {
			ToolExecutionNotifications []struct{ Message struct{ Text string } }
			RuleConfigurationOverrides []struct {
				Descriptor    struct{ ID string }
				Configuration struct {
					Enabled bool
					Level   string
				}
			}
		}
		ColumnKind string
		Properties map[string]any
		Results    []resultOf
	}
}

type resultOf struct {
	RuleID       string
	RuleIndex    int
	Level        string
	Message      struct{ Text string }
	Fingerprints map[string]string `json:"partialFingerprints"`
	Suppressions []struct{ Kind, Status, Justification string }
	Properties   struct{ On, Band string }
	Locations    []struct {
		PhysicalLocation struct {
			ArtifactLocation struct{ URI string }
			Region           struct{ StartLine, StartColumn int }
		}
	}
	Related []struct{ ID int } `json:"relatedLocations"`
}

func (r resultOf) key() string { return r.Fingerprints["planKey/v1"] }

func readLog(t testing.TB, r *rules.Result) logOf {
	t.Helper()
	b, err := InspectSARIF(r, "v", "")
	if err != nil {
		t.Fatal(err)
	}
	var out logOf
	if err := json.Unmarshal(b, &out); err != nil {
		t.Fatal(err)
	}
	return out
}

// The demo's log has each finding once, with its rule, its level and a key of its own;
// the rules bring their whole help.
func TestSARIFOfDemo(t *testing.T) {
	r := inspect(t, demo(t))
	run := readLog(t, r).Runs[0]
	if want := r.Holds + r.Punch + r.Notes + r.Waived; len(run.Results) != want || run.ColumnKind != "unicodeCodePoints" {
		t.Errorf("%d results of %d, columns in %s", len(run.Results), want, run.ColumnKind)
	}
	keys, accepted, levels := map[string]bool{}, 0, map[string]int{}
	order := []string{"error", "warning", "note"}
	last := 0
	for _, x := range run.Results {
		if keys[x.key()] || x.key() == "" {
			t.Errorf("%s: the key %q is not its own", x.Message.Text, x.key())
		}
		keys[x.key()] = true
		if run.Tool.Driver.Rules[x.RuleIndex].ID != x.RuleID {
			t.Errorf("rule %d is not %s", x.RuleIndex, x.RuleID)
		}
		if len(x.Suppressions) > 0 {
			accepted++
			if s := x.Suppressions[0]; s.Status != "accepted" || !strings.Contains(s.Justification, "accepted") || !strings.Contains(x.Message.Text, s.Justification[1:]) {
				t.Errorf("%+v in %s", s, x.Message.Text)
			}
			continue
		}
		levels[x.Level]++
		at := slices.Index(order, x.Level)
		if at < last || accepted > 0 {
			t.Errorf("%s (%s) stands too late", x.Message.Text, x.Level)
		}
		last = at
	}
	if accepted != r.Waived || levels["error"] != r.Holds || levels["warning"] != r.Punch || levels["note"] != r.Notes {
		t.Errorf("%v and %d accepted of %+v", levels, accepted, r.Counts)
	}
	for i, d := range run.Tool.Driver.Rules {
		rule := rules.Rules[i]
		for _, want := range append([]string{rule.Why[1:], strings.TrimSuffix(rule.Caution, ".")}, basisOfRule(rule)...) {
			if !strings.Contains(d.Help.Text, string(SARIFOf(want))) {
				t.Errorf("the help of %s lacks %q:\n%s", d.ID, want, d.Help.Text)
			}
		}
		if _, active := markdownText(d.Help.Markdown); active != "" || !strings.HasPrefix(d.Help.Markdown, "# ") {
			t.Errorf("the help of %s holds a %s", d.ID, active)
		}
	}
}

func basisOfRule(r *rules.Rule) []string {
	var out []string
	for _, b := range r.Basis {
		out = append(out, b.String())
	}
	return out
}

const laneHead = "[job]\ntitle = \"Lane\"\nbands = [\"B12\"]\n"
const laneCables = `[cable.C1]
part = "GEN-CX-10"
length = "90 m"
[cable.C2]
part = "GEN-CX-10"
length = "95 m"
`

func lane(plan string) map[string]string {
	return map[string]string{"driploop.toml": "[workspace]\nprofile = \"us-fixed-wideband\"\n", "plans/lane.toml": plan}
}

// keysOfLog lists the keys by what they are of.
func keysOfLog(t *testing.T, plan string) map[string]string {
	t.Helper()
	out := map[string]string{}
	for _, x := range readLog(t, inspected(t, lane(plan))).Runs[0].Results {
		out[x.RuleID+" "+x.Properties.On+" "+x.Properties.Band+" "+x.Message.Text] = x.key()
	}
	return out
}

// A key is the same where lines move and lists are put into another order, and goes
// with its thing where figures change.
func TestPlanKeys(t *testing.T) {
	signals := `[[signal]]
operator = "north"
band = "B12"
[[signal]]
operator = "south"
band = "B9x"
`
	turned := `[[signal]]
operator = "south"
band = "B9x"
[[signal]]
operator = "north"
band = "B12"
`
	first := keysOfLog(t, laneHead+laneCables+signals)
	if len(first) < 6 {
		t.Fatalf("only %d findings to tell apart: %v", len(first), first)
	}
	same := func(name, plan string) {
		t.Helper()
		if got := keysOfLog(t, plan); fmt.Sprint(got) != fmt.Sprint(first) {
			t.Errorf("%s: the keys changed\n%v\n%v", name, first, got)
		}
	}
	same("moved lines", "# one\n\n# two\n"+laneHead+"\n\n"+laneCables+"# three\n"+signals)
	same("tables in another order", signals+laneCables+laneHead)
	same("rows in another order", laneHead+laneCables+turned)

	values := func(m map[string]string) []string {
		var out []string
		for _, k := range m {
			out = append(out, k)
		}
		slices.Sort(out)
		return out
	}
	longer := keysOfLog(t, laneHead+strings.ReplaceAll(laneCables, "95 m", "97.5 m")+signals)
	if fmt.Sprint(longer) == fmt.Sprint(first) || !slices.Equal(values(longer), values(first)) {
		t.Errorf("other figures changed the keys\n%v\n%v", first, longer)
	}
	other := keysOfLog(t, laneHead+strings.ReplaceAll(laneCables, "C2", "C3")+signals)
	if slices.Equal(values(other), values(first)) {
		t.Error("another cable has the keys of the one before")
	}
}

// A column counts characters, whatever stands before it: letters of two bytes, of
// three, and such as take two units of UTF-16.
func TestSARIFColumns(t *testing.T) {
	for _, before := range []string{"", "é", "日本", "😀", "é日😀"} {
		line := fmt.Sprintf("device = { d = { serial = %q, part = \"GEN-NONE\" } }", before)
		var found []int
		for _, x := range readLog(t, inspected(t, lane(line+"\n"+laneHead))).Runs[0].Results {
			if x.RuleID == "part/unknown" {
				found = append(found, x.Locations[0].PhysicalLocation.Region.StartColumn)
			}
		}
		runes := []rune(line)
		want := 1 + len([]rune(line[:strings.Index(line, `"GEN-NONE"`)]))
		if len(found) != 1 || found[0] != want || runes[want-1] != '"' {
			t.Errorf("behind %q: columns %v, want %d", before, found, want)
		}
	}
}

// many is a result with more findings than any report lists.
func many(n int) *rules.Result {
	r := &rules.Result{Origin: rules.Origin{At: "worktree", LimitsFrom: "worktree", StockFrom: "worktree"}, Today: "2026-12-01"}
	for p := range 20 {
		file := &source.File{Path: fmt.Sprintf("plans/p%02d.toml", p), Src: []byte("[job]\n")}
		plan := &rules.PlanResult{Path: file.Path, Job: fmt.Sprintf("p%02d", p), Cautions: []string{"mind the roof"}}
		for i := range n / 20 {
			w := rules.Weight(1 + i%3)
			f := &rules.Finding{Rule: rules.Rules[i%len(rules.Rules)], Outcome: rules.Fails, Weight: w, On: fmt.Sprintf("cable.C%d", i), At: file.Start(),
				Says: fmt.Sprintf("says %d ", i) + strings.Repeat("`|[x](y)@z#1 ", 40), Do: "do it"}
			plan.Findings = append(plan.Findings, f)
			switch w {
			case rules.Hold:
				plan.Holds++
			case rules.Punch:
				plan.Punch++
			default:
				plan.Notes++
			}
		}
		r.Plans = append(r.Plans, plan)
		r.Holds, r.Punch, r.Notes = r.Holds+plan.Holds, r.Punch+plan.Punch, r.Notes+plan.Notes
	}
	return r
}

// A log lists the worst and says how many more there are.
func TestSARIFCap(t *testing.T) {
	r := many(9000)
	run := readLog(t, r).Runs[0]
	if len(run.Results) != MostResults {
		t.Errorf("%d results", len(run.Results))
	}
	says := run.Invocations[0].ToolExecutionNotifications
	if len(says) != 1 || !strings.HasPrefix(says[0].Message.Text, "4000 more results are not listed here") {
		t.Errorf("%+v", says)
	}
	for _, x := range run.Results[:r.Holds] {
		if x.Level != "error" {
			t.Fatalf("%s stands before an error", x.Level)
		}
	}
	if at := run.Results[MostResults-1].Level; at != "warning" {
		t.Errorf("the last listed is a %s", at)
	}
	if says := readLog(t, many(40)).Runs[0].Invocations[0].ToolExecutionNotifications; len(says) != 0 {
		t.Errorf("%+v of a short log", says)
	}
}

// The weights that a workspace gives rules stand in the log as its overrides.
func TestSARIFOverrides(t *testing.T) {
	files := lane(laneHead)
	files["driploop.toml"] += "[rule.\"loss/feed\"]\nweight = \"hold\"\nbecause = \"ours\"\n[rule.\"loss/leg\"]\nweight = \"off\"\nbecause = \"[x](http://h.example)\"\n"
	run := readLog(t, inspected(t, files)).Runs[0]
	got := fmt.Sprintf("%+v", run.Invocations[0].RuleConfigurationOverrides)
	if want := "[{Descriptor:{ID:loss/feed} Configuration:{Enabled:true Level:error}} {Descriptor:{ID:loss/leg} Configuration:{Enabled:false Level:}}]"; got != want {
		t.Errorf("%s, want %s", got, want)
	}
	if got := fmt.Sprint(run.Properties["overrides"]); !strings.Contains(got, "loss/leg weighs off here: [x] (http") {
		t.Error(got)
	}
}

// However much there is to say, a report in Markdown stays below what code hosts take,
// names what it leaves out, and shows holds before the rest.
func TestInspectMarkdownFits(t *testing.T) {
	for _, n := range []int{0, 20, 400, 9000} {
		r := many(n)
		for i := range n / 10 {
			r.Overrides = append(r.Overrides, fmt.Sprintf("rule %d ", i)+strings.Repeat("|`", 500))
			r.Notices = append(r.Notices, strings.Repeat("é|", 5000))
		}
		page := string(InspectMarkdown(r, false))
		if len(page) > MostMarkdown {
			t.Errorf("%d findings take %d bytes", n, len(page))
		}
		if n > 400 && (!strings.Contains(page, "more that hold work up") || !strings.Contains(page, "more plan") && !strings.Contains(page, "more files are not shown here")) {
			t.Errorf("%d findings: nothing is said of what is left out", n)
		}
		if strings.Count(page, "<details>") != strings.Count(page, "</details>") || !strings.Contains(page, "mind the roof") {
			t.Errorf("%d findings: a fold stays open, or the cautions are gone", n)
		}
		if _, active := markdownText(foldless(page)); active != "" {
			t.Errorf("%d findings: the page holds a %s", n, active)
		}
	}
}

// foldless is a page without the HTML of our own.
func foldless(page string) string {
	return ownFold.ReplaceAllString(page, "")
}

// Of each kind ten annotations are shown, the worst, and the rest is counted.
func TestAnnotationsCap(t *testing.T) {
	r := many(400)
	page := string(InspectAnnotations(r, "", false))
	for _, kind := range []string{"error", "warning", "notice"} {
		if n := strings.Count("\n"+page, "\n::"+kind+" "); n != 10 {
			t.Errorf("%d of kind %s", n, kind)
		}
	}
	if want := fmt.Sprintf("\n%d holds, %d punch and %d notes are not shown here; the other forms list all.\n", r.Holds-10, r.Punch-10, r.Notes-10); !strings.HasSuffix(page, want) {
		t.Errorf("the page ends in %q, want %q", page[max(0, len(page)-200):], want)
	}
	if quiet := string(InspectAnnotations(r, "", true)); strings.Contains(quiet, "::warning") || strings.Contains(quiet, "::notice") || !strings.Contains(quiet, "::error") {
		t.Error("quiet does not leave holds alone")
	}
}
