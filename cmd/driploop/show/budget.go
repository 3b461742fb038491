package show

import (
	"fmt"
	"slices"
	"sort"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// Budget is the radio chain of a plan, ready to be shown: what a lead reads before
// signing. The smallest margin stands on top, then one block for each band.
type Budget struct {
	*rules.Budget
	Terms bool // with every addend
}

// Text writes the chain as text, in tables where the page is wide enough for them.
func (b *Budget) Text(page Page) ([]byte, error) { return b.document().Text(page) }

// Markdown writes the chain for a pull request.
func (b *Budget) Markdown() []byte { return b.document().Markdown() }

func (b *Budget) document() *Document {
	p := b.Case.Plan
	d := &Document{Title: p.ID}
	if p.Job.Title.Set {
		d.Title += " · " + p.Job.Title.V
	}
	var gaps gaps
	groups := b.groups()
	figures := append(b.summary(groups), b.sharedIsolation(groups)...)
	for _, g := range groups {
		figures = append(figures, b.band(g, &gaps)...)
	}
	figures = append(figures, b.routers(&gaps)...)
	figures = append(figures, b.areas(&gaps)...)
	d.Blocks = slices.Concat([]Block{b.about(), b.verdict()}, gaps.block(), figures, b.howToRead())
	return d
}

// about says what the figures were made from.
func (b *Budget) about() Block {
	c := b.Case
	out := Block{how: faint, Text: []string{fmt.Sprintf("%s, stage %s, limits %s; %s, on %s%s.", c.Plan.File.Path, c.Stage(),
		or(c.ProfileName(), "none named"), treeName(c.Firm.Tree.Name()), c.Today(), borrowed(c.Firm.Origin()))}}
	for _, o := range c.Firm.Overrides() {
		out.Items = append(out.Items, Item{Text: "changed here: " + o})
	}
	for _, d := range c.Firm.Origin().Differs {
		out.Items = append(out.Items, Item{Text: "rulers: " + d})
	}
	return out
}

// group is both directions of an amplifier in one band.
type group struct {
	name     string // "B12", with the amplifier's where there are several
	chain    *rules.BandChain
	up, down *rules.BudgetBand
	apart    string // the isolation in words, where other bands have another
}

func (g *group) both() []*rules.BudgetBand { return []*rules.BudgetBand{g.up, g.down} }

// first is a direction that there is.
func (g *group) first() *rules.BudgetBand {
	if g.up != nil {
		return g.up
	}
	return g.down
}

// groups are the amplifiers' bands in the order of the plan.
func (b *Budget) groups() []*group {
	var out []*group
	amps := map[string]bool{}
	for _, x := range b.Case.Chain().Bands {
		g := &group{name: x.Band.Name, chain: x}
		for _, d := range b.Bands {
			switch {
			case d.Device != x.Amp || d.Band != x.Band.Name:
			case d.Direction == "uplink":
				g.up = d
			default:
				g.down = d
			}
		}
		if g.first() != nil {
			out = append(out, g)
			amps[x.Amp.ID] = true
		}
	}
	if len(amps) > 1 {
		for _, g := range out {
			g.name += " " + g.chain.Amp.ID
		}
	}
	return out
}

// summary is a row for each band of an amplifier, the smallest margin first.
func (b *Budget) summary(groups []*group) []Block {
	if len(groups) < 2 {
		return nil
	}
	sorted := append([]*group(nil), groups...)
	sort.SliceStable(sorted, func(i, j int) bool {
		a, aok := sorted[i].tightest()
		b, bok := sorted[j].tightest()
		return aok && (!bok || a.Limit.V-a.Value.V < b.Limit.V-b.Value.V)
	})
	grid := &Grid{Words: 2, Columns: []string{"band", "tightest limit", "margin", "uplink", "downlink"}}
	for _, g := range sorted {
		row := []string{g.name, "not assessed", ""}
		if c, ok := g.tightest(); ok {
			row[1], row[2] = c.name(), c.margin()
		}
		for _, d := range g.both() {
			gain, by := gainThatRuns(d)
			row = append(row, strings.TrimSpace(gain+" "+by))
		}
		grid.Rows = append(grid.Rows, row)
	}
	return []Block{{Head: "Smallest margins, and the gain that runs, in dB", Table: grid}}
}

// tightest is the limit with the smallest margin.
func (g *group) tightest() (check, bool) {
	for _, c := range checks(g.both()...) {
		if c.binds() {
			return c, true
		}
	}
	return check{}, false
}

// gainThatRuns is the gain and what binds it, in words.
func gainThatRuns(d *rules.BudgetBand) (gain, by string) {
	switch {
	case d == nil:
		return "", ""
	case !d.Runs.OK:
		return "?", ""
	case !d.Runs.V.On:
		return "off", string(d.Runs.V.By)
	}
	return unit.Fixed(float64(d.Runs.V.Gain), 1), string(d.Runs.V.By)
}

func hasStages(x *rules.BudgetBand) bool {
	return slices.ContainsFunc(x.Chains, func(ch rules.StageChain) bool { return len(ch.Stages) > 0 })
}

// howToRead explains what the tables do not say by themselves.
func (b *Budget) howToRead() []Block {
	out := Block{how: faint}
	if len(b.Bands) > 0 {
		out.Text = append(out.Text, "A loss is printed as least…greatest: the least is the coldest and best matched, the greatest the hottest and worst. Limits meet the least, levels the greatest.")
	}
	if slices.ContainsFunc(b.Bands, hasStages) {
		out.Text = append(out.Text, "Stages: the level at the first antenna's port, its line, the level at the amplifier, the gain that runs, the level behind it (* held at the rated output), the other line, the level at the last antenna's port; gain and noise figure of the whole. Uplink from a phone of 23 dBm at the distance of certification, downlink from what the survey brings at full load.")
	}
	if len(b.Areas) > 0 {
		out.Text = append(out.Text, "Areas: the level at a phone from the weakest of the antennas that serve it. The uplink margin is what a phone arrives with above what a base station needs (* held at the rated output).")
	}
	if len(b.Bands) > 0 {
		out.Text = append(out.Text, "These are the limits of the radio chain; inspect holds the plan against all rules. Neither says that an install may go up.")
	}
	if len(out.Text) == 0 {
		return nil
	}
	return []Block{out}
}
