package unit

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Gauge is the cross-section of a conductor. Sizes are compared by area, because
// American gauge numbers run backwards; the written form is kept to print.
type Gauge struct {
	MM2     float64 // area of the metal, mm²
	Written string  // as the file says it: "10 AWG", "16 mm2"
}

// String is the written form.
func (g Gauge) String() string { return g.Written }

// AWGArea is the area in mm² of American Wire Gauge n, after ASTM B258:
// d = 0.005 in · 92^((36−n)/39). 1/0 to 4/0 are n = 0 to −3.
func AWGArea(n int) float64 {
	d := 0.127 * math.Pow(92, float64(36-n)/39)
	return math.Pi / 4 * d * d
}

// ParseGauge reads "10 AWG", "2/0 AWG" or "16 mm2".
func ParseGauge(s string) (Gauge, error) {
	num, u, found := strings.Cut(strings.TrimSpace(s), " ")
	u = strings.TrimSpace(u)
	if !found {
		return Gauge{}, errors.New("a conductor size is written \"10 AWG\" or \"16 mm2\"")
	}
	switch u {
	case "AWG":
		n, err := awgNumber(num)
		if err != nil {
			return Gauge{}, err
		}
		return Gauge{AWGArea(n), num + " AWG"}, nil
	case "mm2", "mm²":
		v, _, err := number(num + " mm2")
		if err != nil {
			return Gauge{}, err
		}
		if v <= 0 || v > 1000 {
			return Gauge{}, errors.New("a conductor size lies above 0 and up to 1000 mm2")
		}
		return Gauge{v, num + " mm2"}, nil
	}
	return Gauge{}, unitFault(u, "AWG or mm2")
}

// awgNumber is n of AWGArea. Only the plain form of a number is read: 00 would be
// taken for 0, and is 2/0 in the trade.
func awgNumber(s string) (int, error) {
	if aughts := len(s); aughts > 1 && aughts <= 4 && strings.Trim(s, "0") == "" {
		return 0, fmt.Errorf("%s AWG is written %d/0 AWG", s, aughts)
	}
	if aught, ok := strings.CutSuffix(s, "/0"); ok {
		n, err := strconv.Atoi(aught)
		if err != nil || n < 1 || n > 4 || aught != strconv.Itoa(n) {
			return 0, errors.New("AWG sizes above 0 run from 1/0 to 4/0")
		}
		return 1 - n, nil
	}
	n, err := strconv.Atoi(s)
	if err != nil || n < 0 || n > 40 || s != strconv.Itoa(n) {
		return 0, errors.New("AWG sizes run from 4/0 over 0 to 40")
	}
	return n, nil
}
