package catalog

import (
	"fmt"
	"math/rand/v2"
	"testing"

	"driploop/catalog/source"
	"driploop/catalog/unit"
)

func val[T any](v T) source.Val[T] { return source.Val[T]{V: v, Set: true} }

// randomStore makes sheets of counts and moves, some with a time of day. Of a
// hundred parts there is so much that no bin runs out.
func randomStore(rnd *rand.Rand, rows int) []*Sheet {
	shelves := []string{"shop", "van-1", "dock", "returns"}
	parts := make([]string, 100)
	for i := range parts {
		parts[i] = fmt.Sprintf("P-%d", i)
	}
	pick := func(list []string) string { return list[rnd.IntN(len(list))] }
	when := func() source.Val[Moment] {
		m := Moment{Day: unit.Date{Year: 2026, Month: 11, Day: 2 + rnd.IntN(28)}}
		if rnd.IntN(3) == 0 {
			m.Clock, m.Sec = true, rnd.IntN(24)*3600
		}
		return val(m)
	}
	first := &Sheet{ID: "first", File: &source.File{Path: "stock/counts/first.toml"}}
	for _, p := range parts {
		for _, s := range shelves {
			first.Counts = append(first.Counts, Count{Row: Row{On: val(Moment{Day: unit.Date{Year: 2026, Month: 11, Day: 1}})}, Part: val(p), Where: val(s), Qty: val(1000000)})
		}
	}
	sheets := []*Sheet{first}
	for n := 0; n < rows; n += 10 {
		s := &Sheet{ID: fmt.Sprint(n), File: &source.File{Path: fmt.Sprintf("stock/move/%05d.toml", n)}}
		sheets = append(sheets, s)
		for i := range 10 {
			row := Row{At: source.Place{File: s.File, From: int32(i)}, On: when()}
			if rnd.IntN(8) == 0 {
				s.Counts = append(s.Counts, Count{Row: row, Part: val(pick(parts)), Where: val(pick(shelves)), Qty: val(900000 + rnd.IntN(100000))})
				continue
			}
			from := rnd.IntN(len(shelves))
			to := (from + 1 + rnd.IntN(len(shelves)-1)) % len(shelves)
			m := Move{Row: row, Part: val(pick(parts)), From: val(shelves[from]), To: val(shelves[to]), Qty: val(1 + rnd.IntN(20))}
			if rnd.IntN(4) == 0 {
				m.To, m.Job = val(ToJob), val("x")
			}
			s.Moves = append(s.Moves, m)
		}
	}
	return sheets
}

var onePart Part

func anyPart(string) *Part { return &onePart }

// byDefinition is the quantity of one bin as FORMAT has it, found by looking at
// every row: the newest count plus what moved after it, and of two counts of one
// time the lower. Instants are hours here, with a 25th for the evening of a count.
func byDefinition(sheets []*Sheet, part, where string) int {
	hour := func(m Moment, evening int) int {
		h := evening
		if m.Clock {
			h = m.Sec / 3600
		}
		return m.Day.Day*100 + h
	}
	newest, qty := -1, 0
	for _, s := range sheets {
		for _, c := range s.Counts {
			if c.Part.V != part || c.Where.V != where {
				continue
			}
			switch at := hour(c.On.V, 24); {
			case at > newest:
				newest, qty = at, c.Qty.V
			case at == newest:
				qty = min(qty, c.Qty.V)
			}
		}
	}
	for _, s := range sheets {
		for _, m := range s.Moves {
			if m.Part.V != part || hour(m.On.V, 0) <= newest {
				continue
			}
			if m.From.V == where {
				qty -= m.Qty.V
			}
			if m.To.V == where {
				qty += m.Qty.V
			}
		}
	}
	return qty
}

func TestBookAgainstDefinition(t *testing.T) {
	premises := yardOf(t)
	for seed := range uint64(5) {
		sheets := randomStore(rand.New(rand.NewPCG(seed, 7)), 2000)
		s := Book(premises, sheets, nil, anyPart, unit.Date{Year: 2026, Month: 12, Day: 1})
		if len(s.Bins) != 400 {
			t.Fatalf("%d bins, want 100 parts on 4 shelves", len(s.Bins))
		}
		for _, b := range s.Bins {
			if want := byDefinition(sheets, b.Part, b.Where); b.Qty.Each != int64(want) {
				t.Errorf("seed %d: %s at %s is %s, by definition %d", seed, b.Part, b.Where, b.Qty, want)
			}
		}
	}
}

func BenchmarkBook5000Rows(b *testing.B) {
	premises := yardOf(b)
	sheets := randomStore(rand.New(rand.NewPCG(1, 7)), 5000)
	for b.Loop() {
		Book(premises, sheets, nil, anyPart, unit.Date{Year: 2026, Month: 12, Day: 1})
	}
}
