package bom_test

import (
	"bytes"
	"fmt"
	"math/rand/v2"
	"reflect"
	"regexp"
	"slices"
	"strings"
	"testing"

	"github.com/google/go-cmp/cmp"

	"driploop/bom"
	"driploop/catalog"
	"driploop/catalog/source"
)

func planReader(d *source.Doc) []source.Problem { _, problems := bom.ReadPlan(d); return problems }

func TestDressPlan(t *testing.T) {
	const before = `# Ferry hut. The key is at the pub.

[cable.C1] # the long one
ends   = ["N plug", 'NC-10'] # from the shop
way    = ["roof  1.0 m", "entry", "entry 02 ft"]
length = "18.50 m"
part   = "CX"
# Two were heard.
[[signal]]
rsrp_dbm = -101.0
band = "B12"
[device.mast]
place = "roof"
part = "M"
copies = { m-2 = [1.0, 2.0, 3.0] }
[site]
coldest = "-15.0 °C"
[job]
install_on = 2026-12-15
`
	const after = `# Ferry hut. The key is at the pub.

[job]
install_on = 2026-12-15

[site]
coldest = "-15 C"

[device.mast]
part = "M"
place = "roof"
copies = { m-2 = [1.0, 2.0, 3.0] }

[cable.C1] # the long one
part   = "CX"
length = "18.5 m"
ends   = ["N male", 'NC-10'] # from the shop
way    = ["roof 1 m", "entry", "entry 2 ft"]

# Two were heard.
[[signal]]
band = "B12"
rsrp_dbm = -101.0
`
	got, problems, err := source.Dress("plans/hut.toml", []byte(before), planReader)
	if err != nil || len(problems) > 0 || string(got) != after {
		t.Errorf("it became\n%s\nwant\n%s\n%v %v", got, after, err, problems)
	}
}

// TestDressRandomPlans dresses plans with keys, tables and comments in every place.
// They mean the same before and after to the plan's own reader, each comment stands
// where it stood, and a second time nothing changes.
func TestDressRandomPlans(t *testing.T) {
	const parts = 4
	for part := range uint64(parts) {
		t.Run(fmt.Sprint(part), func(t *testing.T) {
			t.Parallel()
			plans, changed, spelled, comments := wildPlans/parts, 0, 0, 0
			for i := range uint64(plans) {
				p := newWildPlan(i*parts + part)
				if p.dress(t) {
					changed++
				}
				if bytes.Contains(p.text, []byte(`.50 m"`)) {
					spelled++
				}
				comments += p.comments
			}
			if changed < plans*9/10 || spelled < plans/10 || comments < 5*plans {
				t.Errorf("of %d plans %d changed, %d were spelled otherwise, and they had %d comments: that tests little", plans, changed, spelled, comments)
			}
		})
	}
}

// dress lays the plan out twice and reports whether the first time changed it.
func (p *wildPlan) dress(t *testing.T) (changed bool) {
	t.Helper()
	out, problems, err := source.Dress("plans/wild.toml", p.text, planReader)
	if err != nil || len(problems) > 0 {
		t.Fatalf("%v %v\n%s", err, problems, p.text)
	}
	if bad := p.compare(out); bad != "" {
		t.Fatalf("%s\nbefore\n%s\nafter\n%s", bad, p.text, out)
	}
	if p.IntN(10) > 0 {
		return !bytes.Equal(out, p.text) // Dress has looked at it twice itself
	}
	again, _, err := source.Dress("plans/wild.toml", out, planReader)
	if err != nil || !bytes.Equal(again, out) {
		t.Fatalf("a second time it becomes\n%s\nthe first time it was\n%s", again, out)
	}
	return !bytes.Equal(out, p.text)
}

// wildPlan is a plan that was written by somebody in a hurry.
type wildPlan struct {
	*rand.Rand
	text     []byte
	comments int
	above    map[string]string // what stands on the line below a comment
	beside   map[string]string // what stands on its line
	names    int
}

func newWildPlan(seed uint64) *wildPlan {
	p := &wildPlan{Rand: rand.New(rand.NewPCG(seed, 3)), above: map[string]string{}, beside: map[string]string{}}
	var groups [][]string // blocks of one first key, whose order matters
	for _, k := range wildKeys.Keys {
		if p.IntN(5) == 0 {
			groups = append(groups, p.table(k))
		}
	}
	var b strings.Builder
	b.WriteString(p.of("", "", "# head\n\n", "#:schema x\n\n", "\n\n"))
	for len(groups) > 0 {
		i := p.IntN(len(groups))
		b.WriteString(p.apart())
		b.WriteString(groups[i][0])
		if groups[i] = groups[i][1:]; len(groups[i]) == 0 {
			groups = slices.Delete(groups, i, i+1)
		}
	}
	b.WriteString(p.apart())
	text := strings.TrimRight(b.String(), p.of("", "\n"))
	if p.IntN(4) == 0 {
		text = strings.ReplaceAll(text, "\n", "\r\n")
	}
	p.text = []byte(p.of("", "", "", "\uFEFF") + text)
	return p
}

var wildKeys = bom.DescribePlan()

func (p *wildPlan) of(words ...string) string { return words[p.IntN(len(words))] }

// comment makes a comment that is found again.
func (p *wildPlan) comment() string {
	p.comments++
	return fmt.Sprintf("%s <%d> %s", p.of("#", "#", "##", "#\t"), p.comments, p.of("", "[job]", `a = "1 m"`, "é", "'''", `"""`))
}

func (p *wildPlan) apart() string {
	switch p.IntN(6) {
	case 0:
		return "\n"
	case 1:
		return "\n" + p.indent() + p.comment() + "\n\n"
	case 2:
		return "\n\n\n" + p.comment() + "\n" + p.comment() + "\n\n"
	}
	return ""
}

func (p *wildPlan) indent() string { return p.of("", "", "  ", "\t") }

// line writes one line, maybe with comments above and beside it.
func (p *wildPlan) line(begin, rest string) string {
	above, indent := "", p.indent()
	if p.IntN(5) == 0 {
		c := p.comment()
		p.above[numbered.FindString(c)] = begin
		above = p.of("", "\n") + p.indent() + c + "\n"
	}
	if p.IntN(5) == 0 {
		c := p.comment()
		if !strings.Contains(rest, "\n") {
			p.beside[numbered.FindString(c)] = begin
		}
		rest += p.of("", " ", "   ") + c
	}
	return above + indent + begin + rest + p.of("", "", " \t") + "\n" + p.of("", "", "", "\n")
}

var numbered = regexp.MustCompile(`<\d+>`)

// table writes the tables of one first key.
func (p *wildPlan) table(k source.KeyDoc) (blocks []string) {
	switch k.Shape {
	case source.OneTable:
		return p.body("["+k.Name+"]", k.Name, k.Sub, false)
	case source.RowTables:
		for range 1 + p.IntN(3) {
			blocks = append(blocks, p.body("[["+k.Name+"]]", k.Name, k.Sub, false)...)
		}
		return blocks
	}
	if p.IntN(3) == 0 {
		text := p.line("["+k.Name+"]", "")
		for range 1 + p.IntN(3) {
			text += p.line(p.name()+" = ", p.braces(k.Sub))
		}
		return []string{text}
	}
	for range 1 + p.IntN(3) {
		path := k.Name + "." + p.name()
		blocks = append(blocks, p.body("["+path+"]", path, k.Sub, true)...)
	}
	return blocks
}

func (p *wildPlan) name() string {
	p.names++
	return fmt.Sprintf("%s%d", p.of("b", "a", "Z-"), p.names)
}

// body writes a table with some keys of a record in any order, and its sub-tables.
func (p *wildPlan) body(header, path string, r *source.Record, below bool) []string {
	text, subs := p.line(header, ""), []string(nil)
	for _, i := range p.Perm(len(r.Keys)) {
		k := r.Keys[i]
		switch {
		case p.IntN(2) == 0:
		case k.Shape == source.OneTable && below && p.IntN(2) == 0:
			subs = append(subs, p.body("["+path+"."+k.Name+"]", path+"."+k.Name, k.Sub, false)...)
		case k.Shape == source.OneTable && p.IntN(2) == 0:
			for _, s := range k.Sub.Keys {
				text += p.line(k.Name+"."+s.Name+" = ", p.value(s.Type))
			}
		case k.Shape == source.OneTable:
			text += p.line(k.Name+" = ", p.braces(k.Sub))
		case k.Shape == source.Scalar:
			text += p.line(k.Name+p.of(" = ", "=", "  = "), p.lines(p.value(k.Type)))
		}
	}
	if p.IntN(8) == 0 {
		text += p.line("nobody_asked = ", "1")
	}
	if p.IntN(6) == 0 {
		text += p.comment() + "\n\n"
	}
	return append([]string{text}, subs...)
}

// lines breaks a list over several lines with comments in it.
func (p *wildPlan) lines(v string) string {
	if !strings.HasPrefix(v, "[") || p.IntN(3) > 0 {
		return v
	}
	inside := strings.TrimSuffix(strings.TrimPrefix(v, "["), "]")
	return "[ " + p.comment() + "\n\t " + inside + " " + p.comment() + "\n\n  " + p.comment() + "\n]"
}

func (p *wildPlan) braces(r *source.Record) string {
	var keys []string
	for _, i := range p.Perm(len(r.Keys)) {
		if k := r.Keys[i]; k.Shape == source.Scalar && p.IntN(2) == 0 {
			keys = append(keys, k.Name+" = "+p.value(k.Type))
		}
	}
	return "{ " + strings.Join(keys, ", ") + " }"
}

func (p *wildPlan) length() string {
	return p.of("18.50 m", "18.5 m", "060 ft", "8.0  in", "8 in", ".5 cm", "7m")
}

// value writes a value of a type, now and then one that it refuses.
func (p *wildPlan) value(t source.TypeDoc) string {
	switch {
	case len(t.OneOf) > 0:
		return `"` + p.of(t.OneOf...) + `"`
	case t.List != nil:
		return "[" + p.value(*t.List) + p.of(", ", ",") + p.value(*t.List) + "]"
	case t.Each != nil:
		return "{ B5 = " + p.value(*t.Each) + ", B12 = " + p.value(*t.Each) + " }"
	case t.Min != nil:
		return fmt.Sprintf(p.of("%.0f", "%.2f"), *t.Min+1)
	}
	quote := p.of(`"`, `"`, `'`)
	switch t.Name {
	case "length":
		return quote + p.length() + quote
	case "place, or place and length":
		return quote + p.of("roof", "entry ", "shop  ") + p.length() + quote
	case "temperature":
		return quote + p.of("45 C", "-15.0 °C", "113.0 F") + quote
	case "speed":
		return quote + p.of("44.0 m/s", "115 mph") + quote
	case "cable end", "connector":
		return quote + p.of("N male", "N plug", "SMB plug", "NC-10", "RP-SMA jack", "n plug") + quote
	case "band":
		return quote + p.of("B12", "n77", "b5") + quote
	case "true or false":
		return p.of("true", "false", "1")
	case "date":
		return "2026-12-01"
	case "text":
		return p.of(`"x"`, `'# x'`, `"""`+"\n\nx = 1\n[job]\n# y\n"+`"""`, `"1.0 m"`)
	case "table":
		return p.of(`{ name = "steel # rack", loss_db = 6 }`, `{ back_off_db = 10.0 }`, `{ at = [1, 2, 3], place = "roof" }`)
	}
	return p.of(`"donor.rf"`, "[1.0, 2.0, 3.50]", "7", `"1.0 m"`)
}

// compare says in what a dressed plan differs from what it was.
func (p *wildPlan) compare(out []byte) string {
	before, after := typed(p.text), typed(out)
	if !cmp.Equal(before, after, apartFromPlaces...) {
		return "it means something else: " + cmp.Diff(before, after, apartFromPlaces...)
	}
	lines := strings.Split(strings.ReplaceAll(string(out), "\r\n", "\n"), "\n")
	for n := 1; n <= p.comments; n++ {
		mark := fmt.Sprintf("<%d>", n)
		if strings.Count(string(out), mark) != 1 {
			return fmt.Sprintf("the comment %s stands there %d times", mark, strings.Count(string(out), mark))
		}
		at := slices.IndexFunc(lines, func(l string) bool { return strings.Contains(l, mark) })
		if want := p.beside[mark]; !strings.HasPrefix(lines[at], want) {
			return fmt.Sprintf("the comment %s stood beside %s", mark, want)
		}
		if want, ok := p.above[mark]; ok && !strings.HasPrefix(lines[at+1], want) {
			return fmt.Sprintf("the comment %s stood above %s", mark, want)
		}
	}
	return ""
}

func typed(src []byte) *bom.Plan {
	file, _ := source.NewFile("plans/wild.toml", src)
	doc, _ := source.Parse(file)
	plan, _ := bom.ReadPlan(doc)
	plan.File = nil
	return plan
}

// apartFromPlaces compares what was read, wherever it stood and however a connector
// was called.
var apartFromPlaces = []cmp.Option{
	cmp.Comparer(func(a, b source.Place) bool { return true }),
	cmp.Comparer(catalog.SameFace),
	cmp.Exporter(func(reflect.Type) bool { return true }),
}
