package rules

import (
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

var groundData = &Rule{
	Name:    "ground/data",
	Title:   "Every data line from outdoors meets a screened surge protector that passes its power",
	Why:     "a strike nearby comes in over eight thin wires as well as over coax, and ends in the switch with everything that hangs on it",
	Caution: cautionThunder + " " + cautionStrike,
	Basis: []Basis{
		{"IEC 61643-22 annex F, lines with power", "2015", "standard", "memory"},
		practice("surge protector at the entry, of the line's power and screened; its bond is the matter of ground/bond")},
	Weight: Hold,
	Grave:  true,
	Check: func(c *Case, r *Report) {
		if c.Vehicle() {
			return
		}
		var unclear []*bom.Device
		for _, d := range c.Graph.Data {
			if !d.Row.From.Set || !d.Row.To.Set {
				r.Unknown(d.Row.At, d.On(), "%s does not say where both its ends go; whether it comes in from outdoors is not assessed", d.Row.ID).
					Then("add from and to").onRow(c.codeRow("data-arrestor"))
			}
		}
		for _, run := range c.dataRuns() {
			unclear = append(unclear, c.checkData(r, run)...)
		}
		reportUnplaced(r, unclear, c.codeRow("data-arrestor"), "whether a data line comes in from outdoors")
	},
}

// dataRun is a data line between two devices, over the surge protectors in it.
type dataRun struct {
	ends  [2]*bom.Device
	ports [2]*catalog.Port // nil where nobody knows the ports
	stops []dataStop
	spds  []*bom.Device
}

// dataStop is a place that a run passes, or a protector in it.
type dataStop struct {
	place *bom.Place
	line  *bom.DataLine
	spd   *bom.Device
}

// dataRuns joins the data lines of the plan over their surge protectors. A run
// with an end that did not resolve has a finding and is left out.
func (c *Case) dataRuns() []dataRun {
	var out []dataRun
	done := map[*bom.DataLine]bool{}
	for _, d := range c.Graph.Data {
		if done[d] {
			continue
		}
		done[d] = true
		var run dataRun
		back := c.follow(&run, 0, d, d.From, d.Row.From, done)
		for i := len(back) - 1; i >= 0; i-- {
			run.stops = append(run.stops, back[i])
		}
		run.stops = append(run.stops, wayStops(d, false)...)
		run.stops = append(run.stops, c.follow(&run, 1, d, d.To, d.Row.To, done)...)
		if run.ends[0] != nil && run.ends[1] != nil {
			out = append(out, run)
		}
	}
	return out
}

// follow goes on from one end of a line to the end of the run, outward.
func (c *Case) follow(run *dataRun, side int, line *bom.DataLine, n *bom.Node, ref source.Val[bom.Ref], done map[*bom.DataLine]bool) []dataStop {
	d := c.Graph.Device(ref.V.Name)
	if !ref.Set || d == nil || d.Kind() == "" {
		return nil
	}
	stops := []dataStop{{place: d.Place, line: line}}
	if d.Kind() != "data-arrestor" {
		run.ends[side] = d
		if n != nil {
			run.ports[side] = n.Port
		}
		return stops
	}
	run.spds = append(run.spds, d)
	stops[0].spd = d
	for _, next := range c.Graph.Data {
		from, to := c.Graph.Device(next.Row.From.V.Name), c.Graph.Device(next.Row.To.V.Name)
		if done[next] || from != d && to != d {
			continue
		}
		done[next] = true
		if from == d {
			return append(append(stops, wayStops(next, false)...), c.follow(run, side, next, next.To, next.Row.To, done)...)
		}
		return append(append(stops, wayStops(next, true)...), c.follow(run, side, next, next.From, next.Row.From, done)...)
	}
	run.ends[side] = d // the line ends on the protector
	return stops
}

func wayStops(d *bom.DataLine, back bool) []dataStop {
	var out []dataStop
	for _, s := range d.Way {
		out = append(out, dataStop{place: s.Place, line: d})
	}
	if back {
		for i, j := 0, len(out)-1; i < j; i, j = i+1, j-1 {
			out[i], out[j] = out[j], out[i]
		}
	}
	return out
}

// crossing is where a run comes in: the stops on either side.
type dataCrossing struct {
	out, in  *bom.Place
	line     *bom.DataLine
	from, to int // stops
}

func (run *dataRun) crossings() []dataCrossing {
	var out []dataCrossing
	last := -1
	for i, s := range run.stops {
		if !s.place.Outdoors() && !s.place.Indoors() {
			continue
		}
		if last >= 0 && run.stops[last].place.Outdoors() != s.place.Outdoors() {
			x := dataCrossing{run.stops[last].place, s.place, s.line, last, i}
			if s.place.Outdoors() {
				x.out, x.in, x.line = s.place, run.stops[last].place, run.stops[last].line
			}
			out = append(out, x)
		}
		last = i
	}
	return out
}

// checkData holds one run and returns the devices whose missing places leave it
// open.
func (c *Case) checkData(r *Report, run dataRun) []*bom.Device {
	xs, open := run.crossings(), []*bom.Device{unplaced(run.ends[0]), unplaced(run.ends[1])}
	if len(xs) == 0 {
		return open
	}
	row := c.codeRow("data-arrestor")
	for i, x := range xs {
		if run.guarded(xs, i) {
			continue
		}
		r.Fails(x.line.Row.At, x.line.On(), "%s comes in from %s to %s without a surge protector; one is expected at the entry", x.line.Row.ID, x.out.ID, x.in.ID).
			Then("%s", c.dataArrestorFor(run)).onRow(row).Beside(run.ends[0].At, "one end").Beside(run.ends[1].At, "the other end")
	}
	for _, d := range run.spds {
		c.checkProtector(r, run, d)
	}
	return open
}

// guarded reports a protector between the crossings next to a crossing.
func (run *dataRun) guarded(xs []dataCrossing, i int) bool {
	lo, hi := 0, len(run.stops)
	if i > 0 {
		lo = xs[i-1].to
	}
	if i+1 < len(xs) {
		hi = xs[i+1].from + 1
	}
	for _, s := range run.stops[lo:hi] {
		if s.spd != nil {
			return true
		}
	}
	return false
}

// checkProtector holds that a protector passes the power of its run and is
// screened.
func (c *Case) checkProtector(r *Report, run dataRun, d *bom.Device) {
	at, row := placeOr(d.Row.Part.At, d.At), c.codeRow("data-arrestor")
	if d.Part == nil {
		r.Unknown(at, d.On(), "%s is there already and its part is not known; whether it passes the line's power and is screened is not assessed", d.ID).
			Then("look at it on site and give its part").onRow(row)
		return
	}
	power, from, known := run.power()
	k := d.Part.Data
	var lacks []string
	switch {
	case !known:
		lacks = append(lacks, "what power the line carries")
	case power != "" && !k.PoE.Set:
		lacks = append(lacks, "what power its part "+d.Part.ID+" passes")
	case power != "" && !passesPower(k.PoE.V, power):
		r.Fails(at, d.On(), "%s (%s) passes %s; %s on its line needs %s", d.ID, d.Part.ID, k.PoE.V, from.ID, power).
			Then("%s", c.dataArrestorFor(run)).onRow(row).Beside(k.PoE.At, "the part's poe").Beside(from.At, "what sets the power")
	}
	switch {
	case !k.Screened.Set:
		lacks = append(lacks, "whether its part "+d.Part.ID+" is screened")
	case !k.Screened.V:
		r.Fails(at, d.On(), "%s (%s) is not screened; a protector on a line from outdoors is expected to be", d.ID, d.Part.ID).
			Then("%s", c.dataArrestorFor(run)).onRow(row).Beside(k.Screened.At, "the part")
	}
	if len(lacks) > 0 {
		r.Unknown(at, d.On(), "%s is not assessed as a surge protector: it is not known %s", d.ID, list(lacks)).
			Then("complete the part").onRow(row).Beside(d.Part.At, "the part")
	}
}

// power is the kind of power on a run and the device that sets it: what is fed
// says what it needs, else what feeds says what it gives; "" for none.
func (run *dataRun) power() (kind string, by *bom.Device, known bool) {
	known = true
	for i, d := range run.ends {
		p := run.ports[i]
		switch {
		case p == nil:
			known = known && d.Part != nil
		case p.PoE.Set && (by == nil || feedsPower(by)):
			kind, by = p.PoE.V, d
		}
	}
	return kind, by, known || by != nil
}

// feedsPower reports a device that gives power over data lines.
func feedsPower(d *bom.Device) bool {
	switch d.Kind() {
	case "injector", "switch", "supply":
		return true
	}
	return false
}

// poeOrder are the negotiated kinds of power, each able to do what those before it
// do (IEEE 802.3, clauses 33 and 145; read in public summaries).
var poeOrder = []string{"af", "at", "bt3", "bt4"}

// passesPower reports whether a protector for one kind of power passes another. A
// passive kind only passes itself: its voltage is its own.
func passesPower(has, needs string) bool {
	if has == needs {
		return true
	}
	if strings.HasPrefix(has, "passive") || strings.HasPrefix(needs, "passive") {
		return false
	}
	at := func(kind string) int {
		for i, k := range poeOrder {
			if k == kind {
				return i
			}
		}
		return -1
	}
	return at(needs) >= 0 && at(has) >= at(needs)
}

// dataArrestorFor names a catalog protector for a run.
func (c *Case) dataArrestorFor(run dataRun) string {
	power, _, _ := run.power()
	var best *catalog.Part
	for _, p := range c.Firm.Catalog.All() {
		if p.Kind.V != "data-arrestor" || p.Status.Or("active") != "active" || !p.Data.Screened.V ||
			power != "" && !passesPower(p.Data.PoE.V, power) {
			continue
		}
		if best == nil || c.Firm.nearerThan(p, best) {
			best = p
		}
	}
	if best == nil {
		return "fit a screened surge protector of the line's power at the entry and bond it; the catalog has none"
	}
	return "fit " + c.Firm.OnHand(best) + " at the entry and bond it"
}
