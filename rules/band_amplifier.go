package rules

import (
	"driploop/bom"
	"driploop/catalog"
)

var bandAmplifier = &Rule{
	Name:    "band/amplifier",
	Title:   "The amplifier has a row for every planned band, and the row covers it",
	Why:     "a band that the amplifier does not have is not boosted, whatever the antennas on both sides can do",
	Basis:   []Basis{practice("the bands on the amplifier's data sheet and label")},
	Weight:  Hold,
	Lighter: "A band that another amplifier or router of the plan works in is a punch.",
	Check: func(c *Case, r *Report) {
		by := c.division()
		for _, d := range c.runners() {
			if d.Part.Amplifier == nil {
				continue
			}
			if len(d.Part.Amplifier.Bands) == 0 && len(c.Bands()) > 0 {
				r.Unknown(deviceAt(d), d.On(), "which bands %s works in is not assessed: %s has no band rows", d.ID, d.Part.ID).
					Then("copy its bands with gain, output and noise figure from the data sheet into the part").Beside(d.Part.At, "the part")
				continue
			}
			for _, b := range c.Bands() {
				c.checkAmplifier(d, b, by, r)
			}
		}
	},
}

func (c *Case) checkAmplifier(d *bom.Device, b catalog.Band, by division, r *Report) {
	a := d.Part.Amplifier
	left, _ := runsWithout(d, b)
	row, _ := ampRow(a, b)
	switch {
	case left.Nothing() && row == nil:
		r.Unknown(deviceAt(d), d.On(), "gain and output of %s in %s are not assessed: no single row of %s holds all of it, only %s together", d.ID, b.Name,
			d.Part.ID, wordList(ampBands(a))).InBand(b.Name).Then("name the bands of the rows in bands").Beside(c.bandAt(b), "%s is planned here", b.Name)
		return
	case left.Nothing():
		return
	}
	f := r.Fails(deviceAt(d), d.On(), "%s (%s) leaves out %s; it has rows for %s", d.ID, d.Part.ID, left, wordList(ampBands(a))).
		Over("left_out_mhz", left.Width(), "allowed_mhz", 0).InBand(b.Name).
		Then("%s", c.runsPlan(d.Part, b)).
		Beside(c.bandAt(b), "%s is planned here", b.Name).Beside(a.Bands[0].At, "its rows")
	if other := by.elsewhere(d, b); other != "" {
		f.Lighter(Punch).Says += "; " + b.Name + " runs over " + other + " only"
	}
}
