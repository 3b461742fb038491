package rules

import (
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/rules/elec"
	"driploop/rules/rf"
)

var powerPoE = &Rule{
	Name:    "power/poe",
	Title:   "Power over a data line is of the kind that the gear takes, and gets to it over the length",
	Why:     "passive 48 V in a port for 24 V burns it, negotiated power leaves a passive port dark, and a class too low starts over at full load",
	Caution: "A passive injector puts its voltage on the line without asking. Read what both ends say before anything is plugged in.",
	Basis: []Basis{
		{"IEEE 802.3 clauses 33 and 145 (af, at, bt types 3 and 4): power and voltage at source and device", "2018", "standard", "copy"},
		{"IEEE 802.3 clauses 33 and 145: loop of a channel, 20 Ω for af, 12.5 Ω a pair set for the others", "2018", "standard", "memory"},
		{"ISO/IEC 11801-1 and TIA-568.2: channel of 100 m, solid copper", "2017", "standard", "memory"},
		practice("passive kinds run over two pairs out and back without any talk; their voltage at the gear is the injector's less the loss of the line")},
	Weight: Hold,
	Lighter: "Only where kinds of voltage differ is it a hold. Too low a class, too little power at the end, copper-clad aluminium, a cable or " +
		"protector not made for the kind, or more than 100 m are a punch.",
	Check: func(c *Case, r *Report) {
		for _, run := range c.supplies().runs {
			p := poeRun{c, r, run}
			p.check()
		}
	},
}

// poeRun is a data line with what is held against it.
type poeRun struct {
	c *Case
	r *Report
	dataRun
}

func (p *poeRun) check() {
	p.checkLength()
	a, okA := p.gives(0)
	b, okB := p.gives(1)
	give, take := p.giver()
	switch {
	case !okA || !okB:
		p.reportUnknownSource(okA)
	case a != "" && b != "":
		p.bothGive(a, b)
	case give < 0:
		p.checkUnfed()
	case take < 0:
		p.checkUnasked(give)
	default:
		p.checkKinds(give, take)
	}
}

// checkLength holds the channel between two devices against what Ethernet is made
// for, whether it carries power or not.
func (p *poeRun) checkLength() {
	metres, terms := 0.0, []string(nil)
	lines := p.lines()
	for _, l := range lines {
		metres += l.Row.Length.V.Metres()
		terms = append(terms, l.Row.Length.V.String()+" ("+l.Row.ID+")")
	}
	if !rf.Exceeds(metres, elec.Reach) {
		return
	}
	l := lines[len(lines)-1]
	sum := ""
	if len(terms) > 1 {
		sum = ": " + strings.Join(terms, " + ")
	}
	p.r.Fails(placeOr(l.Row.Length.At, l.Row.At), l.On(), "the data line from %s to %s is %s m long%s; Ethernet is made for %s m", p.port(0), p.port(1),
		plainFigure(Round(metres)), sum, plainFigure(elec.Reach)).
		Then("put a switch into the line, or move one of the two").Over("length_m", metres, "limit_m", elec.Reach).Lighter(Punch)
}

func (p *poeRun) reportUnknownSource(firstKnown bool) {
	side := 0
	if firstKnown {
		side = 1
	}
	if kind, known := p.takes(1 - side); known && kind == "" {
		return // nobody asks for power at the other end
	}
	d := p.ends[side]
	at, on := p.place(side)
	what := "which of its ports gives power (poe on the port)"
	if d.Part == nil {
		what = "the part of " + d.ID
	}
	p.r.Lacking(at, on, []Lack{{what, partOrDevice(d)}}, "the power from %s to %s", d.ID, p.port(1-side))
}

// bothGive reports two sources that face each other.
func (p *poeRun) bothGive(a, b string) {
	at, on := p.place(1)
	f := p.r.Fails(at, on, "%s gives %s and %s gives %s on the same line", p.port(0), poeWord(a), p.port(1), poeWord(b)).
		Then("plug one end into a port that gives no power").Beside(p.ends[0].At, "one source").Beside(p.ends[1].At, "the other")
	if !passive(a) && !passive(b) {
		f.Lighter(Punch)
	}
}

// checkUnfed looks at a line that nothing feeds.
func (p *poeRun) checkUnfed() {
	for i := range p.ends {
		kind, _ := p.takes(i)
		if kind == "" || p.elsewhere(p.ends[i]) {
			continue
		}
		other := p.ends[1-i]
		at, on := p.place(i)
		if other.Kind() == "data-arrestor" || other.Part == nil {
			p.r.Lacking(at, on, []Lack{{"what gives power behind " + other.ID, other.At}}, "the power of %s, which takes %s,", p.port(i), poeWord(kind))
			return
		}
		at, on = p.place(1 - i)
		p.r.Fails(at, on, "%s takes %s, and %s gives no power", p.port(i), poeWord(kind), p.port(1-i)).
			Then("%s", p.c.feedingPort(other, p.ends[i], kind)).Lighter(Punch).Beside(p.ends[i].At, "what is to be fed")
		return
	}
}

// elsewhere reports a device that has a wire of its own.
func (p *poeRun) elsewhere(d *bom.Device) bool {
	for _, w := range p.c.Graph.Wires {
		if w.Row.From.V.Name == d.ID || w.Row.To.V.Name == d.ID {
			return true
		}
	}
	return false
}

// feedingPort says which port of a source gives power, or which source would do.
func (c *Case) feedingPort(d, to *bom.Device, kind string) string {
	for _, n := range d.Nodes {
		if feedsPower(d) && n.Port.PoE.Set && n.Data == nil {
			return "plug the line into " + n.Name() + ", which gives " + poeWord(n.Port.PoE.V)
		}
	}
	return c.sourceFor(to, kind)
}

// sourceFor names an injector of the catalog for a kind of power.
func (c *Case) sourceFor(to *bom.Device, kind string) string {
	watt := 0.0
	if l := loadOf(to); l != nil {
		watt = l.W.V
	}
	p := c.best(c.Firm.Catalog.All(), func(p *catalog.Part) bool {
		if p.Kind.V != "injector" || !givesFor(p.Supply.PoE.V, kind) {
			return false
		}
		k, negotiated := elec.Kind(p.Supply.PoE.V)
		return negotiated && watt <= k.DeviceWatt() || !negotiated && watt <= p.Supply.Volts.V*p.Supply.Amps.V
	})
	if p == nil {
		return "feed " + to.ID + " from an injector of its kind, " + poeWord(kind) + "; the catalog has none"
	}
	return "feed " + to.ID + " from injector " + c.Firm.OnHand(p)
}

// givesFor reports whether a source of one kind does for gear that takes another.
func givesFor(gives, takes string) bool { return gives != "" && passesPower(gives, takes) }

// checkUnasked looks at power on a line to a port that takes none: a negotiated kind
// finds that out and gives none.
func (p *poeRun) checkUnasked(give int) {
	kind, _ := p.gives(give)
	other := p.ends[1-give]
	if !passive(kind) || other.Kind() == "data-arrestor" {
		return
	}
	at, on := p.place(1 - give)
	if _, known := p.takes(1 - give); !known {
		p.r.Lacking(at, on, []Lack{{"the part of " + other.ID, other.At}}, "what the %s of %s does to %s", poeWord(kind), p.port(give), other.ID)
		return
	}
	p.r.Fails(at, on, "%s puts %s on the line without asking, and %s takes no power", p.port(give), poeWord(kind), p.port(1-give)).
		Then("plug it into a port for power, or take the injector out").Beside(p.ends[give].At, "the source")
}

// checkKinds holds the kind that is given against the kind that is taken, and then
// what gets through.
func (p *poeRun) checkKinds(give, take int) {
	gives, _ := p.gives(give)
	takes, _ := p.takes(take)
	at, on := p.place(take)
	if !givesFor(gives, takes) {
		f := p.r.Fails(at, on, "%s gives %s; %s takes %s", p.port(give), poeWord(gives), p.port(take), poeWord(takes)).
			Then("%s", p.c.sourceFor(p.ends[take], takes)).Beside(p.ends[give].At, "the source").Beside(p.ends[take].At, "what is fed")
		switch {
		case !passive(gives) && !passive(takes):
			f.Says += ", a higher class"
			f.Lighter(Punch)
		default:
			f.Says += ": the kinds of voltage differ"
		}
		return
	}
	p.checkPassing(takes)
	if p.checkCables(takes) {
		p.checkReach(give, take, takes)
	}
}

// poeWord is how messages call a kind of power: "PoE at", "passive 24 V".
func poeWord(kind string) string {
	if passive(kind) {
		return kind
	}
	return "PoE " + kind
}

// passive reports a kind of power that is put on the line without asking.
func passive(kind string) bool { return strings.HasPrefix(kind, "passive") }

// passiveVolts is the voltage of a passive kind: 24 of "passive 24 V".
func passiveVolts(kind string) float64 {
	v, _ := strconv.ParseFloat(strings.TrimSuffix(strings.TrimPrefix(kind, "passive "), " V"), 64)
	return v
}
