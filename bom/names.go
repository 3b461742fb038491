package bom

import (
	"slices"
	"strconv"
	"strings"

	"driploop/catalog/source"
)

// uniqueNames holds that devices, copies, cables, data lines, wires and bonds, all of
// which readings and other rows can refer to, have names of their own. So have areas
// among themselves: waivers refer to them.
func (g *Graph) uniqueNames() {
	seen := map[string]source.Place{}
	claim := func(id string, at source.Place, on string) {
		low := strings.ToLower(id)
		if first, twice := seen[low]; twice {
			g.hole(BadRef, at, on, "the name "+source.Quote(id)+" stands already in this plan", "give it a name of its own", first)
			return
		}
		seen[low] = at
	}
	for _, d := range g.Devices {
		claim(d.ID, d.At, d.On())
	}
	for _, c := range g.Cables {
		claim(c.ID, c.At, c.On())
	}
	for i := range g.Plan.Data {
		claim(g.Plan.Data[i].ID, g.Plan.Data[i].At, "data."+g.Plan.Data[i].ID)
	}
	for i := range g.Plan.Wires {
		claim(g.Plan.Wires[i].ID, g.Plan.Wires[i].At, "wire."+g.Plan.Wires[i].ID)
	}
	for i := range g.Plan.Bonds {
		claim(g.Plan.Bonds[i].ID, g.Plan.Bonds[i].At, "bond."+g.Plan.Bonds[i].ID)
	}
	clear(seen)
	for i := range g.Plan.Areas {
		if a := &g.Plan.Areas[i]; a.Name.Set {
			claim(a.Name.V, a.Name.At, "area."+a.Name.V)
		}
	}
}

// Leads reports whether there is what a waiver says it stands on: a thing of the plan,
// a row of it by number, or a part of the catalog.
func (g *Graph) Leads(on string) bool {
	if id, isPart := strings.CutPrefix(on, "part."); isPart {
		return g.Catalog.Look(id) != nil
	}
	return slices.Contains(g.standing(), on)
}

// standing lists all that a finding of the plan can stand on, but for parts. It is put
// together once; few plans have a waiver that asks.
func (g *Graph) standing() []string {
	if g.stands != nil {
		return g.stands
	}
	out := []string{"job", "site"}
	for _, d := range g.Devices {
		out = append(out, d.On())
		for _, n := range d.Nodes {
			out = append(out, "joint."+d.ID+"-"+n.Port.Name)
		}
	}
	for i := range g.Plan.Joints {
		out = append(out, g.Plan.Joints[i].On())
	}
	for _, c := range g.Cables {
		out = append(out, c.On())
	}
	for _, d := range g.Data {
		out = append(out, d.On())
	}
	for _, w := range g.Wires {
		out = append(out, w.On())
	}
	for _, b := range g.Bonds {
		out = append(out, b.On())
	}
	for i := range g.Plan.Operators {
		out = append(out, "operator."+g.Plan.Operators[i].ID)
	}
	for i := range g.Plan.Areas {
		out = append(out, "area."+g.Plan.Areas[i].Name.V)
	}
	for i := range g.Plan.Signals {
		out = append(out, "signal."+strconv.Itoa(i+1))
	}
	for i := range g.Plan.Readings {
		out = append(out, "reading."+strconv.Itoa(i+1))
	}
	g.stands = out
	return out
}

// On is what a finding about the row stands on where its ends are not known.
func (j *JointRow) On() string { return "joint." + strings.ReplaceAll(j.A.V.String(), ".", "-") }

// checkWaivers follows what the waivers stand on.
func (g *Graph) checkWaivers() {
	for i := range g.Plan.Waivers {
		on := g.Plan.Waivers[i].On
		if !on.Set || g.Leads(on.V) {
			continue
		}
		g.hole(BadRef, on.At, "job", "the plan has nothing that is called "+source.Quote(on.V)+" in findings",
			g.guess(on.V, slices.Values(g.standing()), "write it as the finding does, such as cable.C1, or leave on out"))
	}
}
