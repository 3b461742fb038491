package catalog

import (
	"fmt"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Part is one part of the catalog. Of the pointers at its end exactly those are
// set that its kind describes; a router with its own antenna has two, and gear has a
// body beside its own.
type Part struct {
	ID      string
	At      source.Place // its ID in the file
	Generic bool         // from the embedded catalog

	Kind       source.Val[string]
	Name       source.Val[string]
	Maker      source.Val[string]
	Code       source.Val[string] // the maker's own number
	Sheet      source.Val[string] // data sheet or other source of the figures
	Status     source.Val[string] // active, last-buy, withdrawn; absent: active
	Instead    source.Val[Words]  // substitutes, best first
	MassKg     source.Val[float64]
	Rated      source.Val[Words]      // outdoor, riser, plenum, burial; absent: unknown
	AmbientC   source.Val[[2]float64] // least and greatest ambient temperature, °C
	Tools      source.Val[Words]      // what the crew needs to fit it
	Bags       source.Val[[]source.Val[int]]
	Serials    source.Val[bool]
	Expendable source.Val[bool]

	Ports []Port
	Paths []Path

	Antenna    *Antenna
	Cable      *Cable
	Connector  *Connector
	Jumper     *Jumper
	Passive    *Passive
	Arrestor   *Arrestor
	Amplifier  *Amplifier
	Router     *Router
	Supply     *Supply
	Data       *Data
	Wire       *Wire
	Bond       *Bond
	Mount      *Mount
	Consumable *Consumable
	Body       *Body // of gear that can stand in the wind
}

// Words is a list of words, each with its place.
type Words = []source.Val[string]

// Has reports whether a list of words holds w.
func Has(list source.Val[Words], w string) bool {
	for _, v := range list.V {
		if v.V == w {
			return true
		}
	}
	return false
}

// Port is one connection of a part.
type Port struct {
	Name string
	At   source.Place

	Connector source.Val[Face]
	Impedance source.Val[float64] // ohm
	Use       source.Val[string]  // cellular, wifi, gnss, data, power; absent: cellular
	PoE       source.Val[string]
	Unused    source.Val[string] // terminate, leave, never
	Bands     source.Val[Words]
	DCOut     *DCOut
	Lead      *Lead
	Side      source.Val[string] // of an amplifier: donor or server
	Polar     source.Val[string] // of an antenna: vertical, horizontal, +45, -45
}

// RF reports whether the port carries radio signals and so is mated.
func (p *Port) RF() bool {
	switch p.Use.Or("cellular") {
	case "cellular", "wifi", "gnss":
		return true
	}
	return false
}

// DCOut is direct current that a port feeds into its line.
type DCOut struct {
	Volts source.Val[float64]
	MA    source.Val[float64]
}

// Lead is a cable that leaves a port for good: the port's connector is at the
// lead's free end.
type Lead struct {
	Cable  source.Val[string]
	Length source.Val[unit.MM]
	InGain source.Val[bool] // the antenna's gain already holds the lead's loss
}

// Path is a way through a part; it works in both directions.
type Path struct {
	At   source.Place
	From source.Val[string]
	To   source.Val[Words]
	MHz  source.Val[unit.Span] // no value outside; absent: any frequency
	Loss source.Val[Points]    // dB
}

// Port finds a port by name, or nil.
func (p *Part) Port(name string) *Port {
	for i := range p.Ports {
		if p.Ports[i].Name == name {
			return &p.Ports[i]
		}
	}
	return nil
}

// PortNames lists the ports in the order of the file.
func (p *Part) PortNames() []string {
	var out []string
	for i := range p.Ports {
		out = append(out, p.Ports[i].Name)
	}
	return out
}

// CutStock reports whether the part is bought and kept by length.
func (p *Part) CutStock() bool {
	switch p.Kind.V {
	case "cable", "data-cable", "wire", "bond-conductor":
		return true
	}
	return false
}

// Body is what a box of gear shows the wind.
type Body struct {
	WindAreaM2 source.Val[float64] // as a maker states it, drag in it
	SizeMM     source.Val[float64] // largest side
}

func (p *Part) box(k *source.Keys) {
	p.Body = &Body{}
	p.Body.keys(k)
}

func (b *Body) keys(k *source.Keys) {
	source.Opt(k, &b.WindAreaM2, "wind_area_m2", source.AtLeast(0, "m²"), "area that the wind meets; a maker's effective area holds the drag already")
	source.Opt(k, &b.SizeMM, "size_mm", source.AtLeast(0, "mm"), "largest side")
}

// InWind is the area that the wind meets, in m² with its drag, and the largest side
// in mm, of an antenna or of gear; both unset for what has neither.
func (p *Part) InWind() (area, side source.Val[float64]) {
	switch {
	case p.Antenna != nil:
		return p.Antenna.WindAreaM2, p.Antenna.SizeMM
	case p.Body != nil:
		return p.Body.WindAreaM2, p.Body.SizeMM
	}
	return area, side
}

// Title is the name a person knows the part by, or its ID.
func (p *Part) Title() string { return p.Name.Or(p.ID) }

func (p *Part) keys(k *source.Keys) {
	p.ID, p.At = k.ID(), k.At()
	source.Need(k, &p.Kind, "kind", source.OneOf(KindNames()...), "what sort of part it is")
	source.Opt(k, &p.Name, "name", source.Text, "what a person calls it")
	source.Opt(k, &p.Maker, "maker", source.Text, "who makes it")
	source.Opt(k, &p.Code, "code", source.Text, "the maker's number")
	source.Opt(k, &p.Sheet, "sheet", source.Text, "where the figures come from")
	source.Opt(k, &p.Status, "status", source.OneOf("active", "last-buy", "withdrawn"), "whether it can still be had; absent: active")
	source.Opt(k, &p.Instead, "instead", source.ListOf(source.Name), "substitutes, best first")
	source.Opt(k, &p.MassKg, "mass_kg", source.AtLeast(0, "kg"), "mass")
	source.Opt(k, &p.Rated, "rated", source.ListOf(source.OneOf("outdoor", "riser", "plenum", "burial")), "spaces it is made for; absent: unknown")
	source.Opt(k, &p.AmbientC, "ambient_c", source.Pair(source.Between(-90, 150, "°C"), "[-20, 55]"), "least and greatest ambient temperature")
	source.Opt(k, &p.Tools, "tools", source.ListOf(source.Text), "what the crew needs to fit it")
	source.Opt(k, &p.Bags, "bags", source.ListOf(source.Count(1, 100000)), "sizes of the bags it comes in, for counting")
	source.Opt(k, &p.Serials, "serials", source.Flag, "each piece is tracked by its serial number")
	source.Opt(k, &p.Expendable, "expendable", source.Flag, "neither claimed nor issued, only kept in stock")
	p.body(k)
}

// body reads the keys that belong to the part's kind. Where the kind is missing
// or unknown nobody can say which keys belong, and the rest is passed over.
func (p *Part) body(k *source.Keys) {
	for _, kind := range Kinds {
		if kind.Name == p.Kind.V {
			kind.read(p, k)
			return
		}
	}
	k.Vary("kind", KindNames(), DescribePart)
	k.Mute()
}

// mostPorts and mostPaths bound what every line through a part looks over; no part
// of the trade comes near.
const (
	mostPorts = 64
	mostPaths = 256
)

func (p *Part) ports(k *source.Keys) {
	source.Named(k, &p.Ports, "port", (*Port).keys, "its connections")
	k.Bound("port", mostPorts)
	if n := len(p.Ports); n > mostPorts {
		k.Fault(p.Ports[mostPorts].At, fmt.Sprintf("the part has %d ports, more than the %d that are read", n, mostPorts), "describe it as several parts")
		p.Ports = p.Ports[:mostPorts]
	}
}

func (p *Part) paths(k *source.Keys) {
	source.Rows(k, &p.Paths, "path", (*Path).keys, "ways through it, each in both directions")
	k.Bound("path", mostPaths)
	if n := len(p.Paths); n > mostPaths {
		k.Fault(p.Paths[mostPaths].At, fmt.Sprintf("the part has %d paths, more than the %d that are read", n, mostPaths), "name several ports in to, or describe it as several parts")
		p.Paths = p.Paths[:mostPaths]
	}
}

func (q *Port) keys(k *source.Keys) {
	q.Name, q.At = k.ID(), k.At()
	source.Opt(k, &q.Connector, "connector", face, "series and gender; needed for cellular, wifi and gnss")
	source.Opt(k, &q.Impedance, "impedance_ohm", ohm, "characteristic impedance; needed for cellular, wifi and gnss")
	source.Opt(k, &q.Use, "use", source.OneOf("cellular", "wifi", "gnss", "data", "power"), "what it carries; absent: cellular")
	source.Opt(k, &q.PoE, "poe", poe, "what a data port takes or gives")
	source.Opt(k, &q.Unused, "unused", source.OneOf("terminate", "leave", "never"), "what the maker asks for when nothing is connected")
	source.Opt(k, &q.Bands, "bands", source.ListOf(bandName), "bands it works in; absent: all of the part's")
	if dc := new(DCOut); source.One(k, dc, "dc_out", (*DCOut).keys, "direct current it feeds into the line") {
		q.DCOut = dc
	}
	if lead := new(Lead); source.One(k, lead, "lead", (*Lead).keys, "captive lead; the connector is at its free end") {
		q.Lead = lead
	}
	source.Opt(k, &q.Side, "side", source.OneOf("donor", "server"), "of an amplifier: toward the network or toward the phones")
	source.Opt(k, &q.Polar, "polarization", source.OneOf("vertical", "horizontal", "+45", "-45"), "of an antenna port")
	mated := source.State{Key: "use", Non: []any{"data", "power"}, Lacking: true}
	k.Demand(source.Condition{When: &mated, Any: []source.State{source.Given("connector")}},
		source.Condition{When: &mated, Any: []source.State{source.Given("impedance_ohm")}})
	if q.RF() && (q.Use.Set || !k.Has("use")) { // a use that cannot be read may be any
		if !q.Connector.Set && !k.Has("connector") {
			k.Missing("connector", "a port for radio signals is mated")
		}
		if !q.Impedance.Set && !k.Has("impedance_ohm") {
			k.Missing("impedance_ohm", "a port for radio signals has one")
		}
	}
}

func (d *DCOut) keys(k *source.Keys) {
	source.Need(k, &d.Volts, "volts", source.Between(0, 60, "V"), "voltage on the line")
	source.Opt(k, &d.MA, "ma", source.AtLeast(0, "mA"), "greatest current")
}

func (l *Lead) keys(k *source.Keys) {
	source.Need(k, &l.Cable, "cable", source.Name, "part of the lead's cable")
	source.Need(k, &l.Length, "length", source.Length, "length of the lead")
	source.Opt(k, &l.InGain, "in_gain", source.Flag, "the gain of the antenna already holds the lead's loss")
}

func (w *Path) keys(k *source.Keys) {
	w.At = k.At()
	source.Need(k, &w.From, "from", source.Name, "a port")
	source.Need(k, &w.To, "to", oneOrMore(source.Name), "the port or ports at the other end")
	source.Opt(k, &w.MHz, "mhz", span, "where the figures hold; absent: everywhere")
	source.Need(k, &w.Loss, "loss_db", LossTable, "loss, one number or [MHz, dB] pairs")
}

// Between lists the rows that pass from one port to another, either way round.
func (p *Part) Between(a, b string) []*Path {
	var out []*Path
	for i := range p.Paths {
		w := &p.Paths[i]
		if w.From.V == a && Has(w.To, b) || w.From.V == b && Has(w.To, a) {
			out = append(out, w)
		}
	}
	return out
}
