package bom_test

import (
	"slices"
	"testing"

	"driploop/bom"
)

// A demand lists what the takeoff counts, and keeps no more: the pieces of all parts
// lie in one stretch of memory, and none of them reaches into the next.
func TestDemandIsItsTakeoff(t *testing.T) {
	g := lay(t, fullJob)
	q := g.Takeoff(&bom.House{})
	d := bom.DemandOf(g.Plan, q)
	if len(d.Needs) != len(q.Rows) {
		t.Fatalf("%d needs of %d rows", len(d.Needs), len(q.Rows))
	}
	for i, n := range d.Needs {
		row := q.Rows[i]
		if n.Part != row.Part || n.Each != row.Each || n.At != row.At || !slices.Equal(n.Pieces, row.Pieces) {
			t.Errorf("need %+v of row %+v", n, row)
		}
		if cap(n.Pieces) != len(n.Pieces) {
			t.Errorf("%s: room for %d pieces, %d are there", n.Part.ID, cap(n.Pieces), len(n.Pieces))
		}
	}
}
