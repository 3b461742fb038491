package rules

import (
	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/unit"
)

// The build rules look at what holds an install up, what it runs through and what
// the weather does to it. Their mechanics are in package mech; what a code gives is
// a row of the plan's code, and what no code gives is a key of the house.
var buildRules = []*Rule{buildWind, buildClearance, buildGroundPlane, buildBend, buildRating,
	buildMount, buildOutdoorJoint, buildHeat, buildAirbag}

// What the house asks where it says nothing.
const (
	defaultBallastFactor = 1.5           // of overturning and sliding
	defaultRoofFriction  = 0.4           // the least of what a ballast guide gives
	defaultLineClearance = unit.MM(3048) // 10 ft, where the code is silent
	defaultBendPerOD     = 5.0           // one fixed bend of braided coax
	defaultClosedRiseC   = 15.0          // what the sun adds under a roof or behind glass
	defaultPlaneWaves    = 0.25          // of metal around an antenna that needs it
)

// Cautions of the build rules.
const (
	cautionStructure = "Figures of wind, masts and ballast are for screening, on flat open ground. Hills, roof edges, ice, hurricanes, parapets, chimneys, " +
		"what fixings hold in the wall and what a roof carries are for a licensed structural engineer."
	cautionLine = "Stop where an overhead line, the service drop included, lies within the fall radius plus 3 m (10 ft). Treat every line as live and ask the utility; " +
		"no metal ladder, mast or pole is raised near one."
	cautionVehicleBody = "Ask the maker's body guide before drilling, and keep cables and gear out of the way of air bags and belts."
	cautionFirestop    = "A hole through a fire-rated wall or floor gets its rating back; the authority having jurisdiction decides what that is."
)

// standing lists what stands on a device itself, in the order of the plan. What has
// a place of its own elsewhere, as a copy can, does not stand there.
func (c *Case) standing(m *bom.Device) []*bom.Device {
	if c.stood == nil {
		c.stood = map[*bom.Device][]*bom.Device{}
		for _, d := range c.Graph.Devices {
			if d.Stands != nil && (d.Place == nil || d.Place == d.Stands.Place) {
				c.stood[d.Stands] = append(c.stood[d.Stands], d)
			}
		}
	}
	return c.stood[m]
}

// tubeKind says what a mount has: a tube of its own, none because it only clamps
// one, or something that nobody knows.
type tubeKind int

const (
	tubeUnknown tubeKind = iota
	ownTube
	noTube
)

// tubeOf tells a mast from a bracket: a bracket gives the tubes it takes as a pair
// and has no wall.
func tubeOf(m *bom.Device) tubeKind {
	mt := mountOf(m)
	switch {
	case mt == nil:
		return tubeUnknown
	case mt.WallMM.Set, mt.MastMM.Set && mt.MastMM.V[0] == mt.MastMM.V[1]:
		return ownTube
	case mt.MastMM.Set:
		return noTube
	}
	return tubeUnknown
}

func mountOf(d *bom.Device) *catalog.Mount {
	if d.Part == nil {
		return nil
	}
	return d.Part.Mount
}

// unresolved reports a device that names a part which the catalog does not have;
// part/unknown says so, and what depends on it stays silent.
func unresolved(d *bom.Device) bool { return d.Part == nil && d.Row.Part.Set }

// radiates reports an antenna, or a radio with one of its own.
func radiates(d *bom.Device) bool {
	return d.Kind() == "antenna" || d.Part != nil && d.Part.Antenna != nil && len(d.Part.Antenna.Ranges) > 0
}

// constants reads named figures of a code row; the first that is missing is named.
func constants(row interface{ Constant(string) (float64, bool) }, names ...string) ([]float64, string) {
	var out []float64
	for _, n := range names {
		v, ok := row.Constant(n)
		if !ok {
			return nil, n
		}
		out = append(out, v)
	}
	return out, ""
}
