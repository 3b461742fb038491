package rules

import (
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// Shelf is what rules of scope firm look at: the firm with its stock, and what
// each plan takes of it. Such a rule reports at rows of stock files and at places
// of plans alike; every finding goes to the file in which it stands.
type Shelf struct {
	*Firm
	Demands    []*bom.Demand // in the order of the plan files
	Allocation *bom.Allocation

	short    []*lack                   // once it was asked for
	offers   map[string]*catalog.Offer // the soonest, by part
	claiming map[string][]*bom.Demand  // by part
}

// Claiming lists the demands that claim a part: plans in review or construction
// that take it.
func (s *Shelf) Claiming(part string) []*bom.Demand { return s.claiming[part] }

// index lists who claims what, once the demands are known.
func (s *Shelf) index() {
	s.claiming = map[string][]*bom.Demand{}
	for _, d := range s.Demands {
		if !d.Claims() {
			continue
		}
		for i := range d.Needs {
			id := d.Needs[i].Part.ID
			s.claiming[id] = append(s.claiming[id], d)
		}
	}
}

// shelfPlan is what outlives the work on one plan for the sake of the shelf.
type shelfPlan struct {
	demand  *bom.Demand  // nil of a plan that could not be read whole
	waivers []bom.Waiver // of rules of scope firm
}

// forShelf keeps what the plan takes, and its waivers of rules of scope firm.
func (c *Case) forShelf() shelfPlan {
	d := bom.DemandOf(c.Plan, c.Takeoff())
	d.At = c.JobAt()
	first := map[string]source.Place{}
	for _, u := range c.partUses() {
		if was, named := first[u.id.V]; !named || u.id.At.Before(was) {
			first[u.id.V] = u.id.At
		}
	}
	for i := range d.Needs {
		n := &d.Needs[i]
		if at, named := first[n.Part.ID]; named && at.File == c.Plan.File {
			n.At = at
		} else if n.At.File != c.Plan.File {
			n.At = d.At // what joints use up is named nowhere in the plan
		}
	}
	_, waivers := c.waivers()
	for i, w := range waivers {
		only := *(&Settled{Waiver: &w}).alone().Waiver
		only.Rule.At, only.UpTo.At = w.Rule.At, w.UpTo.At
		waivers[i] = only
	}
	return shelfPlan{d, waivers}
}

// waivers parts the waivers of the plan: those of rules that look at the plan
// alone, and those of rules of scope firm. One that stands on nothing is said to lead
// nowhere and no more.
func (c *Case) waivers() (here, shelf []bom.Waiver) {
	for _, w := range c.Plan.Waivers {
		if w.On.Set && !c.Graph.Leads(w.On.V) {
			continue
		}
		if r := Find(w.Rule.V); r != nil && r.Firm() {
			shelf = append(shelf, w)
		} else {
			here = append(here, w)
		}
	}
	return here, shelf
}

// places are the places that have to outlive the plan's text.
func (p *shelfPlan) places() []*source.Place {
	if p.demand == nil {
		return nil
	}
	out := p.demand.Places()
	for i := range p.waivers {
		out = append(out, &p.waivers[i].Rule.At, &p.waivers[i].UpTo.At)
	}
	return out
}

// inspectShelf runs the rules of scope firm and puts their findings where they
// stand, on plans or on the workspace's own files. What stands on a plan that was
// not asked for is dropped.
func (f *Firm) inspectShelf(r *Result, plans, others []shelfPlan) {
	if f.noShelf {
		r.Notices = append(r.Notices, "rules that need the shelf are not run: "+strings.Join(shelfRules(), " "))
		return
	}
	s := &Shelf{Firm: f}
	for _, p := range slices.Concat(plans, others) {
		if p.demand != nil {
			s.Demands = append(s.Demands, p.demand)
		}
	}
	slices.SortStableFunc(s.Demands, func(d, e *bom.Demand) int { return strings.Compare(d.Path, e.Path) })
	f.doing(sharingOut)
	s.Allocation = bom.Allocate(s.Demands, f.Stock, &f.Workspace.Premises, &f.Workspace.House.House)
	s.index()
	planPaths := map[string]bool{}
	for _, e := range f.PlanFiles {
		planPaths[e.Path] = true
	}
	found := map[string][]*Report{} // by plan file
	for _, rule := range Rules {
		if rule.CheckShelf == nil {
			continue
		}
		all := &Report{rule: rule}
		rule.CheckShelf(s, all)
		own := &Report{rule: rule}
		for path, one := range all.byFile(planPaths) {
			if path == "" {
				own = one
				continue
			}
			found[path] = append(found[path], one)
		}
		r.Workspace = append(r.Workspace, f.weigh(own, "")...)
	}
	sortFindings(r.Workspace)
	for i, p := range r.Plans {
		p.join(f, found[p.Path], plans[i].waivers)
	}
}

// shelfRules lists the rules of scope firm.
func shelfRules() []string {
	var out []string
	for _, r := range Rules {
		if r.Firm() {
			out = append(out, r.Name)
		}
	}
	return out
}

// byFile parts the findings of a report by the plan on which they stand, "" for
// those on the workspace's own files.
func (r *Report) byFile(plans map[string]bool) map[string]*Report {
	out := map[string]*Report{}
	for _, x := range r.findings {
		path := x.At.Path()
		if !plans[path] {
			path = ""
		}
		if out[path] == nil {
			out[path] = &Report{rule: r.rule}
		}
		out[path].findings = append(out[path].findings, x)
	}
	return out
}

// join adds what rules of scope firm found on a plan to its findings, after its
// waivers of such rules were applied.
func (p *PlanResult) join(f *Firm, found []*Report, waivers []bom.Waiver) {
	p.Findings = append(p.Findings, f.onPlan(found, waivers, p.Stage)...)
	sortFindings(p.Findings)
}

// onPlan are the findings of rules of scope firm on a plan at a stage, with what is to
// be said of its waivers of such rules.
func (f *Firm) onPlan(found []*Report, waivers []bom.Waiver, stage string) []*Finding {
	var out []*Finding
	for _, one := range found {
		out = append(out, f.weigh(one, stage)...)
	}
	sortFindings(out)
	r := &Report{rule: paperWaiver}
	for _, w := range settle(waivers, out, f.Today) {
		if stage != "cancelled" {
			checkWaiver(w, r)
		}
	}
	return append(out, f.weigh(r, stage)...)
}
