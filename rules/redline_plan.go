package rules

import "driploop/catalog/source"

// The tables of a plan, by how their rows are told apart.
var (
	planTables = []string{"job", "site"}
	planNamed  = []string{"operator", "place", "device", "cable", "data", "wire", "bond"}
	planRows   = []struct {
		table string
		by    []string
	}{
		{"power_line", nil}, {"between", []string{"a", "b"}}, {"joint", []string{"a", "b"}}, {"signal", []string{"operator", "band", "mhz"}},
		{"area", []string{"name"}}, {"reading", []string{"what", "from", "to", "band", "operator", "at", "stage"}},
		{"reserve", []string{"tag", "part", "cable"}}, {"extra", []string{"part"}}, {"waive", []string{"rule", "on", "band"}},
	}
)

// planCharge says whether a key of a plan is work, fact or ruler; Compose parts plans
// by the same lines.
func planCharge(table, key string) Charge {
	switch table {
	case "job":
		switch key {
		case "profile", "code":
			return ToRulers
		case "stage", "setting", "use":
			return ToFacts
		}
		return ToWork
	case "waive":
		return ToRulers
	case "place":
		if key == "at" || key == "" {
			return ToWork
		}
		return ToFacts
	case "device":
		switch key {
		case "people", "lightning", "serial":
			return ToFacts
		}
		return ToWork
	case "area":
		switch key {
		case "target_rsrp_dbm":
			return ToRulers
		case "", "name", "served_by", "operators":
			return ToWork
		}
		return ToFacts
	case "cable", "joint", "data", "wire", "bond", "extra":
		return ToWork
	}
	return ToFacts
}

// planChanges lists what the plan says otherwise, and which kinds that is.
func (c *comparison) planChanges(p *pair) {
	a, b := p.doc[atBase], p.doc[atHead]
	if a == nil || b == nil || p.broken[atBase] || p.broken[atHead] {
		p.moved = moves{work: true, facts: true, rulers: true}
		return
	}
	d := &differ{meaning: meaning{renames: p.renames}, charge: planCharge, numbers: map[string]string{}}
	for _, t := range planTables {
		d.table(t, t, tableOf(a.Root.Get(t)), tableOf(b.Root.Get(t)))
	}
	paper := func(doc *source.Doc) *source.Node { return tableOf(doc.Root.Get("paper")) }
	d.table("paper", "paper", paper(a), paper(b))
	for _, t := range planNamed {
		d.named(t, a.Root.Get(t), b.Root.Get(t))
	}
	for _, t := range planRows {
		d.rows(t.table, a.Root.Get(t.table), b.Root.Get(t.table), t.by...)
	}
	for i := range d.out {
		d.out[i].File = p.path()
		p.moved.note(d.out[i].Charge)
	}
	p.changes, p.numbers = d.out, d.numbers
}
