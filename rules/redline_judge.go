package rules

import (
	"cmp"
	"maps"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

type wordVal = source.Val[string]

// compareFiles compares what rules on the workspace's own files find: what stands
// there says nothing of the change, what is new does.
func (c *comparison) compareFiles() {
	var lists sideOf[[]*Finding]
	for side, f := range c.firms {
		lists[side] = f.inspectFiles()
	}
	x := &found{at: [4][]*Finding{lists[atBase], lists[atBase], lists[atBase], lists[atHead]}}
	moved, stands := x.compare()
	for i := range moved {
		m := &moved[i]
		switch c.firms[atHead].sortOf(m.At.Path()) {
		case sortCatalog:
			m.Charge = ToWork
		case sortProfiles, sortHead:
			m.Charge = ToRulers
		default:
			m.Charge = ToFacts
		}
	}
	c.out.Workspace = append(moved, c.out.Workspace...)
	c.out.Standing.add(stands)
}

// judge counts the holds that stand on the head: by its own rulers, and by those of
// the base. Of jobs whose plans did not change only new ones count.
func (c *comparison) judge() {
	g := &c.out.Gate
	c.out.RulersMoved = c.moved.rulers
	for _, p := range c.pairs {
		c.out.RulersMoved = c.out.RulersMoved || p.moved.rulers && !p.isNew() && !p.isGone() || p.isNew() && len(waiversOf(p.plan[atHead])) > 0
	}
	g.Differs = c.out.RulersMoved
	for _, p := range c.pairs {
		j := p.job
		if p.isGone() {
			continue
		}
		own := slices.Concat(c.at(p, steps[3].mix).findings, c.shelfFound(c.final, p))
		base := slices.Concat(c.at(p, underBase).findings, c.shelfFound(c.under, p))
		j.Holds, j.HoldsBase = holds(own), holds(base)
		for _, f := range base {
			held := func(x *Finding) bool {
				return x.Rule == f.Rule && x.On == f.On && x.Band == f.Band && x.Waived == nil && x.Weight == Hold
			}
			if f.Waived == nil && f.Weight == Hold && !slices.ContainsFunc(own, held) {
				j.BaseHolds = append(j.BaseHolds, f)
			}
		}
		g.UnderHead += j.Holds
		g.UnderBase += j.HoldsBase
		c.ownProfile(p)
	}
	for _, o := range c.out.Others {
		g.UnderHead += o.Holds
		g.UnderBase += o.Holds
	}
	for _, m := range c.out.Workspace {
		if m.How.Worse() && m.Weight == Hold && m.Waived == nil {
			g.UnderHead++
			g.UnderBase++
		}
	}
	g.Held = g.UnderHead > 0 || g.UnderBase > 0
}

// waiversOf lists the waivers of a plan that may be missing.
func waiversOf(p *bom.Plan) []bom.Waiver {
	if p == nil {
		return nil
	}
	return p.Waivers
}

func (c *comparison) shelfFound(s *shelfState, p *pair) []*Finding {
	if s == nil || p.entry[atHead] == nil {
		return nil
	}
	return s.found[p.entry[atHead].Path]
}

func holds(list []*Finding) int {
	n := 0
	for _, f := range list {
		if f.Weight == Hold && f.Waived == nil {
			n++
		}
	}
	return n
}

// ownProfile compares row by row the profiles and codes that a plan names now and
// named before.
func (c *comparison) ownProfile(p *pair) {
	if p.isNew() || p.broken[atBase] || p.broken[atHead] || p.plan[atBase] == nil || p.plan[atHead] == nil {
		return
	}
	a, b := &p.plan[atBase].Job, &p.plan[atHead].Job
	x, y := &c.firms[atBase].Workspace, &c.firms[atHead].Workspace
	if was, now := a.Profile.Or(x.Profile.V), b.Profile.Or(y.Profile.V); was != now && !c.told("profile", was, now) {
		c.rulerRows("profile", was, now, profileRows(c.firms[atBase].Limits.Profile(was)), profileRows(c.firms[atHead].Limits.Profile(now)))
	}
	if was, now := a.Code.Or(x.Code.V), b.Code.Or(y.Code.V); was != now && !c.told("code", was, now) {
		c.rulerRows("code", was, now, codeRows(c.firms[atBase].Limits.Code(was)), codeRows(c.firms[atHead].Limits.Code(now)))
	}
}

// told reports whether the rows of two rulers have been compared, and notes that they
// will have been.
func (c *comparison) told(sort, was, now string) bool {
	key := sort + " " + was + " " + now
	if c.compared == nil {
		c.compared = map[string]bool{}
	}
	done := c.compared[key]
	c.compared[key] = true
	return done
}

// costs says what the changed jobs' parts are worth at the cheapest offers, and what
// has to be bought for all jobs that the change concerns.
func (c *comparison) costs() {
	head := c.firms[atHead]
	k := &c.out.Cost
	k.Currency = head.Workspace.Currency.V
	k.Known = len(c.firms[atBase].Offers.Offers) > 0 || len(head.Offers.Offers) > 0
	if !k.Known {
		return
	}
	for _, p := range c.pairs {
		base, now := takeoffOf(c.at(p, steps[0].mix)), takeoffOf(c.at(p, steps[3].mix))
		j := p.job
		j.Value[atBase], _ = valueAt(c.firms[atBase], base)
		j.Value[atHead], j.Unpriced = valueAt(head, now)
		atHeadPrices, _ := valueAt(head, base)
		j.ValueByFacts = atHeadPrices - j.Value[atBase]
		k.Value[atBase] += j.Value[atBase]
		k.Value[atHead] += j.Value[atHead]
	}
	if c.first == nil {
		return
	}
	jobs := map[string]bool{}
	for _, p := range c.pairs {
		for _, e := range p.entry {
			if e != nil {
				jobs[bom.JobOf(e.Path)] = true
			}
		}
	}
	for _, o := range c.out.Others {
		jobs[o.Job] = true
	}
	if len(jobs) == 0 {
		return
	}
	k.Proved = true
	for side, s := range []*shelfState{c.first, c.final} {
		b := bom.Buy(s.Allocation, s.Offers, s.Catalog.Look, bom.Terms{Jobs: jobs, Until: farOff, Nodes: buyNodes})
		k.ToBuy[side] = b.Total
		for _, f := range b.Freight {
			k.Freight[side] += f.Amount
		}
		k.Proved = k.Proved && b.Proved
	}
}

// farOff is beyond every job: what a change makes necessary is counted, whenever it
// will be bought.
var farOff = unit.Date{Year: 9999, Month: 12, Day: 31}

// buyNodes is how far the search for the least purchase goes.
const buyNodes = 20000

// leastPrivate is how long a number or address must be to be looked for: shorter ones
// would take figures away.
const leastPrivate = 4

// valueAt is what a takeoff is worth at the cheapest offers of a firm, and the parts
// that have none.
func valueAt(f *Firm, t *bom.Takeoff) (sum unit.Money, none []string) {
	for _, q := range t.Rows {
		w, ok := f.Offers.Worth(q.Part.ID, f.Today)
		if !ok {
			none = append(none, q.Part.ID)
			continue
		}
		sum += w.Of(quantityIn(t, q.Part.ID))
	}
	return sum, none
}

// private collects what no comment may show: serial numbers and addresses.
func (c *comparison) private() {
	all := map[string]bool{}
	for _, f := range c.firms {
		for i := range f.Stock.Serials {
			all[f.Stock.Serials[i].Number] = true
		}
		for i := range f.Workspace.Premises.Shelves {
			for _, line := range f.Workspace.Premises.Shelves[i].Address.V {
				all[line.V] = true
			}
		}
		for i := range f.Offers.Vendors {
			v := &f.Offers.Vendors[i]
			all[v.Account.V], all[v.Contact.V] = true, true
		}
	}
	for _, p := range c.pairs {
		for _, plan := range []*bom.Plan{p.was, p.plan[atHead]} {
			if plan == nil {
				continue
			}
			for i := range plan.Devices {
				all[plan.Devices[i].Serial.V] = true
			}
			for i := range plan.Readings {
				all[plan.Readings[i].Serial.V] = true
			}
		}
	}
	delete(all, "")
	c.out.Private = slices.Sorted(maps.Keys(all))
	slices.SortStableFunc(c.out.Private, func(a, b string) int { return cmp.Compare(len(b), len(a)) }) // the longest first, for one may hold another
	c.out.Private = slices.DeleteFunc(c.out.Private, func(s string) bool { return len(strings.TrimSpace(s)) < leastPrivate })
}
