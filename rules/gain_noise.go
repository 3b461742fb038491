package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

var gainNoise = &Rule{
	Name:  "gain/noise",
	Title: "The noise that an amplifier puts out keeps the limit at its port, and disappears in the base station's own",
	Why:   "noise from a booster near a site desensitizes it for everybody; near sites are the ones that complain",
	Basis: []Basis{byProfile, {Document: "port noise kT0 + NF + gain; at the base station less donor gain, feed and path, 10 dB under −174 dBm/Hz + 3 dB", Kind: "common practice"},
		house("reference_dbm (18 dBm where it says nothing, ± 3 dB)")},
	Caution: mindOperator,
	Weight:  Punch,
	Lighter: "advice where only a limit that depends on the received level is in question and the amplifier keeps it by itself (network_protection)",
	Grave:   true,
	Check: func(c *Case, r *Report) {
		for _, direction := range directions {
			c.eachDirection(direction, func(x *BandChain, d *Direction) { checkPortNoise(c, r, x, d) })
		}
		for _, x := range c.Chain().Bands {
			if !x.Up.Span.Empty() && !x.Up.off() {
				checkBaseNoise(c, r, x)
			}
		}
	},
}

// off reports a direction that is known to have no gain left.
func (d *Direction) off() bool { return d.Runs.OK && !d.Runs.V.On }

// checkPortNoise holds the noise of one direction against the rows of the band, and
// where those hold against the ones that depend on the site, which an amplifier with
// network protection keeps by itself.
func checkPortNoise(c *Case, r *Report, x *BandChain, d *Direction) {
	q := x.query("noise_per_mhz", d.Name)
	a, site := c.gainLimit(x, q, false), c.gainLimit(x, q, true)
	if a.None() && site.None() || d.off() {
		return
	}
	k := c.portNoise(x, d)
	lacks := slices.Concat(k.Lacks, c.rowsLack(x, a), c.rowsLack(x, site))
	switch protects := x.Amp.Part.Amplifier.NetworkProtection.V; {
	case k.OK && a.Exceeded(k.V) && (!site.Exceeded(k.V) || a.Value < site.Value || protects):
		x.noisy(c, r.Fails, d, k.V, a)
	case k.OK && site.Exceeded(k.V) && protects:
		x.noisy(c, r.Advice, d, k.V, site).Says += "; its network protection keeps it there"
	case k.OK && site.Exceeded(k.V):
		x.noisy(c, r.Fails, d, k.V, site)
	case len(lacks) > 0:
		x.unassessed(r, "the "+d.Name+" noise at the port", dedupe(lacks))
	}
}

// noisy shows the sum.
func (x *BandChain) noisy(c *Case, report reportFunc, d *Direction, v float64, a limits.Assessment) *Finding {
	gain, nf := float64(d.Runs.V.Gain), d.Spec.NF.V
	return report(x.settingAt(), x.Amp.On(), "%s puts out %s dBm/MHz of %s noise in %s: %s + noise figure %s dB + gain that runs %s dB; the limit is %s dBm/MHz (%s)", x.Amp.ID,
		unit.Fixed(v, 2), d.Name, x.Band.Name, unit.Fixed(v-gain-nf, 2), plainFigure(nf), hundredths(gain), unit.Fixed(a.Value, 2), x.formula(a.Row)).
		Then("set it back: set = { %s = { back_off_db = %s } }, or take an amplifier with a lower noise figure", x.Band.Name, x.backOff(d, gain-(v-a.Value))).
		InBand(x.Band.Name).Over("noise_dbm_per_mhz", v, "limit_dbm_per_mhz", a.Value).By(c.citation(a.Row)).Beside(d.Spec.NF.At, "its noise figure")
}

// portNoise is the noise that the amplifier puts out in 1 MHz at the gain that
// runs. A direction that is off puts out none, and has no figure.
func (c *Case) portNoise(x *BandChain, d *Direction) Known[float64] {
	lacks := slices.Clone(d.Runs.Lacks)
	if d.Spec == nil || !d.Spec.NF.Set {
		lacks = append(lacks, x.noNF())
	}
	if !d.Runs.OK || d.off() || len(lacks) > 0 {
		return Known[float64]{Lacks: lacks}
	}
	n, ok := rf.PortNoise(rf.Stage{Gain: d.Runs.V.Gain, NF: unit.DB(d.Spec.NF.V)})
	return Known[float64]{V: n.Value(), OK: ok}
}

// What the trade reckons with at a base station (common practice).
const (
	baseNoise    unit.DB = 10 // how far under its own noise the amplifier's should stay
	baseNF       unit.DB = 3  // its noise figure
	referenceOff unit.DB = 3  // how far the power of its reference signal may be off, either way
)

// checkBaseNoise holds the uplink noise at the strongest site, the one with the
// least path, against that site's own. How strong it sends is taken from practice.
func checkBaseNoise(c *Case, r *Report, x *BandChain) {
	n, lacks := c.noiseAtBase(x)
	floor, ok := rf.BaseFloor(baseNF)
	if len(lacks) > 0 || !ok {
		x.unassessed(r, "the noise at the base station", lacks)
		return
	}
	v, limit := n.level.Value(), floor.Plus(-baseNoise).Value()
	report, spread := r.Fails, ""
	switch {
	case rf.Exceeds(v, limit):
	case rf.Exceeds(v+float64(referenceOff), limit):
		report, spread = r.AtWorst, " ± "+plainFigure(float64(referenceOff))+" dB"
	default:
		return
	}
	f := report(x.settingAt(), x.Amp.On(), "the noise of %s arrives at the site of %s in %s with %s dBm/MHz%s: port %s + donor antenna %s − feed %s − path %s dB; the site's own is %s dBm/MHz, and %s dB less is expected", x.Amp.ID, n.site.Operator.V, x.Band.Name, unit.Fixed(v, 2), spread,
		unit.Fixed(n.port.Value(), 2), unit.Fixed(float64(n.donor), 2), unit.Fixed(float64(n.feed), 2), unit.Fixed(float64(n.path), 2), unit.Fixed(floor.Value(), 2), plainFigure(float64(baseNoise))).
		Then("the path to that site is short: set it back, set = { %s = { back_off_db = %s } }, or aim the donor antenna at another site", x.Band.Name, x.backOff(&x.Up, float64(x.Up.Runs.V.Gain)-(v-limit))).
		InBand(x.Band.Name).Over("noise_dbm_per_mhz", v, "limit_dbm_per_mhz", limit).Beside(n.site.At, "the strongest site")
	if spread != "" {
		f.With("tolerance_db", float64(referenceOff))
	}
}

// noiseAtBase is the uplink noise on its way to a base station.
type noiseAtBase struct {
	site              *bom.Signal
	port, level       unit.DBm
	donor, feed, path unit.DB
}

// noiseAtBase is the uplink noise at the strongest surveyed site of the band, from
// the donor antenna that sends most of it there.
func (c *Case) noiseAtBase(x *BandChain) (noiseAtBase, []Lack) {
	port := c.portNoise(x, &x.Up)
	site, at := c.strongestSite(x)
	lacks := slices.Clone(port.Lacks)
	if site == nil {
		lacks = append(lacks, x.RSSI.Lacks...)
	}
	if len(lacks) > 0 {
		return noiseAtBase{}, dedupe(lacks)
	}
	path, ok := rf.PathLossTo(c.reference(), at)
	if !ok {
		return noiseAtBase{}, []Lack{{"a path to the site of " + site.Operator.V, site.At}}
	}
	var worst noiseAtBase
	for _, feed := range x.Feeds {
		f := x.Band.Uplink.Mid()
		sum, rng := c.Sum(feed, f), antennaAt(feed.From, f)
		if lacks := slices.Concat(sum.Missing, needGain(feed.From, rng)); len(lacks) > 0 {
			return noiseAtBase{}, lacks
		}
		n := noiseAtBase{site: site, port: unit.DBmOf(port.V), path: path, feed: sum.Loss.Least,
			donor: unit.DB(rng.Gain.V) - offBeam(feed.From.Device, rng, site.Bearing)}
		if n.level, ok = rf.NoiseAtBase(n.port, n.donor, n.feed, n.path); ok && (worst.site == nil || worst.level.Below(n.level)) {
			worst = n
		}
	}
	if worst.site == nil {
		return worst, []Lack{{"a feed", x.Amp.At}}
	}
	return worst, nil
}

// reference is the power of a base station's reference signal, per resource element.
func (c *Case) reference() unit.DBm { return unit.DBmOf(c.House().ReferenceDBm.Or(referenceDBm)) }
