package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var gainPhoneClose = &Rule{
	Name:    "gain/phone-close",
	Title:   "A phone at full power close to a server antenna does not overload the amplifier",
	Why:     "one phone on the counter under the dome takes the uplink away from everybody else",
	Basis:   []Basis{practice("phone of 23 dBm (TS 36.101 power class 3) at the nearest distance of people, free space"), house("phone_gain_dbi (−3 dBi where it says nothing)")},
	Weight:  Hold,
	Lighter: "a punch below the input that damages the amplifier",
	Check: func(c *Case, r *Report) {
		for _, x := range c.Chain().Bands {
			for _, l := range x.Legs {
				if !x.Band.Uplink.Empty() && reaches(l, x.Band) {
					checkPhoneClose(c, r, x, l)
				}
			}
		}
	},
}

func checkPhoneClose(c *Case, r *Report, x *BandChain, l *bom.Line) {
	amp, d := x.Amp.Part.Amplifier, l.To.Device
	p, lacks := c.nearPhone(l, x.Band.Uplink.Mid())
	if !amp.MaxIn.Set {
		lacks = append(lacks, Lack{"max_in_dbm of " + x.Amp.Part.ID, x.Amp.Part.At})
	}
	if len(lacks) > 0 {
		r.Lacking(partAt(d), d.On(), lacks, "a phone close to %s in "+inBands, d.ID).AcrossBands(x.Band.Name)
		return
	}
	v := p.level().Value()
	if !rf.Exceeds(v, amp.MaxIn.V) {
		return
	}
	f := r.Fails(d.Row.People.At, d.On(), "a phone at %s from %s brings %s dBm to %s in %s: 23 dBm %s dBi − %s dB + %s dBi − %s dB; its input bears %s dBm", d.Row.People.V, d.ID,
		unit.Fixed(v, 2), x.Amp.ID, x.Band.Name, signed(float64(p.hand)), unit.Fixed(float64(p.path), 2), hundredths(float64(p.server)), unit.Fixed(float64(p.leg), 2), plainFigure(amp.MaxIn.V)).
		Then("mount %s further from people, or put %s dB more loss into its leg", d.ID, tenthsUp(v-amp.MaxIn.V)).
		InBand(x.Band.Name).Over("input_dbm", v, "limit_dbm", amp.MaxIn.V).Beside(amp.MaxIn.At, "the part's greatest input")
	if amp.DamageIn.Set && rf.Exceeds(v, amp.DamageIn.V) {
		f.Says += ", and more than " + plainFigure(amp.DamageIn.V) + " dBm damages it"
		return
	}
	f.Lighter(Punch)
}

// nearPhone is the way from a phone at the nearest distance of people to the
// amplifier's server port.
type nearPhone struct{ hand, path, server, leg unit.DB }

func (p nearPhone) level() unit.DBm {
	return unit.DBmOf(phoneDBm).Plus(p.hand - p.path + p.server - p.leg)
}

func (c *Case) nearPhone(l *bom.Line, f unit.MHz) (nearPhone, []Lack) {
	d, sum, rng := l.To.Device, c.Sum(l, f), antennaAt(l.To, f)
	lacks := slices.Concat(sum.Missing, needGain(l.To, rng), needPeople(d))
	if len(lacks) > 0 {
		return nearPhone{}, lacks
	}
	path, ok := rf.FreeSpaceLoss(f, d.Row.People.V.Metres())
	if !ok {
		return nearPhone{}, []Lack{{"a far field at " + d.Row.People.V.String(), d.Row.People.At}}
	}
	return nearPhone{unit.DB(c.House().PhoneGainDBi.Or(phoneGainDBi)), path, unit.DB(rng.Gain.V), sum.Loss.Least}, nil
}

// needPeople is what is missing where the plan does not say how near people stay.
func needPeople(d *bom.Device) []Lack {
	if d.Row.People.Set {
		return nil
	}
	return []Lack{{"people of " + d.ID + ", the nearest that a person stays", d.At}}
}

// signed prints a figure with its sign, for a sum.
func signed(v float64) string {
	if v < 0 {
		return "− " + hundredths(-v)
	}
	return "+ " + hundredths(v)
}
