package bom

import (
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Graph is a plan with its parts looked up and its ends tied together.
type Graph struct {
	Plan    *Plan
	Catalog *catalog.Catalog

	Devices []*Device
	Cables  []*Cable
	Mates   []*Mate
	Data    []*DataLine
	Wires   []*WireLine
	Bonds   []*Bond
	Holes   []Hole // what did not resolve, in the order it was met

	devices   map[string]*Device
	cables    map[string]*Cable
	places    map[string]*Place
	bonds     map[*Device][]*Bond // those that lead somewhere, by either end
	earth     map[*Device]*Bond   // the first bond on the way to the nearest electrode
	lines     *Lines
	guesses   int
	stands    []string        // what findings can stand on, once it was asked for
	operators map[string]bool // once it was asked for
}

// Device is one thing that is put up: a row of the plan, or one copy of it.
type Device struct {
	ID     string
	At     source.Place
	Row    *DeviceRow
	Part   *catalog.Part // nil where it did not resolve, or exists without a part
	Place  *Place        // nil where the plan does not say
	Stands *Device       // what it stands on
	Point  source.Val[Point]
	Nodes  []*Node // its ports

	on string
}

// Kind is the kind of the device's part, or the kind that the plan gives, or "".
func (d *Device) Kind() string {
	if d.Part != nil {
		return d.Part.Kind.V
	}
	return d.Row.Kind.V
}

// On is how findings refer to the device.
func (d *Device) On() string { return d.on }

// Node finds a port of the device, or nil.
func (d *Device) Node(port string) *Node {
	for _, n := range d.Nodes {
		if n.Port.Name == port {
			return n
		}
	}
	return nil
}

// Cable is one coaxial cable or jumper with its two ends.
type Cable struct {
	ID      string
	At      source.Place
	Row     *CableRow
	Part    *catalog.Part // nil where it did not resolve
	Length  source.Val[unit.MM]
	Way     []Section
	Ends    [2]*Node
	Through []*catalog.Part // adapters at end 2 in the order of the row, nil where one did not resolve
	Like    *Cable

	on string
}

// On is how findings refer to the cable.
func (c *Cable) On() string { return c.on }

// Section is a stretch of a cable's way that lies in one place.
type Section struct {
	Place  *Place
	Length source.Val[unit.MM]
}

// Node is one thing that mates: a port of a device, or an end of a cable.
type Node struct {
	Device *Device // with Port
	Port   *catalog.Port

	Cable *Cable // with End, 1 or 2
	End   int
	Fit   *catalog.Part // connector part on a field-cut end
	Could []string      // connector parts that would do, where the plan leaves it open

	Face  source.Val[catalog.Face]
	Ohm   source.Val[float64]
	Mates []*Mate   // one at most, unless the port is shared by mistake
	Data  *DataLine // what is plugged into a data port
}

// Name is how the plan refers to the node: "donor.rf", "C1.2".
func (n *Node) Name() string {
	if n.Device != nil {
		return n.Device.ID + "." + n.Port.Name
	}
	return n.Cable.ID + "." + string('0'+rune(n.End))
}

// On is what findings about the node stand on.
func (n *Node) On() string {
	if n.Device != nil {
		return n.Device.On()
	}
	return n.Cable.On()
}

// At is the place of what carries the node.
func (n *Node) At() source.Place {
	if n.Device != nil {
		return n.Device.At
	}
	return n.Cable.At
}

// Mate is two nodes that are joined, directly or through adapters.
type Mate struct {
	A, B     *Node // a cable end first, where there is one
	Adapters []Adapter
	At       source.Place // where the plan says so
	Joint    *JointRow    // for ports that mate without a cable
	Way      []Section    // of a joint that crosses places

	contacts []Contact // once what meets is settled
}

// Other is the node at the far side of n.
func (m *Mate) Other(n *Node) *Node {
	if m.A == n {
		return m.B
	}
	return m.A
}

// Adapter is one adapter between two nodes, its ports in the order from A to B.
type Adapter struct {
	Part    *catalog.Part
	In, Out *catalog.Port
	At      source.Place
}

// Contact is one pair of faces that meet.
type Contact struct{ A, B Half }

// Half is one side of a contact.
type Half struct {
	Name string // "C1.2", or the adapter part
	Face source.Val[catalog.Face]
	Ohm  source.Val[float64]
	Loss source.Val[float64] // of its connector part, dB for the pair
}

// Contacts lists the pairs that meet between A and B, in order.
func (m *Mate) Contacts() []Contact {
	if m.contacts != nil {
		return m.contacts
	}
	left := m.A.half()
	out := make([]Contact, 0, 1+len(m.Adapters))
	for _, a := range m.Adapters {
		out = append(out, Contact{left, Half{Name: a.Part.ID, Face: a.In.Connector, Ohm: a.In.Impedance}})
		left = Half{Name: a.Part.ID, Face: a.Out.Connector, Ohm: a.Out.Impedance}
	}
	return append(out, Contact{left, m.B.half()})
}

func (n *Node) half() Half {
	h := Half{Name: n.Name(), Face: n.Face, Ohm: n.Ohm}
	if n.Fit != nil && n.Fit.Connector != nil {
		h.Loss = n.Fit.Connector.LossDB
	}
	return h
}

// DataLine is one Ethernet line.
type DataLine struct {
	Row      *DataRow
	Part     *catalog.Part
	From, To *Node // nil where it did not resolve
	Way      []Section
}

// On is how findings refer to the line.
func (d *DataLine) On() string { return "data." + d.Row.ID }

// WireLine is one direct current line.
type WireLine struct {
	Row      *WireRow
	Part     *catalog.Part
	Fuse     *catalog.Part
	From, To *Node
	Way      []Section
}

// On is how findings refer to the line.
func (w *WireLine) On() string { return "wire." + w.Row.ID }

// Bond joins two devices.
type Bond struct {
	Row      *BondRow
	Part     *catalog.Part // nil for a direct contact
	From, To *Device       // nil where it did not resolve
}

// On is how findings refer to the bond.
func (b *Bond) On() string { return "bond." + b.Row.ID }

// Device finds a device by ID, or nil.
func (g *Graph) Device(id string) *Device { return g.devices[id] }

// Cable finds a cable by ID, or nil.
func (g *Graph) Cable(id string) *Cable { return g.cables[id] }

// Place finds a place by ID, or nil.
func (g *Graph) Place(id string) *Place { return g.places[id] }

// HoleKind says what did not resolve.
type HoleKind int

const (
	NoPart      HoleKind = iota + 1 // the catalog does not have it
	WrongKind                       // it is of a kind that does not go there
	NoPort                          // no such port, or none that is free and mates
	SharedPort                      // two lines on one port
	OpenChoice                      // several connector parts would do
	NoConnector                     // no connector part fits the cable and has the face
	BadRef                          // a reference that leads nowhere
)

// Hole is something that did not resolve. It is what rules make findings of.
type Hole struct {
	Kind     HoleKind
	At       source.Place
	On       string
	Says, Do string
	Also     []source.Place
}
