package rules

import (
	"driploop/bom"
	"driploop/catalog/source"
	"driploop/rules/limits"
)

var paperRules = []*Rule{paperConsent, paperRegistration, paperPermit, paperPersonal, paperHeight, paperWaiver}

// Papers can be on their way while a job is drawn and reviewed. Once it is built
// they have to be there.
const lighterOnPaper = "a punch until stage construction, a hold from then on"

var paperConsent = &Rule{
	Name:  "paper/consent",
	Title: "Each operator whose licence is used has consented",
	Why:   "without the licensee's consent the installer has no authority to switch it on, and the operator may have it taken down",
	Basis: []Basis{
		{"47 CFR 20.21(a)(1)", "as amended by FCC 14-138 and FCC 18-35", "code", "read"},
		{"Radiocommunications Act 1992 (Australia) s 46, s 47; national law in the European Union", "", "code", "read"}},
	Weight:  Hold,
	Lighter: lighterOnPaper,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		paper := c.paper("consent")
		if c.noProfile(r) || paper == nil {
			return
		}
		if len(c.Plan.Operators) == 0 && c.transmits() {
			r.Unknown(c.JobAt(), "job", "the plan names no operator whose licence is used; whether each has consented is not assessed").
				Then("add [operator.NAME] with its consent").Replacing(paper.Explain())
		}
		for i := range c.Plan.Operators {
			o := &c.Plan.Operators[i]
			c.checkEvidence(r, wantedPaper{what: "consent of " + o.ID, key: "consent", on: "operator." + o.ID, at: o.At, paper: paper}, o.Consent)
		}
	},
}

var paperRegistration = &Rule{
	Name:  "paper/registration",
	Title: "The booster is registered with each operator whose licence is used",
	Why:   "an operator that looks for interference asks its list first; what is not on it is switched off",
	Basis: []Basis{
		{"47 CFR 20.21(a)(2)", "as amended by FCC 14-138 and FCC 18-35", "code", "read"},
		{"47 CFR 90.219(d)(5), Class B boosters", "", "code", "copy"}},
	Weight:  Hold,
	Lighter: lighterOnPaper,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		paper := c.paper("registration")
		if paper == nil {
			return
		}
		for i := range c.Plan.Operators {
			o := &c.Plan.Operators[i]
			c.checkEvidence(r, wantedPaper{what: "registration with " + o.ID, key: "registered", on: "operator." + o.ID, at: o.At, paper: paper}, o.Registered)
		}
	},
}

var paperPermit = &Rule{
	Name:  "paper/permit",
	Title: "What hangs outdoors on a building has its local permit, or a reason why it needs none",
	Why:   "a mast without the permit that the town asks for comes down at the firm's expense",
	Basis: []Basis{
		practice("whether an antenna or mast outdoors needs a permit is for the local authority to say; the plan keeps its answer")},
	Weight:  Hold,
	Lighter: lighterOnPaper,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		paper := c.paper("permit")
		if c.Plan.Permit == nil && paper == nil && (c.Vehicle() || !c.anythingOutdoors()) {
			return
		}
		c.checkEvidence(r, wantedPaper{what: "permit of the local authority", key: "permit", on: "job", at: c.JobAt(), paper: paper, under: "[paper]"}, c.Plan.Permit)
	},
}

// wantedPaper is a paper that a plan needs, and how messages speak of it.
type wantedPaper struct {
	what, key, on string
	at            source.Place // where it would stand
	under         string       // the table that it belongs to, where that is not at the place
	paper         *limits.Paper
}

// checkEvidence holds one paper. What the plan does not mention at all is not
// assessed; what it mentions and does not have fails.
func (c *Case) checkEvidence(r *Report, w wantedPaper, e *bom.Evidence) {
	var f *Finding
	switch {
	case e.Counts():
		return
	case e == nil:
		f = r.Unknown(w.at, w.on, "the plan says nothing of the %s, so it is not assessed", w.what).
			Then("add %s = { state = … }%s", w.key, inTable(w.under))
	case !e.State.Set:
		return // the state has a finding of its own
	default:
		f = r.Fails(e.State.At, w.on, "the %s is %s", w.what, stateWords(e)).Then("%s", stateRemedy(w.key, e))
		c.lighterUntilBuilt(f)
	}
	if w.paper != nil {
		f.Replacing(w.paper.Explain())
		if c.Profile.NeedsOperatorPermission() && w.key == "consent" {
			f.Says += "; under " + c.Profile.ID + " it stands in place of figures"
		}
	}
}

func inTable(name string) string {
	if name == "" {
		return ""
	}
	return " under " + name
}

// stateWords says how far a paper is that does not count.
func stateWords(e *bom.Evidence) string {
	since := ""
	if e.On.Set {
		since = " since " + e.On.V.String()
	}
	switch e.State.V {
	case "applied":
		return "only applied for" + since + "; granted is expected"
	case "refused":
		return "refused; granted is expected"
	case "not-required":
		return "said not to be required, without a why; so it does not count"
	}
	return "missing; granted is expected"
}

func stateRemedy(key string, e *bom.Evidence) string {
	switch e.State.V {
	case "applied":
		return "ask after it, and file the answer with ref and on"
	case "refused":
		return "do not go on without it: settle the matter, or change the plan"
	case "not-required":
		return "add why, or get it"
	}
	return "get it, and file it as " + key + " = { state = \"granted\", ref = …, on = … }"
}

// lighterUntilBuilt lets a finding weigh less while the job is not being built.
func (c *Case) lighterUntilBuilt(f *Finding) {
	if s := c.Stage(); s != "construction" && s != "as-built" {
		f.Lighter(Punch)
	}
}

// paper is a paper that the plan's profile asks of its bands, or nil.
func (c *Case) paper(id string) *limits.Paper {
	if c.Profile == nil {
		return nil
	}
	var bands []string
	for _, b := range c.Bands() {
		bands = append(bands, b.Name)
	}
	for _, p := range c.Profile.PapersFor(bands...) {
		if p.ID == id {
			return p
		}
	}
	return nil
}

// noProfile says once that papers cannot be assessed without a profile.
func (c *Case) noProfile(r *Report) bool {
	if c.ProfileName() == "" && c.transmits() {
		r.Unknown(c.JobAt(), "job", "neither the plan nor the workspace names a limit profile; which papers the job needs is not assessed").
			Then("name one: profile = %q", "us-fixed-wideband")
	}
	return c.Profile == nil
}

// transmits reports a plan with an amplifier or a router.
func (c *Case) transmits() bool {
	for _, d := range c.Graph.Devices {
		if d.Active() {
			return true
		}
	}
	return false
}

// anythingOutdoors reports a plan that puts up an antenna, a mast or a radio outdoors.
func (c *Case) anythingOutdoors() bool {
	for _, d := range c.Graph.Devices {
		switch d.Kind() {
		case "antenna", "mount", "amplifier", "router":
			if d.Place.Outdoors() && !d.Row.Existing.V {
				return true
			}
		}
	}
	return false
}

var paperPersonal = &Rule{
	Name:  "paper/personal",
	Title: "A booster that the rule leaves to personal use is not put up for a business or the public",
	Why:   "whoever runs it outside the rule runs it without authority; the firm that put it up is asked first",
	Basis: []Basis{
		{"47 CFR 20.21(a)", "as amended by FCC 14-138 and FCC 18-35", "code", "read"}},
	Weight:  Hold,
	Lighter: lighterOnPaper,
	Grave:   true,
	Check: func(c *Case, r *Report) {
		if c.Profile == nil || c.Profile.Personal == nil {
			return
		}
		duty, use := c.Profile.Personal, c.Plan.Job.Use
		for _, d := range c.Graph.Devices {
			if !c.underProfile(d) {
				continue
			}
			switch {
			case !use.Set:
				r.Unknown(c.JobAt(), "job", "who uses %s is not said, so whether it is personal use is not assessed", d.ID).
					Then("add use = %q, %q or %q", "personal", "business", "public").Replacing(duty.Explain()).Beside(d.At, "the booster")
			case use.V != "personal":
				f := r.Fails(use.At, "job", "%s is a %s consumer booster and the job is for %s use; %s leaves it to personal use", d.ID, class(d), use.V, c.Profile.ID).
					Then("read the rule with the operator; else take a class that is not bound to personal use").Replacing(duty.Explain()).Beside(d.At, "the booster")
				c.lighterUntilBuilt(f)
			}
			return // one is enough
		}
	},
}

// underProfile reports an amplifier of the class that the plan's profile is for.
func (c *Case) underProfile(d *bom.Device) bool {
	if d.Part == nil || d.Part.Amplifier == nil {
		return false
	}
	own := d.Part.Amplifier.Class
	return !own.Set || !c.Profile.Class.Set || own.V == c.Profile.Class.V
}

func class(d *bom.Device) string { return d.Part.Amplifier.Class.Or("wideband") }
