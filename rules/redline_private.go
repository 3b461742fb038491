package rules

import (
	"cmp"
	"maps"
	"slices"
	"strings"

	"driploop/bom"
)

// leastPrivate is how long a number or address must be to be looked for: shorter ones
// would take figures away.
const leastPrivate = 4

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
