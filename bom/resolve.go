package bom

import (
	"fmt"
	"iter"
	"maps"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// Resolve looks the parts of a plan up and ties its ends together. It always
// returns a graph; what does not resolve is in Holes.
func Resolve(p *Plan, c *catalog.Catalog) *Graph {
	g := &Graph{
		Plan: p, Catalog: c,
		devices: map[string]*Device{}, cables: map[string]*Cable{}, places: map[string]*Place{}, bonds: map[*Device][]*Bond{},
	}
	for i := range p.Places {
		g.places[p.Places[i].ID] = &p.Places[i]
	}
	g.addDevices()
	g.stand()
	g.addCables()
	g.uniqueNames()
	g.mate()
	g.turnJumpers()
	g.dressEnds()
	for _, m := range g.Mates {
		m.contacts = m.Contacts()
	}
	g.addSupply()
	g.addBonds()
	g.checkRefs()
	return g
}

func (g *Graph) hole(kind HoleKind, at source.Place, on, says, do string, also ...source.Place) {
	g.Holes = append(g.Holes, Hole{kind, at, on, says, do, also})
}

// part looks up a part that must be of one of the kinds; a part of another kind
// does not count as found.
func (g *Graph) part(id source.Val[string], on string, kinds ...string) *catalog.Part {
	if !id.Set {
		return nil
	}
	p := g.Catalog.Look(id.V)
	if p == nil {
		near := ""
		if g.mayGuess() {
			near = g.Catalog.Nearest(id.V)
		}
		g.hole(NoPart, id.At, on, "the catalog has no part "+source.Quote(id.V), didYouMean(near, "add it to the catalog, or correct the ID"))
		return nil
	}
	if !p.Kind.Set {
		return nil // the catalog file has a finding already
	}
	for _, k := range kinds {
		if p.Kind.V == k {
			return p
		}
	}
	g.hole(WrongKind, id.At, on, fmt.Sprintf("%s is of kind %s; %s is expected here", p.ID, p.Kind.V, strings.Join(kinds, " or ")),
		"name a part of that kind", p.At)
	return nil
}

// deviceKinds are the kinds that are put up as devices: all but what comes by the
// metre, on a cable end, or out of a box of consumables.
var deviceKinds = []string{"antenna", "adapter", "splitter", "tap", "coupler", "diplexer", "filter", "attenuator",
	"dc-block", "bias-tee", "load", "arrestor", "amplifier", "router", "supply", "injector", "switch", "battery",
	"data-arrestor", "fuse", "bond-point", "electrode", "mount"}

func (g *Graph) addDevices() {
	for i := range g.Plan.Devices {
		row := &g.Plan.Devices[i]
		on := "device." + row.ID
		part, place := g.part(row.Part, on, deviceKinds...), g.place(row.Place, on)
		g.addDevice(&Device{ID: row.ID, At: row.At, Row: row, Part: part, Place: place, Point: row.Point, on: on})
		for _, c := range row.Copies {
			d := &Device{ID: c.Name, At: c.At, Row: row, Part: part, Place: place, Point: c.Val.V.Point, on: "device." + c.Name}
			if c.Val.V.Place.Set {
				d.Place = g.place(c.Val.V.Place, d.On())
			}
			g.addDevice(d)
		}
	}
}

func (g *Graph) addDevice(d *Device) {
	if d.Part != nil {
		for i := range d.Part.Ports {
			p := &d.Part.Ports[i]
			d.Nodes = append(d.Nodes, &Node{Device: d, Port: p, Face: p.Connector, Ohm: p.Impedance})
		}
	}
	g.Devices = append(g.Devices, d)
	if g.devices[d.ID] == nil {
		g.devices[d.ID] = d
	}
}

// place looks up a place that the plan names.
func (g *Graph) place(id source.Val[string], on string) *Place {
	if !id.Set {
		return nil
	}
	p := g.places[id.V]
	if p == nil {
		g.hole(BadRef, id.At, on, "the plan has no place "+source.Quote(id.V),
			g.guess(id.V, maps.Keys(g.places), "add it under [place], or correct the name"))
	}
	return p
}

// mostGuesses bounds how many names a plan gets guesses for: each compares all that
// are known, and nobody reads that many.
const mostGuesses = 100

func (g *Graph) mayGuess() bool {
	g.guesses++
	return g.guesses <= mostGuesses
}

// guess says which of the known names may have been meant, or what to do otherwise.
func (g *Graph) guess(name string, known iter.Seq[string], otherwise string) string {
	if !g.mayGuess() {
		return otherwise
	}
	return didYouMean(source.Nearest(name, slices.Collect(known)), otherwise)
}

// guessDevice is guess among the devices.
func (g *Graph) guessDevice(name string) string {
	return g.guess(name, maps.Keys(g.devices), "add it, or correct the name")
}

func didYouMean(near, otherwise string) string {
	if near != "" {
		return "did you mean " + near + "?"
	}
	return otherwise
}

// stand gives each device that stands on another that one's place, and its height
// where both are known.
func (g *Graph) stand() {
	for _, d := range g.Devices {
		if !d.Row.On.Set {
			continue
		}
		d.Stands = g.devices[d.Row.On.V]
		if d.Stands == nil && d.ID == d.Row.ID { // once, and not for each copy
			g.hole(BadRef, d.Row.On.At, d.On(), "the plan has no device "+source.Quote(d.Row.On.V),
				g.guessDevice(d.Row.On.V))
		}
	}
	g.openRings()
	settled := map[*Device]bool{}
	for _, d := range g.Devices {
		d.settle(settled)
	}
}

// openRings reports the devices that stand on each other in a ring, and lets none of
// these stand on another, so that nothing depends on which of them the file names
// first. What only stands on a ring stays where it is.
func (g *Graph) openRings() {
	walk := map[*Device]int{} // the walk in which a device was first met
	for i, d := range g.Devices {
		s := d
		for s != nil && walk[s] == 0 {
			walk[s] = i + 1
			s = s.Stands
		}
		if s == nil || walk[s] != i+1 {
			continue
		}
		g.hole(BadRef, s.Row.On.At, s.On(), "what "+s.ID+" stands on stands on "+s.ID+" again", "let the chain end at a place")
		for s != nil {
			next := s.Stands
			s.Stands = nil
			s = next
		}
	}
}

// settle finds the device's place, and its point where that is known: its own, else
// that of what it stands on plus up, else its place's. A device whose place is
// another than that of what it is said to stand on has nothing of that one's point.
func (d *Device) settle(settled map[*Device]bool) {
	if settled[d] {
		return
	}
	settled[d] = true
	if base := d.Stands; base != nil {
		base.settle(settled)
		if d.Place == nil {
			d.Place = base.Place
		}
		if !d.Point.Set && base.Point.Set && (base.Place == nil || d.Place == base.Place) {
			d.Point = base.Point
			d.Point.V.Up += d.Row.Up.V.Metres()
		}
	}
	if !d.Point.Set && d.Place != nil {
		d.Point = d.Place.Point
	}
}

func (g *Graph) addCables() {
	for i := range g.Plan.Cables {
		row := &g.Plan.Cables[i]
		c := &Cable{ID: row.ID, At: row.At, Row: row, on: "cable." + row.ID}
		g.Cables = append(g.Cables, c)
		g.cables[row.ID] = c
	}
	for _, c := range g.Cables {
		if c.Row.Like.Set {
			g.takeAfter(c)
		}
		c.Part = g.part(c.Row.Part, c.On(), "cable", "jumper")
		c.Length = c.Row.Length
		if c.Part != nil && c.Part.Jumper != nil && !c.Length.Set {
			c.Length = c.Part.Jumper.Length
		}
		c.Way = g.way(c.Row.Way, c.On())
		for n := range c.Ends {
			c.Ends[n] = g.cableEnd(c, n)
		}
		for _, id := range c.Row.Through.V {
			c.Through = append(c.Through, g.part(id, c.On(), "adapter", "attenuator", "dc-block"))
		}
	}
}

// takeAfter fills what the cable leaves out from the one that it is like. The row
// is copied first, because the plan stays as it was read.
func (g *Graph) takeAfter(c *Cable) {
	model := g.cables[c.Row.Like.V]
	switch {
	case model == nil:
		g.hole(BadRef, c.Row.Like.At, c.On(), "the plan has no cable "+source.Quote(c.Row.Like.V),
			g.guess(c.Row.Like.V, maps.Keys(g.cables), "correct the name"))
		return
	case model.Row.Like.Set || model == c:
		g.hole(BadRef, c.Row.Like.At, c.On(), model.ID+" is itself like another cable", "name the cable that has the keys")
		return
	}
	c.Like = model
	own := *c.Row
	fill(&own.Part, model.Row.Part)
	fill(&own.Ends, model.Row.Ends)
	fill(&own.Length, model.Row.Length)
	fill(&own.Way, model.Row.Way)
	c.Row = &own
}

func fill[T any](to *source.Val[T], from source.Val[T]) {
	if !to.Set {
		*to = from
	}
}

func (g *Graph) way(w source.Val[[]source.Val[Stretch]], on string) []Section {
	var out []Section
	for _, s := range w.V {
		if !s.Set {
			continue
		}
		p := g.place(source.Val[string]{V: s.V.Place, At: s.At, Set: true}, on)
		if p != nil {
			out = append(out, Section{p, s.V.Length})
		}
	}
	return out
}

// cableEnd is end n (0 or 1) with the face that the plan or the jumper gives it.
func (g *Graph) cableEnd(c *Cable, n int) *Node {
	e := &Node{Cable: c, End: n + 1, Ohm: g.cableOhm(c)}
	if c.Part != nil && c.Part.Jumper != nil {
		if ends := c.Part.Jumper.Ends; ends.Set {
			e.Face = source.Val[catalog.Face]{V: ends.V[n], At: c.At, Set: true}
		}
		return e
	}
	if !c.Row.Ends.Set {
		return e
	}
	written := c.Row.Ends.V[n]
	if !written.Set {
		return e
	}
	if written.V.Face.Set {
		e.Face = source.Val[catalog.Face]{V: written.V.Face.V, At: written.At, Set: true}
		return e
	}
	e.Fit = g.part(source.Val[string]{V: written.V.Part, At: written.At, Set: true}, c.On(), "connector")
	if e.Fit != nil {
		e.Face = e.Fit.Connector.Face
		e.Ohm = e.Fit.Connector.Impedance
	}
	return e
}

// cableOhm is the impedance of the cable, or of the cable that a jumper is made of.
func (g *Graph) cableOhm(c *Cable) source.Val[float64] {
	if c.Part == nil {
		return source.Val[float64]{}
	}
	if c.Part.Cable != nil {
		return c.Part.Cable.Impedance
	}
	if j := c.Part.Jumper; j != nil && j.Cable.Set {
		if of := g.Catalog.Look(j.Cable.V); of != nil && of.Cable != nil {
			return of.Cable.Impedance
		}
	}
	return source.Val[float64]{}
}
