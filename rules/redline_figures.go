package rules

import (
	"cmp"
	"math"
	"slices"

	"driploop/bom"
)

// planFigure is one figure of a plan that a reviewer would want to know when it
// moves.
type planFigure struct {
	figureKey
	unit  string
	value Known[float64]
	limit Known[float64] // what it is held against, if anything
	worse int            // +1: greater is worse; −1: smaller is worse; 0: neither
	off   float64        // how far the value may be off
}

// figureKey is what makes a figure the same one in two states of a plan.
type figureKey struct {
	Name string // "feed loss", "gain that runs", "gain/uplink-eirp"
	On   string // "donor.rf to amp.donor", "amp", "counter"
	Band string
	Way  string // uplink, downlink, or ""
}

// margin is how far the value lies inside its limit, negative beyond it.
func (f *planFigure) margin() (float64, bool) {
	if !f.limit.OK || !f.value.OK || f.worse == 0 {
		return 0, false
	}
	return float64(f.worse) * (f.limit.V - f.value.V), true
}

// measure is what moves are judged by: the margin where there is one, else the value.
func (f *planFigure) measure() (float64, bool) {
	if m, ok := f.margin(); ok {
		return m, true
	}
	return f.value.V, f.value.OK
}

// figures lists what the plan comes to: losses, gains, levels, margins, loads.
func (c *Case) planFigures() []planFigure {
	var out []planFigure
	out = append(out, c.lossFigures()...)
	out = append(out, c.gainFigures()...)
	out = append(out, c.areaFigures()...)
	out = append(out, c.exposureFigures()...)
	return append(out, c.windFigures()...)
}

func (c *Case) lossFigures() []planFigure {
	var out []planFigure
	for _, k := range []struct {
		kind  bom.LineKind
		limit float64
		terms []TermKind
	}{{bom.Feed, c.House().FeedLossDB.Or(6), nil}, {bom.Leg, c.House().LegLossDB.Or(8), []TermKind{OfCable, OfPair, OfSteps}}} {
		for _, l := range c.Lines().Of(k.kind) {
			for _, b := range c.Bands() {
				if !carries(l, b) {
					continue
				}
				sum, _ := c.worstLoss(l, b, k.terms)
				f := planFigure{figureKey: figureKey{k.kind.String() + " loss", l.From.Name() + " to " + l.To.Name(), b.Name, ""}, unit: "dB",
					limit: known(k.limit), worse: +1, off: float64(sum.Sum(OfCable).Nominal) * c.House().CableTolerance.Or(4) / 100}
				if sum.Known() {
					f.value = known(float64(sum.Loss.Greatest))
				}
				out = append(out, f)
			}
		}
	}
	return out
}

func (c *Case) gainFigures() []planFigure {
	var out []planFigure
	for _, b := range c.Budget().Bands {
		key := func(name string) figureKey { return figureKey{name, b.Device.ID, b.Band, b.Direction} }
		if b.Device.Part.Amplifier != nil {
			f := planFigure{figureKey: key("gain that runs"), unit: "dB"}
			if b.Runs.OK {
				f.value = known(float64(b.Runs.V.Gain))
			}
			out = append(out, f)
		}
		f := planFigure{figureKey: key("EIRP"), unit: "dBm", value: Known[float64]{V: b.EIRP.V.Value(), OK: b.EIRP.OK}}
		if b.Worst != nil {
			f.off = c.eirpTolerance(b.Worst)
		}
		out = append(out, f)
		for _, l := range b.Limits {
			name := l.Rule
			if l.Of != "" {
				name += " " + l.Of
			}
			out = append(out, planFigure{figureKey: key(name), unit: l.Unit, value: l.Value, limit: l.Limit, worse: +1, off: l.Tolerance})
		}
	}
	for _, x := range c.Chain().Bands {
		if x.coupling() != "antenna" && x.Apart.Reading == nil {
			continue
		}
		f := planFigure{figureKey: figureKey{"isolation", x.Amp.ID, x.Band.Name, ""}, unit: "dB", worse: -1, off: float64(x.Apart.doubt()),
			value: Known[float64]{V: float64(x.Apart.V), OK: x.Apart.OK}}
		if d, _ := x.greatestSet(); d != nil {
			f.limit = known(float64(d.Set.V + c.isolationMargin()))
		}
		out = append(out, f)
	}
	return out
}

func (c *Case) areaFigures() []planFigure {
	var out []planFigure
	for _, a := range c.Reach() {
		on := a.Area.Name.V + ", " + a.Signal.Operator.V
		target := Known[float64]{V: a.Area.Target.V, OK: a.Area.Target.Set}
		out = append(out, planFigure{figureKey: figureKey{"level in the area", on, a.Signal.Band.V, "downlink"}, unit: "dBm", worse: -1, off: float64(a.Doubt),
			value: Known[float64]{V: a.RSRP.V.Value(), OK: a.RSRP.OK}, limit: target})
		up := planFigure{figureKey: figureKey{"phone at the site", on, a.Signal.Band.V, "uplink"}, unit: "dBm", worse: -1}
		if a.Up.OK {
			up.value, up.limit, up.off = known(a.Up.V.Level.Value()), known(a.Up.V.Needed.Value()), float64(a.Up.V.Doubt)
		}
		out = append(out, up)
	}
	return out
}

func (c *Case) exposureFigures() []planFigure {
	var out []planFigure
	level, lacks := c.referenceLevel()
	for _, e := range c.emitters() {
		f := planFigure{figureKey: figureKey{"power density", e.device.ID, "", ""}, unit: "% of the reference level", worse: +1, limit: known(100.0), off: 0.5}
		missing := slices.Concat(lacks, needPeople(e.device), needSize(e.device), e.lacks)
		if len(missing) == 0 {
			s := e.shares(level)
			f.value = Known[float64]{V: s.total, OK: len(s.lacks) == 0}
		}
		out = append(out, f)
	}
	return out
}

func (c *Case) windFigures() []planFigure {
	if c.Vehicle() || len(c.windLacks()) > 0 {
		return nil
	}
	var out []planFigure
	for _, m := range c.Graph.Devices {
		if m.Kind() != "mount" || !m.Point.Set || !c.inTheWind(m) || !c.ours(m) || m.Place == nil || !m.Place.Outdoors() || c.carriesUnresolved(m) {
			continue
		}
		f := planFigure{figureKey: figureKey{"wind moment", m.ID, "", ""}, unit: "N·m", worse: +1}
		if w, lacks := c.windAt(m.Point.V.Up + c.topOf(m)); len(lacks) == 0 {
			l := c.loadOn(m, w)
			moment := l.moment(0)
			f.value = Known[float64]{V: moment.most, OK: !moment.open() && len(l.lacks) == 0}
			if row := c.codeRow("mast-moment"); row != nil && row.Value.Set && tubeOf(m) != noTube {
				f.limit = known(row.Value.V)
			}
			f.off = moment.most / 100
		}
		out = append(out, f)
	}
	return out
}

// MovedFigure is a figure that moved by more than it may be off, or by less and ate
// half of its margin, or that came to be known or unknown.
type MovedFigure struct {
	Name, On, Band, Way  string
	Unit                 string
	Was, Now             Known[float64]
	LimitWas, LimitNow   Known[float64]
	MarginWas, MarginNow Known[float64]
	Tolerance            float64
	By                   [4]float64 // by charge: how far the margin or the value moved
	Charge               Charge
	Eaten                bool // inside still, with less than half the margin that it had
	Beyond               bool // past its limit now, and not before
	Back                 bool // inside its limit now, and not before
}

// Difference is how far the value moved.
func (m *MovedFigure) Difference() (float64, bool) { return m.Now.V - m.Was.V, m.Now.OK && m.Was.OK }

// Better reports a figure whose margin grew and that was inside its limit before.
func (m *MovedFigure) Better() bool {
	return m.MarginWas.OK && m.MarginNow.OK && m.MarginWas.V >= 0 && m.MarginNow.V > m.MarginWas.V
}

// leastMove is what counts as a move where a figure has no tolerance of its own.
const leastMove = 0.05

// movedFigures compares the figures of a plan step by step. small is the largest of
// the moves that stay inside their tolerance, or nil.
func movedFigures(at [4][]planFigure) (out []MovedFigure, small *MovedFigure) {
	var index [4]map[figureKey]*planFigure
	var keys []figureKey
	for s, list := range at {
		index[s] = map[figureKey]*planFigure{}
		for i := range list {
			k := list[i].figureKey
			if index[s][k] == nil {
				index[s][k] = &list[i]
			}
		}
	}
	for _, s := range []int{3, 0} {
		for i := range at[s] {
			if k := at[s][i].figureKey; s == 3 || index[3][k] == nil {
				keys = append(keys, k)
			}
		}
	}
	seen := map[figureKey]bool{}
	for _, k := range keys {
		if seen[k] {
			continue
		}
		seen[k] = true
		m, counts := moveOf(k, index)
		switch {
		case m == nil:
		case counts:
			out = append(out, *m)
		case small == nil || m.relative() > small.relative():
			small = m
		}
	}
	slices.SortStableFunc(out, func(a, b MovedFigure) int {
		if a.rank() == b.rank() && a.MarginNow.OK && b.MarginNow.OK && (a.Beyond || a.Eaten) {
			return cmp.Compare(a.MarginNow.V, b.MarginNow.V) // what is left counts, not how far it moved
		}
		return cmp.Or(cmp.Compare(b.rank(), a.rank()), cmp.Compare(b.relative(), a.relative()))
	})
	return out, small
}

// rank puts what crossed a limit first, then what is not known any more, then what
// lost its margin.
func (m *MovedFigure) rank() int {
	switch {
	case m.Beyond:
		return 5
	case m.Was.OK && !m.Now.OK:
		return 4
	case m.Eaten:
		return 3
	case m.Back:
		return 2
	}
	return 1
}

func (m *MovedFigure) relative() float64 {
	d, _ := m.Difference()
	if m.MarginWas.OK && m.MarginNow.OK && math.Abs(m.MarginNow.V-m.MarginWas.V) > math.Abs(d) {
		d = m.MarginNow.V - m.MarginWas.V
	}
	return math.Abs(d) / max(m.Tolerance, leastMove)
}

// moveOf is how a figure moved, nil where it did not at all, and whether that counts.
func moveOf(k figureKey, index [4]map[figureKey]*planFigure) (*MovedFigure, bool) {
	was, now := index[0][k], index[3][k]
	if was == nil || now == nil {
		return appeared(k, was, now)
	}
	m := &MovedFigure{Name: k.Name, On: k.On, Band: k.Band, Way: k.Way, Unit: cmp.Or(now.unit, was.unit), Was: was.value, Now: now.value,
		LimitWas: was.limit, LimitNow: now.limit, Tolerance: max(was.off, now.off)}
	m.MarginWas.V, m.MarginWas.OK = was.margin()
	m.MarginNow.V, m.MarginNow.OK = now.margin()
	m.charge(k, index)
	d, both := m.Difference()
	limit := m.LimitWas.OK != m.LimitNow.OK || m.LimitWas.OK && math.Abs(m.LimitNow.V-m.LimitWas.V) > 0.005
	if both && d == 0 && !limit || !both && was.value.OK == now.value.OK && !limit {
		return nil, false
	}
	limit = limit && (m.By[ToRulers] != 0 || m.LimitWas.OK != m.LimitNow.OK) // a limit that follows the site shows in the margin
	if m.MarginWas.OK && m.MarginNow.OK {
		m.Beyond = m.MarginWas.V >= 0 && m.MarginNow.V < -1e-9
		m.Back = m.MarginWas.V < -1e-9 && m.MarginNow.V >= 0
		m.Eaten = m.MarginWas.V > 0 && m.MarginNow.V >= 0 && m.MarginNow.V < m.MarginWas.V/2 && m.MarginWas.V-m.MarginNow.V > leastMove
	}
	counts := !both || math.Abs(d) > max(m.Tolerance, leastMove) || limit || m.Beyond || m.Back || m.Eaten
	return m, counts
}

// appeared is a figure that only one of the two states has.
func appeared(k figureKey, was, now *planFigure) (*MovedFigure, bool) {
	f, m := now, &MovedFigure{Name: k.Name, On: k.On, Band: k.Band, Way: k.Way, Charge: ToWork}
	if now == nil {
		f = was
		m.Was, m.LimitWas = was.value, was.limit
		m.MarginWas.V, m.MarginWas.OK = was.margin()
	} else {
		m.Now, m.LimitNow = now.value, now.limit
		m.MarginNow.V, m.MarginNow.OK = now.margin()
	}
	m.Unit, m.Tolerance = f.unit, f.off
	return m, f.value.OK
}

// charge says which step moved the figure most.
func (m *MovedFigure) charge(k figureKey, index [4]map[figureKey]*planFigure) {
	most := -1.0
	for s := 1; s < 4; s++ {
		a, b := index[s-1][k], index[s][k]
		var moved float64
		switch {
		case a == nil || b == nil:
			if a != b {
				moved = math.MaxFloat64
			}
		default:
			x, okX := a.measure()
			y, okY := b.measure()
			switch {
			case okX && okY:
				m.By[s] = Round(y - x)
				moved = math.Abs(y - x)
			case okX != okY:
				moved = math.MaxFloat64
			}
		}
		if moved > 1e-9 && moved >= most {
			most, m.Charge = moved, Charge(s)
		}
	}
}
