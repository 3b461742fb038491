package show

import (
	"fmt"

	"driploop/catalog/unit"
	"driploop/rules"
)

// routers are a block for each router, with a row for each of its bands: a router
// has one direction to be held against limits, and no stages.
func (b *Budget) routers(all *gaps) []Block {
	var out []Block
	var mine []*rules.BudgetBand
	for i, x := range b.Bands {
		if x.Device.Part.Router == nil {
			continue
		}
		mine = append(mine, x)
		if i+1 == len(b.Bands) || b.Bands[i+1].Device != x.Device {
			out = append(out, b.router(mine, all)...)
			mine = nil
		}
	}
	return out
}

func (b *Budget) router(bands []*rules.BudgetBand, all *gaps) []Block {
	d := bands[0].Device
	head := "Router · " + d.ID
	if tx := d.Part.Router.TxDBm; tx.Set {
		head += fmt.Sprintf(", uplink %s dBm over its ports", unit.Fixed(tx.V, 1))
	}
	out := []Block{{Head: head, Table: routerBands(bands, all)}}
	out = append(out, tableOf(feedsOf(bands, all))...)
	if !b.Terms {
		return out
	}
	var items []Item
	for _, x := range bands {
		items = append(items, inBand(x.Band, radiated(x))...)
		items = append(items, inBand(x.Band, formulas(checks(x)))...)
	}
	out = append(out, Block{Items: items})
	for _, x := range bands {
		for _, block := range lineTerms([]*rules.BudgetBand{x}) {
			block.Table.Columns[0] += ", " + x.Band
			out = append(out, block)
		}
	}
	return out
}

// routerBands is what the router radiates in each band against its limits, the
// smallest margin first; bands without a limit stand last.
func routerBands(bands []*rules.BudgetBand, gaps *gaps) *Grid {
	grid := &Grid{Words: 4, Columns: []string{"band", "of", "outcome", "antenna", "value", "limit", "margin"}}
	row := func(x *rules.BudgetBand, of, outcome string, figures ...string) {
		antenna := ""
		if x.Worst != nil {
			antenna = x.Worst.Node.Name()
		}
		grid.Rows = append(grid.Rows, append([]string{x.Band, of, outcome, antenna}, figures...))
	}
	for _, c := range checks(bands...) {
		of := or(c.Of, "EIRP")
		if c.Outcome == "unknown" {
			gaps.add(c.band.Device.ID+" "+of, c.band.Band, c.Value.Lacks, c.Limit.Lacks)
		}
		row(c.band, of+", "+c.Unit, c.outcome(), c.value(), c.limit(), c.margin())
	}
	for _, x := range bands {
		if len(x.Limits) == 0 {
			row(x, "EIRP, dBm", "not held", eirpAtRated(x), "", "")
		}
	}
	return withoutEmpty(grid)
}

// feedsOf is the loss of each feed, a column for each band at the middle of its
// uplink.
func feedsOf(bands []*rules.BudgetBand, gaps *gaps) *Grid {
	grid := &Grid{Columns: []string{"loss of feeds, dB"}}
	for i, x := range bands {
		grid.Columns = append(grid.Columns, x.Band)
		for j, l := range x.Lines {
			if i == 0 {
				grid.Rows = append(grid.Rows, []string{l.Line.Name()})
			}
			gaps.add("loss of the "+lineName(l), x.Band, l.Sum.Missing)
			grid.Rows[j] = append(grid.Rows[j], lossWords(l.Sum.Loss, l.Sum.Known(), 2))
		}
	}
	return grid
}

func inBand(band string, items []Item) []Item {
	for i := range items {
		items[i].Text = band + " " + items[i].Text
	}
	return items
}
