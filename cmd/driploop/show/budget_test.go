package show

import (
	"encoding/csv"
	"encoding/json"
	"math"
	"path"
	"regexp"
	"strconv"
	"strings"
	"testing"
	"unicode/utf8"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// demoBudgets are the budgets of the demo's plans, and those of other workspaces, by
// workspace and file.
func demoBudgets(t *testing.T) map[string]*Budget {
	t.Helper()
	out := map[string]*Budget{}
	for _, dir := range []string{"../../../testdata/saltmarsh", "../../../testdata/hostile", "../../../testdata/readme"} {
		tree, err := source.Disk(dir)
		if err != nil {
			t.Fatal(err)
		}
		today, err := unit.ParseDate("2026-12-01")
		if err != nil {
			t.Fatal(err)
		}
		firm, err := rules.Load(tree, rules.Options{Today: today})
		if err != nil {
			t.Fatal(err)
		}
		for _, e := range firm.PlanFiles {
			if c, broken := firm.Case(e); !broken {
				out[path.Base(dir)+"/"+e.Path] = &Budget{Budget: c.Budget()}
			}
		}
	}
	if len(out) < 6 {
		t.Fatalf("there are only %d budgets", len(out))
	}
	return out
}

// No line of a budget is wider than its page, with and without the addends.
func TestBudgetWidth(t *testing.T) {
	for name, b := range demoBudgets(t) {
		for _, width := range []int{32, 40, 60, 80, 100} {
			for _, terms := range []bool{false, true} {
				b.Terms = terms
				text, err := b.Text(Page{Width: width})
				if err != nil {
					t.Fatal(err)
				}
				for line := range strings.Lines(string(text)) {
					if n := utf8.RuneCountInString(strings.TrimRight(line, "\n")); n > width {
						t.Errorf("%s at %d columns: a line has %d: %s", name, width, n, line)
					}
				}
			}
		}
	}
}

var minusZero = regexp.MustCompile(`[-−]0(\.0+)?($|[^.\d])`)

// No form prints a negative zero, or what is no number.
func TestBudgetFigures(t *testing.T) {
	for name, b := range demoBudgets(t) {
		b.Terms = true
		for form, page := range budgetForms(t, b) {
			if m := minusZero.FindString(page); m != "" {
				t.Errorf("%s as %s prints %q", name, form, m)
			}
			for _, bad := range []string{"NaN", "Inf", "%!"} {
				if strings.Contains(page, bad) {
					t.Errorf("%s as %s prints %s", name, form, bad)
				}
			}
		}
	}
	for _, s := range []string{"−0.00", "-0", "x −0.0 dB"} {
		if !minusZero.MatchString(s) {
			t.Errorf("%q is not seen as a negative zero", s)
		}
	}
}

func budgetForms(t *testing.T, b *Budget) map[string]string {
	t.Helper()
	text, err := b.Text(Page{Width: 80})
	if err != nil {
		t.Fatal(err)
	}
	file, err := b.CSV()
	if err != nil {
		t.Fatal(err)
	}
	object, err := b.JSON()
	if err != nil {
		t.Fatal(err)
	}
	return map[string]string{"text": string(text), "markdown": string(b.Markdown()), "csv": string(file), "json": string(object)}
}

// Every form says what its figures were made from.
func TestBudgetOrigin(t *testing.T) {
	b := demoBudgets(t)["saltmarsh/plans/quay-lane.toml"]
	b.Case.Firm.Workspace.Weights = []rules.Override{{Rule: "loss/feed",
		Weight: source.Val[string]{V: "note", Set: true}, Because: source.Val[string]{V: "old masts", Set: true}}}
	for form, page := range budgetForms(t, b) {
		tree := "worktree"
		if form == "text" || form == "markdown" {
			tree = "the files as they are"
		}
		page = strings.Join(strings.Fields(page), " ")
		for _, want := range []string{"plans/quay-lane.toml", "us-fixed-wideband", "2026-12-01", "review", tree, "loss/feed weighs note here: old masts"} {
			if !strings.Contains(page, want) {
				t.Errorf("the form %s does not say %q", form, want)
			}
		}
	}
}

// planBudget is a budget as a program reads it.
type planBudget struct {
	Bands []struct {
		Device, Band, Direction string
		MHz                     float64
		Lines                   []struct {
			From, To string
			Loss     *float64 `json:"loss_db"`
			Least    *float64 `json:"least_db"`
			Terms    []struct {
				Least    float64 `json:"least_db"`
				Greatest float64 `json:"loss_db"`
			}
		}
		Chains []struct {
			Name  string   `json:"chain"`
			Start *float64 `json:"start_dbm"`
			Lacks []string
		}
		Stages []struct {
			Chain, At string
			Gain      float64 `json:"gain_db"`
			Total     float64 `json:"total_db"`
			NF        float64 `json:"nf_db"`
			Level     float64 `json:"level_dbm"`
			Held      bool    `json:"at_rated_output"`
		}
		Runs    *float64 `json:"gain_runs_db"`
		BoundBy string   `json:"bound_by"`
		EIRP    *float64 `json:"eirp_dbm"`
		Worst   *struct {
			EIRP float64 `json:"eirp_dbm"`
			Out  float64 `json:"output_dbm"`
			Gain float64 `json:"antenna_gain_dbi"`
			Loss float64 `json:"least_loss_db"`
		}
		Inputs []struct {
			RSRP  float64 `json:"rsrp_dbm"`
			Load  float64 `json:"full_load_db"`
			Gain  float64 `json:"antenna_gain_dbi"`
			Feed  float64 `json:"feed_db"`
			Level float64 `json:"level_dbm"`
		}
		Input  *float64 `json:"input_dbm"`
		Limits []struct {
			Rule, Of, Unit, Outcome string
			Value, Limit, Margin    *float64
			Tolerance               float64
			Lacks                   []string
		}
	}
	Areas []struct {
		Name, Band, Operator string
		Survey               *float64 `json:"survey_dbm"`
		RSRP                 *float64 `json:"rsrp_dbm"`
		Uplink               *float64 `json:"uplink_dbm"`
		Terms                []struct{ DB float64 }
		UplinkTerms          []struct{ DB float64 } `json:"uplink_terms"`
	}
}

// The JSON form has the keys of the interface, whatever else it has: an entry for
// each band and direction at its middle frequency, and for each area and signal.
func TestBudgetJSONKeys(t *testing.T) {
	page, err := demoBudgets(t)["saltmarsh/plans/quay-lane.toml"].JSON()
	if err != nil {
		t.Fatal(err)
	}
	var top map[string]any
	if err := json.Unmarshal(page, &top); err != nil {
		t.Fatal(err)
	}
	hasKeys(t, top, "plan", "at", "today", "profile", "overrides", "bands", "areas")
	seen := map[string]float64{}
	for _, entry := range top["bands"].([]any) {
		x := entry.(map[string]any)
		hasKeys(t, x, "band", "direction", "mhz", "lines", "stages", "gain_runs_db", "bound_by", "eirp_dbm", "worst", "limits")
		for _, l := range x["lines"].([]any) {
			hasKeys(t, l.(map[string]any), "from", "to", "loss_db", "least_db")
		}
		for _, s := range x["stages"].([]any) {
			hasKeys(t, s.(map[string]any), "at", "gain_db", "total_db", "nf_db", "level_dbm")
		}
		for _, l := range x["limits"].([]any) {
			hasKeys(t, l.(map[string]any), "rule", "value", "limit", "margin", "tolerance", "outcome")
		}
		hasKeys(t, x["worst"].(map[string]any), "mhz", "eirp_dbm")
		seen[x["band"].(string)+" "+x["direction"].(string)] = x["mhz"].(float64)
	}
	for _, a := range top["areas"].([]any) {
		hasKeys(t, a.(map[string]any), "name", "band", "operator", "mhz", "rsrp_dbm")
	}
	if len(seen) != 10 || seen["B12 uplink"] != 707.5 || seen["B4 downlink"] != 2132.5 {
		t.Errorf("the entries are %v, not five bands in two directions at their middle", seen)
	}
}

func hasKeys(t *testing.T, object map[string]any, keys ...string) {
	t.Helper()
	for _, k := range keys {
		if _, ok := object[k]; !ok {
			t.Errorf("the key %s is not in %v", k, object)
		}
	}
}

func readBudget(t *testing.T, b *Budget) planBudget {
	t.Helper()
	page, err := b.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var out planBudget
	if err := json.Unmarshal(page, &out); err != nil {
		t.Fatal(err)
	}
	return out
}

// near allows what rounding to three decimals leaves of a sum of up to twenty.
func near(a, b float64) bool { return math.Abs(a-b) <= 0.011 }

// The figures of the JSON form add up: lines from their terms, a level chart from
// its stages, the input from the signals, an EIRP from its addends, margins from
// value and limit.
func TestBudgetJSONAddsUp(t *testing.T) {
	lines, stages, margins := 0, 0, 0
	for name, b := range demoBudgets(t) {
		for _, x := range readBudget(t, b).Bands {
			at := name + " " + x.Device + " " + x.Band + " " + x.Direction
			for _, l := range x.Lines {
				least, greatest := 0.0, 0.0
				for _, term := range l.Terms {
					least, greatest = least+term.Least, greatest+term.Greatest
				}
				if l.Loss != nil && (!near(least, *l.Least) || !near(greatest, *l.Loss)) {
					t.Errorf("%s: %s to %s loses %v to %v, its terms %v to %v", at, l.From, l.To, *l.Least, *l.Loss, least, greatest)
				}
				lines++
			}
			for _, c := range x.Chains {
				if (c.Start == nil) == (len(c.Lacks) == 0) {
					t.Errorf("%s: the chain %s has no start and lacks nothing, or both", at, c.Name)
				}
				if c.Start == nil {
					continue
				}
				level, total := *c.Start, 0.0
				for _, s := range x.Stages {
					if s.Chain != c.Name {
						continue
					}
					level, total = level+s.Gain, total+s.Gain
					if s.Held && s.Level < level {
						level = s.Level
					}
					if !near(level, s.Level) || !near(total, s.Total) || s.NF < 0 {
						t.Errorf("%s: the stage %s of %s is at %v dBm and %v dB, the sum is %v and %v", at, s.At, c.Name, s.Level, s.Total, level, total)
					}
					stages++
				}
			}
			mw := 0.0
			for _, i := range x.Inputs {
				if !near(i.RSRP+i.Load+i.Gain-i.Feed, i.Level) {
					t.Errorf("%s: an input of %v dBm, not the sum of %v", at, i.Level, i)
				}
				mw += math.Pow(10, i.Level/10)
			}
			if len(x.Inputs) > 0 && !near(10*math.Log10(mw), *x.Input) {
				t.Errorf("%s: the input is %v dBm, its signals together %v", at, *x.Input, 10*math.Log10(mw))
			}
			if w := x.Worst; w != nil && (!near(w.Out+w.Gain-w.Loss, w.EIRP) || x.Direction == "uplink" && *x.EIRP > w.EIRP) {
				t.Errorf("%s: an EIRP of %v dBm at worst, not the sum of %v, or below that at the middle", at, w.EIRP, *w)
			}
			for _, l := range x.Limits {
				if l.Margin != nil && !near(*l.Limit-*l.Value, *l.Margin) {
					t.Errorf("%s: %s has %v against %v and a margin of %v", at, l.Rule, *l.Value, *l.Limit, *l.Margin)
				}
				if (l.Outcome == "unknown") == (l.Margin != nil && len(l.Lacks) == 0) {
					t.Errorf("%s: %s is %s with margin %v and lacks %v", at, l.Rule, l.Outcome, l.Margin, l.Lacks)
				}
				if l.Unit == "" {
					t.Errorf("%s: %s has no unit", at, l.Rule)
				}
				margins++
			}
		}
	}
	if lines < 50 || stages < 100 || margins < 100 {
		t.Errorf("only %d lines, %d stages, %d limits were looked at", lines, stages, margins)
	}
}

// What arrives in an area is the sum of its addends, both ways.
func TestBudgetAreasAddUp(t *testing.T) {
	looked := 0
	for name, b := range demoBudgets(t) {
		for _, a := range readBudget(t, b).Areas {
			if a.RSRP == nil || a.Uplink == nil {
				continue
			}
			looked++
			down, up := *a.Survey, 23.0
			for _, term := range a.Terms {
				down += term.DB
			}
			for _, term := range a.UplinkTerms {
				up += term.DB
			}
			if !near(down, *a.RSRP) || !near(up, *a.Uplink) {
				t.Errorf("%s: %s in %s of %s has %v and %v dBm, the sums are %v and %v", name, a.Name, a.Band, a.Operator, *a.RSRP, *a.Uplink, down, up)
			}
		}
	}
	if looked < 10 {
		t.Errorf("only %d areas were looked at", looked)
	}
}

// The CSV form has every limit of the JSON form, with the same figures, and each of
// its rows has a figure with a unit or says what it lacks.
func TestBudgetCSV(t *testing.T) {
	for name, b := range demoBudgets(t) {
		page, err := b.CSV()
		if err != nil {
			t.Fatal(err)
		}
		rows, err := csv.NewReader(strings.NewReader(string(page))).ReadAll()
		if err != nil {
			t.Fatal(err)
		}
		limits := map[string]bool{}
		for _, r := range rows[1:] {
			kind, value, measure, says := r[0], r[7], r[8], r[13]
			if kind != "about" && (measure == "" || value == "" && says == "" && r[12] == "") {
				t.Errorf("%s: a row without figure and reason, or without unit: %q", name, r)
			}
			if kind == "limit" {
				limits[strings.Join([]string{r[3], r[1], r[2], r[6], r[5], value, r[9], r[10], r[12]}, "|")] = true
			}
		}
		for _, x := range readBudget(t, b).Bands {
			for _, l := range x.Limits {
				key := strings.Join([]string{x.Device, x.Band, x.Direction, l.Rule, l.Of, plainOr(l.Value), plainOr(l.Limit), plainOr(l.Margin), l.Outcome}, "|")
				if !limits[key] {
					t.Errorf("%s: no row for the limit %s", name, key)
				}
			}
		}
	}
}

func plainOr(v *float64) string {
	if v == nil {
		return ""
	}
	return strconv.FormatFloat(*v, 'f', -1, 64)
}

// The text form shows the tightest margin before all bands, and no band has a
// smaller one.
func TestBudgetTightestFirst(t *testing.T) {
	margin := regexp.MustCompile(`margin (−?[\d.]+) dB`)
	for name, b := range demoBudgets(t) {
		smallest := math.Inf(1)
		for _, x := range readBudget(t, b).Bands {
			for _, l := range x.Limits {
				if l.Margin != nil && l.Outcome != "advice" {
					smallest = min(smallest, *l.Margin)
				}
			}
		}
		text := strings.Join(strings.Fields(string(b.Markdown())), " ")
		m := margin.FindStringSubmatch(text)
		switch {
		case math.IsInf(smallest, 1):
			if m != nil {
				t.Errorf("%s has no margin and names %s", name, m[0])
			}
		case m == nil:
			t.Errorf("%s names no margin, the smallest is %v", name, smallest)
		default:
			got, err := strconv.ParseFloat(strings.Replace(m[1], "−", "-", 1), 64)
			if err != nil || !near(got, smallest) {
				t.Errorf("%s names the margin %s, the smallest is %v", name, m[1], smallest)
			}
		}
	}
}
