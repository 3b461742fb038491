package rules

import (
	"fmt"
	"slices"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var gainIsolation = &Rule{
	Name:  "gain/isolation",
	Title: "Donor and server antennas are further apart, in dB, than the gain that is set plus the house's margin",
	Why:   "an amplifier that hears itself oscillates, and takes the cell down with it",
	Basis: []Basis{house("isolation_margin_db (15 dB where it says nothing)"),
		{Document: "isolation = free space + shell − gains toward each other + feed + leg, antennas together as a sum; ± 8 dB where it is computed", Kind: "common practice"}},
	Caution: mindOperator,
	Weight:  Hold,
	Lighter: "a punch where the amplifier lowers its gain by itself (isolation_control)",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			if x.coupling() == "antenna" || x.Apart.OK {
				checkIsolation(c, r, x)
			}
		}
	},
}

func checkIsolation(c *Case, r *Report, x *BandChain) {
	d, setLacks := x.greatestSet()
	lacks := slices.Concat(x.Apart.Lacks, setLacks)
	if x.Apart.OK && d != nil {
		need, v := d.Set.V+c.isolationMargin(), x.Apart.V
		switch {
		case rf.Below(float64(v), float64(need)):
			c.shortIsolation(r.Fails, x, d)
			return
		case rf.Below(float64(v-x.Apart.doubt()), float64(need)):
			c.shortIsolation(r.AtWorst, x, d).With("tolerance_db", float64(x.Apart.doubt()))
		}
	}
	if len(lacks) > 0 {
		x.unassessed(r, "the isolation", dedupe(lacks))
	}
}

// greatestSet is the direction with the greater set gain of those that are known,
// and what is missing of the others.
func (x *BandChain) greatestSet() (best *Direction, lacks []Lack) {
	for _, d := range x.directions() {
		switch {
		case d.Span.Empty():
		case !d.Set.OK:
			lacks = append(lacks, d.Set.Lacks...)
		case best == nil || d.Set.V > best.Set.V:
			best = d
		}
	}
	return best, lacks
}

// doubt is how far the isolation may lie below its figure.
func (a Isolated) doubt() unit.DB {
	if a.Reading != nil {
		return 0
	}
	return rf.IsolationTolerance
}

// shortIsolation reports that the isolation does not carry a direction's set gain
// with the margin.
func (c *Case) shortIsolation(report reportFunc, x *BandChain, d *Direction) *Finding {
	margin, v := c.isolationMargin(), float64(x.Apart.V)
	need := float64(d.Set.V + margin)
	f := report(x.settingAt(), x.Amp.On(), "%s has %s in %s; set gain %s dB + margin %s dB ask for %s dB", x.Amp.ID, x.Apart.words(), x.Band.Name,
		hundredths(float64(d.Set.V)), plainFigure(float64(margin)), hundredths(need)).
		Then("%smeasure the isolation at commissioning", c.apartOrBack(x, d)).
		InBand(x.Band.Name).Under("isolation_db", v, "needed_db", need)
	if rf.Below(v, need) && x.Amp.Part.Amplifier.IsolationControl.V {
		f.Lighter(Punch).Says += "; it will turn itself down" + runsTo(d)
	}
	if x.Apart.Reading != nil {
		f.Beside(x.Apart.Reading.At, "the reading")
	}
	return f
}

// apartOrBack says what to do where isolation is short, in time for the install.
func (c *Case) apartOrBack(x *BandChain, d *Direction) string {
	left := x.Apart.V - c.isolationMargin()
	if !rf.Below(float64(left), float64(d.Set.V)) {
		return ""
	}
	do := "move the antennas apart or put more between them"
	if left >= 0 {
		do += fmt.Sprintf(", or set it back: set = { %s = { back_off_db = %s } }", x.Band.Name, x.backOff(d, float64(left)))
	}
	return do + "; "
}

// words is the isolation with how it was come by: the reading, or the sum of the
// pair of antennas that lets through most.
func (a Isolated) words() string {
	v := unit.Fixed(float64(a.V), 2) + " dB of isolation"
	if a.Reading != nil {
		return v + " as measured"
	}
	worst := slices.MinFunc(a.Pairs, func(p, q Pair) int {
		if p.Isolation < q.Isolation {
			return -1
		}
		return 1
	})
	sum := worst.words()
	if n := len(a.Pairs) - 1; n > 0 {
		sum += fmt.Sprintf(" = %s dB, and %s", unit.Fixed(float64(worst.Isolation), 2), count(n, "more pair of antennas", "more pairs of antennas"))
	}
	return fmt.Sprintf("%s ± %s dB as computed at %s (%s)", v, plainFigure(float64(a.doubt())), a.Edge, sum)
}

// words shows the addends from port to port.
func (p Pair) words() string {
	two := func(d unit.DB) string { return unit.Fixed(float64(d), 2) }
	return fmt.Sprintf("%s to %s: path %s + shell %s − gains toward each other %s and %s + feed %s + leg %s", p.Server.Device.ID, p.Donor.Device.ID,
		two(p.Path), two(p.Shell), two(p.Coupling.Donor), two(p.Coupling.Server), two(p.Feed), two(p.Leg))
}
