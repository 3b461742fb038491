package rules_test

import (
	"fmt"
	"math"

	"driploop/rules/mech"
)

// mechQuantities are what the table of mechanics may ask for.
var mechQuantities = map[string]func(*inputs) (float64, bool){
	"kz": func(in *inputs) (float64, bool) {
		return mech.Terrain{Factor: in.num("factor"), LeastFt: in.num("least_ft"), Alpha: in.num("alpha"), GradeFt: in.num("zg_ft")}.Kz(in.num("z_ft"))
	},
	"pressure": (*inputs).pressure,
	"pressure psf of si": func(in *inputs) (float64, bool) {
		q, ok := in.pressure()
		return scaled(1/newtonPerSquareMetre, q, ok)
	},
	"pressure ratio": func(in *inputs) (float64, bool) {
		a, okA := mech.VelocityPressure(in.num("c"), in.num("v"))
		b, okB := mech.VelocityPressure(in.num("c"), in.num("other"))
		return ratio(a, b, okA && okB)
	},
	"free pressure": func(in *inputs) (float64, bool) { return mech.FreePressure(in.num("v")) },
	"free speed":    func(in *inputs) (float64, bool) { return mech.FreeSpeed(in.num("q")) },
	"speed by factors": func(in *inputs) (float64, bool) {
		q, ok := mech.FreePressure(in.num("v"))
		for _, k := range in.list("factors") {
			q *= k * k
		}
		if !ok {
			return 0, false
		}
		return mech.FreeSpeed(q)
	},
	"force":      (*inputs).force,
	"tube force": func(in *inputs) (float64, bool) { l, ok := in.tubeLoad(); return l.Force, ok },
	"tube moment": func(in *inputs) (float64, bool) {
		l, ok := in.tubeLoad()
		if !ok {
			return 0, false
		}
		return mech.Moment(l)
	},
	"moment": func(in *inputs) (float64, bool) {
		var loads []mech.Load
		forces, levers := in.paired("forces", "levers")
		for i, f := range forces {
			loads = append(loads, mech.Load{Force: f, Lever: levers[i]})
		}
		return mech.Moment(loads...)
	},
	"inertia": func(in *inputs) (float64, bool) { return mech.Tube{OD: in.num("od"), Wall: in.num("wall")}.Inertia() },
	"modulus": func(in *inputs) (float64, bool) { return mech.Tube{OD: in.num("od"), Wall: in.num("wall")}.Modulus() },
	"stress": func(in *inputs) (float64, bool) {
		return mech.Tube{OD: in.num("od_mm"), Wall: in.num("wall_mm")}.Stress(in.num("nm"))
	},
	"stress psi": (*inputs).stressPSI,
	"overturning": func(in *inputs) (float64, bool) {
		return mech.Overturning(in.num("weight"), in.num("base"), in.num("moment"))
	},
	"sliding": func(in *inputs) (float64, bool) {
		return mech.Sliding(in.num("weight"), in.num("friction"), in.num("force"))
	},
	"ballast": func(in *inputs) (float64, bool) {
		return mech.BallastFor(in.num("times"), in.num("base"), in.num("friction"), in.num("moment"), in.num("force"))
	},
	"bearing psf": func(in *inputs) (float64, bool) {
		p, ok := mech.Bearing(in.num("kg"), in.num("m2"))
		return scaled(1/newtonPerSquareMetre, p, ok)
	},
	"approach": func(in *inputs) (float64, bool) {
		return mech.ApproachSteps(in.num("kv"), in.num("least"), in.num("up_to"), in.num("step"), in.num("stretch"))
	},
	"separation": func(in *inputs) (float64, bool) {
		return mech.Separation(in.num("ki"), in.num("kc"), in.num("km"), in.num("l"))
	},
	"ladder foot": func(in *inputs) (float64, bool) { return mech.LadderFoot(in.num("length"), in.num("share")) },
	"ladder angle": func(in *inputs) (float64, bool) {
		foot, ok := mech.LadderFoot(in.num("length"), in.num("share"))
		if !ok {
			return 0, false
		}
		return math.Acos(foot/in.num("length")) * 180 / math.Pi, true
	},
	"fall gap": func(in *inputs) (float64, bool) {
		to := in.vec("to")
		return mech.FallGap(to.E, to.N, to.U, in.num("radius"))
	},
	"apart": func(in *inputs) (float64, bool) { return mech.Apart(in.vec("p"), in.vec("a"), in.vec("b")) },
}

// Units of the United States in those of the SI: the exact inch and pound, and the
// standard acceleration of free fall.
const (
	metrePerInch         = 0.0254
	newtonPerPound       = 0.45359237 * 9.80665
	newtonPerSquareMetre = newtonPerPound / (0.3048 * 0.3048) // of 1 lbf/ft²
	pascalPerPSI         = newtonPerPound / (metrePerInch * metrePerInch)
)

func (in *inputs) pressure() (float64, bool) {
	var factors []float64
	if in.has("factors") {
		factors = in.list("factors")
	}
	return mech.VelocityPressure(in.num("c"), in.num("v"), factors...)
}

func (in *inputs) force() (float64, bool) {
	if in.has("effective") {
		return mech.Force(in.num("q"), in.num("gust"), mech.EffectiveArea(in.num("effective")))
	}
	area, _ := mech.Drag(in.num("area"), in.num("cf"))
	return mech.Force(in.num("q"), in.num("gust"), area)
}

func (in *inputs) tubeLoad() (mech.Load, bool) {
	return mech.TubeLoad(in.num("q"), in.num("gust"), in.num("cf"), in.num("od"), in.num("from"), in.num("to"))
}

func (in *inputs) stressPSI() (float64, bool) {
	tube := mech.Tube{OD: in.num("od_in") * metrePerInch * 1000, Wall: in.num("wall_in") * metrePerInch * 1000}
	mpa, ok := tube.Stress(in.num("inlbf") * newtonPerPound * metrePerInch)
	return mpa * 1e6 / pascalPerPSI, ok
}

func ratio(a, b float64, ok bool) (float64, bool) {
	if !ok {
		return 0, false
	}
	return a / b, true
}

func (in *inputs) vec(key string) mech.Vec {
	if l := in.list(key); len(l) == 3 {
		return mech.Vec{E: l[0], N: l[1], U: l[2]}
	}
	in.fail(fmt.Errorf("input %q is not three numbers", key))
	return mech.Vec{}
}
