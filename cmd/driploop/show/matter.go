package show

import (
	"math"
	"sort"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules"
)

// matter is what a reader takes in as one: what a rule has to say of one thing over
// several bands, with its worst band in full; or all that is not assessed of a
// thing for one and the same lack.
type matter struct {
	worst  *rules.Finding
	others []*rules.Finding
}

// matters groups findings that differ in their band only, or lack the same, worst
// first.
func matters(all []*rules.Finding) []matter {
	type key struct {
		rule, on string
		at       source.Place
		outcome  rules.Outcome
		weight   rules.Weight
		waived   bool
	}
	index := map[key]int{}
	var out []matter
	for _, f := range all {
		k := key{f.Rule.Name, f.On, f.At, f.Outcome, f.Weight, f.Waived != nil}
		if f.Lacks != "" {
			k = key{"", f.On + f.Lacks, source.Place{}, f.Outcome, f.Weight, f.Waived != nil}
		}
		i, found := index[k]
		switch {
		case found && f.Lacks != "":
			out[i].others = append(out[i].others, f)
		case !found || f.Band == "" || out[i].worst.Band == "":
			index[k] = len(out)
			out = append(out, matter{worst: f})
		case excess(f) > excess(out[i].worst):
			out[i].others = append(out[i].others, out[i].worst)
			out[i].worst = f
		default:
			out[i].others = append(out[i].others, f)
		}
	}
	sort.SliceStable(out, func(i, j int) bool { return rank(out[i].worst) > rank(out[j].worst) })
	return out
}

// excess is how far a finding's figure lies from its limit.
func excess(f *rules.Finding) float64 {
	if len(f.Figures) < 2 {
		return 0
	}
	return math.Abs(f.Figures[0].Value - f.Figures[1].Value)
}

// also names the other bands with their figures: "Also in B2 (6.04 dB)."
func (m matter) also() string {
	if len(m.others) == 0 {
		return ""
	}
	if m.worst.Lacks != "" {
		var more []string
		for _, f := range m.others {
			more = append(more, f.Of+" ("+f.Rule.Name+")")
		}
		return "Nor is, for the same lack: " + strings.Join(more, "; ") + "."
	}
	var bands []string
	for _, f := range m.others {
		text := f.Band
		if len(f.Figures) > 0 {
			text += " (" + figureWords(f.Figures[0]) + ")"
		}
		bands = append(bands, text)
	}
	return "Also in " + strings.Join(bands, ", ") + "."
}

// figureWords prints a figure with the unit that its name ends in.
func figureWords(f rules.Figure) string {
	for suffix, name := range map[string]string{"_db": " dB", "_dbm": " dBm", "_dbi": " dBi", "_m": " m", "_mm2": " mm²", "_v": " V", "_w": " W"} {
		if strings.HasSuffix(f.Name, suffix) {
			return unit.Fixed(f.Value, 2) + name
		}
	}
	return unit.Fixed(f.Value, 2)
}
