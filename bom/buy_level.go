package bom

import (
	"slices"

	"driploop/catalog"
)

// LevelMove is what fills a reorder level without being bought: goods that no job
// holds, on another shelf or on their way to one.
type LevelMove struct {
	Keep *catalog.Keep
	Part *catalog.Part
	From *Supply
	Each int
}

// wantLevel wants what fills a shelf up where it holds less than its level: what
// lies there and is on its way there, less what is kept for jobs. What is free in a
// shop, on a dock or on order goes there first, so that it is not bought twice.
func (b *buyer) wantLevel(k *catalog.Keep) {
	p := b.parts(k.Part.V)
	if p == nil || !k.Least.Set || !k.Fill.Set || (k.Fill.V.Length > 0) != p.CutStock() && !k.Fill.V.IsZero() {
		return
	}
	level := b.a.Level(k)
	if !level.Less(k.Least.V) {
		return
	}
	lacking := k.Fill.V.Minus(level)
	if p.CutStock() {
		b.cutting(p).keep(b, lacking.Length)
		return
	}
	if each := b.moveTo(k, p, int(lacking.Each)); each > 0 {
		b.want(&want{keep: k, part: p, each: each})
	}
}

// moveTo fills a level from what is free elsewhere and returns what is still lacking.
func (b *buyer) moveTo(k *catalog.Keep, p *catalog.Part, each int) int {
	for _, s := range b.a.byPart[p.ID] {
		if s.Where == k.Shelf.V || s.Kind == "van" {
			continue
		}
		n := min(each, b.spare(s))
		if n <= 0 {
			continue
		}
		b.out.Moves = append(b.out.Moves, LevelMove{k, p, s, n})
		each -= n
	}
	return each
}

// spare is what of a supply neither a job holds, nor a level of its own shelf, nor
// what was moved from it already.
func (b *buyer) spare(s *Supply) int {
	free := s.Free.Each
	levels := b.a.premises.Keeps
	if i := slices.IndexFunc(levels, func(k catalog.Keep) bool { return k.Part.V == s.Part && k.Shelf.V == s.Where }); i >= 0 {
		free = min(free, b.a.Level(&levels[i]).Each-levels[i].Fill.V.Each)
	}
	for _, m := range b.out.Moves {
		if m.From.Part == s.Part && m.From.Where == s.Where && (m.From == s || free < s.Free.Each) {
			free -= int64(m.Each)
		}
	}
	return int(max(0, free))
}

// Level is what counts toward a reorder level: what its shelf holds and what is on
// order for it, less what is kept for jobs.
func (a *Allocation) Level(k *catalog.Keep) catalog.Quantity {
	var level catalog.Quantity
	for _, s := range a.byPart[k.Part.V] {
		if s.Where == k.Shelf.V {
			level = level.Plus(s.Free)
		}
	}
	return level
}
