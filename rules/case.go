package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
)

// Case is everything that rules may know of one plan. It is made once and not
// changed; what several rules need is computed on first use and kept.
type Case struct {
	Firm     *Firm
	Plan     *bom.Plan
	Graph    *bom.Graph
	Problems []source.Problem // of the plan file
	Profile  *limits.Profile  // nil where none is named or known
	Code     *limits.Code     // likewise
	Waivers  []*Settled       // filled before paper/waiver runs

	stood map[*bom.Device][]*bom.Device // what stands on what, once it was asked for
	bands []catalog.Band
	chain *Chain
	taken *bom.Takeoff
	touch []touching
	emit  []*emitter
	refs  []reference
	work  []workplace

	routers map[*bom.Device]*bom.Device // by the device at the other end of a line
	power   *supplies
}

// newCase makes the case of a plan that has been read.
func newCase(f *Firm, p *bom.Plan, problems []source.Problem) *Case {
	c := &Case{Firm: f, Plan: p, Problems: problems}
	c.Graph = bom.Resolve(p, f.Catalog)
	c.Profile = f.Limits.Profile(c.ProfileName())
	c.Code = f.Limits.Code(c.CodeName())
	c.checkNames()
	for _, b := range p.Job.Bands.V {
		band, ok := catalog.LookBand(b.V)
		if ok && !slices.ContainsFunc(c.bands, func(x catalog.Band) bool { return x.Name == band.Name }) {
			c.bands = append(c.bands, band) // a band that is named twice is planned once
		}
	}
	return c
}

// checkNames holds that the profile, code and crew that the plan names exist.
func (c *Case) checkNames() {
	if !source.ValidID(c.Plan.ID) {
		c.Problems = append(c.Problems, source.Problem{Kind: source.Value, At: c.Plan.File.Start(),
			Says: "the file's name is the job's ID, and " + source.Quote(c.Plan.ID) + " cannot be referred to",
			Do:   "rename the file: letters, digits, - and _, starting with a letter or digit"})
	}
	for _, other := range c.Firm.plansOf(c.Plan.ID) {
		if other != c.Plan.File.Path {
			c.Problems = append(c.Problems, source.Problem{Kind: source.Value, At: c.Plan.File.Start(),
				Says: "the file's name is the job's ID, and " + source.Quote(other) + " is the same job: both claim goods, and what is issued to it cannot be told apart",
				Do:   "rename one of the two, or take it away; names that differ in case alone are the same"})
		}
	}
	var crews []string
	for _, crew := range c.Firm.Workspace.Premises.Crews {
		crews = append(crews, crew.ID)
	}
	j := &c.Plan.Job
	for _, n := range []struct {
		v     source.Val[string]
		what  string
		known []string
	}{
		{j.Profile, "profile", c.Firm.Limits.ProfileIDs()},
		{j.Code, "code", c.Firm.Limits.CodeIDs()},
		{j.Crew, "crew", crews},
	} {
		if p, bad := unknownName(n.v, n.what, n.known); bad {
			c.Problems = append(c.Problems, p)
		}
	}
}

// ProfileName is the limit profile of the plan, or the workspace's, or "".
func (c *Case) ProfileName() string { return c.Plan.Job.Profile.Or(c.Firm.Workspace.Profile.V) }

// CodeName is the grounding and safety code of the plan, or the workspace's, or "".
func (c *Case) CodeName() string { return c.Plan.Job.Code.Or(c.Firm.Workspace.Code.V) }

// Stage is how far the job has come.
func (c *Case) Stage() string { return c.Plan.Job.Stage.Or("draft") }

// Vehicle reports an install in a vehicle.
func (c *Case) Vehicle() bool { return c.Plan.Job.Setting.V == "vehicle" }

// House is what the firm asks of itself.
func (c *Case) House() *House { return &c.Firm.Workspace.House }

// Lines are the lines of the plan.
func (c *Case) Lines() *bom.Lines { return c.Graph.Lines() }

// Takeoff is what the plan takes, counted on first use.
func (c *Case) Takeoff() *bom.Takeoff {
	if c.taken == nil {
		c.taken = c.Graph.Takeoff(&c.House().House)
	}
	return c.taken
}

// Bands lists the bands that the plan is for, by 3GPP.
func (c *Case) Bands() []catalog.Band { return c.bands }

// Today is the day on which the plan is looked at.
func (c *Case) Today() unit.Date { return c.Firm.Today }

// Chain is the radio chain of the plan, computed on first use.
func (c *Case) Chain() *Chain {
	if c.chain == nil {
		c.chain = newChain(c)
	}
	return c.chain
}

// JobAt is the place of [job], or of the beginning of the file.
func (c *Case) JobAt() source.Place {
	if c.Plan.Job.At.IsZero() {
		return c.Plan.File.Start()
	}
	return c.Plan.Job.At
}
