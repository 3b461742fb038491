// Package rf is the physics of the tool: pure numbers in and out, every decibel.
//
// It reads from the antenna inward. A cable's points become a fit (cable.go),
// mated pairs, tables and impedance steps add to it (mate.go, table.go,
// mismatch.go), and their three sums, least, nominal and greatest, travel
// together as one Loss (line.go). Cascade gives gain and noise figure of a chain,
// CompositeInput what arrives at the amplifier, GainRuns what the amplifier makes
// of it and what binds it. From there: radiated power (eirp.go), coupling to the
// phone (mscl.go), isolation between its antennas (pattern.go, isolation.go),
// uplink noise (noise.go), power density near people (density.go), the way to the
// phone indoors (path.go, p2040.go, walls.go, p1238.go, reach.go), through the
// facade (p2109.go), and what several antennas are worth (mimo.go). Limits are
// compared in one place, limitcmp.go.
//
// Losses and path losses are positive ratios, gains are positive where they gain.
// Frequencies are in MHz, cable lengths in whole millimetres, distances through
// the air in metres. Levels are unit.DBm.
//
// A function whose formula holds only within bounds says so in its comment and
// answers (value, false) outside them: not known, never a guess and never NaN.
// Callers must look at the second result; the first is then zero.
//
// Each formula names its document. How sure the source is stands beside it:
// "read" in the document or an open implementation of it, "memory" where it was
// written down without the text at hand, "calculated" where it follows from
// definitions, "common practice" where the trade does so without a document.
package rf

import (
	"math"

	"driploop/catalog/unit"
)

// known is the one door through which computed ratios leave: NaN and infinity
// are no figures.
func known(v float64) (unit.DB, bool) {
	v, ok := figure(v)
	return unit.DB(v), ok
}

// knownLevel is known for levels.
func knownLevel(l unit.DBm) (unit.DBm, bool) {
	if !finite(l.Value()) {
		return unit.DBm{}, false
	}
	return l, true
}

// figure is known for plain numbers.
func figure(v float64) (float64, bool) {
	if !finite(v) {
		return 0, false
	}
	return v, true
}

func finite(v float64) bool { return !math.IsNaN(v) && !math.IsInf(v, 0) }

// positive is false for NaN as well.
func positive(v float64) bool { return v > 0 && finite(v) }

// ratio turns decibels into a power ratio.
func ratio(d unit.DB) float64 { return math.Pow(10, float64(d)/10) }

// decibels turns a power ratio into decibels.
func decibels(r float64) float64 { return 10 * math.Log10(r) }
