package rules

import (
	"fmt"
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// IsolationMargin is what the firm asks for between the isolation and the gain.
func (b *Budget) IsolationMargin() unit.DB { return b.Case.isolationMargin() }

// CutOff reports an amplifier that is not connected on one side. What its figures
// lack is a line, and Notices say so.
func (b *Budget) CutOff(x *BandChain) bool { return x.cutOff() }

// Notices say what a budget leaves out and why, each a sentence without its full
// stop. A figure that is not there must not look like one that is in order.
func (b *Budget) Notices() []string {
	c := b.Case
	var out []string
	if n := len(c.Problems); n > 0 {
		out = append(out, fmt.Sprintf("The plan file has %s of its own, which inspect lists; what could not be read is missing here", count(n, "fault", "faults")))
	}
	if !c.Lines().Whole {
		out = append(out, "The plan has more ways through its splitters than can be followed; the rest of them is missing here")
	}
	var radios []*bom.Device
	for _, d := range c.Graph.Devices {
		if d.Active() {
			radios = append(radios, d)
		}
	}
	switch {
	case len(radios) == 0:
		return append(out, "The plan has no amplifier and no router, and so no radio chain")
	case len(c.bands) == 0:
		return append(out, "The plan names no bands (bands = […]), and no radio chain can be added up")
	}
	for _, d := range radios {
		out = append(out, c.bandsLeftOut(d)...)
		out = append(out, c.unheld(d)...)
	}
	return append(out, c.unconnected()...)
}

// unconnected names the amplifiers that are not connected on one side.
func (c *Case) unconnected() []string {
	var out []string
	for _, x := range c.Chain().Bands {
		says := x.Amp.ID + " has no whole line to a donor antenna and to where the phones are; what it receives, the gain that runs and what it sends is not assessed"
		if x.cutOff() && !slices.Contains(out, says) {
			out = append(out, says)
		}
	}
	return out
}

// bandsLeftOut says in which planned bands a device does not work.
func (c *Case) bandsLeftOut(d *bom.Device) []string {
	var names []string
	for _, b := range c.bands {
		if d.Part == nil || !c.worksIn(d, b) {
			names = append(names, b.Name)
		}
	}
	if len(names) == 0 {
		return nil
	}
	return []string{fmt.Sprintf("%s does not work in %s, which the plan is for", d.ID, list(names))}
}

func (c *Case) worksIn(d *bom.Device, b catalog.Band) bool {
	if d.Part.Router != nil {
		return catalog.Has(d.Part.Router.Bands, b.Name) && !b.Uplink.Empty()
	}
	row, _ := ampRow(d.Part.Amplifier, b)
	return row != nil
}

// unheld says why no limit of the profile is held against a device.
func (c *Case) unheld(d *bom.Device) []string {
	if d.Part == nil {
		return nil
	}
	amp := d.Part.Amplifier
	why := ""
	switch {
	case c.Profile == nil && c.ProfileName() == "":
		why = "no limit profile is named"
	case c.Profile == nil:
		why = "there is no profile " + c.ProfileName()
	case amp == nil && !c.feeds(d):
		why = "it sends from its own antenna, or behind an amplifier"
	case amp == nil && len(c.Profile.Radio) == 0:
		why = "profile " + c.Profile.ID + " has no rows for routers"
	case amp == nil:
	case c.Profile.NeedsOperatorPermission():
		why = "profile " + c.Profile.ID + " has no figures of its own, the operator's permission sets them"
	case len(c.Profile.Limits) == 0 && !c.Profile.DonorAsRadio.V:
		why = "profile " + c.Profile.ID + " has no rows for amplifiers"
	case !c.fits(d):
		t := misfit(c.Profile, amp)
		why = fmt.Sprintf("it is %s and profile %s is for %s ones", t.amp, c.Profile.ID, t.profile)
	}
	if why == "" {
		return nil
	}
	return []string{"No limit of a profile is held against " + d.ID + ": " + why}
}

// feeds reports whether a feed comes to the device.
func (c *Case) feeds(d *bom.Device) bool {
	for _, l := range c.Lines().Of(bom.Feed) {
		if l.To.Device == d {
			return true
		}
	}
	return false
}
