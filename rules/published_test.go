package rules_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/rf"
)

// asked are a row's inputs by name.
type asked map[string]string

// practices are what the table of common practice may ask for. The answers come
// from the rules themselves, run over a small workspace, or from the catalog.
var practices = map[string]func(*testing.T, asked) string{
	"left out":               askLeftOut,
	"left out mhz":           askLeftOutWidth,
	"covered per cent":       askCovered,
	"capacity kept per cent": askCapacityKept,
	"xpd as read":            askXPD,
	"cable fit":              askFit,
	"cable fit expects":      askFitExpects,
	"series mhz":             askSeries,
}

func TestPublishedPracticeHolds(t *testing.T) {
	f, err := os.Open("../testdata/published/practice.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	ids := map[string]bool{}
	for _, row := range rows[1:] {
		id, quantity, inputs, expected, tolerance, from := row[0], row[1], row[2], row[3], row[4], row[6]
		answer, known := practices[quantity]
		if !known || ids[id] || from == "" || row[7] == "" {
			t.Errorf("%s: nobody answers %q, or the row has no source, or stands twice", id, quantity)
			continue
		}
		ids[id] = true
		if got := answer(t, readAsked(inputs)); !answers(t, got, expected, tolerance) {
			t.Errorf("%s %s %s: %s, expected %s (%s)", id, quantity, inputs, got, expected, from)
		}
	}
	if len(ids) == 0 {
		t.Error("there is nothing to hold the table against")
	}
	if !t.Failed() {
		t.Logf("%d published values hold", len(ids))
	}
}

// answers compares figures within a tolerance, and words as they are where the row
// has none.
func answers(t *testing.T, got, expected, tolerance string) bool {
	if tolerance == "" {
		return got == expected
	}
	within, err := strconv.ParseFloat(tolerance, 64)
	if err != nil {
		t.Errorf("tolerance %q is no number", tolerance)
	}
	g, gotErr := strconv.ParseFloat(got, 64)
	e, expectedErr := strconv.ParseFloat(expected, 64)
	return gotErr == nil && expectedErr == nil && math.Abs(g-e) <= within
}

func readAsked(s string) asked {
	a := asked{}
	for pair := range strings.SplitSeq(s, ";") {
		k, v, _ := strings.Cut(pair, "=")
		a[k] = v
	}
	return a
}

func (a asked) text(t *testing.T, key string) string {
	if a[key] == "" {
		t.Errorf("input %q is missing", key)
	}
	return a[key]
}

func (a asked) list(t *testing.T, key string) []float64 {
	var out []float64
	for word := range strings.FieldsSeq(a.text(t, key)) {
		v, err := strconv.ParseFloat(word, 64)
		if err != nil {
			t.Errorf("input %q: %v", key, err)
		}
		out = append(out, v)
	}
	return out
}

// spans reads stretches of spectrum as pairs of ends.
func (a asked) spans(t *testing.T, key string) []unit.Span {
	var out []unit.Span
	ends := a.list(t, key)
	for i := 1; i < len(ends); i += 2 {
		out = append(out, unit.Span{Lo: unit.MHz(ends[i-1]), Hi: unit.MHz(ends[i])})
	}
	return out
}

// told runs the rules over a workspace and lists what one of them says.
func told(t *testing.T, rule string, tree map[string]string) []*rules.Finding {
	t.Helper()
	tree[rules.WorkspaceFile] = "[workspace]\nname = \"published values\"\n"
	var out []*rules.Finding
	for _, f := range findings(t, memory{tree}, today(t, "")) {
		switch {
		case f.Rule.Name == rule:
			out = append(out, f)
		case f.Rule.Area() == "file":
			t.Errorf("the workspace of a published value is not in order: %s", f.Says)
		}
	}
	return out
}

// antenna lets an antenna with the ranges at hand receive one band.
func antenna(t *testing.T, a asked) *rules.Finding {
	var ranges []string
	for _, s := range a.spans(t, "covers") {
		ranges = append(ranges, fmt.Sprintf("{ mhz = [%v, %v], gain_dbi = 7 }", float64(s.Lo), float64(s.Hi)))
	}
	band := a.text(t, "band")
	all := told(t, "band/antenna", map[string]string{
		"catalog/own.toml": "[part.PANEL]\nkind = \"antenna\"\nport.rf = { connector = \"N male\", impedance_ohm = 50 }\nrange = [" + strings.Join(ranges, ", ") + "]\n" +
			"[part.RADIO]\nkind = \"router\"\nbands = [\"" + band + "\"]\nport.main = { connector = \"N female\", impedance_ohm = 50 }\n",
		"plans/a.toml": "[job]\nbands = [\"" + band + "\"]\n[device]\npanel = { part = \"PANEL\" }\nradio = { part = \"RADIO\" }\n" +
			"[[joint]]\na = \"panel\"\nb = \"radio\"\n",
	})
	switch len(all) {
	case 0:
		return nil
	case 1:
		return all[0]
	}
	t.Errorf("%d findings on one antenna", len(all))
	return nil
}

func figureOf(f *rules.Finding, name string) string {
	for _, x := range f.Figures {
		if x.Name == name {
			return fmt.Sprint(rules.Round(x.Value))
		}
	}
	return "no " + name
}

func askLeftOutWidth(t *testing.T, a asked) string {
	if f := antenna(t, a); f != nil {
		return figureOf(f, "left_out_mhz")
	}
	return "0"
}

func askLeftOut(t *testing.T, a asked) string {
	f := antenna(t, a)
	if f == nil {
		return "nothing"
	}
	_, left, _ := strings.Cut(f.Says, " leaves out ")
	left, _, _ = strings.Cut(left, "; its ranges")
	return left
}

// askCovered is how much of a stretch some ranges cover.
func askCovered(t *testing.T, a asked) string {
	whole := a.spans(t, "span")[0]
	var open unit.MHz
	for _, s := range whole.Minus(a.spans(t, "covers")...) {
		open += s.Width()
	}
	return fmt.Sprint(100 * float64(1-open/whole.Width()))
}

// askCapacityKept is the capacity of two streams over polarizations that leak into
// each other, against two that do not.
func askCapacityKept(t *testing.T, a asked) string {
	snr := unit.DB(a.list(t, "snr")[0])
	leaky, ok := rf.CrossPolar(unit.DB(a.list(t, "xpd")[0])).Capacity(snr)
	clean, okClean := rf.Channel{{1, 0}, {0, 1}}.Capacity(snr)
	if !ok || !okClean {
		return "unknown"
	}
	return fmt.Sprint(100 * leaky / clean)
}

func askXPD(t *testing.T, a asked) string {
	file, _ := source.NewFile("catalog/own.toml", []byte("[part.PANEL]\nkind = \"antenna\"\nxpd_db = "+a.text(t, "xpd_db")+"\n"))
	doc, problems := source.Parse(file)
	parts, more := catalog.ReadParts(doc)
	if len(problems)+len(more) > 0 || len(parts) != 1 || !parts[0].Antenna.XPD.Set {
		return "refused"
	}
	return fmt.Sprint(parts[0].Antenna.XPD.V)
}

// fit holds the points of a cable against one curve.
func fit(t *testing.T, a asked) *rules.Finding {
	mhz, db := a.list(t, "mhz"), a.list(t, "db")
	var points []string
	for i := range mhz {
		points = append(points, fmt.Sprintf("[%v, %v]", mhz[i], db[i]))
	}
	for _, f := range told(t, "catalog/fit", map[string]string{
		"catalog/own.toml": "[part.CX]\nkind = \"cable\"\nimpedance_ohm = 50\nloss_db_per_" + a.text(t, "unit") + " = [" + strings.Join(points, ", ") + "]\n",
	}) {
		return f
	}
	return nil
}

func askFit(t *testing.T, a asked) string {
	switch f := fit(t, a); {
	case f == nil:
		return "holds"
	case f.Outcome == rules.Fails:
		return "refused"
	default:
		return f.Outcome.String()
	}
}

func askFitExpects(t *testing.T, a asked) string {
	if f := fit(t, a); f != nil {
		return figureOf(f, "expected_db_per_100m")
	}
	return "nothing"
}

func askSeries(t *testing.T, a asked) string {
	s, ok := catalog.LookSeries(a.text(t, "series"))
	if !ok {
		return "no such series"
	}
	max, known := s.LimitMHz(a.list(t, "ohm")[0])
	if !known {
		return "unknown"
	}
	return fmt.Sprint(float64(max))
}
