package rules

import (
	"fmt"
	"slices"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var buildOutdoorJoint = &Rule{
	Name:  "build/outdoor-joint",
	Title: "Every joint in the weather is of a series made for it, and sealed",
	Why:   "water that creeps into one connector runs along the cable; a year later the feed loses twice what it did",
	Basis: []Basis{
		practice("joints outdoors are taped or booted over connector and jacket; SMA, MCX, TS9 and F have no gasket of their own"),
		house("sealing: the consumable that takeoff adds at outdoor joints")},
	Weight: Punch,
	Check: func(c *Case, r *Report) {
		joints, placeless := c.outdoorJoints()
		reportUnplaced(r, placeless, nil, "whether its joints are in the weather")
		if len(joints) == 0 {
			return
		}
		c.checkSealing(r, joints)
		c.checkSeries(r, joints)
	},
}

// outdoorJoint is one mated pair in the weather.
type outdoorJoint struct {
	mate  *bom.Mate
	pair  bom.Contact
	place *bom.Place
}

func (j outdoorJoint) name() string { return j.pair.A.Name + " and " + j.pair.B.Name }

// outdoorJoints lists the pairs that this job makes outdoors, and the devices whose
// missing place leaves that open.
func (c *Case) outdoorJoints() (joints []outdoorJoint, placeless []*bom.Device) {
	for _, m := range c.Graph.Mates {
		if exists(m.A) && exists(m.B) {
			continue
		}
		place := m.Place()
		if place == nil {
			placeless = append(placeless, nodeUnplaced(m.A), nodeUnplaced(m.B))
			continue
		}
		if !place.Outdoors() {
			continue
		}
		for _, pair := range m.Contacts() {
			joints = append(joints, outdoorJoint{m, pair, place})
		}
	}
	return joints, placeless
}

func exists(n *bom.Node) bool {
	if n.Device != nil {
		return n.Device.Row.Existing.V
	}
	return n.Cable.Row.Existing.V
}

func nodeUnplaced(n *bom.Node) *bom.Device {
	if n.Device == nil {
		return nil
	}
	return unplaced(n.Device)
}

// checkSealing holds that what seals the joints is on the list and suffices: the
// house's own, which takeoff counts unless the plan lists it, or extras of the plan.
func (c *Case) checkSealing(r *Report, joints []outdoorJoint) {
	first, n, sealing := joints[0], len(joints), c.House().Sealing
	known := sealing.Set && perJoint(c.Firm.Catalog.Look(sealing.V))
	seals, extra, counted := c.extraSeals(sealing.V)
	switch {
	case known && !counted, extra && seals >= float64(n):
	case extra:
		f := r.Fails(first.mate.At, first.mate.On(), "%s in the weather, and the plan's extras seal %s", count(n, "joint", "joints"), plainFigure(seals)).
			Then("bring more, or leave the extra out where the house's sealing is counted by itself")
		f.Under("seals", seals, "joints", float64(n))
		c.besideExtras(f)
	case sealing.Set:
		r.Fails(first.mate.At, first.mate.On(), "%s in the weather, and the house's sealing %s is no consumable by the joint of the catalog", count(n, "joint", "joints"), source.Quote(sealing.V)).
			Then("correct sealing under [house]").Beside(sealing.At, "the house's sealing")
	default:
		r.Fails(first.mate.At, first.mate.On(), "%s in the weather, such as %s, and nothing to seal them: neither sealing under [house] nor an [[extra]]", count(n, "joint", "joints"), first.name()).
			Then("%s", c.sealWith())
	}
}

func perJoint(p *catalog.Part) bool {
	return p != nil && p.Consumable != nil && p.Consumable.Per.V == "joint"
}

// extraSeals is how many joints the extras of the plan seal, boots like tape; some
// says that there are any, house that the house's own sealing is among them.
func (c *Case) extraSeals(sealing string) (joints float64, some, house bool) {
	for i := range c.Plan.Extras {
		x := &c.Plan.Extras[i]
		p := c.Firm.Catalog.Look(x.Part.V)
		if !perJoint(p) || !x.Qty.Set {
			continue
		}
		some, house = true, house || p.ID == sealing
		joints += float64(x.Qty.V.Each) * uses(p)
	}
	return joints, some, house
}

func uses(p *catalog.Part) float64 {
	if h := p.Consumable.Holds; h.Set && h.V.Uses > 0 {
		return h.V.Uses
	}
	return 1
}

func (c *Case) besideExtras(f *Finding) {
	for i := range c.Plan.Extras {
		if perJoint(c.Firm.Catalog.Look(c.Plan.Extras[i].Part.V)) {
			f.Beside(c.Plan.Extras[i].At, "what is brought")
		}
	}
}

func (c *Case) sealWith() string {
	p := c.Firm.pick(func(p *catalog.Part) bool { return perJoint(p) && uses(p) > 1 })
	if p == nil {
		return "bring self-amalgamating tape, and list it as an [[extra]]"
	}
	return fmt.Sprintf("bring %s: name it as sealing under [house], or list it as an [[extra]]", c.Firm.OnHand(p))
}

// checkSeries holds that the halves of a joint outdoors are of a series with a gasket,
// or that the plan brings a boot for each that is not.
func (c *Case) checkSeries(r *Report, joints []outdoorJoint) {
	var bare []outdoorJoint
	for _, j := range joints {
		for _, h := range []bom.Half{j.pair.A, j.pair.B} {
			if s, ok := catalog.LookSeries(h.Face.V.Series); h.Face.Set && ok && !s.Outdoor {
				bare = append(bare, j)
				break
			}
		}
	}
	if len(bare) == 0 || c.boots() >= float64(len(bare)) {
		return
	}
	for _, j := range bare {
		face := j.pair.A.Face.V
		if s, _ := catalog.LookSeries(face.Series); !j.pair.A.Face.Set || s.Outdoor {
			face = j.pair.B.Face.V
		}
		r.Fails(j.mate.At, j.mate.On(), "%s meet in %s, in the weather, and %s has no gasket; a boot is expected", j.name(), j.place.ID, face.Series).
			Then("%s", c.bootFor(face))
	}
}

// boots is how many joints the extras of the plan cover that serve one joint each.
func (c *Case) boots() float64 {
	n := 0.0
	for i := range c.Plan.Extras {
		x := &c.Plan.Extras[i]
		if p := c.Firm.Catalog.Look(x.Part.V); perJoint(p) && uses(p) == 1 {
			n += float64(x.Qty.V.Each)
		}
	}
	return n
}

// namesSeries reports a part whose name speaks of a series.
func namesSeries(p *catalog.Part, series string) bool {
	return slices.Contains(strings.Fields(p.Title()), strings.TrimPrefix(series, "RP-"))
}

func (c *Case) bootFor(face catalog.Face) string {
	const or = "move the joint indoors, or take gear with N ports"
	p := c.Firm.pick(func(p *catalog.Part) bool { return perJoint(p) && uses(p) == 1 && namesSeries(p, face.Series) })
	if p == nil {
		return "list a boot for each as an [[extra]], or " + or
	}
	return "list a boot such as " + c.Firm.OnHand(p) + " as an [[extra]] for each, or " + or
}
