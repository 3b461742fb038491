package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/source"
)

// A caution is printed where a plan has the kind of work that it is about, or a rule
// about it has something to say. The list is short on purpose: a wall of warnings is
// read by nobody. What one says stands in for the cautions of the rules it covers;
// those of other rules follow with their findings.
type caution struct {
	text    string
	concern func(*Case) bool
	covers  []string           // areas, and rules by name
	figures func(*Case) string // of this plan, after the text
}

// workCautions are in the order in which the work is done.
var workCautions = []caution{
	{"Work at height: use fall protection from 1.8 m (6 ft) up, 29 CFR 1926.501(b)(1), or from the local figure up. Nobody is on roofs, ladders or masts in wind, rain or ice, or with thunder about.",
		func(c *Case) bool { return c.anyWorkplace(workplace.fallsFar) }, nil, (*Case).heightFigures},
	{"Ladder: tie its top or let its rails stand above the landing, set its foot out by a quarter of its length, and bring none with metal rails near a power line.",
		func(c *Case) bool { return c.anyWorkplace(workplace.wantsLadder) }, nil, (*Case).ladderFigures},
	{"Power lines: stop where an overhead line, the service drop included, lies within the fall radius of the mast plus 3 m (10 ft). Treat every line as live and ask the utility.",
		func(c *Case) bool {
			return len(c.Plan.PowerLines) > 0 || !c.Vehicle() && c.anyWorkplace(workplace.outdoors)
		}, []string{"build/clearance"}, (*Case).fallFigures},
	{"Grounding and bonding belong to a licensed electrician wherever the law says so, with listed parts where the code asks for them; never take the building's own grounding conductor apart. An arrestor or a bonded mast lowers the risk of a strike nearby; neither is a lightning protection system or withstands a direct one.",
		(*Case).grounds, []string{"ground"}, nil},
	{"Holes through walls and floors are sealed against water outside, and one through a fire-rated wall or floor gets its rating back.",
		(*Case).makesHoles, nil, nil},
	{"Radio: power off before work at an antenna, and keep people at the distance that the plan gives.",
		func(c *Case) bool { return c.anyDevice((*bom.Device).Active) }, []string{"exposure"}, nil},
	{"Supply: isolate it before touching it; mains work belongs to a licensed electrician, and a battery lead is fused at the battery before it is connected.",
		func(c *Case) bool { return len(c.Graph.Wires) > 0 }, []string{"power"}, nil},
	{"Wind, masts and ballast: the figures are for screening. Roofs, parapets, chimneys, fixings, hills and ice are for a structural engineer to judge.",
		func(c *Case) bool {
			return !c.Vehicle() && c.anyDevice(func(d *bom.Device) bool { return d.Kind() == "mount" && !d.Place.Indoors() })
		}, []string{"build/wind", "build/mount"}, nil},
	{"Vehicle: keep cables and gear out of the way of air bags and belts, and ask the maker's body guide before drilling.",
		(*Case).Vehicle, []string{"build/airbag", "build/ground-plane"}, nil},
}

// localCode defers, on every report.
const localCode = "The figures are a planning aid. The adopted code, its local amendments, the authority having jurisdiction and the network operator decide; local rules can be stricter."

// cautions lists what to mind with the kinds of work in the plan, what the plan's
// profile and code have to say beside their figures, and what the rules with
// findings add. A waiver takes no caution away.
func (c *Case) cautions(findings []*Finding) []string {
	out := make([]string, 0, len(workCautions)+1)
	add := func(text string) {
		if text != "" && !slices.Contains(out, text) {
			out = append(out, text)
		}
	}
	var covered []string
	for _, w := range workCautions {
		if !w.concern(c) && !slices.ContainsFunc(findings, func(f *Finding) bool { return f.warns() && coveredBy(f.Rule, w.covers) }) {
			continue
		}
		text := w.text
		if w.figures != nil {
			text += w.figures(c)
		}
		add(text)
		covered = append(covered, w.covers...)
		if slices.Contains(w.covers, "ground") && c.Code != nil {
			addAll(add, c.Code.Cautions)
		}
	}
	if c.Profile != nil && len(c.Profile.Limits) == 0 {
		addAll(add, c.Profile.Cautions) // no finding of a limit carries them
	}
	for _, f := range findings {
		if f.warns() && !coveredBy(f.Rule, covered) {
			add(f.Rule.Caution)
		}
	}
	add(localCode)
	return out
}

// alike gives texts that many plans share one string: their figures are rounded, and
// thousands of plans say the same few things.
func (f *Firm) alike(texts []string) []string {
	for i, t := range texts {
		one, _ := f.texts.LoadOrStore(t, t)
		texts[i] = one.(string)
	}
	return texts
}

func addAll(add func(string), list []source.Val[string]) {
	for _, v := range list {
		add(v.V)
	}
}

// warns reports a finding whose rule's caution belongs on the report: one that holds,
// or that stands against the rule. What is merely not known yet warns of nothing.
func (f *Finding) warns() bool {
	return f.Weight == Hold || f.Weight == Punch && f.Outcome != Unknown
}

func coveredBy(r *Rule, covers []string) bool {
	return slices.Contains(covers, r.Area()) || slices.Contains(covers, r.Name)
}

// workplace is somewhere that the work of a plan goes on.
type workplace struct {
	place *bom.Place
	point source.Val[bom.Point]
}

func (w workplace) outdoors() bool { return w.place.Outdoors() }

// sixFeet is where fall protection begins, in metres; the metric figure of the rule
// is the lower one.
const sixFeet = 1.8

// wantsLadder is that high above ground, outdoors or at an entry, or outdoors at a
// height that nobody gives.
func (w workplace) wantsLadder() bool {
	if !w.point.Set {
		return w.place.Outdoors()
	}
	return w.point.V.Up >= sixFeet && (w.place.Outdoors() || w.place.Kind.V == "entry")
}

// fallsFar is the same on a roof or wall: at a vehicle people stand beside it, and at
// an entry inside as well.
func (w workplace) fallsFar() bool { return w.wantsLadder() && w.place.Kind.V == "outdoor" }

// anyWorkplace reports whether the work goes to a place of a kind: what is put up, and
// where lines and bonds go.
func (c *Case) anyWorkplace(is func(workplace) bool) bool {
	return slices.ContainsFunc(c.workplaces(), is)
}

// workplaces lists where the work of the plan goes on, found once.
func (c *Case) workplaces() []workplace {
	if c.work == nil {
		c.work = c.findWorkplaces()
	}
	return c.work
}

func (c *Case) findWorkplaces() []workplace {
	out := []workplace{}
	at := func(d *bom.Device) {
		if d != nil && d.Place != nil {
			out = append(out, workplace{d.Place, d.Point})
		}
	}
	node := func(n *bom.Node) {
		if n != nil {
			at(n.Device)
		}
	}
	pass := func(way []bom.Section) {
		for _, s := range way {
			out = append(out, workplace{s.Place, s.Place.Point})
		}
	}
	g := c.Graph
	for _, d := range g.Devices {
		if !d.Row.Existing.V {
			at(d)
		}
	}
	for _, x := range g.Cables {
		if x.Row.Existing.V {
			continue
		}
		pass(x.Way)
		for _, e := range x.Ends {
			for _, m := range e.Mates {
				node(m.Other(e))
			}
		}
	}
	for _, d := range g.Data {
		if !d.Row.Existing.V {
			pass(d.Way)
			node(d.From)
			node(d.To)
		}
	}
	for _, b := range g.Bonds {
		if !b.Row.Existing.V {
			at(b.From)
			at(b.To)
		}
	}
	return out
}

// grounds reports a plan that bonds something, protects a line, or has one that
// comes in from outdoors.
func (c *Case) grounds() bool {
	if c.Vehicle() {
		return false
	}
	return len(c.Graph.Bonds) > 0 || c.anyDevice(protects) || c.comesIn()
}

// makesHoles reports a plan whose lines come into a building or pass a riser or a
// plenum.
func (c *Case) makesHoles() bool {
	return !c.Vehicle() && (c.comesIn() || c.anyWorkplace(func(w workplace) bool {
		return w.place.Kind.V == "riser" || w.place.Kind.V == "plenum"
	}))
}

func (c *Case) comesIn() bool {
	for _, l := range c.leadIns() {
		if len(crossingsOf(l)) > 0 {
			return true
		}
	}
	return slices.ContainsFunc(c.dataRuns(), func(run dataRun) bool { return len(run.crossings()) > 0 })
}

func (c *Case) anyDevice(is func(*bom.Device) bool) bool {
	return slices.ContainsFunc(c.Graph.Devices, is)
}

func protects(d *bom.Device) bool {
	return d.Kind() == "arrestor" || d.Kind() == "data-arrestor"
}
