package bom_test

import (
	"testing"

	"driploop/bom"
)

// A jumper of two different ends goes in the way it fits, whichever way the plan
// writes it, and its adapter with it.
func TestJumperIsTurned(t *testing.T) {
	const devices = `
device.split = { part = "GEN-N-SPLIT-2" }
device.radio = { part = "GEN-RTR-4G-2" }
device.load  = { part = "GEN-N-LOAD-2" }
`
	for name, cable := range map[string]string{
		"as listed":            `cable.J = { part = "GEN-J-N-SMA-1", from = "split.in", to = "radio.cell1" }`,
		"the other way":        `cable.J = { part = "GEN-J-N-SMA-1", from = "radio.cell1", to = "split.in" }`,
		"by an adapter":        `cable.J = { part = "GEN-J-N-N-1", from = "split.in", to = "radio.cell1", through = ["GEN-AD-NF-SMAM"] }`,
		"turned, with adapter": `cable.J = { part = "GEN-J-N-SMA-1", from = "radio.cell1", to = "load", through = ["GEN-AD-NF-NF"] }`,
	} {
		g := resolve(t, devices+cable)
		if len(g.Mates) == 0 {
			t.Errorf("%s: nothing mates", name)
		}
		for _, m := range g.Mates {
			for _, x := range m.Contacts() {
				if !fits(x) {
					t.Errorf("%s: %s is %s and %s is %s", name, x.A.Name, x.A.Face.V, x.B.Name, x.B.Face.V)
				}
			}
		}
	}
}

func fits(x bom.Contact) bool {
	a, b := x.A.Face.V, x.B.Face.V
	return a.Series == b.Series && a.Shell != b.Shell && a.Contact != b.Contact
}

// A connector part that is not in the catalog is one hole, not a choice as well, and
// nothing is put in its place.
func TestUnknownConnectorIsNotReplaced(t *testing.T) {
	g := resolve(t, `
device.split = { part = "GEN-N-SPLIT-2" }
cable.C = { part = "GEN-CX-10", length = "3 m", from = "split.out1", to = "split.out2", ends = ["GEN-NM-CX10-CRIMPP", "GEN-NM-CX10-CRIMP"] }
`)
	if len(g.Holes) != 1 || g.Holes[0].Kind != bom.NoPart {
		t.Errorf("holes: %v, expected the unknown part alone", g.Holes)
	}
	if e := g.Cable("C").Ends[0]; e.Fit != nil || len(e.Could) > 0 {
		t.Errorf("end 1 became %v, could be %v", e.Fit, e.Could)
	}
}
