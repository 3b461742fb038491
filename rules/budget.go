package rules

import (
	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// Budget is the radio chain of a plan laid open: what a lead reads before signing.
type Budget struct {
	Case  *Case
	Bands []*BudgetBand // by amplifier or router, band and direction
	Areas []*AreaReach
}

// BudgetBand is one direction of one amplifier or router in one planned band, at
// the middle frequency.
type BudgetBand struct {
	Device    *bom.Device
	Band      string
	Direction string
	MHz       unit.MHz
	Lines     []BudgetLine
	Chains    []StageChain
	Input     Known[unit.DBm] // composite at the port that the direction enters
	Runs      Known[rf.Running]
	Set       Known[unit.DB]
	EIRP      Known[unit.DBm] // downlink: at the gain that runs; uplink: at rated output
	Worst     *Antenna        // at rated output and least loss, over the edges
	Limits    []LimitCheck
}

// BudgetLine is a line at the band's middle frequency.
type BudgetLine struct {
	Line *bom.Line
	Sum  LineSum
}

// StageChain is the way of a signal from the first antenna's port to one server
// antenna, or back.
type StageChain struct {
	To     string
	Start  unit.DBm
	From   string
	Stages []BudgetStage
	Lacks  []Lack
}

// BudgetStage is one stage with what the chain has come to behind it. Losses are
// the greatest; the gain is the one that runs.
type BudgetStage struct {
	At    string
	Gain  unit.DB
	Total unit.DB
	NF    unit.DB // of the chain so far
	Level unit.DBm
	Held  bool // at the rated output: the amplifier turns itself down
}

// LimitCheck is one limit with the figure held against it. Outcome is "holds",
// "fails", "at-worst" or "unknown".
type LimitCheck struct {
	Rule      string
	Value     Known[float64]
	Limit     Known[float64]
	Tolerance float64
	Unit      string
	Outcome   string
	Formula   string
	Basis     string
}

// Margin is limit less value; false where one of them is not known.
func (l LimitCheck) Margin() (float64, bool) {
	return l.Limit.V - l.Value.V, l.Limit.OK && l.Value.OK
}

// Budget lays the chain of a case open.
func (c *Case) Budget() *Budget {
	b := &Budget{Case: c, Areas: c.Reach()}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			if !d.Span.Empty() {
				b.Bands = append(b.Bands, c.budgetBand(x, d))
			}
		}
	}
	for _, x := range c.Chain().Radios {
		b.Bands = append(b.Bands, c.radioBudget(x))
	}
	return b
}

func (c *Case) budgetBand(x *BandChain, d *Direction) *BudgetBand {
	f := d.Span.Mid()
	out := &BudgetBand{Device: x.Amp, Band: x.Band.Name, Direction: d.Name, MHz: f, Input: d.Input, Runs: d.Runs, Set: d.Set, Worst: d.strongest()}
	for _, l := range append(append([]*bom.Line(nil), x.Feeds...), x.Legs...) {
		out.Lines = append(out.Lines, BudgetLine{l, c.Sum(l, f)})
	}
	out.Chains = c.chains(x, d, f)
	out.EIRP = c.runningEIRP(x, d)
	out.Limits = c.limitChecks(x, d)
	return out
}

// runningEIRP is what the strongest antenna radiates: in the downlink from the
// composite input at the gain that runs, in the uplink at the rated output.
func (c *Case) runningEIRP(x *BandChain, d *Direction) Known[unit.DBm] {
	s := d.strongest()
	if s == nil {
		return unknown[unit.DBm](x.Amp.At, "an EIRP in "+x.Band.Name)
	}
	if d.Name == "uplink" {
		return known(s.Mid.EIRP.Most)
	}
	if !d.Runs.OK || !d.Input.OK || !d.Runs.V.On {
		return Known[unit.DBm]{Lacks: append(d.Runs.Lacks, d.Input.Lacks...)}
	}
	out := d.Input.V.Plus(d.Runs.V.Gain)
	return known(out.Plus(s.Mid.Gain - s.Mid.Line.Loss.Least))
}

// chains follows the direction stage by stage, one chain for each server antenna.
func (c *Case) chains(x *BandChain, d *Direction, f unit.MHz) []StageChain {
	var out []StageChain
	for _, feed := range x.Feeds {
		for _, leg := range x.Legs {
			out = append(out, c.stageChain(x, d, feed, leg, f))
		}
	}
	return out
}

func (c *Case) stageChain(x *BandChain, d *Direction, feed, leg *bom.Line, f unit.MHz) StageChain {
	first, last, from, to := feed, leg, feed.From, leg.To
	if d.Name == "uplink" {
		first, last, from, to = leg, feed, leg.To, feed.From
	}
	ch := StageChain{From: from.Name(), To: to.Name()}
	one, two := c.Sum(first, f), c.Sum(last, f)
	start, startLacks := c.startLevel(x, d, one)
	ch.Lacks = append(append(append(append(ch.Lacks, one.Missing...), two.Missing...), d.Runs.Lacks...), startLacks...)
	switch {
	case d.Spec == nil || !d.Spec.NF.Set:
		ch.Lacks = append(ch.Lacks, Lack{"nf_db of " + x.Amp.Part.ID + " in " + x.Own.Name, x.Row.At})
	case !d.Runs.OK || !d.Runs.V.On:
		ch.Lacks = append(ch.Lacks, Lack{"a gain that runs", x.Amp.At})
	}
	if ch.Lacks = dedupe(ch.Lacks); len(ch.Lacks) > 0 {
		return ch
	}
	names := []string{first.Kind.String(), x.Amp.ID, last.Kind.String()}
	stages := []rf.Stage{rf.Attenuator(one.Loss.Greatest), {Gain: d.Runs.V.Gain, NF: unit.DB(d.Spec.NF.V)}, rf.Attenuator(two.Loss.Greatest)}
	totals, ok := rf.Cumulate(stages...)
	if !ok {
		ch.Lacks = []Lack{{"stages that add up", x.Amp.At}}
		return ch
	}
	ch.Start = start
	level := start
	for i, t := range totals {
		s := BudgetStage{At: names[i], Gain: stages[i].Gain, Total: t.Gain, NF: t.NF}
		level = level.Plus(s.Gain)
		if i == 1 && d.Spec.MaxOut.Set && rf.Exceeds(level.Value(), d.Spec.MaxOut.V) {
			level, s.Held = unit.DBmOf(d.Spec.MaxOut.V), true
		}
		s.Level = level
		ch.Stages = append(ch.Stages, s)
	}
	return ch
}

// startLevel is the level at the first antenna's port: in the downlink the
// composite that the survey brings there, in the uplink a phone of 23 dBm at the
// distance of certification.
func (c *Case) startLevel(x *BandChain, d *Direction, first LineSum) (unit.DBm, []Lack) {
	if d.Name == "downlink" {
		if !x.RSSI.OK {
			return unit.DBm{}, x.RSSI.Lacks
		}
		return x.RSSI.V.Plus(first.Loss.Least), nil
	}
	if !x.MSCL.OK {
		return unit.DBm{}, x.MSCL.Lacks
	}
	return unit.DBmOf(phoneDBm).Plus(-x.MSCL.V + first.Loss.Least), nil
}

// limitChecks holds the direction against each kind of limit that the profile has.
func (c *Case) limitChecks(x *BandChain, d *Direction) []LimitCheck {
	if c.Profile == nil {
		return nil
	}
	var out []LimitCheck
	gain := Known[float64]{V: float64(d.Set.V), OK: d.Set.OK, Lacks: d.Set.Lacks}
	q := x.query("gain", d.Name)
	band, site := limits.Split(c.Profile.Match(q))
	out = append(out, c.check("gain/amplifier", q, x, gain, 0, band)...)
	out = append(out, c.check("gain/profile", q, x, gain, 0, site)...)

	power := Known[float64]{Lacks: []Lack{{"max_out_dbm of " + x.Amp.Part.ID, x.Row.At}}}
	if d.Spec != nil && d.Spec.MaxOut.Set {
		power = known(d.Spec.MaxOut.V)
	}
	q = x.query("conducted", d.Name)
	out = append(out, c.check("gain/"+d.Name+"-power", q, x, power, 0, c.Profile.Match(q))...)

	eirp, tolerance := Known[float64]{Lacks: []Lack{{"an antenna", x.Amp.At}}}, 0.0
	if s := d.strongest(); s != nil {
		eirp, tolerance = known(s.Worst.EIRP.Most.Value()), c.eirpTolerance(s)
	}
	q = x.query("eirp", d.Name)
	out = append(out, c.check("gain/"+d.Name+"-eirp", q, x, eirp, tolerance, c.Profile.Match(q))...)

	q = x.query("noise_per_mhz", d.Name)
	out = append(out, c.check("gain/noise", q, x, c.portNoise(x, d), 0, c.Profile.Match(q))...)
	return out
}

func (c *Case) check(rule string, q limits.Query, x *BandChain, value Known[float64], tolerance float64, rows []*limits.Row) []LimitCheck {
	if len(rows) == 0 {
		return nil
	}
	a := limits.Least(q, x.inputs(), rows...)
	l := LimitCheck{Rule: rule, Value: value, Tolerance: tolerance, Outcome: "unknown"}
	l.Limit = Known[float64]{Lacks: x.lacking(a.Open)}
	l.Unit = rows[0].Unit()
	if a.Row != nil {
		l.Limit.V, l.Limit.OK = a.Value, true
		l.Formula, l.Basis = x.formula(a.Row), c.citation(a.Row)
	}
	switch {
	case a.Row == nil || !value.OK:
	case a.Exceeded(value.V):
		l.Outcome = "fails"
	case len(a.Open) > 0:
	case a.Exceeded(value.V + tolerance):
		l.Outcome = "at-worst"
	default:
		l.Outcome = "holds"
	}
	return []LimitCheck{l}
}
