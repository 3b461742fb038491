package rules

import (
	"cmp"
	"math"
	"slices"
)

// MovedFigure is a figure that moved by more than it may be off, or by less and ate
// half of its margin, or that came to be known or unknown.
type MovedFigure struct {
	Name, On, Band, Way  string
	Unit                 string
	Was, Now             Known[float64]
	LimitWas, LimitNow   Known[float64]
	MarginWas, MarginNow Known[float64]
	Tolerance            float64
	By                   [4]float64 // by charge: how far the margin or the value moved
	Charge               Charge
	Eaten                bool // inside still, with less than half the margin that it had
	Beyond               bool // past its limit now, and not before
	Back                 bool // inside its limit now, and not before
}

// Difference is how far the value moved.
func (m *MovedFigure) Difference() (float64, bool) { return m.Now.V - m.Was.V, m.Now.OK && m.Was.OK }

// Better reports a figure whose margin grew and that was inside its limit before.
func (m *MovedFigure) Better() bool {
	return m.MarginWas.OK && m.MarginNow.OK && m.MarginWas.V >= 0 && m.MarginNow.V > m.MarginWas.V
}

// leastMove is what counts as a move where a figure has no tolerance of its own.
const leastMove = 0.05

// movedFigures compares the figures of a plan step by step. small is the largest of
// the moves that stay inside their tolerance, or nil.
func movedFigures(at [4][]planFigure) (out []MovedFigure, small *MovedFigure) {
	var index [4]map[figureKey]*planFigure
	var keys []figureKey
	for s, list := range at {
		index[s] = map[figureKey]*planFigure{}
		for i := range list {
			k := list[i].figureKey
			if index[s][k] == nil {
				index[s][k] = &list[i]
			}
		}
	}
	for _, s := range []int{3, 0} {
		for i := range at[s] {
			if k := at[s][i].figureKey; s == 3 || index[3][k] == nil {
				keys = append(keys, k)
			}
		}
	}
	seen := map[figureKey]bool{}
	for _, k := range keys {
		if seen[k] {
			continue
		}
		seen[k] = true
		m, counts := moveOf(k, index)
		switch {
		case m == nil:
		case counts:
			out = append(out, *m)
		case small == nil || m.relative() > small.relative():
			small = m
		}
	}
	slices.SortStableFunc(out, func(a, b MovedFigure) int {
		if a.rank() == b.rank() && a.MarginNow.OK && b.MarginNow.OK && (a.Beyond || a.Eaten) {
			return cmp.Compare(a.MarginNow.V, b.MarginNow.V) // what is left counts, not how far it moved
		}
		return cmp.Or(cmp.Compare(b.rank(), a.rank()), cmp.Compare(b.relative(), a.relative()))
	})
	return out, small
}

// rank puts what crossed a limit first, then what is not known any more, then what
// lost its margin.
func (m *MovedFigure) rank() int {
	switch {
	case m.Beyond:
		return 5
	case m.Was.OK && !m.Now.OK:
		return 4
	case m.Eaten:
		return 3
	case m.Back:
		return 2
	}
	return 1
}

func (m *MovedFigure) relative() float64 {
	d, _ := m.Difference()
	if m.MarginWas.OK && m.MarginNow.OK && math.Abs(m.MarginNow.V-m.MarginWas.V) > math.Abs(d) {
		d = m.MarginNow.V - m.MarginWas.V
	}
	return math.Abs(d) / max(m.Tolerance, leastMove)
}

// moveOf is how a figure moved, nil where it did not at all, and whether that counts.
func moveOf(k figureKey, index [4]map[figureKey]*planFigure) (*MovedFigure, bool) {
	was, now := index[0][k], index[3][k]
	if was == nil || now == nil {
		return appeared(k, was, now)
	}
	m := &MovedFigure{Name: k.Name, On: k.On, Band: k.Band, Way: k.Way, Unit: cmp.Or(now.unit, was.unit), Was: was.value, Now: now.value,
		LimitWas: was.limit, LimitNow: now.limit, Tolerance: max(was.off, now.off)}
	m.MarginWas.V, m.MarginWas.OK = was.margin()
	m.MarginNow.V, m.MarginNow.OK = now.margin()
	m.charge(k, index)
	d, both := m.Difference()
	limit := m.LimitWas.OK != m.LimitNow.OK || m.LimitWas.OK && math.Abs(m.LimitNow.V-m.LimitWas.V) > 0.005
	if both && d == 0 && !limit || !both && was.value.OK == now.value.OK && !limit {
		return nil, false
	}
	limit = limit && (m.By[ToRulers] != 0 || m.LimitWas.OK != m.LimitNow.OK) // a limit that follows the site shows in the margin
	if m.MarginWas.OK && m.MarginNow.OK {
		m.Beyond = m.MarginWas.V >= 0 && m.MarginNow.V < -1e-9
		m.Back = m.MarginWas.V < -1e-9 && m.MarginNow.V >= 0
		m.Eaten = m.MarginWas.V > 0 && m.MarginNow.V >= 0 && m.MarginNow.V < m.MarginWas.V/2 && m.MarginWas.V-m.MarginNow.V > leastMove
	}
	counts := !both || math.Abs(d) > max(m.Tolerance, leastMove) || limit || m.Beyond || m.Back || m.Eaten
	return m, counts
}

// appeared is a figure that only one of the two states has.
func appeared(k figureKey, was, now *planFigure) (*MovedFigure, bool) {
	f, m := now, &MovedFigure{Name: k.Name, On: k.On, Band: k.Band, Way: k.Way, Charge: ToWork}
	if now == nil {
		f = was
		m.Was, m.LimitWas = was.value, was.limit
		m.MarginWas.V, m.MarginWas.OK = was.margin()
	} else {
		m.Now, m.LimitNow = now.value, now.limit
		m.MarginNow.V, m.MarginNow.OK = now.margin()
	}
	m.Unit, m.Tolerance = f.unit, f.off
	return m, f.value.OK
}

// charge says which step moved the figure most.
func (m *MovedFigure) charge(k figureKey, index [4]map[figureKey]*planFigure) {
	most := -1.0
	for s := 1; s < 4; s++ {
		a, b := index[s-1][k], index[s][k]
		var moved float64
		switch {
		case a == nil || b == nil:
			if a != b {
				moved = math.MaxFloat64
			}
		default:
			x, okX := a.measure()
			y, okY := b.measure()
			switch {
			case okX && okY:
				m.By[s] = Round(y - x)
				moved = math.Abs(y - x)
			case okX != okY:
				moved = math.MaxFloat64
			}
		}
		if moved > 1e-9 && moved >= most {
			most, m.Charge = moved, Charge(s)
		}
	}
}
