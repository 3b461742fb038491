package rules_test

import (
	"bufio"
	"maps"
	"math"
	"os"
	"slices"
	"strconv"
	"strings"
	"testing"

	"driploop/rules"
	"driploop/rules/rf"
)

const workedPage = "../testdata/published/worked-quay-lane.md"

// The page works one band of a demo plan out by hand. Each of its figures is held
// against the budget within a hundredth of a decibel, and each figure of the budget
// in that band must stand on the page.
func TestWorkedByHand(t *testing.T) {
	want := workedFigures(t)
	c := loadCase(t, memory{files: files(t, "../testdata/saltmarsh")}, "quay-lane")
	got := sheet{}
	b := c.Budget()
	for _, direction := range []string{"downlink", "uplink"} {
		got.band(band(t, b, "B12", direction))
	}
	for _, r := range b.Areas {
		if r.Area.Name.V == "counter" && r.Signal.Band.V == "B12" {
			got.area(r)
		}
	}
	for _, name := range slices.Sorted(maps.Keys(want)) {
		v, ok := got[name]
		switch {
		case !ok:
			t.Errorf("%s is worked out, and the budget has no such figure", name)
		case !(math.Abs(v-want[name]) <= 0.01):
			t.Errorf("%s: %.4f by hand, %.4f in the budget", name, want[name], v)
		}
	}
	for _, name := range slices.Sorted(maps.Keys(got)) {
		if _, ok := want[name]; !ok {
			t.Errorf("%s (%.4f) is not worked out", name, got[name])
		}
	}
	t.Logf("%d figures worked out by hand hold", len(want))
}

// workedFigures reads the block of figures: a name, an equals sign, a number.
func workedFigures(t *testing.T) map[string]float64 {
	f, err := os.Open(workedPage)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	out, inside := map[string]float64{}, false
	lines := bufio.NewScanner(f)
	for lines.Scan() {
		line := lines.Text()
		if strings.HasPrefix(line, "```") {
			inside = line == "```figures"
			continue
		}
		if !inside {
			continue
		}
		name, value, ok := strings.Cut(line, " = ")
		v, err := strconv.ParseFloat(strings.TrimSpace(value), 64)
		name = strings.TrimSpace(name)
		if _, twice := out[name]; !ok || err != nil || twice {
			t.Fatalf("%q cannot be read, or stands there twice", line)
		}
		out[name] = v
	}
	if err := lines.Err(); err != nil || len(out) < 80 {
		t.Fatalf("%d figures were read (%v), 80 or more are expected", len(out), err)
	}
	return out
}

// sheet holds figures of a budget by the names that the page gives them.
type sheet map[string]float64

func (s sheet) loss(name string, l rf.Loss) {
	if l.Least == l.Greatest {
		s[name] = float64(l.Nominal)
		return
	}
	s[name+" / least"], s[name+" / greatest"] = float64(l.Least), float64(l.Greatest)
}

// band takes one direction over: the feed, the legs to dome and dome-2, what comes
// in and runs, the stages by dome, and the limits.
func (s sheet) band(x *rules.BudgetBand) {
	d := x.Direction + " / "
	for _, l := range x.Lines {
		name := d + "feed"
		if server := l.Line.To.Device.ID; server == "dome" || server == "dome-2" {
			name = d + "leg to " + server
		} else if server != "amp" {
			continue
		}
		for _, t := range l.Sum.Terms() {
			s.loss(name+" / "+t.What, t.Loss)
		}
		s.loss(name+" / in all", l.Sum.Loss)
	}
	if x.Input.OK {
		s[d+"input"] = x.Input.V.Value()
	}
	s[d+"set"], s[d+"runs"], s[d+"EIRP"] = float64(x.Set.V), float64(x.Runs.V.Gain), x.EIRP.V.Value()
	s[d+"EIRP at rated output, worst edge"] = x.Worst.Worst.EIRP.Most.Value()
	ch := x.Chains[0]
	s[d+"start"] = ch.Start.Value()
	for _, g := range ch.Stages {
		stage := d + "stage " + g.At + " / "
		s[stage+"total"], s[stage+"noise figure"], s[stage+"level"] = float64(g.Total), float64(g.NF), g.Level.Value()
	}
	s.limits(d, x.Limits)
}

// limits takes the limits over, and the noise that is held against them; the other
// figures stand there already.
func (s sheet) limits(d string, checks []rules.LimitCheck) {
	for _, l := range checks {
		name := d + l.Rule
		switch {
		case l.Of != "":
			name += " " + l.Of
		case strings.Contains(l.Formula, "RSSI") && l.Rule == "gain/noise":
			s[name+" by RSSI / limit"] = l.Limit.V
			continue
		}
		s[name+" / limit"] = l.Limit.V
		if l.Rule == "gain/noise" {
			s[name+" / value"] = l.Value.V
		}
	}
}

// area takes the way to a phone and back over. Names of terms end where the page
// stops naming them: before what binds, whom it leads to, what the path is made of.
func (s sheet) area(r *rules.AreaReach) {
	short := func(what string) string {
		for _, name := range []string{"gain that runs", "leg", "path to the base station"} {
			if strings.HasPrefix(what, name) {
				return name
			}
		}
		if strings.Contains(what, "free space") {
			return "path"
		}
		return what
	}
	for _, t := range r.Terms {
		s["counter / downlink / "+short(t.Words())] = float64(t.DB)
	}
	for _, t := range r.Up.V.Terms {
		s["counter / uplink / "+short(t.Words())] = float64(t.DB)
	}
	s["counter / downlink / level"], s["counter / uplink / level"] = r.RSRP.V.Value(), r.Up.V.Level.Value()
	s["counter / uplink / needed"] = r.Up.V.Needed.Value()
}
