package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// areas is what arrives in each area, from each surveyed signal.
func (b *Budget) areas(gaps *gaps) []Block {
	if len(b.Areas) == 0 {
		return nil
	}
	grid := &Grid{Words: 3, Columns: []string{"area", "band", "operator", "before", "RSRP dBm", "target", "up margin", "limited by"}}
	for _, r := range b.Areas {
		gaps.add("level in the area "+r.Area.Name.V, r.Signal.Band.V, r.RSRP.Lacks)
		gaps.add("uplink from the area "+r.Area.Name.V, r.Signal.Band.V, r.Up.Lacks)
		grid.Rows = append(grid.Rows, areaCells(r))
	}
	out := []Block{{Head: "Areas", Table: withoutEmpty(grid)}}
	if !b.Terms {
		return out
	}
	var items []Item
	for _, r := range b.Areas {
		items = append(items, areaTerms(r)...)
	}
	return append(out, Block{Items: items})
}

// withoutEmpty is a table without the columns in which nothing stands.
func withoutEmpty(g *Grid) *Grid {
	out := &Grid{Rows: make([][]string, len(g.Rows))}
	for i, c := range g.Columns {
		if !slices.ContainsFunc(g.Rows, func(r []string) bool { return r[i] != "" }) {
			continue
		}
		out.Columns = append(out.Columns, c)
		if g.isWords(i) {
			out.Words++
		}
		for j, r := range g.Rows {
			out.Rows[j] = append(out.Rows[j], r[i])
		}
	}
	return out
}

func areaCells(r *rules.AreaReach) []string {
	after := orUnknown(r.RSRP.V.Value(), r.RSRP.OK, 1) + doubtWords(r.Doubt)
	before, target := "", ""
	if r.Before.Set {
		before = unit.Fixed(r.Before.V, 0)
	}
	if r.Area.Target.Set {
		target = unit.Fixed(r.Area.Target.V, 0)
	}
	up := orUnknown(float64(r.Up.V.Level.Minus(r.Up.V.Needed)), r.Up.OK, 1)
	if r.Up.V.Limited {
		up += "*"
	}
	up += doubtWords(r.Up.V.Doubt)
	return []string{r.Area.Name.V, r.Signal.Band.V, r.Signal.Operator.V, before, after, target, up, r.Ends()}
}

// doubtWords prints how far a figure may be off.
func doubtWords(d unit.DB) string {
	if d == 0 {
		return ""
	}
	return " ±" + unit.Fixed(float64(d), 1)
}

// areaTerms are the addends on the way to the phone and back.
func areaTerms(r *rules.AreaReach) []Item {
	if !r.RSRP.OK {
		return nil
	}
	name := fmt.Sprintf("%s, %s, %s", r.Area.Name.V, r.Signal.Band.V, r.Signal.Operator.V)
	out := []Item{{Text: fmt.Sprintf("%s at %s: survey %s%s = %s dBm.", name, r.MHz, unit.Fixed(r.Signal.RSRP.V, 1), sumWords(r.Terms), unit.Fixed(r.RSRP.V.Value(), 2))}}
	if r.Up.OK {
		out = append(out, Item{Text: fmt.Sprintf("%s, back: 23 dBm%s = %s dBm, needed %s dBm.", name, sumWords(r.Up.V.Terms), unit.Fixed(r.Up.V.Level.Value(), 2), unit.Fixed(r.Up.V.Needed.Value(), 1))})
	}
	return out
}

// sumWords prints addends with their signs.
func sumWords(terms []rules.ReachTerm) string {
	var b strings.Builder
	for _, t := range terms {
		sign, v := "+", float64(t.DB)
		if v < 0 {
			sign, v = "−", -v
		}
		fmt.Fprintf(&b, " %s %s dB %s", sign, unit.Fixed(v, 2), t.Words())
	}
	return b.String()
}
