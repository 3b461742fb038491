package limits

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// For is the inputs that follow from the band alone: the middles of its uplink
// and downlink by 3GPP edges.
func For(band string) Inputs {
	b, ok := catalog.LookBand(band)
	if !ok {
		return Inputs{}
	}
	return Inputs{
		UplinkMid:   Figure(float64(b.Uplink.Mid()), !b.Uplink.Empty()),
		DownlinkMid: Figure(float64(b.Downlink.Mid()), !b.Downlink.Empty()),
	}
}

// Open is a row that could not be assessed and what it lacks: selectors that the
// query left open, or inputs of its formula.
type Open struct {
	Row     *Row
	Missing []string
}

// Assessment is what the rows of one question come to.
type Assessment struct {
	Row   *Row        // the row that binds; nil where none could be computed
	Value float64     // its value in the row's unit
	Open  []Open      // rows not assessed
	Left  []unit.Span // the part of the band for which no row answers
}

// Least computes the rows and keeps the least; of equal ones the first. A row that
// may not hold, or that lacks an input, is open. In a question about EIRP the
// value of a row on ERP is given as EIRP.
func Least(q Query, in Inputs, rows ...*Row) Assessment {
	var a Assessment
	for _, r := range rows {
		missing := r.Undecided(q)
		v, lacks := r.Value(in)
		if missing = append(missing, lacks...); len(missing) > 0 {
			a.Open = append(a.Open, Open{r, missing})
			continue
		}
		if r.Kind.V == "erp" && q.Kind == "eirp" {
			v += float64(rf.DipoleGain)
		}
		if a.Row == nil || v < a.Value {
			a.Row, a.Value = r, v
		}
	}
	return a
}

// Assess matches and computes in one go, and looks which part of the band the rows
// leave out.
func (p *Profile) Assess(q Query, in Inputs) Assessment {
	a := Least(q, in, p.Match(q)...)
	a.Left = p.Uncovered(q)
	return a
}

// Uncovered is the part of the band for which no row answers, whatever its figure
// is counted in. A profile that is silent on the question altogether leaves out
// nothing.
func (p *Profile) Uncovered(q Query) []unit.Span {
	span, known := bandSpan(q.Band, q.Direction)
	if !known {
		return nil
	}
	covers := make([]unit.Span, 0, 8)
	for _, r := range p.rows(q.Class) {
		if holds, _ := r.selects(q); holds {
			covers = append(covers, r.Span())
		}
	}
	if len(covers) == 0 {
		return nil
	}
	return span.Minus(covers...)
}

// Exceeded reports whether a figure breaks the row that binds: equal passes, and
// powers have the slack of their printed dBm. Without such a row nothing is
// broken, and nothing is shown either: see Whole.
func (a Assessment) Exceeded(v float64) bool {
	return a.Row != nil && rf.Exceeds(v, a.Value+a.Row.Slack())
}

// Whole reports whether a figure that is not Exceeded is inside every limit the
// question has: there is a row, none is open, and no spectrum is left over.
func (a Assessment) Whole() bool { return a.Row != nil && len(a.Open) == 0 && len(a.Left) == 0 }

// None reports that the profile is silent on the question: it has no row, in this
// band or another. That is neither a pass nor a limit.
func (a Assessment) None() bool { return a.Row == nil && len(a.Open) == 0 && len(a.Left) == 0 }

// Split parts rows that follow from the band alone from those that depend on the
// received level or a coupling loss.
func Split(rows []*Row) (byBand, bySite []*Row) {
	for _, r := range rows {
		if r.BySite() {
			bySite = append(bySite, r)
		} else {
			byBand = append(byBand, r)
		}
	}
	return byBand, bySite
}

// Pers lists what the rows that match a query are counted in, in the order of the
// profile: "" for a composite figure, "channel", "5MHz". Each is a question of its
// own, asked by setting Per.
func (p *Profile) Pers(q Query) []string {
	var out []string
	for _, r := range p.rows(q.Class) {
		q.Per = r.Per.V
		if holds, _ := r.answer(q); holds && !slices.Contains(out, r.Per.V) {
			out = append(out, r.Per.V)
		}
	}
	return out
}
