package show

import (
	"fmt"
	"slices"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/rf"
)

// band is both directions of an amplifier in one band: its figures, lines, stages
// and limits, and the addends where they are asked for.
func (b *Budget) band(g *group, all *gaps) []Block {
	if b.CutOff(g.chain) {
		all = new(gaps) // a notice says what its figures lack
	}
	out := []Block{{Head: g.heading(), Table: g.figures(all)}}
	if g.apart != "" {
		out[0].Text = []string{g.apart}
	}
	out = append(out, tableOf(linesOf(g.both(), all))...)
	for _, d := range g.both() {
		out = append(out, tableOf(g.stages(d, all))...)
	}
	out = append(out, tableOf(limitsOf(checks(g.both()...), all))...)
	if b.Terms {
		out = append(out, b.terms(g)...)
	}
	return out
}

func tableOf(g *Grid) []Block {
	if g == nil || len(g.Rows) == 0 {
		return nil
	}
	return []Block{{Table: g}}
}

func (g *group) heading() string {
	out := fmt.Sprintf("%s · %s", g.chain.Band.Name, g.chain.Amp.ID)
	for _, d := range g.both() {
		if d != nil {
			out += fmt.Sprintf(", %s %s", d.Direction, d.MHz)
		}
	}
	return out
}

// sharedIsolation says once how far the antennas are apart, where that is the same
// for all bands; else each band says it.
func (b *Budget) sharedIsolation(groups []*group) []Block {
	same := len(groups) > 1
	for _, g := range groups {
		g.apart = b.isolation(g)
		same = same && g.apart == groups[0].apart
	}
	if !same || groups[0].apart == "" {
		return nil
	}
	text := groups[0].apart
	for _, g := range groups {
		g.apart = ""
	}
	return []Block{{Text: []string{text}}}
}

// isolation says how far the antennas are apart, and what gain that carries.
func (b *Budget) isolation(g *group) string {
	i := g.chain.Apart
	if !i.OK {
		return ""
	}
	how := "computed, least at " + i.Edge.String()
	if r := i.Reading; r != nil {
		how = "measured"
		if r.Stage.Set {
			how += ", " + r.Stage.V
		}
		if r.On.Set {
			how += " of " + r.On.V.String()
		}
	}
	margin := b.IsolationMargin()
	carries := "no gain"
	if i.V >= margin {
		carries = (i.V - margin).String() + " of gain"
	}
	return fmt.Sprintf("Isolation %s (%s); less the margin of %s it carries %s.", i.V, how, margin, carries)
}

// sides are the columns of a table with one for each direction that there is.
func sides(first string, both []*rules.BudgetBand) []string {
	out := []string{first}
	for _, d := range both {
		if d != nil {
			out = append(out, d.Direction)
		}
	}
	return out
}

// figures are those that the whole band has, a column for each direction.
func (g *group) figures(gaps *gaps) *Grid {
	grid := &Grid{Columns: sides("figures", g.both())}
	row := func(name string, of func(*rules.BudgetBand) string) {
		cells, some := []string{name}, false
		for _, d := range g.both() {
			if d != nil {
				cells = append(cells, of(d))
				some = some || cells[len(cells)-1] != ""
			}
		}
		if some {
			grid.Rows = append(grid.Rows, cells)
		}
	}
	row("composite input, dBm", func(d *rules.BudgetBand) string {
		if d.Direction == "uplink" {
			return ""
		}
		gaps.add("input", d.Band, d.Input.Lacks)
		return orUnknown(d.Input.V.Value(), d.Input.OK, 1)
	})
	row("coupling loss to the phone, dB", func(d *rules.BudgetBand) string {
		if d.Direction == "downlink" {
			return ""
		}
		gaps.add("coupling loss", d.Band, g.chain.MSCL.Lacks)
		return orUnknown(float64(g.chain.MSCL.V), g.chain.MSCL.OK, 1)
	})
	row("gain as set, dB", func(d *rules.BudgetBand) string {
		gaps.add(d.Direction+" gain", d.Band, d.Set.Lacks)
		return orUnknown(float64(d.Set.V), d.Set.OK, 1)
	})
	row("gain that runs, dB", func(d *rules.BudgetBand) string {
		gaps.add(d.Direction+" gain that runs", d.Band, d.Runs.Lacks)
		gain, _ := gainThatRuns(d)
		return gain
	})
	row("bound by", func(d *rules.BudgetBand) string {
		_, by := gainThatRuns(d)
		return by
	})
	row("EIRP at rated output, dBm", eirpAtRated)
	row("EIRP that runs, dBm", func(d *rules.BudgetBand) string {
		if d.Direction == "uplink" || !d.EIRP.OK {
			return ""
		}
		return unit.Fixed(d.EIRP.V.Value(), 2)
	})
	return grid
}

// eirpAtRated is the greatest EIRP over the band at the rated output.
func eirpAtRated(d *rules.BudgetBand) string {
	if d.Worst == nil {
		return ""
	}
	return unit.Fixed(d.Worst.Worst.EIRP.Most.Value(), 2)
}

// linesOf is the loss of each line, a column for each direction.
func linesOf(both []*rules.BudgetBand, gaps *gaps) *Grid {
	grid := &Grid{Columns: sides("loss of lines, dB", both)}
	for _, d := range both {
		if d == nil {
			continue
		}
		for i, l := range d.Lines {
			name := lineName(l)
			if i == len(grid.Rows) {
				grid.Rows = append(grid.Rows, []string{name})
			}
			gaps.add("loss of the "+name, d.Band, l.Sum.Missing)
			grid.Rows[i] = append(grid.Rows[i], lossWords(l.Sum.Loss, l.Sum.Known(), 2))
		}
	}
	return grid
}

func lineName(l rules.BudgetLine) string { return l.Line.Kind.String() + " " + l.Line.Name() }

// lossWords prints a loss, or its least and greatest where they differ.
func lossWords(l rf.Loss, known bool, decimals int) string {
	least, greatest := unit.Fixed(float64(l.Least), decimals), unit.Fixed(float64(l.Greatest), decimals)
	switch {
	case !known:
		return "?"
	case least == greatest:
		return least
	}
	return least + "…" + greatest
}

// stages is a row for each way of a signal in one direction, by its server antenna.
func (g *group) stages(d *rules.BudgetBand, gaps *gaps) *Grid {
	if d == nil || d.Runs.OK && !d.Runs.V.On {
		return nil
	}
	grid := &Grid{Columns: []string{d.Direction + " by", "start", "line", "in", "gain", "out", "line", "end", "total", "NF"}}
	for _, ch := range d.Chains {
		name := g.way(d, ch)
		gaps.add(d.Direction+" stages", d.Band, ch.Lacks)
		if len(ch.Stages) == 3 {
			grid.Rows = append(grid.Rows, append([]string{name}, stageCells(ch)...))
		}
	}
	return grid
}

// way names a chain by its server antenna, and by its donor antenna where there are
// several.
func (g *group) way(d *rules.BudgetBand, ch rules.StageChain) string {
	donor, server := deviceOf(ch.From), deviceOf(ch.To)
	if d.Direction == "uplink" {
		donor, server = server, donor
	}
	if len(g.chain.Feeds) > 1 {
		return server + ", " + donor
	}
	return server
}

func deviceOf(port string) string {
	device, _, _ := strings.Cut(port, ".")
	return device
}

func stageCells(ch rules.StageChain) []string {
	first, amp, last := ch.Stages[0], ch.Stages[1], ch.Stages[2]
	held := ""
	if amp.Held {
		held = "*"
	}
	return []string{level(ch.Start), hundredths(first.Gain), level(first.Level), hundredths(amp.Gain), level(amp.Level) + held,
		hundredths(last.Gain), level(last.Level), hundredths(last.Total), unit.Fixed(float64(last.NF), 1)}
}

// Both print two decimals, so that sums can be followed.
func hundredths(d unit.DB) string { return unit.Fixed(float64(d), 2) }
func level(l unit.DBm) string     { return unit.Fixed(l.Value(), 2) }

// limitsOf is a row for each limit, the smallest margin first. Where both directions
// have the same figures one row is for both.
func limitsOf(all []check, gaps *gaps) *Grid {
	grid := &Grid{Words: 2, Columns: []string{"rule", "outcome", "value", "limit", "margin"}}
	for i, c := range all {
		if c.Outcome == "unknown" {
			gaps.add(c.name(), c.band.Band, c.Value.Lacks, c.Limit.Lacks)
		}
		row := []string{c.name() + ", " + c.Unit, c.outcome(), c.value(), c.limit(), c.margin()}
		if i > 0 && all[i-1].Rule == c.Rule && all[i-1].Unit == c.Unit && slices.Equal(grid.Rows[len(grid.Rows)-1][1:], row[1:]) {
			grid.Rows[len(grid.Rows)-1][0] = c.Rule + " (both), " + c.Unit
			continue
		}
		grid.Rows = append(grid.Rows, row)
	}
	return grid
}
