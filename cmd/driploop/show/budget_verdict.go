package show

import (
	"fmt"
	"sort"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// check is one limit with the band and direction that it is about.
type check struct {
	*rules.LimitCheck
	band *rules.BudgetBand
}

// checks are all limits of some bands, the smallest margin first, and those without
// one last.
func checks(bands ...*rules.BudgetBand) []check {
	var out []check
	for _, x := range bands {
		if x == nil {
			continue
		}
		for i := range x.Limits {
			out = append(out, check{&x.Limits[i], x})
		}
	}
	sort.SliceStable(out, func(i, j int) bool {
		a, aok := out[i].Margin()
		b, bok := out[j].Margin()
		return aok && (!bok || a < b)
	})
	return out
}

// name is the rule with what the figure is of, or with the direction where the rule
// does not say it.
func (c check) name() string {
	if c.Of != "" {
		return c.Rule + " " + c.Of
	}
	if strings.Contains(c.Rule, c.band.Direction) || c.Rule == "gain/radio-eirp" {
		return c.Rule
	}
	return c.Rule + " (" + c.band.Direction + ")"
}

func (c check) value() string {
	if !c.Value.OK {
		return "?"
	}
	out := unit.Fixed(c.Value.V, 2)
	if c.Tolerance > 0 {
		out += " ± " + unit.Fixed(c.Tolerance, 1)
	}
	return out
}

func (c check) limit() string { return orUnknown(c.Limit.V, c.Limit.OK, 2) }

func (c check) margin() string {
	m, ok := c.Margin()
	return orUnknown(m, ok, 2)
}

// binds reports a limit that its figure has a margin to, and that the amplifier does
// not keep by itself.
func (c check) binds() bool {
	_, ok := c.Margin()
	return ok && c.Outcome != "advice"
}

func (c check) outcome() string {
	switch c.Outcome {
	case "fails":
		return "EXCEEDED"
	case "at-worst":
		return "nominal only"
	case "unknown":
		return "not assessed"
	case "advice":
		return "protected"
	}
	return "holds"
}

func orUnknown(v float64, ok bool, decimals int) string {
	if !ok {
		return "?"
	}
	return unit.Fixed(v, decimals)
}

// verdict counts the limits, names the tightest, and says what is left out.
func (b *Budget) verdict() Block {
	all := checks(b.Bands...)
	n := map[string]int{}
	for _, c := range all {
		n[c.Outcome]++
	}
	out := Block{how: fine}
	if n["fails"] > 0 {
		out.how = stop
	}
	if len(all) > 0 {
		out.Text = append(out.Text, verdictWords(n, len(all)))
	}
	for _, c := range all {
		if c.binds() {
			out.Text = append(out.Text, c.sentence())
			break
		}
	}
	for _, notice := range b.Notices() {
		out.Items = append(out.Items, Item{Text: notice + "."})
	}
	return out
}

// sentence names a limit with its figures, as the one that a reader must know of.
func (c check) sentence() string {
	lead := "Tightest"
	if c.Outcome == "fails" {
		lead = "Furthest beyond"
	}
	return fmt.Sprintf("%s: %s in %s of %s, %s %s against %s, margin %s dB.", lead, c.name(), c.band.Band, c.band.Device.ID, c.value(), c.Unit, c.limit(), c.margin())
}

// verdictWords counts outcomes in words.
func verdictWords(n map[string]int, all int) string {
	limits := words(all, "limit", "limits")
	var more []string
	if n["at-worst"] > 0 {
		more = append(more, fmt.Sprintf("%d at nominal figures only", n["at-worst"]))
	}
	if n["advice"] > 0 {
		more = append(more, fmt.Sprintf("%d kept by the amplifier itself", n["advice"]))
	}
	if n["unknown"] > 0 {
		more = append(more, fmt.Sprintf("%d not assessed", n["unknown"]))
	}
	out := fmt.Sprintf("Of %s %d %s", limits, n["holds"], verb(n["holds"], "holds", "hold"))
	switch {
	case n["fails"] > 0:
		out = fmt.Sprintf("Of %s %d %s exceeded", limits, n["fails"], verb(n["fails"], "is", "are"))
		more = append([]string{fmt.Sprintf("%d %s", n["holds"], verb(n["holds"], "holds", "hold"))}, more...)
	case n["unknown"] == all:
		return "No limit could be assessed."
	case len(more) == 0:
		return "All " + limits + " hold."
	}
	return out + ", " + strings.Join(more, ", ") + "."
}

func verb(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}
