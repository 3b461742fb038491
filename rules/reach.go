package rules

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// AreaReach is one surveyed signal as it arrives in one area through one
// amplifier, and the way back.
type AreaReach struct {
	Area     *bom.Area
	Signal   *bom.Signal
	Chain    *BandChain
	Leg      *bom.Line // by the server antenna that serves it worst, of those named
	MHz      unit.MHz  // channel centre
	RSRP     Known[unit.DBm]
	Doubt    unit.DB // how far the path loss may be off, either way
	Terms    []ReachTerm
	Before   source.Val[float64]
	Up       Known[UplinkReach]
	Paths    []string // how the loss indoors was come by
	NetGain  unit.DB  // donor antenna, feed, gain, leg and server antenna together
	PathLoss unit.DB
}

// ReachTerm is one addend on the way from the site to the phone, positive where it
// adds.
type ReachTerm struct {
	What string
	DB   unit.DB
}

// UplinkReach is the phone's signal at the base station.
type UplinkReach struct {
	Level   unit.DBm
	Limited bool // the amplifier's rated output holds it down
	Needed  unit.DBm
	Terms   []ReachTerm
}

// The conventions of reach; each has a key in [house].
const (
	phoneDBm      = 23.0   // power class 3, TS 36.101 table 6.2.2-1 (memory)
	phoneGainDBi  = -3.0   // practice
	bodyLossDB    = 3.0    // practice
	fadeMarginDB  = 8.0    // 90 % of the area, practice
	referenceDBm  = 18.0   // reference signal of a base station, per resource element, ± 3 dB, practice
	sensitivityRB = -118.0 // base station, one resource block of 180 kHz: kTB −121.4 + NF 3 + SNR 0, practice
)

// reach follows every surveyed signal of a planned band to every area.
func (c *Case) reach() []*AreaReach {
	var out []*AreaReach
	for i := range c.Plan.Areas {
		a := &c.Plan.Areas[i]
		for _, x := range c.Chain().Bands {
			for j := range c.Plan.Signals {
				s := &c.Plan.Signals[j]
				ch, ok := channel(s)
				if !ok || !x.Band.Downlink.Covers(ch) || !areaWants(c, a, s) || !x.serves(a) {
					continue
				}
				out = append(out, c.reachOf(a, s, x, ch))
			}
		}
	}
	return out
}

// areaWants reports whether the signal's operator is wanted in the area: those that
// the area names, else those whose licence the plan uses, else all.
func areaWants(c *Case, a *bom.Area, s *bom.Signal) bool {
	if a.Operators.Set {
		return catalog.Has(a.Operators, s.Operator.V)
	}
	for _, o := range c.Plan.Operators {
		if o.ID == s.Operator.V {
			return true
		}
	}
	return len(c.Plan.Operators) == 0
}

// serves reports whether one of the amplifier's server antennas serves the area.
func (x *BandChain) serves(a *bom.Area) bool {
	for _, l := range x.Legs {
		if servedBy(a, l.To.Device) {
			return true
		}
	}
	return false
}

func servedBy(a *bom.Area, d *bom.Device) bool {
	return !a.ServedBy.Set || catalog.Has(a.ServedBy, d.ID)
}

func (c *Case) reachOf(a *bom.Area, s *bom.Signal, x *BandChain, ch unit.Span) *AreaReach {
	r := &AreaReach{Area: a, Signal: s, Chain: x, MHz: ch.Mid(), Before: before(a, s)}
	k := c.downward(r)
	r.RSRP = k
	if k.OK {
		r.Up = c.upward(r)
	} else {
		r.Up.Lacks = k.Lacks
	}
	return r
}

func before(a *bom.Area, s *bom.Signal) source.Val[float64] {
	for _, b := range a.Before.V {
		if b.V.Operator.V == s.Operator.V && b.V.Band.V == s.Band.V {
			return b.V.RSRP
		}
	}
	return source.Val[float64]{}
}

// downward is the RSRP in the area: the surveyed level, through the donor antenna
// and the greatest loss of the feed, the gain that runs, the greatest loss of the
// leg, the server antenna and the path indoors, less what a body takes.
func (c *Case) downward(r *AreaReach) Known[unit.DBm] {
	x, f := r.Chain, r.MHz
	if !x.Down.Runs.OK {
		return Known[unit.DBm]{Lacks: x.Down.Runs.Lacks}
	}
	if !x.Down.Runs.V.On {
		return unknown[unit.DBm](x.Amp.At, "a gain above 0 dB in "+x.Band.Name)
	}
	feed := x.Feeds[0]
	in := c.arriving(r.Signal, unit.Span{Lo: f, Hi: f}, feed)
	if !in.OK {
		return Known[unit.DBm]{Lacks: in.Lacks}
	}
	fs := c.Sum(feed, f)
	path, doubt, how, lacks := c.indoors(r.Area, f)
	if len(lacks) > 0 {
		return Known[unit.DBm]{Lacks: lacks}
	}
	leg, gain, loss, lacks := c.weakestLeg(r, f)
	if len(lacks) > 0 {
		return Known[unit.DBm]{Lacks: lacks}
	}
	r.Leg, r.Doubt, r.Paths, r.PathLoss = leg, doubt, how, path
	body := unit.DB(c.House().BodyLossDB.Or(bodyLossDB))
	r.Terms = []ReachTerm{
		{"donor antenna toward the site", in.V.Gain}, {"feed", -fs.Loss.Greatest},
		{"gain that runs (" + string(x.Down.Runs.V.By) + ")", x.Down.Runs.V.Gain},
		{"leg to " + leg.To.Device.ID, -loss}, {"server antenna", gain},
		{strings.Join(how, ", "), -path}, {"body", -body},
	}
	level := in.V.RSRP
	for _, t := range r.Terms {
		level = level.Plus(t.DB)
		if t.DB != -path && t.DB != -body {
			r.NetGain += t.DB
		}
	}
	return known(level)
}

// weakestLeg is the leg, of those whose antenna serves the area, that brings the
// least: the plan gives the distance to the nearest antenna and does not say which
// one that is.
func (c *Case) weakestLeg(r *AreaReach, f unit.MHz) (best *bom.Line, gain, loss unit.DB, lacks []Lack) {
	for _, l := range r.Chain.Legs {
		if !servedBy(r.Area, l.To.Device) {
			continue
		}
		sum, rng := c.Sum(l, f), antennaAt(l.To, f)
		switch {
		case !sum.Known():
			return nil, 0, 0, sum.Missing
		case rng == nil:
			return nil, 0, 0, []Lack{{"a gain of " + l.To.Name() + " at " + f.String(), l.To.At()}}
		}
		if g := unit.DB(rng.Gain.V); best == nil || g-sum.Loss.Greatest < gain-loss {
			best, gain, loss = l, g, sum.Loss.Greatest
		}
	}
	return best, gain, loss, nil
}

// indoors is the path loss from server antenna to phone: with walls, free space
// and the walls; without, the indoor model, which holds the walls already.
func (c *Case) indoors(a *bom.Area, f unit.MHz) (loss, doubt unit.DB, how []string, lacks []Lack) {
	if !a.Distance.Set {
		return 0, 0, nil, []Lack{{"distance of the area " + a.Name.V, a.At}}
	}
	metres := a.Distance.V.Metres()
	if !a.Walls.Set {
		kind := map[string]rf.Building{"residential": rf.Residential, "commercial": rf.Commercial}[a.Environment.V]
		v, ok := rf.IndoorLoss(kind, f, metres, a.Floors.V)
		if !ok {
			return 0, 0, nil, []Lack{{"a distance and floors that ITU-R P.1238 covers, for the area " + a.Name.V, a.Distance.At}}
		}
		return v, 0, []string{fmt.Sprintf("indoors %s (ITU-R P.1238-9, %s)", a.Distance.V, a.Environment.Or("office"))}, nil
	}
	var walls []unit.DB
	how = []string{fmt.Sprintf("%s of free space (ITU-R P.525)", a.Distance.V)}
	for _, w := range a.Walls.V {
		loss, off, source, lack := wallLoss(&w.V, f)
		if lack != "" {
			return 0, 0, nil, []Lack{{lack, w.At}}
		}
		walls = append(walls, loss)
		doubt = max(doubt, off)
		how = append(how, fmt.Sprintf("%s %s dB (%s)", w.V.Name.V, unit.Fixed(float64(loss), 1), source))
	}
	v, ok := rf.PathThrough(f, metres, walls...)
	if !ok {
		return 0, 0, nil, []Lack{{"a distance above zero for the area " + a.Name.V, a.Distance.At}}
	}
	return v, doubt, how, nil
}

// slab is a wall with its thickness: "plasterboard 12.5 mm".
var slab = regexp.MustCompile(`^(.*\S)\s+([0-9.]+)\s*mm$`)

// wallLoss is the plan's own figure, else that of the published tables.
func wallLoss(w *bom.Wall, f unit.MHz) (loss, doubt unit.DB, basis, lack string) {
	if w.LossDB.Set {
		v, ok := rf.Lookup(rfPoints(w.LossDB.V), unit.Span{}, f)
		if !ok {
			return 0, 0, "", "a loss of the wall " + source.Quote(w.Name.V)
		}
		return v, 0, "plan", ""
	}
	name, mm := w.Name.V, 0.0
	if m := slab.FindStringSubmatch(name); m != nil {
		name = m[1]
		mm, _ = strconv.ParseFloat(m[2], 64)
	}
	v, ok := rf.Wall(name, mm, f)
	if !ok {
		return 0, 0, "", "loss_db of the wall " + source.Quote(w.Name.V) + ", which no table here has at " + f.String()
	}
	return v.Loss, v.Tolerance, v.Basis, ""
}

// upward is the phone's signal at the base station over the same way. The path
// outdoors follows from the reference signal's power and what the survey received.
func (c *Case) upward(r *AreaReach) Known[UplinkReach] {
	x, f := r.Chain, r.Chain.Band.Uplink.Mid()
	switch {
	case !x.Up.Runs.OK:
		return Known[UplinkReach]{Lacks: x.Up.Runs.Lacks}
	case !x.Up.Spec.MaxOut.Set:
		return unknown[UplinkReach](x.Row.At, "max_out_dbm of "+x.Amp.Part.ID)
	}
	fs := c.Sum(x.Feeds[0], f)
	donor := antennaAt(x.Feeds[0].From, f)
	path, _, _, lacks := c.indoors(r.Area, f)
	leg, server, loss, more := c.weakestLeg(r, f)
	if lacks = append(lacks, more...); len(lacks) > 0 || leg == nil || donor == nil || !fs.Known() {
		return Known[UplinkReach]{Lacks: append(lacks, fs.Missing...)}
	}
	h := c.House()
	surveyed := unit.DBmOf(r.Signal.RSRP.V)
	if t := r.Signal.Through; t != nil {
		surveyed, _ = rf.AtIsotropic(surveyed, unit.DB(t.GainDBi.V), unit.DB(t.LossDB.V))
	}
	toBase, ok := rf.PathLossTo(unit.DBmOf(h.ReferenceDBm.Or(referenceDBm)), surveyed)
	if !ok {
		return unknown[UplinkReach](r.Signal.At, "a path to the base station")
	}
	up := rf.Uplink{Phone: unit.DBmOf(phoneDBm), Hand: unit.DB(h.PhoneGainDBi.Or(phoneGainDBi)), Body: unit.DB(h.BodyLossDB.Or(bodyLossDB)),
		Path: path, Server: server, Leg: loss, Gain: x.Up.Runs.V.Gain, MaxOut: unit.DBmOf(x.Up.Spec.MaxOut.V),
		Feed: fs.Loss.Greatest, Donor: unit.DB(donor.Gain.V) - offBeam(x.Feeds[0].From.Device, donor, r.Signal.Bearing), ToBase: toBase}
	level, limited, ok := up.AtBase()
	if !ok {
		return unknown[UplinkReach](x.Amp.At, "an uplink that adds up")
	}
	needed := unit.DBmOf(h.SensitivityDBm.Or(sensitivityRB)).Plus(unit.DB(h.FadeMarginDB.Or(fadeMarginDB)))
	return known(UplinkReach{Level: level, Limited: limited, Needed: needed, Terms: []ReachTerm{
		{"phone's antenna", up.Hand}, {"body", -up.Body}, {"path indoors", -path}, {"server antenna", server}, {"leg", -loss},
		{"gain that runs (" + string(x.Up.Runs.V.By) + ")", up.Gain}, {"feed", -up.Feed}, {"donor antenna", up.Donor}, {"path to the base station", -toBase},
	}})
}

// Ends says which end of the link limits it: the one whose margin is smaller; ""
// where one of them is not known.
func (r *AreaReach) Ends() string {
	if !r.RSRP.OK || !r.Up.OK || !r.Area.Target.Set {
		return ""
	}
	down := float64(r.RSRP.V.Value()) - r.Area.Target.V
	up := float64(r.Up.V.Level.Minus(r.Up.V.Needed))
	if up < down {
		return "uplink"
	}
	return "downlink"
}
