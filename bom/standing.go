package bom

import (
	"cmp"
	"slices"
	"strings"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// Standing is one part on one shelf: what lies there, what is to come, and what of
// it is kept for jobs.
type Standing struct {
	Part    string
	Where   string // "" for goods on order with no shelf to go to
	Kind    string // of the shelf
	OnHand  catalog.Quantity
	Inbound catalog.Quantity // what sent orders bring there
	Claimed catalog.Quantity // of what lies there
	Coming  catalog.Quantity // of what is to come, what jobs hold
	Free    catalog.Quantity // on hand where a crew may pick, less what is claimed
	Longest unit.MM          // of cut stock: the longest piece that could still be cut there
	Counted catalog.Moment   // of the newest count
}

// Standings lists the stock by part and shelf: every bin, quarantine included, and
// every shelf to which goods are on their way.
func (a *Allocation) Standings() []Standing {
	t := table{map[[2]string]int{}, nil}
	for i := range a.stock.Bins {
		b := &a.stock.Bins[i]
		if b.Kind == "" {
			continue // a shelf that nobody describes
		}
		s := t.row(b.Part, b.Where, b.Kind)
		s.OnHand, s.Counted = b.Qty, b.Counted
	}
	for _, id := range a.Parts() {
		for _, p := range a.byPart[id] {
			s := t.row(p.Part, p.Where, p.Kind)
			held := p.Qty.Minus(p.Free)
			if !p.Here() {
				s.Inbound, s.Coming = s.Inbound.Plus(p.Qty), s.Coming.Plus(held)
				continue
			}
			s.Claimed = s.Claimed.Plus(held)
			if p.Pickable() {
				s.Longest = max(s.Longest, p.Free.Length)
			}
		}
	}
	for i := range t.rows {
		if s := &t.rows[i]; s.Kind == "shop" || s.Kind == "van" {
			s.Free = catalog.Quantity{Each: max(0, s.OnHand.Each-s.Claimed.Each), Length: max(0, s.OnHand.Length-s.Claimed.Length)}
		}
	}
	slices.SortFunc(t.rows, func(x, y Standing) int {
		return cmp.Or(strings.Compare(x.Part, y.Part), strings.Compare(x.Where, y.Where))
	})
	return t.rows
}

// table collects standings by part and shelf.
type table struct {
	at   map[[2]string]int
	rows []Standing
}

func (t *table) row(part, where, kind string) *Standing {
	key := [2]string{part, where}
	i, known := t.at[key]
	if !known {
		i = len(t.rows)
		t.at[key] = i
		t.rows = append(t.rows, Standing{Part: part, Where: where, Kind: kind})
	}
	return &t.rows[i]
}

// ReelStanding is one tagged piece of cut stock on a shelf.
type ReelStanding struct {
	*catalog.Tag
	Free unit.MM // what no job holds; of a guess, what is kept back is not free
}

// Reels lists the tagged pieces that lie on shelves, by part and tag.
func (a *Allocation) Reels() []ReelStanding {
	free := map[string]unit.MM{}
	for _, list := range a.byPart {
		for _, s := range list {
			if s.Tag != nil && s.Pickable() {
				free[s.Tag.ID] = s.Free.Length
			}
		}
	}
	var out []ReelStanding
	for i := range a.stock.Tags {
		if t := &a.stock.Tags[i]; t.Where != "" && t.Left > 0 {
			out = append(out, ReelStanding{t, free[t.ID]})
		}
	}
	slices.SortFunc(out, func(x, y ReelStanding) int {
		return cmp.Or(strings.Compare(x.Part, y.Part), strings.Compare(x.ID, y.ID))
	})
	return out
}
