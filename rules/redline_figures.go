package rules

import (
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
