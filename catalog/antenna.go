package catalog

import (
	"driploop/catalog/source"
	"driploop/catalog/unit"
)

// Antenna is what radiates, by ranges of frequency.
type Antenna struct {
	Ranges        []Range
	XPD           source.Val[float64] // cross-polar discrimination, dB
	PortIsolation source.Val[float64] // between its ports, dB
	MaxW          source.Val[float64]
	PIMdBc        source.Val[float64]
	DC            source.Val[string] // open, short
	WindAreaM2    source.Val[float64]
	SizeMM        source.Val[float64]    // largest side
	MastMM        source.Val[[2]float64] // least and greatest tube it clamps
	GroundPlane   source.Val[bool]
	Fixing        source.Val[string]
}

// Range is one stretch of spectrum in which an antenna works.
type Range struct {
	At    source.Place
	MHz   source.Val[unit.Span]
	Gain  source.Val[float64] // dBi
	VSWR  source.Val[float64]
	FB    source.Val[float64]    // front to back, dB
	Beam  source.Val[[2]float64] // half-power width, horizontal and vertical, degrees
	Ports source.Val[Words]      // that cover it; absent: all
}

// Serves reports whether the range belongs to a port.
func (r *Range) Serves(port string) bool { return !r.Ports.Set || Has(r.Ports, port) }

// RangesOf lists the ranges that belong to a port.
func (a *Antenna) RangesOf(port string) []*Range {
	var out []*Range
	for i := range a.Ranges {
		if a.Ranges[i].Serves(port) {
			out = append(out, &a.Ranges[i])
		}
	}
	return out
}

// RangeAt is the range of a port that holds a frequency, or nil.
func (a *Antenna) RangeAt(port string, f unit.MHz) *Range {
	for i := range a.Ranges {
		if r := &a.Ranges[i]; r.Serves(port) && r.MHz.Set && r.MHz.V.Contains(f) {
			return r
		}
	}
	return nil
}

func readAntenna(p *Part, k *source.Keys) {
	p.ports(k)
	p.Antenna = &Antenna{}
	p.Antenna.keys(k)
}

func (a *Antenna) keys(k *source.Keys) {
	source.Rows(k, &a.Ranges, "range", (*Range).keys, "what it covers, and how well")
	source.Opt(k, &a.XPD, "xpd_db", source.Between(0, 60, "dB"), "cross-polar discrimination")
	source.Opt(k, &a.PortIsolation, "port_isolation_db", source.Between(0, 100, "dB"), "isolation between its ports")
	source.Opt(k, &a.MaxW, "max_w", source.AtLeast(0, "W"), "greatest power")
	source.Opt(k, &a.PIMdBc, "pim_dbc", source.Between(-200, 0, "dBc"), "passive intermodulation at 2 × 43 dBm (IEC 62037)")
	source.Opt(k, &a.DC, "dc", source.OneOf("open", "short"), "what its port shows to direct current")
	source.Opt(k, &a.WindAreaM2, "wind_area_m2", source.AtLeast(0, "m²"), "area that the wind meets; a maker's effective area holds the drag already")
	source.Opt(k, &a.SizeMM, "size_mm", source.AtLeast(0, "mm"), "largest side")
	source.Opt(k, &a.MastMM, "mast_mm", source.Pair(source.AtLeast(0, "mm"), "[30, 50]"), "least and greatest tube it clamps")
	source.Opt(k, &a.GroundPlane, "needs_ground_plane", source.Flag, "works only on a metal surface")
	source.Opt(k, &a.Fixing, "fixing", source.OneOf("mast", "wall", "ceiling", "bolt", "magnet", "adhesive"), "how it is held")
}

func (r *Range) keys(k *source.Keys) {
	r.At = k.At()
	source.Need(k, &r.MHz, "mhz", span, "from and to")
	source.Need(k, &r.Gain, "gain_dbi", source.Between(-30, 40, "dBi"), "gain over isotropic")
	source.Opt(k, &r.VSWR, "vswr", source.Between(1, 20, ""), "greatest standing wave ratio; already in the gain")
	source.Opt(k, &r.FB, "front_to_back_db", source.Between(0, 60, "dB"), "front-to-back ratio")
	source.Opt(k, &r.Beam, "beam_deg", source.Pair(source.Between(0, 360, "degrees"), "[65, 60]"), "half-power width, horizontal and vertical")
	source.Opt(k, &r.Ports, "ports", source.ListOf(source.Name), "ports that cover the range; absent: all")
}
