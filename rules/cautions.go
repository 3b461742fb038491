package rules

import "driploop/bom"

// A caution is printed where a plan has the kind of work that it is about. The
// list is short on purpose: a wall of warnings is read by nobody.
type caution struct {
	text    string
	concern func(*Case) bool
	figures func(*Case) string // of this plan, after the text
}

// workCautions are in the order in which the work is done.
var workCautions = []caution{
	{"Work at height: use fall protection from 1.8 m (6 ft) up, 29 CFR 1926.501(b) as read in 2026, or the local figure; nobody on roofs, ladders or masts in wind, rain, ice or with thunder about.",
		func(c *Case) bool { return c.anyDevice(atHeight) }, (*Case).heightFigures},
	{"Power lines: stop where an overhead line, the service drop included, lies within the fall radius of the mast plus 3 m (10 ft). Treat every line as live and ask the utility.",
		func(c *Case) bool {
			return c.anyDevice(func(d *bom.Device) bool { return d.Place.Outdoors() && !c.Vehicle() })
		}, (*Case).fallFigures},
	{"Grounding and bonding belong to a licensed electrician wherever the law says so; never take the building's own grounding conductor apart. An arrestor or a bonded mast lowers the risk and is no lightning protection system.",
		func(c *Case) bool { return len(c.Graph.Bonds) > 0 || c.anyDevice(protects) }, nil},
	{"Radio: power off before work at an antenna, and keep people at the distance that the plan gives.",
		func(c *Case) bool { return len(c.Chain().Bands) > 0 }, nil},
	{"Supply: isolate it before touching it; mains work belongs to a licensed electrician, and a battery lead is fused at the battery before it is connected.",
		func(c *Case) bool { return len(c.Graph.Wires) > 0 }, nil},
	{"Roof, parapet and ballast loads are for a structural engineer to judge; the tool only counts.",
		func(c *Case) bool {
			return c.anyDevice(func(d *bom.Device) bool { return d.Kind() == "mount" && d.Place.Outdoors() && !c.Vehicle() })
		}, nil},
	{"Vehicle: keep cables and gear out of the way of air bags and belts, and ask the maker's body guide before drilling.",
		func(c *Case) bool { return c.Vehicle() }, nil},
}

// localCode defers, on every report.
const localCode = "The adopted code, local amendments, the authority having jurisdiction and the network operator decide; local rules can be stricter."

// cautions lists what to mind with the kinds of work in the plan, and what the
// rules that have something to say add to it.
func (c *Case) cautions(findings []*Finding) []string {
	var out []string
	add := func(text string) {
		for _, have := range out {
			if have == text {
				return
			}
		}
		if text != "" {
			out = append(out, text)
		}
	}
	for _, w := range workCautions {
		if !w.concern(c) {
			continue
		}
		text := w.text
		if w.figures != nil {
			text += w.figures(c)
		}
		add(text)
	}
	for _, f := range findings {
		if f.Outcome != Advice && f.Weight == Hold && f.Rule.Area() == "gain" {
			add(f.Rule.Caution)
		}
	}
	add(localCode)
	return out
}

func (c *Case) anyDevice(is func(*bom.Device) bool) bool {
	for _, d := range c.Graph.Devices {
		if is(d) {
			return true
		}
	}
	return false
}

// atHeight is 6 ft above ground or more, or outdoors at a height that the plan
// does not give.
func atHeight(d *bom.Device) bool {
	if !d.Place.Outdoors() || d.Row.Existing.V || d.Place.Kind.V == "vehicle-skin" {
		return false
	}
	return !d.Point.Set || d.Point.V.Up >= 1.8
}

func protects(d *bom.Device) bool {
	return d.Kind() == "arrestor" || d.Kind() == "data-arrestor"
}
