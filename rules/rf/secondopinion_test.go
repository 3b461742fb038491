package rf_test

import (
	"encoding/csv"
	"fmt"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// secondOpinionFile names the environment variable with the file that the figures
// are written to.
const secondOpinionFile = "DRIPLOOP_SECOND_OPINION"

// TestSecondOpinion writes figures of this package with their inputs to a file, one
// a row, for .ci/second-opinion.py to compute again with a network library that
// works on scattering matrices and knows none of our formulas.
func TestSecondOpinion(t *testing.T) {
	name := os.Getenv(secondOpinionFile)
	switch {
	case name == "" && os.Getenv("DRIPLOOP_CI") != "":
		t.Fatalf("%s names no file, and nothing may be left out here", secondOpinionFile)
	case name == "":
		t.Skipf("left out: the second opinion on cascades and mismatch; bash .ci/run has it, and so has %s=FILE with .ci/second-opinion.py FILE", secondOpinionFile)
	}
	var o opinion
	o.cascades()
	o.steps()
	o.runs()
	o.mismatches()
	o.pads()
	if len(o.refused) > 0 {
		t.Fatalf("the package knows no figure for %s", strings.Join(o.refused, ", "))
	}
	if err := writeRows(name, append([][]string{{"kind", "inputs", "figure", "ours"}}, o.rows...)); err != nil {
		t.Fatal(err)
	}
	t.Logf("%d figures written to %s", len(o.rows), name)
}

func writeRows(name string, rows [][]string) error {
	f, err := os.Create(name)
	if err != nil {
		return err
	}
	if err := csv.NewWriter(f).WriteAll(rows); err != nil {
		f.Close()
		return err
	}
	return f.Close()
}

// opinion collects rows.
type opinion struct {
	rows    [][]string
	refused []string
}

func (o *opinion) add(kind string, inputs []float64, figure string, ours float64, ok bool) {
	var in []string
	for _, v := range inputs {
		in = append(in, strconv.FormatFloat(v, 'g', -1, 64))
	}
	joined := strings.Join(in, " ")
	if !ok {
		o.refused = append(o.refused, fmt.Sprintf("%s of %s (%s)", figure, kind, joined))
		return
	}
	o.rows = append(o.rows, []string{kind, joined, figure, strconv.FormatFloat(ours, 'g', -1, 64)})
}

// cascades are chains of stages, given as pairs of gain and noise figure in dB. A
// passive stage has its loss for a noise figure.
func (o *opinion) cascades() {
	for _, stages := range [][]rf.Stage{
		{rf.Attenuator(3.2)},
		{{Gain: 20, NF: 5}},
		{rf.Attenuator(3.44), {Gain: 63, NF: 5}, rf.Attenuator(6.47)},
		{rf.Attenuator(7.41), {Gain: 63, NF: 5}, rf.Attenuator(3.44)},
		{{Gain: 15, NF: 1.5}, rf.Attenuator(20), {Gain: 30, NF: 6}},
		{rf.Attenuator(0.3), {Gain: 18, NF: 0.8}, rf.Attenuator(12), {Gain: 10, NF: 4}, rf.Attenuator(1)},
	} {
		var in []float64
		for _, s := range stages {
			in = append(in, float64(s.Gain), float64(s.NF))
		}
		total, ok := rf.Cascade(stages...)
		o.add("cascade", in, "gain_db", float64(total.Gain), ok)
		o.add("cascade", in, "nf_db", float64(total.NF), ok)
	}
}

// steps are single steps between two impedances in ohms.
func (o *opinion) steps() {
	for _, z := range [][]float64{{50, 75}, {75, 50}, {50, 93}, {50, 25}, {50, 51}, {75, 300}} {
		vswr, ok := rf.StepVSWR(z[0], z[1])
		o.add("step", z, "vswr", vswr, ok)
		loss, ok := rf.ReturnLoss(vswr)
		o.add("step", z, "return_loss_db", float64(loss), ok)
		run, ok := rf.MismatchRun(vswr)
		o.add("step", z, "least_db", float64(run.Least), ok)
		o.add("step", z, "nominal_db", float64(run.Nominal), ok)
		o.add("step", z, "greatest_db", float64(run.Greatest), ok)
	}
}

// runs are lines whose impedance changes several times; how long the stretches
// between the steps are is not known.
func (o *opinion) runs() {
	for _, z := range [][]float64{
		{50, 75, 50}, {75, 50, 75}, {50, 75, 93}, {50, 93, 75, 50}, {50, 75, 50, 75}, {50, 75, 50, 75, 50},
	} {
		var vswrs []float64
		for i := range z[1:] {
			v, _ := rf.StepVSWR(z[i], z[i+1])
			vswrs = append(vswrs, v)
		}
		run, ok := rf.MismatchRun(vswrs...)
		o.add("run", z, "least_db", float64(run.Least), ok)
		o.add("run", z, "greatest_db", float64(run.Greatest), ok)
	}
}

// mismatches are loads of a VSWR, alone and behind a line of some loss.
func (o *opinion) mismatches() {
	for _, v := range []float64{1.05, 1.22, 1.5, 2, 3, 10} {
		in := []float64{v}
		share, ok := rf.ReflectedShare(v)
		o.add("load", in, "reflected_share", share, ok)
		loss, ok := rf.MismatchLoss(v)
		o.add("load", in, "mismatch_loss_db", float64(loss), ok)
		back, ok := rf.ReturnLoss(v)
		o.add("load", in, "return_loss_db", float64(back), ok)
		again, ok := rf.VSWR(back)
		o.add("load", in, "vswr", again, ok)
		for _, line := range []float64{0.5, 6.32} {
			through, ok := rf.ReturnLossThrough(back, unit.DB(line))
			o.add("load-behind", []float64{v, line}, "return_loss_db", float64(through), ok)
		}
	}
}

// pads are minimum loss pads between two impedances.
func (o *opinion) pads() {
	for _, z := range [][]float64{{75, 50}, {50, 93}} {
		series, shunt, loss, ok := rf.MinimumLossPad(z[0], z[1])
		o.add("pad", append(z, series, shunt), "loss_db", float64(loss), ok)
	}
}
