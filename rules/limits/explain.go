package limits

import (
	"math"
	"strconv"
	"strings"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Formula is the limit as people write it: "G ≤ −34 − RSSI + MSCL", or with its
// unit where it is a plain figure: "EIRP ≤ 10 dBm per channel".
func (r *Row) Formula() string {
	terms := addTerm("", r.C0.V, "")
	terms = addTerm(terms, r.KF.V, "log10(f/MHz)")
	terms = addTerm(terms, r.KR.V, "RSSI")
	terms = addTerm(terms, r.KM.V, "MSCL")
	terms = addTerm(terms, r.KB.V, "BSCL")
	if r.plain() {
		terms = plain(r.C0.V) + " " + r.Unit()
	}
	return r.kind().Symbol + " ≤ " + terms
}

// plain reports a row that is one figure.
func (r *Row) plain() bool { return r.KF.V == 0 && !r.BySite() }

// addTerm adds k·name, or the constant k, to a sum; nothing where k is 0.
func addTerm(sum string, k float64, name string) string {
	if k == 0 {
		return sum
	}
	term := strings.TrimPrefix(plain(math.Abs(k))+"·"+name, "1·")
	if name == "" {
		term = plain(math.Abs(k))
	}
	switch {
	case sum == "" && k < 0:
		return "−" + term
	case sum == "":
		return term
	case k < 0:
		return sum + " − " + term
	}
	return sum + " + " + term
}

// plain prints a figure with a true minus sign and without needless zeros.
func plain(v float64) string {
	return strings.Replace(strconv.FormatFloat(v, 'f', -1, 64), "-", "−", 1)
}

// Where says on what the row holds, in the words of its selectors: "uplink, fixed,
// 1710–1755 MHz". It is empty for a row that always holds.
func (r *Row) Where() string {
	var out []string
	for _, v := range []source.Val[string]{r.Direction, r.Class, r.Mobility} {
		if v.Set {
			out = append(out, v.V)
		}
	}
	if r.Coupling.Set {
		out = append(out, "phone coupled by "+r.Coupling.V)
	}
	if r.Source.Set {
		out = append(out, "BSCL "+r.Source.V)
	}
	if r.IsolationControl.Set {
		out = append(out, map[bool]string{true: "with isolation control", false: "without isolation control"}[r.IsolationControl.V])
	}
	if state := r.State.Or("on"); state != "on" {
		out = append(out, "state "+state)
	}
	switch {
	case r.FFrom.Set && r.FBelow.Set:
		out = append(out, r.Span().String())
	case r.FFrom.Set:
		out = append(out, "from "+unit.MHz(r.FFrom.V).String())
	case r.FBelow.Set:
		out = append(out, "below "+unit.MHz(r.FBelow.V).String())
	}
	return strings.Join(out, ", ")
}

// Explain is the row in one sentence: where it holds, its formula and unit, the
// clause with its edition, and how sure the figure is.
func (r *Row) Explain() string {
	var b strings.Builder
	if w := r.Where(); w != "" {
		b.WriteString(w + ": ")
	}
	b.WriteString(r.Formula())
	if !r.plain() {
		b.WriteString(", in " + r.Unit())
	}
	if r.KF.V != 0 {
		b.WriteString(", f the middle of the amplifier's own " + strings.TrimSuffix(r.FAt.Or("uplink-mid"), "-mid") + " in the band")
	}
	b.WriteString("; " + Origin(r.Clause.V, r.Edition.V, r.Proof.V))
	if r.Note.Set {
		b.WriteString(" (" + r.Note.V + ")")
	}
	return b.String()
}

// Explain is the duty in one sentence with where it comes from.
func (d *Duty) Explain() string {
	s := d.Says.V
	if s != "" {
		s += "; "
	}
	s += Origin(d.Clause.V, d.Edition.V, d.Proof.V)
	if d.Note.Set {
		s += " (" + d.Note.V + ")"
	}
	return s
}

// Origin is a citation with how sure it is.
func Origin(clause, edition, proof string) string {
	out := clause
	if edition != "" {
		out += " (" + edition + ")"
	}
	return out + ", " + ProofText(proof)
}

// ProofText spells out a proof mark.
func ProofText(proof string) string {
	switch proof {
	case "read":
		return "read"
	case "copy":
		return "read in a copy of the rule elsewhere, not in the clause itself"
	case "memory":
		return "from memory, not compared with the current text"
	}
	return proof
}

// Explain says which spectrum is permitted and by what.
func (s *Spectrum) Explain() string {
	return s.Name.V + ", uplink " + s.Uplink.V.String() + ", downlink " + s.Downlink.V.String() + "; " + s.Duty.Explain()
}

// Explain says how high an antenna may be and by what.
func (h *Height) Explain() string {
	who := "antennas"
	if h.Fixed.V {
		who = "antennas of fixed stations"
	}
	return who + " that transmit on " + h.MHz.V.String() + " stand at most " + h.Most.V.String() + " above ground; " + h.Duty.Explain()
}

// Explain gives the level's formula in each stretch and where it comes from.
func (l *Level) Explain() string {
	var out []string
	for _, s := range l.Segments {
		density := plain(s.A.V)
		switch s.B.V {
		case 0:
		case 1:
			density += "·f/MHz"
		default:
			density += "·(f/MHz)^" + plain(s.B.V)
		}
		out = append(out, s.MHz.V.String()+" "+density)
	}
	return "S in W/m², averaged over " + plain(l.AverageMin.V) + " min: " + strings.Join(out, ", ") + "; " + l.Duty.Explain()
}

// Citation is instrument, section and edition of a code row: "NFPA 70 (NEC)
// 810.21(H), 2020". A practice without an instrument of its own is called one.
func (r *CodeRow) Citation() string {
	if r.Kind.V == "practice" && !r.Section.Set {
		return "practice of the trade"
	}
	out := r.Instrument.V
	if r.Section.Set {
		out += " " + r.Section.V
	}
	if r.Edition.Set {
		out += ", " + r.Edition.V
	}
	return out
}

// Explain is the row in one sentence: what it asks for, its figure, where it comes
// from and how sure that is.
func (r *CodeRow) Explain() string {
	s := r.Says.V
	if f := r.Figure(); f != "" {
		s += ": " + f
	}
	s += "; " + r.Citation()
	if r.Kind.V != "practice" {
		s += ", a " + r.Kind.V
	}
	if r.Proof.V != "common practice" {
		s += ", " + ProofText(r.Proof.V)
	}
	if r.Note.Set {
		s += " (" + r.Note.V + ")"
	}
	return s
}

// Figure is the row's figure as its file writes it, or "" where it has none.
func (r *CodeRow) Figure() string {
	words := strings.ReplaceAll(r.Compare.V, "-", " ")
	switch {
	case r.Length.Set:
		return words + " " + strings.Trim(r.Length.At.Text(), `"`)
	case r.Value.Set:
		return strings.TrimSpace(words + " " + plain(r.Value.V) + " " + r.Unit.V)
	case len(r.Sizes) > 0:
		var out []string
		for _, s := range r.Sizes {
			out = append(out, s.Name+" "+s.Val.V.String())
		}
		return words + " " + strings.Join(out, ", ")
	case r.Allowed.Set:
		var out []string
		for _, w := range r.Allowed.V {
			out = append(out, w.V)
		}
		return "one of " + strings.Join(out, ", ")
	}
	return ""
}
