package unit

import (
	"slices"
	"strconv"
)

// MHz is a frequency in megahertz.
type MHz float64

// String prints the frequency without needless zeros.
func (f MHz) String() string { return strconv.FormatFloat(float64(f), 'f', -1, 64) + " MHz" }

// Span is a stretch of spectrum, both ends in MHz and both inside.
type Span struct{ Lo, Hi MHz }

// Mid is the middle of the span.
func (s Span) Mid() MHz { return (s.Lo + s.Hi) / 2 }

// Width is the length of the span in MHz.
func (s Span) Width() MHz { return s.Hi - s.Lo }

// Empty reports a span that holds no stretch of spectrum.
func (s Span) Empty() bool { return !(s.Lo < s.Hi) }

// Contains reports whether f is inside, ends included.
func (s Span) Contains(f MHz) bool { return s.Lo <= f && f <= s.Hi }

// Covers reports whether all of t is inside s.
func (s Span) Covers(t Span) bool { return s.Lo <= t.Lo && t.Hi <= s.Hi }

// Overlap is the common stretch; it is Empty where the two only touch or miss.
func (s Span) Overlap(t Span) Span { return Span{max(s.Lo, t.Lo), min(s.Hi, t.Hi)} }

// Minus is what of s none of the given spans covers, from low to high.
func (s Span) Minus(covers ...Span) []Span {
	if s.Empty() || slices.ContainsFunc(covers, func(c Span) bool { return c.Covers(s) }) {
		return nil
	}
	left := []Span{s}
	for _, c := range covers {
		var next []Span
		for _, l := range left {
			if l.Overlap(c).Empty() {
				next = append(next, l)
				continue
			}
			if below := (Span{l.Lo, min(l.Hi, c.Lo)}); !below.Empty() {
				next = append(next, below)
			}
			if above := (Span{max(l.Lo, c.Hi), l.Hi}); !above.Empty() {
				next = append(next, above)
			}
		}
		left = next
	}
	return left
}

// String prints "699–716 MHz".
func (s Span) String() string {
	return strconv.FormatFloat(float64(s.Lo), 'f', -1, 64) + "–" + s.Hi.String()
}
