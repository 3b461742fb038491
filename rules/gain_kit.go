package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainKit = &Rule{
	Name:    "gain/kit",
	Title:   "A consumer amplifier works with the antennas and losses that it is certified with",
	Why:     "the certificate holds for the antennas and cables in the maker's list; a stronger antenna or a shorter cable is outside it, whatever the sum says",
	Basis:   []Basis{byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Profile == nil || c.Profile.Kit == nil {
			return
		}
		for _, x := range c.Chain().Bands {
			for _, l := range x.Feeds {
				checkKit(c, r, x, l, l.From, "donor", x.Up.Span)
			}
			for _, l := range x.Legs {
				checkKit(c, r, x, l, l.To, "server", x.Down.Span)
			}
		}
	},
}

// checkKit holds one antenna against the amplifier's kit rows for its side and
// band: one row must take it, by name or by gain, behind at least the row's loss.
func checkKit(c *Case, r *Report, x *BandChain, l *bom.Line, n *bom.Node, side string, span unit.Span) {
	rows := x.kit(side)
	basis := limits.Origin(c.Profile.Kit.Clause.V, c.Profile.Kit.Edition.Or(c.Profile.Edition.V), c.Profile.Kit.Proof.V)
	if len(rows) == 0 {
		r.Unknown(partAt(x.Amp), x.Amp.On(), "part %s lists no %s antennas that it is certified with in "+inBands+"; its kit is not assessed", x.Amp.Part.ID, side).
			Then("copy the maker's list into the part as [[part.%s.kit]]", x.Amp.Part.ID).AcrossBands(x.Band.Name).By(basis).Beside(x.Amp.Part.At, "the part")
		return
	}
	tried := c.tryKit(rows, l, n, span)
	if tried.takes {
		return
	}
	if len(tried.lacks) > 0 {
		r.Unknown(partAt(n.Device), n.On(), "whether %s is in the kit of %s in "+inBands+" is not assessed: it lacks %s", n.Device.ID, x.Amp.Part.ID, lackWords(tried.lacks)).
			Then("add what is missing").AcrossBands(x.Band.Name).By(basis)
		return
	}
	f := r.Fails(partAt(n.Device), n.On(), "%s (%s) is outside the kit of %s on the %s side in "+inBands+": %s", n.Device.ID, n.Device.Part.ID, x.Amp.Part.ID, side, tried.why).
		Then("take an antenna and a line from the maker's list").AcrossBands(x.Band.Name).By(basis).Beside(rows[0].At, "the kit")
	if tried.limit != nil {
		f.Over("net_gain_db", tried.net, "limit_db", *tried.limit)
	}
}

// kit lists the kit rows of a side that hold in the band.
func (x *BandChain) kit(side string) []*catalog.Kit {
	var out []*catalog.Kit
	amp := x.Amp.Part.Amplifier
	for i := range amp.Kits {
		k := &amp.Kits[i]
		if k.Side.V == side && (!k.Bands.Set || catalog.Has(k.Bands, x.Own.Name) || catalog.Has(k.Bands, x.Band.Name)) {
			out = append(out, k)
		}
	}
	return out
}

// kitTrial is what came of holding an antenna against kit rows.
type kitTrial struct {
	takes bool
	lacks []Lack
	why   string
	net   float64  // gain less the least loss, dB
	limit *float64 // the greatest net gain that a row by gain allows
}

func (c *Case) tryKit(rows []*catalog.Kit, l *bom.Line, n *bom.Node, span unit.Span) kitTrial {
	var t kitTrial
	for _, k := range rows {
		if k.Antenna.Set && k.Antenna.V != n.Device.Part.ID {
			if t.why == "" {
				t.why = "its antennas are listed by name, and this one is not among them"
			}
			continue
		}
		gain, loss, lacks := c.kitFigures(l, n, span)
		if len(lacks) > 0 {
			t.lacks = lacks
			continue
		}
		switch {
		case k.LeastLoss.Set && rf.Below(loss, k.LeastLoss.V):
			t.why = fmt.Sprintf("the line loses %s dB at least, the kit asks for %s dB", unit.Fixed(loss, 2), plainFigure(k.LeastLoss.V))
		case !k.Antenna.Set && k.MaxGain.Set && rf.Exceeds(gain, k.MaxGain.V):
			t.why = fmt.Sprintf("its gain is %s dBi, the kit allows %s dBi", plainFigure(gain), plainFigure(k.MaxGain.V))
		default:
			t.takes = true
			return t
		}
		if k.MaxGain.Set {
			limit := k.MaxGain.V - k.LeastLoss.V
			t.net, t.limit = gain-loss, &limit
		}
	}
	return t
}

// kitFigures are the antenna's greatest gain and the line's least loss over the
// edges of a band.
func (c *Case) kitFigures(l *bom.Line, n *bom.Node, span unit.Span) (gain, loss float64, lacks []Lack) {
	for i, f := range []unit.MHz{span.Lo, span.Mid(), span.Hi} {
		s, rng := c.Sum(l, f), antennaAt(n, f)
		switch {
		case !s.Known():
			return 0, 0, s.Missing
		case rng == nil:
			return 0, 0, []Lack{{"a gain of " + n.Name() + " at " + f.String(), n.At()}}
		}
		if i == 0 || rng.Gain.V > gain {
			gain = rng.Gain.V
		}
		if i == 0 || float64(s.Loss.Least) < loss {
			loss = float64(s.Loss.Least)
		}
	}
	return gain, loss, nil
}
