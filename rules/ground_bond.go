package rules

import (
	"driploop/bom"
	"driploop/rules/limits"
)

var groundBond = &Rule{
	Name:    "ground/bond",
	Title:   "Arrestors, shield blocks, outdoor masts and the bodies of outdoor radios are bonded to an electrode",
	Why:     "an arrestor that leads nowhere protects nothing, and an unbonded mast looks for its own way through the building",
	Caution: cautionStrike + " " + cautionElectrician + " " + cautionListed,
	Basis: []Basis{
		{"NFPA 70 (NEC) 810.15, 810.20(C), 810.21", "2020", "code", "read"},
		{"IEC/EN 60728-11, earthing of the mast", "as DIN VDE 0855-1:2011-06", "standard", "read"},
		practice("the body of an outdoor radio is bonded like its mast; what counts is the bonds in the plan, not the site's electrode key")},
	Weight:  Hold,
	Lighter: "a mast whose antennas all lie in the exempt zone of IEC/EN 60728-11 is a note",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		b := c.bonding()
		for _, group := range b.astray() {
			c.reportAstray(r, b, group)
		}
		c.reportSupports(r, b)
		reportUnplaced(r, b.unplaced, c.codeRow("mast-bond"), "whether a bond is needed, as it is outdoors,")
	},
}

// bonding is what of a plan has to be bonded, and the bonds that there are.
type bonding struct {
	c        *Case
	wanted   []wanted
	unplaced []*bom.Device // masts and radios of which nobody knows whether they hang outdoors
}

// wanted is a device that has to be bonded to an electrode.
type wanted struct {
	dev  *bom.Device
	row  *limits.CodeRow // nil where the code does not name it
	size string          // the code row for its conductor
}

// bonding finds what has to be bonded.
func (c *Case) bonding() *bonding {
	b := &bonding{c: c}
	onLine := map[*bom.Device]bool{}
	for _, l := range c.leadIns() {
		onLine[l.From.Device], onLine[l.To.Device] = true, true
	}
	for _, d := range c.Graph.Devices {
		switch d.Kind() {
		case "arrestor":
			b.want(d, "bond-conductor", "discharge-bond", "discharge-unit")
		case "data-arrestor":
			b.want(d, "shield-bond", "data-arrestor")
		case "mount":
			switch {
			case b.standsOnMount(d):
			case outdoorMount(c, d):
				b.want(d, "bond-conductor", "mast-bond")
			default:
				b.unplaced = append(b.unplaced, unplaced(d))
			}
		case "amplifier", "router":
			if d.Place.Outdoors() {
				b.want(d, "bond-conductor", "data-arrestor")
			} else if !onLine[d] {
				b.unplaced = append(b.unplaced, unplaced(d))
			}
		}
	}
	return b
}

func (b *bonding) want(d *bom.Device, size string, rows ...string) {
	if b.c.codeRow(size) == nil {
		size = "bond-conductor"
	}
	b.wanted = append(b.wanted, wanted{d, b.c.firstRow(rows...), size})
}

// standsOnMount reports a mount that is clamped to another one, whose bond does
// for both.
func (b *bonding) standsOnMount(d *bom.Device) bool {
	return d.Stands != nil && d.Stands.Kind() == "mount"
}

// outdoorMount reports a mount that is outdoors by its own place, or by the place
// of something that stands on it.
func outdoorMount(c *Case, d *bom.Device) bool {
	if d.Place != nil {
		return d.Place.Outdoors()
	}
	for _, x := range c.Graph.Devices {
		if x.Stands == d && x.Place.Outdoors() {
			return true
		}
	}
	return false
}

// island is devices that bonds join to each other and to no electrode.
type island struct {
	wanted []wanted
	hub    *bom.Device // where they meet
	bonds  []*bom.Bond
	broken bool // a bond of it leads to something that did not resolve
}

// astray groups what is not bonded to an electrode by the bonds that there are:
// one bond missing between bar and rod is one fault, not one of each mast.
func (b *bonding) astray() []island {
	var out []island
	seen := map[*bom.Device]bool{}
	for _, w := range b.wanted {
		if seen[w.dev] {
			continue
		}
		if _, ok := b.c.Graph.PathToElectrode(w.dev); ok {
			continue
		}
		in := b.island(w.dev)
		for _, other := range b.wanted {
			if in.holds(other.dev) && !seen[other.dev] {
				seen[other.dev] = true
				in.wanted = append(in.wanted, other)
			}
		}
		out = append(out, in)
	}
	return out
}

// island is all that bonds join to a device.
func (b *bonding) island(d *bom.Device) island {
	in := island{hub: d}
	reached := map[*bom.Device]bool{d: true}
	taken := map[*bom.Bond]bool{}
	most := 0
	for queue := []*bom.Device{d}; len(queue) > 0; queue = queue[1:] {
		at := queue[0]
		n := 0
		for _, x := range b.c.Graph.Bonds {
			if x.From != at && x.To != at {
				continue
			}
			n++
			if !taken[x] {
				taken[x] = true
				in.bonds = append(in.bonds, x)
			}
			next := x.Other(at)
			if next == nil {
				in.broken = true
			} else if !reached[next] {
				reached[next] = true
				queue = append(queue, next)
			}
		}
		if n > most || n == most && at.Kind() == "bond-point" && in.hub.Kind() != "bond-point" {
			in.hub, most = at, n
		}
	}
	return in
}

func (in *island) holds(d *bom.Device) bool {
	if d == in.hub {
		return true
	}
	for _, x := range in.bonds {
		if x.From == d || x.To == d {
			return true
		}
	}
	return false
}

func (c *Case) reportAstray(r *Report, b *bonding, in island) {
	if in.broken {
		return // the bond's reference has a finding
	}
	if len(in.bonds) == 0 {
		c.reportBare(r, in.wanted[0])
		return
	}
	var names []string
	for _, w := range in.wanted {
		if w.dev != in.hub {
			names = append(names, w.dev.ID)
		}
	}
	says := in.hub.ID + " is bonded to other things, and no bond leads on to an electrode"
	if len(names) == 1 {
		says = names[0] + " is bonded to " + in.hub.ID + ", and from there no bond leads on to an electrode"
	} else if len(names) > 1 {
		says = list(names) + " are bonded to " + in.hub.ID + ", and from there no bond leads on to an electrode"
	}
	f := r.Fails(in.hub.At, in.hub.On(), "%s", says).Then("%s", c.bondTo(in.hub)).onRow(in.wanted[0].row)
	c.besideSite(f)
	for _, x := range in.bonds {
		f.Beside(x.Row.At, "one of the bonds there are")
	}
}

// reportBare reports a device without any bond.
func (c *Case) reportBare(r *Report, w wanted) {
	if w.dev.Kind() == "mount" && c.allExempt(w.dev) {
		r.Advice(w.dev.At, w.dev.On(), "%s has no bond to an electrode; all antennas on it lie in the exempt zone", w.dev.ID).
			Then("join it for equal potential all the same").onRow(c.codeRow("exempt-below-edge"))
		return
	}
	what := map[string]string{"mount": "stands outdoors and", "amplifier": "hangs outdoors and its body", "router": "hangs outdoors and its body"}[w.dev.Kind()]
	if what != "" {
		what += " "
	}
	f := r.Fails(w.dev.At, w.dev.On(), "%s %shas no bond; a path of bonds to an electrode is expected", w.dev.ID, what).
		Then("%s", c.bondTo(w.dev)).onRow(w.row)
	c.besideSite(f)
}

// besideSite points at the site's electrode key where it stands, because it alone
// bonds nothing.
func (c *Case) besideSite(f *Finding) {
	if e := c.Plan.Site.Electrode; e.Set {
		f.Beside(e.At, "this says which electrode there is, and bonds nothing")
	}
}

// allExempt reports a mount that lies in the exempt zone with every antenna on it, or
// that gives no distances of its own while all its antennas lie there.
func (c *Case) allExempt(mount *bom.Device) bool {
	some := c.exempt(mount).holds
	if below, off := roofDistances(mount); !some && (below.Set || off.Set) {
		return false
	}
	for _, d := range c.Graph.Devices {
		if d.Kind() != "antenna" || !standsOn(d, mount) {
			continue
		}
		if !c.exempt(d).holds {
			return false
		}
		some = true
	}
	return some
}

func standsOn(d, base *bom.Device) bool {
	for s := d.Stands; s != nil; s = s.Stands {
		if s == base {
			return true
		}
	}
	return false
}

// reportSupports reports outdoor antennas of which nobody knows what they stand on.
func (c *Case) reportSupports(r *Report, b *bonding) {
	for _, w := range b.wanted {
		if w.dev.Kind() == "mount" {
			return // what the plan lists is taken to carry them
		}
	}
	var bare []*bom.Device
	for _, d := range c.Graph.Devices {
		if d.Kind() == "antenna" && d.Place.Outdoors() && !c.carried(d) && !c.exempt(d).holds {
			bare = append(bare, d)
		}
	}
	if len(bare) == 0 {
		return
	}
	var names []string
	for _, d := range bare {
		names = append(names, d.ID)
	}
	f := r.Unknown(bare[0].At, bare[0].On(), "the plan lists nothing that carries %s outdoors; whether it is bonded is not assessed", list(names)).
		Then("add the mast or bracket, say on which device the antenna stands, and bond it").onRow(c.codeRow("mast-bond"))
	for _, d := range bare[1:] {
		f.Beside(d.At, "an antenna too")
	}
}

// carried reports an antenna that has a bond of its own, or stands on something
// that the plan lists or tried to list.
func (c *Case) carried(d *bom.Device) bool {
	if d.Row.On.Set {
		return true
	}
	_, ok := c.Graph.PathToElectrode(d)
	return ok
}

// bondTo says what to bond a device with, and to what.
func (c *Case) bondTo(d *bom.Device) string {
	to := "an electrode"
	for _, x := range c.Graph.Devices {
		if x == d {
			continue
		}
		if x.Kind() == "electrode" {
			to = x.ID
			break
		}
		if x.Kind() == "bond-point" && to == "an electrode" && d.Kind() != "bond-point" {
			if _, ok := c.Graph.PathToElectrode(x); ok {
				to = x.ID
				break
			}
		}
	}
	if p := c.conductorFor(c.codeRow("bond-conductor")); p != nil {
		return "bond " + d.ID + " to " + to + " with " + c.Firm.OnHand(p)
	}
	return "bond " + d.ID + " to " + to
}
