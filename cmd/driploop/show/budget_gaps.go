package show

import (
	"slices"
	"strings"

	"driploop/rules"
)

// gaps collects what is not assessed, by what it lacks: so that a reader sees each
// missing thing once, with all that waits for it.
type gaps struct {
	lacks []string
	waits map[string][]waiting
}

// waiting is one sort of figure, with the bands in which it is not assessed.
type waiting struct {
	what  string
	bands []string
}

func (g *gaps) add(what, band string, lacks ...[]rules.Lack) {
	for _, l := range slices.Concat(lacks...) {
		g.wait(l.What, what, band)
	}
}

func (g *gaps) wait(lack, what, band string) {
	if g.waits == nil {
		g.waits = map[string][]waiting{}
	}
	all := g.waits[lack]
	if all == nil {
		g.lacks = append(g.lacks, lack)
	}
	i := slices.IndexFunc(all, func(w waiting) bool { return w.what == what })
	switch {
	case i < 0:
		all = append(all, waiting{what, []string{band}})
	case !slices.Contains(all[i].bands, band):
		all[i].bands = append(all[i].bands, band)
	}
	g.waits[lack] = all
}

func (g *gaps) block() []Block {
	if len(g.lacks) == 0 {
		return nil
	}
	out := Block{Head: "Not assessed"}
	lacks := map[string][]string{} // by what waits for all of them
	var order []string
	for _, l := range g.lacks {
		waits := waitingWords(g.waits[l])
		if lacks[waits] == nil {
			order = append(order, waits)
		}
		lacks[waits] = append(lacks[waits], l)
	}
	for _, waits := range order {
		out.Items = append(out.Items, Item{Text: "for lack of " + strings.Join(lacks[waits], "; ") + ": " + waits + "."})
	}
	return []Block{out}
}

// waitingWords names figures, and once the bands of those that have the same.
func waitingWords(all []waiting) string {
	var out []string
	for i, w := range all {
		text := w.what
		if i+1 == len(all) || !slices.Equal(w.bands, all[i+1].bands) {
			text += " in " + strings.Join(w.bands, ", ")
		}
		out = append(out, text)
	}
	return strings.Join(out, ", ")
}

// lackList names what is missing, each thing once.
func lackList(lacks []rules.Lack) string {
	var out []string
	for _, l := range lacks {
		if !slices.Contains(out, l.What) {
			out = append(out, l.What)
		}
	}
	return strings.Join(out, ", ")
}
