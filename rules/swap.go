package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// Purchase says what to buy over all plans, with substitutes where they help and the
// plans still stand up to the rules; the allocation is of the plans with them.
func (f *Firm) Purchase(d *Demands, t bom.Terms) (*bom.Purchase, *bom.Allocation) {
	share := func(all []*bom.Demand) *bom.Allocation {
		return f.Allocate(&Demands{All: all})
	}
	w := &swapper{firm: f, bases: map[string]*swapBase{}}
	return bom.Choice{
		Demands: d.All,
		Swaps:   bom.SwapsOf(share(d.All), f.Catalog.Look, f.hasTools),
		Replan:  w.replan,
		Share:   share,
		Buy: func(a *bom.Allocation) *bom.Purchase {
			f.doing(buyingParts)
			return bom.Buy(a, f.Offers, f.Catalog.Look, t)
		},
	}.Best()
}

// hasTools reports whether the crew of a job has what a part is put on with. A job
// without a crew is taken to have nothing.
func (f *Firm) hasTools(d *bom.Demand, p *catalog.Part) bool {
	crew := f.Workspace.Premises.Crew(d.Crew)
	for _, tool := range p.Tools.V {
		if crew == nil || !catalog.Has(crew.Tools, tool.V) {
			return false
		}
	}
	return true
}

// swapper looks at plans with substitutes.
type swapper struct {
	firm  *Firm
	bases map[string]*swapBase // by job
}

// swapBase is a plan as it stands.
type swapBase struct {
	entry    source.Entry
	graph    *bom.Graph
	demand   *bom.Demand
	gaps     int
	findings map[swapFinding]int
}

// swapFinding is what makes a finding the same one with another part in the plan.
type swapFinding struct {
	rule    string
	on      string
	band    string
	outcome Outcome
	weight  Weight
}

func (w *swapper) base(job string) *swapBase {
	b := w.bases[job]
	if b != nil {
		return b
	}
	for _, e := range w.firm.PlanFiles {
		if bom.JobOf(e.Path) != job {
			continue
		}
		if b != nil {
			return nil // two plans of one name
		}
		c, broken := w.firm.Case(e)
		if broken {
			return nil
		}
		t := c.Graph.Takeoff(&w.firm.Workspace.House.House)
		b = &swapBase{entry: e, graph: c.Graph, demand: bom.DemandOf(c.Plan, t), gaps: len(t.Gaps), findings: serious(c.run(false))}
	}
	w.bases[job] = b
	return b
}

// serious counts the findings that a substitute must not add to: holds, punches, and
// whatever is not assessed.
func serious(findings []*Finding) map[swapFinding]int {
	out := map[swapFinding]int{}
	for _, x := range findings {
		if x.Weight >= Punch || x.Outcome == Unknown {
			out[swapFinding{x.Rule.Name, x.On, x.Band, x.Outcome, x.Weight}]++
		}
	}
	return out
}

// replan is what a job takes with substitutes. It is nil where its plan has a finding
// that it has not as it stands, where it keeps some of the part, or where the crew
// lacks a tool for what else the substitute calls for.
func (w *swapper) replan(job string, swaps []bom.Swap) *bom.Demand {
	b := w.base(job)
	if b == nil {
		return nil
	}
	doc, problems := readDoc(w.firm.Tree, b.entry)
	if doc == nil {
		return nil
	}
	plan, more := bom.ReadPlan(doc)
	for _, s := range swaps {
		s.Put(plan, b.graph)
	}
	c := newCase(w.firm, plan, append(problems, more...))
	t := c.Graph.Takeoff(&w.firm.Workspace.House.House)
	d := bom.DemandOf(plan, t)
	if len(t.Gaps) > b.gaps {
		return nil
	}
	for _, s := range swaps {
		if d.Need(s.From) != nil {
			return nil
		}
	}
	for i := range d.Needs {
		if p := d.Needs[i].Part; b.demand.Need(p.ID) == nil && !w.firm.hasTools(d, p) {
			return nil
		}
	}
	for x, n := range serious(c.run(false)) {
		if n > b.findings[x] {
			return nil
		}
	}
	return d
}
