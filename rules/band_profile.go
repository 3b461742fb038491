package rules

import (
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/rules/limits"
)

var bandProfile = &Rule{
	Name:   "band/profile",
	Title:  "The limit profile permits every band that is amplified",
	Why:    "an amplifier in a band that its class may not use disturbs services that nobody asked",
	Basis:  []Basis{{Document: "the profile's list of spectrum; for consumer boosters 47 CFR 20.21(a)(4)", Kind: "code", Proof: "read"}, bandEdges},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if !slices.ContainsFunc(c.runners(), func(d *bom.Device) bool { return d.Part.Amplifier != nil }) || len(c.Bands()) == 0 {
			return
		}
		switch p := c.Profile; {
		case p == nil && c.ProfileName() == "":
			r.Unknown(c.JobAt(), "job", "whether the planned bands may be amplified is not assessed: no limit profile is named").
				Then("name one as profile in [job] or [workspace]")
		case p == nil || p.NeedsOperatorPermission():
			// An unknown name is a finding of its own; where the operator's permission
			// stands in place of figures, the papers are asked for.
		case len(p.Spectrum) == 0:
			r.Unknown(placeOr(c.Plan.Job.Profile.At, c.JobAt()), "job",
				"whether the planned bands may be amplified is not assessed: the profile %s lists no spectrum, the certificate and the operator say", p.ID).
				Then("compare bands with the certificate of the amplifier and the operator's consent")
		default:
			for _, b := range c.Bands() {
				c.checkPermitted(p, b, r)
			}
		}
	},
}

func (c *Case) checkPermitted(p *limits.Profile, b catalog.Band, r *Report) {
	permission := p.Permits(b.Name)
	if !permission.Known || permission.Whole() {
		return
	}
	left := leftOut{Band: b, Up: permission.Uplink, Down: permission.Downlink}
	f := r.Fails(c.bandAt(b), "job", "%s is planned with an amplifier; the spectrum of the profile %s leaves out %s", b.Name, p.ID, left).
		Over("left_out_mhz", left.Width(), "allowed_mhz", 0).InBand(b.Name).
		Then("take %s out of bands, or plan under a profile that permits it; %s permits %s", b.Name, p.ID, strings.Join(permittedNames(p), " ")).
		Beside(placeOr(c.Plan.Job.Profile.At, c.Firm.Workspace.Profile.At), "the profile is named here")
	f.By(limits.Origin(p.Spectrum[0].Clause.V, p.Edition.V, p.Spectrum[0].Proof.V))
}

func permittedNames(p *limits.Profile) []string {
	var out []string
	for _, b := range p.Bands() {
		out = append(out, b.Name)
	}
	return out
}
