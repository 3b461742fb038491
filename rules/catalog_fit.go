package rules

import (
	"fmt"

	"driploop/catalog"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// mostMissPercent is by how much the curve may miss a published point. Tables are
// printed to two or three digits; a slip of the pen misses by more.
const mostMissPercent = 5

// fewestFitPoints is from how many points on a curve of two coefficients can be
// contradicted.
const fewestFitPoints = 3

var catalogFit = &Rule{
	Name:  "catalog/fit",
	Title: "The points of a cable lie on one attenuation curve",
	Why: "loss grows with the root of frequency in the conductors and with frequency in the dielectric; a point off that curve is a slip " +
		"of the pen, and every length of that cable is computed from it",
	Basis:   []Basis{practice("attenuation k1·√f + k2·f, fitted by least squares of the relative error; a point may miss it by 5 %")},
	Lighter: "Two points fit any curve and one fits none: not assessed.",
	Weight:  Hold,
	CheckFiles: func(f *Firm, r *Report) {
		for _, p := range f.Catalog.Own() {
			if p.Cable != nil && p.Cable.Loss.Set {
				f.checkFit(p, r)
			}
		}
	},
}

func (f *Firm) checkFit(p *catalog.Part, r *Report) {
	points := p.Cable.Loss.V
	fit, err := f.fit(p)
	switch {
	case !rising(points) || !above(points):
		return // catalog/range says so
	case single(points):
		partUnknowable(r, p, p.Cable.Loss.At, "the loss of %s over frequency is not assessed: one number is given for every frequency", p.ID).
			Then("copy the whole table of the data sheet")
		return
	case err != nil:
		partUnknowable(r, p, p.Cable.Loss.At, "the loss of %s over frequency is not assessed: %s", p.ID, err).
			Then("copy the whole table of the data sheet")
		return
	}
	if !rf.Exceeds(fit.Miss, mostMissPercent) {
		if len(points) < fewestFitPoints {
			partUnknowable(r, p, p.Cable.Loss.At, "whether the points of %s lie on one curve is not assessed: %s of loss, %d are needed", p.ID,
				count(len(points), "point", "points"), fewestFitPoints).Then("copy the whole table of the data sheet")
		}
		return
	}
	at, expected := suspect(points, fit)
	read := lossAt(points, at)
	partFails(r, p, p.Cable.Loss.At, "%s loses %s at %s by its table; the curve through its other points expects %s. The best curve through all of them misses one by %s %%, %d %% is allowed",
		p.ID, cableLoss(p, read), at, cableLoss(p, expected), unit.Fixed(fit.Miss, 1), mostMissPercent).
		Over("miss_percent", fit.Miss, "allowed_percent", mostMissPercent).
		With("mhz", float64(at)).With("read_db_per_100m", read).With("expected_db_per_100m", expected).
		Then("compare the figure at %s with the data sheet, and whether the table is per 100 m or per 100 ft", at)
}

// suspect is the point whose absence lets the others agree best, and what they
// expect there. Three points contradict each other without saying which is wrong;
// then it is the one that the curve misses most.
func suspect(points catalog.Points, whole rf.Cable) (unit.MHz, float64) {
	at := whole.MissAt
	if len(points) > fewestFitPoints {
		least := whole.Miss
		for i, p := range points {
			if fit, ok := fitWithout(points, i); ok && fit.Miss < least {
				least, at = fit.Miss, p.MHz
			}
		}
	}
	for i, p := range points {
		if p.MHz != at {
			continue
		}
		if fit, ok := fitWithout(points, i); ok {
			if v, ok := fit.AttenuationPer100m(at); ok {
				return at, float64(v)
			}
		}
	}
	v, _ := whole.AttenuationPer100m(at)
	return at, float64(v)
}

// fitWithout is the curve through all points but one, up to any frequency.
func fitWithout(points catalog.Points, i int) (rf.Cable, bool) {
	others := append(points[:i:i], points[i+1:]...)
	fit, err := rf.FitCable(rfPoints(others), everything.Hi)
	return fit, err == nil
}

func lossAt(points catalog.Points, f unit.MHz) float64 {
	for _, p := range points {
		if p.MHz == f {
			return p.V
		}
	}
	return 0
}

// cableLoss prints a loss in the unit in which the part's file gives it.
func cableLoss(p *catalog.Part, per100m float64) string {
	if p.Cable.PerFeet {
		return fmt.Sprintf("%s dB/100 ft", unit.Fixed(per100m*0.3048, 2))
	}
	return fmt.Sprintf("%s dB/100 m", unit.Fixed(per100m, 1))
}
