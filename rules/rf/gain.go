package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Bound names what keeps an amplifier's gain where it is.
type Bound string

// What can bind the gain.
const (
	BySet        Bound = "set"        // the installer's setting
	ByOutput     Bound = "output"     // rated output less input
	ByProtection Bound = "protection" // the network protection limit
	ByIsolation  Bound = "isolation"  // isolation less its margin
)

// Ceiling is the most gain that something leaves, if it is known.
type Ceiling struct {
	By    Bound
	Gain  unit.DB
	Known bool
}

// OutputCeiling is the gain at which an input reaches the rated output.
func OutputCeiling(maxOut, in unit.DBm) Ceiling {
	return ceiling(ByOutput, maxOut.Minus(in))
}

// IsolationCeiling is the gain that the isolation between the antennas carries.
func IsolationCeiling(isolation, margin unit.DB) Ceiling {
	return ceiling(ByIsolation, isolation-margin)
}

// ProtectionCeiling is the limit that the amplifier keeps by itself.
func ProtectionCeiling(limit unit.DB) Ceiling { return ceiling(ByProtection, limit) }

func ceiling(by Bound, gain unit.DB) Ceiling {
	g, ok := known(float64(gain))
	return Ceiling{by, g, ok}
}

// Running is the gain of one band in one direction as it will run.
type Running struct {
	Gain    unit.DB // no figure while the band is off
	By      Bound   // what binds it; of equals the first in the order given
	BackOff unit.DB // below the set gain, in whole steps
	On      bool    // a band that would have to run below 0 dB is off
	Missing []Bound // ceilings that are not known; Gain is then the most that can run
}

// GainRuns is the least of the set gain and the ceilings, with the back-off from
// the set gain rounded up to whole steps of the amplifier's control (0: stepless).
// It is known only when every ceiling is; else the Running tells what is missing.
func GainRuns(set, step unit.DB, ceilings ...Ceiling) (Running, bool) {
	if !(set >= 0) || !(step >= 0) || !finite(float64(set)) || !finite(float64(step)) {
		return Running{}, false
	}
	run := Running{By: BySet}
	least := set
	for _, c := range ceilings {
		switch {
		case !c.Known || !finite(float64(c.Gain)):
			run.Missing = append(run.Missing, c.By)
		case Below(float64(c.Gain), float64(least)):
			least, run.By = c.Gain, c.By
		}
	}
	run.BackOff = wholeSteps(set-least, step)
	run.On = !Below(float64(set-run.BackOff), 0)
	if run.On {
		run.Gain = max(0, set-run.BackOff)
	}
	return run, len(run.Missing) == 0
}

// wholeSteps rounds up, but not over a step that is hit exactly.
func wholeSteps(d, step unit.DB) unit.DB {
	if step == 0 {
		return d
	}
	return step * unit.DB(math.Ceil(float64(d/step)-Slack))
}
