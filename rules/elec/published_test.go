package elec

import (
	"encoding/csv"
	"math"
	"os"
	"strconv"
	"strings"
	"testing"

	"driploop/catalog/unit"
)

// ask is one row's inputs by name.
type ask map[string]string

// quantities are what the table of published values may ask for; false is
// "unknown".
var quantities = map[string]func(*testing.T, ask) (float64, bool){
	"ohm per 1000 ft solid": func(t *testing.T, a ask) (float64, bool) {
		r, ok := Solid(a.mm2(t), a.num(t, "celsius"))
		return r * 0.3048, ok
	},
	"ohm per 1000 ft stranded": func(t *testing.T, a ask) (float64, bool) {
		r, ok := Stranded(a.mm2(t), a.num(t, "celsius"))
		return r * 0.3048, ok
	},
	"ohm per km stranded": func(t *testing.T, a ask) (float64, bool) { return Stranded(a.mm2(t), a.num(t, "celsius")) },
	"ohm solid": func(t *testing.T, a ask) (float64, bool) {
		r, ok := Solid(a.mm2(t), a.num(t, "celsius"))
		return r * a.num(t, "metres") / 1000, ok
	},
	"resistance ratio": func(t *testing.T, a ask) (float64, bool) {
		from, okFrom := Solid(1, a.num(t, "celsius"))
		to, okTo := Solid(1, a.num(t, "to"))
		return to / from, okFrom && okTo
	},
	"area mm2":  func(t *testing.T, a ask) (float64, bool) { return a.mm2(t), true },
	"fuse amps": func(t *testing.T, a ask) (float64, bool) { return FuseAmps(a.mm2(t)) },
	"class loss": func(t *testing.T, a ask) (float64, bool) {
		return PoE{Watt: a.num(t, "watt"), Volts: a.num(t, "volts"), PairSets: int(a.num(t, "pairsets"))}.Left(a.num(t, "loop"))
	},
	"poe device watt": func(t *testing.T, a ask) (float64, bool) {
		k, ok := Kind(a["kind"])
		return k.DeviceWatt(), ok
	},
	"poe device volts": func(t *testing.T, a ask) (float64, bool) {
		k, ok := Kind(a["kind"])
		return k.DeviceVolts(), ok
	},
	"poe left": func(t *testing.T, a ask) (float64, bool) {
		k, _ := Kind(a["kind"])
		return k.Left(a.num(t, "loop"))
	},
	"pair loop": func(t *testing.T, a ask) (float64, bool) {
		r, _ := Solid(a.mm2(t), a.num(t, "celsius"))
		return Pairs(a.num(t, "metres"), r, int(a.num(t, "pairsets")))
	},
	"drop": func(t *testing.T, a ask) (float64, bool) {
		return Drop(a.num(t, "metres"), a.num(t, "ohmperkm"), a.num(t, "amps"))
	},
	"volts at the load": func(t *testing.T, a ask) (float64, bool) {
		f, ok := Lead{a.num(t, "volts"), a.num(t, "ohm"), a.num(t, "watt")}.Feed()
		return f.Volts, ok
	},
}

func TestPublishedValuesHold(t *testing.T) {
	f, err := os.Open("../../testdata/published/elec.csv")
	if err != nil {
		t.Fatal(err)
	}
	defer f.Close()
	rows, err := csv.NewReader(f).ReadAll()
	if err != nil {
		t.Fatal(err)
	}
	seen, proofs := map[string]bool{}, map[string]bool{"read": true, "copy": true, "memory": true, "calculated": true}
	for _, row := range rows[1:] {
		id, quantity, expected, source, proof := row[0], row[1], row[3], row[6], row[7]
		answer := quantities[quantity]
		if answer == nil || seen[id] || source == "" || !proofs[proof] {
			t.Errorf("%s: nobody answers %q, or the row has no source or proof, or stands twice", id, quantity)
			continue
		}
		seen[id] = true
		got, ok := answer(t, read(row[2]))
		if expected == "unknown" {
			if ok {
				t.Errorf("%s %s: %v, expected no figure (%s)", id, quantity, got, source)
			}
			continue
		}
		want, within := number(t, expected), number(t, row[4])
		if !ok || !(math.Abs(got-want) <= within) {
			t.Errorf("%s %s %s: %v, expected %v within %v (%s)", id, quantity, row[2], got, want, within, source)
		}
	}
	if len(seen) < 60 {
		t.Errorf("%d published values, at least 60 are wanted", len(seen))
	}
	if !t.Failed() {
		t.Logf("%d published values hold", len(seen))
	}
}

func read(s string) ask {
	a := ask{}
	for pair := range strings.SplitSeq(s, ";") {
		k, v, _ := strings.Cut(pair, "=")
		a[k] = v
	}
	return a
}

func (a ask) num(t *testing.T, key string) float64 { return number(t, a[key]) }

// mm2 is the area of a row's conductor, by gauge or metric.
func (a ask) mm2(t *testing.T) float64 {
	if a["awg"] != "" {
		return unit.AWGArea(int(a.num(t, "awg")))
	}
	return a.num(t, "mm2")
}

func number(t *testing.T, s string) float64 {
	v, err := strconv.ParseFloat(s, 64)
	if err != nil {
		t.Errorf("%q is no number", s)
	}
	return v
}
