package rules

import (
	"cmp"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

// shelfState is the shelf shared out in one mix, and what rules of scope firm say of
// it, by plan file; what stands on the workspace's own files has no plan.
type shelfState struct {
	*Shelf
	found map[string][]*Finding
}

// shelfIn shares the stock of a mix out over its plans. Plans that the change does not
// concern take the same in every mix.
func (c *comparison) shelfIn(x mix) *shelfState {
	f := c.firm(x)
	s := &Shelf{Firm: f}
	plans := slices.Clone(c.others)
	for _, p := range c.pairs {
		if at := c.at(p, x); at != nil {
			plans = append(plans, at.shelf)
		}
	}
	byPath := map[string]shelfPlan{}
	for _, p := range plans {
		if p.demand != nil {
			s.Demands = append(s.Demands, p.demand)
			byPath[p.demand.Path] = p
		}
	}
	slices.SortStableFunc(s.Demands, func(d, e *bom.Demand) int { return strings.Compare(d.Path, e.Path) })
	s.Allocation = bom.Allocate(s.Demands, f.Stock, &f.Workspace.Premises, &f.Workspace.House.House)
	s.index()
	paths := map[string]bool{}
	for _, d := range s.Demands {
		paths[d.Path] = true
	}
	said := map[string][]*Report{}
	for _, rule := range Rules {
		if rule.CheckShelf == nil {
			continue
		}
		all := &Report{rule: rule}
		rule.CheckShelf(s, all)
		for path, one := range all.byFile(paths) {
			said[path] = append(said[path], one)
		}
	}
	out := &shelfState{Shelf: s, found: map[string][]*Finding{"": f.onPlan(said[""], nil, "")}}
	for path, p := range byPath {
		out.found[path] = f.onPlan(said[path], p.waivers, p.demand.Stage)
	}
	return out
}

// compareShelf says what the change means for the shelf, and for jobs whose plans did
// not change.
func (c *comparison) compareShelf() {
	all := c.moved.or(c.goods)
	for _, p := range c.pairs {
		all = all.or(p.moved)
		if p.isNew() || p.isGone() || p.entry[atBase].Path != p.entry[atHead].Path || p.broken[atBase] || p.broken[atHead] {
			all.work = true
		}
	}
	if !all.work && !all.facts && !all.rulers {
		return
	}
	states := map[mix]*shelfState{}
	in := func(x mix) *shelfState {
		x = all.of(x)
		if states[x] == nil {
			states[x] = c.shelfIn(x)
		}
		return states[x]
	}
	var at [4]*shelfState
	for i, st := range steps {
		at[i] = in(st.mix)
	}
	c.out.Bins = movedBins(at[0].Stock, at[3].Stock)
	done := map[string]bool{}
	for _, p := range c.pairs {
		done[p.path()] = true
		c.shelfOf(p, at)
	}
	for _, d := range at[3].Demands {
		if !done[d.Path] {
			c.shelfOfOther(d, at)
		}
	}
	slices.SortStableFunc(c.out.Others, func(a, b OtherJob) int {
		return cmp.Or(cmp.Compare(b.worst(), a.worst()), strings.Compare(a.On.String(), b.On.String()), strings.Compare(a.Job, b.Job))
	})
	c.shelfFiles(at)
	if all.rulers {
		c.under = in(underBase)
	} else {
		c.under = at[3]
	}
	c.final = at[3]
	c.first = at[0]
}

// worst orders jobs: those that come to be short first.
func (o *OtherJob) worst() int {
	switch {
	case slices.ContainsFunc(o.Short, func(m MovedShort) bool { return m.Newly() }):
		return 3
	case slices.ContainsFunc(o.Findings, func(m MovedFound) bool { return m.How.Worse() }):
		return 2
	}
	return 1
}

// shelfOf adds what the shelf says to a job whose plan is concerned.
func (c *comparison) shelfOf(p *pair, at [4]*shelfState) {
	x := &found{on: func(_ int, on string) string { return p.renames.On(on) }}
	job := func(s int) string {
		if e := p.entry[steps[s].mix.work]; e != nil {
			return e.Path
		}
		return ""
	}
	for s := range at {
		if path := job(s); path != "" {
			x.at[s] = at[s].found[path]
		}
	}
	x.had = func(string) bool { return !p.isNew() }
	moved, stands := x.compare()
	p.job.Findings = append(p.job.Findings, moved...)
	p.job.Standing.add(stands)
	names := sideOf[string]{p.job.Job, p.job.Job}
	if p.entry[atBase] != nil {
		names[atBase] = bom.JobOf(p.entry[atBase].Path)
	}
	p.job.Short = movedShorts(at, names)
	p.job.Wasted = c.wasted(p, at)
}

func (c *comparison) shelfOfOther(d *bom.Demand, at [4]*shelfState) {
	x := &found{}
	for s := range at {
		x.at[s] = at[s].found[d.Path]
	}
	x.had = func(string) bool { return true }
	moved, _ := x.compare()
	o := OtherJob{Job: d.Job, Path: d.Path, Crew: d.Crew, Title: d.Title, On: d.On, Findings: moved, Short: movedShorts(at, sideOf[string]{d.Job, d.Job})}
	for _, m := range moved {
		if m.How.Worse() && m.Weight == Hold && m.Waived == nil {
			o.Holds++
		}
	}
	if len(o.Findings) > 0 || len(o.Short) > 0 {
		c.out.Others = append(c.out.Others, o)
	}
}

// shelfFiles compares what stands on stock files.
func (c *comparison) shelfFiles(at [4]*shelfState) {
	x := &found{}
	for s := range at {
		x.at[s] = at[s].found[""]
	}
	moved, stands := x.compare()
	c.out.Workspace = append(c.out.Workspace, moved...)
	c.out.Standing.add(stands)
}

// movedShorts lists the parts of which a job is short otherwise than it was, charged
// to the step in which that came about.
func movedShorts(at [4]*shelfState, job sideOf[string]) []MovedShort {
	var by [4]map[string]*bom.Claim
	var parts []string
	for s := range at {
		by[s] = map[string]*bom.Claim{}
		for _, c := range at[s].Allocation.ClaimsOf(job[steps[s].mix.work]) {
			id := c.Part().ID
			by[s][id] = c
			if !slices.Contains(parts, id) {
				parts = append(parts, id)
			}
		}
	}
	slices.Sort(parts)
	short := func(s int, part string) catalog.Quantity {
		if c := by[s][part]; c != nil {
			return c.ShortBy()
		}
		return catalog.Quantity{}
	}
	var out []MovedShort
	for _, part := range parts {
		m := MovedShort{Part: part, Was: short(0, part), Now: short(3, part)}
		if m.Was == m.Now {
			continue
		}
		for s := 1; s < 4; s++ {
			if short(s-1, part) != m.Now && short(s, part) == m.Now {
				m.Charge = Charge(s)
			}
		}
		if c := by[3][part]; c != nil {
			m.Needed = c.Needed
			for _, p := range c.ShortLines {
				m.Lines = append(m.Lines, p.Line)
			}
			if len(c.Late) > 0 {
				m.Order, m.Day = c.Late[0].Supply.Name(), c.Late[0].Supply.Day
			}
		}
		out = append(out, m)
	}
	return out
}

func quantityIn(t *bom.Takeoff, part string) catalog.Quantity {
	q := t.Row(part)
	if q == nil {
		return catalog.Quantity{}
	}
	if q.Part.CutStock() {
		return catalog.Quantity{Length: q.Length}
	}
	return catalog.Quantity{Each: int64(q.Each)}
}
