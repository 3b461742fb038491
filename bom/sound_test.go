package bom_test

import (
	"slices"
	"testing"

	"driploop/bom"
	"driploop/catalog/unit"
)

// checkGraph holds of any graph, whatever the plan: mates know their nodes, lines
// hang together from end to end, and what is taken adds up.
func checkGraph(t *testing.T, g *bom.Graph) {
	t.Helper()
	for _, m := range g.Mates {
		if !slices.Contains(m.A.Mates, m) || !slices.Contains(m.B.Mates, m) || m.Other(m.A) != m.B || m.Other(m.B) != m.A || m.A == m.B {
			t.Fatalf("the mate of %s and %s is not known to both", m.A.Name(), m.B.Name())
		}
		if n := len(m.Contacts()); n != len(m.Adapters)+1 {
			t.Fatalf("%d contacts over %d adapters", n, len(m.Adapters))
		}
	}
	for _, l := range g.Lines().All {
		checkLine(t, l)
	}
	for _, house := range []*bom.House{{}, sealing("TAPE"), sealing("GEN-TAPE-SA"), sealing("GEN-BUSHING"), sealing("GEN-CLIP-10")} {
		checkTakeoff(t, g, house)
	}
	for _, d := range g.Devices {
		if path, ok := g.PathToElectrode(d); ok {
			at := d
			for _, b := range path.Bonds {
				at = b.Other(at)
			}
			if at != path.End || at.Kind() != "electrode" {
				t.Fatalf("the way from %s to an electrode ends at %s", d.ID, at.ID)
			}
		}
	}
}

func checkLine(t *testing.T, l *bom.Line) {
	t.Helper()
	at := l.From.Name()
	for i, s := range l.Steps {
		from, to := at, at
		switch {
		case s.Contact != nil:
			from, to = s.Contact.A.Name, s.Contact.B.Name
			if s.Reverse {
				from, to = to, from
			}
		case s.Cable != nil:
			from, to = s.Cable.Ends[0].Name(), s.Cable.Ends[1].Name()
			if s.Reverse {
				from, to = to, from
			}
		case s.Lead != nil:
			from, to = s.Lead.Name(), s.Lead.Name()
		case s.Pass.Device != nil:
			from, to = s.Pass.Device.ID+"."+s.Pass.In.Name, s.Pass.Device.ID+"."+s.Pass.Out.Name
		default:
			from, to = s.Pass.Part.ID, s.Pass.Part.ID
		}
		if from != at {
			t.Fatalf("step %d of %s is at %s and goes on from %s:\n%s", i, l.Name(), at, from, path(l))
		}
		at = to
	}
	if at != l.To.Name() {
		t.Fatalf("%s ends at %s:\n%s", l.Name(), at, path(l))
	}
	active := func(n *bom.Node) bool { return n.Device != nil && n.Device.Active() }
	antenna := func(n *bom.Node) bool { return n.Device != nil && n.Device.Kind() == "antenna" }
	ok := map[bom.LineKind]bool{
		bom.Feed: antenna(l.From) && active(l.To) && l.To.Port.Side.V != "server",
		bom.Leg:  active(l.From) && antenna(l.To) && l.From.Port.Side.V == "server",
		bom.Link: active(l.From) && active(l.To),
		bom.Stub: active(l.From) || antenna(l.From),
	}[l.Kind]
	if !ok {
		t.Fatalf("%s is no %s", l.Name(), l.Kind)
	}
	for _, c := range l.Crossings() {
		if !c.Out.Outdoors() || !c.In.Indoors() || c.On == "" || min(c.Outer, c.Inner) < 0 || max(c.Outer, c.Inner) > len(l.Steps) || c.In1st != (c.Inner < c.Outer) && c.Inner != c.Outer {
			t.Fatalf("%s crosses as %+v", l.Name(), c)
		}
	}
}

func checkTakeoff(t *testing.T, g *bom.Graph, house *bom.House) {
	t.Helper()
	q := g.Takeoff(house)
	last := ""
	for _, r := range q.Rows {
		var length, bare unit.MM
		for _, p := range r.Pieces {
			length, bare = length+p.Length, bare+p.Bare
		}
		if r.Part.ID <= last || length != r.Length || bare != r.Bare || r.Each < 0 || r.Each == 0 && r.Length == 0 && len(r.Pieces) == 0 {
			t.Fatalf("a row is %+v after %s", r, last)
		}
		if r.Part.CutStock() != (len(r.Pieces) > 0) || r.Part.CutStock() && r.Each > 0 {
			t.Fatalf("%s is taken as %+v", r.Part.ID, r)
		}
		last = r.Part.ID
	}
	checkEndsAreCounted(t, g, q)
	for i, x := range bom.Totals([]bom.PlanTakeoff{{Job: "one", Takeoff: q}}) {
		if r := q.Rows[i]; x.Part != r.Part || x.Each != r.Each || x.Length != r.Length || x.Bare != r.Bare {
			t.Fatalf("the total of one job is %+v, its row %+v", x, r)
		}
	}
}

// checkEndsAreCounted holds that each end of each new field-cut cable has a connector
// in the takeoff or a gap.
func checkEndsAreCounted(t *testing.T, g *bom.Graph, q *bom.Takeoff) {
	t.Helper()
	ends, counted := 0, 0
	for _, c := range g.Cables {
		if c.Part != nil && c.Part.Cable != nil && !c.Row.Existing.V && !c.Row.SuppliedBy.Set {
			ends += 2
		}
	}
	for _, r := range q.Rows {
		if r.Part.Connector != nil {
			counted += r.Each
		}
	}
	for _, x := range g.Plan.Extras { // counted beside the ends
		if p := g.Catalog.Look(x.Part.V); p != nil && p.Connector != nil {
			counted -= x.Qty.V.Each
		}
	}
	for _, x := range q.Gaps {
		if len(x.Says) > 4 && (x.Says[:4] == "end " || x.Says[:4] == "no c") {
			counted++
		}
	}
	if ends != counted {
		t.Fatalf("%d ends are to be made, %d are counted or missing", ends, counted)
	}
}
