package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/source"
)

type wordVal = source.Val[string]

// compareFiles compares what rules on the workspace's own files find: what stands
// there says nothing of the change, what is new does.
func (c *comparison) compareFiles() {
	var lists sideOf[[]*Finding]
	for side, f := range c.firms {
		lists[side] = f.inspectFiles()
	}
	x := &found{at: [4][]*Finding{lists[atBase], lists[atBase], lists[atBase], lists[atHead]}}
	moved, stands := x.compare()
	for i := range moved {
		m := &moved[i]
		switch c.firms[atHead].sortOf(m.At.Path()) {
		case sortCatalog:
			m.Charge = ToWork
		case sortProfiles, sortHead:
			m.Charge = ToRulers
		default:
			m.Charge = ToFacts
		}
	}
	c.out.Workspace = append(moved, c.out.Workspace...)
	c.out.Standing.add(stands)
}

// judge counts the holds that stand on the head: by its own rulers, and by those of
// the base. Of jobs whose plans did not change only new ones count.
func (c *comparison) judge() {
	g := &c.out.Gate
	c.out.RulersMoved = c.moved.rulers
	for _, p := range c.pairs {
		c.out.RulersMoved = c.out.RulersMoved || p.moved.rulers && !p.isNew() && !p.isGone() || p.isNew() && len(waiversOf(p.plan[atHead])) > 0
	}
	g.Differs = c.out.RulersMoved
	for _, p := range c.pairs {
		j := p.job
		if p.isGone() {
			continue
		}
		own := slices.Concat(c.at(p, steps[3].mix).findings, c.shelfFound(c.final, p))
		base := slices.Concat(c.at(p, underBase).findings, c.shelfFound(c.under, p))
		j.Holds, j.HoldsBase = holds(own), holds(base)
		for _, f := range base {
			held := func(x *Finding) bool {
				return x.Rule == f.Rule && x.On == f.On && x.Band == f.Band && x.Waived == nil && x.Weight == Hold
			}
			if f.Waived == nil && f.Weight == Hold && !slices.ContainsFunc(own, held) {
				j.BaseHolds = append(j.BaseHolds, f)
			}
		}
		g.UnderHead += j.Holds
		g.UnderBase += j.HoldsBase
		c.ownProfile(p)
	}
	for _, o := range c.out.Others {
		g.UnderHead += o.Holds
		g.UnderBase += o.Holds
	}
	for _, m := range c.out.Workspace {
		if m.How.Worse() && m.Weight == Hold && m.Waived == nil {
			g.UnderHead++
			g.UnderBase++
		}
	}
	g.Held = g.UnderHead > 0 || g.UnderBase > 0
}

// waiversOf lists the waivers of a plan that may be missing.
func waiversOf(p *bom.Plan) []bom.Waiver {
	if p == nil {
		return nil
	}
	return p.Waivers
}

func (c *comparison) shelfFound(s *shelfState, p *pair) []*Finding {
	if s == nil || p.entry[atHead] == nil {
		return nil
	}
	return s.found[p.entry[atHead].Path]
}

func holds(list []*Finding) int {
	n := 0
	for _, f := range list {
		if f.Weight == Hold && f.Waived == nil {
			n++
		}
	}
	return n
}

// ownProfile compares row by row the profiles and codes that a plan names now and
// named before.
func (c *comparison) ownProfile(p *pair) {
	if p.isNew() || p.broken[atBase] || p.broken[atHead] || p.plan[atBase] == nil || p.plan[atHead] == nil {
		return
	}
	a, b := &p.plan[atBase].Job, &p.plan[atHead].Job
	x, y := &c.firms[atBase].Workspace, &c.firms[atHead].Workspace
	if was, now := a.Profile.Or(x.Profile.V), b.Profile.Or(y.Profile.V); was != now && !c.told("profile", was, now) {
		c.rulerRows("profile", was, now, profileRows(c.firms[atBase].Limits.Profile(was)), profileRows(c.firms[atHead].Limits.Profile(now)))
	}
	if was, now := a.Code.Or(x.Code.V), b.Code.Or(y.Code.V); was != now && !c.told("code", was, now) {
		c.rulerRows("code", was, now, codeRows(c.firms[atBase].Limits.Code(was)), codeRows(c.firms[atHead].Limits.Code(now)))
	}
}

// told reports whether the rows of two rulers have been compared, and notes that they
// will have been.
func (c *comparison) told(sort, was, now string) bool {
	key := sort + " " + was + " " + now
	if c.compared == nil {
		c.compared = map[string]bool{}
	}
	done := c.compared[key]
	c.compared[key] = true
	return done
}
