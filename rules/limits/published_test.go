package limits

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// ask is one row's inputs by name.
type ask map[string]string

// quantities are what the table of published values may ask for. Each answers
// with a figure, or with words such as "open MSCL", "none" and "unknown".
var quantities = map[string]func(*testing.T, ask) string{
	"uplink middle":                  askUplinkMiddle,
	"least limit":                    askLeast,
	"least limit of the band":        askLeastOfBand,
	"base station coupling loss":     askBSCL,
	"watts":                          func(t *testing.T, a ask) string { return figure(unit.DBmOf(a.num(t, "dbm")).Watt()) },
	"antenna gain cap":               askGainCap,
	"spectrum without a radio row":   askRadioLeft,
	"compare":                        askCompare,
	"reference level":                askLevel,
	"greatest step between segments": askStep,
	"uplink left out":                askLeftOut,
	"greatest height":                askHeight,
	"papers":                         askPapers,
	"conductor":                      askConductor,
	"distance":                       askDistance,
	"figure":                         askFigure,
	"line distance":                  askLine,
	"wind pressure":                  askWind,
}

func TestPublishedValuesHold(t *testing.T) {
	f, err := os.Open("../../testdata/published/limits.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	for _, row := range rows[1:] {
		id, quantity, expected, source := row[0], row[1], row[3], row[6]
		answer, known := quantities[quantity]
		if !known {
			t.Errorf("%s: nobody answers %q", id, quantity)
			continue
		}
		tolerance, err := strconv.ParseFloat(row[4], 64)
		if err != nil {
			t.Errorf("%s: tolerance %q is no number", id, row[4])
			continue
		}
		if got := answer(t, readAsk(row[2])); !agrees(got, expected, tolerance) {
			t.Errorf("%s %s %s: %s, expected %s (%s)", id, quantity, row[2], got, expected, source)
		}
	}
	if !t.Failed() {
		t.Logf("%d published values hold", len(rows)-1)
	}
}

// agrees compares figures within the tolerance and words as they are.
func agrees(got, expected string, tolerance float64) bool {
	g, err1 := strconv.ParseFloat(got, 64)
	e, err2 := strconv.ParseFloat(expected, 64)
	if err1 == nil && err2 == nil {
		return math.Abs(g-e) <= tolerance+1e-9
	}
	return got == expected
}

func readAsk(s string) ask {
	a := ask{}
	for _, part := range strings.Split(s, ";") {
		key, value, _ := strings.Cut(part, "=")
		a[key] = value
	}
	return a
}

func (a ask) num(t *testing.T, key string) float64 {
	v, err := strconv.ParseFloat(a[key], 64)
	if err != nil {
		t.Errorf("input %s=%q is no number", key, a[key])
	}
	return v
}

func (a ask) input(t *testing.T, key string) Input {
	if a[key] == "" {
		return Input{}
	}
	return Figure(a.num(t, key), true)
}

func (a ask) profile(t *testing.T) *Profile {
	p := Builtin().Profile(a["profile"])
	if p == nil {
		t.Fatalf("there is no profile %q", a["profile"])
	}
	return p
}

func (a ask) row(t *testing.T) *CodeRow {
	c := Builtin().Code(a["code"])
	if c == nil || c.Row(a["row"]) == nil {
		t.Fatalf("there is no row %q in code %q", a["row"], a["code"])
	}
	return c.Row(a["row"])
}

func (a ask) query(t *testing.T) (Query, Inputs) {
	q := Query{Kind: a["kind"], Direction: a["direction"], Class: a["class"], Coupling: a["coupling"],
		State: a["state"], Per: a["per"], Band: a["band"]}
	if a["isolation_control"] != "" {
		q.IsolationControl = source.Val[bool]{V: a["isolation_control"] == "yes", Set: true}
	}
	in := For(a["band"])
	if a["f"] != "" {
		in.UplinkMid = a.input(t, "f")
	}
	in.RSSI, in.MSCL, in.BSCL = a.input(t, "rssi"), a.input(t, "mscl"), a.input(t, "bscl")
	return q, in
}

func figure(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// answerOf is a whole assessment's value, or what it is not.
func answerOf(a Assessment) string {
	switch {
	case a.None():
		return "none"
	case len(a.Open) > 0:
		return "open " + strings.Join(a.Open[0].Missing, " ")
	case len(a.Left) > 0:
		return "left " + spans(a.Left)
	}
	return figure(a.Value)
}

func spans(list []unit.Span) string {
	var out []string
	for _, s := range list {
		out = append(out, figure(float64(s.Lo))+"-"+figure(float64(s.Hi)))
	}
	return strings.Join(out, " ")
}

func askUplinkMiddle(t *testing.T, a ask) string { return figure(For(a["band"]).UplinkMid.V) }

func askLeast(t *testing.T, a ask) string {
	q, in := a.query(t)
	return answerOf(a.profile(t).Assess(q, in))
}

func askLeastOfBand(t *testing.T, a ask) string {
	q, in := a.query(t)
	byBand, _ := Split(a.profile(t).Match(q))
	return answerOf(Least(q, in, byBand...))
}

func askBSCL(t *testing.T, a ask) string {
	v, how := a.profile(t).BSCLFrom(a.input(t, "measured"), a.input(t, "channel"))
	if !v.Known {
		return "unknown"
	}
	return figure(v.V) + " " + how
}

// askGainCap is the greatest antenna gain behind one of several equal outputs.
func askGainCap(t *testing.T, a ask) string {
	q := Query{Kind: "eirp", Direction: "uplink", Class: "industrial", Per: "channel", Band: a["band"]}
	limit := a.profile(t).Assess(q, For(a["band"]))
	port := a.num(t, "output") - 10*math.Log10(a.num(t, "antennas")) - a.num(t, "loss")
	return figure(limit.Value - port)
}

func askRadioLeft(t *testing.T, a ask) string {
	q := Query{Kind: "eirp", Class: Radio, Band: a["band"]}
	return spans(a.profile(t).Assess(q, For(a["band"])).Left)
}

func askCompare(t *testing.T, a ask) string {
	q, in := a.query(t)
	limit := a.profile(t).Assess(q, in)
	switch {
	case limit.Exceeded(a.num(t, "value")):
		return "exceeded"
	case !limit.Whole():
		return "open"
	}
	return "inside"
}

func askLevel(t *testing.T, a ask) string {
	v, ok := a.profile(t).Level(a["level"]).DensityAt(unit.MHz(a.num(t, "f")))
	if !ok {
		return "unknown"
	}
	return figure(v)
}

func askStep(t *testing.T, a ask) string {
	l := a.profile(t).Level(a["level"])
	greatest := 0.0
	for i := 1; i < len(l.Segments); i++ {
		at := l.Segments[i].MHz.V.Lo
		greatest = max(greatest, 100*math.Abs(l.Segments[i].at(at)/l.Segments[i-1].at(at)-1))
	}
	return figure(greatest)
}

func askLeftOut(t *testing.T, a ask) string {
	p := a.profile(t).Permits(a["band"])
	switch {
	case !p.Known:
		return "open"
	case p.Whole():
		return "yes"
	}
	return spans(p.Uplink)
}

func askHeight(t *testing.T, a ask) string {
	heights := a.profile(t).HeightsFor(a["band"], a["fixed"] == "yes")
	if len(heights) == 0 {
		return "none"
	}
	return figure(heights[0].Most.V.Metres())
}

func askPapers(t *testing.T, a ask) string {
	var out []string
	for _, p := range a.profile(t).PapersFor(strings.Fields(a["bands"])...) {
		out = append(out, p.ID)
	}
	return strings.Join(out, " ")
}

func verdict(ok, known bool) string {
	switch {
	case !known:
		return "unknown"
	case ok:
		return "allowed"
	}
	return "refused"
}

func askConductor(t *testing.T, a ask) string {
	size, err := unit.ParseGauge(a["size"])
	if err != nil {
		t.Error(err)
	}
	return verdict(a.row(t).AllowsSize(a["material"], size))
}

func askDistance(t *testing.T, a ask) string {
	length, err := unit.ParseLength(a["length"])
	if err != nil {
		t.Error(err)
	}
	return verdict(a.row(t).AllowsLength(length))
}

func askFigure(t *testing.T, a ask) string { return verdict(a.row(t).Allows(a.num(t, "value"))) }

func askLine(t *testing.T, a ask) string {
	step := Builtin().Code("us-nec-2020").Row("line-crane").StepFor(a.num(t, "kv"))
	if step == nil {
		return "none"
	}
	return figure(step.Length.V.Feet())
}

func askWind(t *testing.T, a ask) string {
	step := Builtin().Code("iec-60728-11").Row("wind-pressure").StepFor(a.num(t, "height"))
	if step == nil {
		return "none"
	}
	return figure(step.Value.V)
}

// The slack of printed powers is what separates 5 W from 37 dBm and 0.05 W from
// 17 dBm, so that neither reading of the instrument breaks the other's limit.
func TestPrintedPowersLieWithinTheSlack(t *testing.T) {
	for _, c := range []struct{ dbm, watt float64 }{{17, 0.05}, {30, 1}, {37, 5}} {
		exact := unit.DBmOfWatt(c.watt).Value()
		if rf.Exceeds(c.dbm, exact+0.05) {
			t.Errorf("%v dBm exceeds %v W with the slack", c.dbm, c.watt)
		}
	}
}
