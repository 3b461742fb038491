package bom

import (
	"slices"

	"driploop/catalog/source"
)

// Compose puts a plan together from three states of it: the work of one, the facts
// of another, the rulers of a third. With it a figure that moved between two
// revisions can be charged to what moved it.
//
//   - Work is what is put up: devices, lines, joints, bonds, extras, where places and
//     areas are, and the terms of the job.
//   - Facts are what is the case whatever is put up: site, survey, readings, papers,
//     what places are like, how near people come, how far the job has come.
//   - Rulers are what the plan is held against: its profile and code, the level asked
//     for in an area, its waivers.
//
// IDs of the three must mean the same things; see Renamed.
func Compose(work, facts, rulers *Plan) *Plan {
	p := *work
	p.Job.Stage, p.Job.Setting, p.Job.Use = facts.Job.Stage, facts.Job.Setting, facts.Job.Use
	p.Job.Profile, p.Job.Code = rulers.Job.Profile, rulers.Job.Code
	p.Operators, p.Permit = facts.Operators, facts.Permit
	p.Site, p.PowerLines, p.Betweens = facts.Site, facts.PowerLines, facts.Betweens
	p.Signals, p.Readings, p.Reserves = facts.Signals, facts.Readings, facts.Reserves
	p.Waivers = rulers.Waivers
	p.Places = overlaid(work.Places, facts.Places, func(p *Place) string { return p.ID }, func(p *Place, fact Place) {
		at := p.Point
		*p = fact
		p.Point = at
	})
	p.Devices = overlaid(work.Devices, facts.Devices, func(d *DeviceRow) string { return d.ID }, func(d *DeviceRow, fact DeviceRow) {
		d.People, d.Lightning, d.Serial = fact.People, fact.Lightning, fact.Serial
	})
	p.Areas = overlaid(work.Areas, facts.Areas, areaName, func(a *Area, fact Area) {
		a.Distance, a.Walls, a.Floors, a.Environment, a.Before = fact.Distance, fact.Walls, fact.Floors, fact.Environment, fact.Before
	})
	p.Areas = overlaid(p.Areas, rulers.Areas, areaName, func(a *Area, ruler Area) { a.Target = ruler.Target })
	return &p
}

func areaName(a *Area) string { return a.Name.V }

// overlaid copies rows and lets each take something from the row of the same name
// in another list.
func overlaid[T any](rows, others []T, name func(*T) string, take func(row *T, other T)) []T {
	out := slices.Clone(rows)
	for i := range out {
		for j := range others {
			if name(&out[i]) == name(&others[j]) {
				take(&out[i], others[j])
				break
			}
		}
	}
	return out
}

// SameMeaning reports two plans that say the same in other words or another layout,
// whatever their files are called.
func SameMeaning(a, b *Plan) bool {
	x, y := *a, *b
	x.ID, y.ID, x.File, y.File = "", "", nil, nil
	return source.Alike(&x, &y)
}
