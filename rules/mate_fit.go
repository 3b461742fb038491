package rules

import (
	"fmt"

	"driploop/bom"
	"driploop/catalog"
)

var mateFit = &Rule{
	Name:   "mate/fit",
	Title:  "A connector is made for the cable that it goes on",
	Why:    "a body for another diameter cannot be crimped or clamped; forced on, it pulls off in the first storm",
	Basis:  []Basis{practice("the cables that the connector's maker lists (fits)")},
	Weight: Hold,
	Check: func(c *Case, r *Report) {
		for _, x := range c.Graph.Cables {
			if x.Part == nil {
				continue // its part is a finding already
			}
			for _, e := range x.Ends {
				switch {
				case x.Part.Jumper != nil:
					checkMadeEnd(r, x, e)
				case e.Fit != nil:
					c.checkFits(r, x, e)
				case lacksConnector(e):
					c.lackConnector(r, x, e)
				}
			}
		}
	},
}

// checkFits holds the connector part of an end against the cable.
func (c *Case) checkFits(r *Report, x *bom.Cable, e *bom.Node) {
	fits := e.Fit.Connector.Fits
	if !fits.Set || catalog.Has(fits, x.Part.ID) {
		return // without a list the catalog file has a finding
	}
	face := e.Fit.Connector.Face.V
	do := "use a cable that it fits, or add a connector that fits " + x.Part.ID + " to the catalog"
	if p := c.connectorWith(x.Part.ID, face); p != nil {
		do = fmt.Sprintf("use %s, the same face for %s", c.Firm.OnHand(p), x.Part.ID)
	}
	r.Fails(endPlace(e), x.On(), "end %d of %s: %s is made for %s, the cable is %s", e.End, x.ID, e.Fit.ID, list(words(fits.V)), x.Part.ID).
		Then("%s", do).besidePart(e.Fit, fits.At, "what the connector fits")
}

// connectorWith is a connector for a cable with a face of that series and gender,
// or nil.
func (c *Case) connectorWith(cable string, face catalog.Face) *catalog.Part {
	return c.best(c.Firm.Catalog.Connectors(cable), func(p *catalog.Part) bool {
		f := p.Connector.Face
		return f.Set && f.V.Series == face.Series && f.V.Shell == face.Shell && f.V.Contact == face.Contact
	})
}

// checkMadeEnd holds what the plan says of a jumper's end against the jumper.
func checkMadeEnd(r *Report, x *bom.Cable, e *bom.Node) {
	written, ok := writtenEnd(e)
	ends := x.Part.Jumper.Ends
	if !ok || !ends.Set {
		return
	}
	f := written.V.Face
	switch has := ends.V[0].Written + " and " + ends.V[1].Written; {
	case !f.Set:
		r.Fails(endPlace(e), x.On(), "end %d of %s: %s is named, and the jumper %s comes with %s", e.End, x.ID, written.V.Part, x.Part.ID, has).
			Then("leave ends out; a jumper brings its own")
	case !sameHalf(f.V, ends.V[0]) && !sameHalf(f.V, ends.V[1]):
		r.Fails(endPlace(e), x.On(), "end %d of %s: %s is written, and the jumper %s has %s", e.End, x.ID, f.V, x.Part.ID, has).
			Then("leave ends out, or take a jumper that has this end").besidePart(x.Part, ends.At, "its ends")
	}
}

func sameHalf(a, b catalog.Face) bool {
	return a.Series == b.Series && a.Shell == b.Shell && a.Contact == b.Contact
}

// lacksConnector reports an end to be made for which the catalog has no connector.
// An end whose connector part did not resolve, and one of which nothing is known,
// have findings of their own.
func lacksConnector(e *bom.Node) bool {
	written, ok := writtenEnd(e)
	switch {
	case e.Cable.Row.Existing.V || len(e.Could) > 0:
		return false
	case ok:
		return written.V.Face.Set
	case len(e.Mates) == 0:
		return false
	}
	return neighbour(e.Mates[0], e).Face.Set
}

func (c *Case) lackConnector(r *Report, x *bom.Cable, e *bom.Node) {
	want := ""
	if written, ok := writtenEnd(e); ok {
		want = "is " + written.V.Face.V.Written
	} else {
		n := neighbour(e.Mates[0], e)
		want = fmt.Sprintf("meets %s (%s, %s ohm)", n.Name, n.Face.V, plainFigure(n.Ohm.V))
	}
	do := "add one to the catalog, or take another cable"
	if known := c.Firm.Catalog.Connectors(x.Part.ID); len(known) > 0 {
		do = fmt.Sprintf("take one of those for %s and an adapter, or another cable; there is %s", x.Part.ID, c.faces(known))
	}
	r.Fails(endPlace(e), x.On(), "end %d of %s: no connector of the catalog fits %s and %s", e.End, x.ID, x.Part.ID, want).
		Then("%s", do).besidePart(x.Part, x.Part.At, "the cable")
}

// faces lists connector parts with their faces and what is on hand.
func (c *Case) faces(parts []*catalog.Part) string {
	var out []string
	for _, p := range parts {
		out = append(out, fmt.Sprintf("%s %s", p.Connector.Face.V, c.Firm.OnHand(p)))
	}
	return list(out)
}

func words(vs catalog.Words) []string {
	var out []string
	for _, v := range vs {
		out = append(out, v.V)
	}
	return out
}
