package show

import (
	"slices"
	"strconv"

	"driploop/catalog/unit"
	"driploop/rules"
)

// CSV writes one row for each figure, with its unit; a figure that is not known has
// an empty value, and the last column says what it lacks. Rows of the kind about
// come first: what the figures were made from.
func (b *Budget) CSV() ([]byte, error) {
	s := &figureSheet{}
	c := b.Case
	from := c.Firm.Origin()
	for _, a := range [][2]string{{"plan", c.Plan.File.Path}, {"job", c.Plan.ID}, {"stage", c.Stage()}, {"revision", from.At}, {"limits_from", from.LimitsFrom}, {"stock_from", from.StockFrom},
		{"today", c.Today().String()}, {"profile", c.ProfileName()}} {
		s.rows = append(s.rows, csvFigure{kind: "about", name: a[0], says: a[1]})
	}
	for _, o := range c.Firm.Overrides() {
		s.rows = append(s.rows, csvFigure{kind: "about", name: "override", says: o})
	}
	for _, n := range slices.Concat(from.Differs, b.Notices()) {
		s.rows = append(s.rows, csvFigure{kind: "about", name: "notice", says: n})
	}
	for _, x := range b.Bands {
		s.band(b, x)
	}
	for _, r := range b.Areas {
		s.area(b, r)
	}
	return s.csv()
}

// figureSheet collects rows; at is the band that they are about.
type figureSheet struct {
	rows []csvFigure
	at   csvFigure
}

// csvFigure is one row. of is the line, chain or area that the figure belongs to.
type csvFigure struct {
	kind, band, direction, device string
	mhz                           unit.MHz
	of, name                      string
	value                         *float64
	unit                          string
	limit, margin                 *float64
	tolerance                     float64
	outcome, says                 string
}

var figureColumns = []Cell{"kind", "band", "direction", "device", "mhz", "of", "name", "value", "unit", "limit", "margin", "tolerance", "outcome", "says"}

func (s *figureSheet) csv() ([]byte, error) {
	rows := [][]Cell{figureColumns}
	for _, f := range s.rows {
		mhz, tolerance := Cell(""), Cell("")
		if f.mhz > 0 {
			mhz = number3(float64(f.mhz))
		}
		if f.tolerance > 0 {
			tolerance = number3(f.tolerance)
		}
		rows = append(rows, []Cell{Cell(f.kind), CellOf(f.band), Cell(f.direction), CellOf(f.device), mhz, CellOf(f.of), CellOf(f.name),
			numberOr(f.value), Cell(f.unit), numberOr(f.limit), numberOr(f.margin), tolerance, Cell(f.outcome), CellOf(f.says)})
	}
	return csvOf(rows)
}

// number3 is a figure of our own as programs read it; the decimals are those of all
// forms.
func number3(v float64) Cell { return Cell(strconv.FormatFloat(rules.Round(v), 'f', -1, 64)) }

func numberOr(v *float64) Cell {
	if v == nil {
		return ""
	}
	return number3(*v)
}

// add writes a figure of the band at hand.
func (s *figureSheet) add(kind, of, name, unit string, value *float64, lacks ...rules.Lack) {
	f := s.at
	f.kind, f.of, f.name, f.unit, f.value, f.says = kind, of, name, unit, value, lackList(lacks)
	s.rows = append(s.rows, f)
}

func (s *figureSheet) band(b *Budget, x *rules.BudgetBand) {
	s.at = csvFigure{band: x.Band, direction: x.Direction, device: x.Device.ID, mhz: x.MHz}
	s.gains(x)
	for _, l := range x.Lines {
		s.line(b, l)
	}
	for _, ch := range x.Chains {
		s.chain(ch)
	}
	for _, c := range checks(x) {
		s.limit(c)
	}
}

// gains are the figures of an amplifier as a whole, and what is radiated.
func (s *figureSheet) gains(x *rules.BudgetBand) {
	if x.Direction == "downlink" {
		s.add("gain", "", "input", "dBm", figure(x.Input.V.Value(), x.Input.OK), x.Input.Lacks...)
	}
	if x.Device.Part.Amplifier != nil {
		s.add("gain", "", "set", "dB", figure(float64(x.Set.V), x.Set.OK), x.Set.Lacks...)
		s.add("gain", "", "runs", "dB", figure(float64(x.Runs.V.Gain), x.Runs.OK && x.Runs.V.On), x.Runs.Lacks...)
		if x.Runs.OK {
			s.rows[len(s.rows)-1].outcome = string(x.Runs.V.By)
		}
	}
	if x.EIRP.OK {
		s.add("eirp", "", "eirp", "dBm", figure(x.EIRP.V.Value(), true))
	}
	if x.Worst != nil {
		w := x.Worst.Worst
		s.add("eirp", x.Worst.Node.Name(), "eirp at rated output", "dBm", figure(w.EIRP.Most.Value(), true))
		s.rows[len(s.rows)-1].mhz = w.MHz
	}
}

func (s *figureSheet) line(b *Budget, l rules.BudgetLine) {
	known := l.Sum.Known()
	s.add("line", lineName(l), "least", "dB", figure(float64(l.Sum.Loss.Least), known), l.Sum.Missing...)
	s.add("line", lineName(l), "greatest", "dB", figure(float64(l.Sum.Loss.Greatest), known), l.Sum.Missing...)
	if !b.Terms {
		return
	}
	for _, t := range l.Sum.Terms() {
		s.add("term", lineName(l), t.What+", least", "dB", figure(float64(t.Loss.Least), true))
		s.add("term", lineName(l), t.What+", greatest", "dB", figure(float64(t.Loss.Greatest), true))
	}
}

func (s *figureSheet) chain(ch rules.StageChain) {
	name := ch.From + " to " + ch.To
	s.add("stage", name, "start", "dBm", figure(ch.Start.Value(), len(ch.Stages) > 0), ch.Lacks...)
	for _, g := range ch.Stages {
		s.add("stage", name, g.At+" gain", "dB", figure(float64(g.Gain), true))
		s.add("stage", name, g.At+" total", "dB", figure(float64(g.Total), true))
		s.add("stage", name, g.At+" noise figure", "dB", figure(float64(g.NF), true))
		s.add("stage", name, g.At+" level", "dBm", figure(g.Level.Value(), true))
	}
}

func (s *figureSheet) limit(c check) {
	m, ok := c.Margin()
	s.add("limit", c.Of, c.Rule, c.Unit, figure(c.Value.V, c.Value.OK), append(append([]rules.Lack(nil), c.Value.Lacks...), c.Limit.Lacks...)...)
	f := &s.rows[len(s.rows)-1]
	f.limit, f.margin, f.tolerance, f.outcome = figure(c.Limit.V, c.Limit.OK), figure(m, ok), c.Tolerance, c.Outcome
	if f.says == "" {
		f.says = c.Basis
	}
}

func (s *figureSheet) area(b *Budget, r *rules.AreaReach) {
	s.at = csvFigure{band: r.Signal.Band.V, direction: "downlink", device: r.Chain.Amp.ID, mhz: r.MHz}
	of := r.Area.Name.V + ", " + r.Signal.Operator.V
	s.add("area", of, "rsrp", "dBm", figure(r.RSRP.V.Value(), r.RSRP.OK), r.RSRP.Lacks...)
	f := &s.rows[len(s.rows)-1]
	f.tolerance, f.outcome, f.limit = float64(r.Doubt), r.Ends(), figure(r.Area.Target.V, r.Area.Target.Set)
	if f.value != nil && f.limit != nil {
		f.margin = figure(*f.value-*f.limit, true)
	}
	if r.Before.Set {
		s.add("area", of, "rsrp before", "dBm", figure(r.Before.V, true))
	}
	s.at.direction, s.at.mhz = "uplink", r.Chain.Band.Uplink.Mid()
	s.add("area", of, "level at the base station", "dBm", figure(r.Up.V.Level.Value(), r.Up.OK), r.Up.Lacks...)
	f = &s.rows[len(s.rows)-1]
	f.limit, f.margin = figure(r.Up.V.Needed.Value(), r.Up.OK), figure(float64(r.Up.V.Level.Minus(r.Up.V.Needed)), r.Up.OK)
	f.tolerance = float64(r.Up.V.Doubt)
	if b.Terms {
		for _, t := range r.Terms {
			s.add("term", of+" downlink", t.Words(), "dB", figure(float64(t.DB), true))
		}
		for _, t := range r.Up.V.Terms {
			s.add("term", of+" uplink", t.Words(), "dB", figure(float64(t.DB), true))
		}
	}
}
