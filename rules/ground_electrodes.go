package rules

import (
	"driploop/bom"
)

var groundElectrodes = &Rule{
	Name:    "ground/electrodes",
	Title:   "All electrodes of a site are tied together, and the bonds say the same as the site",
	Why:     "in a strike two electrodes that are not tied stand thousands of volts apart, and the gear is what joins them",
	Caution: cautionElectrician + " " + cautionStrike,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.21(F), (J)", "2020", "code", "read"},
		{"IEC/EN 60728-11, own electrode joined to the main earthing bar", "as DIN VDE 0855-1:2011-06", "standard", "read"}},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if !c.Vehicle() && (len(c.bonding().wanted) > 0 || len(c.Graph.Bonds) > 0) {
			c.checkElectrodes(r)
		}
	},
}

func (c *Case) checkElectrodes(r *Report) {
	site, all := c.Plan.Site.Electrode, electrodes(c.Graph)
	row := c.codeRow("electrode-tie")
	untied := c.untied(all)
	switch {
	case site.V == "separate-untied" && len(all) > 1 && untied == nil:
		r.Fails(site.At, "site", "the site says that its electrodes are not tied; the bonds of the plan tie %s and %s", all[0].ID, all[1].ID).
			Then("correct the site once the tie is looked at").onRow(row)
	case site.V == "separate-untied":
		r.Fails(site.At, "site", "the site has a separate electrode that is not tied to the building's").
			Then("%s", c.tieWith("the two electrodes")).onRow(row)
	case untied != nil && c.looseBond():
		// the bond that leads nowhere may be the tie; it has a finding
	case untied != nil:
		f := r.Fails(untied.At, untied.On(), "%s and %s are two electrodes and no bond ties them together", all[0].ID, untied.ID).
			Then("%s", c.tieWith(all[0].ID+" and "+untied.ID)).onRow(row).Beside(all[0].At, "the other electrode")
		if site.V == "separate-tied" {
			f.Says += ", though the site says that they are"
			f.Beside(site.At, "what the site says")
		}
	case len(all) == 1: // with none, ground/bond has a finding
		c.checkOnly(r, all[0])
	}
}

// untied is the first electrode that no bond ties to the first one, or nil.
func (c *Case) untied(all []*bom.Device) *bom.Device {
	for _, d := range all {
		if d != all[0] && !tied(c.Graph, all[0], d) {
			return d
		}
	}
	return nil
}

// looseBond reports a bond that leads to something that did not resolve.
func (c *Case) looseBond() bool {
	for _, b := range c.Graph.Bonds {
		if b.From == nil || b.To == nil {
			return true
		}
	}
	return false
}

// checkOnly compares the only electrode of a plan with what the site says.
func (c *Case) checkOnly(r *Report, d *bom.Device) {
	site, row := c.Plan.Site.Electrode, c.codeRow("electrode-tie")
	switch {
	case !site.Set:
		r.Unknown(d.At, d.On(), "whether %s is the building's electrode or tied to it is not assessed: site.electrode is missing", d.ID).
			Then("say under [site] which electrode there is").onRow(row)
	case site.V == "separate-tied":
		r.Unknown(site.At, "site", "the site says that a separate electrode is tied to the building's; the plan shows only %s and no bond between the two, so the tie is not assessed", d.ID).
			Then("add the building's electrode as an existing device, and the bond that ties the two").onRow(row).Beside(d.At, "the only electrode of the plan")
	case site.V == "building" && !d.Row.Existing.V:
		r.Fails(d.At, d.On(), "the site says that the building's electrode serves; the bonds end on %s, which this job puts in, and no bond ties it to the building's", d.ID).
			Then("%s, or mark %s existing if it is the building's", c.tieWith(d.ID+" and the building's electrode"), d.ID).onRow(row).Beside(site.At, "what the site says")
	case site.V == "none" && d.Row.Existing.V:
		r.Fails(d.At, d.On(), "the site says that there is no electrode; %s is marked as existing", d.ID).
			Then("correct one of the two").onRow(row).Beside(site.At, "what the site says")
	}
}

// tied reports whether bonds join two devices.
func tied(g *bom.Graph, a, b *bom.Device) bool {
	_, end := way(g, a, func(d *bom.Device) bool { return d == b }, func(*bom.Bond) bool { return true })
	return end != nil
}

// tieWith says what to tie electrodes with.
func (c *Case) tieWith(what string) string {
	if p := c.conductorFor(c.codeRow("electrode-tie")); p != nil {
		return "tie " + what + " together with " + c.Firm.OnHand(p)
	}
	return "tie " + what + " together"
}
