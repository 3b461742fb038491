package rules

import (
	"fmt"
	"math"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/limits"
	"driploop/rules/mech"
)

// wind is what the wind presses with at the top of a mount, by the row of the plan's
// code.
type wind struct {
	q       float64 // N/m²
	gust    float64
	tube    float64 // force coefficient of a round tube
	flat    float64 // of a plate; 0 where the code gives none
	service float64 // the share of it that counts against an allowable stress
	words   string  // where q comes from
	row     *limits.CodeRow
}

// siteAt is the place of [site], or of the job where there is none.
func (c *Case) siteAt() source.Place { return placeOr(c.Plan.Site.At, c.JobAt()) }

// windLacks is what keeps the wind of the site from being known, before any mount is
// looked at.
func (c *Case) windLacks() []Lack {
	s, at := &c.Plan.Site, c.siteAt()
	row := c.codeRow("wind-pressure")
	switch {
	case row == nil:
		return []Lack{{"a code that gives a wind pressure", c.JobAt()}}
	case c.firstRow("mast-stress", "mast-moment") == nil:
		return []Lack{{"a limit of stress or moment in the code " + c.CodeName(), c.JobAt()}}
	}
	var lacks []Lack
	lack := func(set bool, what string, at source.Place) {
		if !set {
			lacks = append(lacks, Lack{what, at})
		}
	}
	if fixed := len(row.Steps) > 0; fixed {
		lack(s.WindBasis.Set || !s.Wind.Set, "site.wind_basis (what its wind means)", s.Wind.At)
		lack(s.WindBasis.Or("en-60728-11") == "en-60728-11", "a pressure for "+s.WindBasis.V+" in the code "+c.CodeName()+", which has fixed ones", s.WindBasis.At)
		return lacks
	}
	lack(s.Wind.Set, "site.wind", at)
	lack(s.WindBasis.Set, "site.wind_basis", at)
	lack(s.Terrain.Set, "site.terrain", at)
	lack(s.WindBasis.V != "en-60728-11", "fixed pressures for "+s.WindBasis.V+" in the code "+c.CodeName(), s.WindBasis.At)
	return lacks
}

// windAt is the wind at a height above ground, in metres.
func (c *Case) windAt(height float64) (wind, []Lack) {
	row, drag := c.codeRow("wind-pressure"), c.codeRow("wind-drag")
	if drag == nil {
		return wind{}, []Lack{{"a wind-drag row in the code " + c.CodeName(), c.JobAt()}}
	}
	w := wind{gust: 1, service: 1, row: row}
	var ok bool
	if w.tube, ok = drag.Constant("tube"); !ok {
		return w, []Lack{{"the figure tube of the row wind-drag", drag.At}}
	}
	w.flat, _ = drag.Constant("flat")
	if len(row.Steps) > 0 {
		return c.fixedWind(w, height)
	}
	return c.profileWind(w, height)
}

// fixedWind takes a pressure by height from the code; a greater speed that the site
// states goes first.
func (c *Case) fixedWind(w wind, height float64) (wind, []Lack) {
	step := w.row.StepFor(height)
	if step == nil || !step.Value.Set {
		return w, []Lack{{"a pressure for this height in the code " + c.CodeName(), c.JobAt()}}
	}
	w.q = step.Value.V
	speed, _ := mech.FreeSpeed(w.q)
	w.words = fmt.Sprintf("%s N/m² (%s m/s) at %s m above ground", plainFigure(w.q), unit.Fixed(speed, 0), plainFigure(Round(height)))
	if v := c.Plan.Site.Wind; v.Set {
		if q, ok := mech.FreePressure(float64(v.V)); ok && q > w.q {
			w.q = q
			w.words = fmt.Sprintf("%s N/m², the pressure of the site's %s m/s", unit.Fixed(q, 0), plainFigure(Round(float64(v.V))))
		}
	}
	return w, nil
}

// profileWind takes the pressure from the site's speed and terrain, after ASCE 7.
func (c *Case) profileWind(w wind, height float64) (wind, []Lack) {
	s := &c.Plan.Site
	k, missing := constants(w.row, "q_si", "kz_factor", "z_least_ft", "alpha_"+s.Terrain.V, "zg_ft_"+s.Terrain.V, "kd_round", "gust")
	if missing != "" {
		return w, []Lack{{"the figure " + missing + " of the row wind-pressure", w.row.At}}
	}
	kz, ok := mech.Terrain{Factor: k[1], LeastFt: k[2], Alpha: k[3], GradeFt: k[4]}.Kz(height / 0.3048)
	if !ok {
		return w, []Lack{{"a wind profile that reaches this height", w.row.At}}
	}
	q, ok := mech.VelocityPressure(k[0], float64(s.Wind.V), kz, k[5])
	if !ok {
		return w, []Lack{{"a wind speed above 0", s.Wind.At}}
	}
	w.q, w.gust = q, k[6]
	w.words = fmt.Sprintf("%s N/m² at %s m above ground (%s m/s %s, terrain %s: Kz %s, Kd %s; gust %s)", unit.Fixed(q, 0), plainFigure(Round(height)),
		plainFigure(Round(float64(s.Wind.V))), s.WindBasis.V, s.Terrain.V, unit.Fixed(kz, 2), plainFigure(k[5]), plainFigure(k[6]))
	if s.WindBasis.V != "asce7-strength" {
		return w, nil
	}
	row := c.codeRow("wind-service")
	if row == nil {
		return w, []Lack{{"a wind-service row in the code " + c.CodeName(), c.JobAt()}}
	}
	if w.service, ok = row.Constant("service_per_strength"); !ok {
		return w, []Lack{{"the figure service_per_strength of the row wind-service", row.At}}
	}
	return w, nil
}

// force is the wind on an effective area in N; nothing on no area.
func (w wind) force(area float64) float64 {
	f, ok := mech.Force(w.q, w.gust, mech.EffectiveArea(area))
	if !ok {
		return 0
	}
	return f
}

// area is the effective area of a device in m². The maker's figure holds the drag
// already. Where there is only the largest side, its square as a flat plate is the
// most that it can be.
func (w wind) area(d *bom.Device) (span, []Lack) {
	if d.Part == nil {
		return span{0, math.Inf(1)}, []Lack{{"the part of " + d.ID, d.At}}
	}
	area, side := d.Part.InWind()
	if area.Set {
		return exactly(area.V), nil
	}
	lack := []Lack{{"wind_area_m2 of " + d.Part.ID, d.Part.At}}
	most, ok := mech.Drag(side.V*side.V/1e6, w.flat)
	if !side.Set || !ok {
		return span{0, math.Inf(1)}, lack
	}
	return span{0, float64(most)}, lack
}
