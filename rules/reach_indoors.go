package rules

import (
	"fmt"
	"slices"
	"strconv"
	"strings"

	"driploop/bom"
	"driploop/catalog/source"
	"driploop/catalog/unit"
	"driploop/rules/rf"
)

// indoors is the path from a server antenna to a phone.
type indoors struct {
	loss, doubt unit.DB
	lacks       []Lack

	area *bom.Area
	at   unit.MHz
}

func noPath(at source.Place, what string) indoors { return indoors{lacks: []Lack{{what, at}}} }

// indoors is the path loss from server antenna to phone: with walls, free space
// and the walls; without, the indoor model, which holds the walls already.
func (c *Case) indoors(a *bom.Area, f unit.MHz) indoors {
	unread := slices.IndexFunc(a.Walls.V, func(w source.Val[bom.Wall]) bool { return !w.Set })
	switch {
	case !a.Distance.Set:
		return noPath(a.At, "distance of the area "+a.Name.V)
	case unread >= 0:
		return noPath(a.Walls.V[unread].At, "a wall of the area "+a.Name.V+" that can be read")
	case a.Walls.Set && a.Floors.V > 0:
		return noPath(a.Floors.At, "loss_db of the floors of the area "+a.Name.V+" among its walls: floors belong to the indoor model, which takes no walls")
	case a.Walls.Set:
		return throughWalls(a, f)
	}
	kind := map[string]rf.Building{"residential": rf.Residential, "commercial": rf.Commercial}[a.Environment.V]
	v, ok := rf.IndoorLoss(kind, f, a.Distance.V.Metres(), a.Floors.V)
	if !ok {
		return noPath(a.Distance.At, "a distance and floors that ITU-R P.1238 covers, for the area "+a.Name.V)
	}
	return indoors{loss: v, area: a, at: f}
}

// words names what a path is made of, with its documents, in one line.
func (p *indoors) words() string {
	a := p.area
	if a.Walls.Set {
		out := fmt.Sprintf("%s of free space (ITU-R P.525)", a.Distance.V)
		for i := range a.Walls.V {
			w := &a.Walls.V[i].V
			l, _ := wallLoss(w, p.at)
			out += fmt.Sprintf(", %s %s dB (%s)", w.Name.V, unit.Fixed(float64(l.Loss), 2), l.Basis)
		}
		return out
	}
	how := fmt.Sprintf("%s indoors (ITU-R P.1238-9, %s", a.Distance.V, a.Environment.Or("office"))
	if a.Floors.V > 0 {
		how += ", " + count(a.Floors.V, "floor", "floors")
	}
	return how + ")"
}

// throughWalls is free space and the walls; how good their losses are adds up as the
// root of the sum of squares.
func throughWalls(a *bom.Area, f unit.MHz) indoors {
	walls, doubts := make([]unit.DB, 0, len(a.Walls.V)), make([]rf.Tolerance, 0, len(a.Walls.V))
	for i := range a.Walls.V {
		w := &a.Walls.V[i]
		l, lack := wallLoss(&w.V, f)
		if lack != "" {
			return noPath(w.At, lack)
		}
		walls, doubts = append(walls, l.Loss), append(doubts, rf.Either(l.Tolerance))
	}
	all, sure := rf.Together(doubts...)
	loss, ok := rf.PathThrough(f, a.Distance.V.Metres(), walls...)
	if !ok || !sure {
		return noPath(a.Distance.At, "a distance in the far field for the area "+a.Name.V)
	}
	return indoors{loss: loss, doubt: all.Above, area: a, at: f}
}

// slab parts the name of a wall from its thickness in millimetres: "plasterboard
// 12.5 mm", "concrete 8 in". A wall without one has 0.
func slab(name string) (material string, mm float64) {
	for _, u := range [3]struct {
		suffix string
		per    float64
	}{{"mm", 1}, {"cm", 10}, {"in", 25.4}} {
		rest, ok := strings.CutSuffix(name, u.suffix)
		rest = strings.TrimRight(rest, " ")
		i := strings.LastIndexByte(rest, ' ')
		if !ok || i < 0 {
			continue
		}
		if v, err := strconv.ParseFloat(rest[i+1:], 64); err == nil && v > 0 {
			return strings.TrimRight(rest[:i], " "), v * u.per
		}
	}
	return name, 0
}

// wallLoss is the plan's own figure, else that of the published tables, or what is
// lacking.
func wallLoss(w *bom.Wall, f unit.MHz) (rf.WallLoss, string) {
	if w.LossDB.Set {
		if v, ok := rf.Lookup(rfPoints(w.LossDB.V), unit.Span{}, f); ok {
			return rf.WallLoss{Loss: v, Basis: "plan"}, ""
		}
		return rf.WallLoss{}, "a loss of the wall " + source.Quote(w.Name.V)
	}
	name, mm := slab(w.Name.V)
	if v, ok := rf.Wall(name, mm, f); ok {
		return v, ""
	}
	return rf.WallLoss{}, "loss_db of the wall " + source.Quote(w.Name.V) + ", for which no table here has a figure"
}
