package bom

import "driploop/catalog"

// BondPath is a way over bonds from a device to where it ends.
type BondPath struct {
	Bonds []*Bond
	End   *Device
}

// PathToElectrode is the shortest way over bonds, and over devices that stand on
// each other with metal contact stated as a bond, from a device to an electrode;
// false where there is none.
func (g *Graph) PathToElectrode(d *Device) (BondPath, bool) {
	if _, reached := g.earth[d]; !reached {
		return BondPath{}, false
	}
	var path []*Bond
	for b := g.earth[d]; b != nil; b = g.earth[d] {
		path = append(path, b)
		d = b.Other(d)
	}
	return BondPath{path, d}, true
}

// findEarth searches from all electrodes at once, so that every device is reached
// from the nearest.
func (g *Graph) findEarth() {
	g.earth = map[*Device]*Bond{}
	var queue []*Device
	for _, d := range g.Devices {
		if d.Kind() == "electrode" {
			g.earth[d] = nil
			queue = append(queue, d)
		}
	}
	for len(queue) > 0 {
		at := queue[0]
		queue = queue[1:]
		for _, b := range g.bonds[at] {
			next := b.Other(at)
			if _, reached := g.earth[next]; !reached {
				g.earth[next] = b
				queue = append(queue, next)
			}
		}
	}
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
