package rules_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// limitQuantities are what the table of limits may ask for. Beside figures and
// "unknown" there are words such as "open MSCL" and "none".
var limitQuantities = map[string]quantity{
	"uplink middle":                  func(in *inputs) string { return written(limits.For(in.text("band")).UplinkMid.V) },
	"least limit":                    (*inputs).leastLimit,
	"least limit of the band":        (*inputs).leastLimitOfBand,
	"base station coupling loss":     (*inputs).bscl,
	"watts":                          func(in *inputs) string { return written(in.dbm("dbm").Watt()) },
	"antenna gain cap":               (*inputs).gainCap,
	"spectrum without a radio row":   (*inputs).radioLeft,
	"compare":                        (*inputs).compared,
	"reference level":                (*inputs).densityAt,
	"greatest step between segments": (*inputs).greatestStep,
	"uplink left out":                (*inputs).uplinkLeftOut,
	"greatest height":                (*inputs).greatestHeight,
	"papers":                         (*inputs).papers,
	"conductor":                      (*inputs).conductor,
	"distance":                       (*inputs).distance,
	"figure":                         func(in *inputs) string { return allowed(in.code().Allows(in.num("value"))) },
	"line distance":                  (*inputs).lineDistance,
	"wind pressure":                  (*inputs).windPressure,
}

// measured is an input of a limit, unknown where the row does not give it.
func (in *inputs) measured(key string) limits.Input {
	if !in.has(key) {
		return limits.Input{}
	}
	return limits.Figure(in.num(key), true)
}

func (in *inputs) profile() *limits.Profile {
	p := limits.Builtin().Profile(in.text("profile"))
	if p == nil {
		in.fail(fmt.Errorf("there is no profile %q", in.text("profile")))
		return &limits.Profile{}
	}
	return p
}

func (in *inputs) referenceLevel() *limits.Level {
	l := in.profile().Level(in.text("level"))
	if l == nil {
		in.fail(fmt.Errorf("there is no level %q", in.text("level")))
		return &limits.Level{}
	}
	return l
}

func (in *inputs) code() *limits.CodeRow {
	if c := limits.Builtin().Code(in.text("code")); c != nil && c.Row(in.text("row")) != nil {
		return c.Row(in.text("row"))
	}
	in.fail(fmt.Errorf("there is no row %q in code %q", in.text("row"), in.text("code")))
	return &limits.CodeRow{}
}

func (in *inputs) query() (limits.Query, limits.Inputs) {
	q := limits.Query{Kind: in.text("kind"), Direction: in.textOr("direction", ""), Class: in.textOr("class", ""),
		Coupling: in.textOr("coupling", ""), State: in.textOr("state", ""), Per: in.textOr("per", ""), Band: in.textOr("band", "")}
	if in.has("isolation_control") {
		q.IsolationControl = source.Val[bool]{V: in.text("isolation_control") == "yes", Set: true}
	}
	given := limits.For(q.Band)
	if in.has("f") {
		given.UplinkMid = in.measured("f")
	}
	given.RSSI, given.MSCL, given.BSCL = in.measured("rssi"), in.measured("mscl"), in.measured("bscl")
	return q, given
}

// assessed is a whole assessment's value, or what it is not.
func assessed(a limits.Assessment) string {
	switch {
	case a.None():
		return "none"
	case len(a.Open) > 0:
		return "open " + strings.Join(a.Open[0].Missing, " ")
	case len(a.Left) > 0:
		return "left " + stretches(a.Left)
	}
	return written(a.Value)
}

func stretches(list []unit.Span) string {
	var out []string
	for _, s := range list {
		out = append(out, written(float64(s.Lo))+"-"+written(float64(s.Hi)))
	}
	return strings.Join(out, " ")
}

func (in *inputs) leastLimit() string {
	q, given := in.query()
	return assessed(in.profile().Assess(q, given))
}

func (in *inputs) leastLimitOfBand() string {
	q, given := in.query()
	byBand, _ := limits.Split(in.profile().Match(q))
	return assessed(limits.Least(q, given, byBand...))
}

func (in *inputs) bscl() string {
	v, how := in.profile().BSCLFrom(in.measured("measured"), in.measured("channel"))
	if !v.Known {
		return "unknown"
	}
	return written(v.V) + " " + how
}

// gainCap is the greatest antenna gain behind one of several equal outputs.
func (in *inputs) gainCap() string {
	q := limits.Query{Kind: "eirp", Direction: "uplink", Class: "industrial", Per: "channel", Band: in.text("band")}
	limit := in.profile().Assess(q, limits.For(q.Band))
	port := in.num("output") - 10*math.Log10(in.num("antennas")) - in.num("loss")
	return written(limit.Value - port)
}

func (in *inputs) radioLeft() string {
	q := limits.Query{Kind: "eirp", Class: limits.Radio, Band: in.text("band")}
	return stretches(in.profile().Assess(q, limits.For(q.Band)).Left)
}

func (in *inputs) compared() string {
	q, given := in.query()
	limit := in.profile().Assess(q, given)
	switch {
	case limit.Exceeded(in.num("value")):
		return "exceeded"
	case !limit.Whole():
		return "open"
	}
	return "inside"
}

func (in *inputs) densityAt() string { return figure(in.referenceLevel().DensityAt(in.mhz("f"))) }

// greatestStep is by how many per cent a reference level jumps at most where one
// segment ends and the next begins.
func (in *inputs) greatestStep() string {
	l := in.referenceLevel()
	greatest := 0.0
	for i := 1; i < len(l.Segments); i++ {
		at := l.Segments[i].MHz.V.Lo
		below, okBelow := (&limits.Level{Segments: l.Segments[i-1 : i]}).DensityAt(at)
		above, okAbove := l.DensityAt(at)
		if !okBelow || !okAbove {
			return "unknown"
		}
		greatest = max(greatest, 100*math.Abs(above/below-1))
	}
	return written(greatest)
}

func (in *inputs) uplinkLeftOut() string {
	p := in.profile().Permits(in.text("band"))
	switch {
	case !p.Known:
		return "open"
	case p.Whole():
		return "yes"
	}
	return stretches(p.Uplink)
}

func (in *inputs) greatestHeight() string {
	heights := in.profile().HeightsFor(in.text("band"), in.textOr("fixed", "no") == "yes")
	if len(heights) == 0 {
		return "none"
	}
	return written(heights[0].Most.V.Metres())
}

func (in *inputs) papers() string {
	var out []string
	for _, p := range in.profile().PapersFor(strings.Fields(in.text("bands"))...) {
		out = append(out, p.ID)
	}
	return strings.Join(out, " ")
}

func allowed(ok, known bool) string {
	switch {
	case !known:
		return "unknown"
	case ok:
		return "allowed"
	}
	return "refused"
}

func (in *inputs) conductor() string {
	size, err := unit.ParseGauge(in.text("size"))
	in.fail(err)
	return allowed(in.code().AllowsSize(in.textOr("material", ""), size))
}

func (in *inputs) distance() string {
	length, err := unit.ParseLength(in.text("length"))
	in.fail(err)
	return allowed(in.code().AllowsLength(length))
}

func (in *inputs) lineDistance() string {
	step := limits.Builtin().Code("us-nec-2020").Row("line-crane").StepFor(in.num("kv"))
	if step == nil {
		return "none"
	}
	return written(step.Length.V.Feet())
}

func (in *inputs) windPressure() string {
	step := limits.Builtin().Code("iec-60728-11").Row("wind-pressure").StepFor(in.num("height"))
	if step == nil {
		return "none"
	}
	return written(step.Value.V)
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
