package rf

import (
	"errors"
	"fmt"
	"math"

	"driploop/catalog/unit"
)

// Point is one row of a table over frequency: a loss, or a gain, at a frequency.
type Point struct {
	MHz unit.MHz
	DB  unit.DB
}

// What is wrong with a cable's points.
var (
	ErrTooFewPoints = errors.New("a cable needs its loss at two frequencies or more")
	ErrBadPoint     = errors.New("a cable's points lie above 0 MHz and above 0 dB")
)

// Cable is the attenuation of a cable at 20 °C as a(f) = K1·√f + K2·f, in dB per
// 100 m with f in MHz: skin effect in the conductors, and the dielectric.
// (Handbook form, common practice.)
type Cable struct {
	K1, K2 float64
	Max    unit.MHz // no value above it

	Miss   float64  // by how much the fit misses its worst point, in per cent of that point
	MissAt unit.MHz // where that is
}

// FitCable fits the points, given in dB per 100 m, by least squares of the
// relative error, with neither coefficient below zero, so that a(f) never falls.
// Without a max the fit holds up to the highest point: below the lowest point the
// form itself is physics, above the highest it would be a guess.
func FitCable(points []Point, max unit.MHz) (Cable, error) {
	var s11, s12, s22, b1, b2 float64
	var top unit.MHz
	for _, p := range points {
		if !positive(float64(p.MHz)) || !positive(float64(p.DB)) {
			return Cable{}, fmt.Errorf("%w: %v at %v", ErrBadPoint, p.DB, p.MHz)
		}
		x1 := math.Sqrt(float64(p.MHz)) / float64(p.DB)
		x2 := float64(p.MHz) / float64(p.DB)
		s11, s12, s22 = s11+x1*x1, s12+x1*x2, s22+x2*x2
		b1, b2 = b1+x1, b2+x2
		if p.MHz > top {
			top = p.MHz
		}
	}
	det := s11*s22 - s12*s12
	if !(det > 1e-9*s11*s22) {
		return Cable{}, ErrTooFewPoints
	}
	c := Cable{K1: (b1*s22 - b2*s12) / det, K2: (b2*s11 - b1*s12) / det, Max: max}
	switch { // the best fit with a coefficient below zero: the best one with it at zero
	case c.K1 < 0:
		c.K1, c.K2 = 0, b2/s22
	case c.K2 < 0:
		c.K1, c.K2 = b1/s11, 0
	}
	if c.Max == 0 {
		c.Max = top
	}
	c.miss(points)
	return c, nil
}

// miss notes the worst point of the fit.
func (c *Cable) miss(points []Point) {
	for _, p := range points {
		miss := 100 * math.Abs(c.at(p.MHz)/float64(p.DB)-1)
		if miss > c.Miss {
			c.Miss, c.MissAt = miss, p.MHz
		}
	}
}

func (c Cable) at(f unit.MHz) float64 {
	return c.K1*math.Sqrt(float64(f)) + c.K2*float64(f)
}

// AttenuationPer100m is the loss of 100 m at 20 °C; not known above c.Max.
func (c Cable) AttenuationPer100m(f unit.MHz) (unit.DB, bool) {
	if !positive(float64(f)) || !(f <= c.Max) {
		return 0, false
	}
	return known(c.at(f))
}

// Loss is the loss of a length at a temperature of the whole of it.
func (c Cable) Loss(f unit.MHz, length unit.MM, t unit.Celsius) (unit.DB, bool) {
	a, ok := c.AttenuationPer100m(f)
	factor, okT := TemperatureFactor(t)
	if !ok || !okT || length < 0 {
		return 0, false
	}
	return known(float64(a) * length.Metres() / 100 * factor)
}

// LossBetween is the loss of a length whose temperature lies anywhere between two
// others, in either order: the least at the colder, the nominal at 20 °C, the
// greatest at the hotter.
func (c Cable) LossBetween(f unit.MHz, length unit.MM, t1, t2 unit.Celsius) (Loss, bool) {
	least, ok1 := c.Loss(f, length, min(t1, t2))
	nominal, ok2 := c.Loss(f, length, 20)
	greatest, ok3 := c.Loss(f, length, max(t1, t2))
	if !ok1 || !ok2 || !ok3 {
		return Loss{}, false
	}
	return Loss{least, nominal, greatest}, true
}

// TemperatureFactor scales a cable's whole loss from 20 °C to t: 0.2 % a kelvin
// (common practice; copper's resistance alone rises 0.393 % a kelvin, and skin
// effect takes its root). Holds for the temperatures of a site, −90 to 150 °C.
func TemperatureFactor(t unit.Celsius) (float64, bool) {
	if !(t >= -90 && t <= 150) {
		return 0, false
	}
	return 1 + 0.002*(float64(t)-20), true
}
