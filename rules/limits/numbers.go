package limits

import (
	"slices"

	"driploop/catalog"
)

// BandFigures is what a profile comes to in one band, for a table.
type BandFigures struct {
	Band    catalog.Band
	Figures []BandFigure
}

// BandFigure is one row in one band: its value where that follows from the band
// alone, else what it lacks.
type BandFigure struct {
	Row     *Row
	Value   float64
	Missing []string
}

// Numbers computes the rows of normal operation in the named bands, as far as they
// follow from the band alone; without names, in every band the profile permits.
// Names that 3GPP does not know are left out.
func (p *Profile) Numbers(names ...string) []BandFigures {
	bands := p.Bands()
	if len(names) > 0 {
		bands = nil
	}
	for _, name := range names {
		if b, ok := catalog.LookBand(name); ok {
			bands = append(bands, b)
		}
	}
	var out []BandFigures
	for _, b := range bands {
		out = append(out, BandFigures{b, p.figures(b)})
	}
	return out
}

func (p *Profile) figures(b catalog.Band) []BandFigure {
	var out []BandFigure
	for _, r := range slices.Concat(p.Limits, p.Radio) {
		if r.State.Or("on") == "on" && r.onBand(b) {
			v, missing := r.Value(For(b.Name))
			out = append(out, BandFigure{r, v, missing})
		}
	}
	return out
}

// onBand reports whether the row's spectrum reaches into the band.
func (r *Row) onBand(b catalog.Band) bool {
	if !r.FFrom.Set && !r.FBelow.Set {
		return true
	}
	span := b.Uplink
	if r.Direction.V == "downlink" {
		span = b.Downlink
	}
	return !r.Span().Overlap(span).Empty()
}
