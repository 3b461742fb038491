package limits

import (
	"slices"

	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
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
	var open []string
	may := func(selector, row, got string) bool {
		if row != "" && got == "" {
			open = append(open, selector)
		}
		return row == "" || got == "" || row == got
	}
	holds := may("direction", r.Direction.V, q.Direction) &&
		may("class", r.amplifierClass(), q.Class) &&
		may("mobility", r.Mobility.V, q.Mobility) &&
		may("coupling", r.Coupling.V, q.Coupling) &&
		may("source", r.Source.V, q.Source) &&
		may("isolation_control", asWord(r.IsolationControl), asWord(q.IsolationControl))
	if !holds {
		return false, nil
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
func (r *Row) amplifierClass() string {
	if r.Class.V == Radio {
		return ""
	}
	return r.Class.V
}

func orOn(state string) string {
	if state == "" {
		return "on"
	}
	return state
}

// asWord is yes or no, or "" where the plan or the row does not say.
func asWord(b source.Val[bool]) string {
	switch {
	case !b.Set:
		return ""
	case b.V:
		return "yes"
	}
	return "no"
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
