package show

import (
	"fmt"
	"slices"

	"driploop/rules"
)

// terms are the addends behind the figures of a band.
func (b *Budget) terms(g *group) []Block {
	out := []Block{{Items: append(b.inputTerms(g), g.isolationTerms()...)}}
	for _, d := range g.both() {
		out[0].Items = append(out[0].Items, radiated(d)...)
	}
	out[0].Items = append(out[0].Items, formulas(checks(g.both()...))...)
	return append(out, lineTerms(g.both())...)
}

// inputTerms are the signals that make up the composite input, and what a phone
// brings in.
func (b *Budget) inputTerms(g *group) []Item {
	var out []Item
	for _, a := range b.Case.Arrivals(g.chain) {
		sum := []rules.ReachTerm{{What: words(a.Signal.Blocks, "block", "blocks") + " at full load", DB: a.Load},
			{What: a.Line.From.Device.ID, DB: a.Signal.Gain}, {What: "feed", DB: -a.Signal.Feed}}
		out = append(out, Item{Text: fmt.Sprintf("Input of %s in %s: %s dBm%s = %s dBm.", a.Survey.Operator.V, a.Survey.Band.V, level(a.Signal.RSRP), sumWords(sum), level(a.Level))})
	}
	if g.up == nil {
		return out
	}
	for _, ch := range g.up.Chains {
		if phone, terms := b.Case.PhoneTerms(ch, g.up.MHz); len(ch.Stages) > 0 {
			out = append(out, Item{Text: fmt.Sprintf("Phone to %s: %s dBm%s = %s dBm.", g.way(g.up, ch), level(phone), sumWords(terms), level(ch.Start))})
		}
	}
	return out
}

// isolationTerms are the pairs of antennas that a computed isolation is the sum of.
func (g *group) isolationTerms() []Item {
	var out []Item
	for _, p := range g.chain.Apart.Pairs {
		out = append(out, Item{Text: fmt.Sprintf("Isolation %s to %s: path %s + shell %s − %s dBi − %s dBi toward each other + feed %s + leg %s = %s.", p.Server.Name(), p.Donor.Name(),
			hundredths(p.Path), hundredths(p.Shell), hundredths(p.Coupling.Donor), hundredths(p.Coupling.Server), hundredths(p.Feed), hundredths(p.Leg), p.Isolation)})
	}
	return out
}

// radiated is the EIRP of a direction with its addends.
func radiated(d *rules.BudgetBand) []Item {
	if d == nil || d.Worst == nil {
		return nil
	}
	w := d.Worst.Worst
	return []Item{{Text: fmt.Sprintf("EIRP %s at %s from %s: %s dBm + %s dBi − %s dB = %s dBm.", d.Direction, w.MHz, d.Worst.Node.Name(),
		level(w.Out), hundredths(w.Gain), hundredths(w.Line.Loss.Least), level(w.EIRP.Most))}}
}

// formulas are the limits as they are written, with where they stand; once where
// both directions have the same.
func formulas(all []check) []Item {
	var out []Item
	for i, c := range all {
		switch {
		case c.Formula == "":
		case i > 0 && all[i-1].Rule == c.Rule && all[i-1].Formula == c.Formula && all[i-1].Basis == c.Basis:
			out[len(out)-1].Text = c.Rule + " (both): " + c.Formula + "; " + c.Basis + "."
		default:
			out = append(out, Item{Text: c.name() + ": " + c.Formula + "; " + c.Basis + "."})
		}
	}
	return out
}

// lineTerms is a table of addends for each line.
func lineTerms(both []*rules.BudgetBand) []Block {
	var out []Block
	column := 0
	for _, d := range both {
		if d == nil {
			continue
		}
		column++
		for i, l := range d.Lines {
			if i == len(out) {
				out = append(out, Block{Table: &Grid{Columns: sides(lineName(l)+", dB", both)}})
			}
			addTerms(out[i].Table, column, l.Sum)
		}
	}
	return out
}

// addTerms fills a column with the addends of a sum. Those of both directions stand
// in one row where they are of the same thing.
func addTerms(g *Grid, column int, sum rules.LineSum) {
	next := 0
	put := func(name, text string) {
		for i := next; i < len(g.Rows); i++ {
			if g.Rows[i][0] == name {
				g.Rows[i][column], next = text, i+1
				return
			}
		}
		row := make([]string, len(g.Columns))
		row[0], row[column] = name, text
		g.Rows = slices.Insert(g.Rows, next, row)
		next++
	}
	for _, t := range sum.Terms() {
		put(t.What, lossWords(t.Loss, true, 3))
	}
	put("in all", lossWords(sum.Loss, sum.Known(), 3))
}
