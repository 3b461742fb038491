package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
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

// Budget lays the chain of a case open.
func (c *Case) Budget() *Budget {
	b := &Budget{Case: c, Areas: c.Reach()}
	for _, x := range c.Chain().Bands {
		for _, d := range x.directions() {
			if !d.Span.Empty() {
				b.Bands = append(b.Bands, c.amplifierBudget(x, d))
			}
		}
	}
	for _, x := range c.Chain().Radios {
		b.Bands = append(b.Bands, c.radioBudget(x))
	}
	return b
}

// amplifierBudget lays one direction of an amplifier open.
func (c *Case) amplifierBudget(x *BandChain, d *Direction) *BudgetBand {
	f := d.Span.Mid()
	return &BudgetBand{
		Device: x.Amp, Band: x.Band.Name, Direction: d.Name, MHz: f,
		Lines: c.budgetLines(f, slices.Concat(x.Feeds, x.Legs)), Chains: c.chains(x, d, f),
		Input: d.Input, Runs: d.Runs, Set: d.Set,
		EIRP: runningEIRP(x, d), Worst: d.strongest(), Limits: c.limitChecks(x, d),
	}
}

// radioBudget lays a router's uplink open.
func (c *Case) radioBudget(x *RadioChain) *BudgetBand {
	f := x.Band.Uplink.Mid()
	b := &BudgetBand{Device: x.Router, Band: x.Band.Name, Direction: "uplink", MHz: f,
		Lines: c.budgetLines(f, x.Feeds), Worst: x.strongest(), Limits: c.radioChecks(x)}
	if b.Worst != nil {
		b.EIRP = known(b.Worst.Mid.EIRP.Most)
	}
	return b
}

func (c *Case) budgetLines(f unit.MHz, lines []*bom.Line) []BudgetLine {
	var out []BudgetLine
	for _, l := range lines {
		out = append(out, BudgetLine{l, c.Sum(l, f)})
	}
	return out
}

// runningEIRP is what the strongest antenna radiates: in the downlink from the
// composite input at the gain that runs, in the uplink at the rated output.
func runningEIRP(x *BandChain, d *Direction) Known[unit.DBm] {
	s := d.strongest()
	switch {
	case s == nil:
		return unknown[unit.DBm](x.Amp.At, "an EIRP in "+x.Band.Name)
	case d.Name == "uplink":
		return known(s.Mid.EIRP.Most)
	case !d.Runs.OK || !d.Input.OK:
		return Known[unit.DBm]{Lacks: slices.Concat(d.Runs.Lacks, d.Input.Lacks)}
	case d.off():
		return unknown[unit.DBm](x.Amp.At, "a gain above 0 dB")
	}
	return known(d.Input.V.Plus(d.Runs.V.Gain + s.Mid.Gain - s.Mid.Line.Loss.Least))
}
