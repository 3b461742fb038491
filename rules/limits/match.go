package limits

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// Radio is the class of rows for routers and other radios without an amplifier.
const Radio = "radio"

// Query asks which rows hold. An empty answer means that it is not known, except
// for State and Per, where it means normal operation and the composite figure;
// Pers tells which figures a profile has.
type Query struct {
	Kind             string
	Direction        string // uplink, downlink
	Class            string // of the amplifier, or Radio
	Mobility         string // fixed, mobile
	Coupling         string // antenna, cradle, wired
	Source           string // how BSCL was come by
	State            string
	Per              string
	IsolationControl source.Val[bool]
	Band             string // 3GPP name of the amplifier's or radio's band
}

// Match lists the rows that hold for the query or, where the query leaves a
// selector unanswered, may hold; Undecided tells the two apart.
func (p *Profile) Match(q Query) []*Row {
	var out []*Row
	for _, r := range p.rows(q.Class) {
		if holds, _ := r.answer(q); holds {
			out = append(out, r)
		}
	}
	return out
}

// rows is where the rows for a class stand: those for amplifiers, and those of the
// radio services for radios and for amplifiers that are held to them.
func (p *Profile) rows(class string) []*Row {
	switch {
	case class == Radio:
		return p.Radio
	case p.DonorAsRadio.V:
		return slices.Concat(p.Limits, p.Radio)
	}
	return p.Limits
}

// Undecided names the selectors of the row that the query leaves open.
func (r *Row) Undecided(q Query) []string {
	_, open := r.answer(q)
	return open
}

// answer compares the row with the query: false where something rules it out, else
// the names of the selectors that stay open.
func (r *Row) answer(q Query) (bool, []string) {
	holds, open := r.selects(q)
	if !holds || r.Per.V != q.Per {
		return false, nil
	}
	if r.FFrom.Set || r.FBelow.Set {
		span, known := bandSpan(q.Band, q.Direction)
		switch {
		case !known:
			open = append(open, "band")
		case r.Span().Overlap(span).Empty():
			return false, nil
		}
	}
	return true, open
}

// selects is answer without the spectrum and without what the figure is counted in.
func (r *Row) selects(q Query) (bool, []string) {
	if !r.limits(q.Kind) || r.State.Or("on") != orOn(q.State) {
		return false, nil
	}
	if q.Class == Radio && q.Direction == "" {
		q.Direction = "uplink" // the only way a radio transmits
	}
	selectors := []struct {
		name string
		row  source.Val[string]
		got  string
	}{
		{"direction", r.Direction, q.Direction},
		{"class", r.amplifierClass(), q.Class},
		{"mobility", r.Mobility, q.Mobility},
		{"coupling", r.Coupling, q.Coupling},
		{"source", r.Source, q.Source},
		{"isolation_control", asWord(r.IsolationControl), asWord(q.IsolationControl).V},
	}
	var open []string
	for _, s := range selectors {
		switch {
		case !s.row.Set || s.row.V == s.got:
		case s.got == "":
			open = append(open, s.name)
		default:
			return false, nil
		}
	}
	return true, open
}

// limits reports whether the row limits a quantity; a limit on ERP is one on EIRP
// as well.
func (r *Row) limits(kind string) bool {
	return r.Kind.V == kind || r.Kind.V == "erp" && kind == "eirp"
}

// amplifierClass is the class selector, without the one of radio rows: which list
// of rows is asked has been decided before.
func (r *Row) amplifierClass() source.Val[string] {
	if r.Class.V == Radio {
		return source.Val[string]{}
	}
	return r.Class
}

func orOn(state string) string {
	if state == "" {
		return "on"
	}
	return state
}

func asWord(b source.Val[bool]) source.Val[string] {
	w := source.Val[string]{V: "no", Set: b.Set}
	if b.V {
		w.V = "yes"
	}
	if !b.Set {
		w.V = ""
	}
	return w
}

// bandSpan is the band's stretch in one direction, the uplink where none is said.
func bandSpan(band, direction string) (unit.Span, bool) {
	b, ok := catalog.LookBand(band)
	if !ok {
		return unit.Span{}, false
	}
	if direction == "downlink" {
		return b.Downlink, !b.Downlink.Empty()
	}
	return b.Uplink, !b.Uplink.Empty()
}

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
	a.Left = p.uncovered(q)
	return a
}

// uncovered is the part of the band for which no row answers, whatever its figure
// is counted in. A profile that is silent on the question altogether leaves out
// nothing.
func (p *Profile) uncovered(q Query) []unit.Span {
	span, known := bandSpan(q.Band, q.Direction)
	if !known {
		return nil
	}
	var covers []unit.Span
	for _, r := range p.rows(q.Class) {
		if holds, _ := r.selects(q); holds {
			covers = append(covers, r.Span())
		}
	}
	if covers == nil {
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
