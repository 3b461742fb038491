package show

import (
	"encoding/json"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

// Every part of the demo and of the generic catalog reads on a wide page and on a
// narrow one.
func TestPartsText(t *testing.T) {
	firm := demo(t)
	p := &Parts{Counted: true}
	for _, part := range firm.Catalog.All() {
		qty, _ := firm.Stock.OnHand(part.ID)
		p.Rows = append(p.Rows, PartRow{part, qty})
	}
	for _, width := range []int{40, 80} {
		text := string(p.Text(Page{Width: width}))
		if wide := tooWide(text, width); wide != "" {
			t.Errorf("at %d columns: %q", width, wide)
		}
		if bad := harmlessText(text); bad != "" {
			t.Error(bad)
		}
	}
	src, err := p.JSON()
	if err != nil {
		t.Fatal(err)
	}
	var out struct{ Parts []map[string]any }
	if err := json.Unmarshal(src, &out); err != nil || len(out.Parts) != len(p.Rows) {
		t.Fatalf("%d of %d parts came back (%v)", len(out.Parts), len(p.Rows), err)
	}
	for _, j := range out.Parts {
		for _, key := range []string{"part", "kind", "name", "maker", "code", "status", "generic", "rated", "instead", "ports", "facts", "on_hand", "unit"} {
			if _, there := j[key]; !there {
				t.Fatalf("%v has no %s", j["part"], key)
			}
		}
	}
}

// A line about what a part is good for, for one part of each sort.
func TestPartFacts(t *testing.T) {
	parts := demo(t).Catalog
	for id, want := range map[string]string{
		"CX-10":       "50 ohm, to 4000 MHz, 10.3 mm across, bends to 52 mm",
		"NC-10-NM":    "N male, 50 ohm, on CX-10",
		"JMP-10-NN-1": "1 m, N male to N male, of CX-10",
		"SPL-2-75":    "in, out1, out2 N female 75 ohm",
		"ANT-LP-11":   "698–960 MHz 9.5 dBi, 1710–2700 MHz 11 dBi, fixing mast",
		"AMP-W-65":    "donor, server N female; power",
		"MT-42":       "tube 42.4 mm, wall 2.9 mm, 2 m",
		"TAPE-SA":     "one serves 6 joints",
		"BC-6-CU":     "copper, 6 AWG",
	} {
		p := parts.Look(id)
		if p == nil {
			t.Errorf("%s is not in the demo", id)
			continue
		}
		if got := partFacts(p); !strings.Contains(strings.Join(got, "\n")+"\n", want) {
			t.Errorf("%s: %q does not hold %q", id, got, want)
		}
	}
}

// A pasted block is a plan by itself: as it comes, and with its hints filled in. It
// names every port.
func TestPartTOML(t *testing.T) {
	parts := demo(t).Catalog
	tables := map[string]int{}
	for _, p := range parts.All() {
		block := string(PartTOML(p, parts.Connectors(p.ID)))
		if bad := harmlessText(block); bad != "" {
			t.Errorf("%s: %s", p.ID, bad)
		}
		for _, src := range []string{block, unhinted(block)} {
			plan, problems := readPlan(src)
			for _, problem := range problems {
				t.Errorf("%s: %s: %s\n%s", p.ID, problem.At.Text(), problem.Says, src)
			}
			if n := namesOf(plan, p, tables); n != 1 {
				t.Errorf("%s: %d rows of the plan name it\n%s", p.ID, n, src)
			}
		}
		for _, port := range p.PortNames() {
			if !strings.Contains(block, "# port "+port) {
				t.Errorf("%s: port %s is not named", p.ID, port)
			}
		}
	}
	for _, table := range []string{"device", "cable", "data", "wire", "bond", "extra"} {
		if tables[table] == 0 {
			t.Errorf("no part makes a block of the table %s", table)
		}
	}
}

// unhinted takes the marks off what may be filled in.
func unhinted(block string) string {
	var out strings.Builder
	for line := range strings.Lines(block) {
		if strings.HasPrefix(line, "#") && !strings.HasPrefix(line, "# ") {
			line = line[1:]
		}
		out.WriteString(line)
	}
	return out.String()
}

func readPlan(src string) (*bom.Plan, []source.Problem) {
	file, problems := source.NewFile("plans/x.toml", []byte(src))
	doc, more := source.Parse(file)
	plan, last := bom.ReadPlan(doc)
	return plan, append(append(problems, more...), last...)
}

// namesOf counts the rows of a plan that name a part, by table.
func namesOf(plan *bom.Plan, p *catalog.Part, tables map[string]int) int {
	n := 0
	count := func(table, part string) {
		if part == p.ID {
			tables[table]++
			n++
		}
	}
	for _, r := range plan.Devices {
		count("device", r.Part.V)
	}
	for _, r := range plan.Cables {
		count("cable", r.Part.V)
	}
	for _, r := range plan.Data {
		count("data", r.Part.V)
	}
	for _, r := range plan.Wires {
		count("wire", r.Part.V)
	}
	for _, r := range plan.Bonds {
		count("bond", r.Part.V)
	}
	for _, r := range plan.Extras {
		count("extra", r.Part.V)
	}
	return n
}
