package mech_test

import (
	"encoding/csv"
	"errors"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/rules/mech"
)

const table = "../../testdata/published/mech.csv"

// quantities are what the table of published and worked figures may ask for.
var quantities = map[string]func(*inputs) (float64, bool){
	"kz": func(in *inputs) (float64, bool) {
		return mech.Terrain{Factor: in.num("factor"), LeastFt: in.num("least_ft"), Alpha: in.num("alpha"), GradeFt: in.num("zg_ft")}.Kz(in.num("z_ft"))
	},
	"pressure":           pressure,
	"pressure psf of si": func(in *inputs) (float64, bool) { return scaled(1/newtonPerSquareMetre, in, pressure) },
	"pressure ratio": func(in *inputs) (float64, bool) {
		a, okA := mech.VelocityPressure(in.num("c"), in.num("v"))
		b, okB := mech.VelocityPressure(in.num("c"), in.num("other"))
		return ratio(a, b, okA && okB)
	},
	"free pressure": func(in *inputs) (float64, bool) { return mech.FreePressure(in.num("v")) },
	"free speed":    func(in *inputs) (float64, bool) { return mech.FreeSpeed(in.num("q")) },
	"speed by factors": func(in *inputs) (float64, bool) {
		q, ok := mech.FreePressure(in.num("v"))
		for _, k := range in.list("factors") {
			q *= k * k
		}
		if !ok {
			return 0, false
		}
		return mech.FreeSpeed(q)
	},
	"force":      force,
	"tube force": func(in *inputs) (float64, bool) { l, ok := tubeLoad(in); return l.Force, ok },
	"tube moment": func(in *inputs) (float64, bool) {
		l, ok := tubeLoad(in)
		if !ok {
			return 0, false
		}
		return mech.Moment(l)
	},
	"moment": func(in *inputs) (float64, bool) {
		var loads []mech.Load
		levers := in.list("levers")
		for i, f := range in.list("forces") {
			loads = append(loads, mech.Load{Force: f, Lever: levers[i]})
		}
		return mech.Moment(loads...)
	},
	"inertia": func(in *inputs) (float64, bool) { return mech.Tube{OD: in.num("od"), Wall: in.num("wall")}.Inertia() },
	"modulus": func(in *inputs) (float64, bool) { return mech.Tube{OD: in.num("od"), Wall: in.num("wall")}.Modulus() },
	"stress": func(in *inputs) (float64, bool) {
		return mech.Tube{OD: in.num("od_mm"), Wall: in.num("wall_mm")}.Stress(in.num("nm"))
	},
	"stress psi": stressPSI,
	"overturning": func(in *inputs) (float64, bool) {
		return mech.Overturning(in.num("weight"), in.num("base"), in.num("moment"))
	},
	"sliding": func(in *inputs) (float64, bool) {
		return mech.Sliding(in.num("weight"), in.num("friction"), in.num("force"))
	},
	"ballast": func(in *inputs) (float64, bool) {
		return mech.BallastFor(in.num("times"), in.num("base"), in.num("friction"), in.num("moment"), in.num("force"))
	},
	"bearing psf": func(in *inputs) (float64, bool) {
		return scaled(1/newtonPerSquareMetre, in, func(in *inputs) (float64, bool) { return mech.Bearing(in.num("kg"), in.num("m2")) })
	},
	"approach": func(in *inputs) (float64, bool) {
		return mech.ApproachSteps(in.num("kv"), in.num("least"), in.num("up_to"), in.num("step"), in.num("stretch"))
	},
	"separation": func(in *inputs) (float64, bool) {
		return mech.Separation(in.num("ki"), in.num("kc"), in.num("km"), in.num("l"))
	},
	"ladder foot": func(in *inputs) (float64, bool) { return mech.LadderFoot(in.num("length")) },
	"ladder angle": func(in *inputs) (float64, bool) {
		foot, ok := mech.LadderFoot(in.num("length"))
		if !ok {
			return 0, false
		}
		return math.Acos(foot/in.num("length")) * 180 / math.Pi, true
	},
	"fall gap": func(in *inputs) (float64, bool) {
		to := in.vec("to")
		return mech.FallGap(to.E, to.N, to.U, in.num("radius"))
	},
	"apart": func(in *inputs) (float64, bool) { return mech.Apart(in.vec("p"), in.vec("a"), in.vec("b")) },
}

// Units of the United States in those of the SI: the exact inch and pound, and the
// standard acceleration of free fall.
const (
	metrePerInch         = 0.0254
	newtonPerPound       = 0.45359237 * 9.80665
	newtonPerSquareMetre = newtonPerPound / (0.3048 * 0.3048) // of 1 lbf/ft²
	pascalPerPSI         = newtonPerPound / (metrePerInch * metrePerInch)
)

func pressure(in *inputs) (float64, bool) {
	var factors []float64
	if in.has("factors") {
		factors = in.list("factors")
	}
	return mech.VelocityPressure(in.num("c"), in.num("v"), factors...)
}

func force(in *inputs) (float64, bool) {
	if in.has("effective") {
		return mech.Force(in.num("q"), in.num("gust"), mech.EffectiveArea(in.num("effective")))
	}
	area, _ := mech.Drag(in.num("area"), in.num("cf"))
	return mech.Force(in.num("q"), in.num("gust"), area)
}

func tubeLoad(in *inputs) (mech.Load, bool) {
	return mech.TubeLoad(in.num("q"), in.num("gust"), in.num("cf"), in.num("od"), in.num("from"), in.num("to"))
}

func stressPSI(in *inputs) (float64, bool) {
	tube := mech.Tube{OD: in.num("od_in") * metrePerInch * 1000, Wall: in.num("wall_in") * metrePerInch * 1000}
	mpa, ok := tube.Stress(in.num("inlbf") * newtonPerPound * metrePerInch)
	return mpa * 1e6 / pascalPerPSI, ok
}

func scaled(by float64, in *inputs, of func(*inputs) (float64, bool)) (float64, bool) {
	v, ok := of(in)
	return v * by, ok
}

func ratio(a, b float64, ok bool) (float64, bool) {
	if !ok {
		return 0, false
	}
	return a / b, true
}

// TestPublished holds every row of the table against the package. A row that expects
// "refused" carries a figure that was published and is wrong; "unknown" is outside
// what a formula holds for.
func TestPublished(t *testing.T) {
	seen, held := map[string]bool{}, 0
	for _, row := range readRows(t) {
		id, quantity, source, proof := row[0], row[1], row[6], row[7]
		if id == "" || seen[id] || source == "" || proof != "read" && proof != "memory" && proof != "calculated" {
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

func readRows(t *testing.T) [][]string {
	t.Helper()
	f, err := os.Open(table)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	if got := strings.Join(rows[0], ","); got != "id,quantity,inputs,expected,tolerance,unit,source,proof" {
		t.Fatalf("the header is %q", got)
	}
	return rows[1:]
}

func checkRow(row []string) error {
	compute := quantities[row[1]]
	if compute == nil {
		return errors.New("no such quantity")
	}
	in := parseInputs(row[2])
	published := math.NaN()
	if row[3] == "refused" {
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
	tolerance, err := strconv.ParseFloat(row[4], 64)
	switch {
	case err != nil || !(tolerance >= 0):
		return fmt.Errorf("tolerance %q is no number", row[4])
	case row[3] == "unknown" && (ok || got != 0):
		return fmt.Errorf("gives %g, where nothing is known", got)
	case row[3] == "unknown":
		return nil
	case !ok:
		return errors.New("gives nothing")
	case row[3] == "refused" && !(math.Abs(got-published) > tolerance):
		return fmt.Errorf("agrees with %g, which is known to be wrong", published)
	case row[3] == "refused":
		return nil
	}
	want, err := strconv.ParseFloat(row[3], 64)
	if err != nil || !(math.Abs(got-want) <= tolerance) {
		return fmt.Errorf("gives %.7g, published %s, tolerance %g", got, row[3], tolerance)
	}
	return nil
}

// TestMissingInputIsNeverAFigure runs the same rows with one number after the other
// taken away (NaN): nothing may come out, neither a figure nor NaN.
func TestMissingInputIsNeverAFigure(t *testing.T) {
	tried := 0
	for _, row := range readRows(t) {
		if _, err := strconv.ParseFloat(row[3], 64); err != nil {
			continue
		}
		for pair := range strings.SplitSeq(row[2], ";") {
			key, value, _ := strings.Cut(pair, "=")
			words := strings.Fields(value)
			for i, kept := range words {
				words[i] = "NaN"
				in := parseInputs(strings.Replace(row[2], pair, key+"="+strings.Join(words, " "), 1))
				if got, ok := quantities[row[1]](in); ok || got != 0 {
					t.Errorf("%s %s: %g without a number for %s", row[0], row[1], got, key)
				}
				words[i] = kept
				tried++
			}
		}
	}
	if tried < 250 {
		t.Errorf("only %d numbers were taken away", tried)
	}
}

// inputs are the "key=value;key=value" of a row; every key must be asked for.
type inputs struct {
	values map[string]string
	asked  map[string]bool
	err    error
}

func parseInputs(s string) *inputs {
	in := &inputs{values: map[string]string{}, asked: map[string]bool{}}
	for pair := range strings.SplitSeq(s, ";") {
		k, v, ok := strings.Cut(pair, "=")
		if !ok || in.values[k] != "" {
			in.err = errors.Join(in.err, fmt.Errorf("input %q is no key=value, or given twice", pair))
		}
		in.values[k] = v
	}
	return in
}

func (in *inputs) has(key string) bool { return in.values[key] != "" }

func (in *inputs) list(key string) []float64 {
	in.asked[key] = true
	var out []float64
	for _, word := range strings.Fields(in.values[key]) {
		v, err := strconv.ParseFloat(word, 64)
		in.err = errors.Join(in.err, err)
		out = append(out, v)
	}
	if out == nil {
		in.err = errors.Join(in.err, fmt.Errorf("input %q is missing", key))
	}
	return out
}

func (in *inputs) num(key string) float64 {
	if l := in.list(key); len(l) == 1 {
		return l[0]
	}
	in.err = errors.Join(in.err, fmt.Errorf("input %q is not one number", key))
	return math.NaN()
}

func (in *inputs) vec(key string) mech.Vec {
	if l := in.list(key); len(l) == 3 {
		return mech.Vec{E: l[0], N: l[1], U: l[2]}
	}
	in.err = errors.Join(in.err, fmt.Errorf("input %q is not three numbers", key))
	return mech.Vec{}
}
