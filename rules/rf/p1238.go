package rf

import (
	"math"

	"driploop/catalog/unit"
)

// Building is the kind of building whose losses a site-general model averages.
type Building int

// Kinds of building of ITU-R P.1238. Office is the one to take where none is named.
const (
	Office Building = iota
	Residential
	Commercial
)

// p1238Row is one frequency row: the distance power loss coefficient N by Building
// (0: the table has none) and the loss through n floors, nil where it has none.
type p1238Row struct {
	span   unit.Span
	n      [3]float64
	floors [3]func(n int) (float64, bool)
}

// p1238Rows is the older form's tables 2 and 3, as of ITU-R P.1238-9 (06/2017).
// The rows of 900 MHz to 2 GHz, 4 and 5.2 GHz were read in open implementations,
// the residential figures of 2.4 and 5.2 GHz (flat, not house) are memory.
var p1238Rows = []p1238Row{
	{unit.Span{Lo: 900, Hi: 900}, [3]float64{Office: 33, Commercial: 20}, floors{Office: listed(9, 19, 24)}},
	{unit.Span{Lo: 1200, Hi: 1300}, [3]float64{Office: 32, Commercial: 22}, floors{}},
	{unit.Span{Lo: 1800, Hi: 2000}, [3]float64{Office: 30, Residential: 28, Commercial: 22},
		floors{Office: rising(15, 4), Residential: rising(4, 4), Commercial: rising(6, 3)}},
	{unit.Span{Lo: 2400, Hi: 2400}, [3]float64{Office: 30, Residential: 28}, floors{Office: listed(14), Residential: listed(10)}},
	{unit.Span{Lo: 4000, Hi: 4000}, [3]float64{Office: 28, Commercial: 22}, floors{}},
	{unit.Span{Lo: 5150, Hi: 5350}, [3]float64{Office: 31, Residential: 30}, floors{Office: listed(16), Residential: listed(13)}},
}

type floors = [3]func(n int) (float64, bool)

// listed is a table that names its number of floors one by one.
func listed(db ...float64) func(int) (float64, bool) {
	return func(n int) (float64, bool) {
		if n > len(db) {
			return 0, false
		}
		return db[n-1], true
	}
}

// rising is first + more·(n−1).
func rising(first, more float64) func(int) (float64, bool) {
	return func(n int) (float64, bool) { return first + more*float64(n-1), true }
}

// IndoorLoss is the loss between two antennas inside a building, walls and
// furniture of the same floor included: 20·log10 f + N·log10 d + Lf(n) − 28, with f
// in MHz and d in metres, ITU-R P.1238-9 (06/2017) 3.1 and earlier (formula read,
// edition memory). N and Lf come from the nearest row that has them for the kind of
// building. Holds beyond 1 m, from 300 MHz to 6 GHz (the rows here; the text goes on
// to 100 GHz), for as many floors as the row lists.
func IndoorLoss(b Building, f unit.MHz, metres float64, through int) (unit.DB, bool) {
	if b < Office || b > Commercial || !(f >= 300 && f <= 6000) || !(metres > 1) || through < 0 {
		return 0, false
	}
	n := nearest(f, func(r p1238Row) bool { return r.n[b] != 0 }).n[b]
	loss := 20*math.Log10(float64(f)) + n*math.Log10(metres) - 28
	if through > 0 {
		row := nearest(f, func(r p1238Row) bool { return r.floors[b] != nil })
		floor, ok := row.floors[b](through)
		if !ok {
			return 0, false
		}
		loss += floor
	}
	return known(loss)
}

// nearest is the row nearest in frequency of those that have what is asked; the
// lower of two. Every Building has a row of each.
func nearest(f unit.MHz, has func(p1238Row) bool) p1238Row {
	var best p1238Row
	off := unit.MHz(math.Inf(1))
	for _, r := range p1238Rows {
		away := max(r.span.Lo-f, f-r.span.Hi, 0)
		if has(r) && away < off {
			best, off = r, away
		}
	}
	return best
}

// Surroundings is a row of the newer form of P.1238.
type Surroundings struct {
	Name               string
	Span               unit.Span
	From, To           float64 // metres
	alpha, beta, gamma float64
	Sigma              unit.DB // standard deviation of the place to place spread
}

// P1238Surroundings is table 2 of ITU-R P.1238-11 (09/2021), kept in P.1238-12
// (08/2023) (read in an open implementation; edition dates memory).
var P1238Surroundings = []Surroundings{
	{"office, in sight", unit.Span{Lo: 300, Hi: 83500}, 2, 27, 1.46, 34.62, 2.03, 3.76},
	{"office, out of sight", unit.Span{Lo: 300, Hi: 82000}, 4, 30, 2.46, 29.53, 2.38, 5.04},
	{"corridor, in sight", unit.Span{Lo: 300, Hi: 83500}, 2, 160, 1.63, 28.12, 2.25, 4.07},
	{"corridor, out of sight", unit.Span{Lo: 625, Hi: 83500}, 4, 94, 2.77, 29.27, 2.48, 7.63},
	{"industrial, in sight", unit.Span{Lo: 625, Hi: 70280}, 2, 101, 2.31, 24.52, 2.06, 2.69},
	{"industrial, out of sight", unit.Span{Lo: 625, Hi: 70280}, 5, 108, 3.79, 21.01, 1.34, 9.05},
}

// SurroundingsNamed finds a row by its name.
func SurroundingsNamed(name string) (Surroundings, bool) {
	for _, s := range P1238Surroundings {
		if s.Name == name {
			return s, true
		}
	}
	return Surroundings{}, false
}

// Loss is the median loss on one floor: 10α·log10 d + β + 10γ·log10 f, with f in
// GHz (not MHz, as one open implementation has it) and d in metres, ITU-R
// P.1238-12 (08/2023) 3.1. Outside the row's frequencies and distances it is not
// known.
func (s Surroundings) Loss(f unit.MHz, metres float64) (unit.DB, bool) {
	if !s.Span.Contains(f) || !(metres >= s.From && metres <= s.To) {
		return 0, false
	}
	return known(10*s.alpha*math.Log10(metres) + s.beta + 10*s.gamma*math.Log10(float64(f)/1000))
}
