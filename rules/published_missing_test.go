package rules_test

import (
	"slices"
	"strconv"
	"strings"
	"testing"
)

// publishedNothingMissing are quantities for which nothing follows from a number
// that is taken away, with the reason.
var publishedNothingMissing = map[string]string{
	"dbi from dbd":      "a plain conversion",
	"eirp of erp":       "a plain conversion",
	"watts":             "a plain conversion",
	"power sum":         "a plain sum",
	"per 100 m":         "a sum of the table's own",
	"antenna gain cap":  "a sum of the table's own",
	"ohm solid":         "a product of the table's own",
	"covered per cent":  "a share of the table's own",
	"conductor":         "a size is read from text, and refused there",
	"distance":          "a length is read from text, and refused there",
	"mates":             "a series is read from text, and refused there",
	"left out":          "a plan is read from text, and refused there",
	"left out mhz":      "a plan is read from text, and refused there",
	"cable fit":         "a part is read from text, and refused there",
	"cable fit expects": "a part is read from text, and refused there",
}

// publishedLeaks are quantities known to let something out where a number is
// missing. One that lets nothing out any more is to be taken off.
var publishedLeaks = map[string]string{}

// publishedPasses are words that let something pass.
var publishedPasses = []string{"allowed", "inside", "yes", "holds", "ok", "true"}

// TestMissingInputIsNeverAFigure runs the same rows with one number after the other
// taken away (NaN): nothing may come out, neither a figure, nor NaN, nor a pass.
func TestMissingInputIsNeverAFigure(t *testing.T) {
	met := map[string]bool{} // quantities of the two lists that belong there
	for _, table := range publishedTables {
		rows, err := readPublished(table.text(t))
		if err != nil {
			t.Fatal(err)
		}
		taken := 0
		for _, r := range rows {
			if publishedNothingMissing[r.quantity] != "" {
				met[r.quantity] = true
				continue
			}
			n, out := table.comesOutWithout(t, r)
			taken += n
			switch {
			case len(out) == 0:
			case publishedLeaks[r.quantity] != "":
				met[r.quantity] = true
			default:
				t.Errorf("%s %s: %s", r.id, r.quantity, strings.Join(out, ", "))
			}
		}
		if taken < table.leastTaken {
			t.Errorf("%s: only %d numbers were taken away, at least %d are wanted", table.name, taken, table.leastTaken)
		}
	}
	for _, list := range []map[string]string{publishedNothingMissing, publishedLeaks} {
		for name, why := range list {
			if !met[name] {
				t.Errorf("%q (%s) need not be listed any more", name, why)
			}
		}
	}
}

// comesOutWithout takes the numbers of a row away. It counts them and says what
// came out all the same. A count without a number can't be asked for.
func (p publishedTable) comesOutWithout(t *testing.T, r publishedRow) (taken int, out []string) {
	for _, less := range withoutNumbers(r.inputs) {
		in := readInputs(t, less)
		got := p.quantities[r.quantity](in)
		if in.countless {
			continue
		}
		taken++
		if comesOut(got) {
			out = append(out, less+" gives "+got)
		}
	}
	return taken, out
}

// withoutNumbers are the inputs of a row with NaN in place of one number after the
// other. The figure that a row knows to be wrong is no input of the quantity.
func withoutNumbers(inputs string) []string {
	var out []string
	pairs := strings.Split(inputs, ";")
	for i, pair := range pairs {
		key, value, _ := strings.Cut(pair, "=")
		if key == "published" {
			continue
		}
		words := strings.Fields(value)
		for j, word := range words {
			if _, err := strconv.ParseFloat(word, 64); err != nil {
				continue
			}
			less := slices.Clone(words)
			less[j] = "NaN"
			with := slices.Clone(pairs)
			with[i] = key + "=" + strings.Join(less, " ")
			out = append(out, strings.Join(with, ";"))
		}
	}
	return out
}

// comesOut reports whether an answer gives a figure, or NaN, or lets something pass.
func comesOut(got string) bool {
	_, err := strconv.ParseFloat(strings.TrimPrefix(got, unknownYet), 64)
	return err == nil || slices.Contains(publishedPasses, got)
}
