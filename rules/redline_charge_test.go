package rules

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"driploop/bom"
	"driploop/catalog/source"
)

func planFrom(t *testing.T, path, text string) (*source.Doc, *bom.Plan) {
	t.Helper()
	doc, _ := parse(path, []byte(text))
	plan, _ := bom.ReadPlan(doc)
	return doc, plan
}

// What a change is charged to and what Compose takes from where are two ways to say
// the same. Of every line of every plan, taken out: the kind that the change is said
// to be makes the head out of the base, and all other kinds together make nothing.
func TestChargesAgreeWithCompose(t *testing.T) {
	names, err := filepath.Glob("../testdata/s*/plans/*.toml")
	if err != nil || len(names) < 8 {
		t.Fatalf("%d plans are there (%v)", len(names), err)
	}
	tried := map[Charge]int{}
	for _, name := range names {
		src, err := os.ReadFile(name)
		if err != nil {
			t.Fatal(err)
		}
		lines := strings.Split(string(src), "\n")
		for i, line := range lines {
			if !strings.Contains(line, "=") || strings.HasPrefix(line, "#") {
				continue
			}
			text := strings.Join(append(append([]string{}, lines[:i]...), lines[i+1:]...), "\n")
			p := &pair{entry: sideOf[*source.Entry]{{Path: name}, {Path: name}}}
			p.doc[atBase], p.plan[atBase] = planFrom(t, name, string(src))
			p.doc[atHead], p.plan[atHead] = planFrom(t, name, text)
			(&comparison{}).planChanges(p)
			charges := p.moved.charges()
			same := bom.SameMeaning(p.plan[atBase], p.plan[atHead])
			if same != (len(charges) == 0) {
				t.Errorf("%s without %q: the meaning is the same: %v, charged to %v", name, line, same, charges)
				continue
			}
			if len(charges) != 1 {
				continue
			}
			tried[charges[0]]++
			only, rest := mix{}, mix{atHead, atHead, atHead}
			switch charges[0] {
			case ToWork:
				only.work, rest.work = atHead, atBase
			case ToFacts:
				only.facts, rest.facts = atHead, atBase
			case ToRulers:
				only.rulers, rest.rulers = atHead, atBase
			}
			if !bom.SameMeaning(planOf(p.plan, only), p.plan[atHead]) {
				t.Errorf("%s without %q: %s alone does not make the head", name, line, charges[0])
			}
			if !bom.SameMeaning(planOf(p.plan, rest), p.plan[atBase]) {
				t.Errorf("%s without %q: something moves beside %s", name, line, charges[0])
			}
		}
	}
	for c := ToRulers; c <= ToWork; c++ {
		if tried[c] < 5 {
			t.Errorf("%d lines were charged to %s; the test shows nothing of it", tried[c], c)
		}
	}
}

// The steps lead from base to head, one kind at a time.
func TestStepsExchangeOneKind(t *testing.T) {
	if steps[0].mix != (mix{}) || steps[len(steps)-1].mix != (mix{atHead, atHead, atHead}) {
		t.Fatal("the steps do not lead from base to head")
	}
	for i := 1; i < len(steps); i++ {
		a, b := steps[i-1].mix, steps[i].mix
		n := 0
		for _, moved := range []struct {
			yes bool
			to  Charge
		}{{a.work != b.work, ToWork}, {a.facts != b.facts, ToFacts}, {a.rulers != b.rulers, ToRulers}} {
			if moved.yes {
				n++
				if moved.to != steps[i].to || int(moved.to) != i {
					t.Errorf("step %d exchanges %s and is charged to %s", i, moved.to, steps[i].to)
				}
			}
		}
		if n != 1 {
			t.Errorf("step %d exchanges %d kinds", i, n)
		}
	}
}

// Quantities of one size, references under new names and numbers are one value, and
// nothing else is.
func TestMeaning(t *testing.T) {
	node := func(s string) *source.Node {
		doc, _ := parse("a.toml", []byte("v = "+s+"\n"))
		return doc.Root.Get("v").Value
	}
	m := meaning{renames: bom.Renames{"donor": "north", "C1": "F1"}}
	for _, c := range []struct {
		a, b string
		key  string
		want bool
	}{
		{`"60 ft"`, `"18.288 m"`, "length", true},
		{`"60 ft"`, `"18.3 m"`, "length", false},
		{`10`, `10.0`, "qty", true},
		{`"10 AWG"`, `"10 AWG"`, "size", true},
		{`"N plug"`, `"N male"`, "connector", true},
		{`"N male"`, `"N female"`, "connector", false},
		{`"1.50"`, `"1.5"`, "price", true},
		{`"donor.rf"`, `"north.rf"`, "from", true},
		{`"donor.rf"`, `"north.rf"`, "because", false},
		{`"cable.C1"`, `"cable.F1"`, "on", true},
		{`["donor", "C1"]`, `["north", "F1"]`, "served_by", true},
		{`["donor", "C1"]`, `["F1", "north"]`, "served_by", false},
		{`{ a = 1, b = 2 }`, `{ b = 2, a = 1 }`, "set", true},
		{`{ a = 1 }`, `{ a = 1, b = 2 }`, "set", false},
		{`2026-12-01`, `2026-12-02`, "on", false},
		{`true`, `false`, "existing", false},
	} {
		if got := m.under(c.key).same(node(c.a), node(c.b)); got != c.want {
			t.Errorf("%s = %s and %s: %v", c.key, c.a, c.b, got)
		}
	}
}

// A value of a key that is nobody's business is not written out, nor is a price in a
// row that is shown as a whole.
func TestValueTextKeepsPrivate(t *testing.T) {
	doc, _ := parse("a.toml", []byte(`v = { part = "X", serial = "S-1", price = "9.00", at = { address = ["a"] } }`))
	if got, want := valueText(doc.Root.Get("v").Value), "{ part = X, serial = …, price = …, at = { address = … } }"; got != want {
		t.Errorf("got %s, want %s", got, want)
	}
	long, _ := parse("a.toml", []byte(`v = "`+strings.Repeat("ä", 300)+`"`))
	if got := []rune(valueText(long.Root.Get("v").Value)); len(got) != mostValue || got[mostValue-1] != '…' {
		t.Errorf("a long value has %d characters", len(got))
	}
}
