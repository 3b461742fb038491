package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// The rules of this file are about what the site does to an amplifier: what comes
// in, how well its antennas are apart, and what it gives back to the network.
var gainSiteRules = []*Rule{gainSystem, gainInput, gainOverload, gainIsolation, gainNoise, gainPhoneClose}

var gainSystem = &Rule{
	Name:    "gain/system",
	Title:   "The gain from antenna to antenna keeps the limit where the instrument counts it so",
	Why:     "some instruments limit the whole system, antennas and cables included; a better antenna then uses up what the amplifier may give",
	Basis:   []Basis{byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, name := range []string{"uplink", "downlink"} {
			c.eachDirection(name, func(x *BandChain, d *Direction) { checkSystemGain(c, r, x, d) })
		}
	},
}

func checkSystemGain(c *Case, r *Report, x *BandChain, d *Direction) {
	q := x.query("system_gain", d.Name)
	a := c.Profile.Assess(q, x.inputs())
	if a.None() {
		return
	}
	k := c.systemGain(x, d)
	if !k.OK || a.Row == nil || len(a.Open) > 0 && !a.Exceeded(k.V) {
		x.unassessed(r, "the "+d.Name+" system gain", append(append([]Lack(nil), k.Lacks...), x.lacking(a.Open)...))
		return
	}
	if a.Exceeded(k.V) {
		r.Fails(x.settingAt(), x.Amp.On(), "%s with its antennas and cables has %s dB of %s gain in %s; the limit is %s dB (%s)", x.Amp.ID,
			unit.Fixed(k.V, 1), d.Name, x.Band.Name, unit.Fixed(a.Value, 2), x.formula(a.Row)).
			Then("set %s back by %s dB more", x.Amp.ID, unit.Fixed(k.V-a.Value, 1)).InBand(x.Band.Name).Over("gain_db", k.V, "limit_db", a.Value).By(c.citation(a.Row))
	}
}

// systemGain is the set gain with the strongest donor and server antennas and the
// least losses, at the middle of the direction.
func (c *Case) systemGain(x *BandChain, d *Direction) Known[float64] {
	if !d.Set.OK {
		return Known[float64]{Lacks: d.Set.Lacks}
	}
	total := float64(d.Set.V)
	for _, side := range [][]*bom.Line{x.Feeds, x.Legs} {
		best, lacks := c.bestNet(side, d.Span.Mid())
		if len(lacks) > 0 {
			return Known[float64]{Lacks: lacks}
		}
		if best == nil {
			return unknown[float64](x.Amp.At, "a feed and a leg")
		}
		total += *best
	}
	return known(total)
}

// bestNet is the greatest antenna gain less the least loss of its line.
func (c *Case) bestNet(lines []*bom.Line, f unit.MHz) (*float64, []Lack) {
	var best *float64
	for _, l := range lines {
		n := l.From
		if l.Kind == bom.Leg {
			n = l.To
		}
		sum, rng := c.Sum(l, f), antennaAt(n, f)
		switch {
		case !sum.Known():
			return nil, sum.Missing
		case rng == nil:
			return nil, []Lack{{"a gain of " + n.Name() + " at " + f.String(), n.At()}}
		}
		if v := rng.Gain.V - float64(sum.Loss.Least); best == nil || v > *best {
			best = &v
		}
	}
	return best, nil
}

var gainInput = &Rule{
	Name:    "gain/input",
	Title:   "What comes in, amplified as set, stays within the rated downlink output",
	Why:     "an amplifier driven past its output distorts and fills the band with noise; one that protects itself turns down, and the far rooms lose their signal",
	Basis:   []Basis{{Document: "composite input at full load: RSRP + 10·log10(12·N_RB) over all signals in the amplifier's band; blocks by TS 36.101 table 5.6-1 and TS 38.101-1 table 5.3.2-1", Kind: "standard", Proof: "memory"}},
	Caution: mindOperator,
	Weight:  Hold,
	Lighter: "a punch where the amplifier lowers its gain by itself (network_protection)",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			checkInput(c, r, x)
		}
	},
}

func checkInput(c *Case, r *Report, x *BandChain) {
	d := &x.Down
	if d.Span.Empty() || d.Spec == nil {
		return
	}
	if !d.Input.OK || !d.Set.OK || !d.Spec.MaxOut.Set {
		lacks := append(append([]Lack(nil), d.Input.Lacks...), d.Set.Lacks...)
		if !d.Spec.MaxOut.Set {
			lacks = append(lacks, Lack{"max_out_dbm of " + x.Amp.Part.ID, d.Spec.At})
		}
		x.unassessed(r, "the input", lacks)
		return
	}
	out := d.Input.V.Plus(d.Set.V)
	if !rf.Exceeds(out.Value(), d.Spec.MaxOut.V) {
		return
	}
	f := r.Fails(x.settingAt(), x.Amp.On(), "%s receives %s dBm in %s and is set to %s dB: %s dBm, rated output %s dBm", x.Amp.ID,
		unit.Fixed(d.Input.V.Value(), 1), x.Band.Name, unit.Fixed(float64(d.Set.V), 1), unit.Fixed(out.Value(), 1), unit.Fixed(d.Spec.MaxOut.V, 1)).
		Then("set %s back by %s dB, aim the donor antenna off the strong site, or put an attenuator into the feed", x.Amp.ID, unit.Fixed(out.Value()-d.Spec.MaxOut.V, 1)).
		InBand(x.Band.Name).Over("output_dbm", out.Value(), "limit_dbm", d.Spec.MaxOut.V).With("input_dbm", d.Input.V.Value())
	if x.Amp.Part.Amplifier.NetworkProtection.V {
		f.Lighter(Punch).Says += "; it will turn itself down" + runsTo(d)
	}
}

// runsTo says at which gain a direction will run.
func runsTo(d *Direction) string {
	if !d.Runs.OK {
		return ""
	}
	if !d.Runs.V.On {
		return " until the band is off"
	}
	return fmt.Sprintf(" to %s dB", unit.Fixed(float64(d.Runs.V.Gain), 1))
}

var gainOverload = &Rule{
	Name:    "gain/overload",
	Title:   "What comes in stays below what the amplifier's input bears",
	Why:     "a strong site nearby overloads the input, in every band at once, whatever the gain is set to",
	Basis:   []Basis{practice("the maker's greatest and damaging input")},
	Weight:  Hold,
	Lighter: "a punch below the input that damages the amplifier",
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			checkOverload(r, x)
		}
	},
}

func checkOverload(r *Report, x *BandChain) {
	amp := x.Amp.Part.Amplifier
	if !x.RSSI.OK {
		return // gain/input says what is missing
	}
	if !amp.MaxIn.Set {
		r.Unknown(partAt(x.Amp), x.Amp.On(), "part %s states no greatest input; overload is not assessed", x.Amp.Part.ID).
			Then("add max_in_dbm to the part").AcrossBands(x.Band.Name).Beside(x.Amp.Part.At, "the part")
		return
	}
	v := x.RSSI.V.Value()
	if !rf.Exceeds(v, amp.MaxIn.V) {
		return
	}
	f := r.Fails(partAt(x.Amp), x.Amp.On(), "%s receives %s dBm in %s; its input bears %s dBm", x.Amp.ID, unit.Fixed(v, 1), x.Band.Name, plainFigure(amp.MaxIn.V)).
		Then("aim the donor antenna off the strong site, take one with less gain, or put an attenuator of %s dB into the feed", unit.Fixed(v-amp.MaxIn.V, 0)).
		InBand(x.Band.Name).Over("input_dbm", v, "limit_dbm", amp.MaxIn.V).Beside(amp.MaxIn.At, "the part's greatest input")
	if !amp.DamageIn.Set || !rf.Exceeds(v, amp.DamageIn.V) {
		f.Lighter(Punch)
	} else {
		f.Says += fmt.Sprintf(", and %s dBm damages it", plainFigure(amp.DamageIn.V))
	}
}

var gainIsolation = &Rule{
	Name:  "gain/isolation",
	Title: "Donor and server antennas are further apart, in dB, than the gain that is set plus the house's margin",
	Why:   "an amplifier that hears itself oscillates, and takes the cell down with it",
	Basis: []Basis{house("isolation_margin_db (15 dB where it says nothing)"),
		{Document: "isolation = free space + shell − gains toward each other + feed + leg, servers together as a sum; ± 8 dB where it is computed", Kind: "common practice"}},
	Caution: mindOperator,
	Weight:  Hold,
	Lighter: "a punch where the amplifier lowers its gain by itself (isolation_control)",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			checkIsolation(c, r, x)
		}
	},
}

func checkIsolation(c *Case, r *Report, x *BandChain) {
	if x.coupling() != "antenna" {
		return // no server antenna radiates
	}
	set := x.Up.Set
	if !set.OK || x.Down.Set.OK && x.Down.Set.V > set.V {
		set = x.Down.Set
	}
	if !x.Apart.OK || !set.OK {
		x.unassessed(r, "the isolation", append(append([]Lack(nil), x.Apart.Lacks...), set.Lacks...))
		return
	}
	need, v := float64(set.V+c.isolationMargin()), float64(x.Apart.V)
	how, doubt := fmt.Sprintf("computed at %s", x.Apart.Edge), float64(rf.IsolationTolerance)
	if x.Apart.Reading != nil {
		how, doubt = "measured", 0
	}
	says := fmt.Sprintf("%s has %s dB of isolation in %s (%s, feed and leg included); set gain %s dB + margin %s dB ask for %s dB", x.Amp.ID,
		unit.Fixed(v, 1), x.Band.Name, how, unit.Fixed(float64(set.V), 1), plainFigure(float64(c.isolationMargin())), unit.Fixed(need, 1))
	do := fmt.Sprintf("move the antennas apart or put more between them, or set %s back by %s dB; measure the isolation at commissioning", x.Amp.ID, unit.Fixed(max(0, need-v), 1))
	switch {
	case rf.Below(v, need):
		f := r.Fails(x.settingAt(), x.Amp.On(), "%s", says).Then("%s", do).InBand(x.Band.Name).Under("isolation_db", v, "needed_db", need)
		if x.Amp.Part.Amplifier.IsolationControl.V {
			f.Lighter(Punch).Says += "; it will turn itself down" + runsTo(&x.Down)
		}
		if x.Apart.Reading != nil {
			f.Beside(x.Apart.Reading.At, "the reading")
		}
	case rf.Below(v-doubt, need):
		r.AtWorst(x.settingAt(), x.Amp.On(), "%s; the computed figure is good to ± %s dB", says, plainFigure(doubt)).
			Then("measure the isolation at commissioning").InBand(x.Band.Name).Under("isolation_db", v, "needed_db", need).With("tolerance_db", doubt)
	}
}

var gainNoise = &Rule{
	Name:    "gain/noise",
	Title:   "The noise that an amplifier puts out keeps the limit at its port, and disappears in the base station's own",
	Why:     "noise from a booster near a site desensitizes it for everybody; near sites are the ones that complain",
	Basis:   []Basis{byProfile, {Document: "port noise kT0 + NF + gain; at the base station less donor gain, feed and path, 10 dB under −174 dBm/Hz + 3 dB", Kind: "common practice"}},
	Caution: mindOperator,
	Weight:  Punch,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, name := range []string{"uplink", "downlink"} {
			c.eachDirection(name, func(x *BandChain, d *Direction) { checkPortNoise(c, r, x, d) })
		}
		for _, x := range c.Chain().Bands {
			checkBaseNoise(c, r, x)
		}
	},
}

func checkPortNoise(c *Case, r *Report, x *BandChain, d *Direction) {
	q := x.query("noise_per_mhz", d.Name)
	a := c.Profile.Assess(q, x.inputs())
	if a.None() {
		return
	}
	k := c.portNoise(x, d)
	switch {
	case k.OK && a.Exceeded(k.V):
		r.Fails(x.settingAt(), x.Amp.On(), "%s puts out %s dBm/MHz of %s noise in %s: −114.0 + noise figure %s dB + gain %s dB; the limit is %s dBm/MHz (%s)", x.Amp.ID,
			unit.Fixed(k.V, 1), d.Name, x.Band.Name, plainFigure(d.Spec.NF.V), unit.Fixed(float64(d.Runs.V.Gain), 1), unit.Fixed(a.Value, 1), x.formula(a.Row)).
			Then("set %s back by %s dB, or take an amplifier with a lower noise figure", x.Amp.ID, unit.Fixed(k.V-a.Value+0.05, 1)).
			InBand(x.Band.Name).Over("noise_dbm_per_mhz", k.V, "limit_dbm_per_mhz", a.Value).By(c.citation(a.Row)).Beside(d.Spec.NF.At, "its noise figure")
	case !k.OK || !a.Whole():
		x.unassessed(r, "the "+d.Name+" noise at the port", append(append([]Lack(nil), k.Lacks...), x.lacking(a.Open)...))
	}
}

// baseNoise is how far under the base station's own noise the amplifier's should
// stay, dB (common practice).
const baseNoise unit.DB = 10

func checkBaseNoise(c *Case, r *Report, x *BandChain) {
	k, s := c.noiseAtBase(x)
	if s == nil || !k.OK {
		return // without a survey gain/input says so
	}
	floor, ok := rf.BaseFloor(3)
	if !ok {
		return
	}
	limit := floor.Plus(-baseNoise).Value()
	if v := k.V.Value(); rf.Exceeds(v, limit) {
		r.Fails(x.settingAt(), x.Amp.On(), "the uplink noise of %s arrives at the site of %s in %s with %s dBm/MHz; its own is %s dBm/MHz, %s dB under it are expected", x.Amp.ID,
			s.Operator.V, x.Band.Name, unit.Fixed(v, 1), unit.Fixed(floor.Value(), 1), plainFigure(float64(baseNoise))).
			Then("set %s back by %s dB in %s; the path to that site is short", x.Amp.ID, unit.Fixed(v-limit, 1), x.Band.Name).
			InBand(x.Band.Name).Over("noise_dbm_per_mhz", v, "limit_dbm_per_mhz", limit).Beside(s.At, "the strongest site")
	}
}

// noiseAtBase is the uplink noise at the strongest surveyed site of the band.
func (c *Case) noiseAtBase(x *BandChain) (Known[unit.DBm], *bom.Signal) {
	var best *bom.Signal
	for i := range c.Plan.Signals {
		s := &c.Plan.Signals[i]
		if ch, ok := channel(s); ok && !ch.Overlap(x.Own.Downlink).Empty() && (best == nil || s.RSRP.V > best.RSRP.V) {
			best = s
		}
	}
	port := c.portNoise(x, &x.Up)
	if best == nil || !port.OK || len(x.Feeds) == 0 {
		return Known[unit.DBm]{Lacks: port.Lacks}, best
	}
	feed, f := x.Feeds[0], x.Band.Uplink.Mid()
	sum, rng := c.Sum(feed, f), antennaAt(feed.From, f)
	if !sum.Known() || rng == nil {
		return Known[unit.DBm]{Lacks: sum.Missing}, best
	}
	level := unit.DBmOf(best.RSRP.V)
	if t := best.Through; t != nil {
		level, _ = rf.AtIsotropic(level, unit.DB(t.GainDBi.V), unit.DB(t.LossDB.V))
	}
	path, ok := rf.PathLossTo(unit.DBmOf(c.House().ReferenceDBm.Or(referenceDBm)), level)
	if !ok {
		return Known[unit.DBm]{}, best
	}
	gain := unit.DB(rng.Gain.V) - offBeam(feed.From.Device, rng, best.Bearing)
	v, ok := rf.NoiseAtBase(unit.DBmOf(port.V), gain, sum.Loss.Least, path)
	return Known[unit.DBm]{V: v, OK: ok}, best
}

var gainPhoneClose = &Rule{
	Name:    "gain/phone-close",
	Title:   "A phone at full power close to a server antenna does not overload the amplifier",
	Why:     "one phone on the counter under the dome takes the uplink away from everybody else",
	Basis:   []Basis{practice("phone of 23 dBm (TS 36.101 power class 3) at the nearest distance of people, free space")},
	Weight:  Hold,
	Lighter: "a punch below the input that damages the amplifier",
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			for _, l := range x.Legs {
				checkPhoneClose(c, r, x, l)
			}
		}
	},
}

func checkPhoneClose(c *Case, r *Report, x *BandChain, l *bom.Line) {
	amp, d, f := x.Amp.Part.Amplifier, l.To.Device, x.Band.Uplink.Mid()
	sum, rng := c.Sum(l, f), antennaAt(l.To, f)
	if x.Band.Uplink.Empty() || rng == nil || !sum.Known() {
		return // band/antenna and loss/leg speak of those
	}
	if !d.Row.People.Set || !amp.MaxIn.Set {
		what, at := "people of "+d.ID, d.At
		if d.Row.People.Set {
			what, at = "max_in_dbm of "+x.Amp.Part.ID, x.Amp.Part.At
		}
		r.Unknown(partAt(d), d.On(), "a phone close to %s in "+inBands+" is not assessed: it lacks %s", d.ID, what).
			Then("add what is missing").AcrossBands(x.Band.Name).Beside(at, "what is missing")
		return
	}
	path, ok := rf.FreeSpaceLoss(f, d.Row.People.V.Metres())
	if !ok {
		return
	}
	hand := unit.DB(c.House().PhoneGainDBi.Or(phoneGainDBi))
	v := unit.DBmOf(phoneDBm).Plus(hand - path + unit.DB(rng.Gain.V) - sum.Loss.Least).Value()
	if !rf.Exceeds(v, amp.MaxIn.V) {
		return
	}
	fnd := r.Fails(partAt(d), d.On(), "a phone at %s from %s brings %s dBm to %s in %s: 23 dBm %s dBi − %s dB + %s dBi − %s dB; its input bears %s dBm", d.Row.People.V, d.ID,
		unit.Fixed(v, 1), x.Amp.ID, x.Band.Name, unit.Fixed(float64(hand), 0), unit.Fixed(float64(path), 1), plainFigure(rng.Gain.V), unit.Fixed(float64(sum.Loss.Least), 1), plainFigure(amp.MaxIn.V)).
		Then("mount %s further from people, or put %s dB more loss into its leg", d.ID, unit.Fixed(v-amp.MaxIn.V, 0)).
		InBand(x.Band.Name).Over("input_dbm", v, "limit_dbm", amp.MaxIn.V)
	if !amp.DamageIn.Set || !rf.Exceeds(v, amp.DamageIn.V) {
		fnd.Lighter(Punch)
	}
}
