package rules

import (
	"driploop/bom"
	"driploop/catalog"
)

// sideOf is a base and a head, in this order, of anything.
type sideOf[T any] [2]T

const (
	atBase = 0
	atHead = 1
)

// mix says of which side work, facts and rulers are taken.
type mix struct{ work, facts, rulers int }

// The steps from base to head; figures are charged to the one in which they move.
var steps = []struct {
	to  Charge
	mix mix
}{
	{Uncharged, mix{atBase, atBase, atBase}},
	{ToRulers, mix{atBase, atBase, atHead}},
	{ToFacts, mix{atBase, atHead, atHead}},
	{ToWork, mix{atHead, atHead, atHead}},
}

// underBase is the head held against the base's rulers.
var underBase = mix{atHead, atHead, atBase}

// moves says which kinds differ between base and head.
type moves struct{ work, facts, rulers bool }

func (m moves) or(n moves) moves {
	return moves{m.work || n.work, m.facts || n.facts, m.rulers || n.rulers}
}

func (m *moves) note(c Charge) {
	switch c {
	case ToWork:
		m.work = true
	case ToFacts:
		m.facts = true
	case ToRulers:
		m.rulers = true
	}
}

// of is the mix with all that does not differ taken from the head, so that equal
// mixes are looked at once.
func (m moves) of(x mix) mix {
	if !m.work {
		x.work = atHead
	}
	if !m.facts {
		x.facts = atHead
	}
	if !m.rulers {
		x.rulers = atHead
	}
	return x
}

func (m moves) charges() []Charge {
	var out []Charge
	for _, c := range []struct {
		yes bool
		to  Charge
	}{{m.work, ToWork}, {m.facts, ToFacts}, {m.rulers, ToRulers}} {
		if c.yes {
			out = append(out, c.to)
		}
	}
	return out
}

// mixed is a firm with the catalog and plan files of one, the offers, stock and
// premises of another, and the rulers of a third.
func mixed(work, facts, rulers *Firm) *Firm {
	if work == facts && facts == rulers {
		return work
	}
	f := &Firm{Tree: work.Tree, Today: work.Today, Catalog: work.Catalog, Offers: facts.Offers, Stock: facts.Stock, Limits: rulers.Limits,
		PlanFiles: work.PlanFiles, noShelf: work.noShelf, origin: work.origin, weights: rulers.weights, books: facts.books}
	f.Workspace = facts.Workspace
	w := &rulers.Workspace
	f.Workspace.House, f.Workspace.Weights, f.Workspace.Profile, f.Workspace.Code = w.House, w.Weights, w.Profile, w.Code
	if work.Catalog != facts.Catalog {
		f.Stock = catalog.Book(&f.Workspace.Premises, facts.books.sheets, facts.books.orders, work.Catalog.Look, f.Today)
	}
	return f
}

// planOf is a plan of a mix; a side that has no such plan is taken from the other,
// and its waivers are none.
func planOf(p sideOf[*bom.Plan], x mix) *bom.Plan {
	if p[atBase] == nil || p[atHead] == nil {
		only := p[atHead]
		if only == nil {
			only = p[atBase]
		}
		if p[x.rulers] == nil {
			bare := *only
			bare.Waivers = nil
			return &bare
		}
		return only
	}
	if x.work == x.facts && x.facts == x.rulers {
		return p[x.work]
	}
	return bom.Compose(p[x.work], p[x.facts], p[x.rulers])
}
