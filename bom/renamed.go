package bom

import (
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// Renamed is the plan with the new names in place of the old ones, wherever it
// refers to them. Places stay those of the plan's own text.
func (p *Plan) Renamed(r Renames) *Plan {
	if len(r) == 0 {
		return p
	}
	q := *p
	name := func(v source.Val[string]) source.Val[string] { v.V = r.Of(v.V); return v }
	ref := func(v source.Val[Ref]) source.Val[Ref] { v.V.Name = r.Of(v.V.Name); return v }
	q.Devices, q.Cables, q.Joints = slices.Clone(p.Devices), slices.Clone(p.Cables), slices.Clone(p.Joints)
	q.Data, q.Wires, q.Bonds = slices.Clone(p.Data), slices.Clone(p.Wires), slices.Clone(p.Bonds)
	q.Areas, q.Readings, q.Reserves, q.Waivers = slices.Clone(p.Areas), slices.Clone(p.Readings), slices.Clone(p.Reserves), slices.Clone(p.Waivers)
	for i := range q.Devices {
		x := &q.Devices[i]
		x.ID, x.On = r.Of(x.ID), name(x.On)
	}
	for i := range q.Cables {
		x := &q.Cables[i]
		x.ID, x.From, x.To, x.Like = r.Of(x.ID), ref(x.From), ref(x.To), name(x.Like)
	}
	for i := range q.Joints {
		q.Joints[i].A, q.Joints[i].B = ref(q.Joints[i].A), ref(q.Joints[i].B)
	}
	for i := range q.Data {
		x := &q.Data[i]
		x.ID, x.From, x.To = r.Of(x.ID), ref(x.From), ref(x.To)
	}
	for i := range q.Wires {
		x := &q.Wires[i]
		x.ID, x.From, x.To = r.Of(x.ID), ref(x.From), ref(x.To)
	}
	for i := range q.Bonds {
		x := &q.Bonds[i]
		x.ID, x.From, x.To = r.Of(x.ID), ref(x.From), ref(x.To)
	}
	for i := range q.Areas {
		by := slices.Clone(q.Areas[i].ServedBy.V)
		for j := range by {
			by[j] = name(by[j])
		}
		q.Areas[i].ServedBy.V = catalog.Words(by)
	}
	for i := range q.Readings {
		q.Readings[i].From, q.Readings[i].To = ref(q.Readings[i].From), ref(q.Readings[i].To)
	}
	for i := range q.Reserves {
		q.Reserves[i].Cable = name(q.Reserves[i].Cable)
	}
	for i := range q.Waivers {
		q.Waivers[i].On.V = r.On(q.Waivers[i].On.V)
	}
	return &q
}

// On is what a finding stands on, "cable.C1", under the new names.
func (r Renames) On(on string) string {
	sort, id, named := strings.Cut(on, ".")
	if !named || sort == "joint" {
		return on
	}
	return sort + "." + r.Of(id)
}
