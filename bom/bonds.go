package bom

import (
	"slices"

	"driploop/catalog"
)

// BondPath is a way over bonds from a device to where it ends.
type BondPath struct {
	Bonds []*Bond
	End   *Device
}

// PathToElectrode is the shortest way over bonds, and over devices that stand on
// each other with metal contact stated as a bond, from a device to an electrode;
// false where there is none.
func (g *Graph) PathToElectrode(d *Device) (BondPath, bool) {
	came := map[*Device]*Bond{d: nil} // the bond over which a device was first reached
	queue := []*Device{d}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		if at.Kind() == "electrode" {
			return BondPath{wayBack(came, at), at}, true
		}
		for _, b := range g.bonds[at] {
			next := b.Other(at)
			if _, seen := came[next]; !seen {
				came[next] = b
				queue = append(queue, next)
			}
		}
	}
	return BondPath{}, false
}

// wayBack lists the bonds from where a search began to a device that it reached.
func wayBack(came map[*Device]*Bond, at *Device) []*Bond {
	var path []*Bond
	for b := came[at]; b != nil; b = came[at] {
		path = append(path, b)
		at = b.Other(at)
	}
	slices.Reverse(path)
	return path
}

// Other is the device at the far side of d, or nil where the bond does not touch
// d or leads nowhere.
func (b *Bond) Other(d *Device) *Device {
	switch d {
	case b.From:
		return b.To
	case b.To:
		return b.From
	}
	return nil
}

// BondsAt lists the bonds of a device that lead somewhere.
func (g *Graph) BondsAt(d *Device) []*Bond { return g.bonds[d] }

// Conductor is the bond's conductor data, or nil for a direct contact and for a
// part that did not resolve.
func (b *Bond) Conductor() *catalog.Bond {
	if b.Part == nil {
		return nil
	}
	return b.Part.Bond
}
