package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// AreaReach is one surveyed signal as it arrives in one area through one
// amplifier, and the way back.
//
// The plan gives one distance, to the nearest of the server antennas that serve the
// area, and does not say which one that is. So the one that brings least stands at
// that distance, and what the others add is left out: more cannot be promised. By
// power they could add up to 10·log10 of their number in the downlink; in the uplink
// the base station hears the best of them.
type AreaReach struct {
	Area   *bom.Area
	Signal *bom.Signal
	Chain  *BandChain
	Feed   *bom.Line // from the donor antenna that brings most of the signal
	MHz    unit.MHz  // channel centre
	RSRP   Known[unit.DBm]
	Terms  []ReachTerm
	Doubt  unit.DB // how far the walls may be off, either way
	Before source.Val[float64]
	Up     Known[UplinkReach]
}

// ReachTerm is one addend on the way from the site to the phone, positive where it
// adds.
type ReachTerm struct {
	What string
	DB   unit.DB

	path *indoors // in place of What where the addend is the way indoors
}

// Words names the addend. The way indoors is put into words here, because most
// areas need none.
func (t ReachTerm) Words() string {
	if t.path != nil {
		return t.path.words()
	}
	return t.What
}

// UplinkReach is the phone's signal at the base station.
type UplinkReach struct {
	Level   unit.DBm
	Limited bool // the amplifier's rated output holds it down
	Needed  unit.DBm
	Doubt   unit.DB // how far the walls and the site's power may be off, either way
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

// Reach is what arrives in each area, computed once.
func (c *Case) Reach() []*AreaReach {
	ch := c.Chain()
	if ch.reach == nil {
		ch.reach = c.reach()
	}
	return ch.reach
}

// reach follows every surveyed signal of a planned band to every area.
func (c *Case) reach() []*AreaReach {
	out := []*AreaReach{}
	for i := range c.Plan.Areas {
		a := &c.Plan.Areas[i]
		for _, x := range c.Chain().Bands {
			for j := range c.Plan.Signals {
				s := &c.Plan.Signals[j]
				ch, ok := channel(s)
				if ok && x.Band.Downlink.Covers(ch) && c.wantsIn(a, s.Operator.V) && x.serves(a) {
					out = append(out, c.reachOf(a, s, x, ch.Mid()))
				}
			}
		}
	}
	return out
}

func (c *Case) reachOf(a *bom.Area, s *bom.Signal, x *BandChain, f unit.MHz) *AreaReach {
	r := &AreaReach{Area: a, Signal: s, Chain: x, MHz: f, Before: before(a, s)}
	r.RSRP = c.downward(r)
	r.Up = c.upward(r)
	return r
}

// wanted lists the operators that are wanted in an area: those that it names, else
// those whose licence the plan uses. Without either all are.
func (c *Case) wanted(a *bom.Area) []string {
	var out []string
	if a.Operators.Set {
		for _, o := range a.Operators.V {
			if o.Set {
				out = append(out, o.V)
			}
		}
		return out
	}
	for _, o := range c.Plan.Operators {
		out = append(out, o.ID)
	}
	return out
}

func (c *Case) wantsIn(a *bom.Area, operator string) bool {
	wanted := c.wanted(a)
	for _, o := range wanted {
		if o == operator {
			return true
		}
	}
	return len(wanted) == 0
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

func before(a *bom.Area, s *bom.Signal) source.Val[float64] {
	for _, b := range a.Before.V {
		if b.Set && b.V.Operator.V == s.Operator.V && b.V.Band.V == s.Band.V {
			return b.V.RSRP
		}
	}
	return source.Val[float64]{}
}

// Ends says which end of the link limits it: the one whose margin is smaller; ""
// where one of them is not known.
func (r *AreaReach) Ends() string {
	if !r.RSRP.OK || !r.Up.OK || !r.Area.Target.Set {
		return ""
	}
	down := r.RSRP.V.Value() - r.Area.Target.V
	up := float64(r.Up.V.Level.Minus(r.Up.V.Needed))
	if up < down {
		return "uplink"
	}
	return "downlink"
}
