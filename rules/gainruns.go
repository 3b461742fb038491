package rules

import (
	"slices"

	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/rf"
)

// isolationMargin is what the firm asks for above the gain.
func (c *Case) isolationMargin() unit.DB { return unit.DB(c.House().IsolationMarginDB.Or(15)) }

// gainRuns is the gain that one direction will run at, and what binds it: the least
// of what is set and of all ceilings. While a ceiling is not known the figure is the
// most that can run, and not known.
//
// The rated output is a ceiling of the downlink alone, whose input the survey tells.
// In the uplink what comes in changes with each phone that comes and goes; there the
// rated output holds the level of a phone down (reach), not the gain.
func (c *Case) gainRuns(x *BandChain, dir *Direction) Known[rf.Running] {
	switch {
	case !dir.Set.OK:
		return Known[rf.Running]{Lacks: dir.Set.Lacks}
	case dir.Set.V < 0:
		return known(rf.Running{By: rf.BySet}) // set back by more than it has: the band is off
	}
	all := c.protection(x, dir.Name).and(c.isolationCeiling(x))
	if dir.Name == "downlink" {
		all = x.outputCeiling(dir).and(all)
	}
	run, ok := rf.GainRuns(dir.Set.V, unit.DB(x.Amp.Part.Amplifier.StepDB.V), all.each...)
	return Known[rf.Running]{V: run, OK: ok, Lacks: dedupe(all.lacks)}
}

// ceilings are what bounds a gain from above, with what is missing to know all of
// them.
type ceilings struct {
	each  []rf.Ceiling
	lacks []Lack
}

func (a ceilings) and(b ceilings) ceilings {
	return ceilings{slices.Concat(a.each, b.each), slices.Concat(a.lacks, b.lacks)}
}

// openCeiling is one that something keeps from being known.
func openCeiling(by rf.Bound, lacks []Lack) ceilings {
	return ceilings{[]rf.Ceiling{{By: by}}, lacks}
}

// outputCeiling is the gain at which what comes in reaches the rated output.
func (x *BandChain) outputCeiling(dir *Direction) ceilings {
	switch {
	case !dir.rated():
		return openCeiling(rf.ByOutput, append([]Lack{x.noOutput()}, dir.Input.Lacks...))
	case !dir.Input.OK:
		return openCeiling(rf.ByOutput, dir.Input.Lacks)
	}
	return ceilings{each: []rf.Ceiling{rf.OutputCeiling(unit.DBmOf(dir.Spec.MaxOut.V), dir.Input.V)}}
}

// isolationCeiling is what the isolation carries. Phones in a cradle or on a wire
// have no server antenna that the donor antenna could hear.
func (c *Case) isolationCeiling(x *BandChain) ceilings {
	switch {
	case x.Apart.OK:
		return ceilings{each: []rf.Ceiling{rf.IsolationCeiling(x.Apart.V, c.isolationMargin())}}
	case x.coupling() != "antenna":
		return ceilings{}
	}
	return openCeiling(rf.ByIsolation, x.Apart.Lacks)
}

// protection is the least gain row that depends on the site, which an amplifier
// with network protection keeps by itself. A row that stays open could be lower than
// those that are known, and then the ceiling is not known.
func (c *Case) protection(x *BandChain, direction string) ceilings {
	switch {
	case !x.Amp.Part.Amplifier.NetworkProtection.V:
		return ceilings{}
	case c.Profile == nil:
		return openCeiling(rf.ByProtection, []Lack{c.lackProfile()})
	case !c.fits(x.Amp):
		return openCeiling(rf.ByProtection, []Lack{{"a limit profile that is made for " + x.Amp.ID, c.Plan.Job.Profile.At}})
	}
	q := x.query("gain", direction)
	_, bySite := limits.Split(c.Profile.Match(q))
	a := limits.Least(q, x.inputs(), bySite...)
	var out ceilings
	if a.Row != nil {
		out.each = append(out.each, rf.ProtectionCeiling(unit.DB(a.Value)))
	}
	if len(a.Open) > 0 {
		out = out.and(openCeiling(rf.ByProtection, x.lacking(a.Open)))
	}
	return out
}

// lackProfile is what is missing where no limit profile is named.
func (c *Case) lackProfile() Lack { return Lack{"a limit profile (profile = …)", c.JobAt()} }

// lacking names what the rows that stay open lack, in the words of the plan and
// the catalog.
func (x *BandChain) lacking(open []limits.Open) []Lack {
	var out []Lack
	for _, o := range open {
		for _, m := range o.Missing {
			out = append(out, x.lack(m)...)
		}
	}
	return dedupe(out)
}

// lack says what stands behind one input or selector of a row.
func (x *BandChain) lack(name string) []Lack {
	behind := map[string][]Lack{"RSSI": x.RSSI.Lacks, "MSCL": x.MSCL.Lacks, "BSCL": x.Loud.Lacks}[name]
	if len(behind) > 0 {
		return behind
	}
	switch name {
	case "class", "mobility", "isolation_control":
		return []Lack{{name + " of " + x.Amp.Part.ID, x.Amp.Part.At}}
	}
	return []Lack{{name, x.Amp.At}}
}

func dedupe(lacks []Lack) []Lack {
	seen := map[string]bool{}
	var out []Lack
	for _, l := range lacks {
		if !seen[l.What] {
			seen[l.What] = true
			out = append(out, l)
		}
	}
	return out
}

// runs lists the gain that runs in each band, for the top of a report.
func (c *Case) runs() []Runs {
	out := make([]Runs, 0, len(c.Chain().Bands))
	for _, x := range c.Chain().Bands {
		out = append(out, Runs{Device: x.Amp.ID, Band: x.Band.Name, Up: runsAt(x.Up.Runs), Down: runsAt(x.Down.Runs)})
	}
	return out
}

func runsAt(k Known[rf.Running]) RunsAt {
	switch {
	case !k.OK:
		return RunsAt{}
	case !k.V.On:
		return RunsAt{By: string(k.V.By)}
	}
	return RunsAt{On: true, Gain: float64(k.V.Gain), By: string(k.V.By)}
}
