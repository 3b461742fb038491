package rules

import (
	"driploop/bom"
	"driploop/catalog"
)

var gainMobility = &Rule{
	Name:    "gain/mobility",
	Title:   "Amplifier, limit profile, setting and coupling go together: building or vehicle, class, and how phones are coupled",
	Why:     "an amplifier certified for a vehicle has other gain, noise and antenna limits than one for a building, and one for a cradle other than one for a room",
	Basis:   []Basis{{Document: "47 CFR 20.3, definitions of fixed and mobile signal boosters", Kind: "code", Proof: "memory"}, byProfile},
	Caution: mindOperator,
	Weight:  Hold,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, d := range c.amplifiers() {
			if !againstSetting(c, r, d) {
				againstProfile(c, r, d)
			}
			againstCoupling(r, d)
		}
	},
}

// againstSetting holds an amplifier against the setting of the job, and reports
// whether they contradict each other.
func againstSetting(c *Case, r *Report, d *bom.Device) bool {
	amp, setting := d.Part.Amplifier, c.Plan.Job.Setting.Or("building")
	switch {
	case !amp.Mobility.Set:
		r.Unknown(partAt(d), d.On(), "part %s does not say whether it is for buildings or vehicles; that is not assessed", d.Part.ID).
			Then("add mobility to the part").Beside(d.Part.At, "the part")
	case (amp.Mobility.V == "mobile") != (setting == "vehicle"):
		r.Fails(partAt(d), d.On(), "%s is a %s amplifier, the job is in a %s", d.ID, amp.Mobility.V, setting).
			Then("take an amplifier that is certified for a %s", setting).Beside(amp.Mobility.At, "mobility of %s", d.Part.ID).
			Beside(c.Plan.Job.Setting.At, "the setting")
		return true
	}
	return false
}

// againstProfile holds an amplifier against the profile's class and mobility, and
// the profile against the setting.
func againstProfile(c *Case, r *Report, d *bom.Device) {
	p, amp, at := c.Profile, d.Part.Amplifier, partAt(d)
	if p == nil {
		return // gain/profile says so
	}
	if t := misfit(p, amp); t != (trait{}) {
		r.Fails(at, d.On(), "%s is %s by its %s, profile %s is for %s; gain and power are not held against figures that are not made for it", d.ID, t.amp, t.word, p.ID, t.profile).
			Then("name the profile that fits the amplifier, or take an amplifier that fits the profile").Beside(c.Plan.Job.Profile.At, "the profile")
		return
	}
	if setting := c.Plan.Job.Setting.Or("building"); p.Setting.Set && p.Setting.V != setting {
		r.Fails(placeOr(c.Plan.Job.Profile.At, at), d.On(), "profile %s is for a %s, the job is in a %s", p.ID, p.Setting.V, setting).
			Then("name the profile that fits the job")
	}
	if p.Class.Set && !amp.Class.Set {
		r.Unknown(at, d.On(), "part %s states no class; profile %s is for class %s, and whether it fits is not assessed", d.Part.ID, p.ID, p.Class.V).
			Then("add class to the part").Beside(d.Part.At, "the part")
	}
}

// againstCoupling holds how the plan couples phones against what the part can.
func againstCoupling(r *Report, d *bom.Device) {
	row, can := d.Row.Coupling, d.Part.Amplifier.Coupling
	if !row.Set || !can.Set || catalog.Has(can, row.V) {
		return
	}
	r.Fails(row.At, d.On(), "%s is planned with phones coupled by %s; part %s couples them by %s", d.ID, row.V, d.Part.ID, list(words(can.V))).
		Then("write the coupling that the part has, or take an amplifier for it").Beside(can.At, "coupling of %s", d.Part.ID)
}
