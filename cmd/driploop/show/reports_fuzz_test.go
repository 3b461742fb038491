package show

import (
	"encoding/json"
	"encoding/xml"
	"net/url"
	"regexp"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// told is a result in which a stranger's text stands wherever one may.
func told(s string, weight int) *rules.Result {
	w := rules.Weight(1 + (weight%3+3)%3)
	file := &source.File{Path: "plans/" + s + ".toml", Src: []byte("[job]\n")}
	f := func() *rules.Finding {
		return &rules.Finding{Rule: rules.Rules[0], Outcome: rules.Fails, Weight: w, On: "cable." + s, Band: s, At: file.Start(), Says: s, Do: s,
			Basis: []string{s}, Related: []rules.Related{{At: file.Start(), Says: s}}}
	}
	waived := f()
	waived.Waived = &rules.Settled{Waiver: &bom.Waiver{Because: source.Val[string]{V: s, Set: true}, By: source.Val[string]{V: s, Set: true}, Until: source.Val[unit.Date]{}}}
	unknown := f()
	unknown.Outcome, unknown.Of, unknown.Lacks = rules.Unknown, s, s
	p := &rules.PlanResult{Path: file.Path, Job: s, Title: s, Stage: s, Profile: s, Code: s, Findings: []*rules.Finding{f(), f(), waived, unknown}, Cautions: []string{s}}
	return &rules.Result{Origin: rules.Origin{At: s, LimitsFrom: s + "x", StockFrom: s + "y", Differs: []string{s}}, Today: "2026-12-01",
		Overrides: []string{s}, Notices: []string{s}, Workspace: []*rules.Finding{f()}, Plans: []*rules.PlanResult{p}, Counts: rules.Counts{Holds: 1}}
}

func seed(f *testing.F) {
	for i, s := range hostileTexts {
		f.Add(s, i)
	}
	f.Add("{0} [x](1) {{1}", 0)
	f.Add("]]> <![CDATA[ &amp; \uFFFE\uFFFF", 1)
	f.Add("a%0Ab%25,c:d=e", 2)
	f.Add("</details><summary>x", 1)
	f.Add("\n\n</details>\n", 0)
}

// A SARIF log is JSON with the text in it; its messages hold no link and no place
// holder, its names of files are relative references that lead back to the name.
func FuzzSARIF(f *testing.F) {
	seed(f)
	relative := regexp.MustCompile(`^([A-Za-z0-9._~/-]|%[0-9A-F]{2})+$`)
	f.Fuzz(func(t *testing.T, s string, weight int) {
		r := told(s, weight)
		b, err := encode(sarifLog{Runs: []sarifRun{sarifRunOf(r, s+"/")}}) // what is said of rules is our own
		if err != nil {
			t.Fatal(err)
		}
		if bad := harmlessText(string(b)); bad != "" {
			t.Fatalf("%q: %s", s, bad)
		}
		var log logOf
		if err := json.Unmarshal(b, &log); err != nil {
			t.Fatalf("%q: %v", s, err)
		}
		keys := map[string]bool{}
		for _, x := range log.Runs[0].Results {
			if strings.Contains(x.Message.Text, "](") || placeholder.MatchString(x.Message.Text) {
				t.Errorf("%q: a link or place holder in %q", s, x.Message.Text)
			}
			uri := x.Locations[0].PhysicalLocation.ArtifactLocation.URI
			path, err := url.PathUnescape(uri)
			if err != nil || !relative.MatchString(uri) || path != s+"/plans/"+s+".toml" {
				t.Errorf("%q: the reference %q leads to %q (%v)", s, uri, path, err)
			}
			if keys[x.key()] {
				t.Errorf("%q: a key stands twice", s)
			}
			keys[x.key()] = true
		}
	})
}

// A line of annotations is one of ours, with its parts where a runner looks for them;
// no other line is a command.
func FuzzAnnotations(f *testing.F) {
	seed(f)
	form := regexp.MustCompile(`^::(error|warning|notice) file=([^:,\r\n]*),line=1,col=1,title=([^:,\r\n]*)::([^\r\n]*)$`)
	back := strings.NewReplacer("%0D", "\r", "%0A", "\n", "%3A", ":", "%2C", ",", "%25", "%")
	f.Fuzz(func(t *testing.T, s string, weight int) {
		var rest strings.Builder
		seen := 0
		for line := range strings.Lines(string(InspectAnnotations(told(s, weight), "", false))) {
			line = strings.TrimSuffix(line, "\n")
			if !strings.HasPrefix(line, "::") {
				rest.WriteString(line + "\n")
				continue
			}
			seen++
			m := form.FindStringSubmatch(line)
			if m == nil {
				t.Fatalf("%q: no annotation of ours: %q", s, line)
			}
			if got, want := back.Replace(m[2]), string(Clean("plans/"+s+".toml")); got != want {
				t.Errorf("%q: the file is %q, want %q", s, got, want)
			}
			if got := back.Replace(m[4]); !strings.HasPrefix(got, string(Clean(s+"."))) {
				t.Errorf("%q: the message is %q", s, got)
			}
			rest.WriteString(strings.TrimLeft(line, ":") + "\n")
		}
		if bad := harmlessText(rest.String()); bad != "" || seen == 0 {
			t.Errorf("%q: %s (%d annotations)", s, bad, seen)
		}
	})
}

// A test report is XML that strict readers take, and its text comes back.
func FuzzJUnit(f *testing.F) {
	seed(f)
	f.Fuzz(func(t *testing.T, s string, weight int) {
		b, err := InspectJUnit(told(s, weight))
		if err != nil {
			t.Fatal(err)
		}
		if bad := harmlessText(string(b)); bad != "" {
			t.Fatalf("%q: %s", s, bad)
		}
		var report struct {
			Suites []struct {
				Name  string `xml:"name,attr"`
				Cases []struct {
					Output string `xml:"system-out"`
				} `xml:"testcase"`
			} `xml:"testsuite"`
		}
		d := xml.NewDecoder(strings.NewReader(string(b)))
		if err := d.Decode(&report); err != nil {
			t.Fatalf("%q: %v", s, err)
		}
		if at := d.InputOffset(); strings.TrimSpace(string(b[at:])) != "" {
			t.Fatalf("%q: %q stands behind the report", s, b[at:])
		}
		if want := asXML(string(Clean("plans/" + s + ".toml"))); len(report.Suites) != 2 || report.Suites[1].Name != want {
			t.Errorf("%q: the suites are %+v, want one %q", s, report.Suites, want)
		}
	})
}

// asXML is text without the characters that XML has none for.
func asXML(s string) string {
	return strings.Map(func(r rune) rune {
		if r == '\uFFFE' || r == '\uFFFF' {
			return '\uFFFD'
		}
		return r
	}, s)
}

// ownFold is the HTML of our own in a report.
var ownFold = regexp.MustCompile(`(?m)^<details>\n<summary>[A-Za-z0-9 ,]+</summary>\n|^</details>\n`)

// A report in Markdown has no HTML but its own folds, each closed again; a stranger's
// text in it does nothing.
func FuzzInspectMarkdown(f *testing.F) {
	seed(f)
	f.Fuzz(func(t *testing.T, s string, weight int) {
		page := string(InspectMarkdown(told(s, weight), false))
		if bad := harmlessText(page); bad != "" || len(page) > MostMarkdown {
			t.Fatalf("%q: %s (%d bytes)", s, bad, len(page))
		}
		if a, b := strings.Count(page, "\n<details>\n"), strings.Count(page, "\n</details>\n"); a != b || a == 0 {
			t.Errorf("%q: %d folds begin and %d end", s, a, b)
		}
		if _, active := markdownText(foldless(page)); active != "" {
			t.Errorf("%q: the page holds a %s:\n%s", s, active, page)
		}
	})
}
