package limits

import (
	"errors"
	"math"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

var (
	errEmptySpan = errors.New("the stretch of spectrum ends where it begins or before")
	errName      = errors.New("a name has letters, digits, - and _")
)

// Level is a reference level for exposure to radio fields, power density over
// frequency. Its ID says for whom: general, occupational, or local for the level
// averaged over a small part of the body.
type Level struct {
	Duty
	ID         string
	AverageMin source.Val[float64] // averaging time, minutes
	Segments   []Segment
}

// Segment is S = a·f^b on a stretch of spectrum, S in W/m², f in MHz.
type Segment struct {
	At   source.Place
	MHz  source.Val[unit.Span]
	A, B source.Val[float64]
}

// Level finds a reference level by ID, or nil.
func (p *Profile) Level(id string) *Level {
	for i := range p.Exposure {
		if p.Exposure[i].ID == id {
			return &p.Exposure[i]
		}
	}
	return nil
}

// DensityAt is the reference level in W/m² at a frequency. A segment holds from
// its lower end up to its upper one, which belongs to the next; outside all of
// them the level is unknown.
func (l *Level) DensityAt(f unit.MHz) (float64, bool) {
	for i, s := range l.Segments {
		last := i == len(l.Segments)-1
		if s.MHz.V.Contains(f) && (last || f < s.MHz.V.Hi) {
			return s.at(f), true
		}
	}
	return 0, false
}

func (s Segment) at(f unit.MHz) float64 { return s.A.V * math.Pow(float64(f), s.B.V) }

func (l *Level) keys(k *source.Keys) {
	l.ID = k.ID()
	source.Need(k, &l.AverageMin, "average_min", source.Between(0, 1440, "min"), "averaging time")
	source.Rows(k, &l.Segments, "segment", (*Segment).keys, "power density a·f^b, from low to high without gaps")
	l.origin(k)
	if !k.Recording() && !k.Has("segment") {
		k.Missing("segment", "a level without one has no figure")
	}
	for i := 1; i < len(l.Segments); i++ {
		if below, s := l.Segments[i-1].MHz, l.Segments[i].MHz; below.Set && s.Set && below.V.Hi != s.V.Lo {
			k.Fault(s.At, "the segment does not begin where the one before it ends", "give the segments from low to high without gaps", below.At)
		}
	}
}

func (s *Segment) keys(k *source.Keys) {
	s.At = k.At()
	source.Need(k, &s.MHz, "mhz", span, "where it holds")
	source.Need(k, &s.A, "a", source.AtLeast(0, "W/m²"), "factor of a·f^b, f in MHz")
	source.Opt(k, &s.B, "b", source.Between(-5, 5, ""), "exponent; absent: 0")
}
