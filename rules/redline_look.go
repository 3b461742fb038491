package rules

import (
	"maps"
	"slices"

	"driploop/bom"
	"driploop/catalog/source"
)

// seen is what a plan comes to in one mix.
type seen struct {
	findings []*Finding
	figures  []planFigure
	takeoff  *bom.Takeoff
	shelf    shelfPlan
	stage    string
	only     string // why only its file was looked at, or ""
}

// at is what a pair comes to in a mix; nil where the mix has no plan.
func (c *comparison) at(p *pair, x mix) *seen {
	if p.entry[x.work] == nil {
		return nil
	}
	if p.broken[atBase] || p.broken[atHead] {
		x = mix{x.work, x.work, x.work}
	} else {
		x = p.moved.or(c.moved).of(x)
	}
	if s := p.seen[x]; s != nil {
		return s
	}
	s := c.look(p, x)
	p.seen[x] = s
	return s
}

// firmFor is the firm of a mix for plans, for which stock and offers do not count.
func (c *comparison) firmFor(x mix) *Firm { return c.firm(c.moved.or(c.goods).of(x)) }

// look looks at a pair in a mix.
func (c *comparison) look(p *pair, x mix) *seen {
	f := c.firmFor(x)
	faults := slices.Clone(p.faults[x.work])
	if p.broken[x.work] {
		plan := p.plan[x.work]
		if plan == nil {
			plan = &bom.Plan{ID: bom.JobOf(p.entry[x.work].Path), File: &source.File{Path: p.entry[x.work].Path}}
		}
		k := &Case{Firm: f, Plan: plan, Problems: faults}
		return &seen{findings: k.run(true), stage: k.Stage(), only: "the plan file cannot be read whole"}
	}
	k := newCase(f, planOf(p.plan, x), faults)
	s := &seen{stage: k.Stage()}
	if s.stage == "cancelled" {
		s.only = "the job is cancelled"
	}
	s.findings = k.run(s.only != "")
	if s.only == "" {
		s.figures, s.takeoff = k.planFigures(), k.Takeoff()
	}
	s.shelf = k.forShelf()
	if x.work == atBase && (len(p.renames) > 0 || p.was.ID != p.plan[atBase].ID) {
		s.shelf = newCase(f, p.was, nil).forShelf() // the store's books go by the old names
	}
	return s
}

// comparePlans fills in what the change means for one job, the shelf left out.
func (c *comparison) comparePlans(p *pair) {
	if p.doc[atBase] == nil && p.doc[atHead] == nil {
		c.read(p)
	}
	p.seen = map[mix]*seen{}
	p.was = p.plan[atBase]
	if p.plan[atBase] != nil && p.plan[atHead] != nil && !p.broken[atBase] && !p.broken[atHead] {
		p.renames = bom.FollowRenames(p.plan[atBase], p.plan[atHead])
		p.plan[atBase] = p.plan[atBase].Renamed(p.renames)
	}
	j := p.begin()
	c.planChanges(p)
	j.Charges = p.moved.charges()
	j.Changes = p.changes
	j.SaysSame = j.How == "changed" && len(p.changes) == 0 && !p.broken[atBase] && !p.broken[atHead]
	head, base := c.at(p, steps[3].mix), c.at(p, steps[0].mix)
	if head != nil {
		j.Broken = head.only
	}
	c.compareFound(p)
	if base != nil && head != nil && base.only == "" && head.only == "" {
		var at [4][]planFigure
		for s, st := range steps {
			at[s] = c.at(p, st.mix).figures
		}
		j.Figures, j.Largest = movedFigures(at)
	}
	if !p.broken[atBase] && !p.broken[atHead] { // what cannot be read takes nobody knows what
		j.Takeoff = movedParts(takeoffOf(base), takeoffOf(head))
	}
	j.Tools = c.toolLacks(j)
	j.Waivers = c.movedWaivers(p)
	c.at(p, underBase)
	for _, s := range p.seen {
		s.figures = nil
	}
	letGoPair(p)
}

// begin says which job it is.
func (p *pair) begin() *JobChange {
	if p.job == nil {
		p.job = &JobChange{How: "changed"}
	}
	j := p.job
	plan := p.plan[atHead]
	switch {
	case p.isGone():
		j.How, plan = "gone", p.plan[atBase]
	case p.isNew():
		j.How = "new"
	case p.entry[atBase].Path != p.entry[atHead].Path:
		j.How, j.WasJob = "renamed", bom.JobOf(p.entry[atBase].Path)
		if j.WasJob == bom.JobOf(p.entry[atHead].Path) {
			j.WasJob = p.entry[atBase].Path
		}
	}
	j.Path = p.path()
	j.Job = bom.JobOf(j.Path)
	if plan != nil {
		j.Title, j.Stage, j.Crew, j.On = plan.Job.Title.V, plan.Job.Stage.Or("draft"), plan.Job.Crew.V, plan.Job.InstallOn.V
	}
	return j
}

func takeoffOf(s *seen) *bom.Takeoff {
	if s == nil || s.takeoff == nil {
		return &bom.Takeoff{}
	}
	return s.takeoff
}

// movedParts lists the parts of which two takeoffs hold different quantities.
func movedParts(was, now *bom.Takeoff) []MovedPart {
	ids := map[string]bool{}
	for _, t := range []*bom.Takeoff{was, now} {
		for _, q := range t.Rows {
			ids[q.Part.ID] = true
		}
	}
	var out []MovedPart
	for _, id := range slices.Sorted(maps.Keys(ids)) {
		m := MovedPart{Part: id, Was: quantityIn(was, id), Now: quantityIn(now, id)}
		if m.Was != m.Now {
			out = append(out, m)
		}
	}
	return out
}

// letGoPair moves what outlives the comparison of two plans off their text.
func letGoPair(p *pair) {
	for side, d := range p.doc {
		if d == nil {
			continue
		}
		var places []*source.Place
		done := map[*Finding]bool{}
		var found []*Finding
		for _, s := range p.seen {
			places = append(places, s.shelf.places()...)
			for _, f := range s.findings {
				if !done[f] {
					done[f] = true
					found = append(found, f)
				}
			}
		}
		for _, m := range p.job.Findings {
			if !done[m.Finding] {
				done[m.Finding] = true
				found = append(found, m.Finding)
			}
		}
		letGo(d.File, found, places)
		p.doc[side] = nil
	}
}
