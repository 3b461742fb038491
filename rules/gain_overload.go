package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

var gainOverload = &Rule{
	Name:    "gain/overload",
	Title:   "What comes in over all bands of an amplifier stays below what its input bears",
	Why:     "a strong site nearby overloads the input, in every band at once and also from one that nobody planned, whatever the gain is set to",
	Basis:   []Basis{practice("the maker's greatest and damaging input, against the composite input at full load over every band that the amplifier amplifies")},
	Weight:  Hold,
	Lighter: "a punch below the input that damages the amplifier",
	Check: func(c *Case, r *Report) {
		for _, d := range c.amplifiers() {
			checkOverload(c, r, d)
		}
	},
}

func checkOverload(c *Case, r *Report, d *bom.Device) {
	in := c.incoming(d)
	amp := d.Part.Amplifier
	if len(in.bands) == 0 && len(in.lacks) == 0 {
		return // it has nothing to hear with, or no planned band; others say so
	}
	if !amp.MaxIn.Set {
		in.lacks = append(in.lacks, Lack{"max_in_dbm of " + d.Part.ID, d.Part.At})
	} else if v := in.total.Value(); len(in.bands) > 0 && rf.Exceeds(v, amp.MaxIn.V) {
		in.report(r, d, v)
		return
	}
	if len(in.lacks) > 0 {
		r.Lacking(partAt(d), d.On(), in.lacks, "overload of %s", d.ID)
	}
}

func (in incoming) report(r *Report, d *bom.Device, v float64) {
	amp := d.Part.Amplifier
	what := in.bands[0]
	if len(in.bands) > 1 {
		what = unit.Fixed(v, 2) + " dBm (" + strings.Join(in.bands, " + ") + ")"
	}
	f := r.Fails(partAt(d), d.On(), "%s receives %s at full load; its input bears %s dBm", d.ID, what, plainFigure(amp.MaxIn.V)).
		Then("aim the donor antenna off the strong site, take one with less gain, or put an attenuator of %s dB into the feed", tenthsUp(v-amp.MaxIn.V)).
		Over("input_dbm", v, "limit_dbm", amp.MaxIn.V).Beside(amp.MaxIn.At, "the part's greatest input")
	if amp.DamageIn.Set && rf.Exceeds(v, amp.DamageIn.V) {
		f.Says += fmt.Sprintf(", and more than %s dBm damages it", plainFigure(amp.DamageIn.V))
		f.Beside(amp.DamageIn.At, "the input that damages it")
		return
	}
	f.Lighter(Punch)
}

// incoming is what comes in at an amplifier's donor port over all of its bands.
type incoming struct {
	total unit.DBm
	bands []string // "−12.3 dBm in B5"
	lacks []Lack   // of planned bands
}

// incoming adds up every band that the amplifier amplifies, whether it is planned or
// not. Where a planned band lacks something the sum is the least that comes in.
func (c *Case) incoming(d *bom.Device) incoming {
	planned := map[string]*BandChain{}
	var feeds []*bom.Line
	for _, x := range c.Chain().Bands {
		if x.Amp == d && !x.cutOff() {
			planned[x.Own.Name], feeds = x, x.Feeds
		}
	}
	var in incoming
	var levels []unit.DBm
	for _, own := range ampSpectrum(d.Part.Amplifier) {
		x := planned[own.Name]
		if x == nil && len(feeds) > 0 {
			beside := &BandChain{Amp: d, Own: own, Feeds: feeds}
			beside.RSSI, _ = c.received(beside)
			beside.RSSI.Lacks = nil // nobody needs a survey of a band that is not planned
			x = beside
		}
		switch {
		case x == nil:
		case x.RSSI.OK:
			levels = append(levels, x.RSSI.V)
			in.bands = append(in.bands, fmt.Sprintf("%s dBm in %s", unit.Fixed(x.RSSI.V.Value(), 2), own.Name))
		default:
			in.lacks = append(in.lacks, x.RSSI.Lacks...)
		}
	}
	in.total, in.lacks = unit.PowerSum(levels...), dedupe(in.lacks)
	return in
}

// ampSpectrum lists the bands of an amplifier, without those that lie inside another
// of its bands.
func ampSpectrum(a *catalog.Amplifier) []catalog.Band {
	var all, out []catalog.Band
	for _, row := range a.Bands {
		if b, ok := catalog.LookBand(row.Band.V); ok && !b.Downlink.Empty() {
			all = append(all, b)
		}
	}
	for i, b := range all {
		inside := false
		for j, o := range all {
			inside = inside || i != j && o.Downlink.Covers(b.Downlink) && (o.Downlink != b.Downlink || j < i)
		}
		if !inside {
			out = append(out, b)
		}
	}
	return out
}
