package show

import (
	"fmt"
	"strings"
)

// Markdown writes the takeoff as a table for a pull request or a handbook.
func (t *Takeoff) Markdown() []byte {
	d := &Document{Title: "Takeoff", Blocks: []Block{{Text: []string{t.madeFrom()}}}}
	for _, o := range t.Overrides {
		d.Blocks[0].Items = append(d.Blocks[0].Items, Item{Text: "changed here: " + o})
	}
	for _, s := range t.From.Differs {
		d.Blocks[0].Items = append(d.Blocks[0].Items, Item{Text: "rulers: " + s})
	}
	if len(t.Rows) == 0 {
		d.Blocks = append(d.Blocks, Block{Text: []string{"These plans take nothing."}})
		t.gapsBlock(d)
		return d.Markdown()
	}
	g := &Grid{Words: 3, Columns: []string{"part", "kind", "for", "to bring", "installed"}}
	for _, r := range t.Rows {
		g.Rows = append(g.Rows, []string{r.Part.ID, r.Part.Kind.V, t.jobs(r), t.qty(r.Each, r.Length), t.installed(r)})
	}
	d.Blocks = append(d.Blocks, Block{Table: g})
	t.gapsBlock(d)
	return d.Markdown()
}

// gapsBlock adds what could not be counted.
func (t *Takeoff) gapsBlock(d *Document) {
	if len(t.Gaps) == 0 {
		return
	}
	b := Block{Head: "Not counted: " + words(len(t.Gaps), "thing", "things")}
	for _, g := range t.Gaps {
		b.Items = append(b.Items, Item{Text: fmt.Sprintf("%s, %s: %s (line %d).", g.Job, strings.Replace(g.On, ".", " ", 1), g.Says, g.At.Line())})
	}
	d.Blocks = append(d.Blocks, b)
}

// madeFrom says what the quantities were counted from.
func (t *Takeoff) madeFrom() string { return "Counted from " + madeFrom(t.From) + "." }
