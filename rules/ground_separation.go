package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/mech"
	"driploop/rules/rf"
)

var groundSeparation = &Rule{
	Name:    "ground/separation",
	Title:   "What goes up outdoors keeps its distance from a lightning protection system, or is bonded to it",
	Why:     "a conductor that carries a strike stands so far above what is near it that it leaps over, and from there it goes into the building",
	Caution: cautionStrike + " Leave the lightning protection system to whoever looks after it.",
	Basis: []Basis{
		{"IEC 62305-3, 6.3 and tables 10 to 12, s = ki·kc/km·l", "2010", "standard", "read"},
		{"NFPA 70 (NEC) 810.18(A), lead-ins and lightning conductors", "2020", "code", "read"},
		practice("a mast that is bonded to the system outdoors keeps no distance and brings its current in on the line: ground/arrestor then asks for an arrestor in the exempt zone too")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		near, unclear := c.nearLightning()
		system := c.Plan.Site.Lightning
		switch {
		case system.V == "none":
			c.doubtNone(r, system)
		case !system.Set:
			c.askLightning(r, near)
		case len(near) > 0:
			c.checkSeparation(r, near, system)
		default:
			reportUnplaced(r, unclear, c.separationRow(), "the distance from the lightning protection system")
		}
	},
}

// separationRow is what the plan's code says about the distance from a lightning
// protection system, or nil.
func (c *Case) separationRow() *limits.CodeRow { return c.firstRow("separation", "lead-in-lightning") }

// nearLightning lists what a plan puts up outdoors and does not bond to a lightning
// protection system: masts, and what stands on none. unclear are those of which
// nobody knows the place.
func (c *Case) nearLightning() (near, unclear []*bom.Device) {
	b := &bonding{c: c}
	for _, d := range c.Graph.Devices {
		switch d.Kind() {
		case "antenna", "mount", "amplifier", "router":
		default:
			continue
		}
		switch {
		case d.Row.Existing.V || d.Stands != nil && d.Stands.Kind() == "mount" && !d.Stands.Row.Existing.V:
		case d.Kind() == "mount" && outdoorMount(c, d), d.Place.Outdoors():
			if !c.onLightning(d) && !b.island(d).broken {
				near = append(near, d)
			}
		default:
			if x := unplaced(d); x != nil {
				unclear = append(unclear, x)
			}
		}
	}
	return near, unclear
}

// onLightning reports a device that bonds outdoors join, by itself or by what it
// stands on, to the building's lightning protection system. A way over an electrode
// or through the building joins the two at the ground only, and the distance counts
// above it.
func (c *Case) onLightning(d *bom.Device) bool {
	for ; d != nil; d = d.Stands {
		if c.bondedToLightning(d) {
			return true
		}
	}
	return false
}

func (c *Case) bondedToLightning(d *bom.Device) bool {
	isLightning := func(x *bom.Device) bool { return x.Row.Lightning.V }
	_, end := way(c.Graph, d, isLightning, func(b *bom.Bond) bool {
		for _, x := range []*bom.Device{b.From, b.To} {
			if !x.Row.Lightning.V && (x.Kind() == "electrode" || !x.Place.Outdoors() && x.Kind() != "mount") {
				return false
			}
		}
		return true
	})
	return end != nil
}

// askLightning says that nobody knows whether there is a system to keep away from.
func (c *Case) askLightning(r *Report, near []*bom.Device) {
	if len(near) == 0 {
		return // of what has no place other rules say so
	}
	r.Unknown(placeOr(c.Plan.Site.At, c.JobAt()), "site", "whether %s must keep its distance from a lightning protection system is not assessed: site.lightning_system is missing", namesOnce(near)).
		Then("say under [site]: lightning_system = %q, or its class", "none").onRow(c.separationRow())
}

// doubtNone points at a device of a system that the site is said not to have.
func (c *Case) doubtNone(r *Report, system source.Val[string]) {
	for _, d := range c.Graph.Devices {
		if d.Row.Lightning.V {
			r.Unknown(system.At, "site", "the site has no lightning protection system, and %s is said to belong to one; whether what goes up keeps its distance is not assessed", d.ID).
				Then("give the system's class, or correct %s", d.ID).onRow(c.separationRow()).Beside(d.Row.Lightning.At, "the device")
			return
		}
	}
}

func namesOnce(devices []*bom.Device) string {
	var names []string
	seen := map[string]bool{}
	for _, d := range devices {
		if !seen[d.ID] {
			seen[d.ID] = true
			names = append(names, d.ID)
		}
	}
	return list(names)
}

// checkSeparation holds the distance that the plan gives against the code's row.
func (c *Case) checkSeparation(r *Report, near []*bom.Device, system source.Val[string]) {
	row, who := c.separationRow(), namesOnce(near)
	gap := c.Plan.Site.Strike.Gap
	switch {
	case row == nil && c.CodeName() == "":
		r.Unknown(system.At, "site", "the building has a lightning protection system, and neither the plan nor the workspace names a code that says how far %s keeps from it; the distance is not assessed", who).
			Then("name one: code = %q", "iec-60728-11")
	case row == nil && c.Code != nil:
		r.Unknown(system.At, "site", "the code %s has no row separation or lead-in-lightning; the distance of %s from the lightning protection system is not assessed", c.CodeName(), who).
			Then("add the row to the code")
	case row == nil: // the code's name has a finding
	case row.Length.Set:
		c.checkPlainGap(r, row, who, system, gap)
	default:
		c.checkFormula(r, row, who, system, gap)
	}
}

// apartOrBonded is what to do where the distance is not kept.
func (c *Case) apartOrBonded(who string) string {
	with := ""
	if p := c.conductorFor(c.firstRow("lightning-conductor", "bond-conductor")); p != nil {
		with = " with " + c.Firm.OnHand(p)
	}
	return "set " + who + " further away, or have it bonded to the system outdoors" + with + ", with an arrestor on every line that comes in"
}

// checkPlainGap holds the distance against one length.
func (c *Case) checkPlainGap(r *Report, row *limits.CodeRow, who string, system source.Val[string], gap source.Val[unit.MM]) {
	if !gap.Set {
		c.lackSeparation(r, row, who, system, []Lack{{What: "lightning_gap"}})
		return
	}
	if ok, _ := row.AllowsLength(gap.V); !ok {
		r.Fails(gap.At, "site", "%s stands %s from the lightning protection system; %s is asked for", who, gap.V, row.Figure()).
			Then("%s", c.apartOrBonded(who)).onRow(row).Under("gap_m", gap.V.Metres(), "limit_m", row.Length.V.Metres()).Beside(system.At, "the system")
		return
	}
	r.Advice(system.At, "site", "%s keeps %s from the lightning protection system (%s); the side flash by the building's height is not computed", who, gap.V, row.Figure()).
		Then("ask whoever looks after the system").onRow(c.firstRow("lightning-conductor"))
}

// separation is the distance to keep with its terms. Of what the plan leaves open
// least takes the mildest and most the worst.
type separation struct {
	least, most float64
	terms       string
	lacks       []Lack
}

// checkFormula holds the distance against s = ki·kc/km·l.
func (c *Case) checkFormula(r *Report, row *limits.CodeRow, who string, system source.Val[string], gap source.Val[unit.MM]) {
	s := c.separation(row, system)
	if !gap.Set {
		s.lacks = append(s.lacks, Lack{What: "lightning_gap"})
	}
	switch {
	case len(s.lacks) > 0:
		c.lackSeparation(r, row, who, system, s.lacks)
	case rf.Below(gap.V.Metres(), s.least):
		r.Fails(gap.At, "site", "%s stands %s from the lightning protection system; at least %s m is asked for: %s", who, gap.V, unit.Fixed(s.least, 3), s.terms).
			Then("%s", c.apartOrBonded(who)).onRow(row).Under("gap_m", gap.V.Metres(), "limit_m", s.least).Beside(system.At, "the system")
	case rf.Below(gap.V.Metres(), s.most):
		r.Unknown(gap.At, "site", "%s stands %s from the lightning protection system; at least %s m is asked for (%s), or %s m where its earths differ by more than a factor of 2, which is not said",
			who, gap.V, unit.Fixed(s.least, 3), s.terms, unit.Fixed(s.most, 3)).
			Then("say under [site]: lightning_earths_differ = true or false").onRow(row).Beside(system.At, "the system")
	}
}

func (c *Case) lackSeparation(r *Report, row *limits.CodeRow, who string, system source.Val[string], lacks []Lack) {
	r.Lacking(system.At, "site", lacks, "the distance of %s from the lightning protection system (class %s)", who, system.V).
		Then("measure on site and add what is missing under [site], or bond %s to the system outdoors", who).onRow(row)
}

// separation computes the distance by the code's figures. Where the plan does not say
// whether the earths of the system differ, most takes it that they do.
func (c *Case) separation(row *limits.CodeRow, system source.Val[string]) separation {
	var s separation
	strike := &c.Plan.Site.Strike
	constant := func(name string) float64 {
		v, ok := row.Constant(name)
		if !ok {
			s.lacks = append(s.lacks, Lack{"the figure " + name + " of row " + row.ID.V, row.At})
		}
		return v
	}
	missing := func(set bool, key string) {
		if !set {
			s.lacks = append(s.lacks, Lack{What: key})
		}
	}
	missing(strike.Length.Set, "lightning_length")
	missing(strike.Medium.Set, "lightning_medium")
	missing(strike.Conductors.Set || strike.EarthsDiffer.V, "lightning_down_conductors")
	if len(s.lacks) > 0 {
		return s
	}
	ki, kOne := constant("ki_"+system.V), constant("kc_1")
	km, between := constant("km_solid"), strike.Medium.V
	if between == "air" {
		km = constant("km_air")
	}
	kc, shared := kOne, "kc 1 of earths that differ"
	if !strike.EarthsDiffer.V {
		n := strike.Conductors.V
		kc = constant(fmt.Sprintf("kc_%d", min(n, 3)))
		shared = fmt.Sprintf("kc %s of %s", plainFigure(kc), count(n, "down conductor", "down conductors"))
	}
	if len(s.lacks) > 0 {
		return s
	}
	l := strike.Length.V.Metres()
	least, ok1 := mech.Separation(ki, kc, km, l)
	most, ok2 := mech.Separation(ki, kOne, km, l)
	if !ok1 || !ok2 {
		s.lacks = append(s.lacks, Lack{"figures of row " + row.ID.V + " above 0", row.At})
	}
	s.least, s.most = least, most
	if strike.EarthsDiffer.Set {
		s.most = s.least
	}
	s.terms = fmt.Sprintf("ki %s of class %s × %s / km %s of %s × %s", plainFigure(ki), system.V, shared, plainFigure(km), between, strike.Length.V)
	return s
}
