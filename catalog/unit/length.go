package unit

import (
	"errors"
	"fmt"
	"math"
	"strconv"
	"strings"
)

// MM is a length in whole millimetres. Lengths are integers inside the tool, so
// that what is cut, used and left adds up to the millimetre.
type MM int64

// Metres is the length in metres.
func (l MM) Metres() float64 { return float64(l) / 1000 }

// Feet is the length in international feet of 304.8 mm.
func (l MM) Feet() float64 { return float64(l) / 304.8 }

// String prints metres to the millimetre without needless zeros.
func (l MM) String() string { return strconv.FormatFloat(l.Metres(), 'f', -1, 64) + " m" }

// ParseLength reads "18.5 m", "60 ft", "25 mm" or "8 in" and rounds to the
// nearest millimetre. Lengths are never negative and at most 100 km.
func ParseLength(s string) (MM, error) {
	v, u, err := number(s)
	if err != nil {
		return 0, err
	}
	per := map[string]float64{"mm": 1, "cm": 10, "m": 1000, "ft": 304.8, "in": 25.4}[u]
	if per == 0 {
		return 0, unitFault(u, "m, mm, cm, ft or in")
	}
	if v < 0 || v*per > 1e8 {
		return 0, errors.New("a length lies between 0 and 100 km")
	}
	return MM(math.Round(v * per)), nil
}

// Celsius is a temperature in degrees Celsius.
type Celsius float64

// ParseTemperature reads "45 C" or "113 F".
func ParseTemperature(s string) (Celsius, error) {
	v, u, err := number(s)
	if err != nil {
		return 0, err
	}
	switch strings.TrimPrefix(u, "°") {
	case "C":
	case "F":
		v = (v - 32) * 5 / 9
	default:
		return 0, unitFault(u, "C or F")
	}
	if v < -90 || v > 150 {
		return 0, errors.New("a temperature on site lies between -90 C and 150 C")
	}
	return Celsius(v), nil
}

// String prints whole degrees where they are whole.
func (t Celsius) String() string {
	return strings.TrimSuffix(Fixed(float64(t), 1), ".0") + " °C"
}

// Speed is a speed in metres per second.
type Speed float64

// ParseSpeed reads "44 m/s", "115 mph" or "160 km/h".
func ParseSpeed(s string) (Speed, error) {
	v, u, err := number(s)
	if err != nil {
		return 0, err
	}
	per := map[string]float64{"m/s": 1, "mph": 0.44704, "km/h": 1 / 3.6}[u]
	if per == 0 {
		return 0, unitFault(u, "m/s, mph or km/h")
	}
	if v < 0 || v*per > 150 {
		return 0, errors.New("a wind speed lies between 0 and 150 m/s")
	}
	return Speed(v * per), nil
}

// number splits "18.5 m" into 18.5 and "m".
func number(s string) (float64, string, error) {
	num, u, found := strings.Cut(strings.TrimSpace(s), " ")
	u = strings.TrimSpace(u)
	if !found || u == "" {
		return 0, "", fmt.Errorf("%q needs a number, a space and a unit", s)
	}
	for _, r := range num {
		if (r < '0' || r > '9') && r != '.' && r != '-' {
			return 0, "", fmt.Errorf("%q is no plain decimal number", num)
		}
	}
	v, err := strconv.ParseFloat(num, 64)
	if err != nil || math.IsInf(v, 0) || math.IsNaN(v) {
		return 0, "", fmt.Errorf("%q is no plain decimal number", num)
	}
	return v, u, nil
}

func unitFault(got, want string) error {
	return fmt.Errorf("unit %q is not one of %s", got, want)
}
