package rules

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// insteadOf says what to do about a part that some planned bands lie outside of: a
// part of the catalog that could take its place, with the number on hand.
func (c *Case) insteadOf(x *bounded) string {
	drop := "take " + bandNames(x.lefts) + " out of bands"
	if x.would == nil {
		return "use connectors of a series that is made for it, or " + drop
	}
	p := c.Firm.pick(func(p *catalog.Part) bool { return x.would(p) && c.suitsPlan(p) })
	if p == nil {
		return "no part like it in the catalog is made for all planned bands; find one, or " + drop
	}
	return "take " + c.Firm.OnHand(p) + ", which is made for all planned bands, or " + drop
}

// suitsPlan reports a cable, jumper or passive part that is made for every planned
// band.
func (c *Case) suitsPlan(p *catalog.Part) bool {
	var ways [][]unit.Span
	switch {
	case p.Cable != nil:
		ways = [][]unit.Span{c.cableCovers(p)}
	case p.Jumper != nil:
		of := c.Firm.Catalog.Look(p.Jumper.Cable.V)
		if of == nil || of.Cable == nil {
			return false
		}
		ways = [][]unit.Span{c.cableCovers(of)}
	default:
		ways = pathCovers(p)
	}
	for _, covers := range ways {
		for _, b := range c.Bands() {
			if !leavesOut(b, covers, covers).Nothing() {
				return false
			}
		}
	}
	return len(ways) > 0
}

func (c *Case) cableCovers(p *catalog.Part) []unit.Span {
	var x bounded
	c.boundCable(&x, p)
	return x.covers
}

// pathCovers is what each way through a passive part covers.
func pathCovers(p *catalog.Part) [][]unit.Span {
	var out [][]unit.Span
	for i := range p.Paths {
		w := &p.Paths[i]
		for _, to := range w.To.V {
			var covers []unit.Span
			for _, row := range p.Between(w.From.V, to.V) {
				if !row.MHz.Set {
					covers = append(covers, everything)
				}
				covers = append(covers, row.MHz.V)
			}
			out = append(out, covers)
		}
	}
	return out
}

// likeCable describes what could take the place of a cable or jumper: a cable of
// the same impedance that connectors are kept for, or a jumper with the same ends
// and length.
func (c *Case) likeCable(now *catalog.Part) func(*catalog.Part) bool {
	return func(p *catalog.Part) bool {
		if now.Jumper != nil {
			return p.Jumper != nil && p.Jumper.Length.V == now.Jumper.Length.V && sameEnds(p.Jumper.Ends.V, now.Jumper.Ends.V)
		}
		return p.Cable != nil && p.Cable.Impedance.V == now.Cable.Impedance.V && len(c.Firm.Catalog.Connectors(p.ID)) > 0
	}
}

func sameEnds(a, b [2]catalog.Face) bool {
	return a[0].String() == b[0].String() && a[1].String() == b[1].String() || a[0].String() == b[1].String() && a[1].String() == b[0].String()
}

// likePassive describes what could take the place of a passive part: one of the
// same kind with the same ports.
func likePassive(now *catalog.Part) func(*catalog.Part) bool {
	return func(p *catalog.Part) bool {
		return p.Kind.V == now.Kind.V && slices.EqualFunc(p.Ports, now.Ports, func(a, b catalog.Port) bool {
			return a.Connector.V.String() == b.Connector.V.String() && a.Impedance.V == b.Impedance.V
		})
	}
}
