package rules

import (
	"fmt"
	"strings"

	"driploop/bom"
	"driploop/catalog"
)

var mateOpen = &Rule{
	Name:   "mate/open",
	Title:  "No port that matters is left open",
	Why:    "an open port sends back what comes to it: an amplifier starts to oscillate or shuts a band down, a splitter's other legs get ripple, a radio with two branches runs on one",
	Basis:  []Basis{practice("unused ports get a load of the line's impedance; the maker's own word (unused) goes first")},
	Weight: Hold,
	Lighter: "A server port of an amplifier, an output of a passive part, a further port of an antenna and a router's port for bands that are " +
		"not planned are a punch; Wi-Fi, GNSS and receive-only ports a note. A port that the maker never wants open always holds; one that he lets be is silent.",
	Check: func(c *Case, r *Report) {
		for _, d := range c.Graph.Devices {
			if !c.loose(d) && !c.unfinished(d) {
				c.checkOpen(r, d)
			}
		}
	},
}

// opening says why an open port matters, and how much.
type opening struct {
	weight Weight // 0: not assessed
	is     string // "the donor port", "an output"
	harm   string
	do     string // besides a load; "" where only a load will do
}

// checkOpen reports the open ports of a device, those that matter alike as one.
func (c *Case) checkOpen(r *Report, d *bom.Device) {
	var order []opening
	ports := map[opening][]*bom.Node{}
	for _, n := range d.Nodes {
		o, matters := c.opening(n)
		if !matters {
			continue
		}
		if ports[o] == nil {
			order = append(order, o)
		}
		ports[o] = append(ports[o], n)
	}
	for _, o := range order {
		c.failOpen(r, d, o, ports[o])
	}
}

func (c *Case) failOpen(r *Report, d *bom.Device, o opening, ports []*bom.Node) {
	says := fmt.Sprintf("%s (%s), %s, %s nothing connected", list(nodeNames(ports)), d.Part.ID, kindOfPort(o.is, len(ports)), has(len(ports)))
	if o.weight == 0 {
		r.Unknown(d.At, d.On(), "%s: what that does is not assessed, because the part does not say on which side it is", says).
			Then("add side to the port in the catalog").besidePart(d.Part, ports[0].Port.At, "the port")
		return
	}
	if d.Row.Existing.V {
		r.Unknown(d.At, d.On(), "%s in the plan; %s is there already, and what is on it is not assessed", says, d.ID).
			Then("look at it, and write down what is connected or that it has a load")
		return
	}
	f := r.Fails(d.At, d.On(), "%s: %s", says, o.harm).Lighter(o.weight).Then("%s", c.close(o, d, ports))
	if ports[0].Port.Unused.Set {
		f.besidePart(d.Part, ports[0].Port.Unused.At, "what the maker asks for")
	}
	if o.weight < Hold {
		return
	}
	for _, n := range c.freeBranches(d) {
		f.Beside(n.At(), "%s is free too", n.Name())
	}
}

// kindOfPort is the port's kind in words, for one or several.
func kindOfPort(is string, n int) string {
	if n == 1 {
		return is
	}
	return strings.Replace(strings.TrimPrefix(strings.TrimPrefix(is, "an "), "a "), "port", "ports", 1)
}

func has(n int) string {
	if n == 1 {
		return "has"
	}
	return "have"
}

func nodeNames(nodes []*bom.Node) []string {
	var out []string
	for _, n := range nodes {
		out = append(out, n.Name())
	}
	return out
}

// opening says what an open port does; false where it does not matter or is said
// elsewhere.
func (c *Case) opening(n *bom.Node) (opening, bool) {
	p, d := n.Port, n.Device
	if !p.RF() || len(n.Mates) > 0 || p.Unused.V == "leave" {
		return opening{}, false
	}
	o, matters := c.openingOf(n, d.Kind())
	if p.Unused.V == "never" && matters {
		o.weight = Hold
		if o.is == "of unknown side" {
			o = opening{Hold, "a port that its maker never wants open", "what it sends comes back into it", "connect it"}
		}
	}
	return o, matters
}

func (c *Case) openingOf(n *bom.Node, kind string) (opening, bool) {
	p := n.Port
	switch use := p.Use.Or("cellular"); {
	case use == "wifi":
		return opening{Note, "a Wi-Fi port", "Wi-Fi reaches less far without it", "connect its antenna"}, true
	case use == "gnss":
		return opening{Note, "a GNSS port", "there is no position and no time from it", "connect its antenna"}, true
	case receiveOnly(p):
		return opening{Note, "a receive-only port", "it receives nothing", "connect its antenna"}, true
	}
	switch kind {
	case "amplifier":
		return openAmplifier(p), true
	case "router":
		return c.openRouter(n), true
	case "antenna":
		return c.openAntenna(n)
	}
	return c.openPassive(n), true
}

func openAmplifier(p *catalog.Port) opening {
	switch p.Side.V {
	case "donor":
		return opening{Hold, "the donor port", "the amplifier hears no network, and what it sends comes back into it", "connect the donor antenna, or take the amplifier out"}
	case "server":
		return opening{Punch, "a server port", "what it sends comes back, and the amplifier may oscillate or shut the band down", "connect a server antenna"}
	}
	return opening{0, "of unknown side", "", ""}
}

// openRouter is an open port of a router: a missing branch, or a port for bands that
// nobody planned.
func (c *Case) openRouter(n *bom.Node) opening {
	if !c.planned(n) {
		return opening{Punch, "an antenna port of the radio for bands that are not planned", "what it transmits there comes back into the radio", ""}
	}
	return opening{Hold, "an antenna port of the radio", "what it transmits comes back into the radio, and one branch is missing", "connect its antenna"}
}

// planned reports whether a port serves a planned band, as far as its part says.
func (c *Case) planned(n *bom.Node) bool {
	if !n.Port.Bands.Set || len(c.bands) == 0 {
		return true
	}
	for _, w := range n.Port.Bands.V {
		own, ok := catalog.LookBand(w.V)
		for _, b := range c.bands {
			if ok && (!own.Uplink.Overlap(b.Uplink).Empty() || !own.Downlink.Overlap(b.Downlink).Empty()) {
				return true
			}
		}
	}
	return false
}

// openAntenna is a further port of an antenna in use. Where the router at the others
// has a port open as well, the line between the two was forgotten, and the finding
// stands there.
func (c *Case) openAntenna(n *bom.Node) (opening, bool) {
	if router := c.routerAt(n.Device); router != nil && len(c.openBranches(router)) > 0 {
		return opening{}, false
	}
	return opening{Punch, "a port of an antenna whose other port is in use", "it takes up part of the other port's power and spoils its pattern", ""}, true
}

// routerAt is a router that some line leads to from an antenna, or nil.
func (c *Case) routerAt(d *bom.Device) *bom.Device {
	if c.routers == nil {
		c.routers = c.findRouters()
	}
	return c.routers[d]
}

// findRouters is the first router on the lines of each device, found once.
func (c *Case) findRouters() map[*bom.Device]*bom.Device {
	out := map[*bom.Device]*bom.Device{}
	note := func(d, router *bom.Device) {
		if router.Kind() == "router" && out[d] == nil {
			out[d] = router
		}
	}
	for _, l := range c.Lines().All {
		if l.Kind == bom.Feed || l.Kind == bom.Leg {
			note(l.From.Device, l.To.Device)
			note(l.To.Device, l.From.Device)
		}
	}
	return out
}

// openBranches lists the cellular ports of a router or antenna that are open and
// serve a planned band.
func (c *Case) openBranches(d *bom.Device) []*bom.Node {
	var out []*bom.Node
	for _, n := range d.Nodes {
		if n.Port.Use.Or("cellular") == "cellular" && len(n.Mates) == 0 && n.Port.Unused.V != "leave" && !receiveOnly(n.Port) && c.planned(n) {
			out = append(out, n)
		}
	}
	return out
}

// freeBranches lists the open ports of the antennas at a router: most likely the
// other ends of the lines that were forgotten.
func (c *Case) freeBranches(router *bom.Device) []*bom.Node {
	if router.Kind() != "router" {
		return nil
	}
	var out []*bom.Node
	for _, d := range c.Graph.Devices {
		if d.Kind() == "antenna" && c.routerAt(d) == router {
			out = append(out, c.openBranches(d)...)
		}
	}
	return out
}

// receiveOnly reports a port all of whose bands have a downlink only.
func receiveOnly(p *catalog.Port) bool {
	for _, w := range p.Bands.V {
		if b, ok := catalog.LookBand(w.V); !ok || !b.Uplink.Empty() {
			return false
		}
	}
	return len(p.Bands.V) > 0
}

// openPassive is an open port of a passive part.
func (c *Case) openPassive(n *bom.Node) opening {
	ports, _ := matedPorts(n.Device)
	switch {
	case len(ports) <= 2:
		return opening{Hold, "one of two ports", "the line ends there", "connect it"}
	case n.Device.Kind() == "coupler" && c.isolated(n):
		return opening{Punch, "the isolated port of a coupler", "without a load the coupler takes one direction for the other", ""}
	case n.Port.Unused.V == "never":
		return opening{Hold, "a port that its maker never wants open", "nothing passes the part as it should", "connect it"}
	}
	return opening{Punch, "a port of a part that divides", "what comes out of it is sent back, and the other ports get ripple", "connect a line"}
}

// isolated reports a coupler's port that has no way to a port on whose side a radio
// or amplifier is.
func (c *Case) isolated(n *bom.Node) bool {
	for _, l := range c.Lines().All {
		for _, p := range sourcePorts(l, n.Device) {
			if p != n.Port && len(n.Device.Part.Between(p.Name, n.Port.Name)) == 0 {
				return true
			}
		}
	}
	return false
}

// sourcePorts lists the ports of a device that face an active end of a line.
func sourcePorts(l *bom.Line, d *bom.Device) []*catalog.Port {
	var passes []*bom.Pass
	for _, s := range l.Steps {
		if s.Pass != nil && s.Pass.Device == d {
			passes = append(passes, s.Pass)
		}
	}
	var out []*catalog.Port
	if len(passes) == 0 {
		return nil
	}
	if x := l.From.Device; x != nil && x.Active() {
		out = append(out, passes[0].In)
	}
	if x := l.To.Device; x != nil && x.Active() {
		out = append(out, passes[len(passes)-1].Out)
	}
	return out
}

// close says how to close an open port.
func (c *Case) close(o opening, d *bom.Device, ports []*bom.Node) string {
	load := c.loadFor(d, ports[0])
	switch asked := ports[0].Port.Unused.V; {
	case o.do != "" && (asked == "never" || ports[0].Port.Side.V == "donor"):
		return o.do
	case load == nil && o.do == "":
		return "put a load on it; the catalog has none that fits"
	case load == nil:
		return o.do
	case o.do == "":
		return terminate(len(ports)) + c.Firm.OnHand(load)
	case asked == "terminate":
		return fmt.Sprintf("%s%s, or %s", terminate(len(ports)), c.Firm.OnHand(load), o.do)
	}
	return fmt.Sprintf("%s, or %s%s", o.do, terminate(len(ports)), c.Firm.OnHand(load))
}

func terminate(n int) string {
	if n == 1 {
		return "terminate it with "
	}
	return "terminate each with "
}

// loadFor is the load of the catalog that goes on a port as it is, rated for the
// weather where the port is out in it; nil where there is none.
func (c *Case) loadFor(d *bom.Device, n *bom.Node) *catalog.Part {
	at := bom.Half{Name: n.Name(), Face: n.Face, Ohm: n.Ohm}
	return c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		if p.Kind.V != "load" || len(p.Ports) != 1 || d.Place.Outdoors() && !catalog.Has(p.Rated, "outdoor") {
			return false
		}
		return portMeets(&p.Ports[0], at)
	})
}
