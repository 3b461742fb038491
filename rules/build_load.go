package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/mech"
)

// What stands on a mount makes a moment at its top fixing. A plan may leave a height
// or an area out; then the moment lies between two figures. What fails at the least
// fails; what holds at the greatest holds; between them it is not assessed.

// span is what a figure lies between; +Inf where nobody knows how much it can be.
type span struct{ least, most float64 }

func exactly(v float64) span { return span{v, v} }

func (s span) open() bool { return math.IsInf(s.most, 1) }

func (s span) plus(o span) span { return span{s.least + o.least, s.most + o.most} }

// freeOf is the length of a mast above its top fixing, in metres: at most the whole
// of it where the plan does not say.
func freeOf(m *bom.Device) (span, []Lack) {
	if m.Row.Free.Set {
		return exactly(m.Row.Free.V.Metres()), nil
	}
	lack := []Lack{{"free of " + m.ID, m.At}}
	if mt := mountOf(m); mt != nil && mt.Length.Set {
		return span{0, mt.Length.V.Metres()}, lack
	}
	return span{0, math.Inf(1)}, lack
}

// upOn is how high a device sits above the top fixing of what it stands on.
func upOn(d *bom.Device) (span, []Lack) {
	m := d.Stands
	switch {
	case d.Row.Up.Set:
		return exactly(d.Row.Up.V.Metres()), nil
	case d.Point.Set && m.Point.Set && !onBase(d):
		return exactly(math.Max(0, d.Point.V.Up-m.Point.V.Up)), nil
	case tubeOf(m) == noTube:
		return exactly(0), nil // a bracket takes it where the bracket is
	}
	free, _ := freeOf(m)
	return span{0, free.most}, []Lack{{"up of " + d.ID, d.At}}
}

// perch is a device on a mount, or on what stands on it, with its height above the
// mount's top fixing.
type perch struct {
	dev *bom.Device
	up  span
}

// perches lists everything that a mount carries, and what is not known of where.
func (c *Case) perches(m *bom.Device) (out []perch, lacks []Lack) {
	var climb func(m *bom.Device, at span)
	climb = func(m *bom.Device, at span) {
		for _, d := range c.standing(m) {
			up, l := upOn(d)
			lacks = append(lacks, l...)
			out = append(out, perch{d, at.plus(up)})
			climb(d, at.plus(up))
		}
	}
	climb(m, exactly(0))
	return out, lacks
}

// burden is the wind on one thing that a mount carries.
type burden struct {
	name        string
	least, most mech.Load
	open        bool // nobody knows how much it can be
}

// loaded is a mount with what the wind does to all that it carries.
type loaded struct {
	mount   *bom.Device
	wind    wind
	burdens []burden
	lacks   []Lack
}

// loadOn adds up what the wind does above the top fixing of a mount.
func (c *Case) loadOn(m *bom.Device, w wind) loaded {
	l := loaded{mount: m, wind: w}
	switch tubeOf(m) {
	case ownTube:
		free, lacks := freeOf(m)
		l.lacks = append(l.lacks, lacks...)
		l.tube("its own tube", m, exactly(0), free)
	case tubeUnknown:
		l.unknown("its own tube", mastLack(m))
	}
	on, lacks := c.perches(m)
	l.lacks = append(l.lacks, lacks...)
	for _, p := range on {
		switch {
		case p.dev.Kind() == "mount" && tubeOf(p.dev) == ownTube:
			free, lacks := freeOf(p.dev)
			l.lacks = append(l.lacks, lacks...)
			l.tube(p.dev.ID, p.dev, p.up, free)
		case p.dev.Kind() == "mount" && tubeOf(p.dev) == tubeUnknown:
			l.unknown(p.dev.ID, mastLack(p.dev))
		case catches(p.dev):
			l.area(p)
		}
	}
	return l
}

// catches reports a device whose area counts in the wind: antennas and the boxes of
// gear. Arrestors, splitters and the like are left out as small.
func catches(d *bom.Device) bool {
	switch d.Kind() {
	case "antenna", "router", "amplifier", "supply", "switch", "injector", "battery":
		return true
	}
	return false
}

// tube adds the wind on a tube that begins at a height above the fixing.
func (l *loaded) tube(name string, m *bom.Device, from, free span) {
	mt := mountOf(m)
	if !mt.MastMM.Set {
		l.unknown(name, mastLack(m))
		return
	}
	if free.open() || from.open() {
		l.burdens = append(l.burdens, burden{name: name, open: true})
		return
	}
	b := burden{name: name}
	b.least, _ = l.tubeLoad(mt.MastMM.V[1], from.least, free.least)
	if free.most > 0 {
		b.most, b.open = l.tubeLoad(mt.MastMM.V[1], from.most, free.most)
	}
	l.burdens = append(l.burdens, b)
}

func (l *loaded) tubeLoad(mm, from, long float64) (load mech.Load, open bool) {
	load, ok := mech.TubeLoad(l.wind.q, l.wind.gust, l.wind.tube, mm/1000, from, from+long)
	return load, !ok
}

// area adds the wind on something with an area of its own.
func (l *loaded) area(p perch) {
	area, lacks := l.wind.area(p.dev)
	l.lacks = append(l.lacks, lacks...)
	b := burden{name: p.dev.ID}
	b.least = mech.Load{Force: l.wind.force(area.least), Lever: p.up.least}
	if b.open = area.open() || p.up.open(); !b.open {
		b.most = mech.Load{Force: l.wind.force(area.most), Lever: p.up.most}
	}
	l.burdens = append(l.burdens, b)
}

// mastLack is a mount whose diameter nobody knows.
func mastLack(m *bom.Device) Lack {
	if m.Part == nil {
		return Lack{"the part of " + m.ID + ", with its tube and yield", m.At}
	}
	return Lack{"mast_mm of " + m.Part.ID, m.Part.At}
}

func (l *loaded) unknown(name string, lack Lack) {
	l.lacks = append(l.lacks, lack)
	l.burdens = append(l.burdens, burden{name: name, open: true})
}

// moment is the moment at the fixing, or at a foot that far below it, in N·m.
func (l *loaded) moment(below float64) span {
	var least, most []mech.Load
	open := false
	for _, b := range l.burdens {
		open = open || b.open
		least = append(least, mech.Load{Force: b.least.Force, Lever: b.least.Lever + below})
		most = append(most, mech.Load{Force: b.most.Force, Lever: b.most.Lever + below})
	}
	var out span
	var ok bool
	out.least, _ = mech.Moment(least...)
	if out.most, ok = mech.Moment(most...); open || !ok {
		out.most = math.Inf(1)
	}
	return out
}

// force is the whole wind on what the mount carries, in N.
func (l *loaded) force() span {
	var out span
	for _, b := range l.burdens {
		if b.open {
			out.most = math.Inf(1)
		}
		out.least += b.least.Force
		out.most += b.most.Force
	}
	return out
}

// terms prints the addends of the least moment: "donor 46 N at 1.3 m + its own tube
// 68 N at 0.75 m".
func (l *loaded) terms() string {
	out := ""
	for _, b := range l.burdens {
		if b.least.Force == 0 {
			continue
		}
		if out != "" {
			out += " + "
		}
		out += fmt.Sprintf("%s %s N at %s m", b.name, unit.Fixed(b.least.Force, 0), plainFigure(Round(b.least.Lever)))
	}
	return out
}
