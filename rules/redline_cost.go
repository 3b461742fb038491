package rules

import (
	"driploop/bom"
	"driploop/catalog/unit"
)

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
		if p.broken[atBase] || p.broken[atHead] {
			continue
		}
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
