package rules

import (
	"fmt"
	"sort"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/rules/rf"
)

// remedy says what of the catalog would join a pair that does not join: another
// connector on an end that is made on site, another jumper, an adapter.
func (c *Case) remedy(t touching) string {
	var ways []string
	for _, n := range []*bom.Node{t.mate.A, t.mate.B} {
		if w := c.otherEnd(t, n); w != "" {
			ways = append(ways, w)
		}
	}
	if w := c.adapterFor(t); w != "" {
		ways = append(ways, w)
	}
	if len(ways) == 0 {
		return "nothing in the catalog joins the two; change one of them"
	}
	return strings.Join(ways, ", or ")
}

// otherEnd says which connector or jumper would make a cable end meet its
// neighbour; "" where the end has no part in the pair, or none would.
func (c *Case) otherEnd(t touching, n *bom.Node) string {
	if n.Cable == nil || n.Cable.Part == nil || n.Name() != t.A.Name && n.Name() != t.B.Name || n.Cable.Row.Existing.V {
		return ""
	}
	near := neighbour(t.mate, n)
	if n.Cable.Part.Jumper != nil {
		if p := c.jumperFor(n.Cable); p != nil {
			return fmt.Sprintf("take jumper %s in place of %s", c.Firm.OnHand(p), n.Cable.Part.ID)
		}
		return ""
	}
	p := c.best(c.Firm.Catalog.Connectors(n.Cable.Part.ID), func(p *catalog.Part) bool {
		return p.Connector.Face.Set && meetsWell(p.Connector.Face.V, p.Connector.Impedance.V, near)
	})
	if p == nil {
		return ""
	}
	return fmt.Sprintf("make end %d of %s with %s", n.End, n.Cable.ID, c.Firm.OnHand(p))
}

// jumperFor is the jumper of the catalog whose two ends meet what this one goes to,
// and that is no shorter.
func (c *Case) jumperFor(x *bom.Cable) *catalog.Part {
	if len(x.Ends[0].Mates) == 0 || len(x.Ends[1].Mates) == 0 {
		return nil
	}
	a, b := neighbour(x.Ends[0].Mates[0], x.Ends[0]), neighbour(x.Ends[1].Mates[0], x.Ends[1])
	return c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		j := p.Jumper
		if j == nil || !j.Ends.Set || j.Length.V < x.Length.V {
			return false
		}
		ohm := c.jumperOhm(j)
		fits := func(i, k int) bool { return meetsWell(j.Ends.V[i], ohm, a) && meetsWell(j.Ends.V[k], ohm, b) }
		return fits(0, 1) || fits(1, 0)
	})
}

// jumperOhm is the impedance of a jumper's cable, or 0.
func (c *Case) jumperOhm(j *catalog.Jumper) float64 {
	if p := c.Firm.Catalog.Look(j.Cable.V); p != nil && p.Cable != nil {
		return p.Cable.Impedance.V
	}
	return 0
}

// adapterFor says which single adapter would join the pair: in place of the
// adapters that the plan has there, or before or after a pad or block, which stays.
func (c *Case) adapterFor(t touching) string {
	if len(t.mate.Adapters) > 0 && allAdapters(t.mate.Adapters) {
		contacts := t.mate.Contacts()
		if p := c.oneAdapter(contacts[0].A, contacts[len(contacts)-1].B); p != nil {
			return fmt.Sprintf("put adapter %s between them in place of %s", c.Firm.OnHand(p), adapterIDs(t.mate.Adapters))
		}
		return ""
	}
	if p := c.oneAdapter(t.A, t.B); p != nil {
		return fmt.Sprintf("put adapter %s between them", c.Firm.OnHand(p))
	}
	return ""
}

func allAdapters(list []bom.Adapter) bool {
	for _, a := range list {
		if a.Part.Kind.V != "adapter" {
			return false
		}
	}
	return true
}

func adapterIDs(list []bom.Adapter) string {
	var ids []string
	for _, a := range list {
		ids = append(ids, a.Part.ID)
	}
	return strings.Join(ids, " and ")
}

// oneAdapter is the adapter of the catalog that joins two halves and passes all
// planned bands, or nil.
func (c *Case) oneAdapter(a, b bom.Half) *catalog.Part {
	return c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		if p.Kind.V != "adapter" || len(p.Ports) != 2 || !c.passesBands(p) {
			return false
		}
		return portMeets(&p.Ports[0], a) && portMeets(&p.Ports[1], b) || portMeets(&p.Ports[1], a) && portMeets(&p.Ports[0], b)
	})
}

// passesBands reports whether a two-port has a loss at every planned frequency.
func (c *Case) passesBands(p *catalog.Part) bool {
	rows := p.Between(p.Ports[0].Name, p.Ports[1].Name)
	for _, b := range c.bands {
		for _, f := range bandPoints(b) {
			if row := rowAt(rows, f); row == nil {
				return false
			} else if _, ok := rf.Lookup(rfPoints(row.Loss.V), row.MHz.V, f); !ok {
				return false
			}
		}
	}
	return true
}

func portMeets(p *catalog.Port, h bom.Half) bool {
	return p.Connector.Set && meetsWell(p.Connector.V, p.Impedance.V, h)
}

// meetsWell reports whether a face would join a half as made and without an
// impedance step; an impedance that is not known makes none.
func meetsWell(f catalog.Face, ohm float64, h bom.Half) bool {
	if !h.Face.Set || ohm != 0 && h.Ohm.Set && ohm != h.Ohm.V {
		return false
	}
	return catalog.Meet(f, h.Face.V, ohm, h.Ohm.V).Fit == catalog.Mates
}

// best is the part to name among those that would do: one that is on hand before
// one that is not, one of the firm's own before a generic one, none that is
// withdrawn.
func (c *Case) best(parts []*catalog.Part, would func(*catalog.Part) bool) *catalog.Part {
	var list []*catalog.Part
	for _, p := range parts {
		if p.Status.V != "withdrawn" && would(p) {
			list = append(list, p)
		}
	}
	if len(list) == 0 {
		return nil
	}
	rank := func(p *catalog.Part) int {
		n := 0
		if !c.Firm.held(p) {
			n += 2
		}
		if p.Generic {
			n++
		}
		return n
	}
	sort.SliceStable(list, func(i, j int) bool { return rank(list[i]) < rank(list[j]) })
	return list[0]
}
