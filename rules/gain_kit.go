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
			if !c.fits(x.Amp) {
				continue
			}
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
	switch {
	case span.Empty():
		return
	case len(rows) == 0:
		r.Unknown(partAt(x.Amp), x.Amp.On(), "part %s lists no %s antennas that it is certified with in "+inBands+"; its kit is not assessed", x.Amp.Part.ID, side).
			Then("copy the maker's list into the part as [[part.%s.kit]]", x.Amp.Part.ID).AcrossBands(x.Band.Name).By(basis).Beside(x.Amp.Part.At, "the part")
		return
	}
	var refused, open *kitAnswer
	for _, k := range rows {
		if k.Antenna.Set && k.Antenna.V != n.Device.Part.ID {
			continue
		}
		a := c.askKit(k, l, n, span)
		switch {
		case len(a.lacks) > 0:
			open = a
		case a.why == "":
			return // this row takes it
		case refused == nil || k.Antenna.Set:
			refused = a
		}
	}
	if open != nil {
		r.Unknown(partAt(n.Device), n.On(), "whether %s is in the kit of %s in "+inBands+" is not assessed: it lacks %s", n.Device.ID, x.Amp.Part.ID, lackWords(open.lacks)).
			Then("add what is missing").AcrossBands(x.Band.Name).By(basis).Beside(open.lacks[0].At, "what it lacks")
		return
	}
	if refused == nil {
		refused = &kitAnswer{row: rows[0], why: "its antennas are listed by name, and this one is not among them"}
	}
	f := r.Fails(partAt(n.Device), n.On(), "%s (%s) is outside the kit of %s on the %s side in "+inBands+": %s", n.Device.ID, n.Device.Part.ID, x.Amp.Part.ID, side, refused.why).
		Then("take an antenna and a line from the maker's list").AcrossBands(x.Band.Name).By(basis).Beside(refused.row.At, "the kit")
	if refused.figure != nil {
		refused.figure(f)
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

// kitAnswer is what came of holding an antenna against a kit row that may be meant
// for it: it is taken where nothing is lacking and why is empty.
type kitAnswer struct {
	row    *catalog.Kit
	lacks  []Lack
	why    string
	figure func(*Finding)
}

// askKit asks one row. A row that names the antenna needs no figure of its gain.
func (c *Case) askKit(k *catalog.Kit, l *bom.Line, n *bom.Node, span unit.Span) *kitAnswer {
	a := &kitAnswer{row: k}
	if !k.Antenna.Set {
		gain, lacks := greatestIn(n, span)
		if !k.MaxGain.Set {
			lacks = append(lacks, Lack{"antenna or max_gain_dbi of the kit row", k.At})
		}
		a.lacks = lacks
		if len(lacks) == 0 && rf.Exceeds(gain, k.MaxGain.V) {
			a.why = fmt.Sprintf("its gain is %s dBi, the kit allows %s dBi", plainFigure(gain), plainFigure(k.MaxGain.V))
			a.figure = func(f *Finding) { f.Over("gain_dbi", gain, "limit_dbi", k.MaxGain.V) }
			return a
		}
	}
	if k.LeastLoss.Set {
		loss, lacks := c.leastIn(l, span)
		a.lacks = append(a.lacks, lacks...)
		if len(a.lacks) == 0 && rf.Below(loss, k.LeastLoss.V) {
			a.why = fmt.Sprintf("the line loses %s dB at least, the kit asks for %s dB", unit.Fixed(loss, 2), plainFigure(k.LeastLoss.V))
			a.figure = func(f *Finding) { f.Under("loss_db", loss, "limit_db", k.LeastLoss.V) }
		}
	}
	return a
}

// greatestIn is an antenna's greatest gain at the edges and the middle of a band.
func greatestIn(n *bom.Node, span unit.Span) (float64, []Lack) {
	gain := 0.0
	for i, f := range points(span) {
		rng := antennaAt(n, f)
		if rng == nil {
			return 0, []Lack{noGain(n)}
		}
		if i == 0 || rng.Gain.V > gain {
			gain = rng.Gain.V
		}
	}
	return gain, nil
}

// leastIn is a line's least loss at the edges and the middle of a band.
func (c *Case) leastIn(l *bom.Line, span unit.Span) (float64, []Lack) {
	loss := 0.0
	for i, f := range points(span) {
		s := c.Sum(l, f)
		if !s.Known() {
			return 0, s.Missing
		}
		if v := float64(s.Loss.Least); i == 0 || v < loss {
			loss = v
		}
	}
	return loss, nil
}

// kitTakes reports whether an antenna of a gain may stand in a line's place as far
// as the kit goes, where there is one.
func (c *Case) kitTakes(x *BandChain, l *bom.Line, p *catalog.Part, gain float64) bool {
	side := "server"
	if l.Kind == bom.Feed {
		side = "donor"
	}
	rows := x.kit(side)
	if c.Profile.Kit == nil || len(rows) == 0 {
		return true
	}
	for _, k := range rows {
		if k.Antenna.Set && k.Antenna.V == p.ID || !k.Antenna.Set && k.MaxGain.Set && gain <= k.MaxGain.V {
			return true
		}
	}
	return false
}
