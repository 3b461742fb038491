package rules

import (
	"slices"

	"driploop/bom"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// StageChain is the way of a signal from the first antenna's port to one server
// antenna, or back.
type StageChain struct {
	From, To string
	Start    unit.DBm // at the first antenna's port
	Stages   []BudgetStage
	Lacks    []Lack
}

// BudgetStage is one stage with what the chain has come to behind it. Losses are
// the greatest; the gain is the one that runs.
type BudgetStage struct {
	At    string
	Gain  unit.DB
	Total unit.DB
	NF    unit.DB // of the chain so far
	Level unit.DBm
	Held  bool // at the rated output: the amplifier turns itself down
}

// chains follows the direction stage by stage, one chain for each pair of a donor
// and a server antenna.
func (c *Case) chains(x *BandChain, d *Direction, f unit.MHz) []StageChain {
	var out []StageChain
	for _, feed := range x.Feeds {
		for _, leg := range x.Legs {
			out = append(out, c.stageChain(x, d, feed, leg, f))
		}
	}
	return out
}

func (c *Case) stageChain(x *BandChain, d *Direction, feed, leg *bom.Line, f unit.MHz) StageChain {
	first, last, from, to := feed, leg, feed.From, leg.To
	if d.Name == "uplink" {
		first, last, from, to = leg, feed, leg.To, feed.From
	}
	ch := StageChain{From: from.Name(), To: to.Name()}
	one, two, start := c.Sum(first, f), c.Sum(last, f), c.startLevel(x, d, first, f)
	ch.Lacks = dedupe(slices.Concat(one.Missing, two.Missing, x.stageLacks(d), start.Lacks))
	if len(ch.Lacks) > 0 {
		return ch
	}
	ch.Start = start.V
	names := []string{first.Kind.String(), x.Amp.ID, last.Kind.String()}
	stages := []rf.Stage{rf.Attenuator(one.Loss.Greatest), {Gain: d.Runs.V.Gain, NF: unit.DB(d.Spec.NF.V)}, rf.Attenuator(two.Loss.Greatest)}
	if !ch.follow(names, stages, d.ceiling()) {
		ch.Lacks = []Lack{{"stages that add up", x.Amp.At}}
	}
	return ch
}

// stageLacks is what is missing of the amplifier as a stage.
func (x *BandChain) stageLacks(d *Direction) []Lack {
	lacks := slices.Clone(d.Runs.Lacks)
	if d.Spec == nil || !d.Spec.NF.Set {
		lacks = append(lacks, x.noNF())
	}
	if d.off() {
		lacks = append(lacks, Lack{"a gain above 0 dB", x.Amp.At})
	}
	return lacks
}

// noNF is what is missing where the part states no noise figure.
func (x *BandChain) noNF() Lack { return Lack{"nf_db of " + x.Amp.Part.ID, x.Row.At} }

// ceiling is the level that the amplifier does not go beyond, or nil where its part
// does not say.
func (d *Direction) ceiling() *unit.DBm {
	if !d.rated() {
		return nil
	}
	v := unit.DBmOf(d.Spec.MaxOut.V)
	return &v
}

// follow adds the stages up. Behind the amplifier, the second of them, the level is
// the rated output at most.
func (ch *StageChain) follow(names []string, stages []rf.Stage, rated *unit.DBm) bool {
	totals, ok := rf.Cumulate(stages...)
	if !ok {
		return false
	}
	level := ch.Start
	for i, t := range totals {
		s := BudgetStage{At: names[i], Gain: stages[i].Gain, Total: t.Gain, NF: t.NF}
		level = level.Plus(s.Gain)
		if i == 1 && rated != nil && rf.Exceeds(level.Value(), rated.Value()) {
			level, s.Held = *rated, true
		}
		s.Level = level
		ch.Stages = append(ch.Stages, s)
	}
	return true
}

// startLevel is the level at the first antenna's port: in the downlink the composite
// that the survey brings there, which is known at the amplifier's port behind the
// least loss; in the uplink a phone of 23 dBm at the distance of certification.
func (c *Case) startLevel(x *BandChain, d *Direction, first *bom.Line, f unit.MHz) Known[unit.DBm] {
	sum := c.Sum(first, f)
	switch {
	case !sum.Known():
		return Known[unit.DBm]{Lacks: sum.Missing}
	case d.Name == "downlink" && x.RSSI.OK:
		return known(x.RSSI.V.Plus(sum.Loss.Least))
	case d.Name == "downlink":
		return Known[unit.DBm]{Lacks: x.RSSI.Lacks}
	}
	return c.phoneAt(first.To, f)
}

// phoneAt is what a phone brings to a server antenna's port at the distance of
// certification.
func (c *Case) phoneAt(server *bom.Node, f unit.MHz) Known[unit.DBm] {
	metres := rf.BuildingPhoneMetres
	if c.Vehicle() {
		metres = rf.VehiclePhoneMetres
	}
	rng := antennaAt(server, f)
	if rng == nil {
		return Known[unit.DBm]{Lacks: []Lack{noGain(server)}}
	}
	loss, ok := rf.MSCL(f, metres, unit.DB(rng.Gain.V), 0)
	if !ok {
		return unknown[unit.DBm](server.At(), "a coupling loss to "+server.Name())
	}
	return known(unit.DBmOf(phoneDBm).Plus(-loss))
}
