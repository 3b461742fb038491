package rules

import (
	"fmt"

	"driploop/bom"
)

var mateChoice = &Rule{
	Name:   "mate/choice",
	Title:  "The plan says which connector goes on an end where several would do",
	Why:    "the crew packs for the clamp and stands on the roof with the crimp; nothing is counted or kept for the job until it is named",
	Basis:  []Basis{practice("connectors of one face differ in tool and in loss")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Graph.Cables {
			c.checkChoice(r, x)
		}
	},
}

// checkChoice reports the open ends of a cable, both in one finding. A cable that is
// like another has its ends from there.
func (c *Case) checkChoice(r *Report, x *bom.Cable) {
	var open []*bom.Node
	for _, e := range x.Ends {
		if _, written := writtenEnd(e); len(e.Could) > 1 && !x.Row.Existing.V && !(x.Like != nil && (!written || endIsInherited(e))) {
			open = append(open, e)
		}
	}
	if len(open) == 0 {
		return
	}
	first := open[0]
	which := fmt.Sprintf("end %d", first.End)
	if len(open) == 2 && list(open[0].Could) == list(open[1].Could) {
		which, open = "each end", open[:1]
	}
	says := fmt.Sprintf("%s of %s (%s) can be made with %s", which, x.ID, x.Part.ID, c.namely(first.Could))
	if len(open) == 2 {
		says += fmt.Sprintf(", end 2 with %s", c.namely(open[1].Could))
	}
	r.Fails(endPlace(first), x.On(), "%s", says).Then("name the connector part in ends")
}

func endIsInherited(e *bom.Node) bool {
	written, _ := writtenEnd(e)
	return inherited(e.Cable, written.At)
}

// namely lists parts by ID with what is on hand of each.
func (c *Case) namely(ids []string) string {
	out := ""
	for i, id := range ids {
		if i > 0 {
			out += " or "
		}
		out += c.Firm.OnHand(c.Firm.Catalog.Look(id))
	}
	return out
}
