package show

import (
	"strings"

	"driploop/catalog"
	"driploop/catalog/source"
)

// partFacts are the lines about a part that matter when one chooses it: its ports,
// what it covers and can stand, and whether it can still be had.
func partFacts(p *catalog.Part) []string {
	var out []string
	add := func(parts ...string) {
		var kept []string
		for _, s := range parts {
			if s != "" {
				kept = append(kept, s)
			}
		}
		if len(kept) > 0 {
			out = append(out, strings.Join(kept, ", "))
		}
	}
	add(portWords(p))
	if p.Antenna != nil {
		add(rangeWords(p.Antenna), fact("fixing ", p.Antenna.Fixing))
	}
	add(lineFacts(p)...)
	add(radioFacts(p)...)
	add(gearFacts(p)...)
	if p.Rated.Set {
		add("rated " + strings.Join(plainWords(p.Rated.V), ", "))
	}
	if s := p.Status.Or("active"); s != "active" {
		add(s, instead(p))
	}
	return out
}

// fact is a word with what it is said of, or "" where it was not given.
func fact(before string, v source.Val[string]) string {
	if !v.Set {
		return ""
	}
	return before + v.V
}

// measure is a figure with its unit, or "".
func measure(before string, v source.Val[float64], unit string) string {
	if !v.Set {
		return ""
	}
	return before + plainNumber(v.V) + unit
}

func yes(v source.Val[bool], what string) string {
	if !v.V {
		return ""
	}
	return what
}

func instead(p *catalog.Part) string {
	if len(p.Instead.V) == 0 {
		return ""
	}
	return "instead " + strings.Join(plainWords(p.Instead.V), ", ")
}

// portWords lists the ports; neighbours with one connector are named together:
// "in, out1, out2 N female".
func portWords(p *catalog.Part) string {
	var out []string
	var names []string
	for i := range p.Ports {
		names = append(names, p.Ports[i].Name)
		what := portWhat(&p.Ports[i])
		if i+1 < len(p.Ports) && portWhat(&p.Ports[i+1]) == what {
			continue
		}
		out = append(out, strings.TrimSpace(strings.Join(names, ", ")+" "+what))
		names = nil
	}
	return strings.Join(out, "; ")
}

// portWhat is what goes on a port: its connector, the impedance where that is not
// the usual one, its use where that is not cellular nor its name.
func portWhat(q *catalog.Port) string {
	what := q.Connector.V.String()
	if q.Impedance.Set && q.Impedance.V != 50 {
		what += measure(" ", q.Impedance, " ohm")
	}
	if use := q.Use.Or("cellular"); use != "cellular" && use != q.Name {
		what += " (" + use + ")"
	}
	return strings.TrimSpace(what)
}

func rangeWords(a *catalog.Antenna) string {
	var out []string
	for _, r := range a.Ranges {
		out = append(out, r.MHz.V.String()+" "+plainNumber(r.Gain.V)+" dBi")
	}
	return strings.Join(out, ", ")
}

// lineFacts are those of cables, connectors, jumpers, passives and arrestors.
func lineFacts(p *catalog.Part) []string {
	switch {
	case p.Cable != nil:
		c := p.Cable
		bend := ""
		if c.Bend.Set {
			bend = "bends to " + plainNumber(float64(c.Bend.V)) + " mm"
		}
		return []string{measure("", c.Impedance, " ohm"), measure("to ", c.MaxMHz, " MHz"), measure("", c.ODmm, " mm across"), bend, fact("", c.Fire)}
	case p.Connector != nil:
		return []string{p.Connector.Face.V.String(), measure("", p.Connector.Impedance, " ohm"), "on " + strings.Join(plainWords(p.Connector.Fits.V), ", ")}
	case p.Jumper != nil:
		j := p.Jumper
		return []string{j.Length.V.String(), j.Ends.V[0].String() + " to " + j.Ends.V[1].String(), fact("of ", j.Cable)}
	case p.Passive != nil:
		return []string{pathWords(p), dcWords(p.Passive.DC), measure("to ", p.Passive.MaxW, " W")}
	case p.Arrestor != nil:
		a := p.Arrestor
		return []string{fact("", a.Principle), pathWords(p), dcWords(a.DC), yes(a.Bulkhead, "bulkhead")}
	}
	return nil
}

func dcWords(v source.Val[string]) string {
	if !v.Set {
		return ""
	}
	return map[string]string{"pass": "passes", "block": "blocks", "short": "shorts"}[v.V] + " direct current"
}

// pathWords says over which spectrum a part passes, from the lowest end of its
// rows to the highest.
func pathWords(p *catalog.Part) string {
	var lo, hi float64
	for i, w := range p.Paths {
		if !w.MHz.Set {
			return ""
		}
		from, to := float64(w.MHz.V.Lo), float64(w.MHz.V.Hi)
		if i == 0 {
			lo, hi = from, to
		}
		lo, hi = min(lo, from), max(hi, to)
	}
	if hi == 0 {
		return ""
	}
	return plainNumber(lo) + "–" + plainNumber(hi) + " MHz"
}

// radioFacts are those of amplifiers and routers.
func radioFacts(p *catalog.Part) []string {
	switch {
	case p.Amplifier != nil:
		a := p.Amplifier
		var bands []string
		for _, b := range a.Bands {
			text := b.Band.V
			if b.Uplink != nil && b.Uplink.GainDB.Set {
				text += measure(" ", b.Uplink.GainDB, " dB")
			}
			bands = append(bands, text)
		}
		return []string{fact("", a.Class), fact("", a.Mobility), strings.Join(bands, ", "), yes(a.NetworkProtection, "network protection")}
	case p.Router != nil:
		r := p.Router
		return []string{strings.Join(plainWords(r.Bands.V), ", "), measure("", r.TxDBm, " dBm")}
	}
	return nil
}

// gearFacts are those of power, data, grounding, mounts and consumables.
func gearFacts(p *catalog.Part) []string {
	switch {
	case p.Supply != nil:
		return []string{measure("", p.Supply.Volts, " V"), measure("", p.Supply.Amps, " A"), fact("PoE ", p.Supply.PoE)}
	case p.Data != nil:
		d := p.Data
		return []string{fact("category ", d.Category), yes(d.Screened, "screened"), fact("", d.Conductor), d.Size.V.String(), fact("", d.Fire), fact("passes PoE ", d.PoE)}
	case p.Wire != nil:
		w := p.Wire
		cores := ""
		if w.Cores.Set {
			cores = words(w.Cores.V, "core", "cores")
		}
		return []string{w.Size.V.String(), cores, measure("", w.Amps, " A")}
	case p.Bond != nil:
		return []string{fact("", p.Bond.Material), p.Bond.Size.V.String(), yes(p.Bond.Insulated, "insulated")}
	case p.Mount != nil:
		return mountFacts(p.Mount)
	case p.Consumable != nil:
		return []string{"one serves " + holdsWords(p.Consumable)}
	}
	return nil
}

func mountFacts(m *catalog.Mount) []string {
	tube, length := "", ""
	if m.MastMM.Set {
		tube = "tube " + plainNumber(m.MastMM.V[0]) + " mm"
		if m.MastMM.V[1] != m.MastMM.V[0] {
			tube = "takes tubes of " + plainNumber(m.MastMM.V[0]) + "–" + plainNumber(m.MastMM.V[1]) + " mm"
		}
	}
	if m.Length.Set {
		length = m.Length.V.String()
	}
	return []string{tube, measure("wall ", m.WallMM, " mm"), length}
}

func holdsWords(c *catalog.Consumable) string {
	per := map[string]string{"joint": "joint", "metre": "metre", "entry": "entry"}[c.Per.V]
	many := map[string]string{"joint": "joints", "metre": "metres", "entry": "entries"}[c.Per.V]
	h := c.Holds.V
	switch {
	case h.Length > 0:
		return h.Length.String()
	case h.Uses > 1:
		return plainNumber(h.Uses) + " " + many
	}
	return "1 " + per
}
