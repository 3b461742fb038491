package rules_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

const publishedDir = "../testdata/published"

// publishedTables are the tables of published and worked values, with how many
// rows and numbers are wanted at least, and with what the rows may ask for. They
// are run here, because this package may know all that they are held against.
var publishedTables = []publishedTable{
	{name: "rf", least: 90, leastTaken: 500, quantities: figures(rfQuantities)},
	{name: "limits", leastTaken: 70, quantities: limitQuantities},
	{name: "bands", quantities: catalogQuantities},
	{name: "mating", quantities: catalogQuantities},
	{name: "mech", least: 90, leastTaken: 250, quantities: figures(mechQuantities)},
	{name: "elec", least: 60, leastTaken: 80, quantities: figures(elecQuantities)},
	{name: "practice", leastTaken: 10, quantities: practiceQuantities},
}

// publishedProofs are how sure a row's source is.
var publishedProofs = []string{"read", "copy", "memory", "calculated", "common practice"}

type publishedTable struct {
	name       string
	least      int // rows that hold
	leastTaken int // numbers that can be taken away from them
	quantities map[string]quantity
}

// quantity answers a row in writing: with a figure, with "unknown" or with other
// words.
type quantity func(*inputs) string

// figures are quantities that know nothing but a figure or "unknown".
func figures(list map[string]func(*inputs) (float64, bool)) map[string]quantity {
	out := map[string]quantity{}
	for name, compute := range list {
		out[name] = func(in *inputs) string { return figure(compute(in)) }
	}
	return out
}

// unknownYet is before a figure that stands beside the word that nothing is known.
const unknownYet = "unknown, yet "

// figure is a figure in writing. What is not known must not come with one.
func figure(v float64, ok bool) string {
	switch {
	case ok:
		return written(v)
	case v != 0:
		return unknownYet + written(v)
	}
	return "unknown"
}

// written has all digits, so that reading it again gives the same number.
func written(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

// publishedRow is a row of a table. It expects a figure, or words as they are; a
// figure that was published and is known to be wrong is an input of the row, which
// expects "refused".
type publishedRow struct{ id, quantity, inputs, expected, tolerance, source, proof string }

// TestPublished holds every row of every table against the project.
func TestPublished(t *testing.T) {
	entries, err := os.ReadDir(publishedDir)
	if err != nil {
		t.Fatal(err)
	}
	for _, e := range entries {
		if !claimed(e.Name()) {
			t.Errorf("no table claims %s", e.Name())
		}
	}
	total, each, ids := 0, []string{}, map[string]bool{}
	for _, table := range publishedTables {
		t.Run(table.name, func(t *testing.T) {
			held, complaints := table.hold(t, table.text(t), ids)
			for _, c := range complaints {
				t.Error(c)
			}
			total += held
			each = append(each, fmt.Sprintf("%s %d", table.name, held))
		})
	}
	t.Logf("%d published values hold (%s)", total, strings.Join(each, ", "))
}

// claimed reports whether a file of the folder is read by a test.
func claimed(name string) bool {
	return name == filepath.Base(workedPage) ||
		slices.ContainsFunc(publishedTables, func(p publishedTable) bool { return name == p.name+".csv" })
}

func (p publishedTable) text(t *testing.T) string {
	b, err := os.ReadFile(filepath.Join(publishedDir, p.name+".csv"))
	if err != nil {
		t.Fatal(err)
	}
	return string(b)
}

// hold counts the rows that hold and says what is wrong with the others. An ID is
// given once over all tables; those seen are kept in ids.
func (p publishedTable) hold(t *testing.T, text string, ids map[string]bool) (held int, complaints []string) {
	rows, err := readPublished(text)
	if err != nil {
		return 0, []string{err.Error()}
	}
	for _, r := range rows {
		if r.id == "" || ids[r.id] {
			err = errors.New("an ID is given once")
		} else {
			err = p.check(t, r)
		}
		ids[r.id] = true
		if err != nil {
			complaints = append(complaints, fmt.Sprintf("%s %s %s: %v (%s, %s)", r.id, r.quantity, r.inputs, err, r.source, r.proof))
			continue
		}
		held++
	}
	if wanted := max(1, p.least); held < wanted {
		complaints = append(complaints, fmt.Sprintf("%d published values hold, at least %d are wanted", held, wanted))
	}
	return held, complaints
}

func readPublished(text string) ([]publishedRow, error) {
	records, err := csv.NewReader(strings.NewReader(text)).ReadAll()
	if err != nil {
		return nil, err
	}
	const header = "id,quantity,inputs,expected,tolerance,unit,source,proof"
	if len(records) == 0 || strings.Join(records[0], ",") != header {
		return nil, fmt.Errorf("the header is not %q", header)
	}
	var out []publishedRow
	for _, r := range records[1:] {
		out = append(out, publishedRow{id: r[0], quantity: r[1], inputs: r[2], expected: r[3], tolerance: r[4], source: r[6], proof: r[7]})
	}
	return out, nil
}

// check runs one row and says what is wrong with it or with the project.
func (p publishedTable) check(t *testing.T, r publishedRow) error {
	compute := p.quantities[r.quantity]
	switch {
	case compute == nil:
		return errors.New("no such quantity")
	case r.source == "" || !slices.Contains(publishedProofs, r.proof):
		return errors.New("a row has a source and one of the proofs")
	}
	in := readInputs(t, r.inputs)
	wrong := math.NaN()
	if in.has("published") && r.expected == "refused" {
		wrong = in.num("published")
	}
	got := compute(in)
	if err := in.used(); err != nil {
		return err
	}
	return r.compare(got, wrong)
}

// compare holds figures within the tolerance, words as they are, and against a
// wrong figure that it is not met.
func (r publishedRow) compare(got string, wrong float64) error {
	expected, notFigure := strconv.ParseFloat(r.expected, 64)
	known := !math.IsNaN(wrong)
	if notFigure != nil && !known {
		return r.compareWords(got)
	}
	tolerance, err := strconv.ParseFloat(r.tolerance, 64)
	if err != nil || !(tolerance >= 0) || math.IsInf(tolerance, 0) {
		return fmt.Errorf("tolerance %q is no number", r.tolerance)
	}
	v, err := strconv.ParseFloat(got, 64)
	switch {
	case err != nil:
		return fmt.Errorf("gives %q, where a figure is known", got)
	case known && !(math.Abs(v-wrong) > tolerance):
		return fmt.Errorf("agrees with %g, which is known to be wrong", wrong)
	case !known && !(math.Abs(v-expected) <= tolerance):
		return fmt.Errorf("gives %.7g, published %s, tolerance %g", v, r.expected, tolerance)
	}
	return nil
}

func (r publishedRow) compareWords(got string) error {
	if v, err := strconv.ParseFloat(r.tolerance, 64); r.tolerance != "" && !(err == nil && v >= 0) {
		return fmt.Errorf("tolerance %q is no number", r.tolerance)
	}
	if got != r.expected {
		return fmt.Errorf("gives %q, expected %q", got, r.expected)
	}
	return nil
}
