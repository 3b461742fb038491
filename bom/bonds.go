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
	type reach struct {
		at   *Device
		path []*Bond
	}
	seen := map[*Device]bool{d: true}
	queue := []reach{{at: d}}
	for len(queue) > 0 {
		r := queue[0]
		queue = queue[1:]
		if r.at.Kind() == "electrode" {
			return BondPath{r.path, r.at}, true
		}
		for _, b := range g.Bonds {
			next := b.Other(r.at)
			if next == nil || seen[next] {
				continue
			}
			seen[next] = true
			queue = append(queue, reach{next, append(append([]*Bond(nil), r.path...), b)})
		}
	}
	return BondPath{}, false
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

// BondsAt lists the bonds of a device.
func (g *Graph) BondsAt(d *Device) []*Bond {
	var out []*Bond
	for _, b := range g.Bonds {
		if b.Other(d) != nil {
			out = append(out, b)
		}
	}
	return out
}

// Conductor is the bond's conductor data, or nil for a direct contact and for a
// part that did not resolve.
func (b *Bond) Conductor() *catalog.Bond {
	if b.Part == nil {
		return nil
	}
	return b.Part.Bond
}
