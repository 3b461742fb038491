package rf_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// TestPublished holds every row of the table of published and worked figures
// against the package. A row that expects "refused" carries a figure that was
// published and is wrong: the package must know better. "unknown" is outside the
// validity of the formula.
func TestPublished(t *testing.T) {
	rows := readRows(t, filepath.Join("..", "..", "testdata", "published", "rf.csv"))
	proofs := map[string]bool{"read": true, "memory": true, "calculated": true, "common practice": true}
	seen := map[string]bool{}
	held := 0
	for _, row := range rows {
		id, quantity, source, proof := row[0], row[1], row[6], row[7]
		if seen[id] || id == "" || source == "" || !proofs[proof] {
			t.Errorf("%s: an ID is given once, with a source and one of the proofs", id)
		}
		seen[id] = true
		if err := checkRow(row); err != nil {
			t.Errorf("%s %s: %v (%s, %s)", id, quantity, err, source, proof)
			continue
		}
		held++
	}
	if held < 90 {
		t.Errorf("%d published values hold, at least 90 are wanted", held)
	}
	t.Logf("%d published values hold", held)
}

func readRows(t *testing.T, path string) [][]string {
	t.Helper()
	f, err := os.Open(path)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	const header = "id,quantity,inputs,expected,tolerance,unit,source,proof"
	if got := strings.Join(rows[0], ","); got != header {
		t.Fatalf("the header is %q, not %q", got, header)
	}
	return rows[1:]
}

// checkRow runs one row and says what is wrong with it or with the package.
func checkRow(row []string) error {
	quantity, expected := row[1], row[3]
	compute := quantities[quantity]
	if compute == nil {
		return errors.New("no such quantity")
	}
	in, err := parseInputs(row[2])
	if err != nil {
		return err
	}
	published := math.NaN()
	if expected == "refused" {
		published = in.num("published")
	}
	got, ok := compute(in)
	if in.err != nil {
		return in.err
	}
	for key := range in.values {
		if !in.asked[key] {
			return fmt.Errorf("input %q is not used", key)
		}
	}
	if expected == "unknown" {
		if ok || got != 0 {
			return fmt.Errorf("gives %g, where nothing is known", got)
		}
		return nil
	}
	return compare(got, ok, expected, published, row[4])
}

func compare(got float64, ok bool, expected string, published float64, tolerance string) error {
	if !ok {
		return errors.New("gives nothing")
	}
	tol, err := strconv.ParseFloat(tolerance, 64)
	if err != nil || !(tol >= 0) {
		return fmt.Errorf("tolerance %q is no number", tolerance)
	}
	if expected == "refused" {
		if !(math.Abs(got-published) > tol) {
			return fmt.Errorf("agrees with %g, which is known to be wrong", published)
		}
		return nil
	}
	want, err := strconv.ParseFloat(expected, 64)
	if err != nil {
		return err
	}
	if !(math.Abs(got-want) <= tol) {
		return fmt.Errorf("gives %.6g, published %.6g, tolerance %g", got, want, tol)
	}
	return nil
}

// TestMissingInputIsNeverAFigure runs the same rows with one number after the other
// taken away (NaN): nothing may come out, neither a figure nor NaN.
func TestMissingInputIsNeverAFigure(t *testing.T) {
	counts := map[string]bool{"blocks": true, "khz": true, "floors": true, "ways": true, "antennas": true, "columns": true}
	plain := map[string]bool{"dbi from dbd": true, "eirp of erp": true, "per 100 m": true, "power sum": true} // nothing to be unknown
	tried := 0
	for _, row := range readRows(t, filepath.Join("..", "..", "testdata", "published", "rf.csv")) {
		if _, err := strconv.ParseFloat(row[3], 64); err != nil || plain[row[1]] {
			continue
		}
		for pair := range strings.SplitSeq(row[2], ";") {
			key, value, _ := strings.Cut(pair, "=")
			words := strings.Fields(value)
			for i := range words {
				if _, err := strconv.ParseFloat(words[i], 64); err != nil || counts[key] {
					continue
				}
				kept := words[i]
				words[i] = "NaN"
				in, err := parseInputs(strings.Replace(row[2], pair, key+"="+strings.Join(words, " "), 1))
				if err != nil {
					t.Fatal(err)
				}
				if got, ok := quantities[row[1]](in); ok || got != 0 {
					t.Errorf("%s %s: %g without a number for %s", row[0], row[1], got, key)
				}
				words[i] = kept
				tried++
			}
		}
	}
	if tried < 500 {
		t.Errorf("only %d numbers were taken away", tried)
	}
}
