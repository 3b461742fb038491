package rules

import (
	"driploop/bom"
)

// An amplifier or a router of which too little is known for any chain to begin is in
// no list of bands that rules walk. That must not read as if nothing were wrong, so
// it is said here, once for each.

// sayNoBands says of an amplifier whose part lists no band that nothing is assessed
// of it.
func (c *Case) sayNoBands(r *Report) {
	for _, d := range c.Graph.Devices {
		if d.Part != nil && d.Part.Amplifier != nil && len(d.Part.Amplifier.Bands) == 0 {
			r.Unknown(partAt(d), d.On(), "%s is of part %s, which lists no band; its gain and power are not assessed", d.ID, d.Part.ID).
				Then("add a row for each of its bands, from its label or sheet").Beside(d.Part.At, "the part")
		}
	}
}

// saySilentRadios says of a router with which no radio chain begins that what it
// radiates is not assessed.
func (c *Case) saySilentRadios(r *Report) {
	for _, d := range c.Graph.Devices {
		if d.Kind() != "router" || d.Part == nil && d.Row.Part.Set {
			continue
		}
		why, do := c.silent(d)
		if why == "" {
			continue
		}
		f := r.Unknown(partAt(d), d.On(), "%s; what %s radiates is not assessed", why, d.ID).Then("%s", do)
		if d.Part != nil {
			f.Beside(d.Part.At, "the part")
		}
	}
}

// silent says why nothing is known of what a router radiates, or "".
func (c *Case) silent(d *bom.Device) (why, do string) {
	if d.Part == nil {
		if c.leadsTo(d, "antenna") {
			return d.ID + " is a router and no part is named for it", "read its label, add it to the catalog, and name it as part"
		}
		return "", ""
	}
	ports, joined := 0, 0
	for _, n := range d.Nodes {
		if n.Port.RF() && n.Port.Use.Or("cellular") == "cellular" {
			ports++
			joined += min(1, len(n.Mates))
		}
	}
	switch own := d.Part.Antenna != nil; {
	case !d.Part.Router.Bands.Set:
		return d.ID + " is of part " + d.Part.ID + ", which lists no band", "add the bands of its modem"
	case !own && ports == 0:
		return d.ID + " is of part " + d.Part.ID + ", which has neither an antenna nor a port for one", "add its ports, or the ranges of its antenna"
	case !own && joined > 0 && !c.leadsTo(d, "antenna") && !c.leadsTo(d, "amplifier"):
		return d.ID + " has no whole line to an antenna", "complete the line, and the paths of the parts in it"
	}
	return "", "" // with nothing joined to its ports mate/open has a finding
}

// leadsTo reports a line from a device to one of a kind.
func (c *Case) leadsTo(d *bom.Device, kind string) bool {
	for _, l := range c.leadIns() {
		if l.From.Device == d && l.To.Device.Kind() == kind || l.To.Device == d && l.From.Device.Kind() == kind {
			return true
		}
	}
	return false
}
