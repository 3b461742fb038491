package show

import (
	"fmt"
	"math"
	"strings"

	"driploop/catalog/unit"
	"driploop/rules"
)

// mostFigures is how many figures of a job stand in the open.
const mostFigures = 6

// figures lists what moved, each figure once with its worst band and how far it moved
// in the others. What got better is folded away.
func (w *redWords) figures(b *redBlock, j *rules.JobChange) {
	type key struct{ name, on, way string }
	at := map[key][]rules.MovedFigure{}
	var order []key
	for _, m := range j.Figures {
		k := key{m.Name, m.On, m.Way}
		if at[k] == nil {
			order = append(order, k)
		}
		at[k] = append(at[k], m)
	}
	shown := 0
	for _, k := range order {
		if k.name == "EIRP" && at[key{"gain/" + k.way + "-eirp", k.on, k.way}] != nil {
			continue // the limit's own line says it
		}
		worst := at[k][0]
		text := figureLine(worst) + otherBands(at[k][1:])
		if b.worse = b.worse || worst.Beyond || worst.Was.OK && !worst.Now.OK; shown < mostFigures && !worst.Better() {
			b.add("figure", "%s", text)
			shown++
		} else {
			b.hide("figure", "%s", text)
		}
	}
	if len(order) == 0 && j.Largest != nil {
		d, _ := j.Largest.Difference()
		b.add("figure", "No figure moves by more than it may be off (largest: %s, %s %s, of ±%s).", figureName(*j.Largest), signed(d, 2), j.Largest.Unit,
			unit.Fixed(math.Max(j.Largest.Tolerance, 0.05), 2))
	}
}

// otherBands says how far a figure moved in its other bands.
func otherBands(list []rules.MovedFigure) string {
	var out []string
	for _, m := range list {
		d, both := m.Difference()
		switch {
		case both && m.Beyond:
			out = append(out, m.Band+" (past it by "+unit.Fixed(-m.MarginNow.V, 2)+")")
		case both && d == 0 && m.MarginNow.OK:
			out = append(out, m.Band+" (margin "+unit.Fixed(m.MarginNow.V, 2)+")")
		case both:
			out = append(out, m.Band+" "+signed(d, 2))
		case m.Now.OK:
			out = append(out, m.Band+" now known")
		default:
			out = append(out, m.Band+" not known any more")
		}
	}
	if len(out) == 0 {
		return ""
	}
	return " Also " + strings.Join(out, ", ") + "."
}

func figureName(m rules.MovedFigure) string {
	out := m.Name + ", " + clip(m.On, mostName)
	if m.Band != "" {
		out += ", " + m.Band
	}
	if m.Way != "" {
		out += " " + m.Way
	}
	return out
}

func figureLine(m rules.MovedFigure) string {
	var b strings.Builder
	b.WriteString(figureName(m) + ": ")
	d, both := m.Difference()
	switch {
	case both && d == 0:
		fmt.Fprintf(&b, "stays at %s %s", unit.Fixed(m.Now.V, 2), m.Unit)
	case both:
		fmt.Fprintf(&b, "%s becomes %s %s (%s)", unit.Fixed(m.Was.V, 2), unit.Fixed(m.Now.V, 2), m.Unit, signed(d, 2))
	case m.Now.OK:
		fmt.Fprintf(&b, "%s %s, not known before", unit.Fixed(m.Now.V, 2), m.Unit)
	case m.Was.OK:
		fmt.Fprintf(&b, "was %s %s, not known any more", unit.Fixed(m.Was.V, 2), m.Unit)
	}
	if m.LimitNow.OK {
		if m.LimitWas.OK && math.Abs(m.LimitWas.V-m.LimitNow.V) > 0.005 {
			fmt.Fprintf(&b, "; limit %s, was %s", unit.Fixed(m.LimitNow.V, 2), unit.Fixed(m.LimitWas.V, 2))
		} else {
			fmt.Fprintf(&b, "; limit %s", unit.Fixed(m.LimitNow.V, 2))
		}
	} else if m.LimitWas.OK {
		fmt.Fprintf(&b, "; limit was %s, none is known now", unit.Fixed(m.LimitWas.V, 2))
	}
	if m.MarginNow.OK {
		switch {
		case m.Beyond:
			fmt.Fprintf(&b, ", past it by %s", unit.Fixed(-m.MarginNow.V, 2))
		case m.Eaten:
			fmt.Fprintf(&b, ", more than half of the margin is eaten: %s left of %s", unit.Fixed(m.MarginNow.V, 2), unit.Fixed(m.MarginWas.V, 2))
		case m.Back:
			fmt.Fprintf(&b, ", back inside by %s", unit.Fixed(m.MarginNow.V, 2))
		default:
			fmt.Fprintf(&b, ", margin %s", unit.Fixed(m.MarginNow.V, 2))
		}
	}
	if m.Tolerance > 0 {
		fmt.Fprintf(&b, ", ±%s", unit.Fixed(m.Tolerance, 2))
	}
	if m.Charge != rules.Uncharged {
		fmt.Fprintf(&b, "; by %s", m.Charge)
		var split []string
		for c := rules.ToRulers; c <= rules.ToWork; c++ {
			if v := m.By[c]; v != 0 {
				split = append(split, c.String()+" "+signed(v, 2))
			}
		}
		if len(split) > 1 {
			b.WriteString(" (" + strings.Join(split, ", ") + ")")
		}
	}
	return b.String() + "."
}

func signed(v float64, decimals int) string {
	s := unit.Fixed(v, decimals)
	if v > 0 {
		return "+" + s
	}
	return s
}
