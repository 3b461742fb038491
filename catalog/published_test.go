package catalog_test

import (
	"encoding/csv"
	"fmt"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/catalog"
	"driploop/catalog/unit"
)

// asked are a row's inputs by name.
type asked map[string]string

// answers are what the tables of published values on bands and connectors may ask
// for. Each answers with a figure or a word.
var answers = map[string]func(*testing.T, asked) string{
	"band uplink":         func(t *testing.T, a asked) string { return edges(a.band(t, "band").Uplink) },
	"band downlink":       func(t *testing.T, a asked) string { return edges(a.band(t, "band").Downlink) },
	"band duplex":         func(t *testing.T, a asked) string { return a.band(t, "band").Duplex },
	"band nr":             twin,
	"earfcn downlink mhz": channelNumber,
	"nr-arfcn mhz":        rasterNumber,
	"contains":            within,
	"mates":               meets,
}

func TestPublishedValuesHold(t *testing.T) {
	count := 0
	for _, name := range []string{"bands.csv", "mating.csv"} {
		rows := published(t, name)
		for _, row := range rows {
			id, quantity, expected, source := row[0], row[1], row[3], row[6]
			answer, known := answers[quantity]
			if !known {
				t.Errorf("%s: nobody answers %q", id, quantity)
				continue
			}
			tolerance, err := strconv.ParseFloat(row[4], 64)
			if err != nil {
				t.Errorf("%s: tolerance %q is no number", id, row[4])
				continue
			}
			if got := answer(t, readAsked(row[2])); !agree(got, expected, tolerance) {
				t.Errorf("%s %s %s: %s, expected %s (%s)", id, quantity, row[2], got, expected, source)
			}
			count++
		}
	}
	if count == 0 {
		t.Error("there is nothing to hold the tables against")
	}
	if !t.Failed() {
		t.Logf("%d published values hold", count)
	}
}

// published reads a table of check values without its heading.
func published(t *testing.T, name string) [][]string {
	f, err := os.Open("../testdata/published/" + name)
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	return rows[1:]
}

func readAsked(s string) asked {
	a := asked{}
	for _, part := range strings.Split(s, ";") {
		key, value, _ := strings.Cut(part, "=")
		a[key] = value
	}
	return a
}

// agree compares figures within the tolerance and words as they are.
func agree(got, expected string, tolerance float64) bool {
	g, err1 := strconv.ParseFloat(got, 64)
	e, err2 := strconv.ParseFloat(expected, 64)
	if err1 == nil && err2 == nil {
		return math.Abs(g-e) <= tolerance
	}
	return got == expected
}

func (a asked) band(t *testing.T, key string) catalog.Band {
	b, ok := catalog.LookBand(a[key])
	if !ok {
		t.Errorf("there is no band %q", a[key])
	}
	return b
}

func (a asked) number(t *testing.T, key string) int {
	n, err := strconv.Atoi(a[key])
	if err != nil {
		t.Errorf("input %s=%q is no whole number", key, a[key])
	}
	return n
}

// ohms is an impedance, or 0 where the row gives none.
func (a asked) ohms(t *testing.T, key string) float64 {
	if a[key] == "" {
		return 0
	}
	return float64(a.number(t, key))
}

func (a asked) face(t *testing.T, key string) catalog.Face {
	f, err := catalog.ParseFace(a[key])
	if err != nil {
		t.Error(err)
	}
	return f
}

func edges(s unit.Span) string {
	if s.Empty() {
		return "none"
	}
	return fmt.Sprintf("%v-%v", float64(s.Lo), float64(s.Hi))
}

// twin is the duplex mode of a band's NR twin; a name that 3GPP does not define
// for NR has none.
func twin(_ *testing.T, a asked) string {
	b, ok := catalog.LookBand(a["band"])
	if !ok {
		return "none"
	}
	return b.NR
}

func channelNumber(t *testing.T, a asked) string {
	f, ok := a.band(t, "band").EARFCN(a.number(t, "earfcn"))
	return frequency(f, ok)
}

func rasterNumber(t *testing.T, a asked) string {
	f, ok := catalog.NRARFCN(a.number(t, "arfcn"))
	return frequency(f, ok)
}

func frequency(f unit.MHz, ok bool) string {
	if !ok {
		return "unknown"
	}
	return strconv.FormatFloat(float64(f), 'g', -1, 64)
}

func within(t *testing.T, a asked) string {
	outer, inner := a.band(t, "outer"), a.band(t, "inner")
	return strconv.FormatBool(outer.Uplink.Covers(inner.Uplink) && outer.Downlink.Covers(inner.Downlink))
}

func meets(t *testing.T, a asked) string {
	m := catalog.Meet(a.face(t, "a"), a.face(t, "b"), a.ohms(t, "a_ohm"), a.ohms(t, "b_ohm"))
	switch m.Fit {
	case catalog.Mates:
		return "ok"
	case catalog.OtherMake:
		return "series"
	case catalog.SameShell:
		return "gender"
	case catalog.WrongCore:
		return "polarity"
	}
	return "impedance"
}
