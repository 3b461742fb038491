package show

import (
	"fmt"
	"sort"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
	"driploop/rules/rf"
)

// BudgetText writes a radio chain for a lead who is about to sign: the tightest
// margin on top, then one block for each band and direction.
func BudgetText(b *rules.Budget, page Page, terms bool) ([]byte, error) {
	t := &budgetText{sheet: &sheet{page: page}, terms: terms}
	t.head(b)
	for _, x := range b.Bands {
		if err := t.band(x); err != nil {
			return nil, err
		}
	}
	if err := t.areas(b.Areas); err != nil {
		return nil, err
	}
	t.para("", faint, "Losses: least is the coldest and best matched, greatest the hottest and worst. EIRP limits meet the least, levels the greatest.")
	return []byte(t.b.String()), nil
}

type budgetText struct {
	*sheet
	terms bool
}

func (t *budgetText) head(b *rules.Budget) {
	p := b.Case.Plan
	title := p.ID
	if p.Job.Title.Set {
		title += " · " + p.Job.Title.V
	}
	t.para("", strong, Clean(title))
	t.para("", faint, Terms("limits %s, %s", or(b.Case.ProfileName(), "none named"), b.Case.Today()))
	if len(b.Bands) == 0 {
		t.para("", plain, "No amplifier and no router works in a planned band.")
		return
	}
	how, text := fine, tightest(b)
	if strings.HasPrefix(text, "Beyond") {
		how = stop
	}
	t.para("", how, Clean(text))
	t.gap()
}

// tightest is the smallest margin of all limits in words.
func tightest(b *rules.Budget) string {
	var best *rules.LimitCheck
	var band *rules.BudgetBand
	open := 0
	for _, x := range b.Bands {
		for i := range x.Limits {
			l := &x.Limits[i]
			m, ok := l.Margin()
			if l.Outcome == "unknown" {
				open++
			}
			if !ok || l.Outcome == "advice" {
				continue // what the amplifier keeps by itself is not the tightest
			}
			if best == nil {
				best, band = l, x
				continue
			}
			if old, _ := best.Margin(); m < old {
				best, band = l, x
			}
		}
	}
	if best == nil {
		return "No limit could be assessed."
	}
	m, _ := best.Margin()
	lead := "Tightest"
	if best.Outcome == "fails" {
		lead = "Beyond a limit"
	}
	out := fmt.Sprintf("%s: %s in %s, %s, %s %s against %s, margin %s dB.", lead, best.Rule, band.Band, band.Direction,
		unit.Fixed(best.Value.V, 2), best.Unit, unit.Fixed(best.Limit.V, 2), unit.Fixed(m, 2))
	if open > 0 {
		out += fmt.Sprintf(" %s not assessed.", words(open, "limit is", "limits are"))
	}
	return out
}

func (t *budgetText) band(x *rules.BudgetBand) error {
	t.para("", strong, Terms("%s %s, %s, %s", x.Band, x.Direction, x.Device.ID, x.MHz))
	t.para("  ", plain, Clean(runsWords(x)))
	for _, l := range x.Lines {
		t.line1(l)
	}
	if x.Worst != nil {
		w := x.Worst.Worst
		t.para("  ", plain, Terms("EIRP at rated output, worst at %s: %s dBm + %s dBi − %s dB = %s dBm from %s", w.MHz,
			unit.Fixed(w.Out.Value(), 1), unit.Fixed(float64(w.Gain), 1), unit.Fixed(float64(w.Line.Loss.Least), 2), unit.Fixed(w.EIRP.Most.Value(), 2), x.Worst.Node.Name()))
	}
	if x.Direction == "downlink" && x.EIRP.OK {
		t.para("  ", plain, Terms("EIRP that runs: %s dBm", unit.Fixed(x.EIRP.V.Value(), 2)))
	}
	for _, ch := range x.Chains {
		if err := t.chain(ch); err != nil {
			return err
		}
	}
	if err := t.limits(x); err != nil {
		return err
	}
	t.gap()
	return nil
}

// runsWords says what gain runs and what binds it.
func runsWords(x *rules.BudgetBand) string {
	var out []string
	if x.Input.OK {
		out = append(out, "in "+unit.Fixed(x.Input.V.Value(), 1)+" dBm")
	}
	if x.Set.OK {
		out = append(out, "set "+unit.Fixed(float64(x.Set.V), 1)+" dB")
	}
	switch {
	case x.Runs.OK && x.Runs.V.On:
		out = append(out, fmt.Sprintf("runs at %s dB, bound by %s", unit.Fixed(float64(x.Runs.V.Gain), 1), x.Runs.V.By))
	case x.Runs.OK:
		out = append(out, fmt.Sprintf("off: %s leaves no gain", x.Runs.V.By))
	case len(x.Runs.Lacks) > 0:
		out = append(out, "gain that runs not assessed: it lacks "+lackList(x.Runs.Lacks))
	}
	if len(out) == 0 {
		return "transmits by itself"
	}
	return strings.Join(out, ", ")
}

func lackList(lacks []rules.Lack) string {
	var out []string
	for _, l := range lacks {
		out = append(out, l.What)
	}
	return strings.Join(out, ", ")
}

func (t *budgetText) line1(l rules.BudgetLine) {
	name := fmt.Sprintf("%s %s", l.Line.Kind, l.Line.Name())
	if !l.Sum.Known() {
		t.para("  ", plain, Terms("%s: not assessed, it lacks %s", name, lackList(l.Sum.Missing)))
		return
	}
	t.para("  ", plain, Terms("%s: %s dB at least, %s dB at most", name, unit.Fixed(float64(l.Sum.Loss.Least), 2), unit.Fixed(float64(l.Sum.Loss.Greatest), 2)))
	if t.terms {
		for _, a := range l.Sum.Terms {
			t.para("    ", faint, Terms("%s  %s", spread(a.Loss), a.What))
		}
	}
}

// spread prints a loss, or its least and greatest where they differ.
func spread(l rf.Loss) string {
	if l.Least == l.Greatest {
		return unit.Fixed(float64(l.Nominal), 3)
	}
	return unit.Fixed(float64(l.Least), 3) + "…" + unit.Fixed(float64(l.Greatest), 3)
}

func (t *budgetText) chain(ch rules.StageChain) error {
	if len(ch.Lacks) > 0 {
		t.para("  ", plain, Terms("%s to %s not assessed: it lacks %s", ch.From, ch.To, lackList(ch.Lacks)))
		return nil
	}
	t.para("  ", plain, Terms("%s to %s, from %s dBm:", ch.From, ch.To, unit.Fixed(ch.Start.Value(), 1)))
	var rows [][]Term
	for _, s := range ch.Stages {
		at := s.At
		if s.Held {
			at += " (held at rated output)"
		}
		rows = append(rows, []Term{Clean(at), Clean(unit.Fixed(float64(s.Gain), 2)), Clean(unit.Fixed(float64(s.Total), 2)),
			Clean(unit.Fixed(float64(s.NF), 2)), Clean(unit.Fixed(s.Level.Value(), 1))})
	}
	text, err := table(4, []column{{"stage", false}, {"gain dB", true}, {"total dB", true}, {"NF dB", true}, {"level dBm", true}}, rows)
	if err != nil {
		return err
	}
	t.b.WriteString(string(text))
	return nil
}

func (t *budgetText) limits(x *rules.BudgetBand) error {
	checks := append([]rules.LimitCheck(nil), x.Limits...)
	sort.SliceStable(checks, func(i, j int) bool {
		a, aok := checks[i].Margin()
		b, bok := checks[j].Margin()
		return aok && (!bok || a < b)
	})
	var rows [][]Term
	for _, l := range checks {
		value, limit, margin := "?", "?", "?"
		if l.Value.OK {
			value = unit.Fixed(l.Value.V, 2)
			if l.Tolerance > 0 {
				value += " ±" + unit.Fixed(l.Tolerance, 1)
			}
		}
		if l.Limit.OK {
			limit = unit.Fixed(l.Limit.V, 2)
		}
		if m, ok := l.Margin(); ok {
			margin = unit.Fixed(m, 2)
		}
		rows = append(rows, []Term{Clean(l.Rule), Clean(value), Clean(limit), Clean(margin), Clean(l.Unit), Clean(outcomeWords(l.Outcome))})
	}
	if len(rows) == 0 {
		return nil
	}
	text, err := table(2, []column{{"limit", false}, {"value", true}, {"limit", true}, {"margin", true}, {"unit", false}, {"", false}}, rows)
	if err != nil {
		return err
	}
	t.b.WriteString(string(text))
	if t.terms {
		for _, l := range checks {
			if l.Formula != "" {
				t.para("    ", faint, Terms("%s: %s; %s", l.Rule, l.Formula, l.Basis))
			}
			if len(l.Limit.Lacks) > 0 {
				t.para("    ", faint, Terms("%s lacks %s", l.Rule, lackList(l.Limit.Lacks)))
			}
		}
	}
	return nil
}

func outcomeWords(o string) string {
	switch o {
	case "fails":
		return "BEYOND"
	case "at-worst":
		return "within tolerance only"
	case "unknown":
		return "not assessed"
	case "advice":
		return "network protection keeps it"
	}
	return "holds"
}

func (t *budgetText) areas(all []*rules.AreaReach) error {
	if len(all) == 0 {
		return nil
	}
	t.line(0, strong, "Areas")
	var rows [][]Term
	for _, r := range all {
		after, before, target, up := "not assessed", "", "", "?"
		if r.RSRP.OK {
			after = unit.Fixed(r.RSRP.V.Value(), 1)
			if r.Doubt > 0 {
				after += " ±" + unit.Fixed(float64(r.Doubt), 0)
			}
		}
		if r.Before.Set {
			before = unit.Fixed(r.Before.V, 0)
		}
		if r.Area.Target.Set {
			target = unit.Fixed(r.Area.Target.V, 0)
		}
		if r.Up.OK {
			up = unit.Fixed(float64(r.Up.V.Level.Minus(r.Up.V.Needed)), 1)
		}
		rows = append(rows, []Term{Clean(r.Area.Name.V), Clean(r.Signal.Band.V), Clean(r.Signal.Operator.V), Clean(before), Clean(after), Clean(target), Clean(up), Clean(r.Ends())})
	}
	text, err := table(2, []column{{"area", false}, {"band", false}, {"operator", false}, {"before", true}, {"RSRP dBm", true}, {"target", true}, {"uplink margin", true}, {"limits", false}}, rows)
	if err != nil {
		return err
	}
	t.b.WriteString(string(text))
	if t.terms {
		for _, r := range all {
			t.para("  ", plain, Terms("%s, %s, %s at %s:", r.Area.Name.V, r.Signal.Band.V, r.Signal.Operator.V, r.MHz))
			if !r.RSRP.OK {
				t.para("    ", faint, Terms("lacks %s", lackList(r.RSRP.Lacks)))
				continue
			}
			t.para("    ", faint, Terms("survey %s%s = %s dBm", unit.Fixed(r.Signal.RSRP.V, 1), reachSum(r.Terms), unit.Fixed(r.RSRP.V.Value(), 2)))
			if r.Up.OK {
				t.para("    ", faint, Terms("uplink from a phone of 23 dBm%s = %s dBm, needed %s dBm", reachSum(r.Up.V.Terms), unit.Fixed(r.Up.V.Level.Value(), 2), unit.Fixed(r.Up.V.Needed.Value(), 1)))
			}
		}
	}
	t.gap()
	return nil
}

func reachSum(terms []rules.ReachTerm) string {
	var b strings.Builder
	for _, a := range terms {
		sign, v := "+", float64(a.DB)
		if v < 0 {
			sign, v = "−", -v
		}
		fmt.Fprintf(&b, " %s %s %s", sign, unit.Fixed(v, 2), a.What)
	}
	return b.String()
}
